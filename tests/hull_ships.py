"""Ships of closed form to test with, and their tables of offsets.

Ends, stems and knuckles differ on purpose: vertical ends, transoms, stems that the waterline leaves
between two stations, chines below, at and above the water.
"""

from __future__ import annotations

import itertools
from collections.abc import Iterator

import numpy as np
from hull_forms import Along, Arc, Form, Ship, Straight
from numpy.polynomial import Polynomial

NONE = Polynomial([0.0])


def const(value: float) -> Polynomial:
    return Polynomial([value])


def beyond(at: float, scale: float, power: int) -> Along:
    """Zero up to ``at`` and then scale (x - at)^power."""
    return lambda x: scale * np.maximum(x - at, 0.0) ** power


def plus(*parts: Along) -> Along:
    return lambda x: sum(p(x) for p in parts)  # type: ignore[return-value]


def times(part: Along, factor: float) -> Along:
    return lambda x: factor * part(x)


def panels(*lines: tuple[Along, Along]) -> tuple[Straight, ...]:
    """Straight parts from line to line, each given by half-breadth and height."""
    return tuple(Straight(*a, *b) for a, b in itertools.pairwise(lines))


def one(name: str, lpp: float, beam: float, depth: float, draft: float, vcg: float, form: Form) -> Ship:  # fmt: skip
    return Ship(name, lpp, beam, depth, (form,), draft, vcg)


CORNERS = ("keel", "chine", "deck edge")

BOX = one("box", 60.0, 12.0, 6.0, 3.0, 4.2, Form(
    "hull", (0.0, 60.0),
    panels((NONE, NONE), (const(6.0), NONE), (const(6.0), const(6.0))), CORNERS,
))  # fmt: skip

VEE = one("vee", 40.0, 12.0, 6.0, 3.0, 3.0, Form(
    "hull", (0.0, 40.0), panels((NONE, NONE), (const(6.0), const(6.0))), ("keel", "deck edge"),
))  # fmt: skip

# The keel line rises by 0.9 m at both ends, the deck narrows forward.
CURVED_VEE = one("curved vee", 40.0, 12.0, 6.0, 3.0, 2.8, Form(
    "hull", (0.0, 40.0),
    panels(
        (NONE, 0.9 * Polynomial([-1.0, 0.05]) ** 2),
        (6.0 - 0.5 * Polynomial([0.0, 0.05]) ** 2, const(6.0)),
    ),
    ("keel", "deck edge"),
))  # fmt: skip

CYLINDER = one("cylinder", 40.0, 10.0, 7.0, 3.0, 3.8, Form(
    "hull", (0.0, 40.0), (Arc(NONE, NONE, const(5.0), const(5.0), np.arccos(-0.4)),), ("keel", ""),
))  # fmt: skip


def _chine(name: str, chine: Polynomial, draft: float, vcg: float) -> Ship:
    """A transom hull of 30 m with straight sections; the stem leaves the water near x = 29."""
    plan = 1.0 - Polynomial([-7.0 / 23.0, 1.0 / 23.0]) ** 3
    return one(name, 30.0, 8.0, 5.5, draft, vcg, Form(
        "hull", (-0.5, 30.0),
        panels(
            (NONE, beyond(12.0, 2.4 / 18.0**3, 3)),
            (3.6 * plan, chine),
            (4.0 * plan, 5.5 + Polynomial([-0.4, 0.04]) ** 2),
        ),
        CORNERS, breaks=(12.0,),
    ))  # fmt: skip


SHEER = Polynomial([-0.5, 1.0 / 30.0])
LOW_CHINE = _chine("low chine", 1.4 + 1.2 * SHEER + 2.0 * SHEER**2, 2.2, 2.9)
HIGH_CHINE = _chine("high chine", 2.35 + 0.8 * SHEER + 1.6 * SHEER**2, 2.2, 3.1)
"""Its chine is 0.15 m above the water amidships, and 0.05 m at a quarter of the length."""


def _round() -> Ship:
    """Rising floor, elliptic bilge, flared side; raked stem and counter, both clear of the water."""
    about = Polynomial([-0.92, 0.032])  # widest at 28.75 m, pointed at both ends

    def plan(x: np.ndarray) -> np.ndarray:
        return np.maximum(1.0 - about(x) ** 4, 0.0)

    keel, floor, bilge = 3.9 * about**6, times(plan, 3.2), times(plan, 5.1)
    return one("round bilge", 58.0, 11.6, 6.5, 3.0, 3.6, Form(
        "hull", (-2.5, 60.0),
        (
            Straight(NONE, keel, floor, keel + 0.12),
            Arc(floor, keel + 0.12, times(plan, 1.9), const(1.7), np.pi / 2.0),
            Straight(bilge, keel + 1.82, times(plan, 5.8), 6.5 + 0.8 * about**2),
        ),
        ("keel", "", "", "deck edge"),
    ))  # fmt: skip


ROUND_BILGE = _round()

CATAMARAN = Ship("catamaran", 30.0, 8.0, 3.0, (
    Form(
        "hulls", (0.0, 30.0),
        panels((NONE, NONE), (const(1.0), NONE), (const(1.0), const(3.0))), CORNERS,
        y=3.0, mirrored=True,
    ),
), 1.2, 2.5)  # fmt: skip


def _patrol() -> Ship:
    """A deep vee with a hard chine 0.14 m above the water amidships; a skeg below the keel aft."""

    def taper(x: np.ndarray) -> np.ndarray:
        """Share of the greatest breadth: 0.94 at the transom, 1 at 8.4 m, 0 at the stem head."""
        aft, fore = np.minimum(x - 8.4, 0.0) / 8.4, np.maximum(x - 8.4, 0.0) / 13.2
        return np.maximum(1.0 - 0.06 * aft**2 - fore**3, 0.0)

    along = Polynomial([-0.5, 1.0 / 20.4])
    sole = Polynomial([-0.5552, 0.0613])
    hull = Form(
        "hull", (0.0, 21.6),
        panels(
            (NONE, beyond(12.0, 0.0021, 3)),
            (times(taper, 2.6), plus(1.26 + 0.2 * along + 0.8 * along**2, beyond(12.0, 0.0006, 3))),
            (times(taper, 2.85), 3.0 + Polynomial([-0.35, 0.06]) ** 2),
        ),
        CORNERS, breaks=(8.4, 12.0),
    )  # fmt: skip
    skeg = Form(
        "skeg", (0.9, 8.4), panels((NONE, sole), (const(0.05), sole), (const(0.06), NONE)),
        ("sole", "edge", "top"), kind="appendage",
    )  # fmt: skip
    return Ship("patrol vessel", 20.4, 5.7, 3.3, (hull, skeg), 1.12, 2.4)


PATROL = _patrol()


def _swim(x: np.ndarray) -> np.ndarray:
    """Rise of a barge's bottom over the last 9 m at both ends."""
    return 0.4 * np.maximum(np.maximum(9.0 - x, x - 51.0), 0.0)


SWIM_BARGE = one("swim-ended barge", 60.0, 12.0, 5.0, 2.6, 3.4, Form(
    "hull", (0.0, 60.0),
    panels((NONE, _swim), (const(6.0), _swim), (const(6.0), const(5.0))), CORNERS,
    knuckles=(9.0, 51.0),
))  # fmt: skip
"""A box between knuckles at 9 m and 51 m; its flat raked ends rise out of the water."""

SHIPS = {s.name: s for s in (
    BOX, VEE, CURVED_VEE, CYLINDER, LOW_CHINE, HIGH_CHINE, ROUND_BILGE, CATAMARAN,
    SWIM_BARGE, PATROL,
)}  # fmt: skip


def stations(
    form: Form, count: int, arc_points: int
) -> Iterator[tuple[float, list[tuple[float, float, str]]]]:
    """The x of each station and its points: half-breadth, height, line.

    ``count`` stations at even steps and one at every break, two at a knuckle. Straight parts have
    their corners only, arcs ``arc_points`` steps.
    """
    even = np.linspace(*form.ends, count)
    step = even[1] - even[0]
    apart = [
        x for x in even if all(abs(x - b) > 0.1 * step for b in (*form.breaks, *form.knuckles))
    ]
    places = sorted([*apart, *form.breaks, *form.knuckles, *form.knuckles])
    for place in places:
        x = np.asarray(float(place))
        y, z = form.parts[0].at(x, np.asarray(0.0))
        points = [(y, z, form.lines[0])]
        for part, line in zip(form.parts, form.lines[1:], strict=True):
            steps = arc_points if isinstance(part, Arc) else 1
            for k in range(1, steps + 1):
                y, z = part.at(x, np.asarray(k / steps))
                points.append((y, z, line if k == steps else ""))
        yield float(place), [(float(y) + 0.0, float(z) + 0.0, line) for y, z, line in points]


def offset_rows(ship: Ship, count: int = 31, arc_points: int = 48) -> list[tuple[object, ...]]:
    """Rows of offsets.csv: station, x, half breadth, height, line, body; few of an appendage."""
    return [
        (n, x, y, z, line, form.name)
        for form in ship.forms
        for n, (x, points) in enumerate(
            stations(form, count if form.kind == "hull" else 4, arc_points)
        )
        for y, z, line in points
    ]
