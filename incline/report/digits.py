"""How many digits are printed: as many as the printed results need that follow from a number."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from collections.abc import Sequence

    from incline.report.arithmetic import Digits, Term, Value

__all__ = ["Relation", "natural", "settle"]

_MOST = 12
"""Most decimals: a double holds little more of a ship's numbers."""
_HALF = 0.5 + 1e-6
"""Units of the last digit by which a result may miss."""


@dataclass(frozen=True, slots=True)
class Relation:
    """A printed result and the formula that it must follow from."""

    result: Value
    term: Term

    def follows(self, digits: Digits) -> bool:
        """Whether the numbers as printed give the result to its last printed digit."""
        miss = abs(self.term.at(digits) - self.result.at(digits))
        return miss <= _HALF * self.result.step(digits)


def settle(relations: Sequence[Relation]) -> dict[str, int]:
    """Decimals of every place, the fewest by turns that make each relation follow.

    Where a result does not follow, the number in it whose rounding moves it most gets one more
    decimal, and so on back to the numbers that were measured. A relation that does not hold at full
    precision is left as it is: `Relation.follows` tells.
    """
    digits: dict[str, int] = {}
    for relation in relations:
        for value in (relation.result, *relation.term.values()):
            digits[value.place] = max(digits.get(value.place, 0), value.least)
    for _ in range(_MOST):
        before = dict(digits)
        for relation in reversed(relations):
            while not relation.follows(digits):
                place = _coarsest(relation, digits)
                if place is None:
                    break
                digits[place] += 1
        if digits == before:
            break
    return digits


def _coarsest(relation: Relation, digits: Digits) -> str | None:
    """The place whose rounding moves the result most; None when more digits cannot help."""
    exact, step = relation.term.at(None), relation.result.step(digits)
    if not abs(exact - relation.result.amount) <= 1e-3 * step + 1e-9 * abs(exact):
        return None  # nan too
    moved: dict[str, float] = {}
    fine = dict.fromkeys(digits, _MOST + 3)
    for place in {v.place for v in relation.term.values()}:
        if digits[place] < _MOST:
            rounded = relation.term.at(fine | {place: digits[place]})
            moved[place] = abs(rounded - exact) / step
    if not moved:
        return None
    place = max(moved, key=lambda p: (moved[p], p))
    return place if moved[place] > 1e-6 else None


def natural(amount: float, least: int, most: int) -> int:
    """Fewest decimals, from ``least``, that print an amount exactly; ``least`` when none does."""
    near = 1e-10 * max(1.0, abs(amount))
    return next((d for d in range(least, most + 1) if abs(round(amount, d) - amount) < near), least)
