"""Monte Carlo through the same chain (JCGM 101:2008)."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

from incline.budget import COVERAGE
from incline.result import Simulated, Simulation

if TYPE_CHECKING:
    from collections.abc import Callable, Sequence

    import numpy as np
    from numpy.typing import NDArray

    from incline.budget import Model
    from incline.correlation import Block
    from incline.result import Budget, Estimate
    from incline.sources import Source

    Floats = NDArray[np.float64]

__all__ = [
    "draw", "numerical_tolerance", "seed_of", "shortest_interval", "simulate", "symmetric_interval",
]  # fmt: skip

BLOCK = 10_000
"""Draws in a block: the least that JCGM 101, 7.9.4, allows for 95 % intervals."""
MOST = 1_000_000
_DIGITS = 1
"""Significant digits of u that count as meaningful (JCGM 101, 7.9.2)."""
_FINER, _FINER_GM = 5.0, 2.0
"""The run itself is carried to a fifth of that tolerance, so that the comparison of clause 8 is not
decided by chance (8.2); to half of it for GM, which is no result of the lightship."""


def seed_of(digest: str) -> int:
    """Seed of the draws: the same trial gives the same run."""
    return int(digest[:12] or "0", 16)


def draw(
    sources: Sequence[Source], blocks: Sequence[Block], count: int, rng: np.random.Generator
) -> Floats:
    """Deviations of the inputs from their estimates, (n, count).

    Normal and rectangular by their standard uncertainty; scaled-and-shifted t where the scatter of
    the test itself gives it (JCGM 101, 6.4.9). Correlated sources are drawn as normal.
    """
    import numpy as np

    deviates = rng.standard_normal((len(sources), count))
    joined = {i for block in blocks for i in block.members}
    scales: dict[str, Floats] = {}
    for i, source in enumerate(sources):
        if i in joined:
            continue
        if source.shape == "rectangular":
            deviates[i] = rng.uniform(-math.sqrt(3.0), math.sqrt(3.0), count)
        elif source.shape == "t" and math.isfinite(source.dof):
            pool = source.pool or source.name
            if pool not in scales:  # one estimate of scatter serves the whole pool
                scales[pool] = np.sqrt(rng.chisquare(source.dof, count) / source.dof)
            deviates[i] /= scales[pool]
    for block in blocks:
        index = list(block.members)
        deviates[index] = block.root() @ deviates[index]
    deviates *= np.array([s.u for s in sources])[:, None]
    return deviates


def simulate(
    model: Model,
    sources: Sequence[Source],
    blocks: Sequence[Block],
    budgets: Sequence[Budget],
    *,
    seed: int,
    draws: int | None = None,
    kg_limit: float | None = None,
    progress: Callable[[float], None] | None = None,
) -> Simulation:
    """Draw until the figures settle (JCGM 101, 7.9), or exactly ``draws`` times.

    ``model`` as in `incline.budget`, ``budgets`` its first-order results in the same order.
    ``progress`` is told the share done, of the largest number of draws when it is not fixed.
    """
    import numpy as np

    rng = np.random.default_rng(seed)
    kept: list[Floats] = []
    heavy = [_heavy(b) for b in budgets]
    settling = _Settling(budgets, heavy)
    total, most = 0, draws or MOST
    settled = None if draws is not None else False
    while total < most:
        count = min(BLOCK, most - total)
        block = model(draw(sources, blocks, count, rng))
        kept.append(block)
        total += count
        if progress is not None:
            progress(total / most)
        if draws is None and settling.add(block):
            settled = True
            break
    values = np.concatenate(kept, axis=1)
    return _describe(values, budgets, seed=seed, settled=settled, kg_limit=kg_limit, heavy=heavy)


_HEAVY = 2.0
"""Degrees of freedom up to which Student's t has no standard deviation: its intervals count."""
_NOTHING = 1e-4
"""Share of a variance below which such an input does not count."""


def _heavy(budget: Budget) -> bool:
    """Whether a result has no standard deviation, for an input known by hardly any scatter."""
    return any(x.shape == "t" and x.dof <= _HEAVY and x.share > _NOTHING for x in budget.lines)


class _Settling:
    """Whether averages over blocks have settled to the numerical tolerance of every result.

    Of results with ``heavy`` tails only the ends of the intervals are asked to settle.
    """

    def __init__(self, budgets: Sequence[Budget], heavy: Sequence[bool]) -> None:
        self.first = [2 if h else 0 for h in heavy]
        self.tolerance = [
            None
            if b.estimate.u is None
            else numerical_tolerance(b.estimate.u, _DIGITS)
            / (_FINER_GM if b.key == "gm_fluid" else _FINER)
            for b in budgets
        ]
        self.seen: list[list[tuple[float, float, float, float]]] = []

    def add(self, block: Floats) -> bool:
        rows = []
        for values in block:
            low, high = symmetric_interval(values)
            rows.append((float(values.mean()), float(values.std(ddof=1)), low, high))
        self.seen.append(rows)
        return len(self.seen) >= 2 and self._settled()

    def _settled(self) -> bool:
        import numpy as np

        blocks = np.array(self.seen)  # block, result, figure
        spread = 2.0 * blocks.std(axis=0, ddof=1) / math.sqrt(len(blocks))
        return all(
            tolerance is None or bool(np.all(row[first:] < tolerance))
            for row, first, tolerance in zip(spread, self.first, self.tolerance, strict=True)
        )


def numerical_tolerance(u: float, digits: int) -> float:
    """Half a unit in the last of ``digits`` significant digits of u (JCGM 101, 7.9.2)."""
    if u <= 0.0:
        return math.inf
    power = math.floor(math.log10(u)) - digits + 1
    if round(u / 10.0**power) >= 10**digits:  # 0.0996 to two digits is 0.10
        power += 1
    return 0.5 * 10.0**power


def symmetric_interval(values: Floats, coverage: float = COVERAGE) -> tuple[float, float]:
    """Probabilistically symmetric coverage interval."""
    import numpy as np

    low, high = np.quantile(values, [(1.0 - coverage) / 2.0, (1.0 + coverage) / 2.0])
    return float(low), float(high)


def shortest_interval(values: Floats, coverage: float = COVERAGE) -> tuple[float, float]:
    """Shortest coverage interval (JCGM 101, 7.7)."""
    import numpy as np

    ordered = np.sort(values)
    inside = round(coverage * len(ordered))
    widths = ordered[inside:] - ordered[: len(ordered) - inside]
    at = int(np.argmin(widths))
    return float(ordered[at]), float(ordered[at + inside])


def _describe(
    values: Floats,
    budgets: Sequence[Budget],
    *,
    seed: int,
    settled: bool | None,
    kg_limit: float | None,
    heavy: Sequence[bool],
) -> Simulation:
    import numpy as np

    kg = values[[b.key for b in budgets].index("vcg")]
    low, high = np.quantile(kg, [0.001, 0.999])
    counts, edges = np.histogram(kg, bins=60, range=(low, high))
    covariance = np.atleast_2d(np.cov(values[:4]))
    for i, without in enumerate(heavy[:4]):
        if without:
            covariance[i] = covariance[:, i] = np.nan
    return Simulation(
        draws=values.shape[1],
        seed=seed,
        settled=settled,
        results=tuple(
            _simulated(budget.key, row, budget.estimate, heavy=without)
            for row, budget, without in zip(values, budgets, heavy, strict=True)
            if budget.estimate.value is not None
        ),
        covariance=tuple(
            tuple(None if math.isnan(c) else float(c) for c in row) for row in covariance
        ),
        kg_above_limit=None if kg_limit is None else float((kg > kg_limit).mean()),
        kg_edges=tuple(float(e) for e in edges),
        kg_counts=tuple(int(c) for c in counts),
    )


def _simulated(key: str, values: Floats, first_order: Estimate, *, heavy: bool) -> Simulated:
    """Figures of one result, and the verdict on the first-order interval (JCGM 101, 8.1)."""
    symmetric = symmetric_interval(values)
    # The tolerance is that of the first-order u, which the verdict is about.
    tolerance = numerical_tolerance(first_order.u or 0.0, _DIGITS)
    centre, expanded = first_order.value or 0.0, first_order.U or 0.0
    return Simulated(
        key=key,
        mean=None if heavy else float(values.mean()),
        u=None if heavy else float(values.std(ddof=1)),
        symmetric=symmetric,
        shortest=shortest_interval(values),
        tolerance=tolerance,
        agrees=abs(centre - expanded - symmetric[0]) <= tolerance
        and abs(centre + expanded - symmetric[1]) <= tolerance,
    )
