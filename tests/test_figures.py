"""Every figure: nothing overlaps or runs off, nothing is told by colour alone, no raster."""

import datetime
import itertools
from dataclasses import replace
from functools import cache
from io import BytesIO
from pathlib import Path

import made_reduction as made
import pypdf
import pytest
from matplotlib.lines import Line2D
from read_report import report
from reportlab.pdfbase.pdfmetrics import stringWidth
from reportlab.pdfgen.canvas import Canvas

from incline import read_trial, reduce
from incline.diagnosis.search import times_of
from incline.report.budgets import main_lines
from incline.report.canvas_backend import CanvasRenderer
from incline.report.document import Sheet
from incline.report.figure_points import named_by
from incline.report.figure_style import drawing_style, mark
from incline.report.figure_text import place, wrapped
from incline.report.figures import common_plot, device_plots
from incline.report.figures_findings import finding_plot
from incline.report.figures_ledger import rungs_of, waterfall_plot
from incline.report.figures_plan import plan_plot
from incline.report.figures_residuals import residual_plot
from incline.report.figures_uncertainty import share_plot
from incline.report.figures_waterline import waterline_plot
from incline.report.fonts import BOLD, REGULAR, register_fonts
from incline.report.show import Show

DEMOS = Path(__file__).resolve().parent.parent / "demo_trials"
NAMES = ("workboat-metric", "supply-vessel-us", "disturbed-metric")
LONG = "Pendel in Łódź, hintere Ölpumpenkammer an Steuerbord, Εκκρεμές πρύμνης"


@cache
def reduction(name):
    if name == "made":
        return made.made_reduction()
    if name == "many":
        return _many()
    return reduce(read_trial(DEMOS / name))


def _many():
    """Twelve devices with long names, forty tanks, sixty items: more than any figure was made for."""
    base = reduction("workboat-metric")
    heel = base.outcome.heel
    devices, points = [], []
    for n in range(12):
        name = f"{n + 1} {LONG}" if n % 2 else f"P{n + 1}"
        like = heel.devices[n % 3]
        devices.append(replace(like, id=name))
        points += [replace(p, device=name) for p in heel.points if p.device == like.id]
    points[5] = replace(points[5], excluded="bumped", tangent=points[5].tangent + 0.01)
    tank = next(t for t in base.trial.tanks if t.state == "slack")
    tanks = tuple(
        replace(
            tank, name=f"{n} {LONG}", state="slack" if n % 5 == 0 else "pressed full",
            centre=replace(tank.centre, x=1.5 + 2.0 * (n // 3), y=(-2.6, 0.0, 2.6)[n % 3]),
        )
        for n in range(40)
    )  # fmt: skip
    line = base.outcome.ledger.lines[-2]
    lines = tuple(
        replace(line, name=f"{n} {LONG}", mass=0.05 + 0.02 * n, action="deduct" if n % 2 else "add")
        for n in range(60)
    )
    outcome = replace(
        base.outcome,
        heel=replace(heel, devices=tuple(devices), points=tuple(points)),
        ledger=replace(base.outcome.ledger, lines=lines),
    )
    return replace(base, trial=replace(base.trial, tanks=tanks), outcome=outcome, diagnosis=None)


def plots(found, width=493.0):
    """Every figure that the report of a reduction has, by name."""
    show, outcome = Show.of(found), found.outcome
    heel, trial = outcome.heel, found.trial
    named = named_by(heel, found.diagnosis)
    base = [p.fitted for p in heel.points if not p.excluded]
    expected = (
        next((f.expected for f in found.diagnosis.findings if f.expected), ())
        if found.diagnosis
        else ()
    )
    times = [float(t) for t in times_of(trial)]
    budget = next(b for b in outcome.budgets if b.key == "vcg")
    yield "profile", waterline_plot(outcome.as_inclined.waterline, trial.vessel.lpp, show, width)
    yield "plan", plan_plot(trial, show, width)
    yield "common", common_plot(heel, show, width, named)
    yield from (("devices", p) for p in device_plots(heel, show, width, named))
    yield "residuals", residual_plot(heel, show, width, named)
    yield "findings", finding_plot(heel, base, expected, times, show, width)
    yield "shares", share_plot(budget, main_lines(budget, 12), width)
    yield "waterfall", waterfall_plot(outcome, show, width)


class _Words(CanvasRenderer):
    """Notes where words are drawn."""

    def draw_text(self, gc, x, y, s, prop, angle, ismath=False, mtext=None):
        size = prop.get_size_in_points()
        wide = self.get_text_width_height_descent(s, prop, ismath)[0]
        # From the deepest descender to the top of a capital: of DejaVu Sans 0.24 and 0.73.
        box = (x, y - 0.22 * size, x + wide, y + 0.73 * size)
        if angle == 90:
            box = (x - 0.73 * size, y, x + 0.22 * size, y + wide)
        self.seen.append((s, box))
        super().draw_text(gc, x, y, s, prop, angle, ismath, mtext)


def words(plot):
    """Words of a figure as drawn, with the box that holds their ink [pt]."""
    register_fonts()
    renderer = _Words(Canvas(BytesIO()), plot.width, plot.height)
    renderer.seen = []
    with drawing_style():
        plot.figure().draw(renderer)
    return renderer.seen


@cache
def worded(name):
    """Every figure of a report: its name, its plot, and its words as drawn."""
    return [(title, plot, words(plot)) for title, plot in plots(reduction(name))]


@pytest.mark.parametrize("name", [*NAMES, "made", "many"])
def test_no_word_runs_off_a_figure_or_into_another(name):
    for title, plot, found in worded(name):
        assert len(found) > 4
        for text, (left, low, right, top) in found:
            assert left >= 0.0, (title, text)
            assert right <= plot.width, (title, text)
            assert low >= 0.0, (title, text)
            assert top <= plot.height, (title, text)
        for (a, one), (b, other) in itertools.combinations(found, 2):
            wide = min(one[2], other[2]) - max(one[0], other[0])
            high = min(one[3], other[3]) - max(one[1], other[1])
            assert wide <= 0.0 or high <= 0.0, (title, a, b)


@pytest.mark.parametrize("name", ["made", "many"])
def test_no_name_is_cut_short(name):
    found = reduction(name)
    whole = "".join("".join(text.split()) for *_, seen in worded(name) for text, _ in seen)
    assert "…" not in whole
    for device in found.outcome.heel.devices:
        assert "".join(device.id.split()) in whole


def test_pages_hold_no_raster_image():
    for kind in ("metric", "us"):
        for page in pypdf.PdfReader(BytesIO(report(kind))).pages:
            objects = page.get("/Resources", {}).get("/XObject", {})
            assert all(o.get_object().get("/Subtype") != "/Image" for o in objects.values())
            assert b" BI\n" not in page.get_contents().get_data()


def test_devices_differ_without_their_colours():
    looks = [(mark(i).shape, "white" if mark(i).filling == "white" else "dark") for i in range(16)]
    assert len(set(looks)) == 16


def test_waterfall_goes_from_kg_as_inclined_to_kg_of_lightship():
    for name in (*NAMES, "made"):
        outcome = reduction(name).outcome
        for most in (0, 3, 14, 100):
            rungs = rungs_of(outcome, most)
            assert rungs[0].before == pytest.approx(outcome.as_inclined.vcg, rel=1e-12)
            # The same sums in another order: rounding of doubles only.
            assert rungs[-1].after == pytest.approx(outcome.lightship.vcg.value, rel=1e-12)
            for one, other in itertools.pairwise(rungs):
                assert one.after == other.before


def test_a_weight_taken_off_above_g_lowers_kg():
    """Taking w off at z moves G by w (KG - z) / (displacement - w): textbook statics."""
    outcome = reduction("workboat-metric").outcome
    first = rungs_of(outcome, 100)[0]
    line = next(x for x in outcome.ledger.lines if x.source == "test weights")
    state = outcome.as_inclined
    move = line.mass * (state.vcg - line.centre.z) / (state.displacement - line.mass)
    assert line.centre.z > state.vcg
    assert first.after - first.before == pytest.approx(move, rel=1e-9)
    assert move < 0.0


def test_plan_is_to_scale_and_puts_weights_where_they_stood():
    found = reduction("workboat-metric")
    figure = plan_plot(found.trial, Show.of(found), 493.0).figure()
    plan = figure.axes[0]
    box = plan.bbox
    (left, right), (low, top) = plan.get_xlim(), plan.get_ylim()
    assert (right - left) / box.width == pytest.approx((low - top) / box.height, rel=1e-9)
    assert low > top  # starboard below the centreline, the bow to the right
    squares = {
        (round(float(line.get_xdata()[0]), 3), round(float(line.get_ydata()[0]), 3))
        for line in plan.findobj(Line2D)
        if line.get_marker() == "s" and len(line.get_xdata()) == 1
    }
    x = {w.id: w.x for w in found.trial.weights}
    assert squares == {(x[m.weight], m.y) for s in found.trial.shifts for m in s.moves}


def test_findings_ring_the_points_that_their_pattern_moves():
    found = reduction("disturbed-metric")
    heel, named = found.outcome.heel, named_by(found.outcome.heel, found.diagnosis)
    first = found.diagnosis.findings[0]
    assert first.cause == "line, fender or ground holding"
    largest = max(p.moment for p in heel.points)
    held = {i for i, p in enumerate(heel.points) if p.moment == largest}
    assert held <= named
    assert len(named) < len(heel.points)
    assert named_by(reduction("workboat-metric").outcome.heel, None) == frozenset()


@pytest.mark.parametrize("bold", [False, True])
def test_wrapped_names_fit_their_room(bold):
    register_fonts()
    for text in (LONG, "W" * 80, "a b c", "Ναύς " * 12):
        for room in (40.0, 120.0, 300.0):
            lines = wrapped(text, 6.5, room, bold=bold).split("\n")
            face = BOLD if bold else REGULAR
            assert all(stringWidth(line, face, 6.5) <= room for line in lines)
            assert "".join("".join(lines).split()) == "".join(text.split())


def test_a_word_is_set_where_nothing_stands():
    register_fonts()
    taken, within = [], (0.0, 0.0, 200.0, 100.0)
    for number in range(12):
        *_, box = place((100.0, 50.0), str(number), 6.0, taken, within)
        taken.append(box)
    for a, b in itertools.combinations(taken, 2):
        assert min(a[2], b[2]) - max(a[0], b[0]) < 1e-9 or min(a[3], b[3]) - max(a[1], b[1]) < 1e-9
    assert all(b[0] >= 0.0 and b[2] <= 200.0 and b[1] >= 0.0 and b[3] <= 100.0 for b in taken)


def test_sheet_is_its_own_key():
    """The calculation is worked out once a report: the sheet is told apart by identity."""
    found = reduction("workboat-metric")
    one, other = (Sheet(found, Show.of(found), datetime.date(2026, 1, 1), "0") for _ in range(2))
    assert one != other
    assert len({one, other}) == 2
