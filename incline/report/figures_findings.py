"""Residuals by moment, by time and by device, with what a finding makes of them drawn beneath."""

from __future__ import annotations

from dataclasses import dataclass
from itertools import pairwise
from typing import TYPE_CHECKING

from incline.report.figure_style import GREY, add_panel, blank_figure, drawing_style, mark
from incline.report.text import elide

if TYPE_CHECKING:
    from collections.abc import Sequence

    from matplotlib.axes import Axes
    from matplotlib.figure import Figure

    from incline.report.show import Show
    from incline.result import HeelFit, HeelPoint

__all__ = ["finding_plot"]

_THOUSANDTHS = 1000.0
_PATTERN = "0.6"
"""Grey of the pattern, drawn thick under the readings."""
_ABREAST = 4
"""Keys on a line."""
_LETTER = 3.9
"""Width of a letter of an axis [pt], on average."""


@dataclass(frozen=True, slots=True)
class _Series:
    """One device: places, residuals and, with a finding, its pattern; both in thousandths."""

    index: int
    x: tuple[float, ...]
    heights: tuple[float, ...]
    pattern: tuple[float, ...]


def finding_plot(
    heel: HeelFit,
    base: Sequence[float],
    expected: Sequence[float],
    times: Sequence[float],
    show: Show,
    width: float,
) -> Figure:
    """Readings that count less ``base``, and ``expected`` less ``base`` where there is any.

    ``base`` and ``expected`` are tangents in the order of the readings that count; ``times`` of the
    shifts run from 0 to 1.
    """
    points = [p for p in heel.points if not p.excluded]
    heights = [_THOUSANDTHS * (p.tangent - b) for p, b in zip(points, base, strict=True)]
    curve = [_THOUSANDTHS * (e - b) for e, b in zip(expected, base, strict=False)]
    limit = 1.25 * max((abs(h) for h in (*heights, *curve)), default=0.0) or 1.0
    when = {s.shift: t for s, t in zip(heel.shifts, times, strict=True)}
    with drawing_style():
        rows = -(-(len(heel.devices) + bool(curve)) // _ABREAST)
        figure = blank_figure(width, 142.0 + 10.0 * rows)  # the keys stand above the panels
        each = (width - 30.0) / 3.0
        panels = [add_panel(figure, 40.0 + i * each, 27.0, each - 16.0, 96.0) for i in range(3)]
        unit, names = show.scale("moment"), [d.id for d in heel.devices]
        far = max((abs(p.moment) for p in points), default=0.0) or 1.0

        def series(place: dict[int, float]) -> list[_Series]:
            return [_one(i, name, points, place, heights, curve) for i, name in enumerate(names)]

        numbered = list(enumerate(points))
        _draw(panels[0], series({i: p.moment / unit for i, p in numbered}), by_moment=True)
        _draw(panels[1], series({i: when[p.shift] for i, p in numbered}), by_moment=False)
        beside = {i: names.index(p.device) + 0.36 * p.moment / far for i, p in numbered}
        _draw(panels[2], series(beside), by_moment=True)
        for axes in panels:
            axes.axhline(0.0, color="black", linewidth=0.6, zorder=1)
            axes.set_ylim(-limit, limit)
        for axes in panels[1:]:  # one scale for all three
            axes.tick_params(axis="y", labelleft=False)
        panels[0].set_title("By moment")
        panels[0].set_xlabel(f"moment to starboard [{show.unit('moment')}]")
        panels[0].set_ylabel("residual of tangent × 1000")
        _clock(panels[1], heel, when)
        _beside(panels[2], names, each - 16.0)
        _keys(figure, names, pattern=bool(curve))
    return figure


def _one(
    index: int,
    name: str,
    points: Sequence[HeelPoint],
    place: dict[int, float],
    heights: Sequence[float],
    curve: Sequence[float],
) -> _Series:
    mine = [i for i, p in enumerate(points) if p.device == name]
    return _Series(
        index,
        tuple(place[i] for i in mine),
        tuple(heights[i] for i in mine),
        tuple(curve[i] for i in mine) if curve else (),
    )


def _draw(axes: Axes, some: Sequence[_Series], *, by_moment: bool) -> None:
    """The pattern as a thick grey line, or bars where a moment has more than one value of it."""
    for one in some:
        look = mark(one.index)
        if one.pattern:
            pairs = sorted(zip(one.x, one.pattern, strict=True))
            joined = not by_moment or _single(pairs)
            axes.plot(
                [x for x, _ in pairs], [y for _, y in pairs], color=_PATTERN, linewidth=3.0,
                linestyle="solid" if joined else "none", marker="none" if joined else "_",
                markersize=9.0, markeredgewidth=2.4, zorder=1.5, solid_capstyle="butt",
            )  # fmt: skip
        axes.plot(
            one.x, one.heights, linestyle="none" if by_moment else look.dash, linewidth=0.6,
            marker=look.shape, color=look.colour, markerfacecolor="white", markeredgewidth=0.9,
            zorder=2.5,
        )  # fmt: skip


def _single(pairs: Sequence[tuple[float, float]]) -> bool:
    """Whether the pattern has one value at each place, to two hundredths of its range."""
    xs, ys = [x for x, _ in pairs], [y for _, y in pairs]
    near, alike = 0.01 * (max(xs) - min(xs)), 0.02 * (max(ys) - min(ys))
    return all(abs(b[1] - a[1]) <= alike for a, b in pairwise(pairs) if b[0] - a[0] <= near)


def _clock(axes: Axes, heel: HeelFit, when: dict[int, float]) -> None:
    """Clock times under the panel, or shifts where they were not all written down."""
    clock = all(s.time for s in heel.shifts)
    axes.set_title("By time" if clock else "In the order of the shifts")
    axes.set_xlabel("time" if clock else "shift")
    step = max(1, -(-len(heel.shifts) // 4)) if clock else max(1, len(heel.shifts) // 9)
    some = heel.shifts[::step]
    axes.set_xticks(
        [when[s.shift] for s in some], [s.time if clock else str(s.shift) for s in some]
    )


def _beside(axes: Axes, names: Sequence[str], width: float) -> None:
    """The devices side by side, each over the moment."""
    room = max(2, int(width / len(names) / _LETTER) - 1)
    axes.set_title("By device, each over the moment")
    axes.set_xticks(range(len(names)), [elide(name, room) for name in names])
    axes.set_xlim(-0.5, len(names) - 0.5)
    axes.grid(visible=False, axis="x")
    for i in range(1, len(names)):
        axes.axvline(i - 0.5, color=GREY, linewidth=0.4, zorder=0)
    axes.set_xlabel("device")


def _keys(figure: Figure, names: Sequence[str], *, pattern: bool) -> None:
    from matplotlib.lines import Line2D

    keys = [
        Line2D(
            [], [], linestyle="none", marker=mark(i).shape, color=mark(i).colour,
            markerfacecolor="white", markeredgewidth=0.9, label=elide(name, 22),
        )
        for i, name in enumerate(names)
    ]  # fmt: skip
    if pattern:
        keys.append(Line2D([], [], color=_PATTERN, linewidth=3.0, label="as the finding has it"))
    figure.legend(handles=keys, loc="upper left", ncols=_ABREAST, columnspacing=1.4)
