"""Numbers as printed: in the units of the trial, with the decimals that they deserve."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING, Literal

from incline.units import (
    ANGLE,
    DENSITY,
    LENGTH,
    MASS,
    MOMENT,
    SYSTEMS,
    VOLUME,
    Quantity,
    UnitSystem,
    factor,
)

if TYPE_CHECKING:
    from collections.abc import Iterable

    from incline.record import Reading
    from incline.result import Estimate, Reduction

__all__ = [
    "MISSING",
    "NOT_DETERMINED",
    "NOT_RECORDED",
    "Kind",
    "RawKind",
    "Show",
    "pretty",
    "signed",
]

Kind = Literal["length", "reading", "mass", "moment", "volume", "density"]
RawKind = Literal["length", "angle", "tangent"]

_NBSP = "\N{NO-BREAK SPACE}"
MISSING = "–"
NOT_DETERMINED = "not determined"
NOT_RECORDED = "not recorded"

_KINDS: dict[Kind, tuple[Quantity, int, int]] = {
    "length": (LENGTH, 3, 3),
    "reading": (LENGTH, 1, 2),
    "mass": (MASS, 3, 3),
    "moment": (MOMENT, 3, 2),
    "volume": (VOLUME, 2, 1),
    "density": (DENSITY, 4, 3),
}
"""Quantity, and decimals in the metric and the US system."""


_FINEST = 6
"""Most decimals of a reading as written: a 64th of an inch has six."""
_MOST = 4
"""Most decimals of a result, however small its uncertainty."""


def pretty(unit: str) -> str:
    """A unit with raised powers, held on one line."""
    return unit.replace(" ", _NBSP).replace("2", "²").replace("3", "³").replace("4", "⁴")


def signed(text: str) -> str:
    """A formatted number with a typographic minus."""
    return text.replace("-", "−")


def _significant(u: float) -> int:
    """Decimals that show a standard uncertainty with two significant digits."""
    if not (u > 0.0 and math.isfinite(u)):
        return 0
    return min(_MOST, max(0, 1 - int(f"{u:.1e}".split("e")[1])))


@dataclass(frozen=True, slots=True)
class Show:
    """Formats inside values (m, t, rad, tangent) in one unit system."""

    system: UnitSystem

    @classmethod
    def of(cls, reduction: Reduction) -> Show:
        """The printer for the units that the trial asks for."""
        return cls(SYSTEMS[reduction.trial.settings.units])

    def unit(self, kind: Kind) -> str:
        """The unit's name as printed."""
        return pretty(getattr(self.system, kind))

    def scale(self, kind: Kind) -> float:
        """Inside units in one shown unit."""
        return factor(getattr(self.system, kind), _KINDS[kind][0])

    def number(self, value: float | None, kind: Kind, decimals: int | None = None) -> str:
        """The number alone; a dash for None."""
        if value is None:
            return MISSING
        quantity, metric, us = _KINDS[kind]
        if decimals is None:
            decimals = metric if self.system.name == "metric" else us
        return signed(self.system.show(value, quantity, getattr(self.system, kind), decimals))

    def full(self, value: float | None, kind: Kind, decimals: int | None = None) -> str:
        """Number and unit; ``not recorded`` for None."""
        if value is None:
            return NOT_RECORDED
        return f"{self.number(value, kind, decimals)}{_NBSP}{self.unit(kind)}"

    def mass_by_length(self, value: float | None, along: float | None) -> str:
        """A first moment of mass; a dash unless both are known."""
        return MISSING if value is None or along is None else self.number(value * along, "moment")

    def degrees(self, value: float | None, decimals: int = 2) -> str:
        """An angle [rad] in degrees, without the sign °."""
        return MISSING if value is None else self.plain(value / factor("deg", ANGLE), decimals)

    def plain(self, value: float | None, decimals: int) -> str:
        """A number without unit; no negative zero."""
        if value is None:
            return MISSING
        text = f"{value:.{decimals}f}"
        return signed(text.lstrip("-") if float(text) == 0.0 else text)

    def tangent(self, value: float | None) -> str:
        """A tangent of heel."""
        return self.plain(value, 5)

    def side(self, y: float | None) -> str:
        """On which side a transverse position lies."""
        if y is None or self.number(abs(y), "length").strip("0.") == "":
            return ""
        return "starboard" if y > 0.0 else "port"

    def temperature(self, celsius: float | None) -> str:
        """A water temperature with its unit."""
        if celsius is None:
            return NOT_RECORDED
        if self.system.name == "metric":
            return f"{self.plain(celsius, 1)} °C"
        from scipy.constants import convert_temperature

        return f"{self.plain(float(convert_temperature(celsius, 'C', 'F')), 1)} °F"

    def decimals(self, u: float | None, kind: Kind, least: int) -> int:
        """Decimals that show ``u`` with two significant digits, not less than ``least``."""
        return least if u is None else max(least, _significant(u / self.scale(kind)))

    def estimate(self, found: Estimate, kind: Kind, least: int) -> tuple[str, str, str]:
        """Value, standard and expanded uncertainty, to the decimals of the uncertainty.

        At least ``least`` decimals; a dash for what is not known.
        """
        decimals = self.decimals(found.u, kind, least)
        value = self.number(found.value, kind, decimals)
        u, wide = (self._spread(v, kind, decimals) for v in (found.u, found.U))
        return (NOT_DETERMINED if found.value is None else value), u, wide

    def _spread(self, u: float | None, kind: Kind, decimals: int) -> str:
        """An uncertainty; one too small for the decimals does not look like none."""
        text = self.number(u, kind, decimals)
        small = u is not None and u > 0.0 and decimals > 0 and not text.strip("0.")
        return f"< {10.0**-decimals:.{decimals}f}" if small else text

    def raw(self, value: float, quantity: RawKind, decimals: int) -> str:
        """One reading value without its unit: in the unit of readings, degrees, or a tangent."""
        if quantity == "length":
            return self.number(value, "reading", decimals)
        return self.degrees(value, decimals) if quantity == "angle" else self.plain(value, decimals)

    def raw_unit(self, quantity: RawKind) -> str:
        """The unit of `raw`."""
        return {"length": self.unit("reading"), "angle": "deg", "tangent": "tan"}[quantity]

    def raw_decimals(self, readings: Iterable[Reading]) -> dict[RawKind, int]:
        """Fewest decimals that print every value as it was written down.

        Values written in another unit than the printed one have endless decimals; they get three.
        """
        size = {"length": self.scale("reading"), "angle": factor("deg", ANGLE), "tangent": 1.0}
        needed: dict[RawKind, int] = {"length": 1, "angle": 1, "tangent": 1}
        foreign: set[RawKind] = set()
        for reading in readings:
            for value in reading.values:
                shown = value / size[reading.quantity]
                text = f"{shown:.{_FINEST}f}"
                if abs(float(text) - shown) > 1e-9 * max(1.0, abs(shown)):
                    foreign.add(reading.quantity)
                digits = len(text.rstrip("0").split(".")[1])
                needed[reading.quantity] = max(needed[reading.quantity], digits)
        return needed | dict.fromkeys(foreign, 3)
