"""Uncertainties stated beside quantities, in columns of a table or keys of ``trial.toml``.

A standard uncertainty counts as it is. A tolerance is the half-width of a rectangular distribution
and a resolution its full width, so that the standard uncertainty is the one over the root of 3 and
the other over the root of 12 (JCGM 100:2008, 4.3.7 and F.2.2.1).
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING, Protocol

from incline.reading.cells import Column
from incline.reading.collect import Sign, quoted
from incline.reading.tomlfile import shown
from incline.record import Stated
from incline.units import FRACTION

if TYPE_CHECKING:
    from collections.abc import Iterable, Mapping, Sequence
    from typing import Literal

    from incline.reading.cells import Row
    from incline.reading.tomlfile import Section
    from incline.units import Quantity

__all__ = ["PERCENT", "combined", "of_key", "of_row", "present", "uncertainty_columns", "written"]

PERCENT = "%"
_FORMS: Mapping[str, tuple[float, Literal["normal", "rectangular"]]] = {
    "u": (1.0, "normal"),
    "tolerance": (1.0 / math.sqrt(3.0), "rectangular"),
    "resolution": (1.0 / math.sqrt(12.0), "rectangular"),
}
"""What is written -> standard uncertainty as a share of it, and shape of the distribution."""


class _Place(Protocol):
    """A row of a table or a section of ``trial.toml``."""

    def fault(self, column: str, code: str, found: str, expected: str, /) -> None: ...


@dataclass(frozen=True, slots=True)
class _Written:
    """An uncertainty as written at ``name``: in inside units, or ``relative`` to its value."""

    name: str
    form: str
    text: str
    amount: float
    relative: bool


def uncertainty_columns(columns: Iterable[Column]) -> tuple[Column, ...]:
    """The columns that may stand beside others: ``u mass``, ``tolerance mass`` ..."""
    return tuple(
        Column(f"{form} {c.name}", c.quantity, sign=Sign.NOT_NEGATIVE, of=c)
        for c in columns
        if c.stated
        for form in _FORMS
    )


def written(row: Row, *columns: str) -> list[str]:
    """The columns with an uncertainty of one of ``columns`` in this row."""
    return [name for c in columns for form in _FORMS if row.raw(name := f"{form} {c}")]


def of_row(
    row: Row, *columns: str, computed: Mapping[str, float] | None = None
) -> dict[str, Stated]:
    """The uncertainties that a row states of the quantities in ``columns``, in inside units.

    They are relative to the value as written, or to the value in ``computed``.
    """
    values = computed or {}
    found: dict[str, Stated] = {}
    for column in columns:
        stated = _of_cell(row, column, values.get(column))
        if stated is not None:
            found[column.replace(" ", "_")] = stated
    return found


def _of_cell(row: Row, column: str, computed: float | None) -> Stated | None:
    said: list[_Written] = []
    sign, told = Sign.ANY, column in row.sheet.absent
    for form in _FORMS:
        name = f"{form} {column}"
        amount = row.maybe(name)
        if amount is None:
            continue
        placed = row.sheet.placed[name]
        said.append(_Written(name, form, row.raw(name), amount, placed.unit == PERCENT))
        if placed.column.of is not None:
            sign = placed.column.of.sign
            told = told or placed.column.of.required
    value = row.maybe(column) if computed is None else computed
    if value is None and told:  # that the quantity is missing has been told already
        return None
    return _judged(row, said, column, value, sign)


def of_key(
    section: Section,
    key: str,
    quantity: Quantity,
    value: float | None,
    sign: str = Sign.ANY,
    *,
    share: bool = True,
) -> Stated | None:
    """The uncertainty of ``key`` that a section states: ``u_length``, ``tolerance_length`` ...

    With ``share`` it may be a percentage of ``value``.
    """
    said: list[_Written] = []
    for form in _FORMS:
        name = f"{form}_{key}"
        text = section.value(name)
        relative = share and isinstance(text, str) and text.rstrip().endswith(PERCENT)
        amount = section.maybe(name, FRACTION if relative else quantity, Sign.NOT_NEGATIVE)
        if amount is not None:
            said.append(_Written(name, form, shown(text), amount, relative))
    return _judged(section, said, key, value, sign)


def _judged(
    place: _Place, said: Sequence[_Written], what: str, value: float | None, sign: str
) -> Stated | None:
    """The one uncertainty said of a value; None when there is none, or after a defect."""
    if not said:
        return None
    one = said[0]
    if len(said) > 1:
        found = f"{quoted(said[1].text)} beside {one.name}"
        place.fault(said[1].name, "uncertainty-twice", found, f"one uncertainty of {what}")
        return None
    if value is None:
        expected = f"nothing here where there is no {what}"
        place.fault(one.name, "value-wrong", quoted(one.text), expected)
        return None
    factor, shape = _FORMS[one.form]
    u = one.amount * factor * (abs(value) if one.relative else 1.0)
    if sign != Sign.ANY and 0.0 < value <= u:
        expected = f"an uncertainty smaller than the {what} itself"
        place.fault(one.name, "uncertainty-too-large", quoted(one.text), expected)
    return Stated(u, shape)


def combined(parts: Iterable[Stated]) -> Stated | None:
    """The uncertainty of a sum from those of its independent parts; None without parts."""
    some = tuple(parts)
    if len(some) < 2:
        return some[0] if some else None
    return Stated(math.hypot(*(p.u for p in some)), "normal")


def present(**stated: Stated | None) -> dict[str, Stated]:
    """The uncertainties that there are."""
    return {key: s for key, s in stated.items() if s is not None}
