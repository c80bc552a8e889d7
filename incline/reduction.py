"""From a trial to its reduction: the only place that orders the stages."""

from __future__ import annotations

import dataclasses
import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

from incline.budget import budgets_of, probability_above
from incline.chain import run
from incline.correlation import blocks_of
from incline.criteria import judge
from incline.diagnosis import search
from incline.entry import geometric_volume, hull_entry, lever_curve, table_entry
from incline.errors import FieldDataError, InclineError
from incline.findings import diagnosis_of
from incline.flotation import describe_waterline
from incline.heel import describe_heel
from incline.ledger import balance, lines_of, summarise, test_weight_lines
from incline.local import localised
from incline.model import KEYS, TrialModel, draft_spread, results_of, surface_miss
from incline.montecarlo import seed_of, simulate
from incline.observations import observe
from incline.refusals import balance_defects, refuse, refuse_absurd
from incline.remarks import remarks_on, remarks_on_simulation
from incline.result import (
    AsInclined,
    FreeSurface,
    Lightship,
    MethodResult,
    Outcome,
    Reduction,
)
from incline.rolling import remarks_on_rolling, rolling_of
from incline.setup import hull_of, inputs_of, lever_of, methods_of, plan_of
from incline.sources import list_sources
from incline.variance import slope_uncertainty

if TYPE_CHECKING:
    from collections.abc import Callable

    from incline.chain import Inputs, Plan, Yield
    from incline.correlation import Block
    from incline.diagnosis import Search
    from incline.hull import Hull
    from incline.observations import Observations
    from incline.record import Method, Trial
    from incline.result import HullEntry, Waterline

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
        diagnosis = diagnosis_of(
            stage.search, stage.model, _evidence(trial, stage.outcome), stage.bend
        )
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


def _evidence(trial: Trial, outcome: Outcome) -> dict[str, str]:
    """What speaks against hidden disturbances: the trial's own words, and what its tanks tell."""
    known = dict(trial.settings.evidence)
    slack = [t for t in trial.tanks if t.fsm]
    if not known.get("liquids") and trial.tanks and not outcome.heel.pocketing:
        if not slack:
            known["liquids"] = "no tank is slack"
        elif all(t.box for t in slack):
            known["liquids"] = "every slack tank is a box, its surface clear of bottom and top"
    return known


@dataclass(frozen=True, slots=True, eq=False)
class Stage:
    """An outcome, and what a Monte Carlo run needs to go through the same chain."""

    outcome: Outcome
    model: TrialModel
    blocks: tuple[Block, ...]
    search: Search | None
    bend: tuple[float, ...]


def work_out(trial: Trial, seen: Observations) -> Stage:
    """One pass through all stages for the readings that count; raises FieldDataError."""
    import numpy as np

    hull = hull_of(trial)
    plan = plan_of(trial, seen, hull)
    given = inputs_of(trial, plan, seen)
    with np.errstate(all="ignore"):  # what comes of that is refused next
        found = run(plan, given)
        refuse(trial, plan, seen, found)
        method, *others = methods_of(trial, hull)
        aside = [r for m in others for r in _by(m, trial, seen, plan, given, hull)]
        off = None if hull is not None else _by_offsets(trial, seen, given, method)
    heel = describe_heel(trial, seen, found, method, aside, off)
    heel = dataclasses.replace(heel, levers=lever_curve(plan, given, found, hull))
    waterline = describe_waterline(plan.waterline, trial.drafts, trial.vessel.lpp)
    straight, line = seen.straightened(found.heeling.bend), found.heeling.regressor
    slope = slope_uncertainty(straight, line[seen.shift])
    looked = search(trial, straight, line)
    refuse_absurd(trial, found, looked)
    hidden = () if looked is None else looked.hidden
    entry = None if hull is None else hull_entry(trial, plan, found)
    sources = list_sources(trial, plan, given, found, seen, waterline, heel, slope, entry, hidden)
    blocks = blocks_of(sources, trial.settings.correlations)
    model = TrialModel(plan, given, sources)
    if hull is not None or plan.lever is not None:
        near = localised(
            plan, found, draft_spread(plan, sources), len(trial.tanks), hull=hull is not None
        )
        model, exact = TrialModel(near, given, sources), model
        if entry is not None:
            entry = dataclasses.replace(entry, surface=surface_miss(exact, model))
    nominal = [math.nan if r is None else float(r) for r in results_of(found)]
    budgets, covariance = budgets_of(model, KEYS, sources, blocks, nominal=nominal)
    displacement, vcg, lcg, tcg, _ = (b.estimate for b in budgets)
    lines = (*test_weight_lines(trial, plan.placing), *lines_of(trial))
    inclined = _as_inclined(trial, plan, waterline, given, found, entry)
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
    bend = tuple(float(b) for b in found.heeling.bend[seen.shift])
    return Stage(outcome, model, blocks, looked, bend)


def _by(
    method: Method,
    trial: Trial,
    seen: Observations,
    plan: Plan,
    given: Inputs,
    hull: Hull | None,
) -> list[MethodResult]:
    """The result by another method, nothing where it has none.

    Raises FieldDataError when the hull itself would not stand as it was read.
    """
    lever = lever_of(method, hull, plan.placing)
    found = run(dataclasses.replace(plan, lever=lever), given)
    defects = [] if lever is None else balance_defects(trial, seen, found)
    if defects and method == "heeled-hull":
        raise FieldDataError(defects)
    result = MethodResult(method=method, vcg=float(found.light_vcg), gm_fluid=float(found.gm_fluid))
    return [] if defects else [result]


def _by_offsets(trial: Trial, seen: Observations, given: Inputs, method: Method) -> float | None:
    """KG [m] by a method less that by the heeled hull, on offsets that are there but not used.

    None where there are no offsets, or the hull would not stand as it was read.
    """
    if trial.offsets is None:
        return None
    use = dataclasses.replace(trial.settings, use="offsets", method="heeled-hull")
    other = dataclasses.replace(trial, settings=use)
    hull = hull_of(other)
    plan = plan_of(other, seen, hull)
    exact = run(plan, given)
    quick = run(dataclasses.replace(plan, lever=lever_of(method, hull, plan.placing)), given)
    off = float(quick.vcg) - float(exact.vcg)
    return None if balance_defects(other, seen, exact) or not math.isfinite(off) else off


def _as_inclined(
    trial: Trial,
    plan: Plan,
    waterline: Waterline,
    given: Inputs,
    found: Yield,
    entry: HullEntry | None,
) -> AsInclined:
    now, b = found.condition, found.condition.buoyancy
    half, volume = trial.vessel.lpp / 2.0, geometric_volume(plan, found)
    return AsInclined(
        waterline=waterline,
        entry=table_entry(trial, plan, found),
        hull=entry,
        density=float(given.density) * float(b.volume) / volume,
        volume=volume,
        displacement=float(now.displacement),
        lcb=float(b.x) if plan.tells_lcg else None,
        kb=float(b.kb),
        zb=None if entry is None else float(b.z),
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
