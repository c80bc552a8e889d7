"""One value from a device's readings at a shift: single, repeats, or successive swing extremes."""

from __future__ import annotations

import itertools
import math
import statistics
from typing import TYPE_CHECKING

from incline.result import ReducedReading

if TYPE_CHECKING:
    from incline.record import Reading

__all__ = ["alternates", "reduce_reading"]


def reduce_reading(reading: Reading) -> ReducedReading:
    """The rest value of a reading, in its own quantity, with its standard uncertainty.

    Repeats give their mean and s/sqrt(n). Five or more swing extremes are fitted with a decaying
    oscillation c + A (-q)^k; three or four are averaged as (e0 + 2 e1 + e2)/4, which removes the
    swing and, to first order, its decay. ``u`` is None where the readings cannot tell it.
    """
    values = reading.values
    if reading.kind == "swings" and len(values) >= 5:
        value, u = _decaying(values)
        return ReducedReading(value=value, u=u, count=len(values), how="decaying swing fitted")
    if reading.kind == "swings":
        rests = [
            (a + 2.0 * b + c) / 4.0 for a, b, c in zip(values, values[1:], values[2:], strict=False)
        ]
        spread = abs(rests[0] - rests[-1]) / 2.0 if len(rests) > 1 else None
        return ReducedReading(
            value=statistics.fmean(rests),
            u=spread,
            count=len(values),
            how="swing extremes averaged",
        )
    if len(values) > 1:
        u = statistics.stdev(values) / math.sqrt(len(values))
        return ReducedReading(
            value=statistics.fmean(values), u=u, count=len(values), how="mean of repeats"
        )
    return ReducedReading(value=values[0], u=None, count=1, how="single reading")


def alternates(values: tuple[float, ...]) -> bool:
    """Whether successive extremes alternate about their middle, as those of a swing do."""
    steps = [b - a for a, b in itertools.pairwise(values)]
    return all(a * b <= 0.0 for a, b in itertools.pairwise(steps))


def _decaying(values: tuple[float, ...]) -> tuple[float, float | None]:
    """Centre c of c + A (-q)^k and its standard uncertainty, q between 0 and 1.

    For each q the centre and amplitude follow by linear least squares (variable projection).
    """
    import numpy as np
    from scipy.optimize import minimize_scalar

    e = np.asarray(values)
    k = np.arange(len(e))
    if np.ptp(e) == 0.0:
        return float(e[0]), 0.0

    def design(q: float) -> np.ndarray[tuple[int, int], np.dtype[np.float64]]:
        return np.column_stack([np.ones(len(e)), (-q) ** k])

    def misfit(q: float) -> float:
        a = design(q)
        return float(((e - a @ np.linalg.lstsq(a, e, rcond=None)[0]) ** 2).sum())

    found = minimize_scalar(misfit, bounds=(1e-3, 1.0), method="bounded", options={"xatol": 1e-10})
    q = float(min((found.x, 1.0), key=misfit))
    a = design(q)
    centre, amplitude = np.linalg.lstsq(a, e, rcond=None)[0]
    # The decay is estimated too: its column joins the design for the uncertainty.
    decay = -amplitude * k * (-q) ** np.maximum(k - 1, 0)
    full = np.column_stack([a, decay])
    freedom = len(e) - 3
    inverse = np.linalg.pinv(full.T @ full)
    u = math.sqrt(max(misfit(q) / freedom * float(inverse[0, 0]), 0.0))
    return float(centre), u
