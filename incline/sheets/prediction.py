"""What the devices should show: heel and deflection for a moment, from GM and displacement.

tan(heel) = w d / (displacement x GM) and deflection = length x tan(heel): the simple theory of the
inclining test (Barrass & Derrett, *Ship Stability for Masters and Mates*, recalled), heeled about
the zero of the devices.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

from incline.errors import InclineError

if TYPE_CHECKING:
    from incline.reading.partial import Partial
    from incline.record import Device

__all__ = ["Prediction", "predict"]


@dataclass(frozen=True, slots=True)
class Prediction:
    """Expected GM with liquids free [m] and displacement [t], and where each is from, in words."""

    gm: float
    displacement: float
    gm_from: str
    displacement_from: str

    def tangent(self, moment: float) -> float:
        """Tangent of heel for a moment [t m], both positive to starboard."""
        return moment / (self.displacement * self.gm)

    def deflection(self, device: Device, moment: float) -> float | None:
        """What a device shows from its zero: a length [m], or an angle [rad] on an inclinometer.

        None where the length of a pendulum or the span of a U-tube is not known.
        """
        if device.kind == "inclinometer":
            return math.atan(self.tangent(moment))
        if device.length is None or math.isnan(device.length):
            return None
        return device.length * self.tangent(moment)


def predict(partial: Partial, gm: float | None, displacement: float | None) -> Prediction | None:
    """Expectation from the figures given [m, t], else from the trial; None when one is not known.

    The trial's GM is the one expected before the test, else the one that its readings give; its
    displacement is that of its drafts, once it is complete.
    """
    before = partial.trial.occasion.gm_before
    gm_from, displacement_from = "given", "given"
    if gm is None and before is not None:
        gm, gm_from = before, "expected before the test"
    if gm is None or displacement is None:
        found = _measured(partial)
        if gm is None:
            gm, gm_from = found[0], "as this trial's readings give it"
        if displacement is None:
            displacement, displacement_from = found[1], "from this trial's drafts"
    if gm is None or displacement is None or not (gm > 0.0 and displacement > 0.0):
        return None
    return Prediction(gm, displacement, gm_from, displacement_from)


def _measured(partial: Partial) -> tuple[float | None, float | None]:
    """GM [m] and displacement [t] of a trial that can be reduced."""
    from incline.reduction import reduce

    if not partial.whole:
        return None, None
    try:
        outcome = reduce(partial.trial).outcome
    except InclineError:
        return None, None
    return outcome.heel.gm_fluid, outcome.as_inclined.displacement
