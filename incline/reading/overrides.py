"""The sections ``[[overrides]]`` of ``trial.toml``: limits of the trial's own."""

from __future__ import annotations

from typing import TYPE_CHECKING

from incline.criteria.table import criteria
from incline.reading.collect import nearest, quoted
from incline.reading.tomlfile import shown
from incline.record import Override
from incline.units import ANGLE, FRACTION, LENGTH, SPEED, QuantityError, factor, parse_number

if TYPE_CHECKING:
    from collections.abc import Iterable

    from incline.criteria.table import Criterion
    from incline.reading.tomlfile import Section
    from incline.units import Quantity

__all__ = ["read_overrides"]

_UNITS: dict[str, Quantity] = {
    "deg": ANGLE, "cm": LENGTH, "m": LENGTH, "%": FRACTION, "m/s": SPEED,
}  # fmt: skip


def read_overrides(sections: Iterable[Section]) -> tuple[Override, ...]:
    """The limits that the trial puts in place of published ones; each criterion once."""
    found: list[Override] = []
    for section in sections:
        criterion = _criterion(section)
        low, high = (_bound(section, key, criterion) for key in ("low", "high"))
        words = section.text("limit")
        if low is None and high is None and not words and not section.failed:
            section.missing("limit", "low or high with its unit, or the limit in words")
        if low is not None and high is not None and low > high:
            section.fault(
                "low", "value-wrong", quoted(shown(section.value("low"))), "a low below the high"
            )
        override = Override(
            check=criterion.id if criterion else "",
            low=low,
            high=high,
            limit=words,
            reason=section.text("reason", required=True),
            where=section.where("check"),
            allowed_by=section.text("allowed_by"),
        )
        section.close()
        if criterion and any(o.check == criterion.id for o in found):
            section.fault("check", "id-twice", quoted(criterion.id), "each criterion once")
        found.append(override)
    return tuple(found)


def _criterion(section: Section) -> Criterion | None:
    """The criterion that is meant; None after a defect."""
    name = section.text("check", required=True)
    for criterion in criteria():
        if criterion.id == name.casefold():
            return criterion
    if name:
        ids = [c.id for c in criteria()]
        hint = nearest(name, ids)
        section.fault("check", "value-wrong", quoted(name), "the id of a criterion", hint)
    return None


def _bound(section: Section, key: str, criterion: Criterion | None) -> float | None:
    """A bound in the criterion's unit; None when absent, BAD after a defect."""
    value = section.value(key)
    if value is None or criterion is None:
        return None
    if not criterion.has_numbers:
        expected = f"a limit in words: {criterion.id} is not a number"
        section.fault(key, "value-wrong", quoted(shown(value)), expected)
        return None
    quantity = _UNITS.get(criterion.unit)
    if quantity is not None:
        inside = section.maybe(key, quantity)
        return None if inside is None else inside / factor(criterion.unit, quantity)
    return _number(section, key, criterion.unit)


def _number(section: Section, key: str, unit: str) -> float | None:
    """A bare number or a text of one, which may end in the unit (``"10 days"``)."""
    found = section.value(key)
    if isinstance(found, bool) or not isinstance(found, int | float | str):
        section.fault(key, "value-wrong", quoted(shown(found)), "a number")
        return None
    text = shown(found)
    try:
        return parse_number(text.removesuffix(unit) if unit else text)
    except QuantityError as error:
        section.fault(key, error.code, quoted(text), error.expected, error.hint)
        return None
