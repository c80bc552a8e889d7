"""A fair chine hull of 19 m x 6 m at ten stations, and slips in its table of offsets."""

from __future__ import annotations

__all__ = ["Sections", "launch", "written"]

Point = tuple[float, float]
Sections = list[tuple[float, list[Point]]]
"""The x of each station, and half breadth and height of its points."""

_TOML = """\
[vessel]
name = "Test Launch"
number = "TL-1"
lpp = "19 m"
beam = "6 m"
depth = "2.9 m"

[axes]
x_origin = "after perpendicular"

[output]
units = "metric"

[offsets]
volume = "extreme"
"""


def _section(x: float) -> list[Point]:
    """Keel, garboard knuckle, chine and deck edge; a transom aft, a narrow face at the stem."""
    aft, fore = max(8.0 - x, 0.0) / 8.0, max(x - 8.0, 0.0) / 11.0
    plan = 1.0 - 0.06 * aft**2 - 0.97 * fore**2.5
    keel = 0.6 * fore**3
    points = [
        (0.0, keel),
        (1.5 * plan, 0.412 + 0.9 * keel),
        (2.68 * plan, 1.1 + 0.5 * fore**2),
        (3.0 * plan, 2.9 + 0.3 * fore**2),
    ]
    return [(round(y, 2), round(z, 3)) for y, z in points]


def launch() -> Sections:
    return [(19.0 * k / 9.0, _section(19.0 * k / 9.0)) for k in range(10)]


def written(sections: Sections) -> dict[str, str]:
    """trial.toml and offsets.csv of a hull; stations are numbered from 0 aft."""
    rows = [f"{n},{x:.3f},{y:g},{z:g}" for n, (x, points) in enumerate(sections) for y, z in points]
    head = "station,x [m],half breadth [m],height [m]"
    return {"trial.toml": _TOML, "offsets.csv": "\n".join([head, *rows])}
