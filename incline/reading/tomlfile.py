"""A TOML file as sections of checked values. Lists count from one: ``devices[1].id``."""

from __future__ import annotations

import math
import re
from typing import TYPE_CHECKING, TypeVar

from incline.errors import Where
from incline.reading.collect import BAD, NOTHING, Sign, nearest, quoted, sign_defect
from incline.reading.csvtable import decode
from incline.reading.tomlwords import parse, syntax_error
from incline.units import QuantityError, parse_quantity, parse_transverse

if TYPE_CHECKING:
    from collections.abc import Iterable, Sequence

    from incline.reading.collect import Collector
    from incline.units import Quantity

__all__ = ["FILE", "Document", "Section", "shown"]

FILE = "trial.toml"
_Word = TypeVar("_Word", bound=str)


def shown(value: object) -> str:
    """A TOML value as text."""
    try:
        return str(value)
    except ValueError:  # Python does not print integers of thousands of digits
        return "a number of thousands of digits"


class Section:
    """One table of the file.

    Without ``values`` (the file could not be read, or something else stands in the table's place)
    every value is a stand-in and gives no further defect.
    """

    def __init__(
        self,
        path: str,
        values: dict[str, object] | None,
        collector: Collector,
        file: str = FILE,
    ) -> None:
        self.file = file
        self.path = path
        self.readable = self.whole = values is not None
        self.collector = collector
        self._values = values or {}
        self._asked: dict[str, None] = {}
        self.failed: set[str] = set()

    def where(self, key: str) -> Where:
        """The place of a key."""
        return Where(self.file, 0, f"{self.path}.{key}" if self.path else key)

    def fault(self, key: str, code: str, found: str, expected: str, hint: str = "") -> None:
        """Collect a defect at a key, and remember the key as ``failed``."""
        self.failed.add(key)
        self.collector.add(self.where(key), code, found, expected, hint)

    def missing(self, key: str, expected: str) -> None:
        """Collect that a key is not there, or is there but empty."""
        if not self.readable:
            return
        if key in self._values:
            self.fault(key, "value-wrong", '""', expected)
        else:
            self.fault(key, "key-missing", "no such key", expected)

    def written(self, key: str) -> tuple[str, str]:
        """A quantity as it stands in the file, and its unit; without one for feet and inches."""
        text = shown(self.value(key))
        match = re.fullmatch(r"[^A-Za-z'\"]*([A-Za-z][A-Za-z0-9/]*)(\s*[PSps])?\s*", text)
        return text, match[1] if match else ""

    def value(self, key: str) -> object:
        """The value as TOML gives it; None when absent or an empty text."""
        self._asked[key] = None
        found = self._values.get(key)
        return None if isinstance(found, str) and not found.strip() else found

    def text(self, key: str, *, required: bool = False) -> str:
        """Text with its spaces made single; empty when absent or after a defect."""
        found = self.value(key)
        if isinstance(found, str):
            plain = " ".join(found.split())
            if plain.isprintable():
                return plain
            self.fault(key, "value-wrong", quoted(plain), "text without control characters")
        elif found is not None:
            self.fault(key, "value-wrong", quoted(shown(found)), "a text in quotation marks")
        elif required:
            self.missing(key, "a text")
        return ""

    def choice(self, key: str, allowed: Sequence[_Word], blank: _Word | None = None) -> _Word:
        """One of the words allowed, whatever its case; the first of them after a defect.

        ``blank`` is what an absent key means; without it the key is required.
        """
        found = self.value(key)
        expected = " or ".join(f'"{word}"' for word in allowed)
        if found is None:
            if blank is None:
                self.missing(key, expected)
            return blank or allowed[0]
        word = " ".join(found.split()).casefold() if isinstance(found, str) else ""
        for candidate in allowed:
            if word == candidate.casefold():
                return candidate
        self.fault(key, "value-wrong", quoted(shown(found)), expected, nearest(word, allowed))
        return allowed[0]

    def maybe(
        self, key: str, quantity: Quantity, sign: str = Sign.ANY, *, transverse: bool = False
    ) -> float | None:
        """A quantity in inside units; None when absent, BAD after a defect."""
        found = self.value(key)
        if found is None:
            return None
        if not isinstance(found, str):
            expected = f"a text of a number and a unit, {quantity.units}"
            number = isinstance(found, int | float) and not isinstance(found, bool)
            self.fault(
                key, "unit-missing" if number else "value-wrong", quoted(shown(found)), expected
            )
            return BAD
        try:
            value = (parse_transverse if transverse else parse_quantity)(found, quantity)
        except QuantityError as error:
            self.fault(key, error.code, quoted(found), error.expected, error.hint)
            return BAD
        wrong = sign_defect(value, sign)
        if wrong:
            self.fault(key, wrong[0], quoted(found), wrong[1])
            return BAD
        return value

    def need(
        self, key: str, quantity: Quantity, sign: str = Sign.ANY, *, transverse: bool = False
    ) -> float:
        """A quantity in inside units; BAD after a defect, also when absent."""
        value = self.maybe(key, quantity, sign, transverse=transverse)
        if value is None:
            self.missing(key, f"a {quantity.name} with its unit, {quantity.units}")
            return BAD
        return value

    def number(self, key: str, low: int, high: int) -> float | None:
        """A number without a unit or quotation marks; None when absent, BAD after a defect."""
        found = self.value(key)
        if found is None:
            return None
        expected = f"a number from {low} to {high}, without quotation marks"
        if isinstance(found, int | float) and not isinstance(found, bool):
            if low <= found <= high:
                return float(found)
            if isinstance(found, float) and not math.isfinite(found):
                self.fault(key, "number-not-finite", quoted(shown(found)), expected)
                return BAD
        self.fault(key, "value-wrong", quoted(shown(found)), expected)
        return BAD

    def flag(self, key: str) -> bool:
        """``true`` or ``false`` without quotation marks; False when absent or after a defect."""
        found = self.value(key)
        if found is None or isinstance(found, bool):
            return bool(found)
        expected = "true or false, without quotation marks"
        self.fault(key, "value-wrong", quoted(shown(found)), expected)
        return False

    def close(self) -> None:
        """Collect every key that was never asked for; call it last."""
        for key in self._values.keys() - self._asked.keys():
            expected = "one of " + ", ".join(self._asked)
            column = quoted(key)[1:-1]
            self.fault(column, "key-unknown", quoted(key), expected, nearest(key, self._asked))


class Document:
    """The whole file."""

    def __init__(self, data: bytes | None, collector: Collector, file: str = FILE) -> None:
        self.file = file
        self.collector = collector
        self.readable = False
        self._tables: dict[str, object] = {}
        if data is not None:
            self._parse(data)

    def _parse(self, data: bytes) -> None:
        text = decode(self.file, data, self.collector, "save the file as UTF-8 text")
        if text is None:
            return
        text = re.sub(r"\r\n?", "\n", text)
        try:
            self._tables = parse(text)
        except (ValueError, RecursionError) as error:
            row, line, expected, hint = syntax_error(text, error)
            found = quoted(line) if line else NOTHING
            self.collector.add(Where(self.file, row), "toml-syntax", found, expected, hint)
            return
        self.readable = True

    def root(self) -> Section:
        """The keys above the first section of a file that needs no sections."""
        return Section("", self._tables if self.readable else None, self.collector, self.file)

    def section(self, name: str) -> Section:
        """The table ``[name]``; an absent one is like an empty one."""
        if not self.readable:
            return Section(name, None, self.collector, self.file)
        found = self._tables.get(name, {})
        if isinstance(found, dict):
            return Section(name, found, self.collector, self.file)
        where = Where(self.file, 0, name)
        self.collector.add(where, "value-wrong", quoted(shown(found)), f"a section [{name}]")
        return Section(name, None, self.collector, self.file)

    def sections(self, name: str) -> list[Section]:
        """The tables ``[[name]]``."""
        found = self._tables.get(name, [])
        if not isinstance(found, list) or not all(isinstance(f, dict) for f in found):
            where = Where(self.file, 0, name)
            expected = f"sections [[{name}]] with double brackets"
            self.collector.add(where, "value-wrong", quoted(shown(found)), expected)
            return []
        return [
            Section(f"{name}[{n}]", values, self.collector, self.file)
            for n, values in enumerate(found, start=1)
        ]

    def has(self, name: str) -> bool:
        """Whether anything stands under ``name``."""
        return bool(self._tables.get(name))

    def close(self, known: Iterable[str]) -> None:
        """Collect every section that is not known."""
        names = tuple(known)
        for name in self._tables.keys() - set(names):
            expected = "one of the sections " + ", ".join(names)
            where = Where(self.file, 0, quoted(name)[1:-1])
            self.collector.add(where, "key-unknown", quoted(name), expected, nearest(name, names))
