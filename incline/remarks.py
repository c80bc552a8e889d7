"""Sentences a reviewer should see: what was assumed, what could not be found, what looks odd."""

from __future__ import annotations

from typing import TYPE_CHECKING

from incline.swings import alternates

if TYPE_CHECKING:
    from incline.record import Trial
    from incline.result import Outcome

__all__ = ["remarks_on"]


def remarks_on(trial: Trial, outcome: Outcome) -> list[str]:
    """Remarks of the reading first, then of the waterline, the water and the devices."""
    counted = {p.device for p in outcome.heel.points if not p.excluded}
    return [
        *trial.remarks,
        *_waterline(outcome),
        *(
            ["One water sample: the scatter of the density cannot be seen."]
            if len(trial.samples) < 2
            else []
        ),
        *(
            f"Every reading of device {d.id} is excluded."
            for d in trial.devices
            if d.id not in counted
        ),
        *(
            f"The swing extremes of device {r.device} at shift {r.shift} do not alternate."
            for r in trial.readings
            if r.kind == "swings" and not alternates(r.values)
        ),
    ]


def _waterline(outcome: Outcome) -> list[str]:
    inclined = outcome.as_inclined
    said = []
    if inclined.lcg is None:
        # A box has BM_L = L^2 / (12 T), and B rises by BM_L tau^2 / 2.
        rise = inclined.trim**2 / (24.0 * inclined.draft_mid)
        said.append(
            "LCG is not determined: the ship is trimmed and the hydrostatic table has neither"
            " several trims nor BM_L or MCT. The rise of B by trim is left out of KM too; for a box"
            f" of this length and draft it would raise KG by {1000.0 * rise:.1f} mm."
        )
    if inclined.tcg is None:
        said.append("TCG is not determined: the drafts do not show the list.")
    if inclined.waterline.dof == 0:
        said.append(
            "There are no more draft readings than unknowns: errors of the drafts cannot be seen."
        )
    said.extend(
        f"Draft reading at x = {r.x:.3f} m, side {r.side}, is {1000.0 * r.residual:+.0f} mm off the"
        " fitted waterline, more than the others allow: read it again."
        for r in inclined.waterline.residuals
        if r.flagged
    )
    return said
