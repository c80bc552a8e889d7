"""What the scatter of the readings says about the common slope.

Readings that share a shift share the ship's own unsteadiness, and readings of one device share the
error of its length. The scatter is therefore split in three: the ship (points common to all devices
off the line), the devices (each with a slope of its own) and the single reading.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

from incline.result import SlopeUncertainty

if TYPE_CHECKING:
    import numpy as np
    from numpy.typing import NDArray

    from incline.observations import Observations

    Floats = NDArray[np.float64]

__all__ = ["SlopeDesign", "SlopeScatter", "slope_design", "slope_uncertainty"]


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class SlopeScatter:
    """Variance of the slope [1/(t m)^2], degrees of freedom, and mean squares of each part.

    Arrays broadcast over leading axes of readings. ``ship``, ``device`` and ``reading`` are shares
    of the variance by their own mean square; a part that cannot be told is zero.
    """

    variance: Floats
    dof: Floats
    ship: Floats
    device: Floats
    reading: Floats


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class SlopeDesign:
    """Quadratic forms for one layout of moments, shifts and devices.

    ``ship``, ``device``, ``reading`` (R, R) are the parts of the residual sum of squares, with
    degrees of freedom ``freedom`` and coefficients ``share`` of their mean squares in the variance
    of the slope; ``least`` is the coefficient that each mean square would have alone. ``reason``
    says what this layout cannot tell.
    """

    ship: Floats
    device: Floats
    reading: Floats
    freedom: tuple[int, int, int]
    share: tuple[float, float, float]
    least: tuple[float, float, float]
    reason: str

    def scatter(self, tangents: Floats) -> SlopeScatter:
        """Variance of the slope from tangents (..., R).

        With mean squares for ship, device and reading, the variance is share . mean squares, but
        never less than any one of them alone asks for; degrees of freedom by Satterthwaite.
        """
        import numpy as np

        forms = (self.ship, self.device, self.reading)
        mean = [
            np.einsum("...i,ij,...j->...", tangents, form, tangents) / max(free, 1)
            for form, free in zip(forms, self.freedom, strict=True)
        ]
        terms = [a * m for a, m in zip(self.share, mean, strict=True)]
        total = terms[0] + terms[1] + terms[2]
        alone = [a * m for a, m in zip(self.least, mean, strict=True)]
        variance = np.maximum.reduce([total, *alone])
        spread = sum(t**2 / free for t, free in zip(terms, self.freedom, strict=True) if free > 0)
        with np.errstate(invalid="ignore", divide="ignore"):
            dof = total**2 / spread
        for one, free in zip(alone, self.freedom, strict=True):
            if free > 0:
                dof = np.where(variance == one, free, dof)
        return SlopeScatter(
            variance=variance, dof=dof, ship=alone[0], device=alone[1], reading=alone[2]
        )


def slope_design(
    moments: Floats,
    shift: NDArray[np.intp],
    device: NDArray[np.intp],
    weight: Floats | None = None,
    *,
    lengths_known: bool = False,
) -> SlopeDesign:
    """Lay out the decomposition for moments (R,) [t m] at readings with a shift and a device each.

    The balanced case is the two-way split: with n shifts, J devices and S the sum of squared
    centred moments, var(b) = (MS_ship + MS_device - MS_reading) / (J S), never below any of the
    three alone. Unbalanced trials use the same three parts as fitted constants (each adjusted for
    the other), with coefficients that equate expected mean squares. With ``lengths_known`` the
    device part is left out: the stated uncertainty of the lengths stands for it.
    """
    import numpy as np

    w = np.ones(len(moments)) if weight is None else weight / weight.mean()
    root = np.sqrt(w)[:, None]
    x = moments / np.abs(moments).max()
    by_device = (device[:, None] == np.unique(device)).astype(float)
    by_shift = (shift[:, None] == np.unique(shift)).astype(float)
    fixed = root * np.column_stack([x, by_device])
    ship, slopes = root * by_shift, root * (x[:, None] * by_device)
    everything = _onto(np.column_stack([fixed, ship, slopes]))
    without_ship = _onto(np.column_stack([fixed, slopes]))
    without_slopes = _onto(np.column_stack([fixed, ship]))
    q_ship, q_device = everything - without_ship, everything - without_slopes
    q_reading = np.eye(len(x)) - everything
    free = [round(float(np.trace(q))) for q in (q_ship, q_device, q_reading)]
    c = np.linalg.pinv(fixed)[0]  # slope = c . (root y)
    reading_alone = float(c @ c)
    reasons = []
    if free[1] == 0:
        one = len(np.unique(device)) == 1
        reasons.append(
            "one device: an error of its length cannot show"
            if one
            else "the devices share too few shifts for an error of a length to show"
        )
    if free[0] == 0 or free[2] == 0:
        q_reading, free[2] = np.eye(len(x)) - without_ship, len(x) - round(np.trace(without_ship))
        q_ship, free[0] = np.zeros_like(q_ship), 0
        reasons.append("ship and reading scatter cannot be told apart")
    a_ship = _coefficient(c, ship, q_ship, free[0])
    a_device = 0.0 if lengths_known else _coefficient(c, slopes, q_device, free[1])
    scale = np.abs(moments).max() ** 2
    share = (a_ship, a_device, reading_alone - a_ship - a_device)
    least = (a_ship, a_device, reading_alone)
    forms = [root * q * root.T for q in (q_ship, q_device, q_reading)]
    return SlopeDesign(
        ship=forms[0],
        device=forms[1],
        reading=forms[2],
        freedom=(free[0], free[1] if a_device else 0, free[2]),
        share=(share[0] / scale, share[1] / scale, share[2] / scale),
        least=(least[0] / scale, least[1] / scale, least[2] / scale),
        reason="; ".join(reasons),
    )


def _onto(columns: Floats) -> Floats:
    """Orthogonal projection onto the columns."""
    import numpy as np

    u, s, _ = np.linalg.svd(columns, full_matrices=False)
    basis = u[:, s > 1e-9 * s[0]]
    projection: Floats = basis @ basis.T
    return projection


def _coefficient(c: Floats, effect: Floats, form: Floats, free: int) -> float:
    """Weight of an effect's mean square in the variance of the slope.

    The variance that the effect carries into c y, per unit of what it adds to its mean square.
    """
    import numpy as np

    if free == 0:
        return 0.0
    per_square = float(np.trace(effect.T @ form @ effect)) / free
    return float(((c @ effect) ** 2).sum()) / per_square


def slope_uncertainty(seen: Observations, moments: Floats) -> SlopeUncertainty:
    """Standard uncertainty of the common slope from the scatter of a trial's readings.

    ``moments`` (R,) [t m] at the readings that count. Lengths count as known when every device
    states its own uncertainty; then the stated figure stands for their errors.
    """
    known = len(seen.devices) == 1 or all(
        "length" in d.stated or "scale" in d.stated for d in seen.devices
    )
    design = slope_design(moments, seen.shift, seen.device, seen.weight, lengths_known=known)
    found = design.scatter(seen.tangents)
    dof, variance = float(found.dof), max(float(found.variance), 0.0)  # rounding of nothing
    free = dof > 0.0 and math.isfinite(dof)
    return SlopeUncertainty(
        u=math.sqrt(variance) if free else None,
        dof=dof if free else 0.0,
        ship=math.sqrt(max(float(found.ship), 0.0)),
        device=math.sqrt(max(float(found.device), 0.0)),
        reading=math.sqrt(max(float(found.reading), 0.0)),
        lengths_seen=not known and design.freedom[1] > 0,
        reason=design.reason,
    )
