"""Arithmetic as printed: every number with the digits that make the printed results follow.

A formula is built once from `Value` and the usual operators. The same tree gives the formula in
symbols, the numbers put in, and the result of the numbers as printed.
"""

from __future__ import annotations

import math
from collections.abc import Mapping
from dataclasses import dataclass
from typing import TYPE_CHECKING, Literal

from incline.report.show import signed

if TYPE_CHECKING:
    from collections.abc import Iterator


__all__ = ["Digits", "Power", "Sum", "Tangent", "Term", "Value", "Whole"]

Digits = Mapping[str, int]
"""Decimals by place."""

_NBSP = "\N{NO-BREAK SPACE}"
_NUDGE = 1e-7
"""Units of the last digit by which numbers are moved off zero, so that a five always rounds up."""


class Term:
    """Anything that stands in a formula."""

    __slots__ = ()
    rank = 9
    """How firmly it holds together: sums 1, products 2, single numbers 9."""

    def at(self, digits: Digits | None) -> float:
        """Its value from the numbers as printed; from full precision for None."""
        raise NotImplementedError

    def text(self, digits: Digits) -> str:
        """The numbers put in, with units."""
        raise NotImplementedError

    def symbols(self) -> str:
        """The formula, as markup."""
        raise NotImplementedError

    def values(self) -> Iterator[Value]:
        """Every value in it."""
        raise NotImplementedError

    def __add__(self, other: Term | float) -> Pair:
        return Pair("+", self, _term(other))

    def __radd__(self, other: float) -> Pair:
        return Pair("+", _term(other), self)

    def __sub__(self, other: Term | float) -> Pair:
        return Pair("−", self, _term(other))

    def __rsub__(self, other: float) -> Pair:
        return Pair("−", _term(other), self)

    def __mul__(self, other: Term | float) -> Pair:
        return Pair("×", self, _term(other))

    def __rmul__(self, other: float) -> Pair:
        return Pair("×", _term(other), self)

    def __truediv__(self, other: Term | float) -> Pair:
        return Pair("/", self, _term(other))

    def __rtruediv__(self, other: float) -> Pair:
        return Pair("/", _term(other), self)


def _term(other: Term | float) -> Term:
    return other if isinstance(other, Term) else Whole(other)


@dataclass(frozen=True, slots=True)
class Whole(Term):
    """A number that is exact as it stands."""

    number: float

    def at(self, digits: Digits | None) -> float:  # noqa: ARG002, D102
        return self.number

    def text(self, digits: Digits) -> str:  # noqa: ARG002, D102
        return f"{self.number:g}"

    def symbols(self) -> str:  # noqa: D102
        return f"{self.number:g}"

    def values(self) -> Iterator[Value]:  # noqa: D102
        return iter(())


@dataclass(frozen=True, slots=True)
class Value(Term):
    """A number in the unit in which it is printed.

    ``place`` names the value, or the column of values that share their number of decimals;
    ``least`` are the fewest. ``power``: the power of ten set apart. ``symbol`` is markup.
    """

    amount: float
    place: str
    symbol: str = ""
    unit: str = ""
    least: int = 3
    power: int = 0

    def step(self, digits: Digits) -> float:
        """One unit in the last digit printed."""
        return float(10.0 ** (self.power - digits[self.place]))

    def bare(self, digits: Digits) -> str:
        """As printed, without power and unit."""
        text = self._rounded(digits)
        return signed(text.lstrip("-") if not text.strip("-0.") else text)

    def _rounded(self, digits: Digits) -> str:
        decimals = digits[self.place]
        scaled = self.amount / 10.0**self.power if self.power else self.amount
        return f"{scaled + math.copysign(_NUDGE * 10.0**-decimals, scaled):.{decimals}f}"

    def at(self, digits: Digits | None) -> float:  # noqa: D102
        if digits is None:
            return self.amount
        rounded = self._rounded(digits)
        return float(f"{rounded}e{self.power}" if self.power else rounded)

    def text(self, digits: Digits) -> str:  # noqa: D102
        number = self.bare(digits)
        if self.power:
            number += f"{_NBSP}×{_NBSP}10{_raised(self.power)}"
        gap = "" if self.unit == "°" else _NBSP
        return f"{number}{gap}{self.unit}" if self.unit else number

    def symbols(self) -> str:  # noqa: D102
        return self.symbol

    def values(self) -> Iterator[Value]:  # noqa: D102
        yield self


def _raised(power: int) -> str:
    return str(power).translate(str.maketrans("-0123456789", "⁻⁰¹²³⁴⁵⁶⁷⁸⁹"))


@dataclass(frozen=True, slots=True)
class Pair(Term):
    """Two terms and what joins them."""

    sign: Literal["+", "−", "×", "/"]
    left: Term
    right: Term

    @property
    def rank(self) -> int:  # type: ignore[override]
        """Sums 1, products and quotients 2."""
        return 1 if self.sign in "+−" else 2

    def at(self, digits: Digits | None) -> float:
        left, right = self.left.at(digits), self.right.at(digits)
        if self.sign == "+":
            return left + right
        if self.sign == "−":
            return left - right
        if self.sign == "×":
            return left * right
        return left / right if right else math.nan

    def text(self, digits: Digits) -> str:
        left, right = self.left.text(digits), self.right.text(digits)
        if self._bracket_left(self.left):
            left = f"({left})"
        if self._bracket_right(self.right) or right.startswith("−") or self._powered():
            right = f"({right})"
        return f"{left} {self.sign} {right}"

    def _bracket_left(self, term: Term) -> bool:
        return term.rank < self.rank

    def _bracket_right(self, term: Term) -> bool:
        return term.rank < self.rank or (self.sign in "−/" and term.rank == self.rank)

    def _powered(self) -> bool:
        """Whether a power of ten would fall apart behind the bar of a fraction."""
        return self.sign == "/" and isinstance(self.right, Value) and self.right.power != 0

    def symbols(self) -> str:
        left, right = self.left.symbols(), self.right.symbols()
        if self._bracket_left(self.left):
            left = f"({left})"
        if self._bracket_right(self.right):
            right = f"({right})"
        return f"{left}{_NBSP}{right}" if self.sign == "×" else f"{left} {self.sign} {right}"

    def values(self) -> Iterator[Value]:
        yield from self.left.values()
        yield from self.right.values()


@dataclass(frozen=True, slots=True)
class Sum(Term):
    """A sum of many terms; ``label`` is its formula.

    With more than ``listed`` terms it is ``told`` in words instead of written out.
    """

    terms: tuple[Term, ...]
    label: str
    told: str = "sum of the column"
    listed: int = 8

    @property
    def rank(self) -> int:  # type: ignore[override]
        """That of its only term, or of a sum."""
        return self.terms[0].rank if len(self.terms) == 1 else 1

    def at(self, digits: Digits | None) -> float:  # noqa: D102
        return math.fsum(t.at(digits) for t in self.terms)

    def text(self, digits: Digits) -> str:  # noqa: D102
        if len(self.terms) > self.listed:
            return self.told
        parts = " + ".join(t.text(digits) for t in self.terms)
        return parts.replace("+ −", "− ") or "0"

    def symbols(self) -> str:  # noqa: D102
        return self.label

    def values(self) -> Iterator[Value]:  # noqa: D102
        for term in self.terms:
            yield from term.values()


@dataclass(frozen=True, slots=True)
class Power(Term):
    """The square or cube of a term."""

    base: Term
    exponent: Literal[2, 3] = 2

    def at(self, digits: Digits | None) -> float:  # noqa: D102
        return float(self.base.at(digits) ** self.exponent)

    def text(self, digits: Digits) -> str:  # noqa: D102
        return f"({self.base.text(digits)}){_raised(self.exponent)}"

    def symbols(self) -> str:  # noqa: D102
        inside = self.base.symbols()
        raised = _raised(self.exponent)
        return f"{inside}{raised}" if self.base.rank == 9 else f"({inside}){raised}"

    def values(self) -> Iterator[Value]:  # noqa: D102
        yield from self.base.values()


@dataclass(frozen=True, slots=True)
class Tangent(Term):
    """The tangent of a term in degrees."""

    angle: Term

    def at(self, digits: Digits | None) -> float:  # noqa: D102
        return math.tan(math.radians(self.angle.at(digits)))

    def text(self, digits: Digits) -> str:  # noqa: D102
        return f"tan({self.angle.text(digits)})"

    def symbols(self) -> str:  # noqa: D102
        return f"tan({self.angle.symbols()})"

    def values(self) -> Iterator[Value]:  # noqa: D102
        yield from self.angle.values()
