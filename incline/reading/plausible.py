"""Figures that no ship has: a slip of the unit, of the decimal point or of the origin.

The bounds are wide. They are there for figures of the wrong order, not to judge a design.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING, Protocol

from incline.reading.collect import BAD, quoted
from incline.units import DENSITY, LENGTH, MASS, QuantityError, factor, to_inside

if TYPE_CHECKING:
    from incline.record import Point, Vessel
    from incline.units import Quantity

__all__ = [
    "LIQUID", "PERSON", "SUSPENSION", "WATER", "Hull", "Range", "check", "check_vessel", "hull_of",
    "temperature_remark",
]  # fmt: skip

_UNITS: dict[Quantity, tuple[str, ...]] = {
    LENGTH: ("mm", "cm", "m", "ft", "in"),
    DENSITY: ("kg/m3", "t/m3", "lb/ft3"),
    MASS: ("kg", "t", "lb"),
}
"""Units that a number may have been meant in, the likeliest first."""
_US = ("ft", "in", "lb", "lb/ft3")
_TRIFLE = 0.02
"""Share of the largest likely value below which any small unit would fit."""
_BARE = {LENGTH: "ft", DENSITY: "t/m3", MASS: "t"}
"""Units to tell bounds in for feet and inches, and for relative densities."""


class _Place(Protocol):
    """A row of a table or a section of ``trial.toml``; ``whole`` when its cells are in place."""

    @property
    def whole(self) -> bool: ...

    def written(self, key: str, /) -> tuple[str, str]: ...

    def fault(self, key: str, code: str, found: str, expected: str, hint: str = "", /) -> None: ...


@dataclass(frozen=True, slots=True)
class Range:
    """Bounds in inside units, both allowed; ``likely`` bounds what a slip should lead back to."""

    what: str
    quantity: Quantity
    low: float
    high: float
    likely: tuple[float, float] | None = None
    code: str = "implausible"


WATER = Range("a density of water", DENSITY, 0.95, 1.08)
LIQUID = Range("a density of a liquid", DENSITY, 0.3, 3.0)
PERSON = Range("the mass of one person,", MASS, 0.02, 0.5)
SUSPENSION = Range("a length of a device", LENGTH, 0.3, 40.0)
_LENGTH = Range("a length of a ship", LENGTH, 2.0, 600.0)


def check(place: _Place, key: str, value: float | None, allowed: Range, hint: str = "") -> bool:
    """Whether ``value`` [inside units] may be; otherwise collect a defect.

    True also for None and BAD. ``hint`` takes the place of a guess at the unit.
    """
    if value is None or not (value < allowed.low or value > allowed.high) or not place.whole:
        return True
    text, unit = place.written(key)
    try:
        size = factor(unit, allowed.quantity)
        guess = _meant(value / size, unit, allowed)
    except QuantityError:  # feet and inches, or a relative density
        unit = _BARE[allowed.quantity]
        size, guess = factor(unit, allowed.quantity), ""
    low, high = (float(f"{bound / size:.4g}") + 0.0 for bound in (allowed.low, allowed.high))
    expected = f"{allowed.what} from {low:.12g} to {high:.12g} {unit}"
    place.fault(key, allowed.code, quoted(text), expected, hint or guess)
    return False


def _meant(number: float, unit: str, allowed: Range) -> str:
    """The units in which a number would be likely, two at most, as a hint."""
    low, high = allowed.likely or (allowed.low, allowed.high)
    fits = [
        other
        for other in _UNITS[allowed.quantity]
        if other != unit
        and low <= (value := to_inside(number, other, allowed.quantity)) <= high
        and abs(value) >= _TRIFLE * high
    ]
    if unit in _US or all(other in _US for other in fits):
        likeliest = fits[:2]
    else:
        likeliest = [other for other in fits if other not in _US][:2]
    return f"did you mean {' or '.join(likeliest)}?" if fits else ""


@dataclass(frozen=True, slots=True)
class Hull:
    """How large the vessel is [m]; BAD where not known, so that nothing is outside it.

    ``x_shift`` [m] is added to every x of the files. As `check` does, a method that looks at one
    figure says whether it may be.
    """

    lpp: float
    beam: float
    depth: float
    x_shift: float

    def place(
        self, row: _Place, centre: Point, keys: tuple[str, str, str] = ("x", "y", "z")
    ) -> None:
        """Check the centre of one thing."""
        self.x(row, keys[0], centre.x)
        self.y(row, keys[1], centre.y)
        self.z(row, keys[2], centre.z)

    def x(self, row: _Place, key: str, value: float) -> bool:
        """Check a position along the ship [m] from the after perpendicular."""
        return self._along(row, key, value, 0.25 * self.lpp, "x")

    def centre(self, row: _Place, key: str, value: float) -> None:
        """Check LCB or LCF [m] from the after perpendicular: within the length."""
        self._along(row, key, value, 0.0, key)

    def _along(self, row: _Place, key: str, value: float, beyond: float, what: str) -> bool:
        low, high = -beyond - self.x_shift, self.lpp + beyond - self.x_shift
        half = self.lpp / 2.0
        other = value - half if self.x_shift else value + half
        origin = "amidships" if self.x_shift else "the after perpendicular"
        hint = f"x counts from {origin}: check x_origin in trial.toml"
        if not 0.0 <= other <= self.lpp:
            hint = ""
        likely = (-self.x_shift, self.lpp - self.x_shift)
        allowed = Range(what, LENGTH, low, high, likely, "outside-vessel")
        return check(row, key, value - self.x_shift, allowed, hint)

    def y(self, row: _Place, key: str, value: float | None) -> bool:
        """Check a distance off the centreplane [m]."""
        likely = (-self.beam / 2.0, self.beam / 2.0)
        return check(row, key, value, self._range("y", -self.beam, self.beam, likely))

    def z(self, row: _Place, key: str, value: float | None) -> None:
        """Check a height above the baseline [m]."""
        high = max(self.lpp, 4.0 * self.depth)
        likely = (0.0, max(self.lpp / 2.0, 2.0 * self.depth))
        check(row, key, value, self._range("z", -self.depth, high, likely))

    def draft(self, row: _Place, key: str, value: float) -> None:
        """Check a draft [m] as read at the marks."""
        likely = (0.1 * self.depth, self.depth)
        check(row, key, value, self._range("a draft", 0.0, 2.0 * self.depth, likely))

    def _range(self, what: str, low: float, high: float, likely: tuple[float, float]) -> Range:
        return Range(what, LENGTH, low, high, likely, "outside-vessel")


def check_vessel(section: _Place, vessel: Vessel) -> bool:
    """Whether the principal dimensions can be those of a ship."""
    lpp = vessel.lpp
    sound = check(section, "lpp", lpp, _LENGTH)
    for key, value in (("beam", vessel.beam), ("depth", vessel.depth)):
        if value > lpp and sound:
            allowed = Range(f"a {key} up to the length,", LENGTH, 0.0, lpp, (0.03 * lpp, lpp))
            sound = check(section, key, value, allowed)
    return sound


def hull_of(vessel: Vessel, x_shift: float, *, known: bool) -> Hull:
    """The hull to check against; one that nothing is outside of unless all of it is ``known``."""
    if not known:
        return Hull(BAD, BAD, BAD, x_shift)
    return Hull(vessel.lpp, vessel.beam, vessel.depth, x_shift)


def temperature_remark(place: str, temperature: float | None) -> list[str]:
    """A remark on water [C] that would be ice or a hot bath."""
    if temperature is None or not (temperature < -3.0 or temperature > 40.0):
        return []
    return [
        f"The water at {place} is recorded as {temperature:.4g} C, outside -3 to 40 C: check the"
        " figure and its unit."
    ]
