"""All readings of a trial brought to tangents, and which of them count."""

from __future__ import annotations

import dataclasses
import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

from incline.swings import reduce_reading

if TYPE_CHECKING:
    from collections.abc import Sequence

    import numpy as np
    from numpy.typing import NDArray

    from incline.record import Device, Reading, Trial
    from incline.result import ReducedReading

    Floats = NDArray[np.float64]

__all__ = ["Observation", "Observations", "observe"]


@dataclass(frozen=True, slots=True)
class Observation:
    """One reading, its rest value and its tangent."""

    reading: Reading
    reduced: ReducedReading
    tangent: float
    counts: bool


@dataclass(frozen=True, slots=True, eq=False)
class Observations:
    """Every reading in the order of the record; arrays are over those that count.

    ``shift`` and ``device`` are indices into the trial's shifts and into ``devices``, the devices
    with readings that count. ``lengths`` (J) [m] is 1 for a device read in angles or tangents.
    ``weight`` (R) follows the resolution of the devices in tangents; None unless all state theirs.
    """

    every: tuple[Observation, ...]
    devices: tuple[Device, ...]
    shift: NDArray[np.intp]
    device: NDArray[np.intp]
    tangents: Floats
    lengths: Floats
    weight: Floats | None

    @property
    def counted(self) -> list[Observation]:
        """Those that count."""
        return [o for o in self.every if o.counts]

    def straightened(self, bend: Floats) -> Observations:
        """The same with ``bend`` (n,) of each shift taken off the tangents that count."""
        return dataclasses.replace(self, tangents=self.tangents - bend[self.shift])


def observe(trial: Trial, *, with_excluded: bool = False) -> Observations:
    """Reduce the readings of a trial; excluded ones count only when asked for."""
    import numpy as np

    length = {d.id: d.length for d in trial.devices}
    level = _level_angles(trial)
    every = []
    for reading in trial.readings:
        reduced = reduce_reading(reading)
        tangent = _tangent(
            reading, reduced.value - level.get(reading.device, 0.0), length[reading.device]
        )
        every.append(Observation(reading, reduced, tangent, with_excluded or not reading.excluded))
    counted = [o for o in every if o.counts]
    devices = tuple(d for d in trial.devices if any(o.reading.device == d.id for o in counted))
    names = [d.id for d in devices]
    numbers = [s.number for s in trial.shifts]
    device = np.array([names.index(o.reading.device) for o in counted], dtype=np.intp)
    direct = {o.reading.device for o in counted if o.reading.quantity != "length"}
    return Observations(
        every=tuple(every),
        devices=devices,
        shift=np.array([numbers.index(o.reading.shift) for o in counted], dtype=np.intp),
        device=device,
        tangents=np.array([o.tangent for o in counted]),
        lengths=np.array([1.0 if d.id in direct else d.length or 1.0 for d in devices]),
        weight=_weights(devices, device),
    )


_HAND, _HAND_ANGLE = 0.0005, 0.0001
"""Scatter of a reading besides its resolution [m], [rad]: no device is read without any, so that a
fine scale does not decide alone. Engineering judgement."""


def _weights(devices: Sequence[Device], device: NDArray[np.intp]) -> Floats | None:
    """Relative weights of the readings: one over what resolution and reading leave in tangents."""
    import numpy as np

    if any(d.resolution is None for d in devices):
        return None
    squares = [
        ((d.resolution or 0.0) ** 2 / 12.0 + (_HAND if d.length else _HAND_ANGLE) ** 2)
        / (d.length or 1.0) ** 2
        for d in devices
    ]
    by_device = 1.0 / np.array(squares)
    weight: Floats = by_device[device] / by_device[device].mean()
    return weight


def _level_angles(trial: Trial) -> dict[str, float]:
    """Mean angle [rad] of each inclinometer.

    Its zero is arbitrary, and a tangent taken far from it would stretch the angles: they are
    counted from their mean, which is the ship nearly upright.
    """
    angles: dict[str, list[float]] = {}
    for r in trial.readings:
        if r.quantity == "angle":
            angles.setdefault(r.device, []).append(reduce_reading(r).value)
    return {device: sum(v) / len(v) for device, v in angles.items()}


def _tangent(reading: Reading, value: float, length: float | None) -> float:
    if reading.quantity == "angle":
        return math.tan(value)
    if reading.quantity == "length" and length is not None:
        return value / length
    return value


def distinct(values: Sequence[float], near: float) -> int:
    """How many values differ from one another by more than ``near``."""
    ordered = sorted(values)
    return sum(1 for a, b in zip([-math.inf, *ordered], ordered, strict=False) if b - a > near)
