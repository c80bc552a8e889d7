"""For each device a sheet for its readings, with a row for each shift."""

from __future__ import annotations

import math
from dataclasses import dataclass, replace
from typing import TYPE_CHECKING, Any

from incline.sheets.forms import Column, boxes, form, text
from incline.swings import reduce_reading
from incline.units import ANGLE, factor

if TYPE_CHECKING:
    from incline.record import Device, Reading
    from incline.report.show import RawKind
    from incline.sheets.book import Book
    from incline.sheets.sequence import ShiftRow

__all__ = ["Shown", "device_title", "expected_of", "reading_sheet", "reduced_of", "shown_by"]

_EXTREMES = 7
"""Columns for readings of one shift."""
_LENGTHS = {"pendulum": "length, pivot to batten", "u-tube": "span between the legs"}


@dataclass(frozen=True, slots=True)
class Shown:
    """How a device's readings are written: the quantity, its unit, its size, its decimals."""

    quantity: RawKind
    unit: str
    size: float
    decimals: int


def device_title(device: Device, number: int) -> str:
    """What a device is called in headings."""
    return device.id or f"device {number}"


def shown_by(book: Book, device: Device) -> Shown:
    """How a device is read: as its readings so far, else in the usual unit of its kind."""
    mine = [r for r in book.trial.readings if r.device == device.id and device.id]
    quantity: RawKind = mine[0].quantity if mine else "length"
    if not mine and device.kind == "inclinometer":
        quantity = "angle"
    size = {"length": book.show.scale("reading"), "angle": factor("deg", ANGLE), "tangent": 1.0}
    metric = book.show.system.name == "metric"
    decimals = {"length": 1 if metric else 2, "angle": 3, "tangent": 5}
    return Shown(quantity, book.show.raw_unit(quantity), size[quantity], decimals[quantity])


def expected_of(book: Book, device: Device, shown: Shown, row: ShiftRow) -> float | None:
    """What the device should show from its zero, in the unit of its readings."""
    if book.prediction is None or row.moment is None:
        return None
    if shown.quantity == "tangent":
        return book.prediction.tangent(row.moment)
    value = book.prediction.deflection(device, row.moment)
    return None if value is None else value / shown.size


def _of_shift(book: Book, device: Device, row: ShiftRow) -> list[Reading]:
    if not device.id:
        return []
    return [r for r in book.trial.readings if (r.shift, r.device) == (row.number, device.id)]


def reduced_of(book: Book, device: Device, row: ShiftRow) -> float | None:
    """The rest value of the reading that counts [m, rad, tangent]; None before there is one."""
    for reading in _of_shift(book, device, row):
        if not reading.excluded and _is_whole(reading):
            return reduce_reading(reading).value
    return None


def _read(reading: Reading) -> Reading:
    """A reading without the figures that could not be read."""
    return replace(reading, values=tuple(v for v in reading.values if math.isfinite(v)))


def _is_whole(reading: Reading) -> bool:
    """Whether every figure could be read, and a swing has the three extremes that it needs."""
    enough = reading.kind != "swings" or len(reading.values) >= 3
    return enough and all(math.isfinite(v) for v in reading.values)


def reading_sheet(book: Book, device: Device) -> list[Any]:
    """Particulars of the device, and a row for each shift."""
    shown = shown_by(book, device)
    numbers = tuple(Column(str(n), 0.065, "right") for n in range(1, _EXTREMES + 1))
    unit = book.show.unit("moment")
    stepped = any(r.steps is not None for r in book.rows)
    columns = (
        Column("shift", 0.05), Column("time", 0.065),
        Column("moment, in moves" if stepped else f"moment [{unit}]", 0.08, "right"),
        Column(f"expected from zero [{shown.unit}]", 0.085, "right"), *numbers,
        Column(f"reduced [{shown.unit}]", 0.085, "right"), Column("reader", 0.08),
        Column("remarks", 0.10),
    )  # fmt: skip
    rows = [cells for row in book.rows for cells in _rows(book, device, shown, row)]
    return [
        boxes(_particulars(book, device, shown), book.broad, abreast=4, high=28.0),
        text(
            f"Readings [{shown.unit}] are positive when they show heel to starboard. Columns 1 to"
            " 7: the extremes of a swing as they follow one another, three at the least; or"
            " repeats; or one reading. Reduced by hand: of three extremes (first + 2 × second +"
            " third) / 4, of more the mean of that over each three in a row. All devices in the"
            " same minute."
        ),
        form(columns, rows, book.broad, spare=1),
    ]


def _particulars(book: Book, device: Device, shown: Shown) -> list[tuple[str, str]]:
    named = bool(device.id)
    kind = book.word(device.where, "kind", device.kind) if named else ""
    key = {"u-tube": "span"}.get(device.kind, "length")
    length = book.full(device.where, key, device.length, "length")
    step = "" if device.resolution is None else f"{device.resolution / shown.size:.3g} {shown.unit}"
    return [
        ("device", device.id),
        ("kind", kind),
        (_LENGTHS.get(kind, "length or span"), "none" if kind == "inclinometer" else length),
        ("length measured again", ""),
        ("place on board", device.place),
        ("calibration", device.calibration),
        ("step of the scale", step if book.partial.knows(device.where, "resolution") else ""),
        ("damping; reader's name", ""),
    ]


def _rows(book: Book, device: Device, shown: Shown, row: ShiftRow) -> list[tuple[str, ...]]:
    """The row of a shift; more where it was read more than once, or has many extremes."""
    expected = expected_of(book, device, shown, row)
    start = (
        str(row.number),
        row.time,
        book.moment(row),
        "" if expected is None else book.show.plain(expected, shown.decimals),
    )
    made: list[tuple[str, ...]] = []
    for reading in _of_shift(book, device, row):
        exact = book.show.raw_decimals(map(_read, book.trial.readings))[reading.quantity]
        values = [
            "" if math.isnan(v) else book.show.raw(v, reading.quantity, exact)
            for v in reading.values
        ]
        rest = ""
        if _is_whole(reading):
            value = reduce_reading(reading).value / shown.size
            rest = book.show.plain(value, shown.decimals)
        for i in range(0, len(values), _EXTREMES):
            some = values[i : i + _EXTREMES]
            said = _said(reading) if i == 0 else "continued"
            blank = [""] * (_EXTREMES - len(some))
            made.append((*start, *some, *blank, rest if i == 0 else "", "", said))
    return made or [(*start, *[""] * (_EXTREMES + 3))]


def _said(reading: Reading) -> str:
    out = f"excluded: {reading.excluded}" if reading.excluded else ""
    return "; ".join(words for words in (out, reading.note) if words)
