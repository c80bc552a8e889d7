"""N(t) = y_B + z_B t, the lever of buoyancy about the origin: what a method puts in its place.

In equilibrium with tangent of heel t it equals (KG + H / D) t + TCG + M / D plus what liquids add:
M and H are the test weights' transverse and vertical moments, D the displacement.
"""

from __future__ import annotations

from typing import TYPE_CHECKING, Protocol

from incline.hull import lever_slope, pose_of, settle

if TYPE_CHECKING:
    import numpy as np
    from numpy.typing import NDArray

    from incline.buoyancy import Condition
    from incline.hull import Displaced, Hull, Pose

    Floats = NDArray[np.float64]

__all__ = ["Curve", "HeeledHull", "Lever", "WallSided"]


class Curve(Protocol):
    """N and dN/dt (..., n) [m] at tangents of heel (..., n), KG ``vcg`` (...) [m]."""

    def __call__(self, tangent: Floats, vcg: Floats) -> tuple[Floats, Floats]:
        """Levers and their slopes; the last axis counts shifts."""
        ...


class Lever(Protocol):
    """N for ships, broadcasting over draws; levers are in metres."""

    def start(self, ship: Condition) -> Floats:
        """N at the list with the test weights at their start."""
        ...

    def curve(self, ship: Condition) -> Curve:
        """N over heel at the displacement and trimming moment of a ship."""
        ...


class WallSided:
    """KM t + BM t^3 / 2: exact while the sides at the waterline stay parallel to one another."""

    def start(self, ship: Condition) -> Floats:
        """N at the list."""
        b, t = ship.buoyancy, ship.start
        return b.yb + (b.kb + b.bmt) * t + 0.5 * b.bmt * t**3

    def curve(self, ship: Condition) -> Curve:
        """N and its slope KM + 3/2 BM t^2."""
        km, bmt = (ship.buoyancy.kb + ship.buoyancy.bmt)[..., None], ship.buoyancy.bmt[..., None]
        across = ship.buoyancy.yb[..., None]

        def at(tangent: Floats, vcg: Floats) -> tuple[Floats, Floats]:  # noqa: ARG001
            square = tangent * tangent
            return across + tangent * (km + 0.5 * bmt * square), km + 1.5 * bmt * square

        return at


class HeeledHull:
    """N integrated from the hull at each heel.

    ``trimming`` and ``lifting`` (n,) [t m] are the longitudinal and vertical moments of the test
    weights about their start.
    """

    def __init__(self, hull: Hull, trimming: Floats, lifting: Floats) -> None:
        self.hull = hull
        self.trimming, self.lifting = trimming, lifting

    def start(self, ship: Condition) -> Floats:
        """N at the listed waterline itself."""
        return ship.buoyancy.y + ship.buoyancy.z * ship.start

    def curve(self, ship: Condition) -> Curve:
        """N and its slope, by integration."""

        def at(tangent: Floats, vcg: Floats) -> tuple[Floats, Floats]:
            pose, found = self.settled(tangent, ship, vcg)
            lever = found.y + found.z * tangent
            return lever, lever_slope(self.hull, pose, found, vcg[..., None])

        return at

    def settled(self, tangent: Floats, ship: Condition, vcg: Floats) -> tuple[Pose, Displaced]:
        """Waterlines (..., n) at the tangents, and what they cut off."""
        b = ship.buoyancy
        like = 0.0 * tangent
        lcg = b.x + ship.tau * (vcg - b.z)
        displacement = ship.displacement[..., None]
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
            vcg[..., None] + self.lifting / displacement + like,
            lcg[..., None] + self.trimming / displacement + like,
        )
