"""The PDF report, read back: what it says, in which units, on which pages."""

import re
from dataclasses import replace
from io import BytesIO

import made_reduction as made
import pypdf
import pytest
from read_report import APPENDICES, KINDS, SECTIONS, body, pages, printed, reader, section


def numbered():
    """Headings as printed, in order."""
    return [
        *(f"{n} {title}" for n, title in enumerate(SECTIONS, 1)),
        *(f"Appendix {letter} {title}" for letter, title in zip("AB", APPENDICES, strict=True)),
    ]


def test_every_section_stands_in_order_with_its_number():
    text = body("metric")
    places = [text.find(f"{title} ") for title in numbered()]
    assert -1 not in places
    assert places == sorted(places)


def test_sections_are_in_the_outline_with_their_parts_below():
    found = [" ".join(o.title.split()) for o in reader("metric").outline if not isinstance(o, list)]
    assert found == numbered()
    parts = [
        o.title for below in reader("metric").outline if isinstance(below, list) for o in below
    ]
    assert {"Budget of KG", "Waterline", "Drawings and documents used", "Acceptance"} <= set(parts)


@pytest.mark.parametrize("kind", KINDS)
def test_every_page_is_numbered_out_of_all(kind):
    found = pages(kind)
    assert len(found) > 3
    for number, text in enumerate(found, 1):
        assert f"page {number} of {len(found)}" in text


def test_front_page_carries_identity_and_result():
    front, light = pages("metric")[0], made.made_reduction().outcome.lightship
    for said in ("X-4471", "Nowhere Haven", "2026-03-14", "2026-04-02", "version 0.1.0", "5f" * 32):
        assert said in front
    # u 0.62 t, 0.0065 m, 0.012 m, 0.00045 m: two significant digits, at most four decimals.
    for found, unit, decimals in (
        (light.displacement, "t", 2), (light.vcg, "m", 4), (light.lcg, "m", 3),
        (light.tcg, "m (starboard)", 4), (made.made_reduction().outcome.budgets[4].estimate, "m", 4),
    ):  # fmt: skip
        value, u, wide = (f"{v:.{decimals}f}" for v in (found.value, found.u, found.U))
        dof = "∞" if found.dof is None else f"{found.dof:.1f}"
        assert f"{value} {unit} {u} ± {wide} {found.k:.2f} {dof}" in front


def test_calculation_lines_show_the_values_put_in():
    text, o = " ".join(pages("metric")), made.made_reduction().outcome
    s, rise = o.as_inclined, o.free_surface.correction
    km_gm = f"{s.kmt:.3f} − {o.heel.gm_fluid:.3f} − {rise:.3f}"
    assert f"KG = KM − GM fluid − correction {km_gm} {s.vcg:.3f} m" in text
    assert f"ΣFSM / Δ {o.free_surface.moment:.3f} / {s.displacement:.3f} {rise:.3f} m" in text
    lcg = f"{s.lcb:.3f} + (0.017000) × ({s.vcg:.3f} − {s.kb:.3f}) {s.lcg:.3f} m"
    assert f"LCG = LCB + τ (KG − KB) {lcg}" in text
    assert f"tangent of list {o.heel.gm_fluid:.4f} × (0.003000) {s.tcg:.4f} m" in text
    assert f"{s.volume:.3f} × 1.0218 × (1 + 0.00600) {s.displacement:.3f} t" in text


def test_readings_print_as_recorded_with_tangents_of_five_decimals():
    text = " ".join(pages("metric"))
    point = next(
        p
        for p in made.made_reduction().outcome.heel.points
        if (p.shift, p.device) == (1, "P1 fore")
    )
    values = next(
        r.values
        for r in made.made_reduction().trial.readings
        if (r.shift, r.device) == (1, "P1 fore")
    )
    assert ", ".join(f"{1000.0 * v:.1f}" for v in values) in text
    assert f"{1000.0 * point.reading.value:.2f} 0.40 mm {point.tangent:.5f} decaying swing" in text
    assert "WB-1107, 2026-01-20" in text


def test_excluded_reading_shows_its_reason_and_both_results():
    text, made_one = " ".join(pages("metric")), made.made_reduction()
    assert text.count("bob touched the trough <edge>") == 3  # beside the reading, in two lists
    assert "crossed: excluded" in text
    ours, theirs = (o.lightship.vcg.value for o in (made_one.outcome, made_one.with_excluded))
    difference = f"{theirs - ours:.4f}".replace("-", "−")
    assert f"lightship KG [m] {ours:.4f} {theirs:.4f} {difference}" in text


def test_ledger_moments_are_mass_times_arm_with_the_sign_of_the_action():
    text = " ".join(pages("metric"))
    assert "Workshop stores −0.750 4.500 1.100 2.400 −3.375 −0.825 −1.800" in text
    assert "Anchor & cable 0.940 22.800 0.300 3.100 21.432 0.282 2.914" in text
    assert (
        "Spare propeller (0.630) 14.000 → 2.500 1.500 → 0.000 1.000 → 1.200 −7.245 −0.945 0.126"
        in text
    )
    assert "the largest remainder is 3.1e−14 t m" in text


def test_amidships_origin_is_explained():
    said = "The trial recorded x from amidships, positive forward; half the length between"
    assert said in " ".join(pages("metric"))
    assert said not in " ".join(pages("bare"))


def test_cautions_name_who_decides_and_when_to_stop():
    text = " ".join(pages("metric"))
    for said in (
        "flag administration", "decide in writing", "does not by itself show that the ship is unsafe",
        "does not show that she is safe", "gas-free", "4 degrees", "loll", "not quoted from a standard",
        "Tested by", "Calculated by", "Witnessed by",
    ):  # fmt: skip
        assert said in text


def test_bare_trial_says_what_is_not_there():
    text = " ".join(pages("bare"))
    assert "LCG of lightship, forward of AP not determined" in text
    assert "LCG is refused: the table is for even keel" in text
    assert "Identity number not recorded" in text
    assert "People at the test: not recorded." in text
    assert "No tanks recorded." in text
    assert "The readings leave no scatter to judge the slope by" in text
    assert "This trial: one device: an error of its length cannot show." in text
    assert "LCG not determined: see the remarks." in text
    assert "No Monte Carlo run was made" in text
    assert "Limit of KG" not in text
    assert "excluded readings counted" not in text
    for said in ("None recorded.", "None. Every reading counts.", "None: nothing stands out"):
        text = text.replace(said, "")
    assert "None" not in text


def test_metric_prints_on_a4_and_us_on_letter():
    for kind, size in (("metric", (595.28, 841.89)), ("us", (612.0, 792.0))):
        for page in reader(kind).pages:
            # Points; A4 is 210 mm x 297 mm, rounded in the file to a hundredth of a point.
            assert (float(page.mediabox.width), float(page.mediabox.height)) == pytest.approx(
                size, abs=0.01
            )


def test_us_report_is_in_long_tons_feet_and_inches():
    text, o = " ".join(pages("us")), made.made_reduction("us").outcome
    long_ton, foot = 2240.0 * 0.45359237e-3, 0.3048  # exact by definition
    assert f"{o.lightship.displacement.value / long_ton:.2f} LT" in text
    assert f"{o.lightship.vcg.value / foot:.3f} ft" in text
    assert f"{o.free_surface.moment / long_ton / foot:.2f}" in text
    assert "residual [in]" in text
    assert "lb/ft³" in text
    for title in (*SECTIONS[8:12], *SECTIONS[14:17]):
        assert not re.search(r"\d (m|mm|t|t m|m³)\b", section(body("us"), title))


def test_long_ledger_breaks_over_pages_under_its_header():
    found = pages("long")
    with_items = [t for t in found if re.search(r"Loose item \d{3} −0\.010", t)]
    assert len(with_items) > 2
    assert all("mass × x [t m]" in t for t in with_items)
    text = " ".join(found)
    assert all(f"Loose item {n:03d}" in text for n in range(140))


def test_basis_taller_than_a_page_is_printed_whole():
    assert len(re.findall(r"\bagain\b", " ".join(pages("long")))) == 400


@pytest.mark.parametrize("name", ["W" * 120, "Long " * 23 + "Bread"])
def test_long_names_wrap(name):
    base = made.made_reduction()
    trial = replace(
        base.trial,
        vessel=replace(base.trial.vessel, name=name),
        items=(replace(base.trial.items[0], name=name, basis=name),),
        tanks=(replace(base.trial.tanks[0], name=name), *base.trial.tanks[1:]),
    )
    ledger = replace(base.outcome.ledger, lines=made.ledger_lines(trial))
    data = printed(
        replace(base, trial=trial, outcome=replace(base.outcome, ledger=ledger)),
    )
    lines = [
        line for p in pypdf.PdfReader(BytesIO(data)).pages for line in p.extract_text().splitlines()
    ]
    bare_text = "".join("".join(lines).split())
    assert "".join(name.split()) in bare_text
    # In the ledger's item column, 28 % of the page, no line holds more than a third of the name.
    assert any(10 <= len(line) <= 40 and line.strip() in name for line in lines)
