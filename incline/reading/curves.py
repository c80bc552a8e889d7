"""Figures that do not lie on the curve through their neighbours: which one of them is at fault."""

from __future__ import annotations

import math
import statistics
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from collections.abc import Sequence

__all__ = ["LEAST", "off_curve"]

_ODD = 5.0
"""Times the median distance of the other figures from their curves."""
LEAST = 5
"""Figures below which one off its curve cannot be told from its neighbours."""


def off_curve(
    x: Sequence[float], values: Sequence[float], least: Sequence[float], alone: float = 3.0
) -> list[tuple[int, float]]:
    """The figures off the curve of the others, by index in order, and the curve there.

    ``x`` rises; ``least`` are the distances from the curve that are worth a remark, in the unit of
    ``values``; ``alone`` is how many times the largest distance of a figure nearby, without the one
    at fault, its own must be. One in four is told at most, and none at an end.
    """
    left = list(range(len(x)))
    found: list[tuple[int, float]] = []
    while len(left) >= LEAST and len(found) < max(1, len(x) // 4):
        apart = zip(left[1:-1], _distances(x, values, left), strict=True)
        ratios = [d / least[i] if least[i] > 0.0 else 0.0 for i, d in apart]
        worst = sorted(range(len(ratios)), key=ratios.__getitem__, reverse=True)
        suspects = (_culprit(x, values, left, k + 1, alone) for k in worst if ratios[k] > 1.0)
        at = next((k for k in suspects if k is not None), None)
        if at is None:
            break
        found.append((left[at], _curve(x, values, left, at)))
        del left[at]
    return sorted(found)


def _culprit(
    x: Sequence[float], y: Sequence[float], rows: Sequence[int], worst: int, alone: float
) -> int | None:
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
    bound = max(_ODD * statistics.median(rests[at]), alone * nearby[at])
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
