"""How the hydrostatics of a reduction came about: the table entered, or the hull integrated."""

from __future__ import annotations

import itertools
from typing import TYPE_CHECKING

from incline.hull import Hull, Integrated, pose_of
from incline.hull.overlap import overlaps
from incline.hull.spacing import spacing_misses
from incline.hydrostatics import Curves
from incline.levers import HeeledHull, WallSided
from incline.result import HullEntry, LeverCurve, TableEntry

if TYPE_CHECKING:
    import numpy as np
    from numpy.typing import NDArray

    from incline.buoyancy import Buoyancy, Condition
    from incline.chain import Inputs, Plan, Yield
    from incline.hull.spacing import Miss
    from incline.record import Trial

    Floats = NDArray[np.float64]

__all__ = [
    "geometric_volume", "hull_entry", "lever_curve", "shift_freeboards", "table_apart",
    "table_entry",
]  # fmt: skip


def table_entry(trial: Trial, plan: Plan, found: Yield) -> TableEntry | None:
    """How the table was entered; None when the hull was integrated instead."""
    curves = plan.afloat
    if not isinstance(curves, Curves) or trial.table is None:
        return None
    now, b = found.condition, found.condition.buoyancy
    straight = Curves(trial.table, trial.vessel.lpp, "linear")
    by_line = straight.buoyancy(now.mean, now.tau, now.deflection)
    if now.deflection is None:
        basis = "no deflection was measured"
    elif {"bml", "lcf"} <= set(curves.names):
        basis = "from the waterplane's area and moment of inertia"
    else:
        basis = "3/4, the table having no BM_L to work it out"
    return TableEntry(
        draft=float(b.entry),
        at_lcf=curves.even and "lcf" in curves.names,
        deflection_factor=float(b.deflection_factor),
        deflection_basis=basis,
        trim_volume=float(b.trim_volume),
        linear_km=float(by_line.kb + by_line.bmt),
        table_drafts=curves.drafts,
        table_trims=curves.trims,
        less_hull=_less_hull(trial, now),
    )


def _less_hull(trial: Trial, ship: Condition) -> Miss | None:
    """The table used less the offsets, which are not, at the same waterline."""
    if trial.offsets is None:
        return None
    hull = Integrated(Hull(trial.offsets, trial.vessel.lpp))
    b = hull.buoyancy(ship.mean, ship.tau, ship.deflection, ship.list_tan)
    return table_apart(trial, ship, b)


def hull_entry(trial: Trial, plan: Plan, found: Yield) -> HullEntry | None:
    """How the hull was integrated; None when a table was used instead."""
    if not isinstance(plan.afloat, Integrated) or trial.offsets is None:
        return None
    hull, offsets, now = plan.afloat.hull, trial.offsets, found.condition
    stations = [s for body in offsets.bodies for s in body.stations]

    by_stations, by_points = spacing_misses(
        offsets, hull, pose_of(now.mean, now.tau, now.deflection, None)
    )
    return HullEntry(
        stations=len(stations),
        points=sum(len(s.starboard) for s in stations),
        freeboard=float(shift_freeboards(plan, found).min()),
        layers=_layers(trial, hull),
        by_stations=by_stations,
        by_points=by_points,
        table=None if trial.table is None else table_apart(trial, now, now.buoyancy),
        overlaps=overlaps(offsets),
    )


def _layers(trial: Trial, hull: Hull) -> tuple[tuple[float, float], ...]:
    """Depths of the tops of layers with their densities; empty in mixed water."""
    if len(hull.layers) < 2:
        return ()
    mean = sum(s.share * s.density for s in trial.samples) / sum(s.share for s in trial.samples)
    shares = itertools.accumulate(step for _, step in hull.layers)
    return tuple((top, mean * share) for (top, _), share in zip(hull.layers, shares, strict=True))


def geometric_volume(plan: Plan, found: Yield) -> float:
    """Volume under the waterline of the shifts [m3], whatever the density of the water there."""
    now = found.condition
    if not isinstance(plan.afloat, Integrated) or len(plan.afloat.hull.layers) < 2:
        return float(now.buoyancy.volume)
    pose = pose_of(now.mean, now.tau, now.deflection, now.list_tan)
    return float(plan.afloat.hull.unlayered().displaced(pose).volume)


def shift_freeboards(plan: Plan, found: Yield) -> Floats:
    """Least freeboard to the deck edge [m] at each shift; the plan's hydrostatics are a hull's."""
    if not isinstance(plan.afloat, Integrated):
        raise TypeError("only a hull has a deck edge")
    hull = plan.afloat.hull
    pose, _ = HeeledHull(hull, plan.placing.trimming, plan.placing.lifting).settled(
        found.heeling.heel, found.condition, found.vcg
    )
    return hull.freeboard(pose)


def table_apart(trial: Trial, ship: Condition, hull: Buoyancy) -> Miss | None:
    """The trial's table less its integrated hull at a ship's waterline, allowances counted.

    None without both, or where the table does not cover the waterline.
    """
    if trial.table is None or trial.offsets is None:
        return None
    curves = Curves(trial.table, trial.vessel.lpp, trial.settings.interpolation)
    b = curves.buoyancy(ship.mean, ship.tau, ship.deflection)
    if not curves.covers(float(b.entry), float(ship.tau) * trial.vessel.lpp):
        return None
    factor = (1.0 + (trial.settings.allowance or 0.0)) / (1.0 + (trial.offsets.allowance or 0.0))
    return (
        float(b.volume * factor / hull.volume - 1.0),
        float(b.kb + b.bmt - hull.kb - hull.bmt),
        float(b.x - hull.x),
    )


_DRAWN = 41


def lever_curve(plan: Plan, given: Inputs, found: Yield, hull: Hull | None) -> LeverCurve:
    """N(t) a little beyond the heels of the test, by every method."""
    import numpy as np

    ship, heel = found.condition, found.heeling.heel
    far = 1.15 * float(np.abs(heel).max())
    tangents = np.linspace(-far, far, _DRAWN)
    b, nothing = ship.buoyancy, 0.0 * tangents
    integrated: Floats = np.empty(0)
    if hull is not None:
        integrated, _ = HeeledHull(hull, nothing, nothing).curve(ship)(tangents, found.vcg)
    wall_sided, _ = WallSided().curve(ship)(tangents, found.vcg)
    straight = b.yb + (b.kb + b.bmt) * tangents
    start, balance = b.yb + (b.kb + b.bmt) * ship.start, b.yb + (b.kb + b.bmt) * heel
    if plan.lever is not None:
        start, (balance, _) = plan.lever.start(ship), plan.lever.curve(ship)(heel, found.vcg)
    liquids, _ = plan.liquids.at(heel, given.fsm)
    return LeverCurve(
        shifts=tuple(map(float, heel)),
        balance=tuple(map(float, balance)),
        liquids=tuple(map(float, liquids)),
        start=float(start),
        tangents=tuple(map(float, tangents)),
        integrated=tuple(map(float, integrated)),
        wall_sided=tuple(map(float, wall_sided)),
        straight_line=tuple(map(float, straight)),
    )
