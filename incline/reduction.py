"""From a trial to its reduction: the only place that orders the stages."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

from incline.budget import budgets_of, probability_above
from incline.chain import run
from incline.correlation import blocks_of
from incline.criteria import judge
from incline.diagnosis import search
from incline.errors import InclineError
from incline.findings import diagnosis_of
from incline.flotation import describe_waterline
from incline.heel import describe_heel
from incline.hydrostatics import Curves
from incline.ledger import balance, lines_of, summarise, test_weight_lines
from incline.model import KEYS, TrialModel
from incline.montecarlo import seed_of, simulate
from incline.observations import observe
from incline.refusals import refuse, refuse_absurd
from incline.remarks import remarks_on, remarks_on_simulation
from incline.result import AsInclined, FreeSurface, Lightship, Outcome, Reduction, TableEntry
from incline.rolling import remarks_on_rolling, rolling_of
from incline.setup import inputs_of, plan_of
from incline.sources import list_sources
from incline.variance import slope_uncertainty

if TYPE_CHECKING:
    from collections.abc import Callable

    from incline.chain import Inputs, Plan, Yield
    from incline.correlation import Block
    from incline.diagnosis import Search
    from incline.observations import Observations
    from incline.record import Trial
    from incline.result import Waterline

__all__ = ["Stage", "reduce", "work_out"]


def reduce(
    trial: Trial,
    *,
    monte_carlo: bool = False,
    draws: int | None = None,
    progress: Callable[[float], None] | None = None,
) -> Reduction:
    """Reduce a trial; raises FieldDataError listing everything that stands in the way.

    ``monte_carlo`` also sends the inputs through the chain by Monte Carlo until its figures settle,
    or exactly ``draws`` times; ``progress`` is told the share done.
    """
    stage = work_out(trial, observe(trial))
    remarks = remarks_on(trial, stage.outcome)
    with_excluded = None
    if any(r.excluded for r in trial.readings):
        try:
            with_excluded = work_out(trial, observe(trial, with_excluded=True)).outcome
        except InclineError as error:
            remarks.append(f"With the excluded readings counted there is no result: {error}.")
    simulation = None
    if monte_carlo or draws is not None:
        simulation = simulate(
            stage.model, stage.model.sources, stage.blocks, stage.outcome.budgets,
            seed=seed_of(trial.digest), draws=draws, kg_limit=trial.settings.kg_limit,
            progress=progress,
        )  # fmt: skip
        remarks.extend(remarks_on_simulation(simulation))
    rolling = rolling_of(trial, stage.outcome)
    remarks.extend(remarks_on_rolling(trial, rolling))
    diagnosis = None
    if stage.search is not None:
        diagnosis = diagnosis_of(stage.search, stage.model, trial.settings.evidence)
    return Reduction(
        trial=trial,
        outcome=stage.outcome,
        checks=judge(trial, stage.outcome),
        diagnosis=diagnosis,
        with_excluded=with_excluded,
        simulation=simulation,
        rolling=rolling,
        remarks=tuple(remarks),
    )


@dataclass(frozen=True, slots=True, eq=False)
class Stage:
    """An outcome, and what a Monte Carlo run needs to go through the same chain."""

    outcome: Outcome
    model: TrialModel
    blocks: tuple[Block, ...]
    search: Search | None


def work_out(trial: Trial, seen: Observations) -> Stage:
    """One pass through all stages for the readings that count; raises FieldDataError."""
    import numpy as np

    plan = plan_of(trial, seen)
    given = inputs_of(trial, plan, seen)
    with np.errstate(divide="ignore", invalid="ignore"):  # what comes of that is refused next
        found = run(plan, given)
    refuse(trial, plan, seen, found)
    heel = describe_heel(trial, seen, found)
    waterline = describe_waterline(plan.waterline, trial.drafts, trial.vessel.lpp)
    slope = slope_uncertainty(seen, found.moments[seen.shift])
    looked = search(trial, seen, found.moments)
    refuse_absurd(trial, seen, found, looked)
    hidden = () if looked is None else looked.hidden
    sources = list_sources(trial, plan, given, found, seen, waterline, heel, slope, hidden)
    blocks = blocks_of(sources, trial.settings.correlations)
    model = TrialModel(plan, given, sources)
    budgets, covariance = budgets_of(model, KEYS, sources, blocks)
    displacement, vcg, lcg, tcg, _ = (b.estimate for b in budgets)
    lines = (*test_weight_lines(trial, plan.placing), *lines_of(trial))
    inclined = _as_inclined(trial, plan, waterline, given, found)
    residual = balance(
        lines,
        inclined.displacement,
        (inclined.lcg, inclined.tcg, inclined.vcg),
        (lcg.value, tcg.value, vcg.value),
    )
    fsm = float(found.fsm)
    outcome = Outcome(
        as_inclined=inclined,
        heel=heel,
        free_surface=FreeSurface(moment=fsm, correction=fsm / inclined.displacement),
        ledger=summarise(lines, residual),
        lightship=Lightship(displacement=displacement, vcg=vcg, lcg=lcg, tcg=tcg),
        covariance=tuple(
            tuple(None if math.isnan(c) else float(c) for c in row[:4]) for row in covariance[:4]
        ),
        slope_uncertainty=slope,
        budgets=budgets,
        kg_above_limit=probability_above(vcg, trial.settings.kg_limit),
    )
    return Stage(outcome, model, blocks, looked)


def _as_inclined(
    trial: Trial, plan: Plan, waterline: Waterline, given: Inputs, found: Yield
) -> AsInclined:
    now, b = found.condition, found.condition.buoyancy
    half = trial.vessel.lpp / 2.0
    return AsInclined(
        waterline=waterline,
        entry=_entry(trial, plan, found),
        density=float(given.density),
        volume=float(b.volume),
        displacement=float(now.displacement),
        lcb=float(b.x) if plan.tells_lcg else None,
        kb=float(b.z),
        bmt=float(b.bmt),
        kmt=float(found.km),
        vcg=float(found.vcg),
        lcg=None if found.lcg is None else float(found.lcg),
        tcg=None if found.tcg is None else float(found.tcg),
        draft_ap=float(now.mean) + float(now.tau) * half,
        draft_fp=float(now.mean) - float(now.tau) * half,
        draft_mid=float(now.mean) + (waterline.deflection or 0.0),
        trim=float(now.tau) * trial.vessel.lpp,
        list_tan=None if now.list_tan is None else float(now.list_tan),
    )


def _entry(trial: Trial, plan: Plan, found: Yield) -> TableEntry:
    now, b = found.condition, found.condition.buoyancy
    straight = Curves(trial.table, trial.vessel.lpp, "linear")
    by_line = straight.buoyancy(now.mean, now.tau, now.deflection)
    if now.deflection is None:
        basis = "no deflection was measured"
    elif {"bml", "lcf"} <= set(plan.curves.names):
        basis = "from the waterplane's area and moment of inertia"
    else:
        basis = "3/4, the table having no BM_L to work it out"
    return TableEntry(
        draft=float(b.entry),
        at_lcf=plan.curves.even and "lcf" in plan.curves.names,
        deflection_factor=float(b.deflection_factor),
        deflection_basis=basis,
        trim_volume=float(b.trim_volume),
        linear_km=float(by_line.z + by_line.bmt),
        table_drafts=plan.curves.drafts,
        table_trims=plan.curves.trims,
    )
