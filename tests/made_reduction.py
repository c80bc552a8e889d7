"""A reduction of the made trial, for tests of what is printed from it.

The numbers hang together (the line is the least-squares line, the ledger balances) but come from
the few closed formulas below, not from the program.
"""

from dataclasses import replace

import made_judged as judged
import made_uncertainty as unsure
from made_trial import (
    AT,
    LPP,
    MOMENTS,
    START,
    WATERLINE,
    made_trial,
)

from incline.record import (
    Item,
    Occasion,
    Point,
    Trial,
)
from incline.result import (
    AsInclined,
    DeviceFit,
    Estimate,
    FreeSurface,
    HeelFit,
    HeelPoint,
    Ledger,
    LedgerLine,
    Lightship,
    Outcome,
    ReducedReading,
    Reduction,
    ShiftMoment,
    TableEntry,
)


def _fit(trial: Trial, *, all_counted: bool) -> HeelFit:
    """Common slope by the closed form: deviations from each device's own means."""
    length = {d.id: d.length or 1.0 for d in trial.devices}
    moment = dict(zip((s.number for s in trial.shifts), MOMENTS, strict=True))
    reduced = [(r, sum(r.values) / len(r.values)) for r in trial.readings]
    rows = [
        (r, moment[r.shift], v / length[r.device], all_counted or not r.excluded, v)
        for r, v in reduced
    ]
    top, bottom, alone = 0.0, 0.0, {}
    for device in trial.devices:
        mine = [(m, t) for r, m, t, counts, _ in rows if counts and r.device == device.id]
        mean_m, mean_t = (sum(c) / len(mine) for c in zip(*mine, strict=True))
        up = sum((m - mean_m) * (t - mean_t) for m, t in mine)
        down = sum((m - mean_m) ** 2 for m, _ in mine)
        alone[device.id] = (mean_m, mean_t, up / down, len(mine))
        top, bottom = top + up, bottom + down
    slope = top / bottom
    offset = {k: t - slope * m for k, (m, t, _, _) in alone.items()}
    points = tuple(
        HeelPoint(
            shift=r.shift, device=r.device, moment=m, tangent=t, fitted=offset[r.device] + slope * m,
            reading=ReducedReading(
                value=v, u=0.0004 if len(r.values) > 1 else None, count=len(r.values),
                how={"swings": "decaying swing fitted", "repeats": "mean of repeats", "single": "single reading"}[r.kind],
            ),
            excluded="" if counts else r.excluded,
        )
        for r, m, t, counts, v in rows
    )  # fmt: skip
    used = [p for p in points if not p.excluded]
    dof = len(used) - len(alone) - 1
    sd = (sum(p.residual**2 for p in used) / dof) ** 0.5
    gm = 1.0 / (slope * 195.4)
    devices = tuple(
        DeviceFit(
            id=k, readings=n, gm=1.0 / (b * 195.4), u_gm=0.0041, slope=b, u_slope=1e-6,
            intercept=offset[k], r_squared=0.99987,
        )
        for k, (_, _, b, n) in alone.items()
    )  # fmt: skip
    u = sd / bottom**0.5
    return HeelFit(
        method="straight-line", slope=slope, u_slope=u, gm_fluid=gm, u_gm_fluid=gm * u / slope, dof=dof,
        residual_sd=sd, devices=devices, points=points,
        shifts=tuple(ShiftMoment(shift=s.number, time=s.time, transverse=m, vertical=0.0) for s, m in zip(trial.shifts, MOMENTS, strict=True)),
        max_heel_port=0.0547, max_heel_starboard=0.0602, curvature_kg=0.0009,
    )  # fmt: skip


def ledger_lines(trial: Trial) -> tuple[LedgerLine, ...]:
    """Ledger lines of the trial's own tables, test weights first."""
    lines = [
        LedgerLine(action="deduct", name=w.id, mass=w.mass, centre=Point(w.x, START.get(w.id, 0.0), w.z), to=None, source="test weights")
        for w in trial.weights
    ]  # fmt: skip
    lines += [
        LedgerLine(
            action="deduct", name=t.name, mass=t.mass, centre=t.centre, to=None, source="tanks"
        )
        for t in trial.tanks
        if t.centre is not None
    ]
    lines += [
        LedgerLine(
            action="deduct", name=p.name, mass=p.mass, centre=p.centre, to=None, source="people"
        )
        for p in trial.people
        if p.centre is not None and p.mass is not None
    ]
    lines += [
        LedgerLine(
            action=i.action, name=i.name, mass=i.mass, centre=i.centre, to=i.to, source="ledger"
        )
        for i in trial.items
    ]
    return tuple(lines)  # fmt: skip


def _outcome(trial: Trial, *, all_counted: bool = False) -> Outcome:
    heel, line, table = _fit(trial, all_counted=all_counted), WATERLINE, trial.table
    fsm = sum(t.fsm for t in trial.tanks)
    kb, bm, weight = 1.238, 2.546, 195.4
    vcg = kb + bm - heel.gm_fluid - fsm / weight
    lcb, tau = 11.49, 0.408 / LPP
    lcg, tcg = lcb + tau * (vcg - kb), heel.gm_fluid * 0.0030
    state = AsInclined(
        waterline=line,
        entry=TableEntry(
            draft=2.322, at_lcf=True, deflection_factor=0.7312, deflection_basis="computed from the table",
            trim_volume=0.041, linear_km=3.7851, table_drafts=(table.drafts[0], table.drafts[-1]), table_trims=(0.0, 0.0),
        ),
        density=1.02185, volume=weight / 1.02185 / 1.006, displacement=weight, lcb=lcb, kb=kb, bmt=bm,
        kmt=kb + bm, vcg=vcg, lcg=lcg, tcg=tcg, draft_ap=2.519,
        draft_fp=2.111, draft_mid=2.323, trim=0.408, list_tan=0.0030,
    )  # fmt: skip
    lines = ledger_lines(trial)
    sums = {a: sum(r.mass for r in lines if r.action == a) for a in ("deduct", "add", "relocate")}
    light = weight - sums["deduct"] + sums["add"]
    centre = []
    for at, axis in ((lcg, "x"), (tcg, "y"), (vcg, "z")):
        moment = weight * at
        for r in lines:
            moment += (
                {"deduct": -1.0, "add": 1.0, "relocate": -1.0}[r.action]
                * r.mass
                * getattr(r.centre, axis)
            )
            moment += r.mass * getattr(r.to, axis) if r.to else 0.0
        centre.append(moment / light)
    budgets = unsure.budgets((light, centre[2], centre[0], centre[1], heel.gm_fluid))
    estimates = {b.key: b.estimate for b in budgets if b.key != "gm_fluid"}
    return Outcome(
        as_inclined=state,
        heel=heel,
        free_surface=FreeSurface(moment=fsm, correction=fsm / weight),
        ledger=Ledger(lines=lines, balance=3.1e-14, **sums),
        lightship=Lightship(**estimates),
        covariance=unsure.covariance(),
        slope_uncertainty=unsure.SLOPE,
        budgets=budgets,
        kg_above_limit=0.0238,
    )


def made_reduction(units: str = "metric") -> Reduction:
    """The whole reduction: every table filled, one reading excluded, two findings, hostile text in names."""
    plain = made_trial(units)
    settings = replace(plain.settings, evidence=judged.EVIDENCE)
    trial = replace(plain, settings=settings, rolls=judged.ROLLS)
    outcome = _outcome(trial)
    return Reduction(
        trial=trial,
        outcome=outcome,
        checks=judged.CHECKS,
        diagnosis=judged.diagnosis(outcome),
        rolling=judged.ROLLING,
        simulation=unsure.simulation(outcome.budgets, 0.0229),
        with_excluded=_outcome(trial, all_counted=True),
        remarks=("The u-values of the instruments are engineering judgement.",),
    )


def bare_reduction() -> Reduction:
    """As little as a trial may hold: nothing optional recorded, LCG and TCG not to be found."""
    full = made_trial("metric")
    trial = replace(
        full,
        vessel=replace(full.vessel, kind="", number=""),
        occasion=Occasion(date=full.occasion.date, place=full.occasion.place),
        settings=replace(full.settings, rule_set="", kg_limit=None, allowance=None, keel_thickness=0.0, x_origin="after perpendicular"),
        people=(), weights=(), tanks=(), items=(), changes=(), remarks=(),
        readings=tuple(replace(r, note="", excluded="") for r in full.readings),
        table=replace(full.table, lcf=None, bml=None, bml_basis=""),
    )  # fmt: skip
    whole = _outcome(trial)
    light = whole.lightship
    bare = replace(
        whole,
        as_inclined=replace(
            whole.as_inclined, lcb=None, lcg=None, tcg=None, list_tan=None,
            waterline=replace(WATERLINE, deflection=None, list_tan=None, sd=None, dof=0,
                              residuals=tuple(replace(r, studentised=None, flagged=False) for r in WATERLINE.residuals)),
        ),
        heel=replace(whole.heel, u_slope=None, u_gm_fluid=None, residual_sd=None,
                     devices=tuple(replace(d, u_gm=None, u_slope=None, r_squared=None) for d in whole.heel.devices)),
        lightship=replace(light, lcg=Estimate(value=None), tcg=Estimate(value=None)),
        covariance=tuple(
            tuple(c if i < 2 and j < 2 else None for j, c in enumerate(row))
            for i, row in enumerate(whole.covariance)
        ),
        slope_uncertainty=unsure.NO_SLOPE,
        budgets=unsure.budgets(
            (light.displacement.value, light.vcg.value, None, None, whole.heel.gm_fluid)
        ),
        kg_above_limit=None,
    )  # fmt: skip
    said = (
        "LCG is refused: the table is for even keel and has neither MCT nor a longitudinal BM.",
        "TCG is refused: drafts on one side only cannot tell the list.",
    )
    return Reduction(trial=trial, outcome=bare, with_excluded=None, simulation=None, remarks=said)


def long_reduction() -> Reduction:
    """A trial whose readings and ledger run over several pages."""
    full = made_trial("metric")
    items = tuple(
        Item(action="deduct", name=f"Loose item {n:03d}", mass=0.01, centre=Point(10.0, 0.0, 2.0), to=None,
             basis="weighed " + "and then weighed again " * (400 if n == 7 else 0), where=AT)
        for n in range(140)
    )  # fmt: skip
    trial = replace(full, items=items)
    outcome = _outcome(trial)
    return Reduction(
        trial=trial, outcome=outcome, diagnosis=judged.diagnosis(outcome, found=False),
        with_excluded=None, simulation=None, remarks=(),
    )  # fmt: skip
