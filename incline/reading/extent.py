"""Offsets against the vessel's particulars: another datum, another breadth, missing stations.

What cannot be a ship is refused by `incline.reading.hull_size`; these are remarks on what can be
one, though a slip is likelier.
"""

from __future__ import annotations

import itertools
import statistics
from typing import TYPE_CHECKING

from incline.reading.fairness import split
from incline.reading.sections import SAME
from incline.reading.stations import is_line
from incline.units import LENGTH, factor

if TYPE_CHECKING:
    from collections.abc import Iterator, Sequence

    from incline.reading.cells import Sheet
    from incline.reading.plausible import Hull
    from incline.reading.sections import Place
    from incline.reading.stations import Drawn
    from incline.record import Body, DraftReading, Offsets

__all__ = ["extent_remarks", "mark_remarks"]

_DEPTH = 0.08
"""Deck edge amidships off the depth, as a share of it; a sheer curve is lowest near there."""
_LOW, _HIGH = -0.03, 0.05
"""Lowest point of the hull about the baseline, as shares of the depth."""
_BEAM = 0.04
"""Largest breadth off the beam, as a share of it; hulls flare a little beyond it."""
_END = 0.5
"""Share of the usual spacing by which the first or the last station may stop short."""
_GAP, _BESIDE = 1.9, 1.5
"""A gap of this many usual ones, and of this many of those beside it, lacks a station."""
_MARK = 0.02
"""Share of the length by which a draft mark may stand outside the stations."""


def extent_remarks(
    sheet: Sheet, bodies: Sequence[tuple[Body, Sequence[Drawn]]], hull: Hull
) -> list[str]:
    """Remarks on the size and the length of the hull, without its appendages."""
    drawn = [(body, stations) for body, stations in bodies if body.kind == "hull" and stations]
    if not drawn:
        return []
    gaps = [line for _, stations in bodies if stations for line in _gaps(stations)]
    return [
        *_heights(sheet, drawn, hull),
        *_breadth(sheet, drawn, hull),
        *_ends(drawn, hull),
        *gaps,
    ]


def _told(sheet: Sheet, key: str, value: float) -> str:
    """A length with the unit of its column."""
    unit = sheet.placed[key].unit or "m"
    return f"{float(f'{value / factor(unit, LENGTH):.4g}') + 0.0:.12g} {unit}"


def _heights(
    sheet: Sheet, bodies: Sequence[tuple[Body, Sequence[Drawn]]], hull: Hull
) -> Iterator[str]:
    """Whether heights count from the baseline: the deck edge amidships and the lowest point."""
    amidships = [z for _, s in bodies if (z := _deck_amidships(s, hull.lpp / 2.0)) is not None]
    if amidships and abs(max(amidships) - hull.depth) > _DEPTH * hull.depth:
        found, depth = (_told(sheet, "height", v) for v in (max(amidships), hull.depth))
        yield (
            f"The deck edge amidships is {found} high in {sheet.file}, and the depth in [vessel] is"
            f" {depth}: check that heights count from the moulded baseline."
        )
    low, at = min(((z, s) for _, of in bodies for s in of for _, z in _places(s)), key=_first)
    if low < _LOW * hull.depth or low > _HIGH * hull.depth:
        above = "above" if low > 0.0 else "below"
        yield (
            f"The lowest point of the hull in {sheet.file}, in {at.title}, lies"
            f" {_told(sheet, 'height', abs(low))} {above} the baseline, with a depth of"
            f" {_told(sheet, 'height', hull.depth)}: check that heights count from the moulded"
            " baseline."
        )


def _first(pair: tuple[float, Drawn]) -> float:
    return pair[0]


def _places(drawn: Drawn) -> list[Place]:
    return [place for side in drawn.sides for place in side.places]


def _deck_amidships(stations: Sequence[Drawn], x: float) -> float | None:
    """Height of the deck edge at ``x``, straight from station to station; None outside them."""
    for a, b in itertools.pairwise(stations):
        if a.x - SAME <= x <= b.x + SAME and b.x - a.x > SAME:
            low, high = (max(map(_deck_edge, (side.places for side in s.sides))) for s in (a, b))
            return low + (high - low) * (x - a.x) / (b.x - a.x)
    return None


def _deck_edge(places: Sequence[Place]) -> float:
    """The last point of a side, or its outermost where the rows go on over a cambered deck."""
    y, z = places[-1]
    return z if y > SAME else max((y, z) for y, z in places)[1]


def _breadth(
    sheet: Sheet, bodies: Sequence[tuple[Body, Sequence[Drawn]]], hull: Hull
) -> Iterator[str]:
    reach, at = max(
        ((abs(body.y) + y, s) for body, of in bodies for s in of for y, _ in _places(s)), key=_first
    )
    if abs(2.0 * reach - hull.beam) > _BEAM * hull.beam:
        found, beam = (_told(sheet, "half breadth", v) for v in (2.0 * reach, hull.beam))
        yield (
            f"The largest breadth in {sheet.file} is {found}, in {at.title}, and the beam in"
            f" [vessel] is {beam}: check the half breadths and the beam."
        )


def _ends(bodies: Sequence[tuple[Body, Sequence[Drawn]]], hull: Hull) -> Iterator[str]:
    """Remarks on hulls cut off short of a perpendicular."""
    every = [s for _, stations in bodies for s in stations]
    steps = [b.x - a.x for _, of in bodies for a, b in itertools.pairwise(of) if b.x - a.x > SAME]
    usual = statistics.median(steps)
    for at, first, short, end in (
        (min(every, key=lambda s: s.x), "first", 1.0, "after"),
        (max(every, key=lambda s: s.x), "last", -1.0, "forward"),
    ):
        lacking = short * (at.x - (0.0 if end == "after" else hull.lpp))
        if lacking > _END * usual and not is_line(at):
            sheet = at.rows[0].sheet
            side = "forward of" if end == "after" else "abaft"
            yield (
                f"The {first} of all stations in {sheet.file}, {at.title}, stands"
                f" {_told(sheet, 'x', lacking)} {side} the {end} perpendicular and is not a line:"
                " the hull ends there with a flat face. Check for missing stations."
            )


def _gaps(stations: Sequence[Drawn]) -> Iterator[str]:
    """Remarks on gaps in which a station may be missing.

    A run of two stations is drawn with straight lines on purpose, and stations alike have the same
    hull between them.
    """
    steps = [b.x - a.x for run in split(stations) for a, b in itertools.pairwise(run)]
    pairs = [(a, b, len(run)) for run in split(stations) for a, b in itertools.pairwise(run)]
    usual = statistics.median(steps)
    for n, (a, b, length) in enumerate(pairs):
        beside = [steps[k] for k in (n - 1, n + 1) if 0 <= k < len(steps)]
        wide = steps[n] > _GAP * usual and all(steps[n] > _BESIDE * step for step in beside)
        if wide and len(steps) > 2 and length > 2 and not _alike(a, b):
            sheet = a.rows[0].sheet
            yield (
                f"Between {a.title} and {b.title} in {sheet.file} there are"
                f" {_told(sheet, 'x', steps[n])}, and the usual step is"
                f" {_told(sheet, 'x', usual)}: check for a missing station."
            )


def _alike(a: Drawn, b: Drawn) -> bool:
    return [side.places for side in a.sides] == [side.places for side in b.sides]


def mark_remarks(
    drafts: Sequence[DraftReading],
    offsets: Offsets | None,
    sheets: tuple[Sheet | None, ...],
    hull: Hull,
) -> list[str]:
    """Remarks on draft marks outside the stations; ``sheets`` are those of drafts and offsets."""
    marks, table = sheets
    stations = [s for body in offsets.bodies for s in body.stations] if offsets else []
    if not stations or marks is None or table is None or table.collector.defects:
        return []
    ends = min(stations, key=lambda s: s.x), max(stations, key=lambda s: s.x)
    low, high = (s.x for s in ends)
    outside = [d for d in drafts if max(low - d.x, d.x - high) > _MARK * hull.lpp]
    if not outside:
        return []
    at = ", ".join(dict.fromkeys(_told(marks, "x", d.x - hull.x_shift) for d in outside))
    first, last = (_told(table, "x", x - hull.x_shift) for x in (low, high))
    return [
        f"Draft marks at x {at} in {marks.file} stand outside the stations in {table.file}, which"
        f" run from {first} to {last}: check for missing stations and where x counts from."
    ]
