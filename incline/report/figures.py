"""Plots of the heel fit: tangent against moment, together and by device, and the residuals."""

from __future__ import annotations

import statistics
from typing import TYPE_CHECKING, Any

from incline.report.figure_style import (
    GREY,
    Mark,
    add_panel,
    blank_figure,
    drawing_style,
    mark,
)
from incline.report.text import elide

if TYPE_CHECKING:
    from collections.abc import Sequence

    from matplotlib.axes import Axes
    from matplotlib.figure import Figure

    from incline.report.show import Show
    from incline.result import DeviceFit, HeelFit, HeelPoint

__all__ = ["PANELS_IN_ROW", "common_plot", "device_plots", "residual_plot"]

PANELS_IN_ROW = 3
_THOUSANDTHS = 1000.0
_LABEL = 22
"""Most characters of a device's name in a plot."""


def common_plot(heel: HeelFit, show: Show, width: float) -> Figure:
    """All devices, each less its zero offset, with the common line."""
    with drawing_style():
        figure = blank_figure(width, 236.0)
        axes = add_panel(figure, 46.0, 28.0, width - 54.0, 192.0)
        unit = show.scale("moment")
        for index, device in enumerate(heel.devices):
            some = [p for p in heel.points if p.device == device.id]
            _scatter(axes, some, [p.tangent - device.intercept for p in some], mark(index), unit)
            _key(axes, mark(index), elide(device.id, _LABEL))
        ends = _span(heel.points)
        axes.plot(
            [m / unit for m in ends],
            [m * heel.slope for m in ends],
            color="black",
            linewidth=0.9,
            label="common line",
            zorder=1,
        )
        if any(p.excluded for p in heel.points):
            _key(axes, Mark("x", "black", (0, ())), "crossed: excluded")
        _origin(axes)
        axes.set_title("All devices: tangent less the device's zero offset")
        axes.set_xlabel(f"moment to starboard [{show.unit('moment')}]")
        axes.set_ylabel("tangent of heel")
        axes.legend(loc="upper left")
    return figure


def device_plots(heel: HeelFit, show: Show, width: float) -> list[Figure]:
    """Each device by itself, some in a row: its own line drawn, the common slope dashed."""
    numbered = list(enumerate(heel.devices))
    with drawing_style():
        return [
            _device_row(heel, numbered[i : i + PANELS_IN_ROW], show, width)
            for i in range(0, len(numbered), PANELS_IN_ROW)
        ]


def _device_row(
    heel: HeelFit, devices: Sequence[tuple[int, DeviceFit]], show: Show, width: float
) -> Figure:
    figure = blank_figure(width, 150.0)
    each = width / PANELS_IN_ROW
    for place, (index, device) in enumerate(devices):
        axes = add_panel(figure, place * each + 40.0, 27.0, each - 48.0, 106.0)
        _device_panel(axes, heel, index, device, show)
    return figure


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
    axes.set_title(elide(device.id, _LABEL))
    axes.set_xlabel(f"moment [{show.unit('moment')}]")
    axes.set_ylabel("tangent as read")


def residual_plot(heel: HeelFit, show: Show, width: float) -> Figure:
    """Residuals against moment, and against the shift to show what changes with time.

    The scale is that of the readings that count; an excluded one beyond it stands at the edge with
    its value.
    """
    counted = [abs(p.residual) for p in heel.points if not p.excluded]
    limit = 1.3 * _THOUSANDTHS * max(max(counted, default=0.0), 1e-6)
    with drawing_style():
        keys = 10.0 * -(-len(heel.devices) // 4)  # lines of the legend above the panels
        figure = blank_figure(width, 154.0 + keys)
        half = (width - 46.0) / 2.0
        left = add_panel(figure, 40.0, 27.0, half - 14.0, 108.0)
        right = add_panel(figure, 40.0 + half + 18.0, 27.0, half - 24.0, 108.0)
        for index, device in enumerate(heel.devices):
            _residuals((left, right), heel, (index, device), limit, show.scale("moment"))
        left.set_title("Residuals against moment")
        left.set_xlabel(f"moment to starboard [{show.unit('moment')}]")
        left.set_ylabel("residual of tangent × 1000")
        right.set_title("Residuals in the order of the shifts")
        right.set_xlabel("shift")
        shifts = sorted({p.shift for p in heel.points})
        right.set_xticks(shifts[:: max(1, len(shifts) // 12)])
        for axes in (left, right):
            axes.axhline(0.0, color="black", linewidth=0.6, zorder=1)
            axes.set_ylim(-limit, limit)
        figure.legend(*left.get_legend_handles_labels(), loc="upper left", ncols=4)
    return figure


def _residuals(
    panels: tuple[Axes, Axes],
    heel: HeelFit,
    numbered: tuple[int, DeviceFit],
    limit: float,
    unit: float,
) -> None:
    """The residuals of one device in both panels."""
    (left, right), look = panels, mark(numbered[0])
    some = [p for p in heel.points if p.device == numbered[1].id]
    kept = [p for p in some if not p.excluded]
    heights = [p.residual * _THOUSANDTHS for p in kept]
    _dots(left, [p.moment / unit for p in kept], heights, look)
    _dots(right, [p.shift for p in kept], heights, look, joined=True)
    _key(left, look, elide(numbered[1].id, _LABEL))
    for p in some:
        if p.excluded:
            value = p.residual * _THOUSANDTHS
            height = max(-0.93 * limit, min(0.93 * limit, value))
            _crossed(left, [p.moment / unit], [height], look)
            _crossed(right, [p.shift], [height], look)
            _tell(right, (p.shift, height), f"{value:+.2f}".replace("-", "−"))


def _dots(
    axes: Axes, x: Sequence[float], y: Sequence[float], look: Mark, *, joined: bool = False
) -> None:
    axes.plot(
        x,
        y,
        linestyle=look.dash if joined else "none",
        linewidth=0.6,
        marker=look.shape,
        color=look.colour,
        markerfacecolor="white",
        markeredgewidth=0.9,
    )


def _tell(axes: Axes, at: tuple[float, float], text: str) -> None:
    """A word beside a point, on the side where there is room and towards the middle."""
    low, high = axes.get_xlim()
    last = at[0] > (low + high) / 2.0
    axes.annotate(
        text,
        at,
        xytext=(-6 if last else 6, -7 if at[1] > 0.0 else 3),
        textcoords="offset points",
        ha="right" if last else "left",
        fontsize=6,
    )


def _scatter(
    axes: Axes, points: Sequence[HeelPoint], heights: Sequence[float], look: Mark, unit: float
) -> None:
    """Points at their moments; excluded ones hollow and crossed, with their shift."""
    pairs = list(zip(points, heights, strict=True))
    kept = [(p.moment / unit, h) for p, h in pairs if not p.excluded]
    _dots(axes, [m for m, _ in kept], [h for _, h in kept], look)
    out = [(p.moment / unit, h) for p, h in pairs if p.excluded]
    _crossed(axes, [m for m, _ in out], [h for _, h in out], look)
    for (x, y), p in zip(out, (p for p, _ in pairs if p.excluded), strict=True):
        axes.annotate(
            f"shift {p.shift}", (x, y), xytext=(5, -8), textcoords="offset points", fontsize=6
        )


def _crossed(axes: Axes, x: Sequence[float], y: Sequence[float], look: Mark) -> None:
    style: dict[str, Any] = {"linestyle": "none", "color": look.colour, "markeredgewidth": 0.8}
    axes.plot(x, y, marker=look.shape, markerfacecolor="none", **style)
    axes.plot(x, y, marker="x", markersize=7.5, **style)


def _key(axes: Axes, look: Mark, name: str) -> None:
    """An entry of the legend without a point in the plot."""
    axes.plot(
        [],
        [],
        linestyle="none",
        marker=look.shape,
        color=look.colour,
        markerfacecolor="white",
        markeredgewidth=0.9,
        label=name,
    )


def _origin(axes: Axes) -> None:
    axes.axhline(0.0, color=GREY, linewidth=0.5, zorder=0)
    axes.axvline(0.0, color=GREY, linewidth=0.5, zorder=0)


def _span(points: Sequence[HeelPoint]) -> tuple[float, float]:
    moments = [p.moment for p in points]
    margin = 0.04 * (max(moments) - min(moments))
    return min(moments) - margin, max(moments) + margin
