"""Columns of a table and what stands in their cells, with every defect collected."""

from __future__ import annotations

import re
from dataclasses import dataclass
from typing import TYPE_CHECKING, TypeVar

from incline.errors import Where
from incline.reading.collect import BAD, NOTHING, Sign, nearest, quoted, sign_defect
from incline.units import (
    Quantity,
    QuantityError,
    parse_quantity,
    parse_transverse,
)

if TYPE_CHECKING:
    from collections.abc import Mapping, Sequence

    from incline.reading.collect import Collector
    from incline.reading.csvtable import RawTable

__all__ = ["Column", "Placed", "Row", "Sheet"]

_Word = TypeVar("_Word", bound=str)


@dataclass(frozen=True, slots=True)
class Column:
    """What a column holds: text without ``quantity``, otherwise numbers in the heading's unit.

    ``required`` columns must stand in the header; whether a cell may be blank is the reader's
    business. ``bare`` columns need no unit (a weight in a mean); ``loose`` columns keep the unit
    as written, for the reader to judge. Beside a ``stated`` column may stand one for its
    uncertainty, which is ``of`` it; beside a ``derived`` one also where its own cells are blank,
    since the quantity may be worked out from others.
    """

    name: str
    quantity: Quantity | None = None
    required: bool = False
    sign: str = Sign.ANY
    transverse: bool = False
    bare: bool = False
    loose: bool = False
    stated: bool = False
    derived: bool = False
    of: Column | None = None


@dataclass(frozen=True, slots=True)
class Placed:
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
        """Collect a defect of this row; none of one whose cells are known to be out of place."""
        if self.number in self.sheet.shifted and code != "cells-too-many":
            return
        self.sheet.collector.add(self.where(column), code, found, expected, hint)

    @property
    def whole(self) -> bool:
        """Whether every cell stands under its own heading."""
        return self.number not in self.sheet.broken and self.number not in self.sheet.shifted

    def written(self, column: str) -> tuple[str, str]:
        """A cell and the unit it is in; without one for feet and inches, or after a defect."""
        text = self.raw(column)
        placed = self.sheet.placed.get(column)
        feet = re.search(r"['\"’′‘”″“]|ft|in", text, re.IGNORECASE)
        return text, "" if feet or placed is None else placed.unit or ""

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
        self,
        column: str,
        allowed: Sequence[_Word],
        blank: _Word | None = None,
        also: Mapping[str, _Word] | None = None,
    ) -> _Word | None:
        """One of the words allowed, or another word for it in ``also``; None after a defect.

        Case does not matter; the words of ``also`` are in lower case.
        """
        found = self.text(column)
        words = {word.casefold(): word for word in allowed} | dict(also or {})
        if found.casefold() in words:
            return words[found.casefold()]
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
        """Collect that a cell is blank, unless its column or the rest of its row is known lost."""
        if column not in self.sheet.absent and self.whole:
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
            self.fault(column, error.code, quoted(text), error.expected, error.hint)
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
    no further defects), ``broken`` the rows cut short by a stray quotation mark,
    ``shifted`` those whose cells a decimal comma has put out of place.
    """

    def __init__(self, raw: RawTable, collector: Collector) -> None:
        self.file = raw.file
        self.header_row = raw.header_row
        self.decimal_comma = raw.decimal_comma
        self.collector = collector
        self.placed: dict[str, Placed] = {}
        self.absent: set[str] = set()
        self.broken = raw.broken
        self.shifted: set[int] = set()
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
