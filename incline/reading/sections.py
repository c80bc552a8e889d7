"""Whether the outline of a section is one that a hull can have: plane geometry of its points.

A side runs from the keel to the deck edge and never beyond the centreplane, so that the two sides
of a section can meet nowhere but on it. What may cross is a side itself, or the deck a side.
"""

from __future__ import annotations

import itertools
import math
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from collections.abc import Sequence

__all__ = ["SAME", "Place", "area", "crossing", "deck_crossing"]

Place = tuple[float, float]
"""Half-breadth and height [m]."""

SAME = 1e-6
"""Points [m] closer than this are one: rounding of units, far below any table's last digit."""


def area(side: Sequence[Place], middle: float) -> float:
    """Area [m2] of half a section whose deck is at height ``middle`` [m] on the centreplane.

    Above zero when the points run from the keel upwards round the section.
    """
    closed = itertools.pairwise((*side, (0.0, middle)))
    return 0.5 * sum((a[0] + b[0]) * (b[1] - a[1]) for a, b in closed)


def crossing(side: Sequence[Place]) -> tuple[int, int] | None:
    """Two lines of a side that cross, touch or fold back on each other; None when there are none.

    A line is numbered by the point that it leads to. Points next to each other must differ.
    """
    if all(a[1] < b[1] for a, b in itertools.pairwise(side)):
        return None
    spans = sorted(
        (min(a[1], b[1]) - SAME, max(a[1], b[1]), n)
        for n, (a, b) in enumerate(itertools.pairwise(side), start=1)
    )
    found: list[tuple[int, int]] = []
    for k, (_, high, i) in enumerate(spans):
        for low, _, j in itertools.islice(spans, k + 1, None):
            if low > high:  # as for all that follow
                break
            last, first = max(i, j), min(i, j)
            a, b, c, d = side[first - 1], side[first], side[last - 1], side[last]
            if _folds(a, b, d) if last == first + 1 else _meet(a, b, c, d):
                found.append((last, first))
    if not found:
        return None
    last, first = min(found)
    return first, last


def deck_crossing(side: Sequence[Place], middle: float) -> int | None:
    """The point of a side after which it passes through the deck; None when it does not.

    ``middle`` is the height of the deck at the centreplane [m]: it runs straight from there to the
    side's last point. To touch it is no crossing.
    """
    breadth, top = side[-1]
    if breadth <= SAME:
        return None
    before: tuple[int, float, float] | None = None
    for n, (y, z) in enumerate(side):
        above = z - middle - (top - middle) * y / breadth
        if abs(above) <= SAME:
            continue
        if before is not None and above * before[2] < 0.0:
            at, y_before, above_before = before
            share = above_before / (above_before - above)
            y_there = y_before + share * (y - y_before) if n == at + 1 else side[n - 1][0]
            if SAME < y_there < breadth - SAME:
                return n
        before = n, y, above
    return None


def _meet(a: Place, b: Place, c: Place, d: Place) -> bool:
    """Whether the line from a to b and that from c to d have a point in common."""
    for axis in (0, 1):
        if max(a[axis], b[axis]) < min(c[axis], d[axis]) - SAME:
            return False
        if max(c[axis], d[axis]) < min(a[axis], b[axis]) - SAME:
            return False
    for p, q, r, s in ((a, b, c, d), (c, d, a, b)):
        one, two = _off(p, q, r), _off(p, q, s)
        if min(one, two) > SAME or max(one, two) < -SAME:
            return False
    return True


def _folds(a: Place, b: Place, c: Place) -> bool:
    """Whether the line from b to c runs back along that from a to b."""
    along = (b[0] - a[0]) * (c[0] - b[0]) + (b[1] - a[1]) * (c[1] - b[1])
    return along < 0.0 and min(abs(_off(a, b, c)), abs(_off(b, c, a))) <= SAME


def _off(a: Place, b: Place, p: Place) -> float:
    """Distance of p from the straight line through a and b [m], positive to its left."""
    cross = (b[0] - a[0]) * (p[1] - a[1]) - (b[1] - a[1]) * (p[0] - a[0])
    return cross / math.hypot(b[0] - a[0], b[1] - a[1])
