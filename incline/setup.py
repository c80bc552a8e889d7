"""A trial laid out for the chain: what is fixed, and the nominal inputs."""

from __future__ import annotations

from typing import TYPE_CHECKING

from incline.chain import Inputs, Plan
from incline.flotation import plan_waterline
from incline.hydrostatics import Curves
from incline.ledger import lines_of
from incline.moments import place_weights
from incline.regression import slope_form

if TYPE_CHECKING:
    from collections.abc import Sequence

    import numpy as np
    from numpy.typing import NDArray

    from incline.observations import Observations
    from incline.record import Point, Trial

    Floats = NDArray[np.float64]

__all__ = ["inputs_of", "plan_of"]


def plan_of(trial: Trial, seen: Observations) -> Plan:
    """The chain's structure; raises FieldDataError when the drafts cannot give a waterline."""
    import numpy as np

    lines = lines_of(trial)
    waterline = plan_waterline(trial.drafts, trial.vessel.lpp)
    curves = Curves(trial.table, trial.vessel.lpp, trial.settings.interpolation)
    tau = float(waterline.solve[1] @ np.array([d.draft for d in trial.drafts]))
    return Plan(
        waterline=waterline,
        curves=curves,
        tells_lcg=curves.tells_lcg(tau * trial.vessel.lpp),
        placing=place_weights(trial),
        line=slope_form(
            seen.shift,
            seen.device,
            seen.tangents * seen.lengths[seen.device],
            len(trial.shifts),
            seen.weight,
        ),
        sign=np.array([{"deduct": -1.0, "add": 1.0}.get(line.action, 0.0) for line in lines]),
        moved=np.array([float(line.action == "relocate") for line in lines]),
        allowance=trial.settings.allowance or 0.0,
    )


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
