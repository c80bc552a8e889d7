"""For each device: a sheet for its readings by shift, and paper to plot them on as they come."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING, Any

from incline.sheets.forms import ROW, Column, boxes, form, text
from incline.sheets.graph import GraphPaper, scale_of
from incline.swings import reduce_reading
from incline.units import ANGLE, factor

if TYPE_CHECKING:
    from incline.record import Device, Reading
    from incline.report.show import RawKind
    from incline.sheets.book import Book
    from incline.sheets.sequence import ShiftRow

__all__ = ["device_title", "reading_sheet", "running_plot"]

_EXTREMES = 7
"""Columns for readings of one shift."""
_LENGTHS = {"pendulum": "length, pivot to batten", "u-tube": "span between the legs"}
_PLOT_ROW = 22.7
"""Height of a row beside the plot [pt]: 8 mm."""
_PLOT_LEAST, _PLOT_MOST = 300.0, 400.0
_AROUND_PLOT = 245.0
"""What else stands on an upright page with a plot: margins, heading, boxes, notes [pt]."""


@dataclass(frozen=True, slots=True)
class _Shown:
    """How a device's readings are written: the quantity, its unit, its size, its decimals."""

    quantity: RawKind
    unit: str
    size: float
    decimals: int


def device_title(device: Device, number: int) -> str:
    """What a device is called in headings."""
    return device.id or f"device {number}"


def _shown(book: Book, device: Device) -> _Shown:
    mine = [r for r in book.trial.readings if r.device == device.id and device.id]
    quantity: RawKind = mine[0].quantity if mine else "length"
    if not mine and device.kind == "inclinometer":
        quantity = "angle"
    size = {"length": book.show.scale("reading"), "angle": factor("deg", ANGLE), "tangent": 1.0}
    metric = book.show.system.name == "metric"
    decimals = {"length": 1 if metric else 2, "angle": 3, "tangent": 5}
    return _Shown(quantity, book.show.raw_unit(quantity), size[quantity], decimals[quantity])


def _expected(book: Book, device: Device, shown: _Shown, row: ShiftRow) -> float | None:
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


def _reduced(book: Book, device: Device, row: ShiftRow) -> float | None:
    """The rest value of the reading that counts [m, rad, tangent]; None before there is one."""
    for reading in _of_shift(book, device, row):
        if not reading.excluded and _is_whole(reading):
            return reduce_reading(reading).value
    return None


def _is_whole(reading: Reading) -> bool:
    """Whether every figure could be read, and a swing has the three extremes that it needs."""
    enough = reading.kind != "swings" or len(reading.values) >= 3
    return enough and all(math.isfinite(v) for v in reading.values)


def reading_sheet(book: Book, device: Device) -> list[Any]:
    """Particulars of the device, and a row for each shift."""
    shown = _shown(book, device)
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
            " repeats; or one reading. Reduced by hand: of three extremes (first + 2 × second + third) / 4,"
            " of more the mean of that over each three in a row. All devices in the same minute."
        ),
        form(columns, rows, book.broad, spare=1),
    ]


def _particulars(book: Book, device: Device, shown: _Shown) -> list[tuple[str, str]]:
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


def _rows(book: Book, device: Device, shown: _Shown, row: ShiftRow) -> list[tuple[str, ...]]:
    """The row of a shift; more where it was read more than once, or has many extremes."""
    expected = _expected(book, device, shown, row)
    start = (
        str(row.number),
        row.time,
        book.moment(row),
        "" if expected is None else book.show.plain(expected, shown.decimals),
    )
    made: list[tuple[str, ...]] = []
    for reading in _of_shift(book, device, row):
        exact = book.show.raw_decimals(book.trial.readings)[reading.quantity]
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


def running_plot(book: Book, device: Device) -> list[Any]:
    """Graph paper scaled to what is expected, and a table of the points to plot."""
    shown = _shown(book, device)
    expected = [(r, _expected(book, device, shown, r)) for r in book.rows]
    high = book.page[1] - _AROUND_PLOT - _PLOT_ROW * (len(book.rows) + 1)
    paper = (book.width, min(_PLOT_MOST, max(_PLOT_LEAST, high)))
    return [
        text(_explained(book)),
        _paper(book, shown, device, paper),
        _points(book, device, shown, expected),
    ]


def _explained(book: Book) -> str:
    said = (
        "Plot each reduced reading, less that of the first shift, against its moment before the"
        " next weight moves. A point off the line of the others is read again."
    )
    known, show = book.prediction, book.show
    if known is None or not any(r.moment for r in book.rows):
        return said
    return (
        f"{said} Dashed: what is expected with GM {show.full(known.gm, 'length')}"
        f" ({known.gm_from}) and displacement {show.full(known.displacement, 'mass', 1)}"
        f" ({known.displacement_from}): a guide, not a limit."
    )


def _paper(book: Book, shown: _Shown, device: Device, size: tuple[float, float]) -> GraphPaper:
    unit = book.show.unit("moment")
    scale = book.show.scale("moment")
    moments = {r.number: r.moment / scale for r in book.rows if r.moment is not None}
    across = f"moment to starboard [{unit}]"
    if not any(moments.values()):
        moments = {r.number: float(r.steps) for r in book.rows if r.steps is not None}
        across = f"moment to starboard: 1 move of a weight = ____________ {unit}"
    if not any(moments.values()):
        across = f"moment to starboard: 1 division = ____________ {unit}"
    heights = {
        r.number: e for r in book.rows if (e := _expected(book, device, shown, r)) is not None
    }
    up = f"deflection from zero, to starboard [{shown.unit}]"
    if not any(heights.values()):
        up = f"deflection from zero, to starboard: 1 division = ________ {shown.unit}"
    scales = (scale_of(list(moments.values()), 10, 1.15), scale_of(list(heights.values()), 10, 1.3))
    points: dict[tuple[float, float], list[int]] = {}
    for number, height in heights.items():
        points.setdefault((round(moments[number], 9), round(height, 9)), []).append(number)
    marks = (
        [(*at, ", ".join(map(str, n))) for at, n in points.items()] if any(heights.values()) else []
    )
    return GraphPaper(size, scales, (across, up), _line(points) if marks else (), marks)


def _line(points: dict[tuple[float, float], list[int]]) -> list[tuple[float, float]]:
    """The points in order, carried a little beyond the outermost on each side."""
    ordered = sorted(points)
    (a, b), (y, z) = ordered[0], ordered[-1]
    return [(1.08 * a, 1.08 * b), *ordered, (1.08 * y, 1.08 * z)]


def _points(
    book: Book, device: Device, shown: _Shown, expected: list[tuple[ShiftRow, float | None]]
) -> Any:  # noqa: ANN401 - untyped library
    unit, plain = book.show.unit("moment"), book.show.plain
    stepped = any(r.steps is not None for r in book.rows)
    columns = (
        Column("shift", 0.10),
        Column("moment, in moves" if stepped else f"moment [{unit}]", 0.20, "right"),
        Column(f"expected [{shown.unit}]", 0.20, "right"),
        Column(f"reduced reading [{shown.unit}]", 0.22, "right"),
        Column("less the first", 0.18, "right"),
        Column("plotted", 0.10),
    )
    zero = _reduced(book, device, book.rows[0]) if book.rows else None
    rows = []
    for row, value in expected:
        read = _reduced(book, device, row)
        less = None if read is None or zero is None else read - zero
        rows.append((
            str(row.number),
            book.moment(row),
            "" if value is None else plain(value, shown.decimals),
            "" if read is None else plain(read / shown.size, shown.decimals),
            "" if less is None else plain(less / shown.size, shown.decimals),
            "",
        ))  # fmt: skip
    return form(columns, rows, book.width, high=min(ROW, _PLOT_ROW))
