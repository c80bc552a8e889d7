"""The stations of a body in their order along it, and the lines that run through them."""

from __future__ import annotations

import itertools
from collections import Counter
from typing import TYPE_CHECKING

from incline.errors import Where
from incline.reading.collect import nearest, quoted
from incline.reading.sections import SAME

if TYPE_CHECKING:
    from collections.abc import Sequence

    from incline.reading.stations import Drawn, Side
    from incline.record import Body, Station

__all__ = ["check_lines", "check_order", "joined"]

_LEAST = 3
"""Stations of a body; between two breaks two will do, with straight lines from one to the other."""


def joined(stations: Sequence[Drawn]) -> tuple[Station, ...]:
    """The stations as they are recorded, those at one place with one and the same x.

    A line that the rows write in several ways has one name.
    """
    found: list[Station] = []
    spelled: dict[str, str] = {}
    for drawn in stations:
        same = bool(found) and abs(drawn.x - found[-1].x) <= SAME
        found.append(drawn.station(found[-1].x if same else drawn.x, spelled))
    return tuple(found)


def check_order(body: Body, stations: Sequence[Drawn]) -> None:
    """X must rise from aft, with stations enough in each smooth run."""
    sheet = stations[0].rows[0].sheet
    turned = stations[0].x > stations[-1].x
    rising = True
    for a, b in itertools.pairwise(stations):
        if b.x < a.x - SAME:
            x, before = (quoted(s.rows[0].raw("x")) for s in (b, a))
            found = f"{x} of {b.title} after {before} of {a.title}"
            expected = "x rising from station to station of a body"
            hint = "list the stations from aft forward" if turned else ""
            b.rows[0].fault("x", "station-order", found, expected, hint)
            rising = False
    if len(stations) < _LEAST:
        count = "one station" if len(stations) == 1 else "two stations"
        found = f"{count} of {quoted(body.name)}"
        where = Where(sheet.file, 0, "station")
        sheet.collector.add(where, "stations-too-few", found, "three stations at least")
    elif rising:
        _check_runs(stations)


def _check_runs(stations: Sequence[Drawn]) -> None:
    """Two stations at one x end a run of lines and begin the next; one alone makes none."""
    breaks = [abs(b.x - a.x) <= SAME for a, b in itertools.pairwise(stations)]
    for drawn, before, after in zip(stations, [True, *breaks], [*breaks, True], strict=True):
        if before and after:
            found = f"{drawn.title} with no other between two breaks in the lines"
            expected = "two stations at least from one pair of stations at one x to the next"
            drawn.rows[0].fault("x", "stations-too-few", found, expected)


def check_lines(body: Body, stations: Sequence[Drawn]) -> None:
    """A line that has a name must run through every station of the body, in one order."""
    sides = [(s, side) for s in stations if s.sound for side in s.sides]
    held = [[name.casefold() for name in side.lines if name] for _, side in sides]
    times = Counter(name for names in held for name in set(names))
    if not times:
        return
    usual = [name for name, n in times.items() if 2 * n > len(sides)]
    order = next((names for names in held if set(usual) <= set(names)), usual)
    first: list[str] = [name for name in order if name in usual]
    for (drawn, side), names in zip(sides, held, strict=True):
        _check_twice(drawn, side, names)
        _check_strange(body, drawn, side, usual)
        lacking = [name for name in first if name not in names]
        mine = list(dict.fromkeys(name for name in names if name in usual))
        if lacking:
            found = f"no point on line {quoted(lacking[0])} in {drawn.title}"
            expected = f"a point on it in every station of {quoted(body.name)}"
            side.rows[0].fault("line", "line-broken", found, expected)
        elif mine != first:
            found = f"lines {', '.join(map(quoted, mine))} in {drawn.title}"
            expected = f"the order {', '.join(map(quoted, first))} as in the other stations"
            side.rows[0].fault("line", "line-order", found, expected)


def _check_twice(drawn: Drawn, side: Side, names: Sequence[str]) -> None:
    seen: set[str] = set()
    rows = (row for row, name in zip(side.rows, side.lines, strict=True) if name)
    for row, name in zip(rows, names, strict=True):
        if name in seen:
            found = f"line {quoted(row.text('line'))} twice in {drawn.title}"
            row.fault("line", "line-twice", found, "one point on a line in each side of a station")
        seen.add(name)


def _check_strange(body: Body, drawn: Drawn, side: Side, usual: Sequence[str]) -> None:
    """Lines that most stations do not have."""
    for row, name in zip(side.rows, side.lines, strict=True):
        if name and name.casefold() not in usual:
            found = f"line {quoted(name)} in {drawn.title} and few others"
            expected = f"a line that every station of {quoted(body.name)} has"
            row.fault("line", "line-broken", found, expected, nearest(name, usual))
