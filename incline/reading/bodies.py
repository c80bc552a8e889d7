"""The sections ``[offsets]`` and ``[[bodies]]`` of ``trial.toml``."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

from incline.reading.collect import BAD, Sign, quoted
from incline.reading.volume import read_allowance, read_stated
from incline.record import Body
from incline.units import LENGTH

if TYPE_CHECKING:
    from typing import Literal

    from incline.reading.plausible import Hull
    from incline.reading.tomlfile import Document, Section
    from incline.record import Statements

__all__ = ["ONE_HULL", "HullPlan", "read_plan"]

ONE_HULL = "hull"
"""Name of the body where ``trial.toml`` names none."""


@dataclass(frozen=True, slots=True, kw_only=True)
class HullPlan:
    """What ``trial.toml`` says of the offsets; the bodies have no stations yet.

    ``named`` when the bodies stand there, so that each row must name its own. ``known`` is False
    when they, or their names, could not be read. ``said`` are the sections that speak of offsets.
    """

    bodies: tuple[Body, ...]
    named: bool
    known: bool
    allowance: float | None
    stated: Statements
    said: tuple[str, ...]


def read_plan(document: Document, hull: Hull, *, needed: bool) -> HullPlan:
    """Both sections; what ``[offsets]`` must say is missed only when ``needed``."""
    section = document.section("offsets")
    allowance, stated = read_allowance(section, needed=needed), read_stated(section)
    section.close()
    sections = document.sections("bodies")
    bodies = tuple(_read_body(s, hull) for s in sections)
    named = document.has("bodies")
    names = {b.name.casefold() for b in bodies if b.name}
    if bodies and all(b.kind == "appendage" for b in bodies):
        found, expected = quoted("appendage"), "one body of the kind hull at least"
        sections[0].fault("kind", "value-wrong", found, expected)
    filled = section.value("volume") is not None or section.value("allowance") is not None
    return HullPlan(
        bodies=bodies or (Body(name=ONE_HULL, stations=()),),
        named=named,
        known=document.readable and named == bool(bodies) and len(names) == len(bodies),
        allowance=allowance,
        stated=stated,
        said=(
            *(["[offsets]"] if filled or stated else []),
            *(["[[bodies]]"] if named else []),
        ),
    )


def _read_body(section: Section, hull: Hull) -> Body:
    """A section ``[[bodies]]``."""
    kind: Literal["hull", "appendage"] = section.choice("kind", ("hull", "appendage"), "hull")
    y = section.maybe("y", LENGTH, Sign.ANY, transverse=True)
    if not hull.y(section, "y", y):
        y = BAD
    mirrored = section.flag("mirrored")
    if mirrored and not y:
        expected = "a body off the centreplane, with its y, where it has a mirror image"
        section.fault("mirrored", "value-wrong", quoted("true"), expected)
    body = Body(
        name=section.text("name", required=True),
        kind=kind,
        y=0.0 if y is None else y,
        mirrored=mirrored,
        stations=(),
    )
    section.close()
    return body
