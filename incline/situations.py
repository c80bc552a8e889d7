"""The situations and limits of ``comparison.toml``, which comes with the program."""

from __future__ import annotations

import itertools
import tomllib
from dataclasses import dataclass
from functools import cache
from importlib.resources import files
from typing import Any, Literal

from incline.errors import InclineError

__all__ = ["Limit", "Situation", "situation_named", "situations"]


@dataclass(frozen=True, slots=True, kw_only=True)
class Limit:
    """The largest difference allowed in one quantity.

    ``percent_at`` holds (length [m], percent), straight between the points and level outside them.
    Percent are of the old lightship (displacement, vcg, weight changes) or of the length (lcg).
    ``follows`` is what exceeding it leads to; ``evidence`` is read, reported or memory.
    """

    quantity: Literal["displacement", "lcg", "vcg", "weight changes"]
    percent_at: tuple[tuple[float, float], ...]
    follows: str
    source: str
    edition: str
    evidence: Literal["read", "reported", "memory"]

    @property
    def by_length(self) -> bool:
        """Whether the limit depends on the ship's length."""
        return len(self.percent_at) > 1

    def percent(self, length: float | None) -> float | None:
        """The limit [%] for a ship of ``length`` [m]; None when that is needed and not known."""
        points = self.percent_at
        if not self.by_length:
            return points[0][1]
        if length is None:
            return None
        for (low, at_low), (high, at_high) in itertools.pairwise(points):
            if length < high:
                share = max((length - low) / (high - low), 0.0)
                return at_low + share * (at_high - at_low)
        return points[-1][1]


@dataclass(frozen=True, slots=True, kw_only=True)
class Situation:
    """Why two lightships are compared. ``sister``: the old one is a lead ship's."""

    id: str
    title: str
    rule_set: str
    sister: bool
    note: str
    limits: tuple[Limit, ...]


@cache
def situations() -> tuple[Situation, ...]:
    """All situations, in the order of the file."""
    text = files("incline").joinpath("comparison.toml").read_text(encoding="utf-8")
    return tuple(
        Situation(**{**entry, "limits": tuple(map(_limit, entry["limits"]))})
        for entry in tomllib.loads(text)["situations"]
    )


def _limit(entry: dict[str, Any]) -> Limit:
    points = entry.pop("percent_at", None) or [[0.0, entry.pop("percent")]]
    return Limit(percent_at=tuple((float(a), float(b)) for a, b in points), **entry)


def situation_named(name: str) -> Situation:
    """The situation with an id, whatever its case; InclineError naming the ids otherwise."""
    for situation in situations():
        if situation.id == name.strip().casefold():
            return situation
    known = ", ".join(s.id for s in situations())
    raise InclineError(f"no situation {name!r}; there are {known}")
