"""The waterline at which a heeled hull floats: displacement kept, trim free."""

from __future__ import annotations

from typing import TYPE_CHECKING

if TYPE_CHECKING:
    import numpy as np
    from numpy.typing import NDArray

    from incline.hull.integrate import Displaced, Hull, Pose

    Floats = NDArray[np.float64]

__all__ = ["lever_slope", "settle"]

_STEPS = 12
_LOST = 1e-6
"""Last step of the mean draft, as a share of the length, above which no waterline was found."""
_SETTLED = 1e-10
"""Share of the volume, and of volume times length, below which a waterline counts as found."""


class _Rates:
    """Derivatives of the integrals by mean draft, tau and t: moments of the waterplane.

    Water of one density is taken, with a plane waterline: the deflection is left out, which costs
    Newton's method nothing and a slope of levers less than a hundred-thousandth.
    """

    def __init__(self, pose: Pose, w: Displaced, lpp: float, vcg: Floats) -> None:
        half, tau, t = lpp / 2.0, pose.tau, pose.tangent
        c = pose.mean + tau * half
        level = c * w.area - tau * w.area_x + t * w.area_y
        level_x = c * w.area_x - tau * w.area_xx + t * w.area_xy
        level_y = c * w.area_y - tau * w.area_xy + t * w.area_yy
        self.volume = (w.area, half * w.area - w.area_x, w.area_y)
        self.of_y = (w.area_y, half * w.area_y - w.area_xy, w.area_yy)
        self.of_z = (level, half * level - level_x, level_y)
        by_x = (w.area_x, half * w.area_x - w.area_xx, w.area_xy)
        below = vcg * w.volume - w.of_z
        trimming = [x - tau * z for x, z in zip(by_x, self.of_z, strict=True)]
        self.ahead = (trimming[0], trimming[1] + below, trimming[2])

    def back(self, heavy: Floats, ahead: Floats) -> tuple[Floats, Floats]:
        """Steps of mean draft and tau that take ``heavy`` and ``ahead`` away."""
        (a, b, _), (c, d, _) = self.volume, self.ahead
        det = a * d - b * c
        return (b * ahead - d * heavy) / det, (c * heavy - a * ahead) / det


def settle(
    hull: Hull, pose: Pose, volume: Floats, vcg: Floats, lcg: Floats
) -> tuple[Pose, Displaced]:
    """Mean draft and trim at which the hull carries ``volume`` with G at ``lcg``, ``vcg``.

    Newton's method from ``pose``, whose heel and deflection are kept: the volume is that asked for,
    and x_B + tau (vcg - z_B) = lcg. Arrays of one shape; a pose that cannot be found is NaN.
    """
    import numpy as np

    found = hull.displaced(pose)
    for _ in range(_STEPS):
        heavy = found.volume - volume
        ahead = found.of_x - lcg * volume + pose.tau * (vcg * volume - found.of_z)
        off = np.maximum(np.abs(heavy), np.abs(ahead) / hull.lpp) / volume
        if np.all(off <= _SETTLED):
            break
        mean, tau = _Rates(pose, found, hull.lpp, vcg).back(heavy, ahead)
        pose = pose.moved(pose.mean + mean, pose.tau + tau)
        found = hull.displaced(pose)
    else:  # a step that is still large, or none
        lost = ~(np.abs(mean) < _LOST * hull.lpp)
        pose = pose.moved(np.where(lost, np.nan, pose.mean), pose.tau)
        found = hull.displaced(pose)
    return pose, found


def lever_slope(hull: Hull, pose: Pose, found: Displaced, vcg: Floats) -> Floats:
    """dN/dt of N = y_B + z_B t at a settled pose, displacement kept and trim free [m]."""
    rates = _Rates(pose, found, hull.lpp, vcg)
    mean, tau = rates.back(rates.volume[2], rates.ahead[2])
    across = rates.of_y[2] + rates.of_y[0] * mean + rates.of_y[1] * tau
    up = rates.of_z[2] + rates.of_z[0] * mean + rates.of_z[1] * tau
    slope: Floats = found.z + (across + pose.tangent * up) / found.volume
    return slope
