"""Figures of a hydrostatic table that do not lie on the curve through their neighbours.

A slip of the pen in one figure bends the interpolated curve where nobody looks. The curves are
drawn through volume, volume x KM and volume x LCB: those are integrals up to the waterline (the
second moment of the waterplane apart), smooth even where KM itself falls steeply.
"""

from __future__ import annotations

import itertools
import math
import statistics
from dataclasses import dataclass
from typing import TYPE_CHECKING

from incline.reading.curves import off_curve
from incline.units import factor

if TYPE_CHECKING:
    from collections.abc import Callable, Sequence

    from incline.reading.cells import Row

__all__ = ["Figure", "Station", "smoothness_remarks"]

_VOLUME, _KM, _LCB = 0.003, 0.01, 0.005
"""Distances worth a remark: shares of the volume, of KM, and of the length."""
_AREA = 0.03
"""Disagreement of area x step of draft with the step of volume, a share of the step."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Station:
    """One row in inside units, as in the record; ``area`` is BAD where it is not tabulated."""

    row: Row
    draft: float
    volume: float
    lcb: float
    km: float
    area: float


@dataclass(frozen=True, slots=True)
class Figure:
    """A column of figures and how it writes the value of a curve: both in inside units."""

    column: str
    write: Callable[[Station, float], float]


def smoothness_remarks(
    groups: Sequence[Sequence[Station]], volume: Figure, km: Figure, lcb: Figure, lpp: float
) -> list[str]:
    """Remarks on figures off their curves, and on areas at odds with the steps of volume.

    ``groups`` are the rows of each trim; nothing is said of one that is out of order or has a
    figure that could not be read.
    """
    said: list[str] = []
    sound = [g for g in groups if _is_sound(g)]
    for group in sound:
        middle = statistics.median(s.volume for s in group)
        least = [_VOLUME * max(s.volume, middle) for s in group]
        odd = _off_curve(group, [s.volume for s in group], least)
        said += [_sentence(s, volume, v) for s, v in odd]
        rest = [s for s in group if not any(s is o for o, _ in odd)]
        weight = [max(s.volume, middle) for s in rest]
        for figure, values, shares in (
            (km, [s.km for s in rest], [_KM * s.km for s in rest]),
            (lcb, [s.lcb for s in rest], [_LCB * lpp] * len(rest)),
        ):
            curve = [s.volume * v for s, v in zip(rest, values, strict=True)]
            enough = [w * share for w, share in zip(weight, shares, strict=True)]
            odd = _off_curve(rest, curve, enough)
            said += [_sentence(s, figure, v / s.volume) for s, v in odd]
    return said + _areas(sound, volume)


def _is_sound(group: Sequence[Station]) -> bool:
    figures = [v for s in group for v in (s.draft, s.volume, s.lcb, s.km)]
    rising = all(a.draft < b.draft and a.volume < b.volume for a, b in itertools.pairwise(group))
    return all(map(math.isfinite, figures)) and rising


def _off_curve(
    group: Sequence[Station], values: Sequence[float], least: Sequence[float]
) -> list[tuple[Station, float]]:
    """Rows whose values are off the curve of the others, and the curve there."""
    found = [(group[k], v) for k, v in off_curve([s.draft for s in group], values, least)]
    return sorted(found, key=lambda f: f[0].row.number)


def _sentence(station: Station, figure: Figure, value: float) -> str:
    row = station.row
    placed = row.sheet.placed[figure.column]
    there = figure.write(station, value)
    if placed.unit and placed.column.quantity:
        there /= factor(placed.unit, placed.column.quantity)
    return (
        f"Row {row.number} of {row.sheet.file}: {figure.column} {row.raw(figure.column)} does not"
        f" lie on the curve of its neighbours, which passes near {float(f'{there:.5g}'):.12g};"
        " check the figure."
    )


def _areas(groups: Sequence[Sequence[Station]], volume: Figure) -> list[str]:
    """One remark on all steps at which the volume does not rise by area x step of draft."""
    off: list[tuple[Station, Station, float]] = []
    for group in groups:
        for a, b in itertools.pairwise(group):
            step, expected = b.volume - a.volume, (a.area + b.area) / 2.0 * (b.draft - a.draft)
            # Near the keel the area itself changes too much within a step.
            if abs(expected - step) > _AREA * step and a.volume > group[-1].volume / 5.0:
                off.append((a, b, expected / step))
    if not off:
        return []
    a, b, ratio = off[0]
    more = f" (so at {len(off)} steps)" if len(off) > 1 else ""
    return [
        f"From row {a.row.number} to row {b.row.number} of {a.row.sheet.file} the area of the"
        f" waterplane x the step of draft is {ratio:.3g} times the step of {volume.column}{more};"
        " check the figures."
    ]
