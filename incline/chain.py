"""The numeric chain from readings to lightship, written once.

Every array of `Inputs` may carry a leading axis of draws: without it the chain is the reduction,
with a few draws it gives sensitivities, with many it is a Monte Carlo.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    import numpy as np
    from numpy.typing import NDArray

    from incline.flotation import WaterlineFit
    from incline.hydrostatics import Buoyancy, Curves
    from incline.moments import Placing
    from incline.regression import SlopeForm

    Floats = NDArray[np.float64]

__all__ = ["Condition", "Inputs", "Plan", "Yield", "run"]


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
    """What does not vary between draws: structure of the trial and its table.

    ``line`` holds the readings that count. ``sign`` (N) is -1 for deductions, +1 for additions, 0
    for relocations, ``moved`` (N) is 1 for relocations. ``allowance`` is the share added to the
    tabulated volume; ``tells_lcg`` whether the table says where B is at the trim read.
    """

    waterline: WaterlineFit
    curves: Curves
    placing: Placing
    line: SlopeForm
    sign: Floats
    moved: Floats
    allowance: float
    tells_lcg: bool


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Condition:
    """The floating ship during the shifts. ``mean`` and ``tau`` as in `Curves.buoyancy`."""

    mean: Floats
    tau: Floats
    deflection: Floats | None
    list_tan: Floats | None
    buoyancy: Buoyancy
    displacement: Floats


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Yield:
    """Results of the chain [m, t, t m]; lcg and tcg are None where they cannot be found.

    ``as_read`` is the ship of the draft readings, ``condition`` that of the shifts. ``transverse``
    and ``vertical`` are moments by shift, ``moments`` what the line was fitted to.
    """

    as_read: Condition
    condition: Condition
    transverse: Floats
    vertical: Floats
    moments: Floats
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

    as_read = _condition_as_read(plan, given)
    fsm = given.fsm.sum(axis=-1)
    transverse, vertical = _moments(plan, given)
    slope, moments = _slope(plan, given, transverse, vertical, as_read.list_tan)
    slope = slope + given.slope_shift
    stiffness = 1.0 / slope + fsm  # D GM of the ship with its liquids held
    now = as_read
    if given.changes.shape[-1]:
        now = _after_changes(plan, given, as_read, stiffness, fsm)
        if np.any(vertical):  # the heel of the shifts counts, not that of the drafts
            slope, moments = _slope(plan, given, transverse, vertical, now.list_tan)
            slope = slope + given.slope_shift
            stiffness = 1.0 / slope + fsm
            now = _after_changes(plan, given, as_read, stiffness, fsm)
    b, displacement = now.buoyancy, now.displacement
    km = b.z + b.bmt + given.km_shift
    vcg = km - stiffness / displacement
    lcg = b.x + given.lcb_shift + now.tau * (vcg - b.z) if plan.tells_lcg else None
    tcg = None if now.list_tan is None else now.list_tan / (slope * displacement)
    light, centres = _ledger(plan, given, displacement, (lcg, tcg, vcg))
    return Yield(
        as_read=as_read,
        condition=now,
        transverse=transverse,
        vertical=vertical,
        moments=moments,
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
    buoyancy = plan.curves.buoyancy(mean, tau, deflection)
    return Condition(
        mean=mean,
        tau=tau,
        deflection=deflection,
        list_tan=found[..., 3] if plan.waterline.has_list else None,
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


def _slope(
    plan: Plan, given: Inputs, transverse: Floats, vertical: Floats, list_tan: Floats | None
) -> tuple[Floats, Floats]:
    """Common slope, and the moments by shift that it belongs to.

    A weight that also rises by h adds w h tan(heel) to its moment, so the moment is corrected with
    the heel that the first fit gives.
    """
    import numpy as np

    slope = plan.line.slope(transverse, given.lengths)
    if not np.any(vertical):
        return slope, transverse
    upright = np.zeros_like(slope) if list_tan is None else list_tan
    moments = transverse
    for _ in range(2):
        heel = upright[..., None] + slope[..., None] * moments
        moments = transverse + vertical * heel
        slope = plan.line.slope(moments, given.lengths)
    return slope, moments


def _after_changes(
    plan: Plan, given: Inputs, before: Condition, stiffness: Floats, fsm: Floats
) -> Condition:
    """The waterline after masses came aboard or left since the drafts were read.

    Newton on mean draft and trim until the table's displacement and the moments about G both
    agree; the KG found on the way closes the loop.
    """
    moved = given.changes
    displacement = before.displacement + moved.sum(axis=-1)
    mean, tau = before.mean + 0.0 * displacement, before.tau + 0.0 * displacement
    lever_x = (moved * given.change_x).sum(axis=-1)
    lever_z = (moved * given.change_z).sum(axis=-1)

    def at(m: Floats, t: Floats) -> Buoyancy:
        return plan.curves.buoyancy(m, t, before.deflection)

    def vcg_of(b: Buoyancy) -> Floats:
        vcg: Floats = b.z + b.bmt + given.km_shift - stiffness / displacement
        return vcg

    def misses(m: Floats, t: Floats) -> tuple[Floats, Floats]:
        b = at(m, t)
        heavy = _mass_of(plan, given, b) - displacement
        vcg = vcg_of(b)
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
    after = at(mean, tau)
    list_tan = before.list_tan
    if list_tan is not None:
        vcg_before = (vcg_of(after) * displacement - lever_z) / before.displacement
        km_before = before.buoyancy.z + before.buoyancy.bmt + given.km_shift
        turning = (km_before - vcg_before) * before.displacement - fsm
        lever_y = (moved * given.change_y).sum(axis=-1)
        list_tan = (list_tan * turning + lever_y) / (stiffness - fsm)
    return Condition(
        mean=mean,
        tau=tau,
        deflection=before.deflection,
        list_tan=list_tan,
        buoyancy=after,
        displacement=displacement,
    )


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
