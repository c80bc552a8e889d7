"""GM by the period of roll: a check against gross errors, never a result.

GM = (f B / T)^2 with GM and the beam B in metres and T, one full roll, in seconds; the factors f
and their scatter for ships of up to 70 m are those of IMO resolution A.749(18), annex 3.
"""

from __future__ import annotations

import math
from statistics import fmean, stdev
from typing import TYPE_CHECKING

from incline.result import Rolling
from incline.units import LENGTH, SYSTEMS

if TYPE_CHECKING:
    from collections.abc import Mapping

    from incline.record import RollCondition, Trial
    from incline.result import Estimate, Outcome

__all__ = ["FACTORS", "SCATTER", "remarks_on_rolling", "rolling_of"]

FACTORS: Mapping[RollCondition, float] = {"empty": 0.88, "20 %": 0.78, "10 %": 0.75, "5 %": 0.73}
"""f [s/m^0.5] by condition: empty or in ballast, or liquids as a share of the total load."""
SCATTER = 0.05
"""Scatter of f from ship to ship, taken as its standard uncertainty."""
_RUNS, _ROLLS, _LONGEST = 3, 5, 70.0  # of the same annex; the last in metres
_SURE = 2.0  # standard uncertainties


def rolling_of(trial: Trial, outcome: Outcome) -> Rolling | None:
    """GM by the rolling period against the measured GM, liquids free; None without runs.

    The period is the mean of the runs' periods. Its standard error, when there are two runs or
    more, and the scatter of f make up the uncertainty: u(GM)/GM = 2 sqrt((u_f/f)^2 + (u_T/T)^2).
    """
    condition = trial.settings.roll_condition
    if condition is None or not trial.rolls:
        return None
    periods = [run.time / run.rolls for run in trial.rolls]
    period, factor = fmean(periods), FACTORS[condition]
    u_period = stdev(periods) / math.sqrt(len(periods)) if len(periods) > 1 else 0.0
    gm = (factor * trial.vessel.beam / period) ** 2
    u_gm = 2.0 * gm * math.hypot(SCATTER / factor, u_period / period)
    measured = _measured(outcome)
    apart = abs(gm - outcome.heel.gm_fluid)
    return Rolling(
        period=period,
        factor=factor,
        gm=gm,
        u_gm=u_gm,
        agrees=apart <= _SURE * math.hypot(u_gm, measured.u or 0.0),
        note=" ".join(_weaknesses(trial)),
    )


def _measured(outcome: Outcome) -> Estimate:
    """The estimate of GM, liquids free, with everything that makes it uncertain."""
    return next(b.estimate for b in outcome.budgets if b.key == "gm_fluid")


def _weaknesses(trial: Trial) -> list[str]:
    """What the published procedure asks for and these runs are not."""
    said = []
    runs = len(trial.rolls)
    if runs < _RUNS:
        more = "" if runs > 1 else "; the scatter between runs cannot be seen"
        said.append(f"{runs} run{'s' if runs > 1 else ''}, fewer than {_RUNS}{more}.")
    short = [r.run for r in trial.rolls if r.rolls < _ROLLS]
    if short:
        said.append(f"Fewer than {_ROLLS} rolls in run {', '.join(short)}.")
    if trial.vessel.lpp > _LONGEST:
        said.append(f"The factor is for ships of up to {_LONGEST:.0f} m; this one is longer.")
    return said


def remarks_on_rolling(trial: Trial, rolling: Rolling | None) -> list[str]:
    """Sentences for the reviewer: weak runs, a gross disagreement, a condition without runs."""
    if rolling is None:
        if trial.settings.roll_condition is None:
            return []
        return ["The trial tells the loading at a rolling test, but rolls.csv has no runs."]
    said = [f"Rolling period: {rolling.note}"] if rolling.note else []
    if not rolling.agrees:
        system = SYSTEMS[trial.settings.units]
        said.append(
            f"GM by the rolling period, {system.show(rolling.gm, LENGTH, system.length, 2)}"
            f" {system.length}, is more than two standard uncertainties from the measured GM: look"
            " for a gross error in displacement, test weights, moments, device lengths or signs, or"
            " in the runs."
        )
    return said
