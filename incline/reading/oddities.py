"""Test weights and shifts that can be as recorded, though a slip is likelier."""

from __future__ import annotations

import itertools
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from collections.abc import Sequence

    from incline.reading.cells import Sheet
    from incline.record import Shift, Weight

__all__ = ["shift_remarks", "weight_remarks"]

_UNLIKE = 5.0
"""Test weights of one trial differ by less than this factor as a rule."""
_HALF_DAY = 12 * 60


def weight_remarks(sheet: Sheet, weights: Sequence[Weight]) -> list[str]:
    """A remark when one test weight is several times another."""
    sound = [w for w in weights if w.mass > 0.0]
    if not sound:
        return []
    low, high = min(sound, key=lambda w: w.mass), max(sound, key=lambda w: w.mass)
    if high.mass <= _UNLIKE * low.mass:
        return []
    unit = sheet.placed["mass"].unit or ""
    raw = {row.number: row.raw("mass") for row in sheet.rows}
    light, heavy = (f"{w.id} of {raw[w.where.row]} {unit}" for w in (low, high))
    return [
        f"The test weights {light} and {heavy} differ by more than a factor of {_UNLIKE:g}: check"
        " the masses and their unit."
    ]


def shift_remarks(weights: Sequence[Weight], shifts: Sequence[Shift]) -> list[str]:
    """Remarks on shifts that move nothing, and on a clock that runs backwards."""
    return [*_idle(weights, shifts), *_clock(shifts)]


def _idle(weights: Sequence[Weight], shifts: Sequence[Shift]) -> list[str]:
    """Shifts whose rows all put a weight where it stands already."""
    x = {w.id: w.x for w in weights}
    y: dict[str, float] = {}
    z = {w.id: w.z for w in weights}
    said: list[str] = []
    for n, shift in enumerate(shifts):
        moved = False
        for move in shift.moves:
            name = move.weight
            for now, new in ((x, move.x), (y, move.y), (z, move.z)):
                if new is not None and now.get(name) != new:
                    moved = True
                    now[name] = new
        if n and shift.moves and not moved:
            said.append(f"At shift {shift.number} no weight changes place: check its rows.")
    return said


def _clock(shifts: Sequence[Shift]) -> list[str]:
    """Times before those of the shift before; a step back of half a day is one past midnight."""
    timed = [(s, int(s.time[:2]) * 60 + int(s.time[3:])) for s in shifts if s.time]
    return [
        f"At shift {b.number} the clock runs backwards: {b.time} after {a.time}."
        for (a, before), (b, after) in itertools.pairwise(timed)
        if after < before < after + _HALF_DAY
    ]
