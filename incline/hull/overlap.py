"""Bodies that stand in one another, whose common volume would be counted twice."""

from __future__ import annotations

import itertools
from typing import TYPE_CHECKING

from incline.hull.loft import runs_of

if TYPE_CHECKING:
    import numpy as np
    from numpy.typing import NDArray

    from incline.hull.loft import Run
    from incline.record import Offsets

    Floats = NDArray[np.float64]

__all__ = ["overlaps"]

_SECTIONS, _GRID = 31, 24
"""Sections and points across each at which two bodies are looked at: a check, not a measurement."""


def overlaps(offsets: Offsets) -> tuple[tuple[str, str, float], ...]:
    """Pairs of bodies by name with about the volume [m3] that both have; pairs with none left out.

    A mirrored body counts with both its images.
    """
    runs = {body.name: runs_of(body) for body in offsets.bodies}
    found = []
    for one, other in itertools.combinations(runs, 2):
        volume = sum(_common(a, b) for a in runs[one] for b in runs[other])
        if volume > 0.0:
            found.append((one, other, volume))
    return tuple(found)


def _common(a: Run, b: Run) -> float:
    """Volume that two runs have in common, by sections and a grid of points in each."""
    import numpy as np

    first = max(a.stations[0], b.stations[0])
    last = min(a.stations[-1], b.stations[-1])
    if first >= last:
        return 0.0
    gap = (last - first) / _SECTIONS
    areas = [_area(*a.at(x), *b.at(x)) for x in first + gap * (np.arange(_SECTIONS) + 0.5)]
    return float(gap * sum(areas))


def _area(ya: Floats, za: Floats, yb: Floats, zb: Floats) -> float:
    """Area common to two polygons."""
    import numpy as np

    low_y, high_y = max(ya.min(), yb.min()), min(ya.max(), yb.max())
    low_z, high_z = max(za.min(), zb.min()), min(za.max(), zb.max())
    if low_y >= high_y or low_z >= high_z:
        return 0.0
    steps = (np.arange(_GRID) + 0.5) / _GRID
    y, z = np.meshgrid(low_y + (high_y - low_y) * steps, low_z + (high_z - low_z) * steps)
    both = _inside(y.ravel(), z.ravel(), ya, za) & _inside(y.ravel(), z.ravel(), yb, zb)
    return float(both.mean() * (high_y - low_y) * (high_z - low_z))


def _inside(y: Floats, z: Floats, corner_y: Floats, corner_z: Floats) -> NDArray[np.bool_]:
    """Whether points lie in a polygon: edges that a ray to starboard crosses are odd in number."""
    import numpy as np

    y2, z2 = np.roll(corner_y, -1), np.roll(corner_z, -1)
    spans = (corner_z > z[:, None]) != (z2 > z[:, None])
    rise = np.where(z2 == corner_z, 1.0, z2 - corner_z)
    at = corner_y + (z[:, None] - corner_z) * (y2 - corner_y) / rise
    odd: NDArray[np.bool_] = (spans & (at > y[:, None])).sum(axis=1) % 2 == 1
    return odd
