"""Whether offsets are of the size of the vessel: wrong units, full breadths, odd heights.

The bounds are wide, as those of `incline.reading.plausible`: a hull overhangs its perpendiculars,
flares beyond its moulded beam and rises above its depth in the sheer or a forecastle.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

from incline.reading.collect import quoted
from incline.reading.plausible import Range, check
from incline.reading.sections import SAME
from incline.units import LENGTH, factor

if TYPE_CHECKING:
    from collections.abc import Sequence

    from incline.reading.cells import Sheet
    from incline.reading.plausible import Hull
    from incline.reading.stations import Drawn
    from incline.record import Body

__all__ = ["check_size"]

_LENGTH = (0.8, 1.4)
"""Length over the stations as a share of that between perpendiculars."""
_BREADTH = (0.75, 1.5)
"""Breadth over the bodies as a share of the beam."""
_HEIGHT = (0.6, 3.0)
"""Height of the highest deck edge as a share of the depth."""
_FULL = 1.2
"""Half-breadths up to this share of the beam may be breadths instead."""


def check_size(sheet: Sheet, bodies: Sequence[tuple[Body, Sequence[Drawn]]], hull: Hull) -> None:
    """Check every point, and the hull as a whole when all its figures could be read."""
    inside = [_check_points(body, s, hull) for body, stations in bodies for s in stations]
    drawn = [s for _, stations in bodies for s in stations]
    if not drawn or not all(inside) or not all(s.sound for s in drawn):
        return
    if any(math.isnan(body.y) for body, _ in bodies):
        return
    extent = max(s.x for s in drawn) - min(s.x for s in drawn)
    what = "a length from the first station to the last"
    _check_whole(sheet, "x", extent, what, hull.lpp, _LENGTH)
    reach = max(abs(body.y) + y for body, s in _each(bodies) for y, _ in _places(s))
    what = "a largest half breadth, from the vessel's centreplane,"
    _check_whole(sheet, "half breadth", reach, what, hull.beam / 2.0, _BREADTH)
    tops = [z for body, s in _each(bodies) if body.kind == "hull" for _, z in _places(s)]
    if tops:
        what = "a highest point of the hull"
        _check_whole(sheet, "height", max(tops), what, hull.depth, _HEIGHT)


def _each(bodies: Sequence[tuple[Body, Sequence[Drawn]]]) -> list[tuple[Body, Drawn]]:
    return [(body, s) for body, stations in bodies for s in stations]


def _places(drawn: Drawn) -> list[tuple[float, float]]:
    return [place for side in drawn.sides for place in side.places]


def _check_points(body: Body, drawn: Drawn, hull: Hull) -> bool:
    """Whether no point of a station is outside the vessel by much, nor in its mirror image."""
    widest = max(_BREADTH[1] * hull.beam / 2.0 - abs(body.y), 0.1 * hull.beam)
    breadths = Range(
        "a half breadth", LENGTH, 0.0, widest, (0.0, hull.beam / 2.0), "outside-vessel"
    )
    highest = _HEIGHT[1] * hull.depth
    likely = (0.0, 1.5 * hull.depth)
    heights = Range("a height", LENGTH, -hull.depth, highest, likely, "outside-vessel")
    inside = hull.x(drawn.rows[0], "x", drawn.x)
    for side in drawn.sides:
        for row, (y, z) in zip(side.rows, side.places, strict=True):
            full = "half breadths count from the centreplane" if y <= _FULL * hull.beam else ""
            inside &= check(row, "half breadth", y, breadths, full)
            inside &= check(row, "height", z, heights)
    if inside and body.mirrored and abs(body.y) > 0.0 and drawn.sound:
        _check_inner(body, drawn)
    return inside


def _check_inner(body: Body, drawn: Drawn) -> None:
    """A body must not reach over the centreplane into its own mirror image."""
    inner = drawn.sides[-1 if body.y > 0.0 else 0]
    n, (y, _) = max(enumerate(inner.places), key=lambda p: p[1][0])
    if y > abs(body.y) + SAME:
        row = inner.rows[n]
        found = f"half breadth {quoted(row.raw('half breadth'))} in {drawn.title}"
        expected = f"half breadths inwards no more than y of {quoted(body.name)}, which is mirrored"
        row.fault("half breadth", "body-overlap", found, expected)


@dataclass(frozen=True, slots=True)
class _Whole:
    """A figure over all rows, told at the heading of its column."""

    sheet: Sheet
    value: float
    whole: bool = True

    def written(self, key: str) -> tuple[str, str]:
        """The figure in the unit of its column."""
        unit = self.sheet.placed[key].unit or "m"
        return f"{self.value / factor(unit, LENGTH):.4g}", unit

    def fault(self, key: str, code: str, found: str, expected: str, hint: str = "") -> None:
        """Collect a defect of the column."""
        self.sheet.fault(key, code, found, expected, hint)


def _check_whole(
    sheet: Sheet, key: str, value: float, what: str, size: float, shares: tuple[float, float]
) -> None:
    low, high = (share * size for share in shares)
    check(_Whole(sheet, value), key, value, Range(what, LENGTH, low, high, (low, high)))
