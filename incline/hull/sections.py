"""Sections cut at an inclined waterline: areas and moments by Green's theorem.

With u the height of a point above the waterline, measured parallel to z, a section's immersed part
is where u < 0. Integrals of u dy along its boundary give area and moments; the waterline itself,
where u = 0, adds nothing, so that only the clipped edges are summed and nothing needs sorting.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    import numpy as np
    from numpy.typing import NDArray

    Floats = NDArray[np.float64]

__all__ = ["Immersed", "cut"]


@dataclass(frozen=True, slots=True, eq=False)
class Immersed:
    """Integrals over the immersed part of each section, and along its waterline.

    ``area`` [m2]; ``about_y``, ``about_u`` [m3] are the integrals of y and of u; ``breadth`` [m],
    ``breadth_1`` [m2] and ``breadth_2`` [m3] those of 1, y and y^2 along the waterline.
    """

    area: Floats
    about_y: Floats
    about_u: Floats
    breadth: Floats
    breadth_1: Floats
    breadth_2: Floats


def cut(y: Floats, u: Floats) -> Immersed:
    """Integrals for sections of corners (..., P), closed from the last to the first.

    ``y`` [m] to starboard, ``u`` [m] above the waterline; corners run from the port deck edge down
    to the keel and up to the starboard deck edge. Exact for straight edges.
    """
    import numpy as np

    y1, y2 = np.broadcast_to(y, u.shape), np.roll(y, -1, axis=-1)
    u2 = np.roll(u, -1, axis=-1)
    wet1, wet2 = u < 0.0, u2 < 0.0
    rise = u - u2
    crosses = wet1 != wet2
    share = np.divide(u, rise, out=np.zeros_like(u), where=crosses)
    at = y1 + share * (y2 - y1)  # where the edge meets the waterline
    a, b = np.where(wet1, y1, at), np.where(wet2, y2, at)
    deep1, deep2 = np.minimum(u, 0.0), np.minimum(u2, 0.0)
    step = b - a
    both = deep1 + deep2
    # Wet to dry is the starboard end of a stretch of waterline, dry to wet its port end.
    end = at * (wet1.astype(float) - wet2)
    square = end * at
    return Immersed(
        area=-0.5 * (both * step).sum(axis=-1),
        about_y=-((both * (a + b) + deep1 * a + deep2 * b) * step).sum(axis=-1) / 6.0,
        about_u=-((both * both - deep1 * deep2) * step).sum(axis=-1) / 6.0,
        breadth=end.sum(axis=-1),
        breadth_1=0.5 * square.sum(axis=-1),
        breadth_2=(square * at).sum(axis=-1) / 3.0,
    )
