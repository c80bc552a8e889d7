"""``readings.csv``: what each device showed at each shift."""

from __future__ import annotations

import math
import re
from dataclasses import dataclass
from typing import TYPE_CHECKING, Literal

from incline.errors import Where
from incline.reading.aboard import LENGTH_KEYS
from incline.reading.cells import Column
from incline.reading.collect import nearest, quoted
from incline.reading.splits import check_apart, check_split, check_words
from incline.reading.tomlfile import FILE
from incline.reading.weights import shift_number
from incline.record import Reading
from incline.units import ANGLE, FRACTION, LENGTH, QuantityError, factor

if TYPE_CHECKING:
    from collections.abc import Iterable, Sequence

    from incline.reading.cells import Row, Sheet
    from incline.reading.collect import Collector
    from incline.reading.csvtable import RawTable
    from incline.record import Device
    from incline.units import Quantity

__all__ = ["check_devices", "check_shifts", "read_readings", "reading_columns"]

_Kind = Literal["single", "repeats", "swings"]
_Shown = Literal["length", "angle", "tangent"]
_LEAST: dict[_Kind, int] = {"single": 1, "repeats": 2, "swings": 3}
_QUANTITIES: dict[_Shown, Quantity] = {"length": LENGTH, "angle": ANGLE, "tangent": FRACTION}
_UNITS = "mm, cm, m, in, ft, deg, rad, or 1 for a tangent"


def reading_columns(raw: RawTable) -> tuple[Column, ...]:
    """The columns of this table: ``reading``, ``reading 2`` and on, as many as the header has."""
    names = [" ".join(h.split("[")[0].split()).casefold() for h in raw.header]
    counts = sorted(
        {int(n[8:]) for n in names if re.fullmatch(r"reading [1-9][0-9]{0,3}", n)} - {1}
    )
    readings = ["reading", *(f"reading {n}" for n in counts)]
    return (
        Column("shift", required=True),
        Column("device", required=True),
        Column("kind"),
        *(Column(n, required=n == "reading", transverse=True, loose=True) for n in readings),
        Column("unit"),
        Column("exclude"),
    )


@dataclass(frozen=True, slots=True)
class _Columns:
    """The reading columns in order, and the unit in their headings (None: in a column, or bad)."""

    names: tuple[str, ...]
    unit: str | None


def read_readings(sheet: Sheet) -> tuple[tuple[Reading, ...], bool]:
    """The readings, and whether every row could be told apart by shift and device."""
    columns = _columns(sheet)
    readings: list[Reading] = []
    whole = True
    for row in sheet.rows:
        number = shift_number(row)
        device = row.text("device", required=True)
        reading = _reading(row, columns, number or 0, device)
        check_words(row)
        if number is None or not device:
            whole = False
        else:
            readings.append(reading)
    _check_twice(sheet, readings)
    check_split(sheet, readings)
    check_apart(sheet, readings)
    return tuple(readings), whole


def _columns(sheet: Sheet) -> _Columns:
    """Judge the headings: numbered without a gap, one unit for all, in one place."""
    names = [n for n in sheet.placed if re.fullmatch(r"reading( \d+)?", n)]
    names.sort(key=lambda n: int(n[8:] or 1))
    for place, name in enumerate(names, start=1):
        if place > 1 and name != f"reading {place}":
            sheet.lack(f"reading {place}", f"reading columns numbered up to {name} without a gap")
            break
    units = {n: sheet.placed[n].unit for n in names}
    first = units.get("reading")
    for name, unit in units.items():
        if sheet.has("unit"):
            if unit is not None:
                expected = "no unit in the heading where there is a column unit"
                sheet.fault(name, "unit-unwanted", quoted(unit), expected)
        elif unit is None:
            sheet.fault(name, "unit-missing", quoted(name), f"{name} with its unit: {_UNITS}")
        elif first is not None and unit != first:
            sheet.fault(name, "unit-wrong", quoted(unit), f"{first}, as in the column reading")
    if sheet.has("unit") or first is None:
        return _Columns(tuple(names), None)
    if _shown(first) is None:
        sheet.fault("reading", "unit-wrong", quoted(first), _UNITS)
        return _Columns(tuple(names), None)
    return _Columns(tuple(names), first)


def _shown(unit: str) -> _Shown | None:
    """What a unit measures."""
    for shown, quantity in _QUANTITIES.items():
        try:
            factor(unit, quantity)
        except QuantityError:
            continue
        return shown if unit != "%" else None
    return None


def _reading(row: Row, columns: _Columns, shift: int, device: str) -> Reading:
    unit = columns.unit or _row_unit(row)
    shown = _shown(unit) if unit else None
    filled = [n for n in columns.names if row.raw(n)]
    values = tuple(
        row.number_in(n, _QUANTITIES[shown], unit) if shown and unit else math.nan for n in filled
    )
    return Reading(
        shift=shift,
        device=device,
        kind=_kind(row, columns.names, filled),
        values=values or (math.nan,),
        quantity=shown or "length",
        note=row.text("note"),
        excluded=row.text("exclude"),
        where=row.where(),
    )


def _row_unit(row: Row) -> str | None:
    """The unit in the column ``unit``; None after a defect."""
    if not row.sheet.has("unit"):
        return None
    unit = row.text("unit", required=True)
    if unit and _shown(unit) is None:
        row.fault("unit", "unit-wrong", quoted(unit), _UNITS)
        return None
    return unit or None


def _kind(row: Row, names: Sequence[str], filled: Sequence[str]) -> _Kind:
    """How the values of a row belong together, checked against how many there are."""
    allowed: tuple[_Kind, ...] = ("single", "repeats", "swings")
    if not filled:
        row.missing("reading", "a reading", "leave the row out when there was none")
    elif len(filled) > 1 and not row.raw("kind"):
        found, expected = f"{len(filled)} readings and no kind", "repeats or swings in column kind"
        row.fault("kind", "readings-no-kind", found, expected)
        return "repeats"
    kind = row.choice("kind", allowed, "single")
    if kind is None or not filled:
        return "single"
    if kind == "single" and len(filled) > 1:
        expected = f"repeats or swings for {len(filled)} readings"
        row.fault("kind", "value-wrong", quoted(row.raw("kind")), expected)
    elif len(filled) < _LEAST[kind]:
        expected = f"{_LEAST[kind]} readings at least for {kind}"
        row.missing(f"reading {len(filled) + 1}", expected)
    elif tuple(filled) != tuple(names[: len(filled)]):
        gap = next(n for n in names if n not in filled)
        row.missing(gap, "readings one after another without a gap")
    return kind


def _check_twice(sheet: Sheet, readings: Iterable[Reading]) -> None:
    """A device is read once at a shift; readings set aside may stand beside the one that counts."""
    seen: dict[tuple[int, str], int] = {}
    for reading in readings:
        if reading.excluded:
            continue
        before = seen.setdefault((reading.shift, reading.device), reading.where.row)
        if before != reading.where.row:
            sheet.collector.add(
                Where(sheet.file, reading.where.row, "device"),
                "reading-twice",
                f"{quoted(reading.device)} again at shift {reading.shift}",
                f"one row for a device at a shift; row {before} is the first",
                "several readings stand side by side in one row, with a kind",
            )


def check_shifts(sheet: Sheet, numbers: Sequence[int], readings: Iterable[Reading]) -> None:
    """Every reading must belong to a shift that is known."""
    for reading in readings:
        if reading.shift not in numbers:
            where = Where(sheet.file, reading.where.row, "shift")
            expected = "the number of a shift in shifts.csv"
            sheet.collector.add(where, "shift-unknown", quoted(str(reading.shift)), expected)


def check_devices(
    sheet: Sheet, devices: Sequence[Device], readings: Sequence[Reading], *, whole: bool
) -> None:
    """Readings come from known devices, in the units of their kind, and each device has some."""
    known = {d.id: d for d in devices}
    for reading in readings:
        if reading.device not in known and "" not in known:
            where = Where(sheet.file, reading.where.row, "device")
            expected = "the id of a device in trial.toml"
            hint = nearest(reading.device, known)
            sheet.collector.add(where, "device-unknown", quoted(reading.device), expected, hint)
    for device in devices:
        mine = [r for r in readings if r.device == device.id]
        if mine:
            _check_units(sheet, device, mine)
        elif whole and device.id:
            expected = "a row in readings.csv"
            found = f"no reading of {quoted(device.id)}"
            sheet.collector.add(device.where, "device-without-readings", found, expected)


def _check_units(sheet: Sheet, device: Device, readings: Sequence[Reading]) -> None:
    fits: tuple[_Shown, ...] = ("length", "tangent")
    if device.kind == "inclinometer":
        fits = ("angle", "tangent")
    column = "unit" if sheet.has("unit") else "reading"
    good = [r for r in readings if not all(math.isnan(v) for v in r.values)]
    for reading in good:
        where = Where(sheet.file, reading.where.row, column)
        found = f"{quoted(device.id)} read in {_noun(reading.quantity)}"
        if reading.quantity not in fits:
            expected = f"{_noun(fits[0])} or the tangent itself from a device of kind {device.kind}"
            sheet.collector.add(where, "unit-wrong", found, expected)
        elif reading.quantity != good[0].quantity:
            expected = f"{_noun(good[0].quantity)}, as in row {good[0].where.row}"
            sheet.collector.add(where, "unit-wrong", found, expected)
    if device.length is None and device.kind != "inclinometer":
        _need_length(sheet.collector, device, good)


def _need_length(collector: Collector, device: Device, readings: Sequence[Reading]) -> None:
    if any(r.quantity == "length" for r in readings):
        key = LENGTH_KEYS[device.kind]
        where = Where(FILE, 0, f"{device.where.column}.{key}")
        expected = f"the {key} by which the readings of {quoted(device.id)} are divided"
        collector.add(where, "key-missing", "no such key", expected)


def _noun(quantity: _Shown) -> str:
    return {"length": "a length", "angle": "an angle", "tangent": "a tangent"}[quantity]
