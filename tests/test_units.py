"""Units and the ways in which people write quantities."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

import pytest
from hypothesis import example, given
from hypothesis import strategies as st

from incline.units import (
    ANGLE,
    AREA,
    DENSITY,
    FRACTION,
    LENGTH,
    MASS,
    MASS_PER_LENGTH,
    MOMENT,
    MOMENT_PER_LENGTH,
    SECOND_MOMENT,
    SYSTEMS,
    TEMPERATURE,
    VOLUME,
    Quantity,
    QuantityError,
    factor,
    parse_number,
    parse_quantity,
    parse_transverse,
    to_inside,
)

if TYPE_CHECKING:
    from collections.abc import Callable

ULP = 4e-16  # a product of a few exact factors is right to a few units in the last place

FOOT = 0.3048  # m, exact: agreement on the international yard and pound, 1959
POUND = 0.45359237e-3  # t, exact: the same agreement
LONG_TON = 2240 * POUND


@pytest.mark.parametrize(
    ("unit", "quantity", "size"),
    [
        ("ft", LENGTH, FOOT),
        ("in", LENGTH, FOOT / 12),
        ("lb", MASS, POUND),
        ("LT", MASS, 1.0160469088),
        ("LT", MASS, LONG_TON),
        ("kg", MASS, 0.001),
        ("ft2", AREA, FOOT**2),
        ("ft3", VOLUME, FOOT**3),
        ("ft^3", VOLUME, FOOT**3),
        ("m³", VOLUME, 1.0),
        ("l", VOLUME, 0.001),
        ("ft4", SECOND_MOMENT, FOOT**4),
        ("t m", MOMENT, 1.0),
        ("t-m", MOMENT, 1.0),
        ("t·m", MOMENT, 1.0),
        ("LT ft", MOMENT, LONG_TON * FOOT),
        ("LT-ft", MOMENT, LONG_TON * FOOT),
        ("ft-LT", MOMENT, LONG_TON * FOOT),
        ("kg/m3", DENSITY, 0.001),
        ("g/cm3", DENSITY, 1.0),
        ("lb/ft3", DENSITY, POUND / FOOT**3),
        ("LT/ft3", DENSITY, LONG_TON / FOOT**3),
        ("t/cm", MASS_PER_LENGTH, 100.0),
        ("LT/in", MASS_PER_LENGTH, LONG_TON / (FOOT / 12)),
        ("t m/cm", MOMENT_PER_LENGTH, 100.0),
        ("LT ft/in", MOMENT_PER_LENGTH, 12 * LONG_TON),
        ("deg", ANGLE, math.pi / 180),
        ("°", ANGLE, math.pi / 180),
        ("%", FRACTION, 0.01),
        ("1", FRACTION, 1.0),
    ],
)
def test_size_of_a_unit(unit: str, quantity: Quantity, size: float) -> None:
    assert factor(unit, quantity) == pytest.approx(size, rel=ULP)


@pytest.mark.parametrize(
    ("unit", "quantity"),
    [
        ("m2", LENGTH),
        ("t", LENGTH),
        ("m", MASS),
        ("t/m", MOMENT),
        ("t m m", MOMENT),
        ("t m", DENSITY),
        ("t/m/m2", DENSITY),
        ("t//m3", DENSITY),
        ("", MASS),
        ("m5", LENGTH),
        ("deg", FRACTION),
        ("K", TEMPERATURE),
        ("%", ANGLE),
    ],
)
def test_unit_of_another_kind_is_refused(unit: str, quantity: Quantity) -> None:
    with pytest.raises(QuantityError, match=f"a unit of {quantity.name}") as caught:
        factor(unit, quantity)
    assert caught.value.code == "unit-wrong"


@pytest.mark.parametrize("unit", ["tons", "long ton", "short tons", "T", "T m"])
def test_tons_of_an_unknown_kind_are_not_guessed(unit: str) -> None:
    with pytest.raises(QuantityError) as caught:
        factor(unit, MOMENT if " m" in unit else MASS)
    assert "LT for long tons" in caught.value.hint


def test_temperature_has_an_offset() -> None:
    assert to_inside(32.0, "F", TEMPERATURE) == pytest.approx(0.0, abs=1e-12)  # water freezes
    assert to_inside(212.0, "°F", TEMPERATURE) == pytest.approx(100.0, rel=1e-12)  # and boils
    assert to_inside(11.5, "C", TEMPERATURE) == 11.5


@pytest.mark.parametrize(
    ("text", "value"),
    [
        ("12.5", 12.5),
        (" -12.5 ", -12.5),
        ("−12.5", -12.5),
        ("+3", 3.0),
        (".5", 0.5),
        ("5.", 5.0),
        ("1.5e3", 1500.0),
        ("2E-3", 0.002),
        ("3 1/2", 3.5),
        ("3-1/2", 3.5),
        ("-3 1/2", -3.5),
        ("15/16", 0.9375),
        ("3½", 3.5),
        ("⅝", 0.625),
    ],
)
def test_numbers_as_written(text: str, value: float) -> None:
    assert parse_number(text) == value  # every one is exact in binary, or the same literal


@pytest.mark.parametrize(
    ("text", "code"),
    [
        ("", "number-unreadable"),
        ("1,5", "number-unreadable"),
        ("1,234.5", "number-unreadable"),
        ("1 234", "number-unreadable"),
        ("1.2.3", "number-unreadable"),
        ("--1", "number-unreadable"),
        ("3/0", "number-unreadable"),
        ("1_000", "number-unreadable"),
        ("0x10", "number-unreadable"),
        ("5-Aug", "number-unreadable"),
        ("nan", "number-not-finite"),
        ("-inf", "number-not-finite"),
        ("#DIV/0!", "number-not-finite"),
        ("1e400", "number-not-finite"),
        ("1e13", "number-not-finite"),
        ("9" * 5000, "number-not-finite"),
        ("9" * 5000 + "/" + "9" * 5000, "number-not-finite"),
    ],
)
def test_what_is_no_number(text: str, code: str) -> None:
    with pytest.raises(QuantityError, match=r".") as caught:
        parse_number(text)
    assert caught.value.code == code


def test_a_decimal_comma_is_read_only_where_the_file_has_one() -> None:
    assert parse_number("12,5", decimal_comma=True) == 12.5
    with pytest.raises(QuantityError, match="12,5") as caught:
        parse_number("12.5", decimal_comma=True)
    assert "decimal commas" in caught.value.hint


@pytest.mark.parametrize(
    ("text", "inches"),
    [
        ("8 ft", 96),
        ("8'", 96),
        ("8.5 ft", 102),
        ("8 ft 3 in", 99),
        ("8ft3in", 99),
        ("8 ft 3 1/2 in", 99.5),
        ("8'-3 1/2\"", 99.5),
        ("8'-3-1/2\"", 99.5),
        ("8' 3.5\"", 99.5),
        ("8′ 3½″", 99.5),
        ("8' 3''", 99),
        ("-2 ft 3 in", -27),
        ("-2'-3\"", -27),
        ('6 1/2"', 6.5),
        ("6 in", 6),
        ("-6 in", -6),
        ("0'-11 15/16\"", 11.9375),
    ],
)
@pytest.mark.parametrize("unit", ["m", "in", None])
def test_feet_and_inches_in_any_column(text: str, inches: float, unit: str | None) -> None:
    assert parse_quantity(text, LENGTH, unit) == pytest.approx(inches * 0.0254, rel=ULP)


@pytest.mark.parametrize(
    "text", ["8'-12\"", "8.5 ft 3 in", "8'-", "8' 3", "8'--3\"", "'", '"', "ft"]
)
def test_feet_and_inches_that_make_no_sense(text: str) -> None:
    with pytest.raises(QuantityError, match=r".") as caught:
        parse_quantity(text, LENGTH, "ft")
    assert caught.value.code == "number-unreadable"


def test_inches_may_have_the_decimal_comma_of_their_file() -> None:
    value = parse_quantity("8'-3,5\"", LENGTH, "m", decimal_comma=True)
    assert value == pytest.approx(99.5 * 0.0254, rel=ULP)


@pytest.mark.parametrize(
    ("text", "quantity", "value"),
    [
        ("4.205 m", LENGTH, 4.205),
        ("1e3 mm", LENGTH, 1.0),
        ("12.5e-3m", LENGTH, 0.0125),
        ("0.6 %", FRACTION, 0.006),
        ("1.025 t/m3", DENSITY, 1.025),
        ("3 1/2 in", LENGTH, 0.0889),
        ("2.5 LT", MASS, 2.5 * LONG_TON),
        ("- 4 m", LENGTH, -4.0),
    ],
)
def test_quantity_with_its_own_unit(text: str, quantity: Quantity, value: float) -> None:
    assert parse_quantity(text, quantity) == pytest.approx(value, rel=ULP)


@pytest.mark.parametrize(
    ("text", "code"),
    [
        ("4.2", "unit-missing"),
        ("4.2 t", "unit-wrong"),
        ("4,2 m", "number-unreadable"),
        ("four m", "number-unreadable"),
        ("nan m", "number-unreadable"),
        ("", "number-unreadable"),
    ],
)
def test_quantity_that_cannot_be_read(text: str, code: str) -> None:
    with pytest.raises(QuantityError, match=r".") as caught:
        parse_quantity(text, LENGTH)
    assert caught.value.code == code


@pytest.mark.parametrize(
    ("text", "value"),
    [
        ("4.50 P", -4.5),
        (" 4.50 p ", -4.5),
        ("4.50P", -4.5),
        ("4.50 S", 4.5),
        ("4.50", 4.5),
        ("-4.50", -4.5),
        ("14 ft 9 in P", -14.75 * FOOT),
        ("14'-9\" S", 14.75 * FOOT),
    ],
)
def test_port_is_negative(text: str, value: float) -> None:
    assert parse_transverse(text, LENGTH, "m") == pytest.approx(value, rel=ULP)


@pytest.mark.parametrize("text", ["-4.50 P", "+4.50 S", "−4.50 S", "-2 ft 3 in P"])
def test_a_side_and_a_sign_contradict(text: str) -> None:
    with pytest.raises(QuantityError, match="not both") as caught:
        parse_transverse(text, LENGTH, "m")
    assert caught.value.code == "side-and-sign"


@given(st.floats(-1e6, 1e6), st.sampled_from(["m", "cm", "mm", "ft", "in"]))
def test_written_and_read_again(value: float, unit: str) -> None:
    inside = to_inside(value, unit, LENGTH)
    assert parse_quantity(f"{value!r} {unit}", LENGTH) == inside
    assert parse_quantity(repr(value), LENGTH, unit) == inside
    comma = repr(value).replace(".", ",")
    assert parse_quantity(comma, LENGTH, unit, decimal_comma=True) == inside


@given(st.floats(0, 1e6), st.sampled_from("PS"))
def test_sides_mirror(value: float, side: str) -> None:
    found = parse_transverse(f"{value!r} {side}", LENGTH, "m")
    assert found == (-value if side == "P" else value)


@given(st.integers(0, 5000), st.integers(0, 12 * 16 - 1), st.booleans())
def test_any_feet_and_sixteenths(feet: int, sixteenths: int, negative: bool) -> None:
    whole, part = divmod(sixteenths, 16)
    fraction = f" {part}/16" if part else ""
    sign = "-" if negative else ""
    expected = (feet * 12 + sixteenths / 16) * 0.0254 * (-1 if negative else 1)
    for text in (f"{sign}{feet} ft {whole}{fraction} in", f"{sign}{feet}'-{whole}{fraction}\""):
        assert parse_quantity(text, LENGTH, "m") == pytest.approx(expected, rel=1e-15, abs=1e-15)


@given(st.text(max_size=30))
@example("1" * 400 + "'")
@example("1/" + "0" * 20 + "1")
def test_any_text_is_a_finite_number_or_refused(text: str) -> None:
    codes = {
        "number-unreadable",
        "number-not-finite",
        "unit-missing",
        "unit-wrong",
        "side-and-sign",
    }
    for parse in (parse_quantity, parse_transverse):
        for unit in ("m", None):
            found = _value_or_code(parse, text, unit)
            assert found in codes if isinstance(found, str) else math.isfinite(found)


def _value_or_code(parse: Callable[..., float], text: str, unit: str | None) -> float | str:
    try:
        return parse(text, LENGTH, unit)
    except QuantityError as error:
        return error.code


def test_shown_values_have_no_negative_zero() -> None:
    us = SYSTEMS["us"]
    assert us.show(-0.0001, LENGTH, us.length, 2) == "0.00"
    assert us.show(-FOOT, LENGTH, us.length, 2) == "-1.00"
    assert us.show(1.0160469088, MASS, us.mass, 3) == "1.000"


@pytest.mark.parametrize("unit", ["m", None])
@pytest.mark.parametrize(
    "text",
    ["7' 0 3/8", "6-8-4", r"6 ft 4 7\8 in", "7' 0 3/ in", "6 ft. 4 in", "6 4 ft", "7 ft 12 in"],
)
def test_slips_in_feet_and_inches_are_shown_how_to_write_them(text: str, unit: str | None) -> None:
    with pytest.raises(QuantityError, match="8 ft 3 1/2 in or 8'-3 1/2\"") as caught:
        parse_quantity(text, LENGTH, unit)
    assert caught.value.code == "number-unreadable"
