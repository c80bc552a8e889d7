"""The chain as a function of deviations of its inputs: what propagation and Monte Carlo work on."""

from __future__ import annotations

import dataclasses
from typing import TYPE_CHECKING

from incline.chain import Inputs, run

if TYPE_CHECKING:
    from collections.abc import Sequence

    import numpy as np
    from numpy.typing import NDArray

    from incline.chain import Plan, Yield
    from incline.sources import Source

    Floats = NDArray[np.float64]

__all__ = ["KEYS", "TrialModel", "draft_spread", "results_of", "surface_miss"]

KEYS = ("displacement", "vcg", "lcg", "tcg", "gm_fluid")
"""Names of the results, in the order in which the model gives them."""


@dataclasses.dataclass(frozen=True, slots=True, eq=False)
class TrialModel:
    """Results of a trial when its inputs deviate from their estimates.

    Called with deviations (n, draws), one row a source, it gives (5, draws): lightship
    displacement, KG, LCG, TCG, and GM with liquids free; NaN where the trial cannot give a result.
    """

    plan: Plan
    given: Inputs
    sources: Sequence[Source]

    def __call__(self, deviations: Floats) -> Floats:
        """Results (5, draws) for deviations (n, draws)."""
        import numpy as np

        found = results_of(run(self.plan, shifted(self.given, self.sources, deviations)))
        draws = deviations.shape[1]
        return np.stack([np.full(draws, np.nan) if r is None else r for r in found])


_FAR = 3.0
"""Standard uncertainties of the drafts over which a response surface is expanded."""


def draft_spread(plan: Plan, sources: Sequence[Source]) -> Floats:
    """Ranges (4,) of mean draft [m], tau, deflection [m] and list in which draws fall."""
    import numpy as np

    u = np.zeros(plan.waterline.solve.shape[1])
    for s in sources:
        if s.field == "drafts" and s.item is not None:
            u[s.item] = s.u
    # Drafts go together in part: between the sum of squares and the plain sum.
    moved = np.abs(plan.waterline.solve) * u
    spread: Floats = _FAR * np.maximum(np.sqrt((moved**2).sum(axis=1)), 0.5 * moved.sum(axis=1))
    return np.maximum(spread, [1e-3, 1e-5, 1e-4, 1e-5])


_PROBES = 10


def surface_miss(exact: TrialModel, near: TrialModel) -> tuple[float, ...]:
    """Largest difference in each result between a model and its response surface.

    At a few draws of all inputs together, as a Monte Carlo makes them.
    """
    import numpy as np

    rng = np.random.default_rng(20)
    u = np.array([s.u for s in exact.sources])
    away = u[:, None] * rng.standard_normal((len(u), _PROBES))
    return tuple(float(m) for m in np.abs(exact(away) - near(away)).max(axis=1))


def results_of(found: Yield) -> list[Floats | None]:
    """Lightship displacement, KG, LCG, TCG, and GM; None where the trial cannot give one."""
    return [
        found.light_displacement,
        found.light_vcg,
        found.light_lcg,
        found.light_tcg,
        found.gm_fluid,
    ]


def shifted(given: Inputs, sources: Sequence[Source], changes: Floats) -> Inputs:
    """Inputs with ``changes`` (n, draws) added, one row a source; a leading axis of draws appears.

    Arrays are laid out so that draws are contiguous in memory, which the chain's sums like.
    """
    import numpy as np

    fields: dict[str, list[tuple[int | None, Floats]]] = {}
    for source, change in zip(sources, changes, strict=True):
        fields.setdefault(source.field, []).append((source.item, change))
    moved: dict[str, Floats] = {}
    for name, rows in fields.items():
        nominal = getattr(given, name)
        if nominal.ndim == 0:
            moved[name] = nominal + sum(row for _, row in rows)
            continue
        array = np.empty((len(nominal), changes.shape[1]))
        array[:] = nominal[:, None]
        for item, row in rows:
            array[item] += row
        moved[name] = array.T
    return dataclasses.replace(given, **moved)
