"""The table of criteria, ``criteria.toml``, as records."""

from __future__ import annotations

import tomllib
from collections.abc import Mapping
from dataclasses import dataclass, field
from functools import cache
from importlib.resources import files
from typing import Any

__all__ = ["BASE", "RULE_SETS", "Criterion", "Limit", "Range", "criteria", "rule_set_of"]

RULE_SETS = ("IMO", "US", "class")
BASE = "IMO"
"""Judges where the trial names no rule set, or the one it names says nothing in the table."""


@dataclass(frozen=True, slots=True)
class Range:
    """From ``low`` to ``high`` in the criterion's unit; None where it is open."""

    low: float | None = None
    high: float | None = None

    @property
    def is_open(self) -> bool:
        """Whether there is no bound at all."""
        return self.low is None and self.high is None

    def holds(self, value: float) -> bool:
        """Whether a value is inside; on the bound counts, to rounding."""
        near = 1e-9 * max(1.0, abs(value))
        above = self.low is None or value >= self.low - near
        return above and (self.high is None or value <= self.high + near)

    def __str__(self) -> str:
        if self.low is None:
            return "none" if self.high is None else f"at most {self.high:g}"
        return f"at least {self.low:g}" if self.high is None else f"{self.low:g} to {self.high:g}"


@dataclass(frozen=True, slots=True, kw_only=True)
class Limit:
    """A limit of the rule sets ``rules`` with its source, and how it is known (``evidence``).

    ``cases`` replace ``range`` where the trial calls for it, ``numbers`` are what measuring needs.
    With ``covers`` the values found must reach over the whole range. ``words`` print the
    limit where its numbers do not say it.
    """

    rules: tuple[str, ...]
    range: Range
    source: str
    edition: str
    evidence: str
    words: str = ""
    note: str = ""
    covers: bool = False
    cases: Mapping[str, Range] = field(default_factory=dict)
    numbers: Mapping[str, float] = field(default_factory=dict)

    def in_case(self, case: str) -> Range:
        """The range that holds in a case; the common one where the case has none of its own."""
        return self.cases.get(case, self.range)


@dataclass(frozen=True, slots=True, kw_only=True)
class Criterion:
    """One row: what is measured, in what unit, and its limits. ``group``: measured alike."""

    id: str
    title: str
    measured: str
    unit: str
    group: str
    limits: tuple[Limit, ...]

    @property
    def has_numbers(self) -> bool:
        """Whether a number can be its limit; otherwise only words can."""
        return bool(self.unit) or any(not limit.range.is_open for limit in self.limits)

    def limit_of(self, *rule_sets: str) -> Limit | None:
        """The first limit that belongs to one of the rule sets, in their order."""
        for name in rule_sets:
            for limit in self.limits:
                if name in limit.rules:
                    return limit
        return None


@cache
def criteria() -> tuple[Criterion, ...]:
    """Every criterion in the order of the table."""
    text = files("incline").joinpath("criteria.toml").read_text(encoding="utf-8")
    return tuple(_criterion(row) for row in tomllib.loads(text)["criterion"])


def rule_set_of(name: str) -> str | None:
    """The rule set that a trial names, whatever its case; None when it names none of ours."""
    known = {r.casefold(): r for r in RULE_SETS}
    return known.get(name.strip().casefold())


def _criterion(row: dict[str, Any]) -> Criterion:
    limits = tuple(_limit(limit) for limit in row.pop("limits"))
    return Criterion(**{"group": "", **row}, limits=limits)


def _limit(row: dict[str, Any]) -> Limit:
    cases = {name: _range(case) for name, case in row.pop("cases", {}).items()}
    numbers = {name: float(n) for name, n in row.pop("numbers", {}).items()}
    rules = tuple(row.pop("rules"))
    return Limit(rules=rules, range=_range(row), cases=cases, numbers=numbers, **row)


def _range(row: dict[str, Any]) -> Range:
    bounds = (row.pop(key, None) for key in ("low", "high"))
    return Range(*(None if b is None else float(b) for b in bounds))
