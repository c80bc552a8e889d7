"""Plots and numbers of the report."""

import re
from dataclasses import replace

import made_reduction as made
import matplotlib as mpl
import pypdf
import pytest
from made_trial import LPP, WATERLINE
from matplotlib.path import Path as Curve
from pypdf.generic import ContentStream
from read_report import pages
from reportlab.pdfgen.canvas import Canvas

from incline.errors import Where
from incline.record import Body, OffsetPoint, Offsets, Station
from incline.report.canvas_backend import FigureFlowable
from incline.report.figure_style import add_panel, blank_figure, drawing_style
from incline.report.figures_hull import section_plot
from incline.report.figures_residuals import residual_plot
from incline.report.figures_waterline import waterline_plot
from incline.report.fonts import register_fonts
from incline.report.show import Show
from incline.result import Estimate
from incline.units import SYSTEMS


@pytest.mark.parametrize("system", ["metric", "us"])
def test_stated_exaggeration_is_the_scale_of_the_panel(system):
    show = Show(SYSTEMS[system])
    figure = waterline_plot(WATERLINE, LPP, show, 487.0).figure()
    wide, high = figure.get_size_inches()
    for axes, unit in zip(figure.axes, ("length", "reading"), strict=True):
        box, (left, right), (low, top) = axes.get_position(), axes.get_xlim(), axes.get_ylim()
        along = (right - left) * show.scale("length") / (box.width * wide)
        up = (top - low) * show.scale(unit) / (box.height * high)
        stated = float(re.search(r"heights ([\d.]+) times", axes.get_title(loc="left"))[1])
        assert along / up == pytest.approx(stated, rel=1e-9)  # rounding of doubles only


def test_waterline_panel_shows_baseline_perpendiculars_and_every_mark():
    figure = waterline_plot(WATERLINE, LPP, Show(SYSTEMS["metric"]), 487.0).figure()
    upper, lower = figure.axes
    assert {t.get_text() for t in upper.texts} == {"AP", "FP", "baseline"}
    low, top = upper.get_ylim()
    assert low <= 0.0
    assert all(low < r.draft < top for r in WATERLINE.residuals)
    # List taken out: what is left is the deflection curve plus the residual.
    heights = sorted(
        y for line in lower.lines if line.get_marker() in "<>" for y in line.get_ydata()
    )
    curve = (0.008 * (1.0 - (2.0 * r.x / LPP - 1.0) ** 2) for r in WATERLINE.residuals)
    expected = sorted(
        1000.0 * (c + r.residual) for c, r in zip(curve, WATERLINE.residuals, strict=True)
    )
    assert heights == pytest.approx(expected, abs=1e-9)  # millimetres


def test_residual_plot_keeps_the_scale_of_the_readings_that_count():
    heel = made.made_reduction().outcome.heel
    figure = residual_plot(heel, Show(SYSTEMS["metric"]), 487.0, frozenset()).figure()
    largest = max(abs(p.residual) for p in heel.points if not p.excluded)
    for axes in figure.axes:
        low, top = axes.get_ylim()
        assert -low == top
        assert 1.0 < top / (1000.0 * largest) < 1.5
    out = next(p for p in heel.points if p.excluded)
    assert f"{1000.0 * out.residual:+.2f}" in {t.get_text() for t in figure.axes[1].texts}


def test_plots_are_paths_and_text_of_the_page():
    text = " ".join(pages("metric"))
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


def test_mirrored_demihull_shows_both_sides_of_both_hulls():
    """A demihull 0.5 m wide on each side of y = 3 m reaches from 2.5 m to 3.5 m, and mirrored."""
    points = (OffsetPoint(y=0.0, z=0.0), OffsetPoint(y=0.5, z=2.0))
    where = Where(file="offsets.csv")
    some = tuple(
        Station(name=str(x), x=x, starboard=points, port=points, where=where) for x in (0.0, 9.0)
    )
    bodies = (Body(name="demihull", y=3.0, mirrored=True, stations=some),)
    ship = made.made_reduction().outcome.as_inclined
    figure = section_plot(
        Offsets(bodies=bodies, allowance=None), ship, Show(SYSTEMS["metric"]), 487.0
    )
    drawn = [line.get_xydata() for line in figure.axes[0].lines if len(line.get_xydata()) == 3]
    ends = sorted({(float(d[:, 0].min()), float(d[:, 0].max())) for d in drawn})
    assert ends == [(-3.5, -2.5), (2.5, 3.5)]
