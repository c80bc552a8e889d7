"""The devices and the people at a test, from ``trial.toml``."""

from __future__ import annotations

from typing import TYPE_CHECKING

from incline.errors import Where
from incline.reading.collect import Sign
from incline.reading.plausible import PERSON, SUSPENSION, check
from incline.reading.tomlfile import FILE
from incline.reading.uncertainty import of_key, present
from incline.record import Device, Person, Point, Stated
from incline.units import ANGLE, FRACTION, LENGTH, MASS

if TYPE_CHECKING:
    from typing import Literal

    from incline.reading.plausible import Hull
    from incline.reading.tomlfile import Section

__all__ = ["LENGTH_KEYS", "read_device", "read_person"]

LENGTH_KEYS = {"pendulum": "length", "u-tube": "span", "inclinometer": ""}
"""The key that gives the length by which a device's readings are divided."""


def read_device(section: Section) -> Device:
    """A section ``[[devices]]``."""
    kind: Literal["pendulum", "u-tube", "inclinometer"] = section.choice(
        "kind", ("pendulum", "u-tube", "inclinometer")
    )
    known = "kind" not in section.failed
    keys = [k for k in ((LENGTH_KEYS[kind],) if known else LENGTH_KEYS.values()) if k]
    lengths = [section.maybe(k, LENGTH, Sign.POSITIVE) for k in keys]
    for key, length in zip(keys, lengths, strict=True):
        check(section, key, length, SUSPENSION)
    stated = [
        of_key(section, k, LENGTH, value, Sign.POSITIVE)
        for k, value in zip(keys, lengths, strict=True)
    ]
    device = Device(
        id=section.text("id", required=True),
        kind=kind,
        length=lengths[0] if lengths else None,
        place=section.text("place"),
        calibration=section.text("calibration"),
        where=Where(FILE, 0, section.path),
        resolution=_resolution(section, kind, known=known),
        stated=present(
            length=stated[0] if stated else None,
            scale=_scale(section) if kind == "inclinometer" or not known else None,
        ),
        damping=section.text("damping"),
        read_by=section.text("read_by"),
    )
    section.close()
    return device


def _resolution(section: Section, kind: str, *, known: bool) -> float | None:
    """The step of a device's readings: a length [m], or an angle [rad]."""
    if not known:
        section.value("resolution")  # a key that is known, though not what it should hold
        return None
    quantity = ANGLE if kind == "inclinometer" else LENGTH
    return section.maybe("resolution", quantity, Sign.POSITIVE)


def _scale(section: Section) -> Stated | None:
    """The uncertainty of an inclinometer's scale, a fraction."""
    return of_key(section, "scale", FRACTION, 1.0, Sign.POSITIVE)


def read_person(section: Section, hull: Hull) -> Person:
    """A section ``[[people]]``; mass and centre all or none."""
    name = section.text("name", required=True)
    role = section.text("role", required=True)
    aboard = [k for k in ("mass", "x", "y", "z") if section.value(k) is not None]
    mass = x = y = z = centre = None
    if aboard:
        mass = section.need("mass", MASS, Sign.POSITIVE)
        check(section, "mass", mass, PERSON)
        x = section.need("x", LENGTH)
        y = section.need("y", LENGTH, transverse=True)
        z = section.need("z", LENGTH)
        centre = Point(x + hull.x_shift, y, z)
        hull.place(section, centre)
    stated = present(
        mass=of_key(section, "mass", MASS, mass, Sign.POSITIVE),
        x=of_key(section, "x", LENGTH, x),
        y=of_key(section, "y", LENGTH, y),
        z=of_key(section, "z", LENGTH, z),
    )
    section.close()
    where = Where(FILE, 0, section.path)
    return Person(name=name, role=role, mass=mass, centre=centre, where=where, stated=stated)
