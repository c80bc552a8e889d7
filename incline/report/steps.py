"""The calculation step by step: formula, numbers put in, result, so that a calculator can follow.

The chapters are laid out as formulas over values; `settle` then gives every value one number of
decimals, the same wherever it stands, such that each printed result follows from the printed
numbers.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import lru_cache
from typing import TYPE_CHECKING

from incline.report.arithmetic import Term, Value
from incline.report.digits import Relation, settle

if TYPE_CHECKING:
    from collections.abc import Iterator, Mapping

    from incline.report.arithmetic import Digits
    from incline.report.document import Sheet

__all__ = [
    "Board", "Calculation", "Cell", "Chapter", "Head", "Lay", "Step", "Travel", "calculation_of",
]  # fmt: skip


@dataclass(frozen=True, slots=True)
class Lay:
    """A step as laid out: what it yields and by which formula.

    Without a formula the value is carried from elsewhere; ``how`` says from where.
    """

    name: str
    result: Value
    term: Term | None = None
    how: str = ""


@dataclass(frozen=True, slots=True)
class Head:
    """Heading of a column as markup, and its share of the width."""

    markup: str
    share: float
    left: bool = False


@dataclass(frozen=True, slots=True)
class Travel:
    """An arm before and after; or, without ``end``, a value that does not count in its column."""

    start: Value
    end: Value | None = None


Cell = Term | Travel | str
"""What stands in a table: a value or a formula, put in; a travel; words."""


@dataclass(frozen=True, slots=True)
class Board:
    """A table of the calculation: rows of values and words, and the relations within it.

    A row of one cell is a heading; ``totals`` are indices of rows set off as sums.
    """

    title: str
    heads: tuple[Head, ...]
    rows: tuple[tuple[Cell, ...], ...]
    relations: tuple[Relation, ...] = ()
    totals: frozenset[int] = frozenset()


@dataclass(frozen=True, slots=True)
class Chapter:
    """Steps, tables and sentences under one heading, in order."""

    title: str
    parts: tuple[Lay | Board | str, ...]

    def relations(self) -> Iterator[Relation]:
        """All relations of the chapter in their order."""
        for part in self.parts:
            if isinstance(part, Board):
                yield from part.relations
            elif isinstance(part, Lay):
                # A carried value is listed with itself, so that it has its decimals.
                yield Relation(part.result, part.term or part.result)


@dataclass(frozen=True, slots=True)
class Step:
    """A step as printed: ``formula`` is markup, ``put_in`` and ``result`` are plain text.

    ``values`` are the printed numbers by symbol; ``follows`` whether the result as printed comes
    out of the numbers as printed. A carried value has its origin in place of numbers.
    """

    number: int
    name: str
    formula: str
    put_in: str
    result: str
    values: Mapping[str, str]
    carried: bool
    follows: bool


@dataclass(frozen=True, slots=True)
class Calculation:
    """Chapters, and the decimals of every place of theirs and of the ledger's columns."""

    chapters: tuple[Chapter, ...]
    ledger: Board
    digits: Digits

    @property
    def sound(self) -> bool:
        """Whether every printed result follows from the numbers printed with it."""
        relations = [*self.ledger.relations, *(r for c in self.chapters for r in c.relations())]
        return all(r.follows(self.digits) for r in relations)

    def steps(self) -> tuple[Step, ...]:
        """Every step as printed, numbered through."""
        laid = [p for c in self.chapters for p in c.parts if isinstance(p, Lay)]
        return tuple(_printed(n, lay, self.digits) for n, lay in enumerate(laid, start=1))


def _printed(number: int, lay: Lay, digits: Digits) -> Step:
    term, symbol = lay.term, lay.result.symbol
    return Step(
        number=number,
        name=lay.name,
        formula=symbol
        if term is None or term.symbols() == symbol
        else f"{symbol} = {term.symbols()}",
        put_in=lay.how if term is None else term.text(digits),
        result=lay.result.text(digits),
        values={} if term is None else {v.symbol: v.text(digits) for v in term.values()},
        carried=term is None,
        follows=term is None or Relation(lay.result, term).follows(digits),
    )


@lru_cache(maxsize=2)
def calculation_of(sheet: Sheet) -> Calculation:
    """The calculation of a report, with its digits settled; kept for the next who asks."""
    from incline.report.steps_floating import floating_chapters
    from incline.report.steps_gravity import gravity_chapters
    from incline.report.steps_heel import heel_chapters
    from incline.report.steps_lightship import ledger_board, lightship_chapter

    chapters = (
        *floating_chapters(sheet),
        *heel_chapters(sheet),
        *gravity_chapters(sheet),
        lightship_chapter(sheet),
    )
    ledger = ledger_board(sheet)
    relations = [r for c in chapters for r in c.relations()]
    return Calculation(chapters, ledger, settle([*relations, *ledger.relations]))
