"""First-order propagation: sensitivities, covariance, budgets (JCGM 100:2008)."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

from incline.correlation import correlated
from incline.result import Budget, BudgetLine, Estimate

if TYPE_CHECKING:
    from collections.abc import Callable, Sequence

    import numpy as np
    from numpy.typing import NDArray

    from incline.correlation import Block
    from incline.sources import Source

    Floats = NDArray[np.float64]
    Model = Callable[[Floats], Floats]

__all__ = [
    "COVERAGE", "budgets_of", "coverage_factor", "effective_dof", "probability_above",
    "sensitivities",
]  # fmt: skip

COVERAGE = 0.95
_MANY = 1e6  # degrees of freedom that differ from infinitely many in nothing
_STEP = 0.1
"""Share of a standard uncertainty by which an input is moved for a central difference: small
against the curvature of the chain, large against its rounding."""


def sensitivities(model: Model, sources: Sequence[Source]) -> Floats:
    """Change of each result with each input, (result, source), by central differences.

    ``model`` takes deviations (n, draws) from the estimates and gives results (m, draws); a result
    that cannot be found is NaN.
    """
    import numpy as np

    steps = np.array([_STEP * s.u for s in sources])
    found = model(np.concatenate([np.diag(steps), -np.diag(steps)], axis=1))
    count = len(sources)
    slopes: Floats = (found[:, :count] - found[:, count:]) / (2.0 * steps)
    return slopes


def budgets_of(
    model: Model,
    keys: Sequence[str],
    sources: Sequence[Source],
    blocks: Sequence[Block],
    coverage: float = COVERAGE,
    nominal: Sequence[float] | None = None,
) -> tuple[tuple[Budget, ...], Floats]:
    """Budgets of all results of a model, named by ``keys``, and their covariance matrix.

    ``nominal`` are the results at the estimates, where they are known better than by the model.

    u^2 = c' U R U c with correlations R (JCGM 100, 5.2); degrees of freedom by Welch-Satterthwaite
    (G.4), sources of one pool counted together; U = k u with k from Student's t.
    """
    import numpy as np

    if nominal is None:
        nominal = [float(v) for v in model(np.zeros((len(sources), 1)))[:, 0]]
    slopes = sensitivities(model, sources)
    parts = slopes * np.array([s.u for s in sources])
    spread = correlated(parts, blocks)
    covariance: Floats = parts @ spread.T
    budgets = []
    for i, key in enumerate(keys):
        if math.isnan(nominal[i]):
            budgets.append(Budget(key=key, estimate=Estimate(value=None), lines=()))
            continue
        variance = float(covariance[i, i])
        lines = [
            BudgetLine(
                name=s.name, u=s.u, quantity=s.quantity, basis=s.basis, shape=s.shape, dof=s.dof,
                sensitivity=float(slopes[i, n]), part=float(parts[i, n]),
                share=float(parts[i, n] * spread[i, n]) / variance if variance > 0.0 else 0.0,
            )
            for n, s in enumerate(sources)
        ]  # fmt: skip
        lines.sort(key=lambda line: -round(line.share, 9))  # equal shares keep their order
        estimate = _estimate(float(nominal[i]), variance, parts[i], sources, coverage)
        budgets.append(Budget(key=key, estimate=estimate, lines=tuple(lines)))
    return tuple(budgets), covariance


def _estimate(
    value: float, variance: float, parts: Floats, sources: Sequence[Source], coverage: float
) -> Estimate:
    u = math.sqrt(max(variance, 0.0))
    pools: dict[str, list[float]] = {}
    dof: dict[str, float] = {}
    for part, source in zip(parts, sources, strict=True):
        if math.isfinite(source.dof):
            pool = source.pool or source.name
            pools.setdefault(pool, []).append(float(part) ** 2)
            dof[pool] = source.dof
    free = effective_dof(variance, [(math.fsum(v), dof[p]) for p, v in pools.items()])
    k = coverage_factor(free, coverage)
    return Estimate(value=value, u=u, U=k * u, k=k, dof=free if math.isfinite(free) else None)


def effective_dof(variance: float, parts: Sequence[tuple[float, float]]) -> float:
    """Welch-Satterthwaite: variance^2 / sum(part variance^2 / dof); infinite from a million on."""
    fourth = math.fsum(v**2 / dof for v, dof in parts)
    return variance**2 / fourth if fourth * _MANY > variance**2 else math.inf


def coverage_factor(dof: float, coverage: float = COVERAGE) -> float:
    """Two-sided factor of Student's t, degrees of freedom cut to a whole number (G.4.1)."""
    from scipy.special import ndtri, stdtrit

    point = 0.5 + coverage / 2.0
    if not math.isfinite(dof):
        return float(ndtri(point))
    return float(stdtrit(max(math.floor(dof), 1), point))


def probability_above(estimate: Estimate, limit: float | None) -> float | None:
    """Probability that the quantity is above a limit, from its value, u and degrees of freedom."""
    from scipy.special import ndtr, stdtr

    if limit is None or estimate.value is None or not estimate.u:
        return None
    distance = (estimate.value - limit) / estimate.u
    return float(ndtr(distance) if estimate.dof is None else stdtr(estimate.dof, distance))
