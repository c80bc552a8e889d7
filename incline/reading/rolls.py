"""``rolls.csv``: runs of a rolling test, each so many full rolls timed by a watch."""

from __future__ import annotations

import re
from typing import TYPE_CHECKING, get_args

from incline.errors import Where
from incline.reading.cells import Column
from incline.reading.collect import Sign, quoted
from incline.reading.tomlfile import FILE
from incline.record import RollCondition, RollingRun
from incline.units import TIME

if TYPE_CHECKING:
    from incline.reading.cells import Row, Sheet
    from incline.reading.tomlfile import Section

__all__ = ["ROLL_COLUMNS", "read_condition", "read_rolls"]

ROLL_COLUMNS = (
    Column("run", required=True),
    Column("rolls", required=True),
    Column("time", TIME, required=True, sign=Sign.POSITIVE),
)


def read_condition(section: Section) -> RollCondition | None:
    """The loading at the rolling test; None when the file does not tell it."""
    if section.readable and section.value("condition") is None:
        return None
    found: RollCondition = section.choice("condition", get_args(RollCondition))
    return found


def read_rolls(sheet: Sheet, condition: RollCondition | None) -> tuple[RollingRun, ...]:
    """The runs; without the condition they were made in, no factor can be chosen: a defect."""
    if sheet.rows and condition is None:
        sheet.collector.add(
            Where(FILE, 0, "rolling.condition"),
            "key-missing",
            "no such key",
            "the loading at the rolling test, since rolls.csv has runs: "
            + " or ".join(f'"{word}"' for word in get_args(RollCondition)),
        )
    runs: list[RollingRun] = []
    seen: dict[str, int] = {}
    for row in sheet.rows:
        run = row.text("run", required=True)
        before = seen.setdefault(run.casefold(), row.number)
        if before != row.number and run:
            expected = f"a run of its own; row {before} has the same"
            row.fault("run", "id-twice", quoted(run), expected)
        rolls, time = _count(row), row.need("time")
        runs.append(RollingRun(run=run, rolls=rolls, time=time, where=row.where()))
    return tuple(runs)


def _count(row: Row) -> int:
    """A whole number of rolls; 1 after a defect."""
    found = row.text("rolls")
    expected = "a whole number of full rolls"
    if re.fullmatch(r"[+-]?[0-9]{1,6}", found):
        if int(found) >= 1:
            return int(found)
        row.fault("rolls", "number-not-positive", quoted(found), "one full roll at least")
    elif found:
        row.fault("rolls", "number-unreadable", quoted(found), expected)
    else:
        row.missing("rolls", expected)
    return 1
