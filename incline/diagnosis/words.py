"""What each finding means, how large it is, and what to do about it, in a surveyor's words."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

from incline.units import LENGTH, MOMENT, SYSTEMS

if TYPE_CHECKING:
    from incline.diagnosis.patterns import Cause, Pattern
    from incline.observations import Observation, Observations
    from incline.record import Trial, Weight
    from incline.units import Quantity

__all__ = ["ADVICE", "size_in_words"]

ADVICE: dict[Cause, str] = {
    "liquid at tank top or bottom": "Sound the slack tanks again; a surface that reaches top or"
    " bottom at the largest heel moves less. Fill to half or empty, and repeat the largest shifts.",
    "line, fender or ground holding": "Look at the lines, fenders, gangway and the depth under the"
    " keel on that side; slack them and repeat the shifts to that side.",
    "wind or current changed once": "Compare the log of wind and current with that time; repeat"
    " the shifts before or after it in steady conditions.",
    "slow drift": "Look for what changed with time: a leak between tanks, people moving, fuel"
    " burnt, the tide turning. Sound again and repeat the first shift.",
    "one disturbed shift": "Repeat that shift; a gust, a passing wash, or people who moved are"
    " usual causes.",
    "test weight misrecorded": "Measure that weight's place again and check its mass against the"
    " certificate.",
    "unsettled ship": "The ship was not at rest: all devices scatter alike. Repeat in calmer"
    " conditions or wait longer before each reading.",
    "misread reading": "Look at the field book and the batten mark; take the reading again, or"
    " exclude it with the reason.",
    "wrong length or scale": "Measure the device's length again, from the point of suspension to"
    " the batten.",
    "device disturbed": "Look whether the batten or the device was moved at that time; readings"
    " before and after do not share a zero.",
    "bob or float touching": "See that the bob hangs free of its trough and the float of its tube"
    " at the largest deflection; repeat the largest shifts.",
}


def size_in_words(
    pattern: Pattern,
    size: float,
    trial: Trial,
    seen: Observations,
    slope: float,
    largest: float,
    u: float,
) -> str:
    """How large a disturbance is, and what it looks like.

    ``size`` and ``u``, the scatter left, are in tangents; ``slope`` in tangents per t m;
    ``largest`` is the moment [t m] that the patterns count as 1.
    """
    if pattern.cause == "wrong length or scale" and pattern.device is not None:
        device = seen.devices[pattern.device]
        # The pattern is the moment as a share of the largest: so is the size of its slope.
        ratio = 1.0 + size / (slope * largest)
        if device.length is None:
            return f"its scale differs from the others' by {100.0 * (ratio - 1.0):+.2f} %"
        better = _show(trial, device.length * ratio, LENGTH, "length", 3)
        now = _show(trial, device.length, LENGTH, "length", 3)
        return f"a length of {better} instead of {now} would agree with the others"
    if pattern.cause == "misread reading":
        return _misread(pattern, size, trial, seen, u)
    if pattern.cause == "test weight misrecorded" and pattern.weight is not None:
        return _misrecorded(pattern, size / slope, trial, abs(u / slope))
    angle = math.degrees(math.atan(size))
    moment = _show(trial, size / slope, MOMENT, "moment", 2)
    side = f", heeled {pattern.detail}" if pattern.detail else ""
    return f"{angle:+.3f} deg, as {moment} would give{side}"


def _show(trial: Trial, value: float, quantity: Quantity, unit: str, decimals: int) -> str:
    """A value with its unit in the trial's units; ``unit`` names a field of the unit system."""
    system = SYSTEMS[trial.settings.units]
    name: str = getattr(system, unit)
    return f"{system.show(value, quantity, name, decimals)} {name}"


def _misread(pattern: Pattern, size: float, trial: Trial, seen: Observations, u: float) -> str:
    """By how much a reading is off, and the slip that would explain it."""
    one = _observation(pattern, seen)
    if one.reading.quantity != "length" or one.tangent == 0.0:
        return f"{size:+.5f} in tangent"
    length = one.reduced.value / one.tangent
    should = one.reduced.value - size * length
    places = 0 if trial.settings.units == "metric" else 2
    shown, better, off = (
        _show(trial, v, LENGTH, "reading", places)
        for v in (one.reduced.value, should, size * length)
    )
    text = f"reads {shown} where the others ask for {better} ({off} off)"
    slip = _slip(one.reduced.value, should, 3.0 * u * length + 0.001)
    return f"{text}: {slip}" if slip else text


def _slip(value: float, should: float, near: float) -> str:
    """The slip of the pen that turns the reading asked for into the one recorded, if any."""
    if abs(-value - should) < near:
        return "the side was swapped"
    if abs(should) > 3.0 * near:
        for factor in (10.0, 0.1, 100.0, 0.01):
            if abs(value / factor - should) < near:
                unit = {10.0: "mm for cm, or ", 0.1: "cm for mm, or "}.get(factor, "")
                return f"{unit}a slipped decimal"
    digits = str(abs(round(1000.0 * value)))
    for i in range(len(digits) - 1):
        swapped = digits[:i] + digits[i + 1] + digits[i] + digits[i + 2 :]
        if swapped != digits and abs(math.copysign(int(swapped) / 1000.0, value) - should) < near:
            return "two digits were transposed"
    for whole in (0.010, 0.020, 0.050, 0.100):
        if abs(abs(value - should) - whole) < min(near, 0.1 * whole):
            return f"off by a whole {round(1000.0 * whole)} mm mark"
    return ""


def _misrecorded(pattern: Pattern, error: float, trial: Trial, near: float) -> str:
    """How far a weight is from where it was recorded, and the slip that would explain it.

    ``error`` is the moment [t m] that the record lacks, ``near`` its scatter.
    """
    weight = next(w for w in trial.weights if w.id == pattern.weight)
    moment = _show(trial, error, MOMENT, "moment", 2)
    away = _show(trial, abs(error) / weight.mass, LENGTH, "length", 2)
    side = "starboard" if error > 0.0 else "port"
    text = f"weight {weight.id}: {moment}, as if it lay {away} farther to {side}"
    slip = _weight_slip(pattern, weight, trial, error, 3.0 * near)
    return f"{text}; {slip}" if slip else text


def _weight_slip(pattern: Pattern, weight: Weight, trial: Trial, error: float, near: float) -> str:
    at = pattern.shift or 0
    stays = [(i, m.y) for i, s in enumerate(trial.shifts) for m in s.moves if m.weight == weight.id]
    now = next(y for i, y in stays if i == at)
    start = stays[0][1]
    before = [y for i, y in stays if i < at][-1]
    if abs(error + weight.mass * (now - before)) < near:
        return "it seems not to have been moved"
    if abs(error + 2.0 * weight.mass * now) < near:
        return "it seems to lie on the other side"
    for other in trial.weights:
        swapped = (other.mass - weight.mass) * (now - start)
        if other.id != weight.id and abs(error - swapped) < min(near, 0.3 * abs(swapped)):
            return f"as if it had the mass of weight {other.id}"
    return ""


def _observation(pattern: Pattern, seen: Observations) -> Observation:
    import numpy as np

    return seen.counted[int(np.argmax(pattern.shape))]
