"""Heel against moment: the common line through all devices, and each device alone."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

from incline.liquids import pocketing_tanks
from incline.regression import fit_grouped_line
from incline.result import DeviceFit, HeelFit, HeelPoint, ShiftMoment

if TYPE_CHECKING:
    from collections.abc import Sequence

    import numpy as np
    from numpy.typing import NDArray

    from incline.chain import Yield
    from incline.observations import Observation, Observations
    from incline.record import Method, Trial
    from incline.regression import GroupedLine
    from incline.result import MethodResult

    Floats = NDArray[np.float64]

__all__ = ["describe_heel"]


def describe_heel(
    trial: Trial,
    seen: Observations,
    found: Yield,
    method: Method,
    aside: Sequence[MethodResult] = (),
    by_offsets: float | None = None,
) -> HeelFit:
    """The fit of record with every reading placed against it.

    ``aside`` are the results by the other methods; ``by_offsets`` as in `HeelFit`.
    """
    import numpy as np

    heeling = found.heeling
    straight = seen.straightened(heeling.bend)
    moments = heeling.regressor[seen.shift]
    line = fit_grouped_line(moments, straight.tangents, seen.device, seen.weight)
    displacement, gm = float(found.condition.displacement), float(found.gm_fluid)
    zero = {d.id: at for d, at in zip(seen.devices, line.intercepts, strict=True)}
    number = {s.number: i for i, s in enumerate(trial.shifts)}
    curve = heeling.bend + line.slope * heeling.regressor
    points = tuple(
        _point(o, zero, float(heeling.moments[i]), float(curve[i]))
        for o in seen.every
        if o.reading.device in zero
        for i in [number[o.reading.shift]]
    )
    heels = _heels(points, zero, float(found.condition.start))
    return HeelFit(
        method=method,
        slope=line.slope,
        u_slope=line.u_slope,
        gm_fluid=gm,
        u_gm_fluid=None if line.u_slope is None else gm * line.u_slope / line.slope,
        dof=line.dof,
        residual_sd=line.sd,
        devices=tuple(
            _alone(
                d.id,
                moments[seen.device == j],
                straight.tangents[seen.device == j],
                zero[d.id],
                displacement,
            )
            for j, d in enumerate(seen.devices)
        ),
        points=points,
        shifts=tuple(
            ShiftMoment(
                shift=s.number,
                time=s.time,
                transverse=float(across),
                vertical=float(up),
            )
            for s, across, up in zip(
                trial.shifts,
                found.transverse,
                np.broadcast_to(found.vertical, found.transverse.shape),
                strict=True,
            )
        ),
        max_heel_port=max(0.0, -math.atan(min(heels))),
        max_heel_starboard=max(0.0, math.atan(max(heels))),
        by_offsets=by_offsets,
        curvature_kg=_left_out(method, aside, heels, found) if by_offsets is None else -by_offsets,
        others=tuple(aside),
        pocketing=pocketing_tanks(trial.tanks, heels),
    )


def _left_out(
    method: Method, aside: Sequence[MethodResult], heels: list[float], found: Yield
) -> float:
    """What KG as inclined may be off by [m] for curvature that the method leaves out."""
    if method == "heeled-hull":
        return 0.0
    exact = [m for m in aside if m.method == "heeled-hull"]
    if exact:  # KM and free surfaces are the same by every method, so that KG goes with GM
        return float(found.gm_fluid) - exact[0].gm_fluid
    return _curvature(heels, float(found.condition.buoyancy.bmt))


def _point(seen: Observation, zero: dict[str, float], moment: float, curve: float) -> HeelPoint:
    return HeelPoint(
        shift=seen.reading.shift,
        device=seen.reading.device,
        moment=moment,
        tangent=seen.tangent,
        fitted=zero[seen.reading.device] + curve,
        reading=seen.reduced,
        excluded="" if seen.counts else seen.reading.excluded,
    )


def _heels(points: Sequence[HeelPoint], zero: dict[str, float], start: float) -> list[float]:
    """Mean measured tangent of heel at each shift, zero offsets taken out, list added."""
    shifts: dict[int, list[float]] = {}
    for p in points:
        if not p.excluded:
            shifts.setdefault(p.shift, []).append(p.tangent - zero[p.device] + start)
    return [sum(v) / len(v) for v in shifts.values()]


def _curvature(heels: list[float], bmt: float) -> float:
    """How low a straight line puts KG [m] on a wall-sided hull: the cubic term it leaves out."""
    mean, cube = math.fsum(heels) / len(heels), math.fsum(t**3 for t in heels) / len(heels)
    spread = math.fsum((t - mean) ** 2 for t in heels)
    together = math.fsum((t - mean) * (t**3 - cube) for t in heels)
    return 0.5 * bmt * together / spread if spread > 0.0 else 0.0


def _alone(
    name: str, moments: Floats, tangents: Floats, intercept: float, displacement: float
) -> DeviceFit:
    import numpy as np

    line: GroupedLine = fit_grouped_line(moments, tangents, np.zeros(len(moments), dtype=np.intp))
    gm = 1.0 / (line.slope * displacement)
    return DeviceFit(
        id=name,
        readings=len(moments),
        gm=gm,
        u_gm=None if line.u_slope is None else gm * line.u_slope / line.slope,
        slope=line.slope,
        u_slope=line.u_slope,
        intercept=intercept,
        r_squared=line.r_squared,
    )
