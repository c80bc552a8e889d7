"""First-order propagation of the scatter of the test itself through the chain."""

from __future__ import annotations

import dataclasses
import math
from typing import TYPE_CHECKING

from incline.chain import run
from incline.result import Estimate

if TYPE_CHECKING:
    import numpy as np
    from numpy.typing import NDArray

    from incline.chain import Inputs, Plan, Yield

    Floats = NDArray[np.float64]

__all__ = ["Scatter", "propagate"]

_COVERAGE = 0.95


@dataclasses.dataclass(frozen=True, slots=True, kw_only=True)
class Scatter:
    """A standard uncertainty seen in the test's own scatter.

    ``field`` names an array of `Inputs`, ``item`` its place in it (None for a scalar). A standard
    uncertainty shared by several sources from one pooled scatter shares its ``dof`` by ``pool``.
    """

    field: str
    item: int | None
    u: float
    dof: float
    pool: str


def propagate(
    plan: Plan, given: Inputs, scatter: list[Scatter]
) -> tuple[list[Estimate], tuple[tuple[float | None, ...], ...]]:
    """Estimates of lightship displacement, KG, LCG, TCG and their covariance (JCGM 100, clause 5).

    Sensitivities are central differences of half a standard uncertainty through the chain.
    Degrees of freedom by Welch-Satterthwaite (JCGM 100, G.4), coverage 95 %. Without any
    scatter to go by every uncertainty stays None.
    """
    import numpy as np

    nominal = _results(run(plan, given))
    if not scatter:
        return [Estimate(value=v) for v in nominal], ((None,) * 4,) * 4
    columns = np.zeros((len(scatter), 4))
    for row, source in enumerate(scatter):
        if source.u > 0.0:
            up, down = (_results(run(plan, _moved(given, source, s))) for s in (0.5, -0.5))
            columns[row] = [
                math.nan if a is None or b is None else a - b for a, b in zip(up, down, strict=True)
            ]
    covariance = columns.T @ columns
    estimates = [_estimate(value, columns[:, i], scatter) for i, value in enumerate(nominal)]
    return estimates, tuple(
        tuple(None if math.isnan(c) else float(c) for c in row) for row in covariance
    )


def _results(found: Yield) -> list[float | None]:
    values = (found.light_displacement, found.light_vcg, found.light_lcg, found.light_tcg)
    return [None if v is None else float(v) for v in values]


def _moved(given: Inputs, source: Scatter, share: float) -> Inputs:
    array = getattr(given, source.field).copy()
    if source.item is None:
        array = array + share * source.u
    else:
        array[source.item] += share * source.u
    return dataclasses.replace(given, **{source.field: array})


def _estimate(value: float | None, parts: Floats, scatter: list[Scatter]) -> Estimate:
    from scipy.special import stdtrit

    if value is None:
        return Estimate(value=None)
    u = math.sqrt(float(parts @ parts))
    pools: dict[str, tuple[float, float]] = {}
    for part, source in zip(parts, scatter, strict=True):
        before = pools.get(source.pool, (0.0, source.dof))[0]
        pools[source.pool] = (before + float(part) ** 2, source.dof)
    fourth = sum(variance**2 / dof for variance, dof in pools.values())
    dof = u**4 / fourth if fourth > 0.0 else math.inf
    k = float(stdtrit(dof, 0.5 + _COVERAGE / 2.0)) if math.isfinite(dof) else 1.959963984540054
    return Estimate(value=value, u=u, U=k * u, k=k, dof=dof if math.isfinite(dof) else None)
