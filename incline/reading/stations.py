"""Rows of ``offsets.csv`` to stations, and what is wrong with each station by itself."""

from __future__ import annotations

import itertools
import math
from dataclasses import dataclass, replace
from typing import TYPE_CHECKING, Literal

from incline.reading.cells import Column
from incline.reading.collect import Sign, quoted
from incline.reading.sections import SAME, area, crossing, deck_crossing
from incline.reading.waterline import SIDE_WORDS
from incline.record import OffsetPoint, Station
from incline.units import LENGTH

if TYPE_CHECKING:
    from collections.abc import Sequence

    from incline.reading.cells import Row
    from incline.reading.sections import Place

__all__ = ["OFFSET_COLUMNS", "Drawn", "Side", "is_line", "read_station"]

OFFSET_COLUMNS = (
    Column("station", required=True),
    Column("x", LENGTH, required=True),
    Column("half breadth", LENGTH, required=True, sign=Sign.NOT_NEGATIVE),
    Column("height", LENGTH, required=True),
    Column("side"),
    Column("line"),
    Column("body"),
)
_Letter = Literal["S", "P", ""]
_LETTERS: tuple[_Letter, ...] = ("S", "P")


@dataclass(frozen=True, slots=True)
class Side:
    """Rows of one side of a station with their half-breadths and heights [m] and line names."""

    rows: tuple[Row, ...]
    places: tuple[Place, ...]
    lines: tuple[str, ...]

    def points(self, spelled: dict[str, str]) -> tuple[OffsetPoint, ...]:
        """The side as it is recorded; ``spelled`` keeps the first spelling of each line."""
        found = zip(self.places, self.lines, strict=True)
        return tuple(
            OffsetPoint(y, z, spelled.setdefault(line.casefold(), line)) for (y, z), line in found
        )


@dataclass(frozen=True, slots=True)
class Drawn:
    """A station read, x from the after perpendicular [m]; ``sides`` is one when both are alike.

    ``sound`` when every figure could be read.
    """

    name: str
    x: float
    rows: tuple[Row, ...]
    sides: tuple[Side, ...]
    sound: bool

    @property
    def title(self) -> str:
        """The station as defects name it."""
        return f"station {quoted(self.name)}"

    def station(self, x: float, spelled: dict[str, str]) -> Station:
        """The station as it is recorded, at ``x`` [m], with lines as in `Side.points`."""
        sides = [side.points(spelled) for side in self.sides]
        where = self.rows[0].where()
        return Station(name=self.name, x=x, starboard=sides[0], port=sides[-1], where=where)


def read_station(name: str, rows: Sequence[Row], x_shift: float, *, outline: bool = True) -> Drawn:
    """A station from its rows; every defect that it has by itself is collected.

    Without ``outline`` some of its rows are elsewhere: only what stands in the cells is judged.
    """
    x = _position(name, rows)
    places = [(row.need("half breadth"), row.need("height")) for row in rows]
    letters = [row.choice("side", _LETTERS, "", SIDE_WORDS) for row in rows]
    lines = [row.text("line") for row in rows]
    sound = (
        all(row.whole for row in rows)
        and all(map(math.isfinite, (x, *itertools.chain(*places))))
        and None not in letters
        and outline
    )

    def side(letter: _Letter) -> Side:
        mine = [n for n, found in enumerate(letters) if found == letter]
        return Side(
            tuple(rows[n] for n in mine),
            tuple(places[n] for n in mine),
            tuple(lines[n] for n in mine),
        )

    sides = (side("S"), side("P")) if any(letters) else (side(""),)
    drawn = Drawn(name, x + x_shift, tuple(rows), sides, sound)
    if sound and any(letters) and not _both_sides(drawn, letters):
        return replace(drawn, sound=False)
    if sound:
        _check(drawn)
    return drawn


def _position(name: str, rows: Sequence[Row]) -> float:
    """X as in the file [m]: one for all rows of a station."""
    text, x = rows[0].raw("x"), rows[0].need("x")
    for row in rows[1:]:
        if row.raw("x") != text and abs(row.need("x") - x) > SAME:
            found = f"{quoted(row.raw('x'))} in station {quoted(name)}"
            expected = f"one x for all rows of a station, as {quoted(text)} in row {rows[0].number}"
            row.fault("x", "station-x", found, expected)
    return x


def _both_sides(drawn: Drawn, letters: Sequence[str | None]) -> bool:
    """Whether the rows of a station that names sides are of both, and none of neither."""
    if "" in letters:
        row = drawn.rows[letters.index("")]
        found = f"no side here and sides elsewhere in {drawn.title}"
        expected = "side S or P in every row of a station whose sides differ, or in none"
        hint = "each side has its own rows, the point at the keel in both"
        row.fault("side", "station-sides", found, expected, hint)
        return False
    if len(set(letters)) == 1:
        other = "P" if letters[0] == "S" else "S"
        found = f"only side {letters[0]} of {drawn.title}"
        expected = f"rows of side {other} too, or no side where both are alike"
        drawn.rows[0].fault("side", "station-sides", found, expected)
        return False
    return True


def _check(drawn: Drawn) -> None:
    """Collect what is wrong with the outline of a station whose figures are all there."""
    starts = [_check_start(drawn, side) for side in drawn.sides]
    levels = [side.places[0][1] for side in drawn.sides]
    if abs(levels[-1] - levels[0]) > SAME:
        row = drawn.sides[-1].rows[0]
        found = f"{drawn.title} with its sides starting at different heights"
        row.fault("height", "station-open", found, "both sides starting at one point, the keel")
        return
    if not all(starts) or is_line(drawn):
        return
    distinct = [_is_distinct(drawn, side) for side in drawn.sides]
    if all(distinct):
        _check_outline(drawn)


def _check_start(drawn: Drawn, side: Side) -> bool:
    """Whether a side has points enough, the first of them on the centreplane."""
    row = side.rows[0]
    if side.places[0][0] > SAME:
        found = f"{drawn.title} starting at half breadth {quoted(row.raw('half breadth'))}"
        expected = "half breadth 0 at its first point, the keel"
        downwards = side.places[-1][0] <= SAME
        hint = "the points run from the keel to the deck edge" if downwards else ""
        row.fault("half breadth", "station-open", found, expected, hint)
        return False
    if len(side.rows) < 2:
        of = f" of side {row.raw('side')}" if len(drawn.sides) > 1 else ""
        found = f"one point{of} in {drawn.title}"
        row.fault("", "points-too-few", found, "two points at least, keel and deck edge")
        return False
    return True


def is_line(drawn: Drawn) -> bool:
    """Whether a station encloses nothing: all on the centreplane, or all at one height."""
    places = [place for side in drawn.sides for place in side.places]
    level = places[0][1]
    return all(y <= SAME for y, _ in places) or all(abs(z - level) <= SAME for _, z in places)


def _is_distinct(drawn: Drawn, side: Side) -> bool:
    """Whether no point is that before it again."""
    distinct = True
    for n, (a, b) in enumerate(itertools.pairwise(side.places), start=1):
        if abs(a[0] - b[0]) <= SAME and abs(a[1] - b[1]) <= SAME:
            found = f"the point of row {side.rows[n - 1].number} again, in {drawn.title}"
            expected = "a point that differs from the one before"
            side.rows[n].fault("", "point-twice", found, expected)
            distinct = False
    return distinct


def _check_outline(drawn: Drawn) -> None:
    middle = _middle(drawn)
    crossed = False
    for side in drawn.sides:
        hint = ""
        pair = crossing(side.places)
        if pair is not None:
            other, row = (side.rows[n] for n in pair)
            found = f"the line to this point meets that to row {other.number}, in {drawn.title}"
            if side.places[pair[1]] == side.places[0]:
                hint = "two stations at one x need names of their own"
        else:
            at = deck_crossing(side.places, middle)
            if at is None:
                continue
            row = side.rows[at]
            found = f"the line to this point passes through the deck, in {drawn.title}"
            hint = "the deck runs straight across from the last point of a side"
        row.fault("", "section-crosses", found, "a section that does not cross itself", hint)
        crossed = True
    halves = sum(area(side.places, middle) for side in drawn.sides)
    if not crossed and halves < -SAME:
        found = f"points that run downwards round {drawn.title}"
        expected = "points from the keel up to the deck edge, heights above the baseline"
        drawn.rows[0].fault("height", "section-downwards", found, expected)


def _middle(drawn: Drawn) -> float:
    """Height of the deck at the centreplane [m]: straight from deck edge to deck edge."""
    (y, z), (y_other, z_other) = drawn.sides[0].places[-1], drawn.sides[-1].places[-1]
    return (z * y_other + z_other * y) / (y + y_other) if y + y_other > SAME else (z + z_other) / 2
