"""``weights.csv`` and ``shifts.csv``: the test weights and where they stood."""

from __future__ import annotations

import itertools
import math
import re
from dataclasses import dataclass, field
from typing import TYPE_CHECKING, Literal

from incline.errors import Where
from incline.reading.cells import Column
from incline.reading.collect import BAD, Sign, nearest, quoted
from incline.reading.uncertainty import of_row, written
from incline.record import Move, Shift, Weight
from incline.units import LENGTH, MASS, MOMENT

if TYPE_CHECKING:
    from collections.abc import Sequence

    from incline.reading.cells import Row, Sheet
    from incline.reading.settings import Frame

__all__ = [
    "SHIFT_COLUMNS", "WEIGHT_COLUMNS", "ShiftTable", "check_moments", "check_moves",
    "moments_by_shift", "read_shifts", "read_weights", "shift_number",
]  # fmt: skip

WEIGHT_COLUMNS = (
    Column("id", required=True),
    Column("mass", MASS, required=True, sign=Sign.POSITIVE, stated=True),
    Column("certificate", required=True),
    Column("x", LENGTH, required=True, stated=True),
    Column("z", LENGTH, required=True, stated=True),
    Column("kind"),
)
SHIFT_COLUMNS = (
    Column("shift", required=True),
    Column("time"),
    Column("weight"),
    Column("y", LENGTH, transverse=True, stated=True),
    Column("x", LENGTH, stated=True),
    Column("z", LENGTH, stated=True),
    Column("moment", MOMENT, transverse=True, stated=True),
    Column("weather"),
    Column("tide"),
)
_NEAR = 1e-9
"""Moments closer than this share of the largest are one moment: rounding of the arithmetic."""


def read_weights(sheet: Sheet, frame: Frame) -> tuple[Weight, ...]:
    """The test weights; two with the same id are a defect."""
    weights: list[Weight] = []
    seen: dict[str, int] = {}
    kinds: tuple[Literal["solid", "liquid"], ...] = ("solid", "liquid")
    for row in sheet.rows:
        x, z = row.need("x") + frame.x_shift, row.need("z")
        frame.hull.x(row, "x", x)
        frame.hull.z(row, "z", z)
        weight = Weight(
            id=row.text("id", required=True),
            mass=row.need("mass"),
            certificate=row.text("certificate"),
            x=x,
            z=z,
            where=row.where(),
            kind=row.choice("kind", kinds, "solid") or "solid",
            stated=of_row(row, "mass", "x", "z"),
        )
        before = seen.setdefault(weight.id.casefold(), row.number)
        if before != row.number and weight.id:
            expected = f"an id of its own; row {before} has the same"
            row.fault("id", "id-twice", quoted(weight.id), expected)
        weights.append(weight)
    return tuple(weights)


@dataclass(slots=True)
class ShiftTable:
    """The shifts. ``whole`` is False when the number of a row could not be read."""

    shifts: list[Shift] = field(default_factory=list)
    by_moment: bool = False
    whole: bool = True


def shift_number(row: Row) -> int | None:
    """The whole number of a shift; None after a defect."""
    found = row.text("shift")
    if re.fullmatch(r"[+-]?[0-9]{1,6}", found):
        return int(found)
    if found:
        row.fault("shift", "number-unreadable", quoted(found), "a whole number")
    else:
        row.missing("shift", "the number of a shift")
    return None


def read_shifts(sheet: Sheet, frame: Frame) -> ShiftTable:
    """The shifts in the order of the file, by moves of weights or by moments."""
    by_moment = _by_moment(sheet)
    if by_moment is None:
        return ShiftTable(whole=False)
    table = ShiftTable(by_moment=by_moment)
    groups: list[tuple[int, list[Row]]] = []
    for row in sheet.rows:
        number = shift_number(row)
        if number is None:
            table.whole = False
        elif groups and groups[-1][0] == number and not table.by_moment:
            groups[-1][1].append(row)
        else:
            _check_order(row, number, [n for n, _ in groups])
            groups.append((number, [row]))
    timed = any(row.raw("time") for row in sheet.rows)
    for number, rows in groups:
        table.shifts.append(
            Shift(
                number=number,
                time=_time(rows, timed=timed),
                moves=() if table.by_moment else _moves(rows, frame),
                moment=rows[0].need("moment") if table.by_moment else None,
                where=rows[0].where(),
                stated=of_row(rows[0], "moment") if table.by_moment else {},
                weather=_words(rows, "weather"),
                tide=_words(rows, "tide"),
            )
        )
    return table


def _by_moment(sheet: Sheet) -> bool | None:
    """Whether moments stand in place of moves; None after a defect that leaves it open."""
    placed = [n for n in ("weight", "y", "x", "z") if sheet.has(n)]
    expected = "either weight and y, or moment"
    if not sheet.has("moment"):
        for name in ("weight", "y"):
            if not sheet.has(name):
                sheet.lack(name, expected)
        return False
    if placed:
        sheet.fault("moment", "column-twice", f"moment beside {placed[0]}", expected)
        return None
    return True


def _check_order(row: Row, number: int, before: list[int]) -> None:
    if number in before:
        expected = "the rows of a shift one after another, each shift once"
        row.fault("shift", "shift-twice", quoted(str(number)), expected)
    elif before and number < before[-1]:
        row.fault("shift", "shift-order", quoted(str(number)), f"a number above {before[-1]}")


def _time(rows: list[Row], *, timed: bool) -> str:
    """Time of a shift as HH:MM; the first row must have it when any row of the table does."""
    expected = "a time such as 09:30"
    times: list[str] = []
    for row in rows:
        found = row.text("time")
        match = re.fullmatch(r"([01]?[0-9]|2[0-3]):([0-5][0-9])(?::[0-5][0-9])?", found)
        if match:
            times.append(f"{int(match[1]):02d}:{match[2]}")
            if times[-1] != times[0]:
                row.fault("time", "value-wrong", quoted(found), f"{times[0]} as above, or nothing")
        elif found:
            row.fault("time", "value-wrong", quoted(found), expected)
        elif timed and row is rows[0]:
            row.missing("time", expected)
    return times[0] if times else ""


def _words(rows: list[Row], column: str) -> str:
    """What the rows of a shift say in a column of text, each thing once."""
    return "; ".join(dict.fromkeys(filter(None, (row.text(column) for row in rows))))


def _moves(rows: list[Row], frame: Frame) -> tuple[Move, ...]:
    moves: list[Move] = []
    for row in rows:
        name = row.text("weight")
        if not name:
            if any(row.raw(c) for c in "yxz") or written(row, "y", "x", "z"):
                row.missing("weight", "the id of the weight that stands there")
            continue
        if any(m.weight == name for m in moves):
            expected = f"one place for each weight at shift {row.text('shift')}"
            row.fault("weight", "weight-in-two-places", quoted(name), expected)
        x, y, z = row.maybe("x"), row.need("y"), row.maybe("z")
        if x is not None:
            x += frame.x_shift
            frame.hull.x(row, "x", x)
        frame.hull.y(row, "y", y)
        frame.hull.z(row, "z", z)
        moves.append(
            Move(
                weight=name,
                y=y,
                x=x,
                z=z,
                where=row.where(),
                stated=of_row(row, "y", "x", "z"),
            )
        )
    return tuple(moves)


def check_moves(sheet: Sheet, weights: Sequence[Weight], shifts: Sequence[Shift]) -> None:
    """Every weight moved must be known, and every weight known must have a start."""
    names = [w.id for w in weights]
    for row in sheet.rows:
        found = row.text("weight")
        if found and found not in names and "" not in names:
            expected = "the id of a weight in weights.csv"
            row.fault("weight", "weight-unknown", quoted(found), expected, nearest(found, names))
    if not shifts:
        return
    start = [m.weight for m in shifts[0].moves]
    for weight in weights:
        if weight.id and weight.id not in start:
            sheet.collector.add(
                weight.where,
                "weight-nowhere",
                f"no place of {quoted(weight.id)} at the first shift",
                f"a row for it at shift {shifts[0].number} in shifts.csv",
                "with moments recorded, list it in ledger.csv" if sheet.has("moment") else "",
            )


def check_moments(sheet: Sheet, weights: Sequence[Weight], shifts: Sequence[Shift]) -> None:
    """A line needs three distinct moments at least; nothing is said while a moment is unknown."""
    moments = moments_by_shift(weights, shifts)
    if not moments or any(math.isnan(m) for m in moments):
        return
    near = _NEAR * max(abs(m) for m in moments)
    ordered = sorted(moments)
    distinct = 1 + sum(b - a > near for a, b in itertools.pairwise(ordered))
    column = "moment" if sheet.has("moment") else "y"
    if distinct == 1:
        found, expected = f"the same moment at {len(moments)} shifts", "moments that differ"
        sheet.collector.add(Where(sheet.file, 0, column), "moments-equal", found, expected)
    elif distinct < 3:
        found, expected = f"{distinct} distinct moments", "three distinct moments at least"
        sheet.collector.add(Where(sheet.file, 0, column), "moments-too-few", found, expected)


def moments_by_shift(weights: Sequence[Weight], shifts: Sequence[Shift]) -> list[float]:
    """Moments about the start [t m] to starboard; BAD where a weight or its start is not known."""
    mass = {w.id: w.mass for w in weights}
    start = {move.weight: move.y for shift in shifts[:1] for move in shift.moves}
    now: dict[str, float] = {}
    found: list[float] = []
    for shift in shifts:
        for move in shift.moves:
            now[move.weight] = move.y
        moment = sum(mass.get(w, BAD) * (y - start.get(w, BAD)) for w, y in now.items())
        found.append(moment if shift.moment is None else shift.moment)
    return found
