"""Collecting defects while reading goes on, and quoting what stands in a file."""

from __future__ import annotations

import difflib
import math
from typing import TYPE_CHECKING

from incline.errors import Defect, Where

if TYPE_CHECKING:
    from collections.abc import Iterable

    from incline.units import QuantityError

__all__ = ["BAD", "NOTHING", "Collector", "Sign", "nearest", "quoted", "sign_defect"]

BAD = math.nan
"""Stands for a number that could not be read, once its defect has been collected.

Reading goes on with it so that the rest of the trial is looked at too; every comparison with it is
false, so checks must be written to find fault only where a comparison is true.
"""

NOTHING = "nothing"
_CUT = 60


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

    def add_unreadable(self, where: Where, found: str, error: QuantityError) -> None:
        """Keep the defect of a quantity that could not be read."""
        self.add(where, error.code, quoted(found), error.expected, error.hint)


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
