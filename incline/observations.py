"""All readings of a trial brought to tangents, and which of them count."""

from __future__ import annotations

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


def observe(trial: Trial, *, with_excluded: bool = False) -> Observations:
    """Reduce the readings of a trial; excluded ones count only when asked for."""
    import numpy as np

    length = {d.id: d.length for d in trial.devices}
    every = []
    for reading in trial.readings:
        reduced = reduce_reading(reading)
        tangent = _tangent(reading, reduced.value, length[reading.device])
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


def _weights(devices: Sequence[Device], device: NDArray[np.intp]) -> Floats | None:
    """Relative weights of the readings: one over the squared resolution in tangents."""
    import numpy as np

    steps = [None if d.resolution is None else d.resolution / (d.length or 1.0) for d in devices]
    if any(s is None or s <= 0.0 for s in steps):
        return None
    by_device = np.array([1.0 / float(s or 1.0) ** 2 for s in steps])
    weight: Floats = by_device[device] / by_device[device].mean()
    return weight


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
