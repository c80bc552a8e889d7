"""The profile sketch: drafts as read and the waterline fitted through them."""

from __future__ import annotations

from dataclasses import dataclass
from functools import partial
from typing import TYPE_CHECKING

from incline.report.figure_style import GREY, INK, Mark, Plot, add_panel, key, legend, ring

if TYPE_CHECKING:
    from collections.abc import Sequence

    from matplotlib.axes import Axes
    from matplotlib.figure import Figure

    from incline.report.show import Show
    from incline.result import DraftResidual, Waterline

__all__ = ["waterline_plot"]

_EXAGGERATIONS = tuple(
    m * 10**p for p in range(5) for m in (1.0, 1.5, 2.0, 2.5, 3.0, 4.0, 5.0, 7.5)
)
_SIDES = {"P": ("<", "port"), "S": (">", "starboard"), "C": ("o", "centreline")}
_END = 0.05
"""Room before and behind the perpendiculars, as a share of the length."""


@dataclass(frozen=True, slots=True)
class _Profile:
    """A panel: the curve and the readings as heights [m], and one shown unit of each axis [m]."""

    curve: tuple[float, ...]
    dots: tuple[float, ...]
    across: float
    up: float


def waterline_plot(line: Waterline, lpp: float, show: Show, width: float) -> Plot:
    """Drafts and fitted waterline above the baseline; below, both less the straight line.

    Both panels state how much their heights are exaggerated. In the lower one a stem is a residual.
    """
    return Plot(width, 262.0, partial(_both, line, lpp, show))


def _both(line: Waterline, lpp: float, show: Show, figure: Figure) -> None:
    width = 72.0 * float(figure.get_size_inches()[0])
    metre, small = show.scale("length"), show.scale("reading")
    shares = [i / 40.0 for i in range(41)]
    bend = tuple((line.deflection or 0.0) * (1.0 - (2.0 * s - 1.0) ** 2) for s in shares)
    rise = line.draft_fp - line.draft_ap
    whole = _Profile(
        tuple(line.draft_ap + rise * s + b for s, b in zip(shares, bend, strict=True)),
        tuple(r.draft for r in line.residuals),
        metre,
        metre,
    )
    bent = _Profile(
        bend, tuple(_bend_at(line, r.x / lpp) + r.residual for r in line.residuals), metre, small
    )
    size = (width - 48.0, 84.0)
    upper = add_panel(figure, 40.0, 142.0, *size)
    lower = add_panel(figure, 40.0, 27.0, size[0], 84.0)
    tall = _draw(upper, whole, line, lpp, size, [0.0])
    # At least 4 mm of height, so that rounding alone does not fill the panel.
    steep = _draw(lower, bent, line, lpp, size, [-2e-3, 2e-3])
    _stems(lower, line, bent, lpp)
    upper.axhline(0.0, color=INK, linewidth=0.9)
    upper.text(lpp / 2.0 / metre, 0.0, "baseline", ha="center", va="bottom", fontsize=6.5)
    upper.set_title(f"Drafts and fitted waterline; heights {tall:g} times the lengths")
    upper.set_ylabel(f"above baseline [{show.unit('length')}]")
    what = "Deflection" if line.deflection is not None else "Straight line"
    lower.set_title(
        f"{what} and residuals, trim and list taken out; heights {steep:g} times the lengths"
    )
    lower.set_ylabel(f"sag +, hog − [{show.unit('reading')}]")
    lower.set_xlabel(f"x forward of the after perpendicular [{show.unit('length')}]")
    if any(r.flagged for r in line.residuals):
        key(upper, Mark("o", INK, (0, ()), "none"), "ringed: flagged", 8.0)
    legend(figure, *upper.get_legend_handles_labels())


def _stems(axes: Axes, line: Waterline, profile: _Profile, lpp: float) -> None:
    """From the curve to each reading: its residual."""
    for r, height in _pairs(line, profile):
        ends = (_bend_at(line, r.x / lpp) / profile.up, height / profile.up)
        axes.plot([r.x / profile.across] * 2, ends, color=GREY, linewidth=0.6, zorder=1)


def _bend_at(line: Waterline, share: float) -> float:
    return (line.deflection or 0.0) * (1.0 - (2.0 * share - 1.0) ** 2)


def _draw(
    axes: Axes,
    profile: _Profile,
    line: Waterline,
    lpp: float,
    size: tuple[float, float],
    also: Sequence[float],
) -> float:
    """Draw one panel on limits that hold every height and ``also``; returns its exaggeration."""
    left, right = -_END * lpp, (1.0 + _END) * lpp
    heights = [*profile.curve, *profile.dots, *also]
    low, high, factor = _limits(heights, (right - left) * size[1] / size[0])
    axes.set_xlim(left / profile.across, right / profile.across)
    axes.set_ylim(low / profile.up, high / profile.up)
    for x, name in ((0.0, "AP"), (lpp, "FP")):
        axes.axvline(x / profile.across, color=GREY, linewidth=0.7, dashes=(6.0, 2.0, 1.5, 2.0))
        axes.text(
            (x + 0.005 * lpp) / profile.across, high / profile.up, name, va="top", fontsize=6.5
        )
    along = [lpp * i / 40.0 / profile.across for i in range(41)]
    axes.plot(along, [c / profile.up for c in profile.curve], color=INK, label="fitted waterline")
    for side, (shape, name) in _SIDES.items():
        _dots(
            axes, shape, name, profile, [(r, h) for r, h in _pairs(line, profile) if r.side == side]
        )
    return factor


def _pairs(line: Waterline, profile: _Profile) -> list[tuple[DraftResidual, float]]:
    return list(zip(line.residuals, profile.dots, strict=True))


def _dots(
    axes: Axes,
    shape: str,
    name: str,
    profile: _Profile,
    some: Sequence[tuple[DraftResidual, float]],
) -> None:
    """Draft readings of one side; a flagged one is circled."""
    if not some:
        return
    x = [r.x / profile.across for r, _ in some]
    axes.plot(
        x,
        [h / profile.up for _, h in some],
        linestyle="none",
        marker=shape,
        color=INK,
        markerfacecolor="white" if name == "port" else INK,
        markeredgewidth=0.8,
        label=f"mark, {name}",
        clip_on=False,
    )
    odd = [(r.x / profile.across, h / profile.up) for r, h in some if r.flagged]
    ring(axes, [x for x, _ in odd], [h for _, h in odd])


def _limits(heights: Sequence[float], natural: float) -> tuple[float, float, float]:
    """Height limits [m] at the largest round exaggeration that shows all heights.

    ``natural`` [m] is the height of the panel at the scale of its lengths.
    """
    low, high = min(heights), max(heights)
    span = (high - low) * 1.2
    factor = max((e for e in _EXAGGERATIONS if natural / e >= span), default=1.0)
    shown = natural / factor
    bottom = low - 0.4 * (shown - (high - low)) if low < 0.0 else low - 0.08 * shown
    return bottom, bottom + shown, factor
