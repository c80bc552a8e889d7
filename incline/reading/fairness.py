"""Offsets that do not lie on the fair lines through the other stations of their run.

A slip in one figure dents the hull, or bulges it, between two stations. Points correspond as in
`incline.hull.loft`: by their order between the lines that all stations share; where stations have
too many numbers of points for that, half breadths at one height do.
"""

from __future__ import annotations

import itertools
from collections import Counter
from dataclasses import dataclass
from typing import TYPE_CHECKING

from incline.reading.curves import LEAST, off_curve
from incline.reading.sections import SAME
from incline.reading.stations import is_line
from incline.units import LENGTH, factor

if TYPE_CHECKING:
    from collections.abc import Iterator, Sequence

    from incline.reading.cells import Row
    from incline.reading.plausible import Hull
    from incline.reading.sections import Place
    from incline.reading.stations import Drawn, Side
    from incline.record import Body

__all__ = ["fairness_remarks", "split"]

_OFF = 0.03
"""Distances worth a remark, as a share of beam or depth."""
_ALONE = 4.0
"""As for `off_curve`: at a station on a knuckle of even steps its own distance is 3.3 times."""
_STRANGE = 1
"""Stations, but for the ends, with another number of points, for the rest to go by their order."""
_LEVELS = (0.2, 0.35, 0.5, 0.65, 0.8)
"""Heights at which half breadths are compared, as shares of that of the run."""
_TOLD = 3
"""Figures of one station that are told."""


def split(stations: Sequence[Drawn]) -> list[list[Drawn]]:
    """Stations from break to break."""
    runs: list[list[Drawn]] = [[]]
    for drawn in stations:
        if runs[-1] and abs(drawn.x - runs[-1][-1].x) <= SAME:
            runs.append([])
        runs[-1].append(drawn)
    return runs


def fairness_remarks(body: Body, stations: Sequence[Drawn], hull: Hull) -> list[str]:
    """Remarks on a station with another number of points, and on stations off the fair lines."""
    said = _number_of_points(body, stations)
    for run in split(stations):
        if len(run) < LEAST:
            continue
        told: dict[int, list[str]] = {}
        for at in (0, -1) if any(len(s.sides) > 1 for s in run) else (0,):
            for n, text in _off([s.sides[at] for s in run], [s.x for s in run], hull):
                if text not in told.setdefault(n, []):
                    told[n].append(text)
        said += [_sentence(body, run[n], told[n]) for n in sorted(told)]
    return said


def _number_of_points(body: Body, stations: Sequence[Drawn]) -> list[str]:
    """A remark when all stations but one have as many points; an end may be a line of fewer."""
    counts = [tuple(len(side.rows) for side in (s.sides[0], s.sides[-1])) for s in stations]
    usual, times = Counter(counts).most_common(1)[0]
    if len(counts) < LEAST or times != len(counts) - 1:
        return []
    n = next(k for k, count in enumerate(counts) if count != usual)
    odd = stations[n]
    if n in (0, len(counts) - 1) and is_line(odd):
        return []
    one, many = (_points(count) for count in (counts[n], usual))
    return [
        f"{_place(body, odd)} has {one} and every other station of the body {many}: check that no"
        " row is missing and none too many."
    ]


def _points(count: Sequence[int]) -> str:
    starboard, port = count
    return f"{starboard} points" if starboard == port else f"{starboard} and {port} points"


def _place(body: Body, drawn: Drawn) -> str:
    rows = f"rows {drawn.rows[0].number} to {drawn.rows[-1].number}"
    return f"S{drawn.title[1:]} of {body.name} ({rows} of {drawn.rows[0].sheet.file})"


def _sentence(body: Body, drawn: Drawn, told: Sequence[str]) -> str:
    more = f", and {len(told) - _TOLD} more" if len(told) > _TOLD else ""
    return (
        f"{_place(body, drawn)} does not lie on the curve of its neighbours along the hull:"
        f" {'; '.join(told[:_TOLD])}{more}. Check the figures and the station's x; a step"
        " or a knuckle needs two stations at one x."
    )


@dataclass(frozen=True, slots=True)
class _Point:
    """A point in the station numbered ``station`` of a run; ``name`` as remarks tell it."""

    station: int
    row: Row
    name: str
    place: Place


def _off(sides: Sequence[Side], x: Sequence[float], hull: Hull) -> Iterator[tuple[int, str]]:
    """Stations by their number and what is off in them."""
    matched = True
    for stretch in zip(*_between_lines(sides), strict=True):
        counts = [len(points) for points in stretch]
        usual, times = Counter(counts[1:-1]).most_common(1)[0]
        matched &= len(set(counts)) == 1
        if times >= len(counts) - 2 - _STRANGE:
            alike = [points for points in stretch if len(points) == usual]
            for line in zip(*alike, strict=True):
                yield from _off_line(line, x, hull)
    if not matched:
        yield from _off_level(sides, x, hull)


def _between_lines(sides: Sequence[Side]) -> list[list[list[_Point]]]:
    """Points of each station, cut behind each line that all stations share."""
    shared = set.intersection(*({n.casefold() for n in s.lines if n} for s in sides))
    found = []
    for n, side in enumerate(sides):
        parts: list[list[_Point]] = [[]]
        points = zip(side.rows, side.lines, side.places, strict=True)
        for k, (row, line, place) in enumerate(points, start=1):
            name = f"line {line}" if line else f"point {k} of {len(side.rows)}"
            parts[-1].append(_Point(n, row, name, place))
            if line.casefold() in shared:
                parts.append([])
        found.append(parts)
    return found


def _off_line(line: Sequence[_Point], x: Sequence[float], hull: Hull) -> Iterator[tuple[int, str]]:
    along = [x[p.station] for p in line]
    for k, key, size in ((0, "half breadth", hull.beam), (1, "height", hull.depth)):
        values = [p.place[k] for p in line]
        for n, curve in off_curve(along, values, [_OFF * size] * len(line), _ALONE):
            point = line[n]
            there = _written(point.row, key, max(curve, 0.0) if k == 0 else curve)
            text = f"{key} {point.row.raw(key)} in row {point.row.number} ({point.name})"
            yield point.station, f"{text}, where the curve passes near {there}"


def _off_level(sides: Sequence[Side], x: Sequence[float], hull: Hull) -> Iterator[tuple[int, str]]:
    low = min(z for side in sides for _, z in side.places)
    high = max(z for side in sides for _, z in side.places)
    for level in (low + share * (high - low) for share in _LEVELS):
        reach = [_reach(side.places, level) for side in sides]
        there = [(n, y) for n, y in enumerate(reach) if y is not None]
        least = [_OFF * hull.beam] * len(there)
        for k, curve in off_curve([x[n] for n, _ in there], [y for _, y in there], least, _ALONE):
            n, y = there[k]
            row = sides[n].rows[0]
            found, near = (_written(row, "half breadth", v) for v in (y, max(curve, 0.0)))
            text = f"half breadth {found} at height {_written(row, 'height', level)}"
            yield n, f"{text}, where the curve passes near {near}"


def _reach(places: Sequence[Place], level: float) -> float | None:
    """The largest half breadth of a side at a height; None where it does not reach there."""
    crossed = [
        a[0] + (b[0] - a[0]) * (level - a[1]) / (b[1] - a[1])
        for a, b in itertools.pairwise(places)
        if min(a[1], b[1]) <= level <= max(a[1], b[1]) and a[1] != b[1]
    ]
    return max(crossed, default=None)


def _written(row: Row, key: str, value: float) -> str:
    """A length in the unit of its column."""
    unit = row.sheet.placed[key].unit or "m"
    return f"{float(f'{value / factor(unit, LENGTH):.4g}') + 0.0:.12g}"
