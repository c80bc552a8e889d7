"""Columns of a table and what stands in their cells, with every defect collected."""

from __future__ import annotations

import re
from dataclasses import dataclass
from typing import TYPE_CHECKING, TypeVar

from incline.errors import Where
from incline.reading.collect import BAD, NOTHING, Sign, nearest, quoted, sign_defect
from incline.units import (
    FRACTION,
    Quantity,
    QuantityError,
    factor,
    parse_quantity,
    parse_transverse,
)

if TYPE_CHECKING:
    from collections.abc import Iterable, Sequence

    from incline.reading.collect import Collector
    from incline.reading.csvtable import RawTable

__all__ = ["Column", "Row", "Sheet", "open_sheet"]

_HEADING = re.compile(r"([^\[\]]*)(?:\[([^\[\]]*)\])?")
_Word = TypeVar("_Word", bound=str)


@dataclass(frozen=True, slots=True)
class Column:
    """What a column holds: text without ``quantity``, otherwise numbers in the heading's unit.

    ``required`` columns must stand in the header; whether a cell may be blank is the reader's
    business. ``bare`` columns need no unit (a weight in a mean); ``loose`` columns keep the unit
    as written, for the reader to judge.
    """

    name: str
    quantity: Quantity | None = None
    required: bool = False
    sign: str = Sign.ANY
    transverse: bool = False
    bare: bool = False
    loose: bool = False


@dataclass(frozen=True, slots=True)
class _Placed:
    """A column found in the header; ``unit`` is None for text and for a unit found wrong."""

    column: Column
    index: int
    unit: str | None


@dataclass(frozen=True, slots=True)
class Row:
    """One row. Methods give the value of a cell, or a stand-in once a defect is collected."""

    sheet: Sheet
    number: int
    cells: tuple[str, ...]

    def where(self, column: str = "") -> Where:
        """The place of a cell."""
        return Where(self.sheet.file, self.number, column)

    def fault(self, column: str, code: str, found: str, expected: str, hint: str = "") -> None:
        """Collect a defect of this row."""
        self.sheet.collector.add(self.where(column), code, found, expected, hint)

    def raw(self, column: str) -> str:
        """The text of a cell; empty when blank or when there is no such column."""
        placed = self.sheet.placed.get(column)
        if placed is None or placed.index >= len(self.cells):
            return ""
        return self.cells[placed.index]

    def text(self, column: str, *, required: bool = False) -> str:
        """Text with its spaces made single."""
        found = " ".join(self.raw(column).split())
        if not found and required:
            self.missing(column, "a text")
        if not found.isprintable():
            self.fault(column, "value-wrong", quoted(found), "text without control characters")
        return found

    def choice(
        self, column: str, allowed: Sequence[_Word], blank: _Word | None = None
    ) -> _Word | None:
        """One of the words allowed, whatever its case; None after a defect."""
        found = self.text(column)
        for word in allowed:
            if found.casefold() == word.casefold():
                return word
        if not found and blank is not None:
            return blank
        expected = " or ".join(allowed)
        if found:
            hint = nearest(found, allowed)
            self.fault(column, "value-wrong", quoted(found), expected, hint)
        else:
            self.missing(column, expected)
        return None

    def missing(self, column: str, expected: str, hint: str = "") -> None:
        """Collect that a cell is blank, unless its whole column has been found missing."""
        if column not in self.sheet.absent:
            self.fault(column, "cell-missing", NOTHING, expected, hint)

    def maybe(self, column: str) -> float | None:
        """A number in inside units; None when blank, BAD after a defect."""
        text = self.raw(column)
        if not text:
            return None
        placed = self.sheet.placed[column]
        if placed.unit is None or placed.column.quantity is None:
            return BAD
        value = self.number_in(column, placed.column.quantity, placed.unit)
        wrong = sign_defect(value, placed.column.sign)
        if wrong:
            self.fault(column, wrong[0], quoted(text), wrong[1])
            return BAD
        return value

    def number_in(self, column: str, quantity: Quantity, unit: str) -> float:
        """A cell that is not blank as a quantity in ``unit``; BAD after a defect."""
        text = self.raw(column)
        transverse = self.sheet.placed[column].column.transverse
        parse = parse_transverse if transverse else parse_quantity
        try:
            return parse(text, quantity, unit, self.sheet.decimal_comma)
        except QuantityError as error:
            self.sheet.collector.add_unreadable(self.where(column), text, error)
            return BAD

    def need(self, column: str) -> float:
        """A number in inside units; BAD after a defect, also when blank."""
        value = self.maybe(column)
        if value is None:
            self.missing(column, "a number")
            return BAD
        return value


class Sheet:
    """A table whose header has been understood.

    ``placed`` are the columns found, ``absent`` the required ones that were not (their cells give
    no further defects).
    """

    def __init__(self, raw: RawTable, collector: Collector) -> None:
        self.file = raw.file
        self.header_row = raw.header_row
        self.decimal_comma = raw.decimal_comma
        self.collector = collector
        self.placed: dict[str, _Placed] = {}
        self.absent: set[str] = set()
        self.rows: tuple[Row, ...] = tuple(Row(self, n, cells) for n, cells in raw.rows)

    def has(self, column: str) -> bool:
        """Whether the header has the column."""
        return column in self.placed

    def where(self, column: str = "") -> Where:
        """The place of a heading."""
        return Where(self.file, self.header_row, column)

    def fault(self, column: str, code: str, found: str, expected: str, hint: str = "") -> None:
        """Collect a defect of the header."""
        self.collector.add(self.where(column), code, found, expected, hint)

    def lack(self, column: str, expected: str, hint: str = "") -> None:
        """Collect that a column is missing."""
        self.absent.add(column)
        self.fault(column, "column-missing", "no such column", expected, hint)

    def one_of(self, names: Sequence[str], *, required: bool = False) -> str | None:
        """The one column of ``names`` in the header; a defect when there are several or none."""
        present = [n for n in names if self.has(n)]
        expected = "one of " + ", ".join(names)
        if len(present) > 1:
            found = f"{present[1]} beside {present[0]}"
            self.fault(present[1], "column-twice", found, expected, "leave one out")
        if not present and required:
            self.lack(names[0], expected)
        return present[0] if present else None


def open_sheet(raw: RawTable, columns: Iterable[Column], collector: Collector) -> Sheet:
    """Match a header against the columns known; every table may have a ``note`` column too.

    A column that is not required and blank in every row counts as not there.
    """
    sheet = Sheet(raw, collector)
    known = {c.name: c for c in (*columns, Column("note"))}
    for index, heading in enumerate(raw.header):
        _place(sheet, index, heading, known)
    for name, column in known.items():
        if column.required and not sheet.has(name):
            sheet.lack(name, _heading_of(column))
        elif sheet.has(name) and not (column.required or column.loose) and _is_blank(sheet, name):
            del sheet.placed[name]
    for row in sheet.rows:
        _check_width(row, len(raw.header))
    return sheet


def _is_blank(sheet: Sheet, column: str) -> bool:
    """Whether there are rows, and none has anything in the column."""
    return bool(sheet.rows) and not any(row.raw(column) for row in sheet.rows)


def _check_width(row: Row, width: int) -> None:
    if len(row.cells) <= width:
        return
    comma = row.sheet.decimal_comma
    row.fault(
        "",
        "cells-too-many",
        quoted((";" if comma else ",").join(row.cells[width:])),
        f"no more than {width} cells, as in the header of row {row.sheet.header_row}",
        "" if comma else "where commas stand between columns, decimals have a point",
    )


def _place(sheet: Sheet, index: int, heading: str, known: dict[str, Column]) -> None:
    match = _HEADING.fullmatch(heading)
    name = " ".join((match[1] if match else heading).split()).casefold()
    if not heading:
        if any(index < len(r.cells) and r.cells[index] for r in sheet.rows):
            found = f"a column without a heading, the {index + 1}th"
            sheet.fault(
                "", "column-unknown", found, "a heading over every column that is filled in"
            )
        return
    if match is None or name not in known:
        hint = nearest(re.split(r"[\[(]", name)[0].strip(), known)
        if not hint and ("(" in heading or match is None):
            hint = "a heading is a name and a unit in square brackets, such as mass [t]"
        expected = "one of " + ", ".join(known)
        sheet.fault(quoted_name(name), "column-unknown", quoted(heading), expected, hint)
        return
    column = known[name]
    if sheet.has(name):
        sheet.fault(name, "column-twice", quoted(heading), f"one column {name}")
        return
    unit = None if match[2] is None else " ".join(match[2].split())
    sheet.placed[name] = _Placed(column, index, _checked_unit(sheet, column, heading, unit))


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
        sheet.collector.add_unreadable(sheet.where(column.name), unit, error)
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
