"""Where each test weight stands at each shift, and the moments that follow."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    import numpy as np
    from numpy.typing import NDArray

    from incline.record import Trial

    Floats = NDArray[np.float64]

__all__ = ["Placing", "place_weights"]


@dataclass(frozen=True, slots=True, eq=False)
class Placing:
    """Distinct places of the test weights, and who stands where at each shift.

    ``owner`` (W, K) is 1 where a weight has a place, ``y`` and ``z`` (K,) the places [m],
    ``change`` (K, n) is +1 where a place is taken at a shift and -1 where it was the start, so that
    (mass @ owner y) @ change is the moment about the start. ``start`` (K, W) is 1 at each weight's
    first place, ``start_x`` (W,) its x there; ``trimming`` and ``lifting`` (n,) are the
    longitudinal and vertical moments about the start [t m]. ``names`` (K,) says whose place it is
    and the shift at which it is first taken.
    """

    owner: Floats
    names: tuple[tuple[str, int], ...]
    y: Floats
    z: Floats
    change: Floats
    start: Floats
    start_x: Floats
    trimming: Floats
    lifting: Floats

    def about_start(self, mass: Floats, arm: Floats) -> Floats:
        """Moments about the start [t m], (..., n); mass (..., W) [t], arm (..., K) [m]."""
        moments: Floats = ((mass @ self.owner) * arm) @ self.change
        return moments


def place_weights(trial: Trial) -> Placing:
    """Follow the shifts of a trial; the reader has made sure that every weight has a start."""
    import numpy as np

    index = {w.id: i for i, w in enumerate(trial.weights)}
    heights = {w.id: w.z for w in trial.weights}
    along = {w.id: w.x for w in trial.weights}
    places: dict[tuple[str, float, float], int] = {}
    names: list[tuple[str, int]] = []
    standing: dict[str, int] = {}
    start: dict[str, int] = {}
    start_x: dict[str, float] = {}
    held: list[dict[str, int]] = []
    trimming: list[float] = []
    for shift in trial.shifts:
        for move in shift.moves:
            heights[move.weight] = heights[move.weight] if move.z is None else move.z
            along[move.weight] = along[move.weight] if move.x is None else move.x
            key = (move.weight, move.y, heights[move.weight])
            if key not in places:
                places[key] = len(places)
                names.append((move.weight, shift.number))
            standing[move.weight] = places[key]
            start.setdefault(move.weight, standing[move.weight])
            start_x.setdefault(move.weight, along[move.weight])
        held.append(dict(standing))
        trimming.append(sum(w.mass * (along[w.id] - start_x.get(w.id, w.x)) for w in trial.weights))
    change = np.zeros((len(places), len(held)))
    for n, where in enumerate(held):
        for weight, place in where.items():
            change[place, n] += 1.0
            change[start[weight], n] -= 1.0
    owner, first = np.zeros((len(index), len(places))), np.zeros((len(places), len(index)))
    for (weight, _, _), place in places.items():
        owner[index[weight], place] = 1.0
    for weight, place in start.items():
        first[place, index[weight]] = 1.0
    z = np.array([z for _, _, z in places])
    mass = np.array([w.mass for w in trial.weights])
    return Placing(
        owner=owner,
        names=tuple(names),
        y=np.array([y for _, y, _ in places]),
        z=z,
        change=change,
        start=first,
        start_x=np.array([start_x[w.id] for w in trial.weights]),
        trimming=np.array(trimming),
        lifting=((mass @ owner) * z) @ change,
    )
