"""From KG as inclined to KG of the lightship, item by item."""

from __future__ import annotations

import math
from dataclasses import dataclass
from functools import partial
from itertools import accumulate, pairwise
from typing import TYPE_CHECKING

from incline.report.figure_style import GREY, INK, PALE, Plot, add_panel, legend, legend_height
from incline.report.figure_text import widest, wrapped

if TYPE_CHECKING:
    from collections.abc import Sequence

    from matplotlib.axes import Axes
    from matplotlib.figure import Figure

    from incline.report.show import Show
    from incline.result import LedgerLine, Outcome

__all__ = ["Rung", "rungs_of", "waterfall_plot"]

_MOST = 14
"""Most items shown by themselves; the others stand together by kind."""
_LEFT, _RIGHT, _SIZE = 200.0, 52.0, 6.5
"""Most room for names, room for changes beside the bars, and their size [pt]."""
_ROW, _LINE = 12.5, 7.8
"""Height of a row and of each further line of its name [pt]."""
_START, _END = "KG as inclined", "KG of lightship"
_RAISES, _LOWERS = "raises KG", "lowers KG"
_ORDER = (
    ("test weights", "deduct", "test weights off"),
    ("tanks", "deduct", "tank liquids off"),
    ("people", "deduct", "people off"),
    ("ledger", "deduct", "items off"),
    ("ledger", "add", "items added"),
    ("ledger", "relocate", "items relocated"),
)
"""Source and action of the lines that may stand together, and what they are called then."""


@dataclass(frozen=True, slots=True)
class Rung:
    """A step of the waterfall: KG before and after it [m]."""

    name: str
    before: float
    after: float


def rungs_of(outcome: Outcome, most: int = _MOST) -> tuple[Rung, ...]:
    """What each item does to KG when the ledger is gone through in order; small ones together.

    The change by an item depends on what went before it; the ends do not.
    """
    state = outcome.as_inclined
    weight, moment = state.displacement, state.displacement * state.vcg
    groups = [
        (name, [x for x in outcome.ledger.lines if (x.source, x.action) == (source, action)])
        for source, action, name in _ORDER
    ]
    worth = {id(x): abs(_change(x, state.vcg, weight)) for _, lines in groups for x in lines}
    shown = set(sorted(worth, key=lambda i: -worth[i])[:most])
    rungs: list[Rung] = []
    for name, lines in groups:
        alone = [x for x in lines if id(x) in shown]
        rest = [x for x in lines if id(x) not in shown]
        label = name if not alone else f"{len(rest)} more, {name}"
        if len(rest) == 1:
            label = _named(rest[0])
        for text, some in (*((_named(x), [x]) for x in alone), (label, rest)):
            if not some:
                continue
            before = moment / weight
            weight += math.fsum(_mass(x) for x in some)
            moment += math.fsum(_moment(x) for x in some)
            rungs.append(Rung(text, before, moment / weight))
    return tuple(rungs)


def _named(line: LedgerLine) -> str:
    return f"{ {'deduct': '−', 'add': '+', 'relocate': '→'}[line.action] } {line.name}"


def _mass(line: LedgerLine) -> float:
    return {"deduct": -1.0, "add": 1.0, "relocate": 0.0}[line.action] * line.mass


def _moment(line: LedgerLine) -> float:
    if line.to is not None:
        return line.mass * (line.to.z - line.centre.z)
    return _mass(line) * line.centre.z


def _change(line: LedgerLine, vcg: float, weight: float) -> float:
    return (_moment(line) - _mass(line) * vcg) / weight


def waterfall_plot(outcome: Outcome, show: Show, width: float) -> Plot:
    """KG as inclined, the change by each item or kind of items, KG of the lightship."""
    rungs = rungs_of(outcome)
    names = [wrapped(r.name, _SIZE, _LEFT - 12.0) for r in rungs]
    heights = [_ROW, *(_ROW + _LINE * n.count("\n") for n in names), _ROW]
    keys = legend_height([_RAISES, _LOWERS], width)
    paint = partial(_paint, rungs, names, heights, show, outcome.as_inclined.vcg)
    return Plot(width, math.fsum(heights) + 34.0 + keys, paint)


def _paint(
    rungs: Sequence[Rung],
    names: Sequence[str],
    heights: Sequence[float],
    show: Show,
    start: float,
    figure: Figure,
) -> None:
    width = 72.0 * float(figure.get_size_inches()[0])
    scale = show.scale("length")
    tops = [0.0, *accumulate(heights)]
    middles = [(a + b) / 2.0 for a, b in pairwise(tops)]
    left = 12.0 + max(widest(n, _SIZE) for n in (*names, _START, _END))
    axes = add_panel(figure, left, 28.0, width - left - _RIGHT, tops[-1])
    axes.use_sticky_edges = False
    end = rungs[-1].after if rungs else start
    for middle, rung in zip(middles[1:-1], rungs, strict=True):
        _bar(axes, middle, rung, scale)
    for middle, value in ((middles[0], start), (middles[-1], end)):
        axes.plot(value / scale, middle, marker="D", color=INK, markersize=4.5, zorder=3)
        axes.annotate(
            show.full(value, "length", 4), (1.0, middle), xycoords=("axes fraction", "data"),
            xytext=(4, 0), textcoords="offset points", va="center", fontsize=_SIZE,
            fontweight="bold",
        )  # fmt: skip
    for middle, rung in zip(middles[1:-1], rungs, strict=True):
        change = show.number(rung.after - rung.before, "reading")
        axes.annotate(
            f"{'+' if rung.after > rung.before and change.strip('0.') else ''}{change}",
            (1.0, middle), xycoords=("axes fraction", "data"), xytext=(34, 0),
            textcoords="offset points", va="center", ha="right", fontsize=_SIZE,
        )  # fmt: skip
    levels = [start, *(r.after for r in rungs)]
    for level, (upper, lower) in zip(levels, pairwise(middles), strict=True):
        axes.plot([level / scale] * 2, [upper, lower], color=GREY, linewidth=0.5, zorder=1)
    axes.set_yticks(middles, [_START, *names, _END])
    axes.set_ylim(tops[-1], 0.0)
    axes.margins(x=0.05)
    axes.grid(visible=False, axis="y")
    axes.tick_params(axis="y", length=0)
    axes.set_xlabel(
        f"KG above baseline [{show.unit('length')}]; right: change [{show.unit('reading')}]"
    )
    legend(figure, *_keys())


def _bar(axes: Axes, middle: float, rung: Rung, scale: float) -> None:
    """Dark where KG rises, pale where it falls."""
    up = rung.after > rung.before
    axes.barh(
        middle, (rung.after - rung.before) / scale, left=rung.before / scale, height=0.6 * _ROW,
        color=INK if up else PALE, edgecolor=INK, linewidth=0.6, zorder=2,
    )  # fmt: skip


def _keys() -> tuple[list[object], list[str]]:
    from matplotlib.patches import Patch

    patches: list[object] = [
        Patch(facecolor=shade, edgecolor=INK, linewidth=0.6) for shade in (INK, PALE)
    ]
    return patches, [_RAISES, _LOWERS]
