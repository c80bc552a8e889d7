"""What a report says besides the measurements: its issue, drawings, deviations, other lightships.

Every text may be empty: not recorded.
"""

from __future__ import annotations

import datetime
from dataclasses import dataclass
from typing import Literal

from incline.errors import Where

__all__ = [
    "Anomaly", "Deviation", "Document", "Known", "OtherLightship", "Papers", "Predicted",
    "Revision", "Signature",
]  # fmt: skip


@dataclass(frozen=True, slots=True, kw_only=True)
class Revision:
    """One issue of the report."""

    number: str
    date: datetime.date
    description: str
    by: str = ""


@dataclass(frozen=True, slots=True, kw_only=True)
class Document:
    """A drawing or other paper that was used, and what for."""

    title: str
    number: str = ""
    revision: str = ""
    date: str = ""
    use: str = ""


@dataclass(frozen=True, slots=True, kw_only=True)
class Deviation:
    """Where the test departed from its rules or procedure, why, and who allowed it."""

    what: str
    reason: str
    allowed_by: str = ""

    @property
    def is_none(self) -> bool:
        """Whether it only says that there was none."""
        return self.what.casefold() == "none"


@dataclass(frozen=True, slots=True, kw_only=True)
class Anomaly:
    """Something that the readings or the findings show, and the surveyor's explanation."""

    what: str
    explanation: str


@dataclass(frozen=True, slots=True, kw_only=True)
class Signature:
    """Who is to sign, and for which part."""

    part: Literal["tested", "calculated", "checked", "witnessed", "accepted"]
    name: str
    organisation: str = ""


@dataclass(frozen=True, slots=True, kw_only=True)
class Predicted:
    """What was worked out before any weight moved, for the largest moment.

    GM and least freeboard [m], heel [rad]; None: not recorded.
    """

    gm: float | None = None
    heel: float | None = None
    freeboard: float | None = None
    by: str = ""


@dataclass(frozen=True, slots=True)
class Known:
    """A quantity of another lightship with its standard uncertainty and degrees of freedom."""

    value: float | None
    u: float | None = None
    dof: float | None = None


@dataclass(frozen=True, slots=True, kw_only=True)
class OtherLightship:
    """A lightship to compare with: predicted, an earlier one of this ship, or a sister's.

    Displacement [t], VCG, LCG from the after perpendicular, TCG to starboard, length between
    perpendiculars [m]. ``situation`` is the id of the limits that judge the difference, empty for
    none; ``source`` the file it was read from, empty where ``trial.toml`` gives the figures.
    """

    kind: Literal["predicted", "earlier", "sister"]
    name: str
    displacement: Known
    vcg: Known
    lcg: Known
    tcg: Known
    lpp: float | None = None
    situation: str = ""
    source: str = ""
    where: Where


@dataclass(frozen=True, slots=True, kw_only=True)
class Papers:
    """All of it. ``number`` is that of the issue; a draft may have one too."""

    status: Literal["draft", "issued"] = "draft"
    number: str = ""
    author: str = ""
    submitted_to: str = ""
    revisions: tuple[Revision, ...] = ()
    documents: tuple[Document, ...] = ()
    deviations: tuple[Deviation, ...] = ()
    anomalies: tuple[Anomaly, ...] = ()
    signatures: tuple[Signature, ...] = ()
    predicted: Predicted = Predicted()
    others: tuple[OtherLightship, ...] = ()
