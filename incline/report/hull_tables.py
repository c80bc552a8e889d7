"""What the hull is made of, and the layers of the water, as small tables."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from incline.report.document import Sheet, note
from incline.report.figures_hull import drawn_stations
from incline.report.tables import Column, grid

if TYPE_CHECKING:
    from incline.record import Offsets
    from incline.result import HullEntry

__all__ = ["bodies", "layers", "thinned"]


def thinned(offsets: Offsets) -> list[Any]:
    """Which sections are drawn, where that is not all of them."""
    steps = [(b.name, drawn_stations(b)[0]) for b in offsets.bodies]
    said = [f"every {_ordinal(n)} of {name}" for name, n in steps if n > 1]
    if not said:
        return []
    if not steps[1:]:
        return [note(f"Every {_ordinal(steps[0][1])} section is drawn, and the last.")]
    return [note(f"Sections drawn, with the last: {', '.join(said)}; all of other bodies.")]


def _ordinal(n: int) -> str:
    teen = n % 100 in (11, 12, 13)
    return f"{n}{'th' if teen else {1: 'st', 2: 'nd', 3: 'rd'}.get(n % 10, 'th')}"


def bodies(sheet: Sheet, offsets: Offsets) -> list[Any]:
    """The bodies that make up the hull; nothing for a single one."""
    if not offsets.bodies[1:]:
        return []
    show, length = sheet.show, sheet.show.unit("length")
    columns = (
        Column("body", 0.32, "left"),
        Column("kind", 0.14, "left"),
        Column(f"y [{length}]", 0.11),
        Column("mirrored", 0.11, "left"),
        Column("stations", 0.10),
        Column(f"x from [{length}]", 0.11),
        Column(f"x to [{length}]", 0.11),
    )
    rows = [
        (
            b.name,
            b.kind,
            show.number(b.y, "length"),
            "yes" if b.mirrored else "no",
            str(len(b.stations)),
            show.number(b.stations[0].x, "length"),
            show.number(b.stations[-1].x, "length"),
        )
        for b in offsets.bodies
    ]
    return [grid(columns, rows, sheet.width)]


def layers(sheet: Sheet, hull: HullEntry) -> list[Any]:
    """The layers of the water; nothing where it is taken as mixed."""
    if not hull.layers:
        return []
    show = sheet.show
    columns = (
        Column("layer", 0.20, "left"),
        Column(f"depth of its top [{show.unit('length')}]", 0.40),
        Column(f"density [{show.unit('density')}]", 0.40),
    )
    rows = [
        (str(n), show.number(top, "length"), show.number(density, "density"))
        for n, (top, density) in enumerate(hull.layers, start=1)
    ]
    return [
        grid(columns, rows, 0.6 * sheet.width),
        note("The density of the water printed elsewhere is the mean of the displaced water."),
    ]
