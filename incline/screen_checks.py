"""The criteria held against a trial, as plain text for a terminal of 80 columns."""

from __future__ import annotations

import textwrap
from itertools import zip_longest
from typing import TYPE_CHECKING

from incline.criteria import VERIFY, found_text, limit_text, rule_set_of

if TYPE_CHECKING:
    from collections.abc import Iterator, Sequence

    from incline.result import Check, Reduction

__all__ = ["show_checks"]

_WIDTHS = (21, 18, 21, 14)
_HEAD = ("criterion", "found", "limit", "status")
_RULE = "-" * 80


def show_checks(reduction: Reduction) -> str:
    """The table in its order, what is not met, what was not recorded, and a line of sums."""
    checks = reduction.checks
    failed = [c for c in checks if c.status == "fail"]
    silent = [c for c in checks if c.status == "not recorded"]
    lines = [_judged_by(reduction.trial.settings.rule_set), *_row(_HEAD), _RULE]
    for check in checks:
        lines += _row(_cells(check))
    lines += [_RULE, *_footnote(checks)]
    if failed:
        lines += ["", "NOT MET", *(line for c in failed for line in _explained(c))]
    if silent:
        lines += ["", "NOT RECORDED", *(line for c in silent for line in _lacking(c))]
    passed = sum(c.status == "pass" for c in checks)
    return "\n".join(
        [
            *lines,
            "",
            f"{passed} pass, {len(failed)} fail, {len(silent)} not recorded,"
            f" {len(checks) - passed - len(failed) - len(silent)} not applicable.",
            *_filled(
                "A criterion not met is a finding to explain, and no proof that the ship is unsafe;"
                " one met is no proof of safety. Acceptance rests with the flag administration or"
                " its recognised organisation.",
                "",
            ),
        ]
    )


def _judged_by(named: str) -> str:
    known = rule_set_of(named)
    if known:
        return f"Published criteria, judged by {known}"
    quoted = f'"{named}"' if named else "none"
    return f"Published criteria, judged by IMO: known rule sets named in [rules]: {quoted}"


def _cells(check: Check) -> tuple[str, str, str, str]:
    marks = "*" if "memory" in check.evidence else ""
    mark = "+" if check.rule_set == "trial" else ""
    status = "FAIL" if check.status == "fail" else check.status
    return check.id, found_text(check), f"{limit_text(check)}{marks}{mark}", status


def _row(cells: Sequence[str]) -> Iterator[str]:
    """The lines of a row, cells broken at their width."""
    broken = [textwrap.wrap(c, w) or [""] for c, w in zip(cells, _WIDTHS, strict=True)]
    for parts in zip_longest(*broken, fillvalue=""):
        joined = "  ".join(f"{p:<{w}}" for p, w in zip(parts, _WIDTHS, strict=True))
        yield joined.rstrip()


def _footnote(checks: Sequence[Check]) -> list[str]:
    said = []
    if any("memory" in c.evidence for c in checks):
        said.append(f"* limit recalled from memory: {VERIFY}")
    if any(c.rule_set == "trial" for c in checks):
        said.append("+ the trial's own limit, in [[overrides]]")
    return said


def _explained(check: Check) -> list[str]:
    found = f"Found {found_text(check)}; limit {limit_text(check)}."
    return [
        *_filled(f"{check.id}: {check.title}. {found}"),
        *_filled(f"{_source(check)}. {check.note}".strip(), "    "),
    ]


def _source(check: Check) -> str:
    edition = f" ({check.edition})" if check.edition else ""
    return f"{check.source}{edition}; evidence: {check.evidence}"


def _lacking(check: Check) -> list[str]:
    return _filled(f"{check.id}: {check.note.partition('Not recorded: ')[2] or check.title}")


def _filled(text: str, indent: str = "  ") -> list[str]:
    return textwrap.wrap(text, 80, initial_indent=indent, subsequent_indent=indent)
