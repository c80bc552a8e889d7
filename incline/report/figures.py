"""Plots of the heel fit: tangent against moment, together and by device."""

from __future__ import annotations

import statistics
from functools import partial
from typing import TYPE_CHECKING

from incline.report.figure_points import crossed, entries_of, keys, tell_shifts
from incline.report.figure_style import (
    GREY,
    INK,
    Mark,
    Plot,
    add_panel,
    dots,
    legend,
    legend_height,
    mark,
    ring,
)
from incline.report.figure_text import wrapped

if TYPE_CHECKING:
    from collections.abc import Sequence

    from matplotlib.axes import Axes
    from matplotlib.figure import Figure

    from incline.report.show import Show
    from incline.result import DeviceFit, HeelFit, HeelPoint

__all__ = ["PANELS_IN_ROW", "common_plot", "device_plots"]

PANELS_IN_ROW = 3
_TITLE, _TITLE_LINE = 7.5, 9.2
"""Size of a panel's title and height of a line of it [pt]."""


def common_plot(heel: HeelFit, show: Show, width: float, named: frozenset[int]) -> Plot:
    """All devices, each less its zero offset, with the common line; ``named`` points are ringed."""
    entries = [_fit_name(heel), *entries_of(heel, named)]
    return Plot(width, 236.0 + legend_height(entries, width), partial(_common, heel, show, named))


def _fit_name(heel: HeelFit) -> str:
    return "common line" if heel.method == "straight-line" else "common curve, as fitted"


def _common(heel: HeelFit, show: Show, named: frozenset[int], figure: Figure) -> None:
    width = 72.0 * float(figure.get_size_inches()[0])
    axes = add_panel(figure, 46.0, 28.0, width - 54.0, 192.0)
    unit = show.scale("moment")
    zero = {d.id: d.intercept for d in heel.devices}
    at = [(m, m * heel.slope) for m in _span(heel.points)]
    if heel.method != "straight-line":
        at = sorted({(p.moment, p.fitted - zero[p.device]) for p in heel.points})
    axes.plot(
        [m / unit for m, _ in at], [t for _, t in at], color=INK, linewidth=0.9,
        label=_fit_name(heel), zorder=1,
    )  # fmt: skip
    for index, device in enumerate(heel.devices):
        some = [p for p in heel.points if p.device == device.id]
        _scatter(axes, some, [p.tangent - device.intercept for p in some], mark(index), unit)
    keys(axes, entries_of(heel, named))
    some = [heel.points[i] for i in sorted(named)]
    ring(axes, [p.moment / unit for p in some], [p.tangent - zero[p.device] for p in some])
    _origin(axes)
    tell_shifts(axes, [(p.moment / unit, p.tangent - zero[p.device], p) for p in heel.points])
    axes.set_title("All devices: tangent less the device's zero offset")
    axes.set_xlabel(f"moment to starboard [{show.unit('moment')}]")
    axes.set_ylabel("tangent of heel")
    legend(figure, *axes.get_legend_handles_labels())


def device_plots(heel: HeelFit, show: Show, width: float, named: frozenset[int]) -> list[Plot]:
    """Each device by itself, some in a row: its own line drawn, the common slope dashed."""
    numbered = list(enumerate(heel.devices))
    rows = [numbered[i : i + PANELS_IN_ROW] for i in range(0, len(numbered), PANELS_IN_ROW)]
    return [
        Plot(
            width,
            150.0 + _TITLE_LINE * (_title_lines(row, width) - 1),
            partial(_device_row, heel, row, show, named),
        )
        for row in rows
    ]


def _title(device: DeviceFit, width: float) -> str:
    return wrapped(device.id, _TITLE, width / PANELS_IN_ROW - 44.0, bold=True)


def _title_lines(row: Sequence[tuple[int, DeviceFit]], width: float) -> int:
    return max(_title(d, width).count("\n") + 1 for _, d in row)


def _device_row(
    heel: HeelFit,
    row: Sequence[tuple[int, DeviceFit]],
    show: Show,
    named: frozenset[int],
    figure: Figure,
) -> None:
    width = 72.0 * float(figure.get_size_inches()[0])
    each = width / PANELS_IN_ROW
    for nth, (index, device) in enumerate(row):
        axes = add_panel(figure, nth * each + 40.0, 27.0, each - 48.0, 106.0)
        _device_panel(axes, heel, index, device, show)
        some = [heel.points[i] for i in sorted(named) if heel.points[i].device == device.id]
        ring(axes, [p.moment / show.scale("moment") for p in some], [p.tangent for p in some])
        axes.set_title(_title(device, width))
        axes.set_xlabel(f"moment [{show.unit('moment')}]")
        axes.set_ylabel("tangent as read")


def _device_panel(axes: Axes, heel: HeelFit, index: int, device: DeviceFit, show: Show) -> None:
    some = [p for p in heel.points if p.device == device.id]
    counted = [p for p in some if not p.excluded]
    unit, look = show.scale("moment"), mark(index)
    _scatter(axes, some, [p.tangent for p in some], look, unit)
    if counted:
        # A least-squares line passes through the mean of its points.
        mean_moment = statistics.fmean(p.moment for p in counted)
        mean_tangent = statistics.fmean(p.tangent for p in counted)
        ends = _span(some)
        for slope, ink, dash in (
            (device.slope, look.colour, (0, ())),
            (heel.slope, GREY, (0, (4, 2))),
        ):
            heights = [mean_tangent + slope * (m - mean_moment) for m in ends]
            axes.plot([m / unit for m in ends], heights, color=ink, linestyle=dash, linewidth=0.9)
    _origin(axes)
    axes.locator_params(nbins=5)
    tell_shifts(axes, [(p.moment / unit, p.tangent, p) for p in some])


def _scatter(
    axes: Axes, points: Sequence[HeelPoint], heights: Sequence[float], look: Mark, unit: float
) -> None:
    """Points at their moments; excluded ones crossed."""
    pairs = list(zip(points, heights, strict=True))
    kept = [(p.moment / unit, h) for p, h in pairs if not p.excluded]
    dots(axes, [m for m, _ in kept], [h for _, h in kept], look)
    out = [(p.moment / unit, h) for p, h in pairs if p.excluded]
    crossed(axes, [m for m, _ in out], [h for _, h in out], look)


def _origin(axes: Axes) -> None:
    """Lines through zero, where zero lies within the points."""
    (low, high), (left, right) = axes.get_ylim(), axes.get_xlim()
    if low < 0.0 < high:
        axes.axhline(0.0, color=GREY, linewidth=0.5, zorder=0.5)
    if left < 0.0 < right:
        axes.axvline(0.0, color=GREY, linewidth=0.5, zorder=0.5)


def _span(points: Sequence[HeelPoint]) -> tuple[float, float]:
    moments = [p.moment for p in points]
    margin = 0.04 * (max(moments) - min(moments))
    return min(moments) - margin, max(moments) + margin
