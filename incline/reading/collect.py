"""Collecting defects while reading goes on, and quoting what stands in a file."""

from __future__ import annotations

import difflib
import math
from dataclasses import replace
from typing import TYPE_CHECKING

from incline.errors import Defect

if TYPE_CHECKING:
    from collections.abc import Iterable

    from incline.errors import Where

__all__ = ["BAD", "NOTHING", "Collector", "Sign", "folded", "nearest", "quoted", "sign_defect"]

BAD = math.nan
"""Stands for a number that could not be read, once its defect has been collected.

Reading goes on with it so that the rest of the trial is looked at too; every comparison with it is
false, so checks must be written to find fault only where a comparison is true.
"""

NOTHING = "nothing"
_CUT = 60
_MANY = 5
_TOLD = 3


def quoted(text: str) -> str:
    """What stands in a file, in quotation marks: cut to 60 characters, controls made visible."""
    shown = "".join(c if c.isprintable() else f"\\x{ord(c):02x}" for c in text)
    return f'"{shown}"' if len(shown) <= _CUT else f'"{shown[: _CUT - 1]}…"'


def nearest(word: str, known: Iterable[str]) -> str:
    """A hint naming the known word most like ``word``; empty when none is."""
    names = {k.casefold(): k for k in known}
    close = difflib.get_close_matches(word.casefold(), names, n=1, cutoff=0.6)
    return f'did you mean "{names[close[0]]}"?' if close else ""


class Collector:
    """The defects found so far."""

    def __init__(self) -> None:
        self.defects: list[Defect] = []

    def add(self, where: Where, code: str, found: str, expected: str, hint: str = "") -> None:
        """Keep one defect."""
        self.defects.append(Defect(where, code, found, expected, hint))


class Sign:
    """Which values a quantity may have."""

    ANY = "any"
    NOT_NEGATIVE = "not negative"
    POSITIVE = "positive"


def sign_defect(value: float, sign: str) -> tuple[str, str] | None:
    """Code and expectation when ``value`` has a sign it must not have."""
    if sign == Sign.POSITIVE and value <= 0.0:
        return "number-not-positive", "a number above zero"
    if sign == Sign.NOT_NEGATIVE and value < 0.0:
        return "number-negative", "zero or a number above zero"
    return None


def folded(defects: Iterable[Defect]) -> list[Defect]:
    """The defects with those of more than five rows of one column told by the first three.

    One more, at the fourth row, says how many there are. What is not known is told name by name.
    """
    groups: dict[tuple[str, str, str, str], list[Defect]] = {}
    for defect in sorted(set(defects)):
        where = defect.where
        name = defect.found if defect.code.endswith("-unknown") else ""
        groups.setdefault((where.file, where.column, defect.code, name), []).append(defect)
    kept: list[Defect] = []
    for group in groups.values():
        rest = group[_TOLD:]
        if len({d.where.row for d in group}) <= _MANY:
            kept.extend(group)
            continue
        column = " of this column" if rest[0].where.column else ""
        found = f"the same in {len(rest)} more rows{column}"
        kept += [*group[:_TOLD], replace(rest[0], found=found)]
    return kept
