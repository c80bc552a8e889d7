"""Plots of the residuals of the heel fit: against moment, and in the order of the shifts."""

from __future__ import annotations

from functools import partial
from typing import TYPE_CHECKING

from incline.report.figure_points import crossed, entries_of, keys, tell
from incline.report.figure_style import (
    INK,
    Plot,
    add_panel,
    dots,
    legend,
    legend_height,
    mark,
    ring,
)
from incline.report.show import signed

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.figure import Figure

    from incline.report.show import Show
    from incline.result import HeelFit, HeelPoint

__all__ = ["residual_plot"]

_THOUSANDTHS = 1000.0


def residual_plot(heel: HeelFit, show: Show, width: float, named: frozenset[int]) -> Plot:
    """Residuals against moment, and against the shift to show what changes with time.

    The scale is that of the readings that count; an excluded one beyond it stands at the edge with
    its value. At a shift the devices stand side by side.
    """
    entries = entries_of(heel, named)
    return Plot(width, 154.0 + legend_height(entries, width), partial(_both, heel, show, named))


def _both(heel: HeelFit, show: Show, named: frozenset[int], figure: Figure) -> None:
    width = 72.0 * float(figure.get_size_inches()[0])
    counted = [abs(p.residual) for p in heel.points if not p.excluded]
    limit = 1.3 * _THOUSANDTHS * max(max(counted, default=0.0), 1e-6)
    left = add_panel(figure, 40.0, 27.0, 0.42 * width - 40.0, 108.0)
    right = add_panel(figure, 0.42 * width + 26.0, 27.0, 0.58 * width - 32.0, 108.0)
    unit, shifts = show.scale("moment"), sorted({p.shift for p in heel.points})
    right.set_xlim(shifts[0] - 0.6, shifts[-1] + 0.6)
    names = [d.id for d in heel.devices]
    told = [
        label
        for index in range(len(names))
        for label in _residuals((left, right), heel, index, limit, unit)
    ]
    some = [heel.points[i] for i in sorted(named)]
    heights = [p.residual * _THOUSANDTHS for p in some]
    ring(left, [p.moment / unit for p in some], heights)
    ring(right, [_beside(p, names.index(p.device), len(names)) for p in some], heights)
    left.set_title("Residuals against moment")
    left.set_xlabel(f"moment to starboard [{show.unit('moment')}]")
    left.set_ylabel("residual of tangent × 1000")
    right.set_title("Residuals in the order of the shifts")
    right.set_xlabel("shift")
    right.set_xticks(shifts[:: max(1, len(shifts) // 12)])
    right.grid(visible=False, axis="x")
    for edge in shifts[1:]:
        right.axvline(edge - 0.5, color="0.88", linewidth=0.4, zorder=0)
    for axes in (left, right):
        axes.axhline(0.0, color=INK, linewidth=0.6, zorder=1)
        axes.set_ylim(-limit, limit)
    tell(right, told)
    keys(left, entries_of(heel, named))
    legend(figure, *left.get_legend_handles_labels())


def _beside(point: HeelPoint, index: int, of: int) -> float:
    """Where a device's point stands at its shift: side by side with the others."""
    return point.shift + (0.0 if of < 2 else 0.62 * (index / (of - 1) - 0.5))


def _residuals(
    panels: tuple[Axes, Axes], heel: HeelFit, index: int, limit: float, unit: float
) -> list[tuple[float, float, str]]:
    """The residuals of one device in both panels; values to tell beside excluded ones."""
    (left, right), look, of = panels, mark(index), len(heel.devices)
    some = [p for p in heel.points if p.device == heel.devices[index].id]
    kept = [p for p in some if not p.excluded]
    heights = [p.residual * _THOUSANDTHS for p in kept]
    dots(left, [p.moment / unit for p in kept], heights, look)
    dots(right, [_beside(p, index, of) for p in kept], heights, look)
    told = []
    for p in some:
        if p.excluded:
            value = p.residual * _THOUSANDTHS
            height = max(-0.93 * limit, min(0.93 * limit, value))
            crossed(left, [p.moment / unit], [height], look)
            crossed(right, [_beside(p, index, of)], [height], look)
            told.append((_beside(p, index, of), height, signed(f"{value:+.2f}")))
    return told
