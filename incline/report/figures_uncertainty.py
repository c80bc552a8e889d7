"""Plots of the uncertainty: shares of the inputs in KG, and the distribution of KG."""

from __future__ import annotations

import math
from functools import partial
from itertools import accumulate, pairwise
from typing import TYPE_CHECKING

from matplotlib.patches import Patch

from incline.defaults import LABEL
from incline.report.figure_style import INK, Plot, add_panel, legend, legend_height
from incline.report.figure_text import widest, wrapped
from incline.sources import SEEN, STATED

if TYPE_CHECKING:
    from collections.abc import Sequence

    from matplotlib.axes import Axes
    from matplotlib.figure import Figure

    from incline.report.show import Show
    from incline.result import Budget, BudgetLine, Estimate, Simulated, Simulation

__all__ = ["distribution_plot", "share_plot"]

_LEFT, _SIZE, _BAR, _LINE = 200.0, 6.5, 11.5, 7.8
"""Most room for names beside the bars, their size, height of a bar and of a line [pt]."""
_SHADES = {"stated": "0.0", "assumed": "1.0", "seen": "0.72", "estimated": "0.42", "rest": "0.9"}
_WORDS = {
    "stated": "stated by the trial",
    "assumed": LABEL,
    "own": "assumed: the trial's own",
    "seen": SEEN,
    "estimated": "estimated",
}
_REACH = 4.5
"""Standard uncertainties to each side of KG that the distribution is drawn over."""


def share_plot(budget: Budget, shown: Sequence[BudgetLine], width: float) -> Plot:
    """Shares of the variance as bars, the largest on top; the shade tells the basis."""
    bars = [(line.name, 100.0 * line.share, _basis(line)) for line in shown]
    rest = len(budget.lines) - len(shown)
    if rest:
        share = sum(x.share for x in budget.lines) - sum(x.share for x in shown)
        bars.append((f"{rest} further input{'s' if rest > 1 else ''}", 100.0 * share, "rest"))
    names = [wrapped(name, _SIZE, _LEFT - 12.0) for name, _, _ in bars]
    bases = list(dict.fromkeys(basis for _, _, basis in bars if basis != "rest"))
    keys = legend_height([_WORDS[b] for b in bases], width)
    high = sum(_BAR + _LINE * n.count("\n") for n in names)
    paint = partial(_shares, bars, names, bases)
    return Plot(width, high + 34.0 + keys, paint)


def _shares(
    bars: Sequence[tuple[str, float, str]],
    names: Sequence[str],
    bases: Sequence[str],
    figure: Figure,
) -> None:
    width = 72.0 * float(figure.get_size_inches()[0])
    heights = [_BAR + _LINE * n.count("\n") for n in names]
    tops = [0.0, *accumulate(heights)]
    middles = [(a + b) / 2.0 for a, b in pairwise(tops)]
    left = 12.0 + max(widest(n, _SIZE) for n in names)
    axes = add_panel(figure, left, 28.0, width - left - 20.0, tops[-1] + 2.0)
    for middle, (_, share, basis) in zip(middles, bars, strict=True):
        shade = _SHADES["assumed" if basis == "own" else basis]
        dash = (0, (1.5, 1.0)) if basis == "own" else "solid"
        axes.barh(
            middle, share, height=0.66 * _BAR, color=shade, edgecolor=INK, linewidth=0.6,
            linestyle=dash,
        )  # fmt: skip
        _value(axes, share, middle)
    axes.set_yticks(middles, names)
    axes.set_ylim(tops[-1] + 1.0, -1.0)
    axes.margins(x=0.09)
    axes.grid(visible=False, axis="y")
    axes.tick_params(axis="y", length=0)
    axes.axvline(0.0, color=INK, linewidth=0.6)
    axes.set_xlabel("share of the variance of KG [%]")
    patches = [
        Patch(
            facecolor=_SHADES["assumed" if b == "own" else b], edgecolor=INK, linewidth=0.6,
            linestyle=(0, (1.5, 1.0)) if b == "own" else "solid",
        )
        for b in bases
    ]  # fmt: skip
    legend(figure, patches, [_WORDS[b] for b in bases])


def _basis(line: BudgetLine) -> str:
    if line.basis.startswith("assumed"):
        return "assumed" if line.basis == LABEL else "own"
    return {STATED: "stated", SEEN: "seen"}.get(line.basis, "estimated")


def _value(axes: Axes, share: float, height: float) -> None:
    """The share at the outer end of its bar."""
    axes.annotate(
        f"{share:.1f}".replace("-", "−"),
        (share, height),
        xytext=(-3 if share < 0.0 else 3, 0),
        textcoords="offset points",
        ha="right" if share < 0.0 else "left",
        va="center",
        fontsize=6,
    )


def distribution_plot(
    run: Simulation, kg: Simulated, found: Estimate, limit: float | None, show: Show, width: float
) -> Plot:
    """The simulated KG as steps, the first-order curve over it, interval ends, and the limit."""
    return Plot(width, 190.0, partial(_distribution, run, kg, found, limit, show))


def _distribution(
    run: Simulation, kg: Simulated, found: Estimate, limit: float | None, show: Show, figure: Figure
) -> None:
    width = 72.0 * float(figure.get_size_inches()[0])
    value, u, scale = found.value or 0.0, found.u or 0.0, show.scale("length")
    reach = max(_REACH * u, 1.2 * (kg.symmetric[1] - kg.symmetric[0]) / 2.0)
    low, high = value - reach, value + reach
    if limit is not None and abs(limit - value) < 2.0 * reach:
        low, high = min(low, limit - 0.1 * reach), max(high, limit + 0.1 * reach)
    edges, counts = run.kg_edges, run.kg_counts
    heights = [
        c * scale / (run.draws * (b - a))
        for c, a, b in zip(counts, edges[:-1], edges[1:], strict=True)
    ]
    axes = add_panel(figure, 46.0, 28.0, width - 54.0, 140.0)
    axes.stairs(
        heights, [e / scale for e in edges], fill=True, facecolor="0.85", edgecolor="0.45",
        linewidth=0.6, label="simulated",
    )  # fmt: skip
    if u > 0.0:
        places = [low + (high - low) * i / 240.0 for i in range(241)]
        curve = [density((x - value) / u, found.dof) * scale / u for x in places]
        axes.plot(
            [x / scale for x in places],
            curve,
            color=INK,
            linewidth=1.0,
            label="first order",
        )
    _ends(axes, kg, found, scale)
    if limit is not None and low <= limit <= high:
        axes.axvline(limit / scale, color=INK, linewidth=1.8, label="limit of the trial")
    axes.set_xlim(low / scale, high / scale)
    axes.set_ylim(bottom=0.0)
    axes.set_xlabel(f"KG of lightship [{show.unit('length')}]")
    axes.set_ylabel(f"density [1/{show.unit('length')}]")
    legend(figure, *axes.get_legend_handles_labels())


def _ends(axes: Axes, kg: Simulated, found: Estimate, scale: float) -> None:
    """Ends of both 95 % intervals."""
    value, wide = found.value or 0.0, found.U or 0.0
    for ends, dash, name in (
        (kg.symmetric, (0, (5.0, 2.0)), "95 %, simulated"),
        ((value - wide, value + wide), (0, (1.5, 1.5)), "95 %, first order"),
    ):
        for i, end in enumerate(ends):
            axes.axvline(
                end / scale, color=INK, linewidth=0.9, linestyle=dash,
                label="_" if i else name,
            )  # fmt: skip


def density(z: float, dof: float | None) -> float:
    """Probability density of Student's t at ``z``; of the normal without degrees of freedom."""
    if dof is None or dof > 1e6:
        return math.exp(-0.5 * z * z) / math.sqrt(2.0 * math.pi)
    rise = math.lgamma((dof + 1.0) / 2.0) - math.lgamma(dof / 2.0)
    return math.exp(rise - (dof + 1.0) / 2.0 * math.log1p(z * z / dof)) / math.sqrt(dof * math.pi)
