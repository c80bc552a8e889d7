"""The numeric chain from readings to lightship, written once.

Every array of `Inputs` may carry a leading axis of draws: without it the chain is the reduction,
with a few draws it gives sensitivities, with many it is a Monte Carlo.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from typing import TYPE_CHECKING

from incline.buoyancy import Condition

if TYPE_CHECKING:
    import numpy as np
    from numpy.typing import NDArray

    from incline.buoyancy import Afloat, Buoyancy
    from incline.flotation import WaterlineFit
    from incline.levers import Lever
    from incline.liquids import Liquids
    from incline.moments import Placing
    from incline.regression import SlopeForm

    Floats = NDArray[np.float64]

__all__ = ["Heeling", "Inputs", "Plan", "Yield", "run"]


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Inputs:
    """What was measured or stated; the last axis counts items, axes before it are draws.

    Drafts [m]; density [t/m3]; ``weights`` (W) test-weight masses [t]; ``place_y``, ``place_z`` (K)
    their places and ``weight_x`` (W) [m]; ``lengths`` (J) [m], 1 for angles and tangents; ``fsm``
    (T) [t m]; ``mass`` (N) [t], ``x``, ``y``, ``z`` (N) [m] of ledger lines other than test
    weights, ``to_x``... of relocations; ``changes`` (C) masses [t], minus for what went ashore, and
    ``change_x``... [m]. The scalars ``volume_factor`` (1), ``km_shift`` and ``lcb_shift`` (0 m),
    and ``slope_shift`` (0 per t m) carry the uncertainty of the hydrostatics and of the fitted
    slope. ``moments`` (n) [t m] and their common ``moment_factor`` (1) stand for the test weights
    where a record gives moments directly; empty otherwise.
    """

    drafts: Floats
    density: Floats
    weights: Floats
    place_y: Floats
    place_z: Floats
    weight_x: Floats
    lengths: Floats
    fsm: Floats
    mass: Floats
    x: Floats
    y: Floats
    z: Floats
    to_x: Floats
    to_y: Floats
    to_z: Floats
    changes: Floats
    change_x: Floats
    change_y: Floats
    change_z: Floats
    volume_factor: Floats
    km_shift: Floats
    lcb_shift: Floats
    moments: Floats
    moment_factor: Floats
    slope_shift: Floats


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Plan:
    """What does not vary between draws: structure of the trial and its table or hull.

    ``line`` holds the readings that count. ``sign`` (N) is -1 for deductions, +1 for additions, 0
    for relocations, ``moved`` (N) is 1 for relocations. ``afloat`` carries the ship of the draft
    readings and ``afloat_later`` that of the shifts. ``lever`` is None for the straight-line
    method; ``liquids`` counts only with a lever. ``allowance`` is the share added to the volume;
    ``tells_lcg`` whether the hydrostatics say where B is at the trim read.
    """

    waterline: WaterlineFit
    afloat: Afloat
    afloat_later: Afloat
    lever: Lever | None
    liquids: Liquids
    placing: Placing
    line: SlopeForm
    sign: Floats
    moved: Floats
    allowance: float
    tells_lcg: bool


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Heeling:
    """What the readings say: slope [1/(t m)] and the line it belongs to, one value a shift.

    ``moments`` [t m] are the test weights' heeling moments, vertical travel counted; ``regressor``
    [t m] what the line runs through and ``bend`` how far each shift's heel lies off that line on
    the curve of the method: for the straight line ``moments`` and zero. ``heel`` are fitted
    tangents from the upright, ``stiffness`` [t m] is displacement x GM with the liquids held,
    ``restoring`` [m] the slope of the righting lever at each heel.
    """

    slope: Floats
    stiffness: Floats
    moments: Floats
    regressor: Floats
    bend: Floats
    heel: Floats
    restoring: Floats


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Yield:
    """Results of the chain [m, t, t m]; lcg and tcg are None where they cannot be found.

    ``as_read`` is the ship of the draft readings, ``condition`` that of the shifts. ``transverse``
    and ``vertical`` are moments by shift.
    """

    as_read: Condition
    condition: Condition
    transverse: Floats
    vertical: Floats
    heeling: Heeling
    slope: Floats
    gm_fluid: Floats
    fsm: Floats
    km: Floats
    vcg: Floats
    lcg: Floats | None
    tcg: Floats | None
    light_displacement: Floats
    light_vcg: Floats
    light_lcg: Floats | None
    light_tcg: Floats | None


def run(plan: Plan, given: Inputs) -> Yield:
    """One pass: waterline, displacement, slope, GM, KG, LCG, TCG, ledger."""
    import numpy as np

    as_read = now = _condition_as_read(plan, given)
    fsm = given.fsm.sum(axis=-1)
    transverse, vertical = _moments(plan, given)
    heeling = _heeling(plan, given, transverse, vertical, now)
    if given.changes.shape[-1]:
        now = _after_changes(plan, given, as_read, heeling.stiffness)
        if plan.lever is not None or vertical.any():  # the ship of the shifts counts
            heeling = _heeling(plan, given, transverse, vertical, now)
            now = _after_changes(plan, given, as_read, heeling.stiffness)
    b, displacement, slope = now.buoyancy, now.displacement, heeling.slope
    km = b.kb + b.bmt + given.km_shift
    vcg = km - heeling.stiffness / displacement
    lcg = b.x + given.lcb_shift + now.tau * (vcg - b.z) if plan.tells_lcg else None
    tcg = None if now.list_tan is None else _tcg(plan, given, now, vcg)
    light, centres = _ledger(plan, given, displacement, (lcg, tcg, vcg))
    return Yield(
        as_read=as_read,
        condition=now,
        transverse=transverse,
        vertical=vertical,
        heeling=heeling,
        slope=slope,
        gm_fluid=1.0 / (slope * displacement),
        fsm=fsm,
        km=km,
        vcg=vcg,
        lcg=lcg,
        tcg=tcg,
        light_displacement=light,
        light_vcg=np.asarray(centres[2]),
        light_lcg=centres[0],
        light_tcg=centres[1],
    )


def _condition_as_read(plan: Plan, given: Inputs) -> Condition:
    found = given.drafts @ plan.waterline.solve.T
    mean, tau = found[..., 0], found[..., 1]
    deflection = found[..., 2] if plan.waterline.has_deflection else None
    list_tan = found[..., 3] if plan.waterline.has_list else None
    buoyancy = plan.afloat.buoyancy(mean, tau, deflection, list_tan)
    return Condition(
        mean=mean,
        tau=tau,
        deflection=deflection,
        list_tan=list_tan,
        buoyancy=buoyancy,
        displacement=_mass_of(plan, given, buoyancy),
    )


def _mass_of(plan: Plan, given: Inputs, buoyancy: Buoyancy) -> Floats:
    return buoyancy.volume * given.density * given.volume_factor * (1.0 + plan.allowance)


def _moments(plan: Plan, given: Inputs) -> tuple[Floats, Floats]:
    """Transverse and vertical moments by shift."""
    placing = plan.placing
    if given.moments.shape[-1]:
        moments = given.moments * given.moment_factor[..., None]
        return moments, 0.0 * moments
    return (
        placing.about_start(given.weights, given.place_y),
        placing.about_start(given.weights, given.place_z),
    )


def _heeling(
    plan: Plan, given: Inputs, transverse: Floats, vertical: Floats, ship: Condition
) -> Heeling:
    """The slope by the plan's method, its uncertainty's shift added."""
    line = _straight(plan, given, transverse, vertical, ship)
    if plan.lever is None:
        return line
    return _curved(plan, given, transverse, vertical, ship, line)


def _straight(
    plan: Plan, given: Inputs, transverse: Floats, vertical: Floats, ship: Condition
) -> Heeling:
    """The common straight line.

    A weight that also rises by h adds w h tan(heel) to its moment, so the moment is corrected with
    the heel that the first fit gives.
    """
    slope = plan.line.slope(transverse, given.lengths)
    moments = transverse
    if vertical.any():
        for _ in range(2):
            heel = ship.start[..., None] + slope[..., None] * moments
            moments = transverse + vertical * heel
            slope = plan.line.slope(moments, given.lengths)
    slope = slope + given.slope_shift
    heel = ship.start[..., None] + slope[..., None] * moments
    return Heeling(
        slope=slope,
        stiffness=1.0 / slope + given.fsm.sum(axis=-1),
        moments=moments,
        regressor=moments,
        bend=0.0 * moments,
        heel=heel,
        restoring=0.0 * moments + 1.0 / (slope * ship.displacement)[..., None],
    )


_ROUNDS = 12
"""Gauss-Newton rounds for KG, each with one Newton step for the heels; the curve is so nearly
straight that each round gains two or three digits, and three rounds do unless GM is small."""
_NEAR = 1e-8
"""Change of KG [m] in all draws below which the next round would change nothing that counts."""
_FOUND = 1e-5
"""Last change of KG [m] above which it has not been found, and is NaN."""


def _curved(
    plan: Plan,
    given: Inputs,
    transverse: Floats,
    vertical: Floats,
    ship: Condition,
    line: Heeling,
) -> Heeling:
    """KG by least squares of the tangents on the equilibrium of every shift.

    N(t) + km_shift t = (KG + H / D) t + TCG + (M + liquids(t)) / D, less the same at the start with
    M = H = 0, gives the heel t of each shift for a KG; KG minimises the residuals of all readings
    with a zero for each device. Starts from the heels of the straight line and the KG that goes
    best with them. NaN where no KG is found.
    """
    import numpy as np

    if plan.lever is None:
        return line
    b, fsm = ship.buoyancy, given.fsm
    displacement, start = ship.displacement[..., None], ship.start[..., None]
    km = b.kb + b.bmt + given.km_shift
    shift = given.km_shift[..., None]
    curve = plan.lever.curve(ship)
    at_start = plan.lever.start(ship)[..., None]
    at_start = at_start - plan.liquids.start(ship.start, fsm)[..., None] / displacement
    slope = line.slope - given.slope_shift
    vcg = km - (1.0 / slope + fsm.sum(axis=-1)) / ship.displacement
    rise = vertical / displacement
    heel = start + slope[..., None] * line.moments
    pulled = (plan.line.pull / given.lengths[..., None, :]).sum(axis=-1)

    def unheld(heel: Floats, vcg: Floats) -> tuple[Floats, Floats]:
        """What KG times the heel from the start must equal [m], and its slope."""
        lever, stiff = curve(heel, vcg)
        moving, moving_slope = plan.liquids.at(heel, fsm)
        left = lever - at_start + shift * (heel - start) - rise * heel
        left = left - (moving + transverse) / displacement
        return left, stiff - moving_slope / displacement + shift - rise

    away = heel - start
    vcg = (unheld(heel, vcg)[0] * away).sum(axis=-1) / (away * away).sum(axis=-1)
    for _ in range(_ROUNDS):
        left, stiff = unheld(heel, vcg)
        stiff = stiff - vcg[..., None]
        heel = heel - (left - vcg[..., None] * (heel - start)) / stiff
        by_vcg = (heel - start) / stiff
        pull = ((pulled - heel @ plan.line.spread) * by_vcg).sum(axis=-1)
        step = pull / ((by_vcg @ plan.line.spread) * by_vcg).sum(axis=-1)
        vcg = vcg + step
        heel = heel + by_vcg * step[..., None]
        if not (abs(step) > _NEAR).any():
            break
    vcg = np.where(abs(step) > _FOUND, np.nan, vcg)
    slope = 1.0 / ((km - vcg) * ship.displacement - fsm.sum(axis=-1))
    regressor = by_vcg / (slope**2 * ship.displacement)[..., None]
    bend = heel - start - slope[..., None] * regressor
    slope = slope + given.slope_shift
    return Heeling(
        slope=slope,
        stiffness=1.0 / slope + fsm.sum(axis=-1),
        moments=transverse + vertical * heel,
        regressor=regressor,
        bend=bend,
        heel=heel,
        restoring=stiff,
    )


def _tcg(plan: Plan, given: Inputs, ship: Condition, vcg: Floats) -> Floats:
    """TCG from the list: GM times its tangent, or the equilibrium on the method's own curve."""
    b, t = ship.buoyancy, ship.start
    if plan.lever is None:
        km = b.kb + b.bmt + given.km_shift
        tcg: Floats = b.yb + (km - vcg - given.fsm.sum(axis=-1) / ship.displacement) * t
        return tcg
    liquids = plan.liquids.start(t, given.fsm) / ship.displacement
    return plan.lever.start(ship) + (given.km_shift - vcg) * t - liquids


def _after_changes(plan: Plan, given: Inputs, before: Condition, stiffness: Floats) -> Condition:
    """The waterline after masses came aboard or left since the drafts were read.

    Mean draft, trim and list at which the displacement and the moments about G all agree; the KG
    found on the way closes the loop.
    """
    moved = given.changes
    displacement = before.displacement + moved.sum(axis=-1)
    lever_y = (moved * given.change_y).sum(axis=-1)
    lever_z = (moved * given.change_z).sum(axis=-1)
    ship = _trimmed_anew(plan, given, before, before, stiffness)
    if before.list_tan is None:
        return ship
    turning = stiffness - given.fsm.sum(axis=-1)
    for _ in range(1 if plan.lever is None else 6):
        vcg = _vcg_of(given, ship.buoyancy, stiffness, displacement)
        vcg_before = (vcg * displacement - lever_z) / before.displacement
        wanted = _tcg(plan, given, before, vcg_before) * before.displacement + lever_y
        miss = wanted - _tcg(plan, given, ship, vcg) * displacement
        listed = replace(ship, list_tan=ship.start + miss / turning)
        ship = listed
        if plan.lever is not None:  # the hull's B goes with the list
            ship = _trimmed_anew(plan, given, before, listed, stiffness)
    return ship


def _vcg_of(given: Inputs, b: Buoyancy, stiffness: Floats, displacement: Floats) -> Floats:
    vcg: Floats = b.kb + b.bmt + given.km_shift - stiffness / displacement
    return vcg


def _trimmed_anew(
    plan: Plan, given: Inputs, before: Condition, guess: Condition, stiffness: Floats
) -> Condition:
    """Mean draft and trim of the ship after the changes, at the list of ``guess``: by Newton."""
    moved = given.changes
    displacement = before.displacement + moved.sum(axis=-1)
    mean, tau = guess.mean + 0.0 * displacement, guess.tau + 0.0 * displacement
    lever_x = (moved * given.change_x).sum(axis=-1)
    lever_z = (moved * given.change_z).sum(axis=-1)

    def at(m: Floats, t: Floats) -> Buoyancy:
        return plan.afloat_later.buoyancy(m, t, guess.deflection, guess.list_tan)

    def misses(m: Floats, t: Floats) -> tuple[Floats, Floats]:
        b = at(m, t)
        heavy = _mass_of(plan, given, b) - displacement
        vcg = _vcg_of(given, b, stiffness, displacement)
        vcg_before = (vcg * displacement - lever_z) / before.displacement
        lcg_before = before.buoyancy.x + before.tau * (vcg_before - before.buoyancy.z)
        lcg = (lcg_before * before.displacement + lever_x) / displacement
        return heavy, (b.x + t * (vcg - b.z) - lcg) * displacement

    step_m, step_t = 1e-4, 1e-6
    for _ in range(4):
        f, g = misses(mean, tau)
        fm, gm = ((b - a) / step_m for a, b in zip((f, g), misses(mean + step_m, tau), strict=True))
        ft, gt = ((b - a) / step_t for a, b in zip((f, g), misses(mean, tau + step_t), strict=True))
        det = fm * gt - ft * gm
        mean, tau = mean - (f * gt - g * ft) / det, tau - (g * fm - f * gm) / det
    return replace(guess, mean=mean, tau=tau, buoyancy=at(mean, tau), displacement=displacement)


def _ledger(
    plan: Plan,
    given: Inputs,
    displacement: Floats,
    centre: tuple[Floats | None, Floats | None, Floats],
) -> tuple[Floats, tuple[Floats | None, Floats | None, Floats | None]]:
    """Lightship displacement and its LCG, TCG, VCG: test weights off, then the ledger lines."""
    weights = given.weights
    light = displacement - weights.sum(axis=-1) + given.mass @ plan.sign
    start = plan.placing.start
    columns = (
        (centre[0], given.weight_x, given.x, given.to_x),
        (centre[1], given.place_y @ start, given.y, given.to_y),
        (centre[2], given.place_z @ start, given.z, given.to_z),
    )
    found: list[Floats | None] = []
    for at, weight_at, frm, to in columns:
        if at is None:
            found.append(None)
            continue
        moment = displacement * at - (weights * weight_at).sum(axis=-1)
        moment = moment + (given.mass * frm) @ plan.sign + (given.mass * (to - frm)) @ plan.moved
        found.append(moment / light)
    return light, (found[0], found[1], found[2])
