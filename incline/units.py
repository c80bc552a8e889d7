"""Units: reading a quantity as a person writes it, and showing one in the trial's units.

Inside the program everything is metres, tonnes, radians, seconds and degrees Celsius. The factors
are those of ``scipy.constants`` (international foot and pound, long ton of 2240 lb).
"""

from __future__ import annotations

import math
import re
from dataclasses import dataclass
from functools import cache
from typing import Literal

__all__ = [
    "ANGLE", "AREA", "DENSITY", "FRACTION", "LENGTH", "MASS", "MASS_PER_LENGTH", "MOMENT",
    "MOMENT_PER_LENGTH", "SECOND_MOMENT", "SPEED", "SYSTEMS", "TEMPERATURE", "TIME", "VOLUME",
    "Quantity", "QuantityError", "UnitSystem", "factor", "parse_number", "parse_quantity",
    "parse_transverse", "to_inside",
]  # fmt: skip

SystemName = Literal["metric", "us"]


class QuantityError(ValueError):
    """A number or unit that cannot be read; carries a defect code and what was expected."""

    def __init__(self, code: str, expected: str, hint: str = "") -> None:
        super().__init__(expected)
        self.code = code
        self.expected = expected
        self.hint = hint


@dataclass(frozen=True, slots=True)
class Quantity:
    """A kind of quantity: powers of mass and length, and units a user may choose among."""

    name: str
    mass: int
    length: int
    units: str


LENGTH = Quantity("length", 0, 1, "m, cm, mm, ft or in")
MASS = Quantity("mass", 1, 0, "t, kg, LT or lb")
AREA = Quantity("area", 0, 2, "m2 or ft2")
VOLUME = Quantity("volume", 0, 3, "m3 or ft3")
SECOND_MOMENT = Quantity("second moment of area", 0, 4, "m4 or ft4")
MOMENT = Quantity("moment", 1, 1, "t m or LT ft")
DENSITY = Quantity("density", 1, -3, "t/m3, kg/m3, LT/ft3 or lb/ft3")
MASS_PER_LENGTH = Quantity("mass per immersion", 1, -1, "t/cm or LT/in")
MOMENT_PER_LENGTH = Quantity("moment to change trim", 1, 0, "t m/cm or LT ft/in")
ANGLE = Quantity("angle", 0, 0, "deg or rad")
FRACTION = Quantity("fraction", 0, 0, "% or 1")
TEMPERATURE = Quantity("temperature", 0, 0, "C or F")
TIME = Quantity("time", 0, 0, "s or min")
SPEED = Quantity("speed", 0, 0, "m/s or kn")

_SUPERSCRIPTS = str.maketrans("²³⁴", "234")
_TOKEN = re.compile(r"([A-Za-z]+)\^?([1-4]?)")
_LARGEST = 1e12
"""No quantity of a ship comes near this in any unit: a larger number is a slip of the keyboard."""


@cache
def _atoms() -> dict[str, tuple[float, int, int]]:
    """Unit name -> (size in tonnes and metres, power of mass, power of length)."""
    from scipy import constants as c

    tonne = c.kilo  # scipy counts mass in kilograms
    return {
        "m": (1.0, 0, 1),
        "cm": (c.centi, 0, 1),
        "mm": (c.milli, 0, 1),
        "ft": (c.foot, 0, 1),
        "in": (c.inch, 0, 1),
        "l": (c.liter, 0, 3),
        "t": (1.0, 1, 0),
        "kg": (1.0 / tonne, 1, 0),
        "g": (c.gram / tonne, 1, 0),
        "lt": (c.long_ton / tonne, 1, 0),
        "lb": (c.pound / tonne, 1, 0),
    }


def _product(text: str) -> tuple[float, int, int] | None:
    """Size and powers of a product of units such as ``t m`` or ``ft-LT``; None if unreadable."""
    size, mass, length = 1.0, 0, 0
    for token in re.split(r"\s*[·*.\-]\s*|\s+", text.strip()):
        match = _TOKEN.fullmatch(token)
        # A capital T alone may mean tonnes, long tons or short tons: it is not guessed.
        atom = _atoms().get(match[1].lower()) if match and match[1] != "T" else None
        if match is None or atom is None:
            return None
        power = int(match[2] or 1)
        size *= atom[0] ** power
        mass += atom[1] * power
        length += atom[2] * power
    return size, mass, length


def _special(unit: str, quantity: Quantity) -> float | None:
    if quantity is ANGLE:
        return {"deg": math.pi / 180.0, "°": math.pi / 180.0, "rad": 1.0}.get(unit.lower())
    if quantity is FRACTION:
        return {"%": 0.01, "1": 1.0}.get(unit)
    if quantity in (TIME, SPEED):
        from scipy.constants import knot, minute

        sizes = {"s": 1.0, "min": minute} if quantity is TIME else {"m/s": 1.0, "kn": knot}
        return sizes.get(unit.lower())
    return {"c": 1.0, "°c": 1.0, "f": 1.0, "°f": 1.0}.get(unit.lower())


def factor(unit: str, quantity: Quantity) -> float:
    """Size of ``unit`` in inside units (for temperature 1, see `to_inside`).

    Raises QuantityError when the unit is unknown or of another kind.
    """
    unit = unit.strip().translate(_SUPERSCRIPTS)
    found: float | None = None
    if quantity in (ANGLE, FRACTION, SPEED, TEMPERATURE, TIME):
        found = _special(unit, quantity)
    else:
        parts = [_product(p) for p in unit.split("/")]
        if len(parts) <= 2 and all(parts):
            size, mass, length = parts[0] or (0.0, 0, 0)
            for below in parts[1:]:
                if below:
                    size, mass, length = size / below[0], mass - below[1], length - below[2]
            if (mass, length) == (quantity.mass, quantity.length):
                found = size
    if found is None:
        vague = re.search(r"ton|\bT\b", unit) is not None
        hint = "write t for tonnes, LT for long tons" if vague else ""
        raise QuantityError(
            "unit-wrong", f"a unit of {quantity.name}, such as {quantity.units}", hint
        )
    return found


def to_inside(value: float, unit: str, quantity: Quantity) -> float:
    """Value in inside units: m, t, rad, degrees Celsius and their products."""
    size = factor(unit, quantity)
    if quantity is TEMPERATURE and unit.strip().lower().endswith("f"):
        from scipy.constants import convert_temperature

        return float(convert_temperature(value, "F", "C"))
    return value * size


_DECIMAL = r"(?:\d+(?:\.\d*)?|\.\d+)(?:[eE][+-]?\d+)?"
_FRACTION = r"(?:\d+(?:\s+|\s*-\s*))?\d+\s*/\s*[1-9]\d*"
_NUMBER = re.compile(
    rf"(?P<sign>[+-]?)\s*(?:(?P<decimal>{_DECIMAL})"
    r"|(?:(?P<whole>\d+)(?:\s+|\s*-\s*))?(?P<top>\d+)\s*/\s*(?P<bottom>[1-9]\d*))"
)
_WITH_UNIT = re.compile(
    rf"(?P<number>[+-]?\s*(?:{_FRACTION}|{_DECIMAL}))\s*(?P<unit>[A-Za-z%°][^,;]*)?"
)
_FEET = re.compile(
    r"(?P<sign>[+-]?)\s*(?:(?P<feet>\d[\d.]*)\s*(?:ft|'))?"
    r"(?:(?P<join>\s*-?\s*)(?P<inches>[\d.][\d./\s\-]*?)\s*(?:in|\"))?",
    re.IGNORECASE,
)
_LIKE_FEET = re.compile(
    rf"(?![+-]?\s*{_DECIMAL}\s*[a-z]*$)"
    r"(?:.*['\"\\].*|.*\d\s*(?:ft|in)\b.*|\d+(?:\s*-\s*\d+)+)",
    re.IGNORECASE,
)
_FEET_SHOWN = "feet and inches such as 8 ft 3 1/2 in or 8'-3 1/2\""
_NOT_FINITE = frozenset({"nan", "inf", "infinity", "#n/a", "#num!", "#value!", "#div/0!", "#ref!"})


def _plain(text: str) -> str:
    """Text with the typographic marks of spreadsheets and word processors made plain.

    Minus signs, primes, quotation marks, odd spaces, and fractions in one character.
    """
    for marks, mark in (("−–", "-"), ("’′‘", "'"), ("”″“", '"')):
        for odd in marks:
            text = text.replace(odd, mark)
    for odd, fraction in zip(
        "½¼¾⅛⅜⅝⅞", ["1/2", "1/4", "3/4", "1/8", "3/8", "5/8", "7/8"], strict=True
    ):
        text = text.replace(odd, f" {fraction}")
    return " ".join(text.split()).replace("''", '"')


def parse_number(text: str, decimal_comma: bool = False) -> float:
    """A finite number: ``12.5``, ``3 1/2``; with a decimal comma where the file uses one."""
    found = _plain(text)
    expected = "a number such as 12,5" if decimal_comma else "a number such as 12.5"
    if found.lower().lstrip("+-") in _NOT_FINITE:
        raise QuantityError("number-not-finite", "a finite number")
    if decimal_comma:
        if "." in found:
            raise QuantityError(
                "number-unreadable", expected, "a file separated by semicolons has decimal commas"
            )
        found = found.replace(",", ".")
    match = _NUMBER.fullmatch(found)
    if match is None:
        hint = "decimals have a point here, thousands no mark" if "," in found else ""
        raise QuantityError("number-unreadable", expected, hint)
    if match["decimal"]:
        value = float(match["decimal"])
    else:
        value = float(match["whole"] or 0) + float(match["top"]) / float(match["bottom"])
    if not value <= _LARGEST:
        raise QuantityError("number-not-finite", "a finite number of the size of ships' quantities")
    return -value if match["sign"] == "-" else value


def _feet_and_inches(text: str, decimal_comma: bool) -> float | None:
    """Length [m] of a text in feet, feet and inches, or inches; None when it is not one."""
    match = _FEET.fullmatch(text.replace(",", ".") if decimal_comma else text)
    if match is None or not (match["feet"] or match["inches"]):
        return None
    if match["inches"] and not match["feet"] and match["join"].strip():
        return None
    try:
        feet, inches = (parse_number(match[part] or "0") for part in ("feet", "inches"))
    except QuantityError as error:
        expected = _FEET_SHOWN if error.code == "number-unreadable" else error.expected
        raise QuantityError(error.code, expected) from error
    if match["feet"] and match["inches"] and not (inches < 12.0 and feet.is_integer()):
        raise QuantityError("number-unreadable", f"whole {_FEET_SHOWN}, with inches below 12")
    value = feet * factor("ft", LENGTH) + inches * factor("in", LENGTH)
    return -value if match["sign"] == "-" else value


def parse_quantity(
    text: str, quantity: Quantity, unit: str | None = None, decimal_comma: bool = False
) -> float:
    """A quantity as written, in inside units.

    ``unit`` is the unit of the column; without one the text must carry its own (``4.205 m``).
    Lengths may also be feet and inches (``8 ft 3 1/2 in``, ``8'-3 1/2"``, ``6"``) in any column.
    Raises QuantityError with code ``unit-missing``, ``unit-wrong``, ``number-unreadable`` or
    ``number-not-finite``.
    """
    plain = _plain(text)
    if quantity is LENGTH:
        feet = _feet_and_inches(plain, decimal_comma)
        if feet is not None:
            return feet
        if _LIKE_FEET.fullmatch(plain):
            raise QuantityError("number-unreadable", _FEET_SHOWN)
    if unit is not None:
        return to_inside(parse_number(plain, decimal_comma), unit, quantity)
    match = _WITH_UNIT.fullmatch(plain)
    if match is None:
        raise QuantityError(
            "number-unreadable",
            f"a {quantity.name} with its unit, {quantity.units}",
            "decimals have a point here" if "," in plain else "",
        )
    if match["unit"] is None:
        raise QuantityError("unit-missing", f"a number and a unit, such as {quantity.units}")
    return to_inside(parse_number(match["number"]), match["unit"], quantity)


_SIDE = re.compile(r"(?P<rest>.*?)\s*(?P<side>[PpSs])")


def parse_transverse(
    text: str, quantity: Quantity, unit: str | None = None, decimal_comma: bool = False
) -> float:
    """A transverse position or reading, positive to starboard; ``4.50 P`` is port, ``4.50 S`` not.

    Raises QuantityError as `parse_quantity` does, and ``side-and-sign`` for ``-4.50 P``.
    """
    match = _SIDE.fullmatch(_plain(text))
    if match is None:
        return parse_quantity(text, quantity, unit, decimal_comma)
    value = parse_quantity(match["rest"], quantity, unit, decimal_comma)
    if match["rest"].startswith(("+", "-")):
        raise QuantityError("side-and-sign", "either a side letter or a sign, not both")
    return -value if match["side"] in "Pp" else value


@dataclass(frozen=True, slots=True)
class UnitSystem:
    """Units in which results are shown, and the paper they are printed on."""

    name: SystemName
    length: str
    reading: str
    mass: str
    moment: str
    volume: str
    density: str
    second_moment: str
    page: Literal["A4", "Letter"]

    def show(self, value: float, quantity: Quantity, unit: str, decimals: int) -> str:
        """``value`` (inside units) as a number in ``unit``; no negative zero."""
        text = f"{value / factor(unit, quantity):.{decimals}f}"
        return text.lstrip("-") if float(text) == 0.0 else text


SYSTEMS: dict[str, UnitSystem] = {
    "metric": UnitSystem("metric", "m", "mm", "t", "t m", "m3", "t/m3", "m4", "A4"),
    "us": UnitSystem("us", "ft", "in", "LT", "LT ft", "ft3", "lb/ft3", "ft4", "Letter"),
}
