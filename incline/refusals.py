"""What makes a result impossible although every record reads well."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

from incline.diagnosis import search
from incline.entry import shift_freeboards
from incline.errors import Defect, FieldDataError, Where
from incline.hull import Integrated, pose_of
from incline.hydrostatics import LEVEL, Curves
from incline.ledger import lines_of
from incline.observations import distinct

if TYPE_CHECKING:
    import numpy as np
    from numpy.typing import NDArray

    from incline.chain import Plan, Yield
    from incline.diagnosis.search import Search, Sign
    from incline.observations import Observations
    from incline.record import Trial

    Floats = NDArray[np.float64]

__all__ = ["balance_defects", "refuse", "refuse_absurd"]

_FLAT = 1e-6
"""A line that rises by less than this tangent over the whole range of moments is flat."""


def refuse(trial: Trial, plan: Plan, seen: Observations, found: Yield) -> None:
    """Raise FieldDataError with every reason why the trial gives no result."""
    defects = [*_line_defects(seen, found), *_table_defects(trial, plan, found)]
    steady = not defects
    defects += _draft_defects(plan, found)
    if steady and not defects:  # only then do the heels mean anything
        defects = _steep_defects(seen, found) or _shift_defects(trial, plan, seen, found)
    light = float(found.light_displacement)
    if not light > 0.0 and not any(d.code in _WRONG_WATERLINE for d in defects):
        defects.append(_nothing_left(trial, float(found.condition.displacement), light))
    if defects:
        raise FieldDataError(defects)


def _nothing_left(trial: Trial, displacement: float, light: float) -> Defect:
    """A ledger that takes off all there is, with the line that takes off most."""
    deducted = [
        *((w.mass, w.id, "weights.csv") for w in trial.weights),
        *(
            (line.mass, line.name, _FILES[line.source])
            for line in lines_of(trial)
            if line.action == "deduct"
        ),
    ]
    hint = "check the units of the drafts"
    if deducted:
        mass, name, file = max(deducted)
        hint = (
            f'the largest deduction is "{name}" of {mass:.3f} t in {file}: check the unit of its'
            f" mass, and {hint.removeprefix('check ')}"
        )
    return Defect(
        Where("trial"),
        "lightship-none",
        f"{light:.3f} t left of {displacement:.3f} t by the drafts, after the ledger",
        "a lightship displacement above zero",
        hint,
    )


_FILES = {"tanks": "tanks.csv", "people": "trial.toml", "ledger": "ledger.csv"}
"""Where the lines of the ledger come from."""
_WRONG_WATERLINE = frozenset(
    {"waterline-outside-table", "waterline-below-hull", "deck-edge-immersed"}
)
_STEEP = 15.0
"""Degrees of heel beyond which readings or lengths must be wrong: tests stay below 4."""


def refuse_absurd(trial: Trial, found: Yield, looked: Search | None) -> None:
    """Raise FieldDataError for a height or a GM that no ship of a test can have.

    Something was written in a wrong unit or place; where the residuals point at it, that is said.
    """
    vcg, highest = float(found.light_vcg), 3.0 * trial.vessel.depth
    gm = float(found.gm_fluid)
    if gm > 0.0 and 0.0 < vcg < highest:
        return
    hint = "check the masses of the test weights, the lengths, and the units of all tables"
    raise FieldDataError(
        [
            Defect(
                Where("trial"),
                "kg-absurd",
                f"a lightship KG of {vcg:.3f} m, GM {gm:.3f} m",
                f"a KG between the baseline and three depths ({highest:.2f} m), GM above zero",
                _pointer(looked) or hint,
            )
        ]
    )


def _steep_defects(seen: Observations, found: Yield) -> list[Defect]:
    """Heels that no test has."""
    defects = []
    for j, device in enumerate(seen.devices):
        mine = seen.device == j
        moments = found.transverse[seen.shift][mine]
        span = float(moments.max() - moments.min())
        slope = _middle_slope(moments, seen.tangents[mine], 1e-9 * span)
        swing = math.degrees(math.atan(abs(slope) * span / 2.0))
        if swing > _STEEP:
            hint = "check the unit of its readings and its length"
            what = f"device {device.id} heels {swing:.1f} deg to each side"
            defects.append(
                _defect("heel-absurd", device.id, what, f"less than {_STEEP:.0f} deg", hint)
            )
    return defects


def _pointer(looked: Search | None) -> str:
    """The first finding in one line, empty where there is none."""
    signs = () if looked is None else looked.signs
    return _said(signs[0]) if signs else ""


def _said(sign: Sign) -> str:
    at = "" if sign.shift is None else f", shift {sign.shift}"
    by = "" if sign.device is None else f", device {sign.device}"
    return f"the residuals point to this: {sign.cause}{at}{by}: {sign.size}"


def _line_defects(seen: Observations, found: Yield) -> list[Defect]:
    """Readings through which no sensible line goes."""
    moments = found.transverse[seen.shift]
    span = float(moments.max() - moments.min()) or 1.0
    near = 1e-9 * span
    defects: list[Defect] = []
    if distinct(moments.tolist(), near) < 3:
        what = f"{distinct(moments.tolist(), near)} distinct moments in the readings that count"
        defects.append(_defect("moments-too-few", "", what, "three at least"))
    slopes: dict[str, float] = {}
    for j, device in enumerate(seen.devices):
        mine = seen.device == j
        if distinct(moments[mine].tolist(), near) < 2:
            what, wanted = f"device {device.id} read at one moment only", "readings at two or more"
            defects.append(_defect("moments-too-few", device.id, what, wanted))
            continue
        slopes[device.id] = _middle_slope(moments[mine], seen.tangents[mine], near)
        if abs(slopes[device.id]) * span < _FLAT:
            what = f"device {device.id} does not move with the moment"
            wanted = "readings that change when weights are shifted"
            defects.append(_defect("slope-zero", device.id, what, wanted))
    return defects or _sign_defects(slopes)


def _middle_slope(moments: Floats, tangents: Floats, near: float) -> float:
    """Median slope over all pairs of readings: one gross misreading does not turn its sign."""
    import numpy as np

    i, j = np.triu_indices(len(moments), 1)
    apart = np.abs(moments[j] - moments[i]) > near
    steps = (tangents[j] - tangents[i])[apart] / (moments[j] - moments[i])[apart]
    return float(np.median(steps))


def _sign_defects(slopes: dict[str, float]) -> list[Defect]:
    wrong = [d for d, slope in slopes.items() if slope < 0.0]
    expected = "positive readings for heel to starboard, positive y to starboard"
    if wrong and len(wrong) == len(slopes):
        hint = (
            "check the sign of y and of the readings; a ship that truly does this has no positive"
            " GM: stop the test"
        )
        return [_defect("sign-all", "", "every device heels away from the moment", expected, hint)]
    hint = "its readings seem to be positive to port"
    return [
        _defect("sign-device", d, f"device {d} heels against the others", expected, hint)
        for d in wrong
    ]


def _defect(code: str, device: str, found: str, expected: str, hint: str = "") -> Defect:
    column = f"device {device}" if device else "reading"
    return Defect(Where("readings.csv", 0, column), code, found, expected, hint)


def _table_defects(trial: Trial, plan: Plan, found: Yield) -> list[Defect]:
    """Waterlines outside the table: that of the drafts, and that of the shifts."""
    curves, lpp = plan.afloat, trial.vessel.lpp
    if not isinstance(curves, Curves):
        return []
    reach = f"drafts {curves.drafts[0]:.3f} to {curves.drafts[1]:.3f} m"
    if not curves.even:
        reach += f" and trims {curves.trims[0]:.3f} to {curves.trims[1]:.3f} m"
    defects: list[Defect] = []
    for when, ship in (("", found.as_read), (" after the changes", found.condition)):
        trim, draft = float(ship.tau) * lpp, float(ship.buoyancy.entry)
        if not curves.covers(draft, trim) and not defects:
            defects.append(
                Defect(
                    Where("hydrostatics.csv"),
                    "waterline-outside-table",
                    f"a waterline at {draft:.3f} m with trim {trim:.3f} m{when}, by drafts.csv",
                    f"a waterline inside the table: {reach}",
                    "a table is never extrapolated; check the units of the drafts and the table",
                )
            )
    trim = float(found.as_read.tau) * lpp
    if curves.even and "lcf" not in curves.names and abs(trim - curves.trims[0]) >= LEVEL:
        defects.append(
            Defect(
                Where("hydrostatics.csv", 0, "lcf"),
                "column-missing",
                f"no lcf for a ship trimmed {trim:.3f} m",
                "lcf, so that the table is entered at the draft at the centre of flotation",
            )
        )
    return defects


def _draft_defects(plan: Plan, found: Yield) -> list[Defect]:
    """A waterline of the drafts below the hull or above its deck edge."""
    if not isinstance(plan.afloat, Integrated):
        return []
    hull, ship = plan.afloat.hull, found.as_read
    low, _ = hull.reach
    drafts = f"mean draft {float(ship.mean):.3f} m, trim {float(ship.tau) * hull.lpp:.3f} m"
    if not float(ship.buoyancy.volume) > 0.0:
        return [
            Defect(
                Where("drafts.csv"),
                "waterline-below-hull",
                f"a waterline that does not touch the hull: {drafts}",
                f"a waterline above the hull's lowest point, {low:.3f} m above baseline",
                "check the units and the baseline of the drafts and of the offsets",
            )
        ]
    pose = pose_of(ship.mean, ship.tau, ship.deflection, ship.list_tan)
    dry = float(hull.freeboard(pose))
    if dry < 0.0:
        return [_deck_defect("drafts.csv", 0, f"at the draft readings ({drafts})", dry)]
    return []


def _shift_defects(trial: Trial, plan: Plan, seen: Observations, found: Yield) -> list[Defect]:
    """Deck edges under water at a shift, and a ship that cannot stand as it was read.

    Where the ship cannot, its deck edge is looked at by the heels of the straight line.
    """
    # a line that falls is left to `refuse_absurd`, which knows more of the residuals
    unsteady = [] if plan.lever is None else balance_defects(trial, seen, found)
    if not isinstance(plan.afloat, Integrated):
        return unsteady
    if unsteady:
        ship, line = found.condition, plan.line.slope(found.transverse, seen.lengths)
        heel = ship.start + line * found.transverse
        pose = pose_of(ship.mean + 0.0 * heel, ship.tau + 0.0 * heel, ship.deflection, heel)
        freeboards = plan.afloat.hull.freeboard(pose)
    else:
        freeboards = shift_freeboards(plan, found)
    immersed = [
        _deck_defect("shifts.csv", s.where.row, f"at shift {s.number}", float(f))
        for s, f in zip(trial.shifts, freeboards, strict=True)
        if float(f) < 0.0
    ]
    return immersed or unsteady


def balance_defects(trial: Trial, seen: Observations, found: Yield) -> list[Defect]:
    """A ship that would not stand as it was read, by the method of ``found``.

    Where residuals about a straight line point at a cause, that is said.
    """
    import numpy as np

    heeling = found.heeling
    shifts = [
        str(s.number)
        for s, k in zip(trial.shifts, heeling.restoring, strict=True)
        if float(k) <= 0.0
    ]
    if not np.isfinite(float(found.vcg)) or not np.all(np.isfinite(heeling.heel)):
        what = "no KG at which the hull would stand at the heels that were read"
    elif shifts:
        what = f"no stable equilibrium at shift {', '.join(shifts)}: no righting lever there"
    else:
        return []
    looked = search(trial, seen, found.transverse)
    # what all devices show together is the hull's own curve here, and no disturbance
    alone = [s for s in looked.signs if s.where != "ship"] if looked is not None else []
    check = "check the drafts, the masses of the weights and the readings"
    return [
        Defect(
            Where("readings.csv"),
            "equilibrium-none",
            what,
            "a ship with positive GM over the heels of the test",
            f"{_said(alone[0]) if alone else check}; if the records are right the ship is unstable:"
            " stop the test, land no more weight high up, and do not correct a loll by moving"
            " weight to the high side",
        )
    ]


def _deck_defect(file: str, row: int, when: str, freeboard: float) -> Defect:
    return Defect(
        Where(file, row),
        "deck-edge-immersed",
        f"the waterline {-freeboard:.3f} m above the deck edge {when}",
        "a waterline below the deck edge all along the hull",
        "check the units of the drafts, or carry the offsets up to a higher deck",
    )
