"""A trial laid out for the chain: what is fixed, and the nominal inputs."""

from __future__ import annotations

import itertools
from typing import TYPE_CHECKING

from incline.chain import Inputs, Plan
from incline.errors import InclineError
from incline.flotation import plan_waterline
from incline.hull import Hull, Integrated
from incline.hydrostatics import Curves
from incline.ledger import lines_of
from incline.levers import HeeledHull, WallSided
from incline.liquids import tank_liquids
from incline.moments import place_weights
from incline.regression import slope_form

if TYPE_CHECKING:
    from collections.abc import Sequence

    import numpy as np
    from numpy.typing import NDArray

    from incline.buoyancy import Afloat
    from incline.levers import Lever
    from incline.moments import Placing
    from incline.observations import Observations
    from incline.record import Method, Point, Sample, Trial

    Floats = NDArray[np.float64]

__all__ = ["hull_of", "inputs_of", "layers_of", "lever_of", "methods_of", "plan_of"]


def hull_of(trial: Trial) -> Hull | None:
    """The hull ready to be cut; None where the trial has no offsets, or its table counts."""
    if trial.offsets is None or (trial.table is not None and trial.settings.use == "table"):
        return None
    layers = layers_of(trial.samples) if trial.settings.layers else ((0.0, 1.0),)
    return Hull(trial.offsets, trial.vessel.lpp, layers)


def layers_of(samples: Sequence[Sample]) -> tuple[tuple[float, float], ...]:
    """Layers of water as `incline.hull.Hull` takes them, from samples at several depths.

    Samples of one depth are averaged by their shares; a layer reaches half-way to the next depth.
    Densities count relative to the mean of all samples, as the displacement takes them.
    """
    groups: dict[float, list[Sample]] = {}
    for s in samples:
        groups.setdefault(s.depth or 0.0, []).append(s)

    def mean(some: Sequence[Sample]) -> float:
        return sum(s.share * s.density for s in some) / sum(s.share for s in some)

    depths = sorted(groups)
    shares = [mean(groups[d]) / mean(samples) for d in depths]
    tops = [0.0, *(0.5 * (a + b) for a, b in itertools.pairwise(depths))]
    steps = [shares[0], *(b - a for a, b in itertools.pairwise(shares))]
    return tuple(zip(tops, steps, strict=True))


def methods_of(trial: Trial, hull: Hull | None) -> tuple[Method, ...]:
    """The methods that a trial can be reduced by, the one that counts first."""
    every: tuple[Method, ...] = ("heeled-hull", "wall-sided", "straight-line")
    able = every if hull is not None else every[1:]
    first = trial.settings.method or ("straight-line" if hull is None else "heeled-hull")
    return (first, *(m for m in able if m != first))


def lever_of(method: Method, hull: Hull | None, placing: Placing) -> Lever | None:
    """The lever of buoyancy by a method; None for the straight line."""
    if method == "heeled-hull" and hull is not None:
        return HeeledHull(hull, placing.trimming, placing.lifting)
    return WallSided() if method == "wall-sided" else None


def plan_of(trial: Trial, seen: Observations, hull: Hull | None) -> Plan:
    """The chain's structure; raises FieldDataError when the drafts cannot give a waterline."""
    import numpy as np

    lines = lines_of(trial)
    waterline = plan_waterline(trial.drafts, trial.vessel.lpp)
    tau = float(waterline.solve[1] @ np.array([d.draft for d in trial.drafts]))
    afloat, tells_lcg, allowance = _afloat(trial, hull, tau * trial.vessel.lpp)
    placing = place_weights(trial)
    return Plan(
        waterline=waterline,
        afloat=afloat,
        afloat_later=afloat,
        lever=lever_of(methods_of(trial, hull)[0], hull, placing),
        liquids=tank_liquids(trial.tanks),
        tells_lcg=tells_lcg,
        placing=placing,
        line=slope_form(
            seen.shift,
            seen.device,
            seen.tangents * seen.lengths[seen.device],
            len(trial.shifts),
            seen.weight,
        ),
        sign=np.array([{"deduct": -1.0, "add": 1.0}.get(line.action, 0.0) for line in lines]),
        moved=np.array([float(line.action == "relocate") for line in lines]),
        allowance=allowance,
    )


def _afloat(trial: Trial, hull: Hull | None, trim: float) -> tuple[Afloat, bool, float]:
    """What carries the ship, whether it tells where B is at a trim [m], and the allowance."""
    if hull is not None and trial.offsets is not None:
        return Integrated(hull), True, trial.offsets.allowance or 0.0
    if trial.table is None:
        raise InclineError("a trial needs offsets or a hydrostatic table")
    curves = Curves(trial.table, trial.vessel.lpp, trial.settings.interpolation)
    return curves, curves.tells_lcg(trim), trial.settings.allowance or 0.0


def inputs_of(trial: Trial, plan: Plan, seen: Observations) -> Inputs:
    """The nominal inputs, without an axis of draws."""
    import numpy as np

    def axis(points: Sequence[Point], name: str) -> Floats:
        return np.array([getattr(p, name) for p in points], dtype=float)

    lines = lines_of(trial)
    share = np.array([s.share for s in trial.samples])
    centres = [line.centre for line in lines]
    ends = [line.to or line.centre for line in lines]
    gone = [c.centre for c in trial.changes]
    return Inputs(
        drafts=np.array([d.draft for d in trial.drafts]),
        density=np.asarray(share @ np.array([s.density for s in trial.samples]) / share.sum()),
        weights=np.array([w.mass for w in trial.weights]),
        place_y=plan.placing.y,
        place_z=plan.placing.z,
        weight_x=plan.placing.start_x,
        lengths=seen.lengths,
        fsm=np.array([t.fsm for t in trial.tanks]),
        mass=np.array([line.mass for line in lines]),
        **{n: axis(centres, n) for n in "xyz"},
        **{f"to_{n}": axis(ends, n) for n in "xyz"},
        changes=np.array([c.mass if c.change == "aboard" else -c.mass for c in trial.changes]),
        **{f"change_{n}": axis(gone, n) for n in "xyz"},
        volume_factor=np.asarray(1.0),
        km_shift=np.asarray(0.0),
        lcb_shift=np.asarray(0.0),
        moments=np.array([s.moment for s in trial.shifts if s.moment is not None]),
        moment_factor=np.asarray(1.0),
        slope_shift=np.asarray(0.0),
    )
