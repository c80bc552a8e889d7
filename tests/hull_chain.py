"""The chain from readings to lightship alone, by any method: no budget and no diagnosis."""

from __future__ import annotations

from dataclasses import replace
from typing import TYPE_CHECKING, NamedTuple

from incline import read_trial
from incline.chain import run
from incline.observations import observe
from incline.setup import hull_of, inputs_of, lever_of, methods_of, plan_of

if TYPE_CHECKING:
    from pathlib import Path

    from incline.chain import Inputs, Plan, Yield
    from incline.observations import Observations
    from incline.record import Method, Trial


class Worked(NamedTuple):
    """A trial with what the chain was given and gave."""

    trial: Trial
    found: Yield
    seen: Observations
    plan: Plan
    given: Inputs


def worked(folder: Path, method: Method | None = None) -> Worked:
    """A trial through the chain, by its own method unless another is asked for."""
    trial = read_trial(folder)
    seen, hull = observe(trial), hull_of(trial)
    plan = plan_of(trial, seen, hull)
    lever = lever_of(method or methods_of(trial, hull)[0], hull, plan.placing)
    plan = replace(plan, lever=lever)
    given = inputs_of(trial, plan, seen)
    return Worked(trial, run(plan, given), seen, plan, given)
