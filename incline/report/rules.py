"""By which rules the test was held, where it departed from them, and what it meets."""

from __future__ import annotations

from typing import Any

from incline.criteria import rule_set_of
from incline.criteria.table import BASE
from incline.report.criteria import criteria
from incline.report.document import Sheet, note, paragraph, part
from incline.report.recorded import about_rules, pairs_of
from incline.report.show import NOT_RECORDED
from incline.report.tables import Column, facts, grid

__all__ = ["rules"]


def rules(sheet: Sheet) -> list[Any]:
    """Rule set and edition, deviations with who allowed them, criteria."""
    named = sheet.reduction.trial.settings.rule_set
    judge = rule_set_of(named)
    said = f"The criteria below are judged by the limits of {judge or BASE}"
    said += "." if judge else f": the trial names {named or 'no rule set'}, which has none here."
    return [
        facts(pairs_of(about_rules(sheet)), sheet.width),
        *([paragraph(said)] if sheet.reduction.checks else []),
        *part("Deviations, and who allowed them"),
        *_deviations(sheet),
        *criteria(sheet),
    ]


def _deviations(sheet: Sheet) -> list[Any]:
    trial = sheet.reduction.trial
    told = trial.papers.deviations
    rows = [(d.what, d.reason, d.allowed_by) for d in told if not d.is_none]
    rows += [
        (f"limit of {o.check} set by the trial", o.reason, o.allowed_by)
        for o in trial.settings.overrides
    ]
    if not rows:
        said = "none, as the trial says" if told else NOT_RECORDED
        return [paragraph(f"Deviations: {said}.")]
    columns = (
        Column("deviation", 0.34, "left"),
        Column("reason", 0.38, "left"),
        Column("allowed by", 0.28, "left"),
    )
    cells = [[a, b or NOT_RECORDED, c or NOT_RECORDED] for a, b, c in rows]
    return [
        grid(columns, cells, sheet.width),
        note("A deviation counts as allowed only by the written word of the one named."),
    ]
