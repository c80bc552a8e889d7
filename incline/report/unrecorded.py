"""Everything that the trial does not record, in one list, with the place where it would be."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from incline.report.document import Sheet, note, paragraph, part
from incline.report.recorded import (
    about_environment,
    about_papers,
    about_predicted,
    about_rules,
    about_ship,
    about_tables,
    about_test,
    about_vessel,
)
from incline.report.tables import Column, Row, grid
from incline.report.text import elide

if TYPE_CHECKING:
    from incline.result import Check

__all__ = ["unrecorded"]

_LONGEST = 300
"""Most characters of what one criterion lacks."""


def unrecorded(sheet: Sheet) -> list[Any]:
    """The list by subject, then what criteria ask for and the field book does not say."""
    groups = (
        ("Vessel", about_vessel(sheet)),
        ("Test", about_test(sheet)),
        ("Surroundings", about_environment(sheet)),
        ("Condition of the ship", about_ship(sheet)),
        ("Predicted before the test", about_predicted(sheet)),
        ("Rules and papers", [*about_rules(sheet), *about_papers(sheet)]),
        ("Tables", about_tables(sheet.reduction.trial)),
    )
    columns = (Column("not recorded", 0.56, "left"), Column("where it would be", 0.44, "left"))
    rows: list[Row] = []
    for title, asked in groups:
        lacking = [a for a in asked if not a.text]
        if lacking:
            rows.append(Row((title, ""), "band"))
            rows += [Row((a.label, a.where)) for a in lacking]
    silent = [c for c in sheet.reduction.checks if c.status == "not recorded"]
    if not rows and not silent:
        return [paragraph("Nothing that this report asks for is missing.")]
    flow: list[Any] = [
        paragraph(
            "The calculation does not need what stands here, or does without it; a reviewer may "
            "ask for it. It is printed as “not recorded” where it belongs."
        )
    ]
    if rows:
        flow.append(grid(columns, rows, sheet.width))
    return [*flow, *_silent(sheet, silent)]


def _silent(sheet: Sheet, silent: list[Check]) -> list[Any]:
    if not silent:
        return []
    columns = (Column("criterion", 0.44, "left"), Column("what it lacks", 0.56, "left"))
    return [
        *part("Asked for by criteria, and not recorded"),
        grid(columns, [(c.title, elide(lacking_of(c), _LONGEST)) for c in silent], sheet.width),
        note("incline check names the file for each."),
    ]


def lacking_of(check: Check) -> str:
    """What a criterion could not find in the record."""
    said = check.note.partition("Not recorded: ")[2]
    return said or "not recorded."
