"""The waterline through the draft readings, by least squares."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

from incline.errors import Defect, FieldDataError, Where
from incline.result import DraftResidual, Waterline

if TYPE_CHECKING:
    from collections.abc import Sequence

    import numpy as np
    from numpy.typing import NDArray

    from incline.record import DraftReading

    Floats = NDArray[np.float64]

__all__ = ["WaterlineFit", "describe_waterline", "plan_waterline"]

_APART = 0.01
"""Two marks count as different places along the length when farther apart than this share of it."""


@dataclass(frozen=True, slots=True, eq=False)
class WaterlineFit:
    """The linear map from draft readings to waterline parameters.

    ``solve`` is (4, n): mean of the drafts at the perpendiculars [m], tau = trim over length,
    deflection amidships [m], tangent of list. A parameter that the readings cannot tell has a row
    of zeros and its flag is False. ``design`` is (n, 4).
    """

    solve: Floats
    design: Floats
    has_deflection: bool
    has_list: bool

    @property
    def unknowns(self) -> int:
        """Number of fitted parameters."""
        return 2 + self.has_deflection + self.has_list


def plan_waterline(drafts: Sequence[DraftReading], lpp: float) -> WaterlineFit:
    """Decide what the draft readings can tell, and how.

    T(x, y) = mean - tau (x - L/2) + deflection (1 - (2x/L - 1)^2) + list y. Deflection needs three
    places along the length, list needs both sides; either is left out when there would be fewer
    readings than unknowns. Raises FieldDataError with fewer than two places along the length.
    """
    import numpy as np

    x = np.array([d.x for d in drafts])
    y = np.array([d.y for d in drafts])
    places = int((np.diff(np.sort(x)) > _APART * lpp).sum()) + 1
    if places < 2:
        raise FieldDataError(
            [
                Defect(
                    Where("drafts.csv"),
                    "drafts-too-few",
                    f"drafts at {places} place along the length",
                    "drafts at two places at least, to tell the trim",
                )
            ]
        )
    design = np.column_stack([np.ones(len(x)), lpp / 2.0 - x, 1.0 - (2.0 * x / lpp - 1.0) ** 2, y])
    use = [True, True, False, False]
    for column, wanted in ((3, bool(y.min() < 0.0 < y.max())), (2, places >= 3)):
        trial = [*use]
        trial[column] = wanted
        enough = sum(trial) <= len(x) and np.linalg.matrix_rank(design[:, trial]) == sum(trial)
        use[column] = wanted and bool(enough)
    solve = np.zeros((4, len(x)))
    solve[use] = np.linalg.pinv(design[:, use])
    return WaterlineFit(solve, design, use[2], use[3])


def describe_waterline(fit: WaterlineFit, drafts: Sequence[DraftReading], lpp: float) -> Waterline:
    """The fitted waterline with its residuals.

    A reading is flagged when its externally studentised residual passes the two-sided 5 % point
    shared among the readings (Bonferroni).
    """
    import numpy as np
    from scipy.special import stdtrit

    seen = np.array([d.draft for d in drafts])
    mean, tau, deflection, list_tan = (float(v) for v in fit.solve @ seen)
    fitted = fit.design @ (fit.solve @ seen)
    residual = seen - fitted
    dof = len(seen) - fit.unknowns
    square = float((residual**2).sum())
    sd = math.sqrt(square / dof) if dof > 0 else None
    room = 1.0 - np.einsum("ij,ji->i", fit.design, fit.solve)
    limit = float(stdtrit(dof - 1, 1.0 - 0.025 / len(seen))) if dof > 1 else math.inf
    rows = []
    for d, line, miss, free in zip(drafts, fitted, residual, room, strict=True):
        student = None
        # Below a micron the residuals are rounding, not readings; no room means no residual.
        if sd is not None and dof > 1 and sd > 1e-6 and free > 1e-9:
            rest = max(square - miss**2 / free, 1e-12 * square) / (dof - 1)
            student = float(miss / math.sqrt(rest * free))
        rows.append(
            DraftResidual(
                x=d.x,
                side=d.side,
                draft=d.draft,
                fitted=float(line),
                residual=float(miss),
                studentised=student,
                flagged=student is not None and abs(student) > limit,
            )
        )
    return Waterline(
        draft_ap=mean + tau * lpp / 2.0,
        draft_fp=mean - tau * lpp / 2.0,
        draft_mid=mean + deflection,
        trim=tau * lpp,
        tau=tau,
        deflection=deflection if fit.has_deflection else None,
        list_tan=list_tan if fit.has_list else None,
        residuals=tuple(rows),
        sd=sd,
        dof=dof,
    )
