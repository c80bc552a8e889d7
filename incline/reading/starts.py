"""Where the test weights stand at the first shift, by ``shifts.csv`` and by ``weights.csv``."""

from __future__ import annotations

import itertools
from typing import TYPE_CHECKING, Literal

from incline.reading.collect import quoted
from incline.reading.splits import is_split, split_hint

if TYPE_CHECKING:
    from collections.abc import Sequence

    from incline.reading.cells import Row, Sheet
    from incline.record import Move, Shift, Weight

__all__ = ["check_starts"]

_ONE_PLACE = 0.005
"""Places nearer than this [m] are one, rounded to a centimetre or from another unit."""
_AXES: tuple[Literal["x", "z"], ...] = ("x", "z")


def check_starts(
    sheet: Sheet, of_weights: Sheet, weights: Sequence[Weight], shifts: Sequence[Shift]
) -> None:
    """The start of a weight may be told twice, but not in two places."""
    rows = {row.number: row for row in sheet.rows}
    listed = {row.number: row for row in of_weights.rows}
    known = {w.id: w for w in weights}
    for move in shifts[0].moves if shifts else ():
        weight, row = known.get(move.weight), rows[move.where.row]
        if weight is not None and row.whole:
            _check(row, listed[weight.where.row], move, weight)


def _check(row: Row, listed: Row, move: Move, weight: Weight) -> None:
    for axis in _AXES:
        here, there = getattr(move, axis), getattr(weight, axis)
        if here is None or not abs(here - there) > _ONE_PLACE:
            continue
        was, unit = listed.written(axis)
        row.fault(
            axis,
            "weight-in-two-places",
            quoted(row.raw(axis)),
            f"{quoted(f'{was} {unit}'.strip())} as in weights.csv, row {listed.number}, column"
            f" {quoted(axis)}: both tell where {quoted(weight.id)} stands at the first shift",
            _hint(row),
        )


def _hint(row: Row) -> str:
    """A hint at a decimal comma where two cells side by side could be one number."""
    names = sorted(
        (n for n in ("y", "x", "z") if row.sheet.has(n)), key=lambda n: row.sheet.placed[n].index
    )
    cells = [row.raw(n) for n in names]
    pairs = [f"{a}.{b}" for a, b in itertools.pairwise(cells) if is_split(a, b)]
    return split_hint(pairs) if pairs and not row.sheet.decimal_comma else ""
