"""N(t) = y_B + z_B t, the lever of buoyancy about the origin: what a method puts in its place.

In equilibrium with tangent of heel t it equals (KG + H / D) t + TCG + M / D plus what liquids add:
M and H are the test weights' transverse and vertical moments, D the displacement.
"""

from __future__ import annotations

from typing import TYPE_CHECKING, Protocol

from incline.hull import pose_of, settle

if TYPE_CHECKING:
    import numpy as np
    from numpy.typing import NDArray

    from incline.buoyancy import Condition
    from incline.hull import Displaced, Hull, Pose

    Floats = NDArray[np.float64]

__all__ = ["HeeledHull", "Lever", "WallSided"]


class Lever(Protocol):
    """N and its slope for a ship at tangents of heel.

    Both functions broadcast over draws; ``tangent`` has the shifts as its last axis, ``vcg`` [m]
    the shape of the ship's arrays. Levers are in metres.
    """

    def start(self, ship: Condition) -> Floats:
        """N at the list with the test weights at their start."""
        ...

    def at(self, tangent: Floats, ship: Condition, vcg: Floats) -> tuple[Floats, Floats]:
        """N and dN/dt (..., n) at displacement and trimming moment of the ship."""
        ...


class WallSided:
    """KM t + BM t^3 / 2: exact while the sides at the waterline stay parallel to one another."""

    def start(self, ship: Condition) -> Floats:
        """N at the list."""
        b, t = ship.buoyancy, ship.start
        return b.yb + (b.kb + b.bmt) * t + 0.5 * b.bmt * t**3

    def at(self, tangent: Floats, ship: Condition, vcg: Floats) -> tuple[Floats, Floats]:  # noqa: ARG002
        """N and its slope KM + 3/2 BM t^2."""
        km, bmt = (ship.buoyancy.kb + ship.buoyancy.bmt)[..., None], ship.buoyancy.bmt[..., None]
        square = tangent * tangent
        across = ship.buoyancy.yb[..., None]
        return across + tangent * (km + 0.5 * bmt * square), km + 1.5 * bmt * square


class HeeledHull:
    """N integrated from the hull at each heel.

    ``trimming`` (n,) [t m] are the longitudinal moments of the test weights about their start.
    """

    def __init__(self, hull: Hull, trimming: Floats) -> None:
        self.hull = hull
        self.trimming = trimming

    def start(self, ship: Condition) -> Floats:
        """N at the listed waterline itself."""
        return ship.buoyancy.y + ship.buoyancy.z * ship.start

    def at(self, tangent: Floats, ship: Condition, vcg: Floats) -> tuple[Floats, Floats]:
        """N, and its slope by the rule that B moves parallel to the waterplane.

        The slope is exact for a plane waterline at fixed trim; the change of trim is left out of
        it, which costs Newton's method nothing.
        """
        _, found = self.settled(tangent, ship, vcg)
        lever = found.y + found.z * tangent
        return lever, found.z + (1.0 + tangent**2) * found.bmt

    def settled(self, tangent: Floats, ship: Condition, vcg: Floats) -> tuple[Pose, Displaced]:
        """Waterlines (..., n) at the tangents, and what they cut off."""
        b = ship.buoyancy
        like = 0.0 * tangent
        lcg = b.x + ship.tau * (vcg - b.z)
        pose = pose_of(
            ship.mean[..., None] + like,
            ship.tau[..., None] + like,
            None if ship.deflection is None else ship.deflection[..., None],
            tangent,
        )
        return settle(
            self.hull,
            pose,
            b.volume[..., None] + like,
            vcg[..., None] + like,
            lcg[..., None] + self.trimming / ship.displacement[..., None] + like,
        )
