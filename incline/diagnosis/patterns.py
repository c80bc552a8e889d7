"""A dictionary of what may disturb a trial, each as a pattern over its readings.

A pattern is what a disturbance of unit size adds to the tangents (R,). Moments are scaled to 1 at
the largest. Where physics gives a sign the pattern counts in that direction only.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING, Literal

if TYPE_CHECKING:
    from collections.abc import Iterator

    import numpy as np
    from numpy.typing import NDArray

    Floats = NDArray[np.float64]

__all__ = ["Cause", "Layout", "Pattern", "Stay", "dictionary"]

Cause = Literal[
    "liquid at tank top or bottom",
    "line, fender or ground holding",
    "wind or current changed once",
    "slow drift",
    "one disturbed shift",
    "test weight misrecorded",
    "unsettled ship",
    "misread reading",
    "wrong length or scale",
    "device disturbed",
    "bob or float touching",
]


@dataclass(frozen=True, slots=True)
class Stay:
    """One stay of a test weight at a place: shifts ``first`` to before ``last`` (indices)."""

    weight: str
    first: int
    last: int


@dataclass(frozen=True, slots=True, eq=False)
class Layout:
    """Where the readings lie.

    Moments by shift scaled to 1 at the largest, clock times by shift scaled to run from 0 to 1, and
    the shift and device of each reading (R,).
    """

    moments: Floats
    times: Floats
    shift: NDArray[np.intp]
    device: NDArray[np.intp]
    stays: tuple[Stay, ...] = ()

    @property
    def shifts(self) -> int:
        """Number of shifts."""
        return len(self.moments)

    @property
    def devices(self) -> int:
        """Number of devices."""
        return int(self.device.max()) + 1

    def fixed(self) -> Floats:
        """The undisturbed model: slope and a zero for each device (R, 1 + J)."""
        import numpy as np

        zeros = self.device[:, None] == np.arange(self.devices)
        return np.column_stack([self.moments[self.shift], zeros])


@dataclass(frozen=True, slots=True, eq=False)
class Pattern:
    """One explanation; ``one_sided`` when only a positive size makes physical sense."""

    cause: Cause
    where: Literal["ship", "device"]
    shape: Floats
    one_sided: bool = False
    shift: int | None = None
    device: int | None = None
    weight: str | None = None
    detail: str = ""


_ONSETS = (0.0, 0.2, 0.4, 0.6, 0.8)
"""Moments, as shares of the largest, at which a one-sided or two-sided hold may begin."""


def dictionary(layout: Layout) -> list[Pattern]:
    """All patterns that this layout can carry; the ship's first."""
    found = [*_ship(layout)]
    if layout.devices > 1:
        found += _device(layout)
    return found


def _steps(layout: Layout) -> range:
    """Shifts at which a step may lie: one at the first or last reading is that reading's own."""
    return range(2, layout.shifts - 1)


def _ship(layout: Layout) -> Iterator[Pattern]:
    import numpy as np

    m = layout.moments[layout.shift]
    for onset in _ONSETS[1:]:
        hold = -np.sign(m) * np.maximum(0.0, np.abs(m) - onset)
        yield Pattern("liquid at tank top or bottom", "ship", hold, one_sided=True)
    for side, word in ((1.0, "to starboard"), (-1.0, "to port")):
        for onset in _ONSETS:
            hold = -side * np.maximum(0.0, side * m - onset)
            yield Pattern(
                "line, fender or ground holding", "ship", hold, one_sided=True, detail=word
            )
    for k in _steps(layout):
        after = (layout.shift >= k).astype(float)
        yield Pattern("wind or current changed once", "ship", after, shift=k)
    yield Pattern("slow drift", "ship", layout.times[layout.shift])
    for k in range(layout.shifts):
        yield Pattern("one disturbed shift", "ship", (layout.shift == k).astype(float), shift=k)
    for stay in layout.stays:
        inside = (layout.shift >= stay.first) & (layout.shift < stay.last)
        yield Pattern(
            "test weight misrecorded", "ship", inside.astype(float), shift=stay.first,
            weight=stay.weight,
        )  # fmt: skip


def _device(layout: Layout) -> Iterator[Pattern]:
    import numpy as np

    m = layout.moments[layout.shift]
    for j in range(layout.devices):
        mine = layout.device == j
        for r in np.flatnonzero(mine):
            one = np.zeros(len(m))
            one[r] = 1.0
            yield Pattern("misread reading", "device", one, shift=int(layout.shift[r]), device=j)
        yield Pattern("wrong length or scale", "device", m * mine, device=j)
        for k in _steps(layout):
            after = ((layout.shift >= k) & mine).astype(float)
            yield Pattern("device disturbed", "device", after, shift=k, device=j)
        for onset in _ONSETS[1:]:
            hold = -np.sign(m) * np.maximum(0.0, np.abs(m) - onset) * mine
            yield Pattern("bob or float touching", "device", hold, one_sided=True, device=j)
