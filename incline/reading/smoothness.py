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

from incline.units import factor

if TYPE_CHECKING:
    from collections.abc import Callable, Sequence

    from incline.reading.cells import Row

__all__ = ["Figure", "Station", "smoothness_remarks"]

_ODD = 5.0
"""Times the median distance of the other rows from their curves."""
_ALONE = 3.0
"""Times the largest distance of a row nearby, without the one at fault."""
_VOLUME, _KM, _LCB = 0.003, 0.01, 0.005
"""Distances worth a remark: shares of the volume, of KM, and of the length."""
_AREA = 0.03
"""Disagreement of area x step of draft with the step of volume, a share of the step."""
_LEAST = 5
"""Rows below which one off its curve cannot be told from its neighbours."""


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
    x = [s.draft for s in group]
    left = list(range(len(group)))
    found: list[tuple[Station, float]] = []
    while len(left) >= _LEAST and len(found) < len(group) // 4:
        apart = zip(left[1:-1], _distances(x, values, left), strict=True)
        ratios = [d / least[i] if least[i] > 0.0 else 0.0 for i, d in apart]
        worst = sorted(range(len(ratios)), key=ratios.__getitem__, reverse=True)
        suspects = (_culprit(x, values, left, k + 1) for k in worst if ratios[k] > 1.0)
        at = next((k for k in suspects if k is not None), None)
        if at is None:
            break
        found.append((group[left[at]], _curve(x, values, left, at)))
        del left[at]
    return sorted(found, key=lambda f: f[0].row.number)


def _culprit(x: Sequence[float], y: Sequence[float], rows: Sequence[int], worst: int) -> int | None:
    """Which of ``rows`` puts the one at ``worst`` off the curve; None where no single one does.

    One figure off its curve pulls its neighbours off theirs: it is the one without which those
    nearby lie best. At a chine or a transom they lie no better without any one row, and the row at
    an end cannot be told from a hull that bends there.
    """
    rests = {
        k: _distances(x, y, [*rows[:k], *rows[k + 1 :]])
        for k in range(max(0, worst - 2), min(len(rows), worst + 3))
    }
    nearby = {k: max(d[max(0, k - 4) : k + 3], default=0.0) for k, d in rests.items()}
    at = min(nearby, key=nearby.__getitem__)
    if at in (0, len(rows) - 1):
        return None
    distance = abs(y[rows[at]] - _curve(x, y, rows, at))
    bound = max(_ODD * statistics.median(rests[at]), _ALONE * nearby[at])
    return at if distance > bound else None


def _distances(x: Sequence[float], y: Sequence[float], rows: Sequence[int]) -> list[float]:
    """Distance of each row but the first and the last from the curve of its neighbours."""
    return [abs(y[rows[k]] - _curve(x, y, rows, k)) for k in range(1, len(rows) - 1)]


def _curve(x: Sequence[float], y: Sequence[float], rows: Sequence[int], at: int) -> float:
    """The polynomial through two neighbours on each side, as far as there are (Lagrange)."""
    nodes = [rows[k] for k in range(max(0, at - 2), min(len(rows), at + 3)) if k != at]
    place = x[rows[at]]
    return sum(
        y[i] * math.prod((place - x[j]) / (x[i] - x[j]) for j in nodes if j != i) for i in nodes
    )


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
