"""The Monte Carlo run: its figures, its verdict on the first-order intervals, the shape of KG."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from incline.report.amounts import (
    RESULTS,
    Quoted,
    budget_of,
    count_of,
    interval,
    percent,
    significant,
    simulated_of,
)
from incline.report.canvas_backend import FigureFlowable
from incline.report.document import Sheet, note, paragraph, part
from incline.report.figures_uncertainty import distribution_plot
from incline.report.show import MISSING
from incline.report.tables import Column, grid

if TYPE_CHECKING:
    from incline.result import Simulated, Simulation

__all__ = ["intervals", "limit", "monte_carlo", "verdict"]


def verdict(found: Simulated) -> str:
    """What clause 8 of JCGM 101 says of the first-order interval."""
    return "validated" if found.agrees else "not validated: take the simulated interval"


def monte_carlo(sheet: Sheet) -> list[Any]:
    """How many draws, what they gave, and the distribution of KG; or that there were none."""
    run = sheet.reduction.simulation
    if run is None:
        return [
            paragraph(
                "No Monte Carlo run was made; the intervals are first order and not checked "
                "by simulation."
            ),
        ]
    return [
        paragraph(_told(run)),
        _table(sheet, run),
        note(
            "Verdict by JCGM 101, clause 8: the first-order interval is validated when both its "
            "ends are within the tolerance of the symmetric simulated interval; the tolerance is "
            "half a unit in the first significant digit of u." + _without_spread(run)
        ),
        *_shape(sheet, run),
    ]


def _without_spread(run: Simulation) -> str:
    """Why a result has no mean or standard deviation; empty where all have them."""
    if all(r.mean is not None and r.u is not None for r in run.results):
        return ""
    return (
        " A dash: an input of that result is known by so few degrees of freedom, two or fewer, that"
        " its distribution leaves the result without a mean or standard deviation; the intervals"
        " are sound."
    )


def _told(run: Simulation) -> str:
    ended = {
        True: "The run went on until its figures had settled (JCGM 101, 7.9).",
        None: "The number of draws was asked for.",
        False: "The run stopped at its largest number of draws before its figures had settled: "
        "take its last digits with care.",
    }[run.settled]
    return (
        f"All inputs were drawn at random {count_of(run.draws)} times and sent through the same "
        f"calculation; seed {run.seed}. {ended}"
    )


def _table(sheet: Sheet, run: Simulation) -> Any:  # noqa: ANN401 - untyped library
    columns = (
        Column("", 0.15, "left"),
        Column("mean", 0.09),
        Column("u", 0.08),
        Column("95 % interval, symmetric", 0.18),
        Column("95 % interval, shortest", 0.18),
        Column("tolerance", 0.09),
        Column("first-order interval", 0.23, "left"),
    )
    rows = []
    for quoted in RESULTS:
        found = simulated_of(run, quoted.key)
        if found is not None:
            rows.append(_row(sheet, quoted, found))
    return grid(columns, rows, sheet.width)


def _row(sheet: Sheet, quoted: Quoted, found: Simulated) -> tuple[str, ...]:
    show, kind = sheet.show, quoted.kind
    decimals = show.decimals(found.u, kind, quoted.least)
    return (
        f"{quoted.name} [{show.unit(kind)}]",
        show.number(found.mean, kind, decimals),
        show.number(found.u, kind, decimals),
        interval(show, found.symmetric, kind, decimals),
        interval(show, found.shortest, kind, decimals),
        significant(found.tolerance / show.scale(kind), 2),
        verdict(found),
    )


def _shape(sheet: Sheet, run: Simulation) -> list[Any]:
    kg, found = simulated_of(run, "vcg"), sheet.reduction.outcome.lightship.vcg
    if kg is None or found.value is None or len(run.kg_edges) < 2:
        return []
    most = sheet.reduction.trial.settings.kg_limit
    picture = FigureFlowable(distribution_plot(run, kg, found, most, sheet.show, sheet.width))
    return [*part("Distribution of KG", picture.height + 24.0), picture]


def intervals(sheet: Sheet) -> list[Any]:
    """First-order and simulated interval of each result side by side; nothing without a run."""
    run, show = sheet.reduction.simulation, sheet.show
    if run is None:
        return []
    columns = (
        Column("95 % interval", 0.20, "left"),
        Column("first order", 0.22),
        Column(f"simulated, {count_of(run.draws)} draws", 0.22),
        Column("first order, by JCGM 101 clause 8", 0.36, "left"),
    )
    rows = []
    for quoted in RESULTS:
        found, budget = (
            simulated_of(run, quoted.key),
            budget_of(sheet.reduction.outcome, quoted.key),
        )
        if found is None or budget is None or budget.estimate.value is None:
            continue
        value, wide, kind = budget.estimate.value, budget.estimate.U, quoted.kind
        decimals = show.decimals(budget.estimate.u, kind, quoted.least)
        first = MISSING
        if wide is not None:
            first = interval(show, (value - wide, value + wide), kind, decimals)
        second = interval(show, found.symmetric, kind, decimals)
        rows.append((f"{quoted.name} [{show.unit(kind)}]", first, second, verdict(found)))
    return [grid(columns, rows, sheet.width)]


def limit(sheet: Sheet) -> list[Any]:
    """The trial's limit of KG and how likely KG is above it; nothing without a limit."""
    most, run = sheet.reduction.trial.settings.kg_limit, sheet.reduction.simulation
    if most is None:
        return []
    said = []
    first = sheet.reduction.outcome.kg_above_limit
    if first is not None:
        said.append(f"{percent(first)} (first order)")
    if run is not None and run.kg_above_limit is not None:
        said.append(f"{percent(run.kg_above_limit)} (simulated)")
    how = " and ".join(said) or MISSING
    return [
        paragraph(
            f"Limit of KG set by the trial: {sheet.show.full(most, 'length')}. Probability that KG "
            f"of the lightship is above it: {how}."
        )
    ]
