"""What is out of the ordinary in a test, and the surveyor's explanations."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from incline.report.document import Sheet, paragraph, part
from incline.report.show import NOT_RECORDED
from incline.report.tables import Column, grid
from incline.telling import groups_of, place_of

if TYPE_CHECKING:
    from collections.abc import Iterator

__all__ = ["anomalies"]


def anomalies(sheet: Sheet) -> list[Any]:
    """What this report finds odd, and what the trial says about it."""
    odd = list(_odd(sheet))
    said = sheet.reduction.trial.papers.anomalies
    if not odd and not said:
        return [paragraph("None: nothing stands out, and the trial names nothing.")]
    flow: list[Any] = []
    if odd:
        columns = (Column("what stands out", 0.70, "left"), Column("see", 0.30, "left"))
        flow.append(grid(columns, odd, sheet.width))
    flow += part("Explained by the surveyor")
    if said:
        columns = (Column("what", 0.36, "left"), Column("explanation", 0.64, "left"))
        return [*flow, grid(columns, [(a.what, a.explanation) for a in said], sheet.width)]
    return [*flow, paragraph(f"Explanations: {NOT_RECORDED} (trial.toml, [[anomalies]]).")]


def _odd(sheet: Sheet) -> Iterator[tuple[str, str]]:
    """Findings, readings left out, drafts off the waterline, criteria that are not met."""
    reduction = sheet.reduction
    if reduction.diagnosis is not None:
        for group in groups_of(reduction.diagnosis):
            yield f"{group[0].cause} ({place_of(group[0])})", "What the residuals say"
    for reading in reduction.trial.readings:
        if reading.excluded:
            where = f"shift {reading.shift}, device {reading.device}"
            yield f"Reading left out, {where}: {reading.excluded}", "Devices and readings"
    for draft in reduction.outcome.as_inclined.waterline.residuals:
        if draft.flagged:
            at = sheet.show.full(draft.x, "length")
            yield (
                f"Draft reading at x = {at}, side {draft.side}, is off the fitted waterline",
                ("Condition as inclined"),
            )
    for check in reduction.checks:
        if check.status == "fail":
            yield f"Criterion not met: {check.title}", "Rules and criteria"
    if reduction.rolling is not None and not reduction.rolling.agrees:
        yield "GM by the rolling period does not agree", "Heel against moment"
