"""Plots of the hull: its sections with the waterline, and the levers of buoyancy."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

from incline.report.figure_style import (
    GREY,
    INK,
    add_panel,
    blank_figure,
    drawing_style,
    legend,
    legend_height,
)

if TYPE_CHECKING:
    from collections.abc import Iterator

    from matplotlib.figure import Figure

    from incline.record import Body, Offsets, Station
    from incline.report.show import Show
    from incline.result import AsInclined, HeelFit

__all__ = ["drawn_stations", "lever_plot", "section_plot"]

_MOST = 24
"""Sections drawn of a body; of more, some are left out."""
_ABAFT = "0.45"
"""Ink of the after sections of a body that is drawn whole."""
_AFT_KEY = "sections abaft the middle, of bodies drawn whole"

_Line = list[tuple[float, float]]
"""Places across the ship, positive to starboard, and heights [m]."""


def section_plot(offsets: Offsets, ship: AsInclined, show: Show, width: float) -> Figure:
    """Sections seen from aft, with the waterline of the drafts at the ends and amidships.

    Of a body on the centreline the sections abaft the middle stand to port, the others to
    starboard. A body beside it is drawn whole where it lies, and its mirror image if it has one.
    """
    scale = show.scale("length")
    lines = list(_lines(offsets))
    across = [y for line, _ in lines for y, _ in line]
    heights = [z for line, _ in lines for _, z in line]
    edges = (min(0.0, *across), max(0.0, *across))
    levels = (
        ("waterline at AP", ship.draft_ap, (0, (5.0, 2.0))),
        ("amidships", ship.draft_mid, (0, ())),
        ("at FP", ship.draft_fp, (0, (1.5, 1.5))),
    )
    names = [name for name, *_ in levels]
    names += [_AFT_KEY] if any(aft for _, aft in lines) else []
    room = width - 120.0
    high = min(230.0, max(90.0, room * (max(heights) - min(heights)) / (edges[1] - edges[0])))
    with drawing_style():
        figure = blank_figure(width, high + 44.0 + legend_height(names, width))
        axes = add_panel(figure, 60.0, 28.0, room, high)
        for line, aft in lines:
            ink, order = (_ABAFT, 1.9) if aft else (INK, 2.0)
            points = [(y / scale, z / scale) for y, z in line]
            axes.plot(*zip(*points, strict=True), color=ink, linewidth=0.6, zorder=order)
        tilt = ship.list_tan or 0.0
        for name, draft, dash in levels:
            surface = [(draft + tilt * y) / scale for y in edges]
            axes.plot(
                [y / scale for y in edges], surface, color="#0B3C6F", linestyle=dash,
                linewidth=0.9, label=name,
            )  # fmt: skip
        if _AFT_KEY in names:
            axes.plot([], [], color=_ABAFT, linewidth=0.6, label=_AFT_KEY)
        axes.axvline(0.0, color=GREY, linewidth=0.5)
        axes.set_aspect("equal", adjustable="datalim")
        axes.set_title(_title(offsets))
        axes.set_xlabel(f"port (−), starboard (+) [{show.unit('length')}]")
        axes.set_ylabel(f"height [{show.unit('length')}]")
        legend(figure, *axes.get_legend_handles_labels())
    return figure


def drawn_stations(body: Body) -> tuple[int, list[Station]]:
    """Every n-th station of a body and the last one, with n."""
    step = max(1, math.ceil(len(body.stations) / _MOST))
    some = list(body.stations[::step])
    return step, some if some[-1] is body.stations[-1] else [*some, body.stations[-1]]


def _whole(body: Body) -> bool:
    """Whether both sides of every section are drawn: the body is not on the centreline."""
    return body.y != 0.0 or body.mirrored


def _lines(offsets: Offsets) -> Iterator[tuple[_Line, bool]]:
    """Lines to draw, and whether each is an after section among those of a whole body."""
    places = [s.x for b in offsets.bodies for s in b.stations]
    middle = 0.5 * (min(places) + max(places))
    for body in offsets.bodies:
        for station in drawn_stations(body)[1]:
            aft = station.x <= middle
            port = [(body.y - p.y, p.z) for p in station.port]
            starboard = [(body.y + p.y, p.z) for p in station.starboard]
            if not _whole(body):
                yield (port if aft else starboard), False
                continue
            line = [*reversed(port), *starboard[1:]]
            yield line, aft
            if body.mirrored:
                yield [(-y, z) for y, z in line], aft


def _title(offsets: Offsets) -> str:
    whole = [_whole(b) for b in offsets.bodies]
    if all(whole):
        return "Sections from aft, drawn whole where the bodies lie; waterline"
    more = "; bodies beside the centreline whole" if any(whole) else "; waterline"
    return f"Sections from aft: after body to port, fore body to starboard{more}"


def lever_plot(heel: HeelFit, show: Show, width: float) -> Figure:
    """N(t) against t, and what separates the methods: each less the straight line KM t."""
    levers = heel.levers
    with drawing_style():
        figure = blank_figure(width, 190.0)
        left = add_panel(figure, 46.0, 28.0, 0.44 * width - 46.0, 142.0)
        right = add_panel(figure, 0.44 * width + 50.0, 28.0, 0.56 * width - 56.0, 142.0)
        if levers is None:
            return figure
        t, length, small = levers.tangents, show.scale("length"), show.scale("reading")
        curves = (
            ("integrated hull", levers.integrated, "#0B3C6F", (0, ())),
            ("wall-sided", levers.wall_sided, "#8A3300", (0, (5.0, 2.0))),
            ("straight line", levers.straight_line, "black", (0, (1.5, 1.5))),
        )
        for name, values, ink, dash in curves:
            if not values:
                continue
            left.plot(t, [v / length for v in values], color=ink, linestyle=dash, label=name)
            apart = [(v - s) / small for v, s in zip(values, levers.straight_line, strict=True)]
            right.plot(t, apart, color=ink, linestyle=dash, label=name)
        for axes in (left, right):
            low = axes.get_ylim()[0]
            axes.plot(
                levers.shifts,
                [low] * len(levers.shifts),
                "|",
                color="black",
                markersize=7,
                clip_on=False,
            )
            axes.set_xlabel("tangent of heel t (marks: shifts)")
        left.set_title("N(t) = y of B + z of B times t")
        left.set_ylabel(f"N [{show.unit('length')}]")
        left.legend(loc="upper left")
        right.set_title("Each less KM t")
        right.set_ylabel(f"N − KM t [{show.unit('reading')}]")
    return figure
