"""How far the hull may be off for stations and points that lie apart.

Two other hulls are drawn from the same offsets: one from every second station, one with each edge
bulged as the turn between its neighbours suggests. What they displace differs by about the error of
the spacing.
"""

from __future__ import annotations

import dataclasses
import itertools
import math
from typing import TYPE_CHECKING

from incline.hull.integrate import Hull
from incline.record import OffsetPoint

if TYPE_CHECKING:
    from collections.abc import Sequence

    from incline.hull.integrate import Displaced, Pose
    from incline.record import Body, Offsets, Station

    Side = tuple[OffsetPoint, ...]

__all__ = ["Miss", "bulged", "coarsened", "spacing_misses"]

Miss = tuple[float, float, float]
"""Share of volume, KM [m] and LCB [m] that one hull has more than another."""

_KNUCKLE = math.radians(25.0)
"""A turn between two edges beyond which the corner is taken for a knuckle and no part of a curve.
A setting of this program."""


_TAKEN_IN = 0.75
"""Share of a flat arc's segment that the triangle over its chord fills."""


def spacing_misses(offsets: Offsets, hull: Hull, pose: Pose) -> tuple[Miss, Miss]:
    """What every second station, and arcs for edges, change at a waterline: one pose, no axis.

    An edge bulged at one point takes in three quarters of its arc; the rest is added.
    """
    first, bulge = (
        _apart(Hull(other, hull.lpp, hull.layers).displaced(pose), hull.displaced(pose))
        for other in (coarsened(offsets), bulged(offsets))
    )
    return first, (bulge[0] / _TAKEN_IN, bulge[1] / _TAKEN_IN, bulge[2] / _TAKEN_IN)


def _apart(one: Displaced, other: Displaced) -> Miss:
    return (
        float(one.volume / other.volume - 1.0),
        float(one.z + one.bmt - other.z - other.bmt),
        float(one.x - other.x),
    )


def coarsened(offsets: Offsets) -> Offsets:
    """The hull from every second station, ends and breaks kept."""
    return dataclasses.replace(
        offsets,
        bodies=tuple(
            dataclasses.replace(b, stations=_every_second(b.stations)) for b in offsets.bodies
        ),
    )


def _every_second(stations: Sequence[Station]) -> tuple[Station, ...]:
    kept: list[Station] = []
    since = 0
    for i, s in enumerate(stations):
        first = i == 0 or stations[i - 1].x == s.x
        last = i == len(stations) - 1 or stations[i + 1].x == s.x
        since = 0 if first else since + 1
        if first or last or since % 2 == 0:
            kept.append(s)
    return tuple(kept)


def bulged(offsets: Offsets) -> Offsets:
    """The hull with a point in the middle of each edge, moved out by the sagitta of its arc."""
    return dataclasses.replace(
        offsets, bodies=tuple(dataclasses.replace(b, stations=_arched(b)) for b in offsets.bodies)
    )


def _arched(body: Body) -> tuple[Station, ...]:
    found = []
    for s in body.stations:
        starboard = _with_arcs(s.starboard)
        port = starboard if s.port == s.starboard else _with_arcs(s.port)
        found.append(dataclasses.replace(s, starboard=starboard, port=port))
    return tuple(found)


def _with_arcs(side: Side) -> Side:
    """Each edge as an arc that turns as its corners do; it bulges by its length times turn / 8."""
    edges = [(q.y - p.y, q.z - p.z) for p, q in itertools.pairwise(side)]
    turns: list[float | None] = [None]
    for corner, (one, two) in zip(side[1:-1], itertools.pairwise(edges), strict=True):
        turn = math.atan2(one[0] * two[1] - one[1] * two[0], one[0] * two[0] + one[1] * two[1])
        turns.append(None if corner.line or abs(turn) > _KNUCKLE else turn)
    turns.append(None)
    lengths = [math.hypot(*edge) for edge in edges]
    points = [side[0]]
    for i, (dy, dz) in enumerate(edges):
        arc = _turn_of(turns[i], turns[i + 1], lengths, i)
        p = side[i]
        breadth = max(0.0, p.y + dy / 2.0 + dz * arc / 8.0)
        points += [OffsetPoint(breadth, p.z + dz / 2.0 - dy * arc / 8.0), side[i + 1]]
    return tuple(points)


_ALIKE = 1.5


def _turn_of(start: float | None, end: float | None, lengths: Sequence[float], i: int) -> float:
    """The turn along edge i: the lesser of its corners'.

    An end that is a knuckle, the keel or the deck edge says nothing, and the other one counts
    unless the edge is much longer than its neighbour, as a flat beside a curve is.
    """
    if start is not None and end is not None:
        return min(start, end, key=abs) if start * end > 0.0 else 0.0
    if start is not None:
        return start if lengths[i] <= _ALIKE * lengths[i - 1] else 0.0
    if end is not None:
        return end if lengths[i] <= _ALIKE * lengths[i + 1] else 0.0
    return 0.0
