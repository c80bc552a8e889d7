"""Published criteria held against the trial."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from incline.criteria import VERIFY, found_text, limit_text
from incline.report.document import Sheet, bullet, note, paragraph, part
from incline.report.show import MISSING, Kind, signed
from incline.report.tables import Column, Row, grid
from incline.report.text import elide
from incline.telling import tally
from incline.units import LENGTH, factor

if TYPE_CHECKING:
    from incline.result import Check

__all__ = ["criteria", "criteria_line"]

_MARKS = {"pass": "✓", "fail": "✗", "not recorded": "○", "not applicable": MISSING}
_EVIDENCE = {
    "read": "read in the text",
    "reported": "reported by a secondary account",
    "memory": f"recalled from memory: {VERIFY}",
    "reasoning": "follows from reasoning",
    "setting": "a setting of this program",
    "stated": "stated by the trial",
}
_RULES = {"IMO": "IMO. ", "US": "US practice. ", "class": "Class practice. "}
_TOLD = f"The limit is from memory: {VERIFY}."
"""Said again by the evidence."""
_CELL, _NOTE = 300, 2000
"""Most characters of a cell, and of the notes under it."""
_LENGTHS: dict[str, Kind] = {"cm": "reading", "m": "length"}


def criteria(sheet: Sheet) -> list[Any]:
    """What fails, and the table in its order; nothing without checks."""
    checks = sheet.reduction.checks
    if not checks:
        return []
    columns = (
        Column("", 0.03, "left"),
        Column("criterion", 0.28, "left"),
        Column("found", 0.16, "left"),
        Column("limit", 0.20, "left"),
        Column("status", 0.11, "left"),
        Column("source", 0.22, "left"),
    )
    return [
        *_sums(checks),
        *part("All criteria"),
        grid(columns, [row for c in checks for row in _rows(sheet, c)], sheet.width, whole=True),
        note(
            "✓ met, ✗ not met, ○ not recorded, – does not judge this trial and is shown for "
            "information. Limits are printed in the units in which they are published."
        ),
        *_silent(checks),
    ]


def criteria_line(sheet: Sheet) -> str:
    """How many criteria are met, and which are not; empty without checks."""
    checks = sheet.reduction.checks
    if not checks:
        return ""
    failed = [c.title for c in checks if c.status == "fail"]
    more = f" Not met: {'; '.join(failed)}." if failed else ""
    return f"Criteria: {tally(checks)}.{more}"


def _sums(checks: tuple[Check, ...]) -> list[Any]:
    failed = [c for c in checks if c.status == "fail"]
    rest = sum(c.status == "not applicable" for c in checks)
    flow: list[Any] = [*part("Criteria"), paragraph(f"{tally(checks)}, {rest} not applicable.")]
    if failed:
        flow += [
            *part("Not met"),
            *(bullet(f"{c.title}: found {_printed(c)}; limit {limit_text(c)}.") for c in failed),
        ]
    said = (
        "A criterion that is not met is something to explain; one that is met does not show that "
        "the ship is safe."
    )
    return [*flow, paragraph(said)]


def _rows(sheet: Sheet, check: Check) -> list[Row]:
    """A criterion, and under it edition, evidence and notes."""
    failed = check.status == "fail"
    cells = (
        _MARKS[check.status],
        f"{check.title}\n{check.id}",
        _found(sheet, check),
        limit_text(check),
        "FAIL" if failed else check.status,
        check.source,
    )
    return [
        Row(tuple(_short(c, _CELL) for c in cells), "stress" if failed else "plain"),
        Row(("", _short(_under(check), _NOTE)), "under"),
    ]


def _short(text: str, most: int) -> str:
    """Not more of a text than a row that must not split has room for."""
    return text if len(text) <= most else elide(text, most)


def _printed(check: Check) -> str:
    """What was found; words stay as they are, hyphens and all."""
    text = found_text(check)
    return text if isinstance(check.found, str) else signed(text)


def _found(sheet: Sheet, check: Check) -> str:
    """What was found, lengths in the trial's units as well."""
    if check.found is None:
        return MISSING
    text, kind = _printed(check), _LENGTHS.get(check.unit)
    if isinstance(check.found, str) or kind is None or sheet.show.system.name == "metric":
        return text
    own = sheet.show.full(check.found * factor(check.unit, LENGTH), kind)
    return f"{text} ({own})"


def _under(check: Check) -> str:
    known = "; ".join(_EVIDENCE.get(e.strip(), e.strip()) for e in check.evidence.split(";"))
    edition = f"Edition: {check.edition}. " if check.edition else ""
    rule = _RULES.get(check.rule_set, "")
    told = " ".join(check.note.replace(_TOLD, "").split())
    return f"{rule}{edition}Limit {known}. {told}".strip()


def _silent(checks: tuple[Check, ...]) -> list[Any]:
    silent = sum(c.status == "not recorded" for c in checks)
    if not silent:
        return []
    return [
        paragraph(f"What {silent} of them ask for is listed under “Not recorded by the trial”.")
    ]
