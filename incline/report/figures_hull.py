"""Plots of the hull: its sections with the waterline, and the levers of buoyancy."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

from incline.report.figure_style import GREY, add_panel, blank_figure, drawing_style

if TYPE_CHECKING:
    from collections.abc import Sequence

    from matplotlib.axes import Axes
    from matplotlib.figure import Figure

    from incline.record import Offsets, Station
    from incline.report.show import Show
    from incline.result import AsInclined, HeelFit

__all__ = ["lever_plot", "section_plot"]

_MOST = 24
"""Sections drawn; of more, some are left out."""


def section_plot(offsets: Offsets, ship: AsInclined, show: Show, width: float) -> Figure:
    """Sections seen from aft: those abaft the middle to port, the others to starboard.

    The waterline is that of the drafts, drawn at the ends and amidships.
    """
    scale = show.scale("length")
    stations = [(b.y, s) for b in offsets.bodies for s in b.stations]
    middle = 0.5 * (min(s.x for _, s in stations) + max(s.x for _, s in stations))
    step = max(1, math.ceil(len(stations) / _MOST))
    with drawing_style():
        broad, high = _extent(stations)
        room = width - 120.0
        height = min(230.0, max(90.0, room * high / (2.0 * broad)))
        figure = blank_figure(width, height + 44.0)
        axes = add_panel(figure, 60.0, 28.0, room, height)
        for y, station in [*stations[::step], *stations[-1:]]:
            _draw_section(axes, y, station, scale, aft=station.x <= middle)
        across = [-broad / scale, broad / scale]
        levels = (
            ("at AP", ship.draft_ap, (0, (5.0, 2.0))),
            ("amidships", ship.draft_mid, (0, ())),
            ("at FP", ship.draft_fp, (0, (1.5, 1.5))),
        )
        tilt = ship.list_tan or 0.0
        for name, draft, dash in levels:
            edge = [(draft + tilt * a * scale) / scale for a in across]
            axes.plot(across, edge, color="#0B3C6F", linestyle=dash, linewidth=0.9, label=name)
        axes.axvline(0.0, color=GREY, linewidth=0.5)
        axes.set_aspect("equal", adjustable="datalim")
        axes.set_title("Sections from aft: after body to port, fore body to starboard; waterline")
        axes.set_xlabel(f"half-breadth [{show.unit('length')}]")
        axes.set_ylabel(f"height [{show.unit('length')}]")
        axes.legend(loc="lower right")
    return figure


def _extent(stations: Sequence[tuple[float, Station]]) -> tuple[float, float]:
    """Half the breadth and the height of all sections [m]."""
    sides = [(y, p) for y, s in stations for p in (*s.starboard, *s.port)]
    heights = [p.z for _, p in sides]
    return max(abs(y) + p.y for y, p in sides), max(heights) - min(heights)


def _draw_section(axes: Axes, y: float, station: Station, scale: float, *, aft: bool) -> None:
    side, sign = (station.port, -1.0) if aft else (station.starboard, 1.0)
    axes.plot(
        [(sign * abs(y) + sign * p.y) / scale for p in side],
        [p.z / scale for p in side],
        color="black",
        linewidth=0.6,
    )


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
