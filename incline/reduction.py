"""From a trial to its reduction: the only place that orders the stages."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

from incline.chain import run
from incline.errors import InclineError
from incline.flotation import describe_waterline
from incline.heel import describe_heel
from incline.hydrostatics import Curves
from incline.ledger import balance, lines_of, summarise, test_weight_lines
from incline.observations import observe
from incline.refusals import refuse
from incline.remarks import remarks_on
from incline.result import AsInclined, FreeSurface, Lightship, Outcome, Reduction, TableEntry
from incline.setup import inputs_of, plan_of
from incline.uncertainty import Scatter, propagate

if TYPE_CHECKING:
    from incline.chain import Inputs, Plan, Yield
    from incline.observations import Observations
    from incline.record import Trial
    from incline.result import HeelFit, Waterline

__all__ = ["reduce"]


def reduce(trial: Trial) -> Reduction:
    """Reduce a trial; raises FieldDataError listing everything that stands in the way."""
    outcome = _outcome(trial, observe(trial))
    remarks = remarks_on(trial, outcome)
    with_excluded = None
    if any(r.excluded for r in trial.readings):
        try:
            with_excluded = _outcome(trial, observe(trial, with_excluded=True))
        except InclineError as error:
            remarks.append(f"With the excluded readings counted there is no result: {error}.")
    return Reduction(
        trial=trial, outcome=outcome, with_excluded=with_excluded, remarks=tuple(remarks)
    )


def _outcome(trial: Trial, seen: Observations) -> Outcome:
    plan = plan_of(trial, seen)
    given = inputs_of(trial, plan, seen)
    found = run(plan, given)
    refuse(trial, plan, seen, found)
    heel = describe_heel(trial, seen, found)
    waterline = describe_waterline(plan.waterline, trial.drafts, trial.vessel.lpp)
    estimates, covariance = propagate(plan, given, _scatter(trial, heel, waterline))
    lines = (*test_weight_lines(trial, plan.placing), *lines_of(trial))
    inclined = _as_inclined(trial, plan, waterline, given, found)
    residual = balance(
        lines,
        inclined.displacement,
        (inclined.lcg, inclined.tcg, inclined.vcg),
        (estimates[2].value, estimates[3].value, estimates[1].value),
    )
    fsm = float(found.fsm)
    return Outcome(
        as_inclined=inclined,
        heel=heel,
        free_surface=FreeSurface(moment=fsm, correction=fsm / inclined.displacement),
        ledger=summarise(lines, residual),
        lightship=Lightship(
            displacement=estimates[0], vcg=estimates[1], lcg=estimates[2], tcg=estimates[3]
        ),
        covariance=covariance,
    )


def _scatter(trial: Trial, heel: HeelFit, waterline: Waterline) -> list[Scatter]:
    """What the test's own scatter tells: slope, drafts, density samples."""
    found: list[Scatter] = []
    if heel.u_slope is not None:
        found.append(
            Scatter(field="slope_shift", item=None, u=heel.u_slope, dof=heel.dof, pool="slope")
        )
    if waterline.sd is not None:
        found.extend(
            Scatter(field="drafts", item=i, u=waterline.sd, dof=waterline.dof, pool="drafts")
            for i in range(len(trial.drafts))
        )
    u_density = _density_scatter(trial)
    if u_density is not None:
        dof = len(trial.samples) - 1
        found.append(Scatter(field="density", item=None, u=u_density, dof=dof, pool="density"))
    return found


def _density_scatter(trial: Trial) -> float | None:
    """Standard uncertainty of the weighted mean density from the spread of its samples [t/m3]."""
    samples = trial.samples
    if len(samples) < 2:
        return None
    total = sum(s.share for s in samples)
    mean = sum(s.share * s.density for s in samples) / total
    squares = sum(s.share * (s.density - mean) ** 2 for s in samples) / total
    return math.sqrt(squares / (len(samples) - 1))


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
        lcb=None if b.x is None else float(b.x),
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
