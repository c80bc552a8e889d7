"""A hull as what carries the ship: the same answers as a hydrostatic table gives."""

from __future__ import annotations

from typing import TYPE_CHECKING

from incline.buoyancy import Buoyancy
from incline.hull.integrate import Pose

if TYPE_CHECKING:
    import numpy as np
    from numpy.typing import NDArray

    from incline.hull.integrate import Hull

    Floats = NDArray[np.float64]

__all__ = ["Integrated", "pose_of"]


class Integrated:
    """Hydrostatics integrated from the hull at the waterline itself."""

    def __init__(self, hull: Hull) -> None:
        self.hull = hull

    def buoyancy(
        self, mean: Floats, tau: Floats, deflection: Floats | None, list_tan: Floats | None
    ) -> Buoyancy:
        """As `incline.buoyancy.Afloat.buoyancy`; a list that is not known counts as none."""
        import numpy as np

        nothing = np.zeros_like(mean)
        pose = pose_of(mean, tau, deflection, list_tan)
        upright = self.hull.displaced(pose_of(mean, tau, deflection, None))
        listed = self.hull.displaced(pose) if np.any(pose.tangent) else upright
        return Buoyancy(
            volume=listed.volume,
            x=listed.x,
            y=listed.y,
            z=listed.z,
            yb=upright.y,
            kb=upright.z,
            bmt=upright.bmt,
            entry=mean,
            trim_volume=nothing,
            deflection_factor=nothing,
        )


def pose_of(mean: Floats, tau: Floats, deflection: Floats | None, tangent: Floats | None) -> Pose:
    """A waterline from what drafts tell; None counts as zero."""
    import numpy as np

    nothing = np.zeros_like(mean)
    return Pose(
        mean,
        tau,
        nothing if deflection is None else deflection + nothing,
        nothing if tangent is None else tangent + nothing,
    )
