"""The ship at the test: how it floated, in what water, its table, its tanks, what is to come."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

from incline.criteria.answers import Found, Inapplicable, Unrecorded, Words, one

if TYPE_CHECKING:
    from incline.criteria.answers import Answer, Measure, Subject
    from incline.record import DraftReading, Tank

__all__ = ["CONDITION"]

_NAMED = 3
"""Tanks named where many lack the same figures."""


def _list(s: Subject) -> Answer:
    tangent = s.outcome.as_inclined.list_tan
    if tangent is None:
        return Unrecorded("drafts on both sides")
    return one(math.degrees(math.atan(abs(tangent))))


def _trim(s: Subject) -> Answer:
    return Found(((_trim_share(s), ""),), excuse=_for_the_trim(s))


def _for_the_trim(s: Subject) -> str:
    """Why the hydrostatics hold at the ship's own trim; empty where they are for another one."""
    if s.outcome.as_inclined.hull is not None:
        return "the hull is integrated at the actual trim"
    if s.trial.table is not None and len(s.trial.table.trims) > 1:
        return "the hydrostatic table is for the actual trim"
    return ""


def _trim_share(s: Subject) -> float:
    """Trim over length, without its sign [%]."""
    return 100.0 * abs(s.outcome.as_inclined.trim) / s.trial.vessel.lpp


def _initial_gm(s: Subject) -> Answer:
    measured, before = s.outcome.heel.gm_fluid, s.trial.occasion.gm_before
    if before is None:
        return one(measured, note="Measured; no GM from before the test is recorded.")
    return one(min(measured, before), note=f"Before {before:.3f} m, measured {measured:.3f} m.")


def _add_share(s: Subject) -> Answer:
    return _share(s, s.outcome.ledger.add)


def _deduct_share(s: Subject) -> Answer:
    lines = s.outcome.ledger.lines
    kept = [n for n in lines if n.action == "deduct" and n.source not in ("tanks", "test weights")]
    return _share(s, math.fsum(line.mass for line in kept))


def _complete(s: Subject) -> Answer:
    light = s.outcome.lightship.displacement.value
    return _share(s, (light or 0.0) - s.outcome.ledger.add)


def _share(s: Subject, mass: float) -> Answer:
    light = s.outcome.lightship.displacement.value
    if not light:
        return Inapplicable("no lightship was found")
    return one(100.0 * mass / light)


def _draft_readings(s: Subject) -> Answer:
    drafts = s.trial.drafts
    count = {side: sum(d.side in (side, "C") for d in drafts) for side in "PS"}
    marks = [d for d in drafts if d.freeboard is None]
    length = s.trial.vessel.lpp
    whole = all(len(_thirds(marks, side, length)) == 3 for side in "PS")
    least = min(count.values())
    enough = s.limits["draft-readings"].range.holds(least)
    case = "marks forward, amidships and aft" if whole and not enough else ""
    return Found(((least, case),), f"{count['P']} P, {count['S']} S")


def _thirds(marks: list[DraftReading], side: str, length: float) -> set[int]:
    """Thirds of the length in which a side has draft marks read."""
    return {min(2, max(0, math.floor(3.0 * d.x / length))) for d in marks if d.side in (side, "C")}


def _draft_fit(s: Subject) -> Answer:
    line = s.outcome.as_inclined.waterline
    if line.dof == 0:
        return Unrecorded("more draft readings than the waterline has unknowns")
    worst = max(line.residuals, key=lambda r: abs(r.residual))
    return one(100.0 * abs(worst.residual), note=f"At x = {worst.x:.2f} m, side {worst.side}.")


def _samples(s: Subject) -> Answer:
    samples = s.trial.samples
    depths = {sample.depth for sample in samples} - {None}
    note = "" if len(depths) > 1 else "Samples at several depths are not recorded."
    places = {sample.place.casefold() for sample in samples}
    return one(len(places), s.size("density-samples"), note=note)


def _hydrometer(s: Subject) -> Answer:
    reach = s.trial.hydrometer
    if reach is None:
        return Unrecorded("the range of the hydrometer (hydrometer_range in [instruments])")
    return Found(tuple((end, "") for end in reach), f"{reach[0]:.3f} to {reach[1]:.3f}")


def _table(s: Subject) -> Answer:
    """Outside the table there is no outcome; what is left is the trim that the table is for."""
    entry, share = s.outcome.as_inclined.entry, _trim_share(s)
    if entry is None:
        return Words("integrated from the hull at the waterline itself", ok=True)
    if _for_the_trim(s):
        return Words("inside, by draft and trim", ok=True)
    own = entry.table_trims[0]
    apart = 100.0 * abs(s.outcome.as_inclined.trim - own) / s.trial.vessel.lpp
    large = not s.limits["trim"].range.holds(share)
    text = f"inside, trim {share:.2f} % of length"
    if large and apart > 0.1:
        return Words(text, ok=False, note="The table is for one trim, and not for this one.")
    return Words(text, ok=True)


def _slack(s: Subject) -> list[Tank]:
    return [t for t in s.trial.tanks if t.state == "slack"]


def _slack_tanks(s: Subject) -> Answer:
    services: dict[str, list[Tank]] = {}
    for tank in _slack(s):
        services.setdefault(tank.contents.casefold(), []).append(tank)
    many = [name for name, tanks in services.items() if not _few(tanks)]
    note = f"More than one tank or one pair: {', '.join(many)}." if many else ""
    return Words(f"{len(_slack(s))} slack", not many, note)


def _few(tanks: list[Tank]) -> bool:
    """One tank, or one on each side."""
    if len(tanks) < 2:
        return True
    y = [t.centre.y for t in tanks if t.centre is not None]
    return len(y) == 2 and y[0] * y[1] < 0.0


def _slack_level(s: Subject) -> Answer:
    if not _slack(s):
        return Inapplicable("no tank is slack")
    parts: list[tuple[float, str]] = []
    names: list[str] = []
    missing: list[Tank] = []
    for tank in _slack(s):
        if tank.level is None or tank.depth is None:
            missing.append(tank)
            continue
        filled = 100.0 * tank.level / tank.depth
        parts.append((filled, tank.type or "deep"))
        names.append(f"{filled:.0f} %")
    deep = [t.name for t in _slack(s) if t.level is not None and t.depth and not t.type]
    note = f"Taken as deep tanks, no type recorded: {', '.join(deep)}." if deep else ""
    return Found(tuple(parts), ", ".join(names), note, _lacking(missing, "level", "depth"))


def _lacking(tanks: list[Tank], *names: str) -> str:
    """Which of the tanks' figures are not recorded, tanks that lack the same named together."""
    alike: dict[str, list[str]] = {}
    for tank in tanks:
        lost = " and ".join(n for n in names if getattr(tank, n) is None)
        alike.setdefault(lost, []).append(tank.name)
    return "; ".join(f"{lost} of {_named(some)}" for lost, some in alike.items())


def _named(tanks: list[str]) -> str:
    """Tanks by name, of many the first ones."""
    if len(tanks) == 1:
        return f"tank {tanks[0]}"
    if len(tanks) <= _NAMED + 1:
        return f"tanks {', '.join(tanks[:-1])} and {tanks[-1]}"
    return f"tanks {', '.join(tanks[:_NAMED])} and {len(tanks) - _NAMED} more"


def _pressed_full(s: Subject) -> Answer:
    full = [t for t in s.trial.tanks if t.state == "pressed full"]
    if not full:
        return Inapplicable("no tank is pressed full")
    levels = [100.0 * t.level / t.depth for t in full if t.level is not None and t.depth]
    if not levels:
        return Words("pressed full as recorded", ok=True)
    return one(min(levels), note=f"{len(levels)} of {len(full)} with level and depth recorded.")


def _pocketing(s: Subject) -> Answer:
    """Tangent of the greatest heel over that at which a box tank's surface meets top or bottom."""
    if not _slack(s):
        return Inapplicable("no tank is slack")
    heel = s.outcome.heel
    tangent = math.tan(max(heel.max_heel_port, heel.max_heel_starboard))
    shares: list[tuple[float, str]] = []
    missing: list[Tank] = []
    for tank in _slack(s):
        if tank.level is None or tank.depth is None or tank.breadth is None:
            missing.append(tank)
            continue
        room = 2.0 * min(tank.level, tank.depth - tank.level) / tank.breadth
        shares.append((100.0 * tangent / room if room > 0.0 else math.inf, tank.name))
    lacking = _lacking(missing, "level", "depth", "breadth")
    if not shares:
        return Unrecorded(lacking)
    most, name = max(shares)
    if math.isinf(most):
        return Words(f"{name} at its top or bottom", ok=False)
    return Found(((most, ""),), note=f"Closest in {name}.", missing=lacking)


CONDITION: dict[str, Measure] = {
    "initial-list": _list,
    "trim": _trim,
    "initial-gm": _initial_gm,
    "add-share": _add_share,
    "deduct-share": _deduct_share,
    "complete-share": _complete,
    "draft-readings": _draft_readings,
    "draft-fit": _draft_fit,
    "density-samples": _samples,
    "hydrometer-range": _hydrometer,
    "hydrostatics-range": _table,
    "slack-tanks": _slack_tanks,
    "slack-level": _slack_level,
    "pressed-full": _pressed_full,
    "tank-pocketing": _pocketing,
}
