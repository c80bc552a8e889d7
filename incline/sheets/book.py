"""What every sheet needs: the trial as far as it is known, its shifts and devices, its numbers."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

from incline.errors import Where
from incline.reading.tomlfile import FILE
from incline.record import Device

if TYPE_CHECKING:
    import datetime

    from incline.reading.partial import Partial
    from incline.record import Trial
    from incline.report.show import Kind, Show
    from incline.sheets.prediction import Prediction
    from incline.sheets.sequence import ShiftRow

__all__ = ["MARGIN", "Book", "blank_device", "section"]

MARGIN = 36.0
"""Margin on every side of the paper [pt]."""


def section(name: str) -> Where:
    """The place of a section of ``trial.toml``."""
    return Where(FILE, 0, name)


def blank_device() -> Device:
    """A device of which nothing is known."""
    return Device(id="", kind="pendulum", length=None, where=section("devices"))


@dataclass(frozen=True, slots=True, kw_only=True)
class Book:
    """The sheets of one test. ``page`` is the paper upright [pt]; ``printed`` the day of print."""

    partial: Partial
    show: Show
    page: tuple[float, float]
    printed: datetime.date
    version: str
    devices: tuple[Device, ...]
    rows: tuple[ShiftRow, ...]
    prediction: Prediction | None

    @property
    def trial(self) -> Trial:
        """The trial as far as it could be read."""
        return self.partial.trial

    @property
    def width(self) -> float:
        """Width between the margins of upright paper [pt]."""
        return self.page[0] - 2.0 * MARGIN

    @property
    def broad(self) -> float:
        """Width between the margins of paper lying on its side [pt]."""
        return self.page[1] - 2.0 * MARGIN

    def number(
        self,
        where: Where,
        column: str,
        value: float | None,
        kind: Kind,
        decimals: int | None = None,
    ) -> str:
        """A number in the trial's units; blank when it is not known."""
        if value is None or math.isnan(value) or not self.partial.knows(where, column):
            return ""
        return self.show.number(value, kind, decimals)

    def full(self, where: Where, column: str, value: float | None, kind: Kind) -> str:
        """A number and its unit; blank when it is not known."""
        found = self.number(where, column, value, kind)
        return f"{found}\N{NO-BREAK SPACE}{self.show.unit(kind)}" if found else ""

    def word(self, where: Where, column: str, value: str) -> str:
        """A word chosen from a list; blank when it is not known."""
        return value if self.partial.knows(where, column) else ""

    def along(self, where: Where, column: str, x: float | None) -> str:
        """A position along the ship, from where the trial counts x."""
        if x is not None and self.trial.settings.x_origin == "amidships":
            x -= self.trial.vessel.lpp / 2.0
        return self.number(where, column, x, "length")

    def across(self, where: Where, column: str, y: float | None) -> str:
        """A transverse position with its side: ``2.100 P``."""
        found = self.number(where, column, None if y is None else abs(y), "length")
        side = self.show.side(y) if found else ""
        return f"{found}\N{NO-BREAK SPACE}{side[:1].upper()}" if side else found

    def axes(self) -> str:
        """From where positions count, and in which units, in a sentence."""
        origin = "from __________________"
        if self.partial.knows(section("axes"), "x_origin"):
            origin = {"after perpendicular": "from the after perpendicular"}.get(
                self.trial.settings.x_origin, "from amidships"
            )
        length = self.show.unit("length")
        return (
            f"x\N{NO-BREAK SPACE}[{length}] {origin}, positive forward;"
            f" y\N{NO-BREAK SPACE}[{length}] from the centreplane, P or S;"
            f" z\N{NO-BREAK SPACE}[{length}] up from the moulded baseline."
        )

    def moment(self, row: ShiftRow) -> str:
        """The moment at a shift, to starboard positive; blank when it is not known."""
        if row.moment is not None:
            return self.show.number(row.moment, "moment")
        if row.steps is None:
            return ""
        return f"{row.steps:+d}".replace("-", "−") if row.steps else "0"
