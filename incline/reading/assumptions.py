"""The sections ``[uncertainty]`` and ``[[correlations]]`` of ``trial.toml``."""

from __future__ import annotations

from typing import TYPE_CHECKING

from incline.defaults import DEFAULTS
from incline.reading.collect import Sign, quoted
from incline.reading.tomlfile import shown
from incline.record import Correlation
from incline.units import FRACTION

if TYPE_CHECKING:
    from collections.abc import Iterable

    from incline.reading.tomlfile import Section

__all__ = ["read_assumed", "read_correlations"]

_SHARED = "_shared"


def read_assumed(section: Section) -> dict[str, float]:
    """What the trial assumes in place of the program's own uncertainties, by name."""
    found: dict[str, float] = {}
    for name, default in DEFAULTS.items():
        if name.endswith(_SHARED):
            value = _coefficient(section, name)
        else:
            value = section.maybe(name, default.quantity, Sign.NOT_NEGATIVE)
            if value is not None and default.relative and value >= 1.0:
                text, expected = section.text(name), "an uncertainty below 100 %"
                section.fault(name, "uncertainty-too-large", quoted(text), expected)
        if value is not None:
            found[name] = value
    section.close()
    return found


def _coefficient(section: Section, name: str) -> float | None:
    """A correlation as a bare number or a percentage."""
    if not isinstance(section.value(name), str):
        return section.number(name, 0, 1)
    value = section.maybe(name, FRACTION, Sign.NOT_NEGATIVE)
    if value is not None and value > 1.0:
        section.fault(name, "value-wrong", quoted(section.text(name)), "100 % at most")
    return value


def read_correlations(sections: Iterable[Section]) -> tuple[Correlation, ...]:
    """The correlations between two inputs each; a pair stands in one of them only."""
    found: list[Correlation] = []
    for section in sections:
        names = _pair(section)
        r = section.number("r", -1, 1)
        if r is None:
            section.missing("r", "a number from -1 to 1")
        section.close()
        if names is None:
            continue
        if any({c.a, c.b} == set(names) for c in found):
            expected = "each pair of inputs once"
            section.fault("between", "id-twice", " and ".join(map(quoted, names)), expected)
        found.append(Correlation(*names, r or 0.0, section.where("between")))
    return tuple(found)


def _pair(section: Section) -> tuple[str, str] | None:
    """The names of two different inputs; None after a defect."""
    value = section.value("between")
    expected = "the names of two inputs, as the budget of uncertainty prints them"
    if value is None:
        section.missing("between", expected)
        return None
    if isinstance(value, list) and all(isinstance(v, str) for v in value):
        names = [" ".join(v.split()) for v in value]
        if len(names) == 2 and all(names) and names[0] != names[1]:
            return names[0], names[1]
    section.fault("between", "value-wrong", quoted(shown(value)), expected)
    return None
