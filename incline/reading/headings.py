"""The header of a table matched against the columns known."""

from __future__ import annotations

import itertools
import re
from dataclasses import replace
from typing import TYPE_CHECKING

from incline.reading.cells import Column, Placed, Sheet
from incline.reading.collect import nearest, quoted
from incline.reading.splits import is_split, split_hint
from incline.reading.uncertainty import PERCENT, uncertainty_columns
from incline.units import FRACTION, QuantityError, factor

if TYPE_CHECKING:
    from collections.abc import Iterable, Mapping

    from incline.reading.cells import Row
    from incline.reading.collect import Collector
    from incline.reading.csvtable import RawTable

__all__ = ["open_sheet"]

_NO_HEADER = "the first row does not look like a header; commas or semicolons stand between cells"
_HEADING = re.compile(r"([^\[\]]*)(?:\[([^\[\]]*)\])?")


def open_sheet(raw: RawTable, columns: Iterable[Column], collector: Collector) -> Sheet | None:
    """Match a header against the columns known; every table may have a ``note`` column too.

    None when most of the first row is no heading at all: it is told once.

    A column that is not required and blank in every row counts as not there.
    """
    sheet = Sheet(raw, collector)
    named = (*columns, Column("note"))
    known = {c.name: c for c in (*named, *uncertainty_columns(named))}
    strange = [h for h in raw.header if h and not _resembles(h, known)]
    if 2 * len(strange) > sum(map(bool, raw.header)):
        found, expected = f"{quoted(strange[0])} in the first row", f"a header: {_required(known)}"
        sheet.fault("", "header-missing", found, expected, _NO_HEADER)
        return None
    for index, heading in enumerate(raw.header):
        _place(sheet, index, heading, known)
    for name, column in known.items():
        if column.required and not sheet.has(name):
            sheet.lack(name, _heading_of(column))
        elif sheet.has(name) and not (column.required or column.loose) and _is_blank(sheet, name):
            del sheet.placed[name]
    _check_beside(sheet)
    for row in sheet.rows:
        _check_width(row, len(raw.header))
    return sheet


def _resembles(heading: str, known: Mapping[str, Column]) -> bool:
    """Whether a cell of the first row could be meant as one of the headings."""
    name = " ".join(re.split(r"[\[(]", heading)[0].split()).casefold()
    if heading.count("[") > 1:  # a whole header with other marks between its headings
        return False
    return name in known or (name[:1].isalpha() and nearest(name, known) != "")


def _required(known: Mapping[str, Column]) -> str:
    """The headings of a table, its uncertainties left out."""
    return ", ".join(name for name, column in known.items() if column.of is None)


def _is_blank(sheet: Sheet, column: str) -> bool:
    """Whether there are rows, and none has anything in the column."""
    return bool(sheet.rows) and not any(row.raw(column) for row in sheet.rows)


def _check_beside(sheet: Sheet) -> None:
    """An uncertainty needs the column of its quantity, unless that may be worked out."""
    for name, placed in sheet.placed.items():
        of = placed.column.of
        if of and not of.derived and not sheet.has(of.name) and of.name not in sheet.absent:
            sheet.absent.add(of.name)
            expected = f"{of.name} filled in beside its uncertainty"
            sheet.fault(of.name, "column-missing", f"{name} alone", expected)


def _check_width(row: Row, width: int) -> None:
    if len(row.cells) <= width:
        return
    comma = row.sheet.decimal_comma
    row.fault(
        "",
        "cells-too-many",
        quoted((";" if comma else ",").join(row.cells[width:])),
        f"no more than {width} cells, as in the header of row {row.sheet.header_row}",
        "" if comma else _split_number(row, width),
    )


def _split_number(row: Row, width: int) -> str:
    """A hint at decimals behind a comma, where that comma stands between columns too."""
    plain = "where commas stand between columns, decimals have a point"
    numeric = {p.index for p in row.sheet.placed.values() if p.column.quantity or p.column.loose}
    pairs = [
        f"{a}.{b}"
        for i, (a, b) in enumerate(itertools.pairwise(row.cells))
        if i in numeric and is_split(a, b)
    ]
    if len(row.cells) != width + 1 or not pairs:
        return plain
    row.sheet.shifted.add(row.number)
    return split_hint(pairs)


def _place(sheet: Sheet, index: int, heading: str, known: Mapping[str, Column]) -> None:
    match = _HEADING.fullmatch(heading)
    name = " ".join((match[1] if match else heading).split()).casefold()
    if not heading:
        if any(index < len(r.cells) and r.cells[index] for r in sheet.rows):
            found = f"no heading over column {index + 1}"
            sheet.fault(
                "", "column-unknown", found, "a heading over every column that is filled in"
            )
        return
    if match is None or name not in known:
        base, _, rest = (part.strip() for part in name.partition("("))
        if base in known and rest:
            _place_in_round_brackets(sheet, index, heading, known[base])
            return
        hint = nearest(re.split(r"[\[(]", name)[0].strip(), known)
        if not hint and ("(" in heading or match is None):
            hint = "a heading is a name and a unit in square brackets, such as mass [t]"
        expected = _one_of(known)
        sheet.fault(quoted_name(name), "column-unknown", quoted(heading), expected, hint)
        return
    column = known[name]
    if sheet.has(name):
        sheet.fault(name, "column-twice", quoted(heading), f"one column {name}")
        return
    unit = None if match[2] is None else " ".join(match[2].split())
    if column.of and unit == PERCENT:
        column = replace(column, quantity=FRACTION)
    sheet.placed[name] = Placed(column, index, _checked_unit(sheet, column, heading, unit))


def _place_in_round_brackets(sheet: Sheet, index: int, heading: str, column: Column) -> None:
    """Tell of ``mass (t)`` and go on as if ``mass [t]`` stood there."""
    unit = heading.partition("(")[2].partition(")")[0].strip()
    hint = f"write the unit in square brackets: {column.name} [{unit}]"
    expected = f"{column.name} and its unit in square brackets"
    found = quoted(heading)
    sheet.fault(quoted_name(heading.casefold()), "column-unknown", found, expected, hint)
    if not sheet.has(column.name):
        known = _checked_unit(sheet, column, heading, unit)
        sheet.placed[column.name] = Placed(column, index, known)


def _one_of(known: Mapping[str, Column]) -> str:
    names = [name for name, column in known.items() if column.of is None]
    more = "" if len(names) == len(known) else "; or u, tolerance or resolution and a quantity"
    return f"one of {', '.join(names)}{more}"


def quoted_name(name: str) -> str:
    """A heading as the column of a `Where`: short and printable."""
    return quoted(name)[1:-1]


def _checked_unit(sheet: Sheet, column: Column, heading: str, unit: str | None) -> str | None:
    """The unit of a heading; None for text, and after a defect."""
    if column.loose:
        return unit or None
    if column.quantity is None:
        if unit is not None:
            sheet.fault(
                column.name, "unit-unwanted", quoted(heading), f"{column.name} without a unit"
            )
        return None
    if column.bare and not unit:
        return "1"
    if not unit:
        sheet.fault(column.name, "unit-missing", quoted(heading), _heading_of(column))
        return None
    try:
        factor(unit, column.quantity)
    except QuantityError as error:
        expected = error.expected + (", or % of the value" if column.of else "")
        sheet.fault(column.name, error.code, quoted(unit), expected, error.hint)
        return None
    return unit


def _heading_of(column: Column) -> str:
    """How the heading of a column is written."""
    if column.quantity is None:
        return f"a column {column.name}"
    first = (
        "1" if column.quantity is FRACTION else column.quantity.units.split(",")[0].split(" or ")[0]
    )
    return f"a column {column.name} with its unit, such as {column.name} [{first}]"
