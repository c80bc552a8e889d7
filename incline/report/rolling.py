"""GM by the rolling period beside the measured one: a check against gross errors."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from incline.report.document import note, part
from incline.report.tables import steps

if TYPE_CHECKING:
    from incline.report.document import Sheet

__all__ = ["rolling_period"]


def rolling_period(sheet: Sheet) -> list[Any]:
    """The runs, GM by them, and whether it agrees; nothing without runs."""
    found, show, trial = sheet.reduction.rolling, sheet.show, sheet.reduction.trial
    if found is None:
        return []
    runs = ", ".join(f"{r.rolls} in {show.plain(r.time, 1)} s" for r in trial.rolls)
    factor, beam = show.plain(found.factor, 2), show.plain(trial.vessel.beam, 3)
    lines = (
        ("T, mean period of one full roll", f"rolls: {runs}", f"{show.plain(found.period, 3)} s"),
        (
            "GM = (f B / T)², B and GM in metres",
            f"({factor} × {beam} / {show.plain(found.period, 3)})²",
            show.full(found.gm, "length"),
        ),
        (
            "its standard uncertainty",
            "scatter of f from ship to ship, and of T",
            show.full(found.u_gm, "length"),
        ),
        (
            "GM fluid, as measured by inclining",
            "",
            show.full(sheet.reduction.outcome.heel.gm_fluid, "length"),
        ),
    )
    verdict = (
        "They agree within two standard uncertainties."
        if found.agrees
        else "They do NOT agree within two standard uncertainties: look for a gross error in "
        "displacement, test weights, moments, device lengths or signs, or in the runs."
    )
    said = f"{verdict} {found.note} This is a check against gross errors, never a result."
    return [
        *part("GM by the rolling period", 110.0),
        steps(lines, sheet.width),
        note(" ".join(said.split())),
    ]
