"""The results and the inputs behind them: names, units, and numbers to the digits they deserve."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

from incline.report.show import MISSING, Kind, Show, signed
from incline.units import ANGLE, DENSITY, FRACTION, LENGTH, MASS, MOMENT, VOLUME, Quantity, factor

if TYPE_CHECKING:
    from incline.result import Budget, Estimate, Outcome, Simulated, Simulation

__all__ = [
    "RESULTS", "Quoted", "Unit", "budget_of", "count_of", "freedom", "interval", "percent",
    "significant", "simulated_of", "unit_of",
]  # fmt: skip

_NBSP = "\N{NO-BREAK SPACE}"


@dataclass(frozen=True, slots=True)
class Quoted:
    """How a result is printed: kind and least decimals of the value, finer kind of its u."""

    key: str
    name: str
    long: str
    kind: Kind
    fine: Kind
    least: int


RESULTS: tuple[Quoted, ...] = (
    Quoted("displacement", "displacement", "Lightship displacement", "mass", "mass", 2),
    Quoted("vcg", "KG", "KG of lightship, above baseline", "length", "reading", 3),
    Quoted("lcg", "LCG", "LCG of lightship, forward of AP", "length", "reading", 3),
    Quoted("tcg", "TCG", "TCG of lightship, + to starboard", "length", "reading", 3),
    Quoted("gm_fluid", "GM", "GM fluid, as measured", "length", "reading", 3),
)
"""In the order in which they are reported."""


def budget_of(outcome: Outcome, key: str) -> Budget | None:
    """The budget of one result."""
    return next((b for b in outcome.budgets if b.key == key), None)


def simulated_of(simulation: Simulation | None, key: str) -> Simulated | None:
    """What Monte Carlo found for one result."""
    found = () if simulation is None else simulation.results
    return next((s for s in found if s.key == key), None)


@dataclass(frozen=True, slots=True)
class Unit:
    """A unit's name as printed, and its size in inside units."""

    name: str
    size: float

    def amount(self, value: float) -> str:
        """A value (inside units) to three significant digits, with its unit."""
        return f"{significant(value / self.size)} {self.name}".strip()

    def per(self, below: Unit) -> Unit:
        """The unit over another one; a bare number over itself."""
        if below.name == self.name:
            name = ""
        elif below.name.startswith("1/("):
            name = f"{self.name}{_NBSP}{below.name[3:-1]}"
        elif "/" in below.name or _NBSP in below.name:
            name = f"{self.name}/({below.name})"
        else:
            name = f"{self.name}/{below.name}"
        return Unit(name, self.size / below.size)


_KINDS: dict[Quantity, Kind] = {
    LENGTH: "reading",
    MASS: "mass",
    MOMENT: "moment",
    VOLUME: "volume",
    DENSITY: "density",
}


def unit_of(show: Show, quantity: Quantity | None) -> Unit:
    """The unit in which an input's uncertainty is printed; None is a slope."""
    if quantity is None:
        return Unit(f"1/({show.unit('moment')})", 1.0 / show.scale("moment"))
    if quantity == FRACTION:
        return Unit("%", factor("%", FRACTION))
    if quantity == ANGLE:
        return Unit("deg", factor("deg", ANGLE))
    kind = _KINDS[quantity]
    return Unit(show.unit(kind), show.scale(kind))


def significant(value: float, digits: int = 3) -> str:
    """A number to some significant digits; powers of ten where zeros would crowd it."""
    if value == 0.0 or not math.isfinite(value):
        return f"{value:.0f}".lstrip("-")
    power = int(f"{value:.{digits - 1}e}".split("e")[1])
    if -4 <= power <= 4:
        return signed(f"{value:.{max(0, digits - 1 - power)}f}")
    return signed(f"{value:.{digits - 1}e}")


def freedom(found: Estimate) -> str:
    """Degrees of freedom, which are endless when an estimate with ``u`` names none."""
    if found.u is None:
        return MISSING
    if found.dof is None or math.isinf(found.dof):
        return "∞"
    return "> 1000" if found.dof > 1000.0 else f"{found.dof:.1f}"


def count_of(number: int) -> str:
    """A whole number, its thousands set apart."""
    return f"{number:,}".replace(",", _NBSP)


def percent(probability: float) -> str:
    """A probability; one too near to none or to certainty does not look like either."""
    if probability < 0.001:
        return f"less than 0.1{_NBSP}%"
    if probability > 0.999:
        return f"more than 99.9{_NBSP}%"
    return f"{100.0 * probability:.1f}{_NBSP}%"


def interval(show: Show, ends: tuple[float, float], kind: Kind, decimals: int) -> str:
    """Both ends of an interval, without the unit."""
    low, high = (show.number(v, kind, decimals) for v in ends)
    return f"{low} to {high}"
