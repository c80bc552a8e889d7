"""What a measure is given, and the ways in which it may answer."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass
from typing import TypeAlias

from incline.criteria.table import Limit
from incline.record import Trial
from incline.result import HeelPoint, Outcome

__all__ = ["Answer", "Found", "Inapplicable", "Measure", "Subject", "Unrecorded", "Words", "one"]


@dataclass(frozen=True, slots=True)
class Subject:
    """The trial, its outcome, and the limit in force or shown for each criterion."""

    trial: Trial
    outcome: Outcome
    limits: Mapping[str, Limit]

    def size(self, criterion: str) -> str:
        """The case of a limit that is easier on small vessels."""
        small = self.limits[criterion].numbers.get("small_length", 0.0)
        return "small vessel" if self.trial.vessel.lpp <= small else ""

    def counted(self) -> list[HeelPoint]:
        """The readings that count."""
        return [p for p in self.outcome.heel.points if not p.excluded]


@dataclass(frozen=True, slots=True)
class Found:
    """Values in the criterion's unit, each with the case of the limit that it is held against.

    ``text`` prints them where one number does not do. ``missing`` says what else should have been
    recorded; ``excuse`` why the criterion does not bind a trial that is outside it.
    """

    parts: tuple[tuple[float, str], ...]
    text: str = ""
    note: str = ""
    missing: str = ""
    excuse: str = ""


@dataclass(frozen=True, slots=True)
class Words:
    """An answer that is no number: what was found, and whether the criterion is met."""

    text: str
    ok: bool
    note: str = ""


@dataclass(frozen=True, slots=True)
class Unrecorded:
    """The records do not say it; ``missing`` is what would."""

    missing: str


@dataclass(frozen=True, slots=True)
class Inapplicable:
    """The criterion asks nothing of this trial, and why."""

    why: str
    text: str = ""


Answer: TypeAlias = Found | Words | Unrecorded | Inapplicable
Measure: TypeAlias = Callable[[Subject], Answer]


def one(value: float, case: str = "", *, text: str = "", note: str = "") -> Found:
    """A single value."""
    return Found(((float(value), case),), text, note)
