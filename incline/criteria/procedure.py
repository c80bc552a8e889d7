"""How the test was done: heel, devices, test weights, movements, the line, the surroundings."""

from __future__ import annotations

import math
from itertools import pairwise
from typing import TYPE_CHECKING

from incline.criteria.answers import Found, Inapplicable, Unrecorded, Words, one

if TYPE_CHECKING:
    from incline.criteria.answers import Answer, Measure, Subject
    from incline.record import Device

__all__ = ["PROCEDURE"]

_SAME = 0.01
"""Moments closer than this share of the largest are the same moment."""


def _heel_each_side(s: Subject) -> Answer:
    port, starboard = _heels(s)
    return Found(((port, ""), (starboard, "")), f"{port:.2f} P, {starboard:.2f} S")


def _greatest_heel(s: Subject) -> Answer:
    return one(max(_heels(s)))


def _heels(s: Subject) -> tuple[float, float]:
    heel = s.outcome.heel
    return math.degrees(heel.max_heel_port), math.degrees(heel.max_heel_starboard)


def _deflection(s: Subject) -> Answer:
    """Lengths times tangents from upright, zero offsets taken out and the list added."""
    upright = s.outcome.as_inclined.list_tan
    zero = {d.id: d.intercept for d in s.outcome.heel.devices}
    found: list[tuple[float, str]] = []
    for device in _used(s, "pendulum", "u-tube"):
        tangents = [p.tangent - zero[p.device] for p in s.counted() if p.device == device.id]
        if device.length is not None:
            turned = [100.0 * device.length * (t + (upright or 0.0)) for t in tangents]
            found.append((max(0.0, min(-min(turned), max(turned))), device.id))
    if not found:
        return Inapplicable("no pendulum or U-tube was read as a length")
    least, name = min(found)
    unknown = "" if upright is not None else " The list is not known: measured from the start."
    return one(least, note=f"Smallest at device {name}.{unknown}")


def _used(s: Subject, *kinds: str) -> list[Device]:
    read = {p.device for p in s.counted()}
    return [d for d in s.trial.devices if d.id in read and (not kinds or d.kind in kinds)]


def _device_count(s: Subject) -> Answer:
    count = len(_used(s))
    better = s.limits["pendulum-count"].numbers.get("recommended", 0.0)
    return one(count, note=f"{better:.0f} are recommended." if count < better else "")


def _device_count_small(s: Subject) -> Answer:
    most = s.limits["pendulum-count-small"].numbers.get("small_length", math.inf)
    if s.trial.vessel.lpp > most:
        return Inapplicable(f"the vessel is longer than {most:g} m")
    return one(len(_used(s)))


def _pendulums(s: Subject) -> Answer:
    return one(len(_used(s, "pendulum")))


def _pendulum_length(s: Subject) -> Answer:
    lengths = [d.length for d in _used(s, "pendulum") if d.length is not None]
    if not lengths:
        return Inapplicable("no pendulum of known length was read")
    return one(min(lengths), s.size("pendulum-length"))


def _moments(s: Subject) -> list[tuple[int, float]]:
    """Shift and moment of the shifts that were read."""
    read = {p.shift for p in s.counted()}
    return [(h.shift, h.transverse) for h in s.outcome.heel.shifts if h.shift in read]


def _near(moments: list[tuple[int, float]]) -> float:
    return _SAME * max((abs(m) for _, m in moments), default=0.0)


def _movements(s: Subject) -> Answer:
    read = _moments(s)
    every = [(h.shift, h.transverse) for h in s.outcome.heel.shifts]
    near, seen = _near(every), {shift for shift, _ in read}
    count = sum(abs(b - a) > near and shift in seen for (_, a), (shift, b) in pairwise(every))
    first = bool(read) and read[0][0] == s.outcome.heel.shifts[0].shift
    ratio = _residual_share(s)
    straight = ratio is not None and s.limits["straight-plot"].range.holds(ratio)
    enough = s.limits["movements"].range.holds(count)
    return one(count, "straight plot" if first and straight and not enough else "")


def _zero_returns(s: Subject) -> Answer:
    read = _moments(s)
    start = s.outcome.heel.shifts[0].shift
    return one(sum(abs(m) <= _near(read) for shift, m in read if shift != start))


def _both_sides(s: Subject) -> Answer:
    read = _moments(s)
    sides = [_distinct([sign * m for _, m in read], _near(read)) for sign in (-1.0, 1.0)]
    return Found(((min(sides), ""),), f"{sides[0]} P, {sides[1]} S")


def _distinct(moments: list[float], near: float) -> int:
    ordered = sorted(m for m in moments if m > near)
    return sum(b - a > near for a, b in pairwise([0.0, *ordered]))


def _weights_constant(s: Subject) -> Answer:
    if not s.trial.weights:
        return Unrecorded("the place of each test weight at each shift")
    return Words("all aboard throughout", ok=True)  # the reader refuses anything else


def _travel(s: Subject) -> Answer:
    """Fore-aft over transverse travel of single moves; vertical travel is said as well."""
    if not s.trial.weights:
        return Unrecorded("the places of the test weights")
    at = {w.id: (w.x, 0.0, w.z) for w in s.trial.weights}
    start = s.trial.shifts[0].number
    most = [0.0, 0.0, 0.0]
    for shift in s.trial.shifts:
        for move in shift.moves:
            x, y, z = at[move.weight]
            now = (x if move.x is None else move.x, move.y, z if move.z is None else move.z)
            if shift.number != start:
                steps = [abs(b - a) for a, b in zip((x, y, z), now, strict=True)]
                most = [max(pair) for pair in zip(most, steps, strict=True)]
            at[move.weight] = now
    if most[1] <= 0.0:
        return Inapplicable("no test weight moved across")
    return one(
        100.0 * most[0] / most[1],
        note=f"Greatest travel {most[0]:.3f} m fore and aft, {most[2]:.3f} m up or down.",
    )


def _certificates(s: Subject) -> Answer:
    weights = s.trial.weights
    lacking = [w.id for w in weights if not w.certificate]
    if len(lacking) == len(weights):
        return Unrecorded("certificates of the test weights")
    text = f"{len(weights) - len(lacking)} of {len(weights)}"
    return Words(text, not lacking, f"None for {', '.join(lacking)}." if lacking else "")


def _liquid(s: Subject) -> Answer:
    liquid = [w.id for w in s.trial.weights if w.kind == "liquid"]
    if not liquid:
        return Inapplicable("no test weight is recorded as liquid")
    return Words(f"liquid: {', '.join(liquid)}", ok=False)


def _straight(s: Subject) -> Answer:
    ratio = _residual_share(s)
    if ratio is None:
        return Unrecorded("more readings than the line has unknowns")
    return one(ratio)


def _residual_share(s: Subject) -> float | None:
    """Residual standard deviation over the largest fitted tangent from the start [%]."""
    heel = s.outcome.heel
    largest = heel.slope * max((abs(p.moment) for p in s.counted()), default=0.0)
    if heel.residual_sd is None or largest <= 0.0:
        return None
    return 100.0 * heel.residual_sd / largest


def _scatter(s: Subject) -> Answer:
    """Student's t (two-sided) times the standard error of the mean GM of single movements."""
    from scipy.special import stdtrit

    given = s.limits["scatter-number"].numbers
    single = _single_gm(s)
    n = len(single)
    if n < given["movements"]:
        text = f"{n} movements that can be worked out alone"
        return Words(text, ok=False, note=f"{given['movements']:.0f} are needed.")
    mean = sum(single) / n
    spread = math.sqrt(sum((g - mean) ** 2 for g in single) / (n - 1))
    error = float(stdtrit(n - 1, 1.0 - given["risk"] / 2.0)) * spread / math.sqrt(n)
    part = "low" if mean <= given["boundary"] else "high"
    allowed = given[f"{part}_factor"] * (given[f"{part}_term"] + mean)
    note = f"Error {error:.4f} m, allowed {allowed:.4f} m, mean GM {mean:.4f} m of {n} movements."
    return one(100.0 * error / allowed, note=note)


def _single_gm(s: Subject) -> list[float]:
    """GM of each movement [m]: change of moment over displacement and mean change of tangent."""
    heel = s.outcome.heel
    zero = {d.id: d.intercept for d in heel.devices}
    seen: dict[int, list[tuple[float, float]]] = {}
    for p in s.counted():
        seen.setdefault(p.shift, []).append((p.moment, p.tangent - zero[p.device]))
    order = [h.shift for h in heel.shifts]
    near = _SAME * max((abs(p.moment) for p in s.counted()), default=0.0)
    found: list[float] = []
    for a, b in pairwise(order):
        if a not in seen or b not in seen:
            continue
        moment = seen[b][0][0] - seen[a][0][0]
        turned = _mean(seen[b]) - _mean(seen[a])
        if abs(moment) > near and turned != 0.0:
            found.append(moment / (turned * s.outcome.as_inclined.displacement))
    return found


def _mean(pairs: list[tuple[float, float]]) -> float:
    return sum(t for _, t in pairs) / len(pairs)


def _surroundings(s: Subject) -> Answer:
    here = s.trial.environment
    said = {
        "shelter": here.shelter,
        "water depth": s.trial.occasion.water_depth,
        "lines": here.lines,
        "gangway": here.gangway,
        "wind": here.wind or here.wind_speed,
        "current": here.current,
    }
    missing = [name for name, value in said.items() if value in ("", None)]
    text = f"{', '.join(missing)} (in [environment])"
    return Unrecorded(text) if missing else Words("recorded", ok=True)


def _wind(s: Subject) -> Answer:
    here = s.trial.environment
    if here.wind_speed is None:
        return Found((), here.wind, missing="wind_speed (in [environment])")
    return one(here.wind_speed, note=f"In the records: {here.wind}." if here.wind else "")


def _notice(s: Subject) -> Answer:
    sent = s.trial.occasion.notice_date
    if sent is None:
        return Unrecorded("the day on which the procedure was sent (notice_date in [test])")
    return one((s.trial.occasion.date - sent).days)


PROCEDURE: dict[str, Measure] = {
    "heel-range": _heel_each_side,
    "heel-range-us": _greatest_heel,
    "deflection-10": _deflection,
    "deflection-15": _deflection,
    "pendulum-count": _device_count,
    "pendulum-count-small": _device_count_small,
    "pendulum-present": _pendulums,
    "pendulum-length": _pendulum_length,
    "movements": _movements,
    "zero-returns": _zero_returns,
    "both-sides": _both_sides,
    "test-weights-constant": _weights_constant,
    "shift-transverse": _travel,
    "weights-certified": _certificates,
    "liquid-as-weight": _liquid,
    "straight-plot": _straight,
    "scatter-number": _scatter,
    "environment": _surroundings,
    "wind": _wind,
    "notice-us": _notice,
}
