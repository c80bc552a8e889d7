"""Answers held against limits: which rule set judges, and what its verdict is."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, replace
from typing import TYPE_CHECKING, Literal

from incline.criteria.answers import Found, Inapplicable, Subject, Unrecorded, Words
from incline.criteria.condition import CONDITION
from incline.criteria.procedure import PROCEDURE
from incline.criteria.table import BASE, RULE_SETS, Range, criteria, rule_set_of
from incline.result import Check

if TYPE_CHECKING:
    from incline.criteria.answers import Answer, Measure
    from incline.criteria.table import Criterion, Limit
    from incline.record import Override, Trial
    from incline.result import Outcome

    Status = Literal["pass", "fail", "not recorded", "not applicable"]

__all__ = ["MEASURES", "VERIFY", "found_text", "judge", "limit_text"]

MEASURES: Mapping[str, Measure] = {**PROCEDURE, **CONDITION}
VERIFY = "verify against the current edition"
_OWN = ("reasoning", "setting")
"""Limits that belong to no rule set and judge under each."""
_DECIMALS = {"deg": 2, "cm": 1, "m": 3, "%": 2, "m/s": 1}


def found_text(check: Check) -> str:
    """What was found as printed, numbers with their unit; a dash when there is nothing."""
    if check.found is None:
        return "-"
    if isinstance(check.found, str):
        return check.found
    return f"{check.found:.{_DECIMALS.get(check.unit, 0)}f} {check.unit}".rstrip()


def limit_text(check: Check) -> str:
    """The limit as printed: with its unit, where it ends in a number."""
    return f"{check.limit} {check.unit}".rstrip() if check.limit[-1:].isdigit() else check.limit


def judge(trial: Trial, outcome: Outcome) -> tuple[Check, ...]:
    """Every criterion in the order of the table.

    The rule set that the trial names judges; where the table gives it no limit the IMO one does,
    unless the named set asks for the same thing in another row. What belongs to other rule sets is
    shown for information as not applicable. The trial's overrides go before everything.
    """
    named = rule_set_of(trial.settings.rule_set)
    overrides = {o.check: o for o in trial.settings.overrides}
    order = (named or BASE, BASE, *_OWN, *RULE_SETS)
    limits: dict[str, Limit] = {}
    for c in criteria():
        limit = c.limit_of(*order)
        if limit is None:  # the table's own test sees to that
            raise AssertionError(c.id)
        limits[c.id] = _overridden(limit, overrides.get(c.id))
    subject = Subject(trial, outcome, limits)
    answers = {c.id: MEASURES[c.id](subject) for c in criteria()}
    bench = _Bench(named, answers)
    return tuple(
        _check(c, limits[c.id], answers[c.id], bench, overrides.get(c.id)) for c in criteria()
    )


def _overridden(limit: Limit, override: Override | None) -> Limit:
    """A limit with the trial's own numbers, which hold in every case."""
    if override is None:
        return limit
    own = Range(override.low, override.high)
    return replace(limit, range=own, cases={}, words=override.limit)


@dataclass(frozen=True, slots=True)
class _Bench:
    """Who judges: the rule set named (None: IMO for want of one), among all answers."""

    named: str | None
    answers: Mapping[str, Answer]

    def why_not(self, criterion: Criterion, limit: Limit) -> str:
        """Why a criterion does not judge this trial; empty when it does."""
        name = self.named or BASE
        if name in limit.rules or set(_OWN) & set(limit.rules):
            return ""
        if BASE not in limit.rules:
            return f"For information: a limit of {_title(limit)}; the trial is judged by {name}."
        instead = next((c.id for c in criteria() if self._instead(c, criterion, name)), "")
        return f"For information: {name} judges this by {instead}." if instead else ""

    def _instead(self, other: Criterion, criterion: Criterion, name: str) -> bool:
        return (
            bool(criterion.group)
            and other.group == criterion.group
            and other.id != criterion.id
            and other.limit_of(name) is not None
            and not isinstance(self.answers[other.id], Inapplicable)
        )

    def remark(self, limit: Limit) -> str:
        """What must be said of a limit that judges though it was not asked for by name."""
        if self.named is None and BASE in limit.rules:
            return f"Judged by {BASE}: the trial names no rule set that is known here."
        if self.named not in (None, *limit.rules) and BASE in limit.rules:
            return f"Judged by {BASE}: the table has no limit of {self.named} for it."
        return ""


def _title(limit: Limit) -> str:
    names = {"class": "class practice", "US": "US practice"}
    return ", ".join(names.get(r, r) for r in limit.rules)


def _check(
    criterion: Criterion, limit: Limit, answer: Answer, bench: _Bench, override: Override | None
) -> Check:
    status, said = _verdict(limit, answer)
    notes = [f"The limit is from memory: {VERIFY}."] if "memory" in limit.evidence else []
    if override is not None:
        published = criterion.limit_of(*limit.rules) or limit
        notes = [
            f"The trial's own limit: {override.reason.rstrip('.')}.",
            f"Published: {_limit_text(published, answer)} ({published.source}).",
            *notes,
        ]
        if override.low is None and override.high is None:
            status, said = "not applicable", "The program does not judge it."
    else:
        barred = bench.why_not(criterion, limit)
        if barred:
            notes.append(f"{barred} {_if_it_did(status)}".strip())
            status = "not applicable"
        else:
            notes.append(bench.remark(limit))
    notes += [limit.note, said]
    return Check(
        id=criterion.id,
        title=criterion.title,
        status=status,
        found=_found(answer),
        limit=_limit_text(limit, answer),
        unit=criterion.unit,
        rule_set="trial" if override else limit.rules[0],
        source=f"{override.where.file}, {override.where.column}" if override else limit.source,
        edition="" if override else limit.edition,
        evidence="stated" if override else limit.evidence,
        note=" ".join(n for n in notes if n),
    )


def _if_it_did(status: Status) -> str:
    return {"pass": "It would pass.", "fail": "It would fail."}.get(status, "")


def _verdict(limit: Limit, answer: Answer) -> tuple[Status, str]:
    """The status by a limit, and what is to be said of it."""
    if isinstance(answer, Unrecorded):
        return "not recorded", _missing(answer.missing)
    if isinstance(answer, Inapplicable):
        return "not applicable", _sentence(answer.why)
    if isinstance(answer, Words):
        return "pass" if answer.ok else "fail", answer.note
    said = " ".join(n for n in (answer.note, _missing(answer.missing)) if n)
    if limit.range.is_open and not limit.cases:
        return "not applicable", answer.note
    if not _is_met(limit, answer):
        excused = answer.excuse
        return ("not applicable", _sentence(excused)) if excused else ("fail", said)
    return "not recorded" if answer.missing else "pass", said


def _is_met(limit: Limit, found: Found) -> bool:
    if limit.covers:
        ends = [value for value, _ in found.parts]
        top = limit.range.high
        return Range(high=limit.range.low).holds(min(ends)) and Range(low=top).holds(max(ends))
    return all(limit.in_case(case).holds(value) for value, case in found.parts)


def _missing(what: str) -> str:
    return f"Not recorded: {what}." if what else ""


def _sentence(text: str) -> str:
    return f"{text[:1].upper()}{text[1:]}."


def _found(answer: Answer) -> float | str | None:
    if isinstance(answer, Unrecorded):
        return None
    if isinstance(answer, Found) and not answer.text:
        return answer.parts[0][0] if answer.parts else None
    return answer.text or None


def _limit_text(limit: Limit, answer: Answer) -> str:
    """The limit that was applied, in words."""
    cases = {case for _, case in answer.parts} if isinstance(answer, Found) else set()
    case = next(iter(cases)) if len(cases) == 1 else ""
    if case in limit.cases:
        return f"{case}: {limit.cases[case]}"
    return limit.words or str(limit.range)
