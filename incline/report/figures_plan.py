"""The plan: test weights by shift, and tanks."""

from __future__ import annotations

from dataclasses import dataclass
from functools import partial
from typing import TYPE_CHECKING

from matplotlib.patches import Rectangle

from incline.report.figure_style import GREY, INK, PALE, Plot, add_panel, legend, legend_height
from incline.report.figure_text import place

if TYPE_CHECKING:
    from collections.abc import Sequence

    from matplotlib.axes import Axes
    from matplotlib.figure import Figure

    from incline.record import Tank, Trial
    from incline.report.figure_text import Box
    from incline.report.show import Show

__all__ = ["numbered_tanks", "plan_plot", "weight_labels"]

_LEFT, _FOOT, _EDGE = 40.0, 27.0, 8.0
_GAP = 6.0
"""Room between the label below the plan and the title of what follows [pt]."""
_TALL, _LOW = 190.0, 80.0
"""Height of the plan at most and at least [pt]."""
_ROW, _HEAD = 84.0, 16.0
"""Height of a row of shifts, and of the title above a panel [pt]."""
_SLOT = 8.0
"""Least width of a weight's place within a shift [pt]."""
_SIZE = 6.0
_SHORT = 3
"""Most characters of a name that is written into the plan."""
_CLEAR = {"boxstyle": "square,pad=0.05", "facecolor": "white", "edgecolor": "none"}
"""White behind a number, so that no line runs through it."""
_KEYS = ("test weight at its start", "later place", "slack tank", "full tank", "half beam")


def weight_labels(trial: Trial) -> dict[str, str]:
    """What each test weight is called in the plan: its own name when all are short."""
    short = all(len(w.id) <= _SHORT for w in trial.weights)
    return {w.id: w.id if short else f"W{n}" for n, w in enumerate(trial.weights, start=1)}


def numbered_tanks(trial: Trial) -> tuple[tuple[str, Tank], ...]:
    """Tanks with a place, with T and a number as in the plan."""
    placed = (t for t in trial.tanks if t.centre is not None)
    return tuple((f"T{n}", t) for n, t in enumerate(placed, start=1))


@dataclass(frozen=True, slots=True)
class _Plan:
    """Sizes [pt]: of the plan's panel, and its heights over its lengths; shifts in each row."""

    high: float
    factor: float
    rows: tuple[tuple[int, ...], ...]


def plan_plot(trial: Trial, show: Show, width: float) -> Plot:
    """Plan view with weights and tanks; below, where each weight stood at each shift."""
    room = width - _LEFT - _EDGE
    natural = room * 1.16 * trial.vessel.beam / (1.06 * trial.vessel.lpp)
    high = min(_TALL, max(_LOW, natural))
    count = max(1, int(room / (_SLOT * max(1, len(trial.weights)))))
    numbers = list(range(len(trial.shifts) if trial.weights else 0))
    rows = tuple(tuple(numbers[i : i + count]) for i in range(0, len(numbers), count))
    found = _Plan(high, high / natural, rows)
    total = high + _FOOT + _HEAD + legend_height(_KEYS, width)
    return Plot(width, total + _below(rows), partial(_paint, trial, show, found))


def _below(rows: Sequence[Sequence[int]]) -> float:
    """Height of all that stands below the plan [pt]."""
    return _FOOT + _GAP + len(rows) * (_ROW + _HEAD) if rows else 0.0


def _paint(trial: Trial, show: Show, found: _Plan, figure: Figure) -> None:
    width = 72.0 * float(figure.get_size_inches()[0])
    room = width - _LEFT - _EDGE
    axes = add_panel(figure, _LEFT, _below(found.rows) + _FOOT, room, found.high)
    _hull(axes, trial, show, found)
    taken: list[Box] = []
    _weights(axes, trial, show, taken)
    _tanks(axes, trial, show, taken)
    for n, row in enumerate(found.rows):
        bottom = _FOOT + (len(found.rows) - 1 - n) * (_ROW + _HEAD)
        panel = add_panel(figure, _LEFT, bottom, room, _ROW)
        _shifts(panel, trial, show, row)
        if n == 0:
            panel.set_title("Test weights by shift; bold in a box: moved at this shift")
        if n == len(found.rows) - 1:
            panel.set_xlabel("shift")
    legend(figure, *_keys(trial, axes))


def _hull(axes: Axes, trial: Trial, show: Show, found: _Plan) -> None:
    """Perpendiculars, centreline and half beam: the record has no outline of the hull."""
    scale, lpp, beam = show.scale("length"), trial.vessel.lpp, trial.vessel.beam
    axes.set_xlim(-0.03 * lpp / scale, 1.03 * lpp / scale)
    axes.set_ylim(0.58 * beam / scale, -0.58 * beam / scale)  # starboard down, as seen from above
    axes.grid(visible=False)
    axes.axhline(0.0, color=GREY, linewidth=0.6, dashes=(8.0, 2.0, 1.5, 2.0), zorder=0)
    for side in (-0.5, 0.5):
        axes.plot(
            [0.0, lpp / scale], [side * beam / scale] * 2, color=GREY, linewidth=0.6,
            linestyle=(0, (1.5, 2.0)), zorder=0,
        )  # fmt: skip
    for x, name in ((0.0, "AP"), (lpp, "FP")):
        axes.axvline(x / scale, color=GREY, linewidth=0.6, dashes=(6.0, 2.0, 1.5, 2.0), zorder=0)
        axes.annotate(
            name, (x / scale, 1.0), xycoords=("data", "axes fraction"), xytext=(2, -1),
            textcoords="offset points", va="top", fontsize=6.5,
        )  # fmt: skip
    told = (
        "to scale"
        if 0.98 < found.factor < 1.02
        else f"breadths {found.factor:.2g} times the lengths"
    )
    axes.set_title(f"Plan from above, bow to the right; {told}")
    axes.set_xlabel(f"x forward of the after perpendicular [{show.unit('length')}]")
    axes.set_ylabel(f"y to starboard [{show.unit('length')}]")


def _points(axes: Axes, show: Show, x: float, y: float) -> tuple[float, float]:
    """A place of the ship [m] in points of the panel."""
    (left, right), (low, top) = axes.get_xlim(), axes.get_ylim()
    scale = show.scale("length")
    across = (x / scale - left) / (right - left) * axes.bbox.width
    return across, (y / scale - low) / (top - low) * axes.bbox.height


def _weights(axes: Axes, trial: Trial, show: Show, taken: list[Box]) -> None:
    """Start of each weight, the places it moved to, and its name at the start."""
    if not trial.weights:
        return
    scale, labels, stood = show.scale("length"), weight_labels(trial), _stood(trial)
    starts = []
    for weight in trial.weights:
        where = dict.fromkeys(p for row in stood if (p := row.get(weight.id)) is not None)
        start, *later = where
        starts.append((labels[weight.id], *start))
        for x, y in later:
            axes.plot(
                [start[0] / scale, x / scale], [start[1] / scale, y / scale], color=GREY,
                linewidth=0.5, zorder=1,
            )  # fmt: skip
            axes.plot(
                x / scale, y / scale, marker="s", color=INK, markerfacecolor="white",
                markersize=5.0, markeredgewidth=0.8, linestyle="none", zorder=3,
            )  # fmt: skip
        axes.plot(
            start[0] / scale, start[1] / scale, marker="s", color=INK, markersize=5.0, zorder=3
        )
        taken += [_around(_points(axes, show, *p), 3.5) for p in where]
    for text, x, y in starts:
        _write(axes, show, text, (x, y), taken)


def _stood(trial: Trial) -> list[dict[str, tuple[float, float]]]:
    """Where each weight stood at each shift: x and y [m]."""
    along = {w.id: w.x for w in trial.weights}
    across: dict[str, float] = {}
    rows = []
    for shift in trial.shifts:
        for move in shift.moves:
            across[move.weight] = move.y
            along[move.weight] = along[move.weight] if move.x is None else move.x
        rows.append({w: (along[w], y) for w, y in across.items()})
    return rows


def _around(at: tuple[float, float], reach: float) -> Box:
    return at[0] - reach, at[1] - reach, at[0] + reach, at[1] + reach


def _write(axes: Axes, show: Show, text: str, at: tuple[float, float], taken: list[Box]) -> None:
    """A name near its place, covering nothing."""
    inside = (0.0, 0.0, float(axes.bbox.width), float(axes.bbox.height))
    left, base, covers = place(_points(axes, show, *at), text, _SIZE, taken, inside)
    axes.annotate(
        text, (0.0, 0.0), xycoords="axes fraction", xytext=(left, base),
        textcoords="offset points", fontsize=_SIZE, zorder=4, bbox=_CLEAR,
    )  # fmt: skip
    taken.append(covers)


def _tanks(axes: Axes, trial: Trial, show: Show, taken: list[Box]) -> None:
    """Centres of the liquids, numbered; the free surface of a slack tank where it is known."""
    scale, numbered = show.scale("length"), numbered_tanks(trial)
    for _, tank in numbered:
        assert tank.centre is not None  # noqa: S101 - numbered only with a place
        x, y = tank.centre.x / scale, tank.centre.y / scale
        slack = tank.state == "slack"
        if slack and tank.length and tank.breadth:
            long, wide = tank.length / scale, tank.breadth / scale
            axes.add_patch(
                Rectangle(
                    (x - long / 2.0, y - wide / 2.0), long, wide, facecolor="none",
                    edgecolor=GREY, linewidth=0.6, zorder=1,
                )
            )  # fmt: skip
        axes.plot(
            x, y, marker="o", color=INK, markerfacecolor="white" if slack else GREY,
            markersize=4.5, markeredgewidth=0.8, linestyle="none", zorder=3,
        )  # fmt: skip
        taken.append(_around(_points(axes, show, tank.centre.x, tank.centre.y), 3.0))
    for label, tank in numbered:
        assert tank.centre is not None  # noqa: S101
        _write(axes, show, label, (tank.centre.x, tank.centre.y), taken)


def _shifts(axes: Axes, trial: Trial, show: Show, row: Sequence[int]) -> None:
    """Each weight in a slot of its own within each shift, at its transverse place."""
    scale, labels, stood = show.scale("length"), weight_labels(trial), _stood(trial)
    many = len(trial.weights)
    reach = max((abs(y) for at in stood for _, y in at.values()), default=1.0) or 1.0
    for n in row:
        moved = {m.weight for m in trial.shifts[n].moves} if n else set()
        for i, weight in enumerate(trial.weights):
            if weight.id not in stood[n]:
                continue
            slot = n + (0.0 if many == 1 else 0.76 * (i / (many - 1) - 0.5))
            fresh = weight.id in moved
            axes.text(
                slot, stood[n][weight.id][1] / scale, labels[weight.id], ha="center", va="center",
                fontsize=_SIZE, fontweight="bold" if fresh else "normal",
                bbox={"boxstyle": "square,pad=0.22", "facecolor": "white", "edgecolor": INK,
                      "linewidth": 0.6} if fresh else None,
            )  # fmt: skip
    axes.set_xlim(row[0] - 0.5, row[0] - 0.5 + max(len(row), 1))
    axes.set_ylim(1.25 * reach / scale, -1.25 * reach / scale)
    axes.set_xticks(list(row), [str(trial.shifts[n].number) for n in row])
    axes.tick_params(axis="x", length=0)
    axes.grid(visible=False, axis="x")
    axes.axhline(0.0, color=GREY, linewidth=0.6, dashes=(8.0, 2.0, 1.5, 2.0), zorder=0)
    for n in row[1:]:
        axes.axvline(n - 0.5, color=PALE, linewidth=0.5, zorder=0)
    axes.set_ylabel(f"y to starboard [{show.unit('length')}]")


def _keys(trial: Trial, axes: Axes) -> tuple[list[object], list[str]]:
    """What stands in the plan."""
    states = {t.state for _, t in numbered_tanks(trial)}
    looks: list[tuple[str, str, str, float]] = []
    if trial.weights:
        looks += [(_KEYS[0], "s", INK, 5.0), (_KEYS[1], "s", "white", 5.0)]
    if "slack" in states:
        looks.append((_KEYS[2], "o", "white", 4.5))
    if "pressed full" in states:
        looks.append((_KEYS[3], "o", GREY, 4.5))
    handles: list[object] = [
        axes.plot(
            [], [], linestyle="none", marker=shape, color=INK, markerfacecolor=filling,
            markersize=size, markeredgewidth=0.8,
        )[0]
        for _, shape, filling, size in looks
    ]  # fmt: skip
    beam = axes.plot([], [], color=GREY, linewidth=0.6, linestyle=(0, (1.5, 2.0)))
    return [*handles, *beam], [*(name for name, *_ in looks), _KEYS[4]]
