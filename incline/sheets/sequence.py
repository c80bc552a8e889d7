"""The rows of a sheet by shift: where each test weight stands, what moved, and the moment."""

from __future__ import annotations

import math
from dataclasses import dataclass, field
from typing import TYPE_CHECKING

from incline.reading.weights import moments_by_shift

if TYPE_CHECKING:
    from collections.abc import Mapping

    from incline.reading.partial import Partial

__all__ = ["STANDARD_SHIFTS", "Place", "ShiftRow", "rows_of", "standard_rows"]

STANDARD_SHIFTS = 9
_PORT_START, _STARBOARD_START = ("A", "B"), ("C", "D")
_MOVED = ("", "A", "B", "B", "A", "C", "D", "D", "C")
"""Which weight crosses the deck at each shift of the usual sequence with four weights."""


@dataclass(frozen=True, slots=True)
class Place:
    """Where a test weight stands [m]; NaN where not known. ``side`` alone where that is all."""

    x: float = math.nan
    y: float = math.nan
    z: float = math.nan
    side: str = ""


@dataclass(frozen=True, slots=True)
class ShiftRow:
    """One shift. ``moment`` [t m] to starboard is None where not known.

    ``steps`` is the moment in units of one weight's move, in the usual sequence; ``moved`` are the
    weights that moved at this shift.
    """

    number: int
    time: str = ""
    places: Mapping[str, Place] = field(default_factory=dict)
    moved: frozenset[str] = frozenset()
    moment: float | None = None
    steps: int | None = None


def standard_rows() -> tuple[ShiftRow, ...]:
    """The usual sequence: four weights alike, two on each side, each over and back."""
    at = {**dict.fromkeys(_PORT_START, "port"), **dict.fromkeys(_STARBOARD_START, "starboard")}
    steps = 0
    rows: list[ShiftRow] = []
    for number, name in enumerate(_MOVED):
        if name:
            at[name] = "starboard" if at[name] == "port" else "port"
            steps += 1 if at[name] == "starboard" else -1
        places = {weight: Place(side=side) for weight, side in at.items()}
        rows.append(ShiftRow(number, places=places, moved=frozenset(name), steps=steps))
    return tuple(rows)


def _is_same(before: Place, now: Place) -> bool:
    """Whether a weight is known to stand where it stood: x and z need not be known for it."""
    along = ((before.x, now.x), (before.z, now.z))
    return before.y == now.y and all(a == b or math.isnan(a + b) for a, b in along)


def rows_of(partial: Partial) -> tuple[ShiftRow, ...]:
    """The shifts that a trial records, every weight's place carried on until it moves.

    A weight whose first place is told at a later shift, as when the first was left out, is not
    known to have moved there.
    """
    trial = partial.trial
    moments = moments_by_shift(trial.weights, trial.shifts)
    at = {w.id: Place(w.x, math.nan, w.z) for w in trial.weights}
    rows: list[ShiftRow] = []
    placed: set[str] = set()
    for shift, moment in zip(trial.shifts, moments, strict=True):
        stood = dict(at)
        for move in shift.moves:
            before = at.get(move.weight, Place())
            at[move.weight] = Place(
                before.x if move.x is None else move.x,
                move.y if partial.knows(move.where, "y") else math.nan,
                before.z if move.z is None else move.z,
            )
        named = {m.weight for m in shift.moves}
        moved = frozenset(n for n in named & placed if not _is_same(stood[n], at[n]))
        placed |= named
        rows.append(
            ShiftRow(
                number=shift.number,
                time=shift.time,
                places=dict(at),
                moved=moved,
                moment=None if math.isnan(moment) else moment,
            )
        )
    return tuple(rows)
