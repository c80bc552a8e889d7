"""The report as a document: contents, issues, drafts, units side by side, what is not recorded."""

import datetime
import math
import re
from dataclasses import replace
from io import BytesIO
from pathlib import Path

import made_reduction as made
import pypdf
import pytest
from large_trial import DEVICES, ITEMS, NAMES, TANKS, VESSEL, long_name, write_large
from made_trial import AT, REPORT_DATE
from placed_text import lines_of, overlaps
from read_report import (
    APPENDICES,
    KINDS,
    SECTIONS,
    body,
    pages,
    reader,
    report,
    section,
    texts,
    without_contents,
)

from incline import read_trial, reduce
from incline.papers import (
    Anomaly,
    Deviation,
    Document,
    Known,
    OtherLightship,
    Papers,
    Predicted,
    Revision,
    Signature,
)
from incline.record import Condition, Environment
from incline.report import Options, write_pdf

FOOT, LONG_TON = 0.3048, 2240.0 * 0.45359237e-3  # exact by definition


def written(reduction, folder, options=None, tables=None):
    path = Path(folder) / "report.pdf"
    write_pdf(reduction, path, REPORT_DATE, "0.1.0", options, tables)
    return path.read_bytes()


EARLIER = OtherLightship(
    kind="earlier", name="Survey of 2021", displacement=Known(180.0, 0.5), vcg=Known(2.70),
    lcg=Known(11.5), tcg=Known(None), lpp=24.0, situation="passenger-survey", where=AT,
)  # fmt: skip
ISSUED = Papers(
    status="issued", number="2", author="N. Bureau & Søn", submitted_to="Authority of Nowhere",
    revisions=(
        Revision(number="1", date=datetime.date(2026, 3, 20), description="first issue", by="N. B."),
        Revision(number="2", date=datetime.date(2026, 4, 1), description="tank 3 sounded again"),
    ),
    documents=(
        Document(title="Lines <plan>", number="D-7", revision="C", date="May 2019", use="hydrostatics"),
        Document(title="Tank plan"),
    ),
    deviations=(Deviation(what="one pendulum short", reason="no room", allowed_by="letter 12 of the authority"),),
    anomalies=(Anomaly(what="line taut at shift 3", explanation="slacked, and the shift repeated"),),
    signatures=(Signature(part="witnessed", name="Q. Witness", organisation="Authority of Nowhere"),),
    predicted=Predicted(gm=1.02, heel=math.radians(2.0), freeboard=1.1, by="the yard"),
    others=(EARLIER,),
)  # fmt: skip


@pytest.fixture(scope="module")
def issued(tmp_path_factory):
    """The made trial issued, with everything on record that the others lack."""
    base = made.made_reduction()
    trial = replace(
        base.trial,
        papers=ISSUED,
        condition=Condition(state="complete but for the mast", decks="dry", bilges="dry", drafts="read by two"),
        environment=Environment(shelter="inner basin", lines="slack", wind_speed=2.5),
        settings=replace(base.trial.settings, rule_edition="2008, as amended"),
        shifts=tuple(replace(s, weather=f"calm {s.number}", tide="ebb") for s in base.trial.shifts),
        devices=tuple(replace(d, damping="oil bath", read_by="M. R.") for d in base.trial.devices),
        tanks=(replace(base.trial.tanks[0], sounding="0.61 m at the pipe"), *base.trial.tanks[1:]),
        occasion=replace(base.trial.occasion, tide="high at 10:12", witness="Q. Witness", started="08:40"),
    )  # fmt: skip
    return written(replace(base, trial=trial), tmp_path_factory.mktemp("issued"))


@pytest.fixture(scope="module")
def issued_body(issued):
    return without_contents(" ".join(texts(issued)))


# --- the shell ----------------------------------------------------------------------------------


def test_contents_name_the_page_on_which_each_section_begins():
    """Against the outline's destinations, which the file itself resolves."""
    opened = reader("long")
    at = {
        " ".join(o.title.split()): opened.get_destination_page_number(o) + 1
        for o in opened.outline
        if not isinstance(o, list)
    }
    contents = pages("long")[1]
    for title, page in at.items():
        assert f"{title} {page}" in contents
    assert len(at) == len(SECTIONS) - 1 + len(APPENDICES)  # nothing excluded in this one


def test_lines_of_the_contents_lead_to_their_sections():
    page = reader("metric").pages[1]
    links = [a.get_object() for a in page["/Annots"]]
    assert len(links) == len(SECTIONS) + len(APPENDICES)
    assert all("/Dest" in link for link in links)


def test_every_page_names_vessel_date_and_issue(issued):
    for text in pages("metric"):
        assert "inclining test of 2026-03-14 · DRAFT" in text
        assert made.made_reduction().trial.vessel.name in text
    for text in texts(issued):
        assert "inclining test of 2026-03-14 · issue 2" in text


def test_a_draft_is_marked_on_every_page_in_outline_and_an_issue_on_none(issued):
    for number, page in enumerate(reader("metric").pages):
        assert "DRAFT inclining" not in pages("metric")[number]
        data = page.get_contents().get_data()
        mark = data.index(b"1 Tr")  # outlined text; nothing else in a report is
        assert mark < data.index(b" Do")  # drawn before the footer, so before everything
        assert pages("metric")[number].count("DRAFT") >= 2
    for text, page in zip(texts(issued), pypdf.PdfReader(BytesIO(issued)).pages, strict=True):
        assert "DRAFT" not in text
        assert b"1 Tr" not in page.get_contents().get_data()


def test_an_issue_has_its_history_and_says_what_it_is(issued):
    front, contents = texts(issued)[:2]
    assert "Issue 2 of 2026-04-01: tank 3 sounded again" in front
    assert "Author N. Bureau & Søn" in front
    assert "Submitted to Authority of Nowhere" in front
    assert "1 2026-03-20 first issue N. B." in contents
    assert "2 2026-04-01 tank 3 sounded again not recorded" in contents
    assert "Draft: not issued, and not to be relied on" in pages("metric")[0]


def test_metadata_name_author_and_state(issued):
    info = pypdf.PdfReader(BytesIO(issued)).metadata
    assert info.author == "N. Bureau & Søn"
    assert re.match("inclining test, lightship, issued, 5f5f", info.keywords)
    assert reader("metric").metadata.keywords.startswith("inclining test, lightship, draft, ")
    assert pypdf.PdfReader(BytesIO(issued)).trailer["/Root"]["/Lang"] == "en"


# --- what a report must contain -----------------------------------------------------------------

POINTS = {
    # Section, and what must be said in it; the points are those compiled in the requirements.
    "Vessel and drawings": (
        "Identity number X-4471", "Length, AP to FP 24.000 m", "Beam 7.200 m", "Depth 3.400 m",
        "Flag not recorded", "Lines <plan> D-7 C May 2019 hydrostatics", "Tank plan not recorded",
    ),
    "The test": (
        "Place Inner basin, Nowhere Haven", "Begun, ended 08:40, not recorded", "Witness Q. Witness",
        "Berth and mooring alongside, slack lines", "Depth of water 5.500 m", "Tide high at 10:12",
        "Shelter of the berth inner basin", "Wind speed 2.5 m/s", "3 09:45 calm 3 ebb",
        "Completeness, work aboard complete but for the mast", "Bilges and voids dry",
        "As the drafts were read read by two", "I. Test-Leader conducts the test", "not aboard",
        "Aboard during the shifts: 2, together 0.170 t",
    ),
    "Rules and criteria": (
        "Rule set IMO", "Edition 2008, as amended", "Submitted to Authority of Nowhere",
        "one pendulum short no room letter 12 of the authority", "2 pass, 1 fail",
    ),
    "Comparison with predicted and other values": (
        "GM 1.020 m", "Heel at the largest moment 2.00°", "Least freeboard then 1.100 m",
        "Worked out by the yard", "Earlier lightship of this ship: Survey of 2021",
        "Limits of the situation passenger-survey", "BEYOND", "SOLAS II-1/5.5",
    ),
    "Axes, signs, units and method": (
        "forward from the after perpendicular", "positive to starboard", "densities in t/m³",
    ),
    "Condition as inclined": (
        "port", "starboard", "residual [mm]", "Profile of the measured waterline", "Deflection 8.0 mm (sag)",
        "Trim, + by the stern", "List from the drafts", "starboard, amidships 1.00",
    ),
    "Test weights and moments": ("WB-1107, 2026-01-20", "→ 2.900", "transverse, to starboard"),
    "Devices and readings": (
        "oil bath M. R.", "tape T-44", "fore hold", "2.412", "EXCLUDED: bob touched",
    ),
    "Heel against moment": (
        "Tangent against moment, device by device", "Residuals", "b, common slope", "GM fluid = 1 / (b Δ)",
    ),
    "Anomalies and explanations": (
        "line, fender or ground holding (the ship)", "Reading left out, shift 6, device P3 aft θ",
        "Criterion not met: Drafts on one waterline", "line taut at shift 3 slacked, and the shift repeated",
    ),
    "From GM to the centre of gravity": (
        "Fuel, port gas oil slack 0.8450 0.600", "Sounding: 0.61 m at the pipe", "FSM [t m]",
    ),
    "From as inclined to lightship": (
        "Deduct: aboard at the test", "Add: part of lightship", "Relocate: aboard", "weighed",
        "% of lightship", "Lightship",
    ),
    "Uncertainty": ("19 times out of 20", "Most of it comes from:", "share of the variance of KG"),
    "Cautions, and who decides": (
        "flag administration", "does not replace that judgement", "Stop the test when",
    ),
    "Signatures and acceptance": (
        "Tested by", "Witnessed by Q. Witness Authority of Nowhere", "Accepted by",
        "This report is submitted to Authority of Nowhere.",
    ),
    "Uncertainty budgets": ("Budget of KG", "sensitivity"),
    "Monte Carlo run": ("drawn at random 40 000 times",),
}  # fmt: skip


@pytest.mark.parametrize("title", POINTS)
def test_every_point_has_its_place(title, issued_body):
    text = section(issued_body, title)
    assert [said for said in POINTS[title] if said not in text] == []


def test_comparison_is_that_of_the_figures(issued_body):
    text = section(issued_body, "Comparison with predicted and other values")
    light = made.made_reduction().outcome.lightship
    found, gap = light.displacement.value, light.displacement.value - 180.0
    percent = 100.0 * gap / 180.0
    assert f"displacement [t] 180.00 {found:.2f} {gap:.2f} {percent:.2f}" in text
    # SOLAS II-1/5.5: 2 % of displacement (shared/requirements, read).
    assert f"displacement {percent:.2f} 2.00 BEYOND re-incline" in text
    assert "TCG cannot be compared: the old lightship does not state it." in text


def test_what_is_not_recorded_is_said_in_place_and_listed_with_its_file():
    place, listed = body("bare"), section(body("bare"), "Not recorded by the trial")
    for label, where in (
        ("Identity number", "trial.toml, [vessel] number"),
        ("Tide", "trial.toml, [test] tide"),
        ("Mooring lines", "trial.toml, [environment] lines"),
        ("Bilges and voids", "trial.toml, [condition] bilges"),
        ("Heel at the largest moment", "trial.toml, [predicted] heel"),
        ("Edition", "trial.toml, [rules] edition"),
        ("Submitted to", "trial.toml, [report] submitted_to"),
    ):
        assert f"{label} {where}" in listed
        assert f"{label} not recorded" in place.replace(listed, "")
    for said in (
        "Drawings and documents used trial.toml, [[documents]]",
        "Earlier, predicted or sister's lightship trial.toml, [[compare]]",
        "People at the test trial.toml, [[people]]",
        "Damping: P1 fore, P2 <mid>, P3 aft θ trial.toml, [[devices]] damping",
        "Weather of shift: 0, 1, 2, 3, 4, 5 and 3 more shifts.csv, column weather",
        "Who signs: tested, calculated, checked, witnessed, accepted trial.toml, [[signatures]]",
    ):
        assert said in listed
    assert "Date trial.toml" not in listed


def test_what_is_recorded_is_not_listed(issued_body):
    listed = section(issued_body, "Not recorded by the trial")
    for said in (
        "[[compare]]",
        "column tide",
        "[[devices]] damping",
        "column sounding",
        "[report]",
    ):
        assert said not in listed
    assert "Number and revision: Tank plan trial.toml, [[documents]] number, revision" in listed


def test_that_there_was_no_deviation_can_be_said(tmp_path):
    base = made.made_reduction()
    papers = Papers(deviations=(Deviation(what="None", reason=""),))
    data = written(replace(base, trial=replace(base.trial, papers=papers)), tmp_path)
    text = without_contents(" ".join(texts(data)))
    assert "Deviations: none, as the trial says." in section(text, "Rules and criteria")
    assert "deviations" not in section(text, "Not recorded by the trial")


def test_assumptions_stand_before_the_calculation():
    text = body("metric")
    said = "The marks at x = 12 m are taken at half the beam."
    assert said in section(text, "What was assumed")
    assert text.index(said) < text.index(" Condition as inclined ")
    assert "Assumptions and remarks that bear on the result: 2, in section 2." in pages("metric")[0]


# --- units and paper ----------------------------------------------------------------------------


def test_both_units_stand_side_by_side_in_the_tables_of_results(tmp_path):
    base = made.made_reduction()
    text = without_contents(" ".join(texts(written(base, tmp_path, Options(beside=True)))))
    light, state = base.outcome.lightship, base.outcome.as_inclined
    weight, kg = light.displacement.value, light.vcg.value
    front = section(text, "Result")
    assert f"{weight:.2f} t" in front
    assert f"{weight / LONG_TON:.2f} LT" in front
    assert f"{kg / FOOT:.3f} ft" in front
    total = section(text, "From as inclined to lightship").split(" Lightship ")[1]
    assert f"{weight:.3f} {weight / LONG_TON:.3f}" in total
    assert f"{kg:.3f} {kg / FOOT:.3f}" in total
    inclined = section(text, "Condition as inclined")
    assert f"{state.displacement:.3f} t {state.displacement / LONG_TON:.3f} LT" in inclined
    assert (
        f"Draft at AP {state.waterline.draft_ap:.3f} m {state.waterline.draft_ap / FOOT:.3f} ft"
        in inclined
    )


@pytest.mark.parametrize(("paper", "size"), [("A4", (595.28, 841.89)), ("Letter", (612.0, 792.0))])
def test_paper_may_be_chosen_whatever_the_units(paper, size, tmp_path):
    units = "us" if paper == "A4" else "metric"
    data = written(made.made_reduction(units), tmp_path, Options(paper=paper))
    for page in pypdf.PdfReader(BytesIO(data)).pages:
        # Points, rounded in the file to a hundredth.
        box = (float(page.mediabox.width), float(page.mediabox.height))
        assert box == pytest.approx(size, abs=0.01)


# --- much of it, and long names -----------------------------------------------------------------


@pytest.fixture(scope="module")
def large(tmp_path_factory):
    folder = tmp_path_factory.mktemp("large")
    reduction = reduce(read_trial(write_large(folder / "trial")))
    data = written(reduction, folder, Options(beside=True))
    assert written(reduction, folder, Options(beside=True)) == data
    return data


@pytest.fixture(scope="module")
def large_texts(large):
    return texts(large)


def test_nothing_of_a_large_trial_is_lost(large_texts):
    text = "".join("".join(t.split()) for t in large_texts)
    for name in (
        VESSEL,
        NAMES[-1],
        *(long_name(f"{k} {n:02d}") for k, n in (("off", 29), ("on", 44), ("moved", 59))),
    ):
        assert len(name) == 120
        assert "".join(name.split()) in text
    assert len([n for n in range(TANKS) if f"Tank{n:02d}Δ" in text]) == TANKS
    assert len([n for n in range(ITEMS) if re.search(rf"(?:off|on|moved){n:02d}Δ", text)]) == ITEMS
    assert len(NAMES) == DEVICES
    assert "[U+" not in text


def test_headers_of_a_large_trial_are_repeated_on_every_page_of_a_table(large_texts):
    for cell, head in (
        (r"(?:off|on|moved) \d\d Δ", "mass × x [t m; LT ft]"),
        (r"Tank \d\d Δ.*μαζούτ", "FSM [t m]"),
    ):
        found = [t for t in large_texts[8:] if re.search(cell, t)]
        assert len(found) > 2
        assert [t for t in found if head not in t] == []


def placed(data):
    """Each page's number, lines of text and width."""
    for number, page in enumerate(pypdf.PdfReader(BytesIO(data)).pages, 1):
        yield number, lines_of(page), float(page.mediabox.width)


@pytest.mark.parametrize("kind", [*KINDS, "large"])
def test_no_words_lie_on_others_or_beyond_the_margin(kind, request):
    data = request.getfixturevalue("large") if kind == "large" else report(kind)
    # The right margin is 15 mm. A full line is set with its blanks up to a twentieth narrower than
    # measured here: some 25 blanks of 2.6 points.
    spare = 3.5
    for number, lines, width in placed(data):
        assert lines
        assert (number, list(overlaps(lines))) == (number, [])
        right = width - 15.0 / 25.4 * 72.0 + spare
        assert [line for line in lines if line.right > right or line.x < 50.0] == []


def test_words_on_one_another_are_seen(tmp_path):
    """The measure itself: two lines drawn in one place, and one apart."""
    from reportlab.pdfgen.canvas import Canvas

    from incline.report.fonts import REGULAR, register_fonts

    register_fonts()
    canvas = Canvas(str(tmp_path / "a.pdf"), initialFontName=REGULAR)
    canvas.setFont(REGULAR, 8)
    for x, y, text in ((100, 500, "device P1"), (110, 502, "moment"), (100, 515, "apart")):
        canvas.drawString(x, y, text)
    canvas.save()
    lines = lines_of(pypdf.PdfReader(tmp_path / "a.pdf").pages[0])
    assert len(lines) == 3
    assert [(a.text, b.text) for a, b in overlaps(lines)] == [("device P1", "moment")]


def test_a_large_report_is_below_a_megabyte(large):
    assert len(large) < 1_000_000


# --- headings -----------------------------------------------------------------------------------


@pytest.mark.parametrize("kind", KINDS)
def test_no_heading_is_the_last_line_of_a_page(kind):
    opened = reader(kind)
    titles = set()
    for o in opened.outline:
        titles |= {" ".join(e.title.split()) for e in (o if isinstance(o, list) else [o])}
    for page in pages(kind):
        assert not any(page.endswith(title) for title in titles)
