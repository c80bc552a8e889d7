"""Plots of the uncertainty: shares of the inputs in KG, and the distribution of KG."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

from matplotlib.patches import Patch

from incline.defaults import LABEL
from incline.report.figure_style import add_panel, blank_figure, drawing_style
from incline.report.text import elide
from incline.sources import SEEN, STATED

if TYPE_CHECKING:
    from collections.abc import Sequence

    from matplotlib.axes import Axes
    from matplotlib.figure import Figure

    from incline.report.show import Show
    from incline.result import Budget, BudgetLine, Estimate, Simulated, Simulation

__all__ = ["distribution_plot", "share_plot"]

_NAME = 50
"""Most characters of an input's name beside its bar."""
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


def share_plot(budget: Budget, shown: Sequence[BudgetLine], width: float) -> Figure:
    """Shares of the variance as bars, the largest on top; the shade tells the basis."""
    bars = [(line.name, 100.0 * line.share, _basis(line)) for line in shown]
    rest = len(budget.lines) - len(shown)
    if rest:
        share = sum(x.share for x in budget.lines) - sum(x.share for x in shown)
        bars.append((f"{rest} further input{'s' if rest > 1 else ''}", 100.0 * share, "rest"))
    high = 11.5 * len(bars)
    with drawing_style():
        figure = blank_figure(width, high + 48.0)
        axes = add_panel(figure, 200.0, 28.0, width - 220.0, high + 2.0)
        for i, (_, share, basis) in enumerate(bars):
            shade = _SHADES["assumed" if basis == "own" else basis]
            dash = (0, (1.5, 1.0)) if basis == "own" else "solid"
            axes.barh(
                i, share, height=0.66, color=shade, edgecolor="black", linewidth=0.6, linestyle=dash
            )
            _value(axes, share, i)
        axes.set_yticks(range(len(bars)), [elide(name, _NAME) for name, _, _ in bars])
        axes.set_ylim(len(bars) - 0.45, -0.55)
        axes.margins(x=0.09)
        axes.grid(visible=False, axis="y")
        axes.tick_params(axis="y", length=0)
        axes.axvline(0.0, color="black", linewidth=0.6)
        axes.set_xlabel("share of the variance of KG [%]")
        _shades(figure, dict.fromkeys(basis for _, _, basis in bars if basis != "rest"))
    return figure


def _basis(line: BudgetLine) -> str:
    if line.basis.startswith("assumed"):
        return "assumed" if line.basis == LABEL else "own"
    return {STATED: "stated", SEEN: "seen"}.get(line.basis, "estimated")


def _value(axes: Axes, share: float, height: int) -> None:
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


def _shades(figure: Figure, bases: dict[str, None]) -> None:
    keys = [
        Patch(
            facecolor=_SHADES["assumed" if b == "own" else b],
            edgecolor="black",
            linewidth=0.6,
            linestyle=(0, (1.5, 1.0)) if b == "own" else "solid",
            label=_WORDS[b],
        )
        for b in bases
    ]
    figure.legend(handles=keys, loc="upper left", ncols=len(keys), columnspacing=1.4)


def distribution_plot(
    run: Simulation, kg: Simulated, found: Estimate, limit: float | None, show: Show, width: float
) -> Figure:
    """The simulated KG as steps, the first-order curve over it, interval ends, and the limit."""
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
    with drawing_style():
        figure = blank_figure(width, 190.0)
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
                color="black",
                linewidth=1.0,
                label="first order",
            )
        _ends(axes, kg, found, scale)
        if limit is not None and low <= limit <= high:
            axes.axvline(limit / scale, color="black", linewidth=1.8, label="limit of the trial")
        axes.set_xlim(low / scale, high / scale)
        axes.set_ylim(bottom=0.0)
        axes.set_xlabel(f"KG of lightship [{show.unit('length')}]")
        axes.set_ylabel(f"density [1/{show.unit('length')}]")
        figure.legend(*axes.get_legend_handles_labels(), loc="upper left", ncols=5)
    return figure


def _ends(axes: Axes, kg: Simulated, found: Estimate, scale: float) -> None:
    """Ends of both 95 % intervals."""
    value, wide = found.value or 0.0, found.U or 0.0
    for ends, dash, name in (
        (kg.symmetric, (0, (5.0, 2.0)), "95 %, simulated"),
        ((value - wide, value + wide), (0, (1.5, 1.5)), "95 %, first order"),
    ):
        for i, end in enumerate(ends):
            axes.axvline(
                end / scale, color="black", linewidth=0.9, linestyle=dash,
                label="_" if i else name,
            )  # fmt: skip


def density(z: float, dof: float | None) -> float:
    """Probability density of Student's t at ``z``; of the normal without degrees of freedom."""
    if dof is None or dof > 1e6:
        return math.exp(-0.5 * z * z) / math.sqrt(2.0 * math.pi)
    rise = math.lgamma((dof + 1.0) / 2.0) - math.lgamma(dof / 2.0)
    return math.exp(rise - (dof + 1.0) / 2.0 * math.log1p(z * z / dof)) / math.sqrt(dof * math.pi)
