"""The liquid in a box tank across the ship, exact also where its surface meets bottom or top."""

from __future__ import annotations

import itertools
from collections.abc import Callable

from scipy import optimize


def liquid_centre(breadth: float, depth: float, level: float, t: float) -> tuple[float, float]:
    """How far the liquid's centre goes to starboard and up when the tank heels to tangent t.

    ``level`` is the liquid's depth upright. The surface is c + t y, and the liquid at y stands from
    the bottom to that height, no less than nothing and no more than the tank's depth.
    """
    if t == 0.0 or not 0.0 < level < depth:
        return 0.0, 0.0
    half = breadth / 2.0

    def over(c: float, weight: Callable[[float, float], float]) -> float:
        """Integral across the tank; Simpson's rule, for cubics between the corners."""
        corners = sorted(
            {-half, half, *(min(max(y, -half), half) for y in (-c / t, (depth - c) / t))}
        )

        def at(y: float) -> float:
            return weight(y, min(max(c + t * y, 0.0), depth))

        return sum(
            (b - a) / 6.0 * (at(a) + 4.0 * at((a + b) / 2.0) + at(b))
            for a, b in itertools.pairwise(corners)
        )

    area = breadth * level
    reach = half * abs(t)
    c = optimize.brentq(lambda c: over(c, lambda _, z: z) - area, -reach, depth + reach, xtol=1e-15)
    across = over(c, lambda y, z: y * z) / area
    up = over(c, lambda _, z: 0.5 * z * z) / area
    return across, up - level / 2.0
