"""A response surface around the as-inclined condition, so that many draws stay affordable.

Everything that a hull would have to be integrated for is replaced by polynomials in mean draft,
trim, deflection, list and heel, through points over the range in which draws fall. At the estimates
themselves the polynomials give what the hull gives.
"""

from __future__ import annotations

import itertools
from dataclasses import dataclass, fields, replace
from typing import TYPE_CHECKING

from incline.buoyancy import Buoyancy, Condition

if TYPE_CHECKING:
    from collections.abc import Sequence

    import numpy as np
    from numpy.typing import NDArray

    from incline.buoyancy import Afloat
    from incline.chain import Plan, Yield
    from incline.levers import Curve, Lever
    from incline.liquids import Liquids

    Floats = NDArray[np.float64]

__all__ = ["localised"]

_HEEL_STEP = 0.04
"""Share of the largest heel over which the lever is expanded: GM is known better than that."""
_NAMES = tuple(f.name for f in fields(Buoyancy))


@dataclass(frozen=True, slots=True, eq=False)
class _Grid:
    """Points for an expansion in k variables with the given steps.

    ``points`` (k, K): the centre, then for each variable half a step and a whole one up and down,
    then each pair a step up together. Terms: each variable by itself to the fourth power, and the
    products of pairs.
    """

    steps: Floats
    points: Floats
    pairs: tuple[tuple[int, int], ...]

    def expand(self, values: Floats) -> Floats:
        """Coefficients (..., 1 + 4 k + pairs) from values (..., K)."""
        import numpy as np

        k = len(self.steps)
        centre = values[..., :1]
        own = values[..., 1 : 4 * k + 1].reshape(*values.shape[:-1], 4, k)
        odd, odd_half = (
            (own[..., 2, :] - own[..., 3, :]) / 2.0,
            (own[..., 0, :] - own[..., 1, :]) / 2.0,
        )
        even = (own[..., 2, :] + own[..., 3, :]) / 2.0 - centre
        even_half = (own[..., 0, :] + own[..., 1, :]) / 2.0 - centre
        # From f(1/2) and f(1): a s + c s^3, and b s^2 + d s^4.
        a, c = (8.0 * odd_half - odd) / 3.0, (4.0 * odd - 8.0 * odd_half) / 3.0
        b, d = (16.0 * even_half - even) / 3.0, (4.0 * even - 16.0 * even_half) / 3.0
        cross = np.empty((*values.shape[:-1], len(self.pairs)))
        for n, (i, j) in enumerate(self.pairs):
            corner = values[..., 4 * k + 1 + n]
            # f(i, j) less what either does alone leaves their joint term.
            cross[..., n] = corner - own[..., 2, i] - own[..., 2, j] + centre[..., 0]
        return np.concatenate([centre, a, b, c, d, cross], axis=-1)

    def features(self, away: Sequence[Floats]) -> Floats:
        """Terms (1 + 4 k + pairs, ...) for deviations of the k variables."""
        import numpy as np

        one = [a / s for a, s in zip(away, self.steps, strict=True)]
        two = [s * s for s in one]
        rows = [np.ones_like(one[0]), *one, *two]
        rows += [s * q for s, q in zip(one, two, strict=True)] + [q * q for q in two]
        rows += [one[i] * one[j] for i, j in self.pairs]
        return np.stack(rows)


def _grid(steps: Sequence[float]) -> _Grid:
    import numpy as np

    h = np.array(steps)
    pairs = tuple(itertools.combinations(range(len(h)), 2))
    both = np.zeros((len(h), len(pairs)))
    for n, (i, j) in enumerate(pairs):
        both[i, n], both[j, n] = h[i], h[j]
    alone = np.diag(h)
    points = [np.zeros((len(h), 1)), alone / 2.0, -alone / 2.0, alone, -alone, both]
    return _Grid(h, np.concatenate(points, axis=1), pairs)


@dataclass(frozen=True, slots=True, eq=False)
class _Centre:
    """The waterline around which is expanded, and which of its four parts may vary."""

    ship: Condition
    grid: _Grid
    varies: tuple[bool, bool, bool, bool]

    def away(
        self, mean: Floats, tau: Floats, deflection: Floats | None, list_tan: Floats | None
    ) -> list[Floats]:
        """Deviations of the parts that vary, of one shape."""
        import numpy as np

        at = self.ship
        parts = (
            (mean, at.mean), (tau, at.tau), (deflection, at.deflection), (list_tan, at.list_tan),
        )  # fmt: skip
        found = [
            here - there
            for (here, there), varies in zip(parts, self.varies, strict=True)
            if varies and here is not None and there is not None
        ]
        return list(np.broadcast_arrays(*found))

    def waterlines(self, away: Floats) -> tuple[Floats, Floats, Floats | None, Floats | None]:
        """Mean, tau, deflection and list (K,) at deviations (k, K)."""
        at, rows = self.ship, iter(away)
        mean = at.mean + next(rows)
        tau = at.tau + next(rows)
        deflection = at.deflection if not self.varies[2] else at.deflection + next(rows)
        return (
            mean,
            tau,
            deflection,
            at.list_tan if not self.varies[3] else at.list_tan + next(rows),
        )


class _LocalAfloat:
    """Buoyancy by expansion."""

    def __init__(self, afloat: Afloat, centre: _Centre) -> None:
        import numpy as np

        self.centre = centre
        b = afloat.buoyancy(*centre.waterlines(centre.grid.points))
        values = np.stack([getattr(b, name) + 0.0 * b.volume for name in _NAMES])
        self.terms = centre.grid.expand(values)

    def buoyancy(
        self, mean: Floats, tau: Floats, deflection: Floats | None, list_tan: Floats | None
    ) -> Buoyancy:
        import numpy as np

        away = self.centre.away(mean, tau, deflection, list_tan)
        found = np.tensordot(self.terms, self.centre.grid.features(away), 1)
        return Buoyancy(**dict(zip(_NAMES, found, strict=True)))


class _LocalLever:
    """N(t) of every shift by expansion about its own heel: A + B s + C s^2, s from that heel."""

    def __init__(
        self, plan: Plan, lever: Lever, centre: _Centre, vcg: Floats, heel: Floats, step: float
    ) -> None:
        import numpy as np

        self.centre, self.heel, self.step = centre, heel, step
        count = centre.grid.points.shape[1]
        points = np.concatenate([centre.grid.points] * 3, axis=1)
        mean, tau, deflection, list_tan = centre.waterlines(points)
        ship = Condition(
            mean=mean,
            tau=tau,
            deflection=None if deflection is None else deflection + 0.0 * mean,
            list_tan=None if list_tan is None else list_tan + 0.0 * mean,
            buoyancy=plan.afloat_later.buoyancy(mean, tau, deflection, list_tan),
            displacement=centre.ship.displacement + 0.0 * mean,
        )
        steps = np.repeat([0.0, step, -step], count)
        found, _ = lever.curve(ship)(heel + steps[:, None], vcg + 0.0 * mean)
        at, up, down = (found[i * count : (i + 1) * count].T for i in range(3))
        self.value = centre.grid.expand(at)
        self.slope = centre.grid.expand((up - down) / (2.0 * step))
        self.curvature = centre.grid.expand((up + down - 2.0 * at) / (2.0 * step**2))[:, 0]
        self.at_start = lever.start

    def start(self, ship: Condition) -> Floats:
        return self.at_start(ship)

    def curve(self, ship: Condition) -> Curve:
        import numpy as np

        away = self.centre.away(ship.mean, ship.tau, ship.deflection, ship.list_tan)
        terms = self.centre.grid.features(away)
        value = np.moveaxis(np.tensordot(self.value, terms, 1), 0, -1)
        slope = np.moveaxis(np.tensordot(self.slope, terms, 1), 0, -1)

        def at(tangent: Floats, vcg: Floats) -> tuple[Floats, Floats]:  # noqa: ARG001
            s = tangent - self.heel
            bent = s * self.curvature
            return value + s * (slope + bent), slope + 2.0 * bent

        return at


class _LocalLiquids:
    """Moments of all tanks by expansion about each shift's heel, and about the list at the start.

    They are proportional to each tank's free-surface moment, whatever the heel.
    """

    def __init__(
        self, liquids: Liquids, tanks: int, heel: Floats, start: Floats, step: float
    ) -> None:
        import numpy as np

        one, at = np.eye(tanks), np.append(heel, start)
        here, up, down = (liquids.at(at + s, one)[0] for s in (0.0, step, -step))
        self.at_heel = np.append(heel, start)
        self.terms = (here, (up - down) / (2.0 * step), (up + down - 2.0 * here) / (2.0 * step**2))

    def at(self, tangent: Floats, fsm: Floats) -> tuple[Floats, Floats]:
        a, b, c = (fsm @ term[:, :-1] for term in self.terms)
        s = tangent - self.at_heel[:-1]
        return a + s * (b + s * c), b + 2.0 * s * c

    def start(self, tangent: Floats, fsm: Floats) -> Floats:
        a, b, c = (fsm @ term[:, -1] for term in self.terms)
        s = tangent - self.at_heel[-1]
        moment: Floats = a + s * (b + s * c)
        return moment


def localised(plan: Plan, found: Yield, spread: Floats, tanks: int, *, hull: bool) -> Plan:
    """The plan with its hull, lever and liquids expanded around a reduction of it.

    ``spread`` (4,) are the ranges of mean draft, trim, deflection and list over which to expand,
    ``tanks`` is the number of tanks; ``hull`` says whether the plan's hydrostatics come from one (a
    table's stay as they are).
    """
    now, heel = found.condition, found.heeling.heel
    step = _HEEL_STEP * float(abs(heel - now.start).max())
    around = _centre_of(now, spread)
    lever, liquids = plan.lever, plan.liquids
    if lever is not None:
        if hull:
            lever = _LocalLever(plan, lever, around, found.vcg, heel, step)
        liquids = _LocalLiquids(liquids, tanks, heel, now.start, step)
    if not hull:
        return replace(plan, lever=lever, liquids=liquids)
    return replace(
        plan,
        afloat=_LocalAfloat(plan.afloat, _centre_of(found.as_read, spread)),
        afloat_later=_LocalAfloat(plan.afloat_later, around),
        lever=lever,
        liquids=liquids,
    )


def _centre_of(ship: Condition, spread: Floats) -> _Centre:
    varies = (True, True, ship.deflection is not None, ship.list_tan is not None)
    steps = [float(s) for s, v in zip(spread, varies, strict=True) if v]
    return _Centre(ship, _grid(steps), varies)
