"""Values of the calculation in the units in which they are printed."""

from __future__ import annotations

import math
from dataclasses import dataclass, replace
from typing import TYPE_CHECKING

from incline.report.arithmetic import Value, Whole
from incline.report.digits import natural

if TYPE_CHECKING:
    from collections.abc import Iterable

    from incline.report.arithmetic import Term
    from incline.report.show import Kind, Show

__all__ = ["Units"]

_NBSP = "\N{NO-BREAK SPACE}"
_LEAST: dict[Kind, tuple[int, int]] = {
    "length": (3, 3),
    "reading": (1, 2),
    "mass": (3, 3),
    "moment": (3, 2),
    "volume": (2, 1),
    "density": (4, 3),
}
"""Fewest decimals, metric and US."""
_FINEST = 6
"""Most decimals in which a recorded number is looked for as it was written."""


@dataclass(frozen=True, slots=True)
class Units:
    """Makes values of inside numbers (m, t, tangents) for one unit system."""

    show: Show

    def of(
        self, kind: Kind, inside: float, place: str, symbol: str = "", least: int | None = None
    ) -> Value:
        """A value of one of the printed kinds, with its unit."""
        fewest = self._least(kind) if least is None else least
        unit = self.show.unit(kind)
        return Value(inside / self.show.scale(kind), place, symbol, unit, fewest)

    def recorded(
        self, kind: Kind, inside: float, place: str, symbol: str = "", among: Iterable[float] = ()
    ) -> Value:
        """A value as it was written down: with the decimals that print it, and ``among``, exactly.

        Numbers written in another unit than the printed one have endless decimals.
        """
        scale, fewest = self.show.scale(kind), self._least(kind)
        needed = max(natural(v / scale, fewest, _FINEST) for v in (inside, *among))
        return self.of(kind, inside, place, symbol, needed)

    def bare(
        self, kind: Kind, inside: float, place: str, symbol: str = "", least: int | None = None
    ) -> Value:
        """The same without its unit, for a column that has it in its heading."""
        return replace(self.of(kind, inside, place, symbol, least), unit="")

    def _least(self, kind: Kind) -> int:
        return _LEAST[kind][self.show.system.name == "us"]

    def ratio(self, number: float, place: str, symbol: str = "", least: int = 6) -> Value:
        """A number without unit, such as a tangent."""
        return Value(number, place, symbol, "", least)

    def power_of_length(
        self, inside: float, power: int, place: str, symbol: str = "", least: int = 3
    ) -> Value:
        """An area, a second moment of area, a number, or one over a length."""
        unit = self.show.system.length
        name = {-1: f"/{unit}", 0: ""}.get(power, f"{unit}{'⁰¹²³⁴'[power]}")
        return Value(inside / self.show.scale("length") ** power, place, symbol, name, least)

    def slope(self, inside: float, place: str, symbol: str) -> Value:
        """Tangent per moment, its power of ten set apart."""
        amount = inside * self.show.scale("moment")
        power = math.floor(math.log10(abs(amount))) if amount else 0
        unit = f"/({self.show.unit('moment')})"
        return Value(amount, place, symbol, unit, 5, power)

    @property
    def weight_of_volume(self) -> int:
        """Volume times density over mass: 2240 pounds to the long ton, or 1."""
        show = self.show
        return round(show.scale("mass") / (show.scale("volume") * show.scale("density")))

    @property
    def readings_in_length(self) -> int:
        """Units of readings in one unit of length: 1000 or 12."""
        return round(self.show.scale("length") / self.show.scale("reading"))

    def as_mass(self, term: Term) -> Term:
        """A volume times a density as a mass."""
        many = self.weight_of_volume
        return term if many == 1 else term / Whole(many)
