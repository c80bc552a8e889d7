"""Hulls as records of offsets, ready to be cut: of closed form, prisms, and points as they come."""

from __future__ import annotations

import itertools
from collections.abc import Callable, Sequence

import numpy as np
from hull_forms import Along, Form, Ship
from hull_ships import panels, stations
from numpy.typing import NDArray
from scipy.interpolate import CubicSpline

from incline.errors import Where
from incline.hull import Hull, Pose, lever_slope, settle
from incline.record import Body, OffsetPoint, Offsets, Station

Floats = NDArray[np.float64]
Points = Sequence[tuple[float, float]] | Floats
HERE = Where("offsets.csv")


def station(x: float, starboard: Points, port: Points | None = None, lines: Sequence[str] = ()) -> Station:  # fmt: skip
    """A station of half-breadths and heights, keel first; both sides alike without ``port``."""
    names = lines or [""] * len(starboard)
    side, other = (
        None
        if points is None
        else tuple(OffsetPoint(float(y), float(z), n) for (y, z), n in zip(points, names, strict=True))
        for points in (starboard, port)
    )  # fmt: skip
    assert side is not None
    return Station(name=f"{x:g}", x=float(x), starboard=side, port=side if other is None else other, where=HERE)  # fmt: skip


def offsets(*bodies: Body) -> Offsets:
    return Offsets(bodies=bodies, allowance=None)


def one(*places: Station, **body: object) -> Offsets:
    """Offsets of one body."""
    return offsets(Body(name="hull", stations=places, **body))  # type: ignore[arg-type]


def prism(points: Points, ends: tuple[float, float]) -> Offsets:
    """The same section from end to end."""
    return one(*(station(x, points) for x in ends))


def upright_sides(x: Floats, half: Floats, depth: float) -> Offsets:
    """Vertical sides on a waterplane; a place that stands there twice is a knuckle."""
    return one(*(station(a, [(0.0, 0.0), (b, 0.0), (b, depth)]) for a, b in zip(x, half, strict=True)))  # fmt: skip


def drawn(ship: Ship, count: int = 31, arc_points: int = 48) -> Offsets:
    """A ship of closed form from its stations, few of an appendage."""
    return offsets(
        *(
            Body(
                name=form.name, kind=form.kind, y=form.y, mirrored=form.mirrored,  # type: ignore[arg-type]
                stations=tuple(
                    station(x, [p[:2] for p in points], lines=[p[2] for p in points])
                    for x, points in stations(form, count if form.kind == "hull" else 4, arc_points)
                ),
            )
            for form in ship.forms
        )
    )  # fmt: skip


def faceted(form: Form, places: Sequence[tuple[float, Points]]) -> Form:
    """A form with straight panels through stations' points, splines between the repeated stations."""
    x = np.array([at for at, _ in places])
    points = np.array([points for _, points in places])
    cuts = [0, *(np.flatnonzero(np.diff(x) == 0.0) + 1), len(x)]
    runs = [(x[a], CubicSpline(x[a:b], points[a:b])) for a, b in itertools.pairwise(cuts)]

    def line(k: int, axis: int) -> Along:
        def along(at: Floats) -> Floats:
            found = runs[0][1](at)[..., k, axis]
            for start, run in runs[1:]:
                found = np.where(at >= start, run(at)[..., k, axis], found)
            return np.maximum(found, 0.0) if axis == 0 else found  # type: ignore[no-any-return]

        return along

    count = points.shape[1]
    lines = [(line(k, 0), line(k, 1)) for k in range(count)]
    return Form(
        form.name, form.ends, panels(*lines), ("",) * count, form.breaks, form.knuckles,
        form.y, form.mirrored, form.kind,
    )  # fmt: skip


def pose(mean: object, tau: object = 0.0, deflection: object = 0.0, t: object = 0.0) -> Pose:
    """A waterline from numbers or arrays."""
    given = np.broadcast_arrays(*(np.asarray(v, dtype=float) for v in (mean, tau, deflection, t)))
    return Pose(*(np.array(v) for v in given))


def levers(hull: Hull, draft: float, t: object, vcg: float = 0.0, volume: float | None = None) -> Floats:  # fmt: skip
    """N(t) [m] at the displacement of an even keel, G over the LCB there, trim free."""
    start = hull.displaced(pose(draft))
    lean = np.asarray(t, dtype=float)
    whole = float(start.volume) if volume is None else volume
    _, found = settle(
        hull, pose(draft, t=lean), *(v + 0.0 * lean for v in (whole, vcg, float(start.x)))
    )
    return found.y + found.z * lean


def slopes(hull: Hull, draft: float, t: object, vcg: float = 0.0) -> Floats:
    """dN/dt [m] in the same condition."""
    start = hull.displaced(pose(draft))
    lean = np.asarray(t, dtype=float)
    at, found = settle(
        hull,
        pose(draft, t=lean),
        *(v + 0.0 * lean for v in (float(start.volume), vcg, float(start.x))),
    )
    return lever_slope(hull, at, found, vcg + 0.0 * lean)


def stretches(nodes: Sequence[float], steps: int) -> Floats:
    """Numbers from the first node to the last, ``steps`` even steps from each node to the next."""
    parts = [np.linspace(a, b, steps, endpoint=False) for a, b in itertools.pairwise(nodes)]
    return np.concatenate([*parts, [nodes[-1]]])


def carried(found: Callable[[int], Floats], count: int, order: int) -> tuple[Floats, Floats]:
    """Figures at ``count`` and twice as many, carried to none (Richardson), and those at ``count``."""
    coarse, fine = found(count), found(2 * count)
    return (2**order * fine - coarse) / (2**order - 1), coarse
