"""Straight lines through readings: the closed form that broadcasts, and the fit of record."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING, Any

if TYPE_CHECKING:
    import numpy as np
    from numpy.typing import NDArray

    Floats = NDArray[np.float64]

__all__ = ["GroupedLine", "SlopeForm", "fit_grouped_line", "slope_form"]


@dataclass(frozen=True, slots=True, kw_only=True)
class GroupedLine:
    """Least-squares line with one slope for all groups and an intercept for each.

    ``u_slope`` and ``sd`` are None without degrees of freedom. ``intercepts`` follow the group
    numbers; ``r_squared`` is taken about the mean.
    """

    slope: float
    u_slope: float | None
    intercepts: tuple[float, ...]
    fitted: tuple[float, ...]
    sd: float | None
    dof: int
    r_squared: float | None


@dataclass(frozen=True, slots=True, eq=False)
class SlopeForm:
    """Least-squares slope common to all devices as a closed form in moments and lengths.

    With E the incidence of readings on shifts (n, R), C the matrix that takes out each device's
    weighted mean, and v the deflections: ``pull`` (n, J) = E C v by device, ``spread`` (n, n) =
    E C E'. For moments M by shift and lengths l by device,

        slope = sum_j (M pull)_j / l_j  /  (M spread M)
    """

    pull: Floats
    spread: Floats

    def slope(self, moments: Floats, lengths: Floats) -> Floats:
        """Slope [1/(t m)]; moments (..., n) [t m] and lengths (..., J) [m] broadcast."""
        found: Floats = ((moments @ self.pull) / lengths).sum(axis=-1) / (
            (moments @ self.spread) * moments
        ).sum(axis=-1)
        return found


def slope_form(
    shift: NDArray[np.intp],
    device: NDArray[np.intp],
    values: Floats,
    shifts: int,
    weight: Floats | None = None,
) -> SlopeForm:
    """The closed form for readings ``values`` (R,): deflections [m], or tangents for a length of 1.

    ``shift`` and ``device`` (R,) are indices from 0, ``shifts`` the number of shifts; ``weight``
    (R,) are relative weights, equal when None.
    """
    import numpy as np

    w = np.ones(len(values)) if weight is None else weight
    at_shift = (np.arange(shifts)[:, None] == shift).astype(float)
    by_device = (device[:, None] == np.arange(device.max() + 1)).astype(float)
    weighted = w[:, None] * by_device
    centring = np.diag(w) - (weighted / weighted.sum(axis=0)) @ weighted.T
    return SlopeForm(
        pull=at_shift @ centring @ (values[:, None] * by_device),
        spread=at_shift @ centring @ at_shift.T,
    )


def fit_grouped_line(
    x: Floats, y: Floats, group: NDArray[np.intp], weight: Floats | None = None
) -> GroupedLine:
    """Least squares by statsmodels; x, y, group, weight are (n,), groups numbered from 0.

    ``weight`` are relative weights with a mean of one; ``sd`` is that of a reading of weight one.
    """
    import numpy as np
    from statsmodels.regression.linear_model import WLS

    scale = float(np.abs(x).max())  # a design of order one keeps the pseudo-inverse exact
    member = (group[:, None] == np.arange(group.max() + 1)).astype(float)
    weights = np.ones(len(x)) if weight is None else weight
    fit: Any = WLS(y, np.column_stack([x / scale, member]), weights=weights).fit()
    dof = round(float(fit.df_resid))
    about_mean = float(((y - y.mean()) ** 2).sum())
    return GroupedLine(
        slope=float(fit.params[0]) / scale,
        u_slope=float(fit.bse[0]) / scale if dof > 0 else None,
        intercepts=tuple(float(p) for p in fit.params[1:]),
        fitted=tuple(float(f) for f in fit.fittedvalues),
        sd=float(np.sqrt(fit.ssr / dof)) if dof > 0 else None,
        dof=dof,
        r_squared=1.0 - float(fit.ssr) / about_mean if about_mean > 0.0 else None,
    )
