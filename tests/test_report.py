"""The PDF report, read back: what it says, that it is safe, complete and reproducible."""

import os
import re
import subprocess
import sys
from dataclasses import replace
from datetime import date
from functools import cache
from pathlib import Path

import made_reduction as made
import matplotlib as mpl
import pypdf
import pytest
from matplotlib.path import Path as Curve
from pypdf.generic import ContentStream
from reportlab.pdfgen.canvas import Canvas

from incline.errors import InclineError
from incline.report import write_pdf
from incline.report.canvas_backend import FigureFlowable
from incline.report.figure_style import add_panel, blank_figure, drawing_style
from incline.report.figures import residual_plot
from incline.report.figures_waterline import waterline_plot
from incline.report.fonts import register_fonts
from incline.report.show import Show
from incline.report.text import clean, markup
from incline.result import Estimate
from incline.units import SYSTEMS

SECTIONS = (
    "Result",
    "Vessel and test",
    "Axes, signs, units and method",
    "Condition as inclined",
    "Test weights and moments",
    "Devices and readings",
    "Heel against moment",
    "From GM to the centre of gravity",
    "From as inclined to lightship",
    "With the excluded readings counted",
    "Remarks",
    "Cautions, and who decides",
    "Signatures",
)


@cache
def _pages(path):
    """Text of each page, every run of white space made one blank."""
    return [" ".join(p.extract_text().split()) for p in pypdf.PdfReader(path).pages]


def _write(folder, reduction, name="report.pdf"):
    path = folder / name
    write_pdf(reduction, path, made.REPORT_DATE, "0.1.0")
    return path


@pytest.fixture(scope="module")
def folder(tmp_path_factory):
    return tmp_path_factory.mktemp("reports")


@pytest.fixture(scope="module")
def metric(folder):
    return _write(folder, made.made_reduction(), "metric.pdf")


@pytest.fixture(scope="module")
def us(folder):
    return _write(folder, made.made_reduction("us"), "us.pdf")


@pytest.fixture(scope="module")
def bare(folder):
    return _write(folder, made.bare_reduction(), "bare.pdf")


@pytest.fixture(scope="module")
def long(folder):
    return _write(folder, made.long_reduction(), "long.pdf")


# --- what it says -------------------------------------------------------------------------------


def test_every_section_stands_in_order_with_its_number(metric):
    text = " ".join(_pages(metric))
    places = [text.find(f"{n} {title}") for n, title in enumerate(SECTIONS, 1)]
    assert -1 not in places
    assert places == sorted(places)


def test_sections_are_in_the_outline(metric):
    titles = [re.sub(r"^\d+\s+", "", o.title) for o in pypdf.PdfReader(metric).outline]
    assert titles == list(SECTIONS)


@pytest.mark.parametrize("kind", ["metric", "us", "bare", "long"])
def test_every_page_is_numbered_out_of_all(kind, request):
    pages = _pages(request.getfixturevalue(kind))
    assert len(pages) > 3
    for number, text in enumerate(pages, 1):
        assert f"page {number} of {len(pages)}" in text


def test_front_page_carries_identity_and_result(metric):
    front, light = _pages(metric)[0], made.made_reduction().outcome.lightship
    for said in ("X-4471", "Nowhere Haven", "2026-03-14", "2026-04-02", "version 0.1.0", "5f" * 32):
        assert said in front
    # u 0.93 t, 0.0124 m, 0.041 m, 0.0033 m: two significant digits, KG never under 3 decimals.
    assert f"{light.displacement.value:.2f} t 0.93 ± 1.90" in front
    assert f"{light.vcg.value:.3f} m 0.012 ± 0.026" in front
    assert f"{light.lcg.value:.3f} m 0.041 ± 0.083" in front
    assert f"{light.tcg.value:.4f} m to starboard 0.0033 ± 0.0067" in front
    assert f"{made.made_reduction().outcome.heel.gm_fluid:.3f} m" in front


def test_calculation_lines_show_the_values_put_in(metric):
    text, o = " ".join(_pages(metric)), made.made_reduction().outcome
    s, rise = o.as_inclined, o.free_surface.correction
    km_gm = f"{s.kmt:.3f} − {o.heel.gm_fluid:.3f} − {rise:.3f}"
    assert f"KG = KM − GM fluid − correction {km_gm} {s.vcg:.3f} m" in text
    assert f"ΣFSM / Δ {o.free_surface.moment:.3f} / {s.displacement:.3f} {rise:.3f} m" in text
    lcg = f"{s.lcb:.3f} + (0.017000) × ({s.vcg:.3f} − {s.kb:.3f}) {s.lcg:.3f} m"
    assert f"LCG = LCB + τ (KG − KB) {lcg}" in text
    assert f"tangent of list {o.heel.gm_fluid:.3f} × (0.003000) {s.tcg:.3f} m" in text
    assert f"{s.volume:.2f} × 1.0218 × (1 + 0.00600) {s.displacement:.3f} t" in text


def test_readings_print_as_recorded_with_tangents_of_five_decimals(metric):
    text = " ".join(_pages(metric))
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


def test_excluded_reading_shows_its_reason_and_both_results(metric):
    text, made_one = " ".join(_pages(metric)), made.made_reduction()
    assert text.count("bob touched the trough <edge>") == 2  # beside the reading and in the list
    assert "crossed: excluded" in text
    ours, theirs = (o.lightship.vcg.value for o in (made_one.outcome, made_one.with_excluded))
    difference = f"{theirs - ours:.4f}".replace("-", "−")
    assert f"lightship KG [m] {ours:.4f} {theirs:.4f} {difference}" in text


def test_ledger_moments_are_mass_times_arm_with_the_sign_of_the_action(metric):
    text = " ".join(_pages(metric))
    assert "Workshop stores −0.750 4.500 1.100 2.400 −3.375 −0.825 −1.800" in text
    assert "Anchor & cable 0.940 22.800 0.300 3.100 21.432 0.282 2.914" in text
    assert (
        "Spare propeller (0.630) 14.000 → 2.500 1.500 → 0.000 1.000 → 1.200 −7.245 −0.945 0.126"
        in text
    )
    assert "the largest remainder is 3.1e−14 t m" in text


def test_amidships_origin_is_explained(metric, bare):
    said = "The trial recorded x from amidships, positive forward; half the length between"
    assert said in " ".join(_pages(metric))
    assert said not in " ".join(_pages(bare))


def test_cautions_name_who_decides_and_when_to_stop(metric):
    text = " ".join(_pages(metric))
    for said in (
        "flag administration", "decide in writing", "does not by itself show that the ship is unsafe",
        "does not show that she is safe", "gas-free", "4 degrees", "loll", "not quoted from a standard",
        "Tested by", "Calculated by", "Witnessed by",
    ):  # fmt: skip
        assert said in text


def test_bare_trial_says_what_is_not_there(bare):
    text = " ".join(_pages(bare))
    assert "LCG of lightship, forward of AP not determined" in text
    assert "LCG is refused: the table is for even keel" in text
    assert "Identity number not recorded" in text
    assert "People at the test: not recorded." in text
    assert "No tanks recorded." in text
    assert "The uncertainty of the lightship values has not been evaluated." in text
    assert "excluded readings counted" not in text
    assert "None" not in text.replace("None recorded.", "").replace(
        "None. Every reading counts.", ""
    )


# --- units and paper ----------------------------------------------------------------------------


def test_metric_prints_on_a4_and_us_on_letter(metric, us):
    for path, size in ((metric, (595.28, 841.89)), (us, (612.0, 792.0))):
        for page in pypdf.PdfReader(path).pages:
            # Points; A4 is 210 mm x 297 mm, rounded in the file to a hundredth of a point.
            assert (float(page.mediabox.width), float(page.mediabox.height)) == pytest.approx(
                size, abs=0.01
            )


def test_us_report_is_in_long_tons_feet_and_inches(us):
    text, o = " ".join(_pages(us)), made.made_reduction("us").outcome
    long_ton, foot = 2240.0 * 0.45359237e-3, 0.3048  # exact by definition
    assert f"{o.lightship.displacement.value / long_ton:.2f} LT" in text
    assert f"{o.lightship.vcg.value / foot:.3f} ft" in text
    assert f"{o.free_surface.moment / long_ton / foot:.2f}" in text
    assert "residual [in]" in text
    assert "lb/ft³" in text
    assert not re.search(
        r"\d (m|mm|t|t m|m³)\b", text.split("12 Cautions")[0].split("11 Remarks")[0]
    )


# --- safety of the file -------------------------------------------------------------------------


def test_hostile_text_prints_as_typed(metric):
    text = " ".join(_pages(metric))
    assert made.NASTY_NAME in text
    assert made.NASTY_NOTE.replace("\x07", "") in text
    for said in ("P2 <mid>", "M. Reader <aft>", "Shore crane sling <left>", "P3 aft θ", "μ = 2σ"):
        assert said in text


def _dictionaries(path):
    reader = pypdf.PdfReader(path)
    for number in range(1, len(reader.xref[0]) + 1):
        found = reader.get_object(number)
        if isinstance(found, dict):
            yield found


@pytest.mark.parametrize("kind", ["metric", "us", "bare", "long"])
def test_file_holds_no_image_link_script_or_attachment(kind, request):
    path = request.getfixturevalue(kind)
    for found in _dictionaries(path):
        assert found.get("/Subtype") not in ("/Image", "/Link", "/FileAttachment")
        assert not {"/URI", "/JS", "/Launch", "/EmbeddedFiles"} & found.keys()
    reader = pypdf.PdfReader(path)
    for page in reader.pages:
        operators = {o for _, o in ContentStream(page.get_contents(), reader).operations}
        assert b"INLINE IMAGE" not in operators


def test_every_font_is_embedded_as_a_subset(metric):
    names = set()
    for page in pypdf.PdfReader(metric).pages:
        for font in page["/Resources"]["/Font"].values():
            font = font.get_object()  # noqa: PLW2901
            assert "/FontFile2" in font["/FontDescriptor"]
            names.add(font["/BaseFont"])
    assert names
    assert all(re.fullmatch(r"/[A-Z]{6}\+DejaVuSans(-Bold)?", n) for n in names)


def test_metadata_names_the_test_and_dates_from_the_report(metric):
    info = pypdf.PdfReader(metric).metadata
    assert info.title == f"Inclining test of {made.NASTY_NAME}"
    assert info.author == info.creator == "incline 0.1.0"
    assert info.subject == "Lightship from the test at Inner basin, Nowhere Haven, 2026-03-14"
    assert info.creation_date.date() == info.modification_date.date() == made.REPORT_DATE


@pytest.mark.parametrize(
    ("typed", "printed"),
    [
        ("A&B <i>", "A&amp;B &lt;i&gt;"),
        ("&alpha;", "&amp;alpha;"),
        ("two\r\nlines", "two<br/>lines"),
        ("bell\x07 null\x00 turn\u202e", "bell null turn"),
        ("e\u0301", "é"),
        ("\u6f22", "[U+6F22]"),  # a glyph that the typeface lacks
    ],
)
def test_text_for_paragraphs(typed, printed):
    assert markup(typed) == printed


def test_clean_is_stable():
    once = clean(made.NASTY_NOTE)
    assert clean(once) == once


# --- reproducible, whole ------------------------------------------------------------------------


def test_same_arguments_same_bytes(metric, folder, monkeypatch):
    monkeypatch.setenv("SOURCE_DATE_EPOCH", "1234567890")
    with mpl.rc_context({"lines.linewidth": 9.0, "text.parse_math": True, "axes.facecolor": "red"}):
        again = _write(folder, made.made_reduction(), "again.pdf")
    assert again.read_bytes() == metric.read_bytes()


def test_another_process_writes_the_same_bytes(metric, folder):
    code = (
        "import sys, pathlib; sys.path.insert(0, sys.argv[2]); import made_reduction as m;"
        "from incline.report import write_pdf;"
        "write_pdf(m.made_reduction(), pathlib.Path(sys.argv[1]), m.REPORT_DATE, '0.1.0')"
    )
    path, here = folder / "other.pdf", Path(__file__).parent
    environment = {
        **os.environ,
        "PYTHONHASHSEED": "77",
        "PYTHONPATH": str(here.parent),
        "TZ": "Asia/Tokyo",
    }
    subprocess.run([sys.executable, "-c", code, path, here], check=True, env=environment)
    assert path.read_bytes() == metric.read_bytes()


def test_another_date_or_version_changes_the_report(metric, folder):
    reduction = made.made_reduction()
    path = folder / "later.pdf"
    write_pdf(reduction, path, date(2026, 4, 3), "0.1.0")
    assert "2026-04-03" in _pages(path)[0]
    assert path.read_bytes() != metric.read_bytes()


def test_replaces_the_file_and_leaves_nothing_beside_it(tmp_path):
    path = tmp_path / "report.pdf"
    path.write_text("old")
    _write(tmp_path, made.bare_reduction())
    assert [p.name for p in tmp_path.iterdir()] == ["report.pdf"]
    assert path.read_bytes().startswith(b"%PDF-")


def test_unwritable_place_is_a_user_error(tmp_path):
    with pytest.raises(InclineError, match="cannot write"):
        _write(tmp_path / "nowhere", made.bare_reduction())


# --- layout -------------------------------------------------------------------------------------


def test_long_ledger_breaks_over_pages_under_its_header(long):
    pages = _pages(long)
    with_items = [t for t in pages if re.search(r"Loose item \d{3} −0\.010", t)]
    assert len(with_items) > 2
    assert all("mass × x [t m]" in t for t in with_items)
    text = " ".join(pages)
    assert all(f"Loose item {n:03d}" in text for n in range(140))


def test_basis_taller_than_a_page_is_printed_whole(long):
    assert len(re.findall(r"\bagain\b", " ".join(_pages(long)))) == 400


@pytest.mark.parametrize("name", ["W" * 120, "Long " * 23 + "Bread"])
def test_long_names_wrap(folder, name):
    base = made.made_reduction()
    trial = replace(
        base.trial,
        vessel=replace(base.trial.vessel, name=name),
        items=(replace(base.trial.items[0], name=name, basis=name),),
        tanks=(replace(base.trial.tanks[0], name=name), *base.trial.tanks[1:]),
    )
    ledger = replace(base.outcome.ledger, lines=made.ledger_lines(trial))
    path = _write(
        folder,
        replace(base, trial=trial, outcome=replace(base.outcome, ledger=ledger)),
        "names.pdf",
    )
    lines = [line for p in pypdf.PdfReader(path).pages for line in p.extract_text().splitlines()]
    bare_text = "".join("".join(lines).split())
    assert "".join(name.split()) in bare_text
    # In the ledger's item column, 28 % of the page, no line holds more than a third of the name.
    assert any(0 < len(line) <= 40 and line.strip() in name for line in lines)


# --- figures ------------------------------------------------------------------------------------


@pytest.mark.parametrize("system", ["metric", "us"])
def test_stated_exaggeration_is_the_scale_of_the_panel(system):
    show = Show(SYSTEMS[system])
    figure = waterline_plot(made.WATERLINE, made.LPP, show, 487.0)
    wide, high = figure.get_size_inches()
    for axes, unit in zip(figure.axes, ("length", "reading"), strict=True):
        box, (left, right), (low, top) = axes.get_position(), axes.get_xlim(), axes.get_ylim()
        along = (right - left) * show.scale("length") / (box.width * wide)
        up = (top - low) * show.scale(unit) / (box.height * high)
        stated = float(re.search(r"heights ([\d.]+) times", axes.get_title(loc="left"))[1])
        assert along / up == pytest.approx(stated, rel=1e-9)  # rounding of doubles only


def test_waterline_panel_shows_baseline_perpendiculars_and_every_mark():
    figure = waterline_plot(made.WATERLINE, made.LPP, Show(SYSTEMS["metric"]), 487.0)
    upper, lower = figure.axes
    assert {t.get_text() for t in upper.texts} == {"AP", "FP", "baseline"}
    low, top = upper.get_ylim()
    assert low <= 0.0
    assert all(low < r.draft < top for r in made.WATERLINE.residuals)
    # List taken out: what is left is the deflection curve plus the residual.
    heights = sorted(
        y for line in lower.lines if line.get_marker() in "<>" for y in line.get_ydata()
    )
    curve = (0.008 * (1.0 - (2.0 * r.x / made.LPP - 1.0) ** 2) for r in made.WATERLINE.residuals)
    expected = sorted(
        1000.0 * (c + r.residual) for c, r in zip(curve, made.WATERLINE.residuals, strict=True)
    )
    assert heights == pytest.approx(expected, abs=1e-9)  # millimetres


def test_residual_plot_keeps_the_scale_of_the_readings_that_count():
    heel = made.made_reduction().outcome.heel
    figure = residual_plot(heel, Show(SYSTEMS["metric"]), 487.0)
    largest = max(abs(p.residual) for p in heel.points if not p.excluded)
    for axes in figure.axes:
        low, top = axes.get_ylim()
        assert -low == top
        assert 1.0 < top / (1000.0 * largest) < 1.5
    out = next(p for p in heel.points if p.excluded)
    assert f"{1000.0 * out.residual:+.2f}" in {t.get_text() for t in figure.axes[1].texts}


def test_plots_are_paths_and_text_of_the_page(metric):
    text = " ".join(_pages(metric))
    for said in (
        "All devices: tangent less the device's zero offset", "Residuals in the order of the shifts",
        "moment to starboard [t m]", "common line", "baseline",
    ):  # fmt: skip
        assert said in text


def test_renderer_draws_curves_dashes_and_clips(tmp_path):
    register_fonts()
    with drawing_style():
        figure = blank_figure(200.0, 100.0)
        axes = add_panel(figure, 20.0, 20.0, 160.0, 70.0)
        axes.plot([0.0, 1.0], [0.0, 2.0], linestyle=(0, (3.0, 2.0)), linewidth=1.5, marker="o")
        axes.set_ylim(0.0, 1.0)
        axes.set_ylabel("σ $1_a$")
    path = tmp_path / "one.pdf"
    canvas = Canvas(str(path), pageCompression=0)
    FigureFlowable(figure).drawOn(canvas, 50.0, 50.0)
    canvas.save()
    page = pypdf.PdfReader(path).pages[0]
    operations = ContentStream(page.get_contents(), None).operations
    operators = {o for _, o in operations}
    assert {b"c", b"l", b"W", b"d"} <= operators
    # Dash lengths are in line widths: 3 and 2 times 1.5 points.
    assert [4.5, 3.0] in [[float(v) for v in a[0]] for a, o in operations if o == b"d"]
    assert "σ $1_a$" in page.extract_text()  # no mathematical markup


def test_quadratic_curves_keep_their_shape(tmp_path):
    """A quadratic from (0, 0) over (1, 2) to (2, 0) passes (1, 1) halfway."""
    register_fonts()
    with drawing_style():
        figure = blank_figure(100.0, 100.0)
        curve = Curve(
            [(0.0, 0.0), (1.0, 2.0), (2.0, 0.0)], [Curve.MOVETO, Curve.CURVE3, Curve.CURVE3]
        )
        figure.add_artist(
            mpl.patches.PathPatch(curve, transform=mpl.transforms.IdentityTransform(), fill=False)
        )
    path = tmp_path / "curve.pdf"
    canvas = Canvas(str(path), pageCompression=0)
    FigureFlowable(figure).drawOn(canvas, 0.0, 0.0)
    canvas.save()
    operations = ContentStream(pypdf.PdfReader(path).pages[0].get_contents(), None).operations
    x1, y1, x2, y2, x3, y3 = next([float(v) for v in a] for a, o in operations if o == b"c")
    # The file rounds to six decimals of a point.
    assert (3.0 * x1 + 3.0 * x2 + x3) / 8.0 == pytest.approx(1.0, abs=1e-5)
    assert (3.0 * y1 + 3.0 * y2 + y3) / 8.0 == pytest.approx(1.0, abs=1e-5)


# --- numbers ------------------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("estimate", "printed"),
    [
        (Estimate(value=2.73456, u=0.0124, U=0.026), ("2.735", "0.012", "0.026")),
        (Estimate(value=2.73456, u=0.00124, U=0.0026), ("2.7346", "0.0012", "0.0026")),
        (Estimate(value=2.73456, u=0.000031, U=0.00006), ("2.7346", "< 0.0001", "0.0001")),
        (Estimate(value=2.73456, u=0.4, U=0.8), ("2.735", "0.400", "0.800")),
        (Estimate(value=2.73456), ("2.735", "–", "–")),
        (Estimate(value=-0.0001), ("0.000", "–", "–")),
        (Estimate(value=None), ("not determined", "–", "–")),
    ],
)
def test_estimate_prints_to_the_decimals_of_its_uncertainty(estimate, printed):
    assert Show(SYSTEMS["metric"]).estimate(estimate, "length", 3) == printed


def test_readings_print_the_decimals_that_were_written():
    show, reading = Show(SYSTEMS["metric"]), made.made_reduction().trial.readings[0]
    fine = replace(reading, values=(0.1234, 0.05675))
    assert show.raw_decimals([reading])["length"] == 1
    assert show.raw_decimals([reading, fine])["length"] == 2
    # Inches: sixteenths as written; millimetres shown in inches would never end.
    feet, sixteenth = Show(SYSTEMS["us"]), replace(reading, values=(20.5625 * 0.0254,))
    assert feet.raw_decimals([sixteenth])["length"] == 4
    assert feet.raw_decimals([fine])["length"] == 3
