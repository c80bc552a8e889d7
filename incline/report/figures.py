"""Plots of the heel fit: tangent against moment, together and by device, and the residuals."""

from __future__ import annotations

import statistics
from functools import partial
from typing import TYPE_CHECKING, Any

from incline.report.figure_style import (
    EXCLUDED,
    GREY,
    INK,
    NAMED,
    Mark,
    Plot,
    add_panel,
    dots,
    key,
    legend,
    legend_height,
    mark,
    ring,
)
from incline.report.figure_text import wrapped
from incline.report.text import elide

if TYPE_CHECKING:
    from collections.abc import Sequence

    from matplotlib.axes import Axes
    from matplotlib.figure import Figure

    from incline.report.show import Show
    from incline.result import DeviceFit, Diagnosis, HeelFit, HeelPoint

__all__ = ["PANELS_IN_ROW", "common_plot", "device_plots", "named_by", "residual_plot"]

PANELS_IN_ROW = 3
_THOUSANDTHS = 1000.0
_LABEL = 110
"""Most characters of a device's name in a legend."""
_TITLE, _TITLE_LINE = 7.5, 9.2
"""Size of a panel's title and height of a line of it [pt]."""


def named_by(heel: HeelFit, found: Diagnosis | None) -> frozenset[int]:
    """Indices of the points that the leading findings name.

    A finding names the points of its shift, of its device there if it has one; without a shift,
    those that its pattern moves by more than half of what it moves any.
    """
    named: set[int] = set()
    kept = [i for i, p in enumerate(heel.points) if not p.excluded]
    base = [heel.points[i].fitted for i in kept]
    for finding in () if found is None else found.findings:
        if finding.rank:
            continue
        if finding.shift is not None:
            at = finding.shift
            some = [i for i in kept if heel.points[i].shift == at]
            named |= {i for i in some if finding.device in (None, heel.points[i].device)}
        elif finding.expected:
            moved = [abs(e - b) for e, b in zip(finding.expected, base, strict=True)]
            named |= {i for i, m in zip(kept, moved, strict=True) if m > 0.5 * max(moved)}
        base = list(finding.expected) or base
    return frozenset(named)


def _entries(heel: HeelFit, named: frozenset[int]) -> list[str]:
    """What the legend names, after the line: devices, exclusions, findings."""
    more = [EXCLUDED] if any(p.excluded for p in heel.points) else []
    return [*(elide(d.id, _LABEL) for d in heel.devices), *more, *([NAMED] if named else [])]


def _keys(axes: Axes, entries: Sequence[str]) -> None:
    """The legend's entries without points in the plot."""
    for index, name in enumerate(entries):
        if name == EXCLUDED:
            key(axes, Mark("x", INK, (0, ()), INK), name)
        elif name == NAMED:
            key(axes, Mark("o", INK, (0, ()), "none"), name, 8.0)
        else:
            key(axes, mark(index), name)


def common_plot(heel: HeelFit, show: Show, width: float, named: frozenset[int]) -> Plot:
    """All devices, each less its zero offset, with the common line; ``named`` points are ringed."""
    entries = ["common line", *_entries(heel, named)]
    return Plot(width, 236.0 + legend_height(entries, width), partial(_common, heel, show, named))


def _common(heel: HeelFit, show: Show, named: frozenset[int], figure: Figure) -> None:
    width = 72.0 * float(figure.get_size_inches()[0])
    axes = add_panel(figure, 46.0, 28.0, width - 54.0, 192.0)
    unit = show.scale("moment")
    zero = {d.id: d.intercept for d in heel.devices}
    ends = _span(heel.points)
    axes.plot(
        [m / unit for m in ends], [m * heel.slope for m in ends], color=INK, linewidth=0.9,
        label="common line", zorder=1,
    )  # fmt: skip
    for index, device in enumerate(heel.devices):
        some = [p for p in heel.points if p.device == device.id]
        _scatter(axes, some, [p.tangent - device.intercept for p in some], mark(index), unit)
    _keys(axes, _entries(heel, named))
    some = [heel.points[i] for i in sorted(named)]
    ring(axes, [p.moment / unit for p in some], [p.tangent - zero[p.device] for p in some])
    _origin(axes)
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


def residual_plot(heel: HeelFit, show: Show, width: float, named: frozenset[int]) -> Plot:
    """Residuals against moment, and against the shift to show what changes with time.

    The scale is that of the readings that count; an excluded one beyond it stands at the edge with
    its value. At a shift the devices stand side by side.
    """
    entries = _entries(heel, named)
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
    for index in range(len(names)):
        _residuals((left, right), heel, index, limit, unit)
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
    _keys(left, _entries(heel, named))
    legend(figure, *left.get_legend_handles_labels())


def _beside(point: HeelPoint, index: int, of: int) -> float:
    """Where a device's point stands at its shift: side by side with the others."""
    return point.shift + (0.0 if of < 2 else 0.62 * (index / (of - 1) - 0.5))


def _residuals(
    panels: tuple[Axes, Axes], heel: HeelFit, index: int, limit: float, unit: float
) -> None:
    """The residuals of one device in both panels."""
    (left, right), look, of = panels, mark(index), len(heel.devices)
    some = [p for p in heel.points if p.device == heel.devices[index].id]
    kept = [p for p in some if not p.excluded]
    heights = [p.residual * _THOUSANDTHS for p in kept]
    dots(left, [p.moment / unit for p in kept], heights, look)
    dots(right, [_beside(p, index, of) for p in kept], heights, look)
    for p in some:
        if p.excluded:
            value = p.residual * _THOUSANDTHS
            height = max(-0.93 * limit, min(0.93 * limit, value))
            _crossed(left, [p.moment / unit], [height], look)
            _crossed(right, [_beside(p, index, of)], [height], look)
            told = f"{value:+.2f}".replace("-", "−")
            _tell(right, (_beside(p, index, of), height), told)


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
    """Points at their moments; excluded ones crossed, with their shift."""
    pairs = list(zip(points, heights, strict=True))
    kept = [(p.moment / unit, h) for p, h in pairs if not p.excluded]
    dots(axes, [m for m, _ in kept], [h for _, h in kept], look)
    out = [(p.moment / unit, h) for p, h in pairs if p.excluded]
    _crossed(axes, [m for m, _ in out], [h for _, h in out], look)
    for (x, y), p in zip(out, (p for p, _ in pairs if p.excluded), strict=True):
        axes.annotate(
            f"shift {p.shift}", (x, y), xytext=(6, -8), textcoords="offset points", fontsize=6
        )


def _crossed(axes: Axes, x: Sequence[float], y: Sequence[float], look: Mark) -> None:
    style: dict[str, Any] = {"linestyle": "none", "color": look.colour, "markeredgewidth": 0.8}
    axes.plot(x, y, marker=look.shape, markerfacecolor="none", **style)
    axes.plot(x, y, marker="x", markersize=7.5, **style)


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
