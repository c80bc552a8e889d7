"""The waterline at which a heeled hull floats: displacement kept, trim free."""

from __future__ import annotations

from typing import TYPE_CHECKING

if TYPE_CHECKING:
    import numpy as np
    from numpy.typing import NDArray

    from incline.hull.integrate import Displaced, Hull, Pose

    Floats = NDArray[np.float64]

__all__ = ["settle"]

_STEPS = 12
_SETTLED = 1e-10
"""Share of the volume, and of volume times length, below which a waterline counts as found."""


def settle(
    hull: Hull, pose: Pose, volume: Floats, vcg: Floats, lcg: Floats
) -> tuple[Pose, Displaced]:
    """Mean draft and trim at which the hull carries ``volume`` with G at ``lcg``, ``vcg``.

    Newton's method from ``pose``, whose heel and deflection are kept: the volume is that asked for,
    and x_B + tau (vcg - z_B) = lcg. Arrays of one shape; a pose that cannot be found is NaN.
    """
    import numpy as np

    half = hull.lpp / 2.0
    found = hull.displaced(pose)
    for _ in range(_STEPS):
        heavy = found.volume - volume
        ahead = found.of_x - lcg * volume + pose.tau * (vcg * volume - found.of_z)
        off = np.maximum(np.abs(heavy), np.abs(ahead) / hull.lpp) / volume
        if not np.any(off > _SETTLED):
            break
        # Derivatives by mean draft and by tau: the waterplane's own moments.
        by_mean, by_tau = found.area, half * found.area - found.area_x
        ahead_by_mean = found.area_x - pose.tau * found.area * pose.mean
        ahead_by_tau = half * found.area_x - found.area_xx + vcg * volume - found.of_z
        det = by_mean * ahead_by_tau - by_tau * ahead_by_mean
        pose = pose.moved(
            pose.mean - (heavy * ahead_by_tau - ahead * by_tau) / det,
            pose.tau - (ahead * by_mean - heavy * ahead_by_mean) / det,
        )
        found = hull.displaced(pose)
    return pose, found
