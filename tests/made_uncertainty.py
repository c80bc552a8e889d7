"""Uncertainty of the made trial: sensitivities and correlations set by hand, the sums by formula."""

import math
from itertools import pairwise

from incline.defaults import LABEL
from incline.result import (
    Budget,
    BudgetLine,
    Estimate,
    Simulated,
    Simulation,
    SlopeUncertainty,
)
from incline.sources import SEEN, STATED
from incline.units import DENSITY, FRACTION, LENGTH, MASS, MOMENT

KEYS = ("displacement", "vcg", "lcg", "tcg", "gm_fluid")
OWN = "assumed: the trial's own"
WALL = "estimated as for a wall-sided hull"
INF = math.inf
INPUTS = (
    ("hydrostatic table, KM", 0.005, LENGTH, LABEL, "normal", INF, (0.0, 1.05, 0.0, 0.0, 0.0)),
    ("hydrostatic table, volume", 0.002, FRACTION, STATED, "rectangular", INF, (195.0, 1.1, 0.4, -0.02, -1.05)),
    ("hydrostatic table, LCB", 0.010, LENGTH, LABEL, "normal", INF, (0.0, 0.0, 1.05, 0.0, 0.0)),
    ("draft aft, port", 0.0098, LENGTH, SEEN, "t", 2.0, (32.0, -0.14, -0.45, -0.03, -0.11)),
    ("draft forward, starboard", 0.0098, LENGTH, SEEN, "t", 2.0, (30.0, -0.12, 0.48, 0.03, -0.10)),
    ("slope of heel against moment, scatter of readings", 6.0e-6, None, SEEN, "t", 13.8, (0.0, 215.0, 0.0, 0.0, -215.0)),
    ("curvature that a straight line leaves out", 4.0e-6, None, WALL, "normal", INF, (0.0, 215.0, 0.0, 0.0, -215.0)),
    ("density of the water, hydrometer", 0.0003, DENSITY, LABEL, "normal", INF, (191.0, -0.6, 0.0, 0.0, -1.0)),
    ("test weight A, mass", 0.0100, MASS, STATED, "normal", INF, (-1.0, 0.25, 0.0, 0.01, 0.26)),
    ("test weight B, mass", 0.0100, MASS, STATED, "normal", INF, (-1.0, -0.08, 0.0, 0.01, 0.26)),
    ("tank Fuel, port, mass", 0.0177, MASS, OWN, "normal", INF, (-1.0, 0.016, 0.03, 0.0095, 0.0)),
    ("tank Fuel, port, free-surface moment", 0.0655, MOMENT, LABEL, "normal", INF, (0.0, -0.0053, 0.0, 0.0, 0.0)),
    ("person M. Reader <aft>, y", 0.200, LENGTH, LABEL, "normal", INF, (0.0, 0.0, 0.0, -0.0004, 0.0)),
    ("item Anchor & cable, mass", 0.0188, MASS, LABEL, "normal", INF, (1.0, 0.002, 0.06, 0.0015, 0.0)),
    *((f"item number {n}, height", 0.050, LENGTH, LABEL, "normal", INF, (0.0, 0.0001 * n, 0.0, 0.0, 0.0)) for n in range(10)),
)  # fmt: skip
"""Name, u, quantity, basis, shape, dof, sensitivities in the order of the keys; inside units."""

_JOINED = {
    ("test weight A, mass", "test weight B, mass"): 0.9,
    ("draft aft, port", "draft forward, starboard"): 0.25,
}
_FREEDOM = {
    "displacement": (2.05, 31.0), "vcg": (2.1, 18.4), "lcg": (2.02, 44.0), "tcg": (1.96, None),
    "gm_fluid": (2.09, 19.2),
}  # fmt: skip


def _parts(i):
    return [u * c[i] for _, u, *_, c in INPUTS]


def _spread(parts):
    """Correlation matrix times parts."""
    names = [row[0] for row in INPUTS]
    result = list(parts)
    for (a, b), r in _JOINED.items():
        i, j = names.index(a), names.index(b)
        result[i] += r * parts[j]
        result[j] += r * parts[i]
    return result


def budgets(values):
    """Budgets of the five values in the order of the keys; None where there is no value."""
    found = []
    for i, (key, value) in enumerate(zip(KEYS, values, strict=True)):
        if value is None:
            found.append(Budget(key=key, estimate=Estimate(value=None), lines=()))
            continue
        parts = _parts(i)
        spread = _spread(parts)
        variance = sum(p * s for p, s in zip(parts, spread, strict=True))
        lines = [
            BudgetLine(
                name=name, u=u, quantity=quantity, basis=basis, shape=shape, dof=dof,
                sensitivity=c[i], part=p, share=p * s / variance,
            )
            for (name, u, quantity, basis, shape, dof, c), p, s in zip(INPUTS, parts, spread, strict=True)
        ]  # fmt: skip
        u, (k, free) = math.sqrt(variance), _FREEDOM[key]
        estimate = Estimate(value=value, u=u, U=k * u, k=k, dof=free)
        lines.sort(key=lambda line: -line.share)
        found.append(Budget(key=key, estimate=estimate, lines=tuple(lines)))
    return tuple(found)


def covariance():
    """4 x 4 over displacement, KG, LCG, TCG."""
    four = [_parts(i) for i in range(4)]
    return tuple(
        tuple(sum(p * s for p, s in zip(a, _spread(b), strict=True)) for b in four) for a in four
    )


SLOPE = SlopeUncertainty(
    u=6.0e-6, dof=13.8, ship=4.4e-6, device=5.5e-6, reading=2.9e-6, lengths_seen=True, reason=""
)
NO_SLOPE = SlopeUncertainty(
    u=None, dof=0.0, ship=0.0, device=0.0, reading=0.0, lengths_seen=False,
    reason="one device: an error of its length cannot show",
)  # fmt: skip
DRAWS, SEED = 40_000, 104_961


def simulation(some, above):
    """A run whose draws of KG are normal; only the interval of TCG does not agree."""
    results = tuple(
        Simulated(
            key=b.key, mean=b.estimate.value, u=1.02 * b.estimate.u,
            symmetric=(b.estimate.value - 2.06 * b.estimate.u, b.estimate.value + 2.04 * b.estimate.u),
            shortest=(b.estimate.value - 2.05 * b.estimate.u, b.estimate.value + 2.03 * b.estimate.u),
            tolerance=0.05 * b.estimate.u, agrees=b.key != "tcg",
        )
        for b in some
    )  # fmt: skip
    kg = some[1].estimate
    edges = tuple(kg.value + kg.u * (-4.5 + 0.225 * i) for i in range(41))

    def below(x):
        return 0.5 * math.erfc((kg.value - x) / (1.02 * kg.u * math.sqrt(2.0)))

    counts = tuple(round(DRAWS * (below(b) - below(a))) for a, b in pairwise(edges))
    return Simulation(
        draws=DRAWS, seed=SEED, settled=True, results=results, covariance=covariance(),
        kg_above_limit=above, kg_edges=edges, kg_counts=counts,
    )  # fmt: skip
