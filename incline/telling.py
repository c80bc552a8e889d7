"""Words about checks and findings that the terminal and the report share."""

from __future__ import annotations

from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from collections.abc import Iterable, Sequence

    from incline.result import Check, Diagnosis, Finding

__all__ = ["NOTHING", "TOO_FEW", "groups_of", "place_of", "tally"]

NOTHING = "No disturbance stands out in the residuals."
TOO_FEW = "Too few readings are left over to search the residuals for disturbances."

_FROM = ("wind or current changed once", "test weight misrecorded", "device disturbed")
"""Causes that last from their shift on."""


def tally(checks: Iterable[Check]) -> str:
    """How many criteria pass, fail and were not recorded."""
    found = [c.status for c in checks]
    return ", ".join(f"{found.count(s)} {s}" for s in ("pass", "fail", "not recorded"))


def place_of(finding: Finding) -> str:
    """Where and when a disturbance acts."""
    what = f"device {finding.device}" if finding.where == "device" else "the ship"
    if finding.shift is None:
        return what
    when = "from shift" if finding.cause in _FROM else "at shift"
    return f"{what}, {when} {finding.shift}"


def groups_of(diagnosis: Diagnosis) -> list[Sequence[Finding]]:
    """Each finding followed by those that explain the same nearly as well."""
    groups: list[list[Finding]] = []
    for finding in diagnosis.findings:
        if finding.rank == 0 or not groups:
            groups.append([])
        groups[-1].append(finding)
    return list(groups)
