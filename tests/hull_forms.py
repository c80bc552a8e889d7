"""Hulls in closed form, and what they displace at any waterline, by quadrature of their own.

A section is a chain of straight lines and elliptic arcs from the keel to the deck edge, their ends
functions of x. The waterline's height above the baseline is

    T(x, y) = mean - tau (x - L/2) + deflection (1 - (2x/L - 1)^2) + t y

with x forward of the after perpendicular, y to starboard, z up; positions are in the ship's own
axes, in which deflection bends the waterline. Everything is in m, m3, t.

The area under the waterline is taken by Green's theorem about a point of the waterline, where the
cut itself adds nothing: with r from that point, the integral of f of degree k over the area is
1/(k+2) times that of f (r x dr) along the wetted girth. Lengthwise by Gauss-Legendre between all
places where a line of the hull leaves the water or has a knuckle.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

import numpy as np
from numpy.polynomial.legendre import leggauss
from numpy.typing import NDArray
from scipy import optimize

Floats = NDArray[np.float64]
Along = Callable[[Floats], Floats]
"""A function of x, such as the height of the keel line."""

ARC_NODES, SPAN_NODES, SCAN = 16, 28, 400


def unit_nodes(count: int) -> tuple[Floats, Floats]:
    """Gauss-Legendre nodes and weights on 0 to 1."""
    nodes, weights = leggauss(count)
    return 0.5 + nodes / 2.0, weights / 2.0


ARC_AT, ARC_WEIGHT = unit_nodes(ARC_NODES)
_s, _w = unit_nodes(SPAN_NODES)
# x = a + (b - a) s^2 (3 - 2s) crowds the nodes at both ends: areas that vanish there with a
# half-integer power of the distance are smooth in s.
SPAN_AT, SPAN_WEIGHT = _s**2 * (3.0 - 2.0 * _s), _w * 6.0 * _s * (1.0 - _s)


@dataclass(frozen=True, eq=False)
class Straight:
    """A straight part of the sections, from one line of the hull to the next."""

    y0: Along
    z0: Along
    y1: Along
    z1: Along

    def at(self, x: Floats, s: Floats) -> tuple[Floats, Floats]:
        """The point at the share ``s`` of the part, 0 to 1."""
        return (1 - s) * self.y0(x) + s * self.y1(x), (1 - s) * self.z0(x) + s * self.z1(x)

    def heights(self, x: Floats, level: Floats, t: float) -> list[Floats]:
        """Heights above the waterline whose changes of sign change how the part is cut."""
        return [self.z0(x) - level - t * self.y0(x), self.z1(x) - level - t * self.y1(x)]

    def wetted(self, x: Floats, level: Floats, t: float) -> Floats:
        """Area and moments about the waterline's point on the centreplane; axis 0: 1, y, z."""
        y0, y1 = self.y0(x), self.y1(x)
        z0, z1 = self.z0(x) - level, self.z1(x) - level
        dry0, dry1 = self.heights(x, level, t)
        rise = np.where(dry1 == dry0, 1.0, dry1 - dry0)
        cut = np.clip(-dry0 / rise, 0.0, 1.0)
        first = np.where((dry0 >= 0.0) & (dry1 < 0.0), cut, 0.0)
        last = np.where(dry1 < 0.0, 1.0, np.where(dry0 < 0.0, cut, 0.0))
        mid = 0.5 * (first + last)
        cross = (y0 * z1 - z0 * y1) * (last - first)
        y, z = y0 + mid * (y1 - y0), z0 + mid * (z1 - z0)
        return np.array([cross / 2.0, cross * y / 3.0, cross * z / 3.0])


@dataclass(frozen=True, eq=False)
class Arc:
    """A quarter of an ellipse or more: y = y0 + b sin(a), z = z0 + h (1 - cos(a)), a from 0."""

    y0: Along
    z0: Along
    b: Along
    h: Along
    top: float

    def at(self, x: Floats, s: Floats) -> tuple[Floats, Floats]:
        a = s * self.top
        y = self.y0(x) + self.b(x) * np.sin(a)
        return y, self.z0(x) + self.h(x) * (1.0 - np.cos(a))

    def heights(self, x: Floats, level: Floats, t: float) -> list[Floats]:
        ends = [self.at(x, s) for s in (0.0, 1.0)]
        found = [z - level - t * y for y, z in ends]
        lowest = self.z0(x) + self.h(x) - level - t * self.y0(x)
        return [*found, lowest - np.hypot(self.h(x), t * self.b(x))]

    def wetted(self, x: Floats, level: Floats, t: float) -> Floats:
        b, h, y0, z0 = self.b(x), self.h(x), self.y0(x), self.z0(x) - level
        # height above the waterline: z0 + h - t y0 - hypot(h, t b) cos(a - deepest)
        deepest = np.arctan2(t * b, h)
        half = np.arccos(np.clip((z0 + h - t * y0) / np.hypot(h, t * b), -1.0, 1.0))
        first = np.clip(deepest - half, 0.0, self.top)
        last = np.clip(deepest + half, 0.0, self.top)
        a = first[..., None] + (last - first)[..., None] * ARC_AT
        b, h, y0, z0 = (v[..., None] for v in (b, h, y0, z0))
        y, z = y0 + b * np.sin(a), z0 + h * (1.0 - np.cos(a))
        cross = (y * h * np.sin(a) - z * b * np.cos(a)) * ARC_WEIGHT * (last - first)[..., None]
        terms = cross / 2.0, cross * y / 3.0, cross * z / 3.0
        return np.array([term.sum(axis=-1) for term in terms])


@dataclass(frozen=True, eq=False)
class Form:
    """A body symmetrical about its own centreplane at ``y``.

    ``lines`` names the ends of the parts, first the keel; empty where a line has no name.
    ``breaks`` are where the functions of x change, ``knuckles`` those with a corner in the lines.
    """

    name: str
    ends: tuple[float, float]
    parts: tuple[Straight | Arc, ...]
    lines: tuple[str, ...]
    breaks: tuple[float, ...] = ()
    knuckles: tuple[float, ...] = ()
    y: float = 0.0
    mirrored: bool = False
    kind: str = "hull"

    def places(self) -> set[float]:
        """y of its centreplane, and of its mirror image's."""
        return {self.y, -self.y} if self.mirrored else {self.y}

    def closed(self) -> tuple[Straight | Arc, ...]:
        """The parts and the closing line from the deck edge to the centreplane."""
        last = self.parts[-1]

        def edge(axis: int) -> Along:
            return lambda x: last.at(x, 1.0)[axis]  # type: ignore[arg-type]

        return (*self.parts, Straight(edge(0), edge(1), lambda x: 0.0 * x, edge(1)))

    def is_dry(self, level: Along, t: float) -> bool:
        """Whether the deck edge is above the water all along."""
        x = np.linspace(*self.ends, SCAN + 1)
        y, z = self.parts[-1].at(x, np.ones_like(x))
        return bool(np.all(z - level(x) - abs(t) * y >= 0.0))

    def spans(self, level: Along, t: float) -> list[float]:
        """Where the integrand along x is not smooth, and the ends."""
        found = {self.ends[0], *self.breaks, *self.knuckles, self.ends[1]}
        x = np.linspace(*self.ends, SCAN + 1)
        for part in self.closed():
            for lean in {t, -t}:
                heights = np.array(part.heights(x, level(x), lean))
                line, at = np.nonzero(heights[:, 1:] * heights[:, :-1] < 0.0)
                if not len(at):
                    continue
                # secant steps from the ends of each bracket: what is left of it goes with its square
                a, b, fa, fb = x[at], x[at + 1], heights[line, at], heights[line, at + 1]
                low, high = a, b
                for _ in range(4):
                    slope = np.where(fb == fa, 1.0, fb - fa)
                    a, b, fa = b, np.clip(b - fb * (b - a) / slope, low, high), fb
                    fb = np.array(part.heights(b, level(b), lean))[line, np.arange(len(b))]
                found.update(b.tolist())
        return sorted(found)

    def displaced(self, level: Along, t: float) -> Floats:
        """Volume and its moments in x, y, z, of the body with its centreplane at y = 0."""
        edges = np.array(self.spans(level, t))
        x = edges[:-1, None] + np.diff(edges)[:, None] * SPAN_AT
        weight = np.diff(edges)[:, None] * SPAN_WEIGHT
        at = level(x)
        area = across = up = np.zeros_like(x)
        for part in self.parts if self.is_dry(level, t) else self.closed():
            starboard, port = part.wetted(x, at, t), part.wetted(x, at, -t)
            area = area + starboard[0] + port[0]
            across = across + starboard[1] - port[1]
            up = up + starboard[2] + port[2]
        terms = area, x * area, across, up + at * area
        return np.array([(weight * term).sum() for term in terms])


@dataclass(frozen=True)
class Displaced:
    """What a hull displaces: volume [m3] and its centre in the ship's axes [m]."""

    volume: float
    x: float
    y: float
    z: float


@dataclass(frozen=True, eq=False)
class Ship:
    """A hull of one or more forms; ``draft`` and ``vcg`` are those it is tried with."""

    name: str
    lpp: float
    beam: float
    depth: float
    forms: tuple[Form, ...]
    draft: float
    vcg: float

    def level(self, mean: float, tau: float, deflection: float) -> Along:
        """Height of the waterline on the centreplane."""
        half = self.lpp / 2.0
        return lambda x: mean - tau * (x - half) + deflection * (1.0 - (x / half - 1.0) ** 2)

    def below(
        self, mean: float, tau: float = 0.0, deflection: float = 0.0, t: float = 0.0
    ) -> Displaced:
        """Volume and centre of buoyancy at a waterline."""
        level = self.level(mean, tau, deflection)
        total = np.zeros(4)
        for form in self.forms:
            for y in form.places():
                found = form.displaced(lambda x, y=y: level(x) + t * y, t)
                total += found + np.array([0.0, 0.0, y * found[0], 0.0])
        volume, x, y, z = (float(v) for v in total)
        return Displaced(volume, x / volume, y / volume, z / volume)


@dataclass(frozen=True)
class Afloat:
    """A waterline in equilibrium and the centre of buoyancy at it."""

    mean: float
    tau: float
    t: float
    buoyancy: Displaced


Centre = Callable[[float, float], tuple[float, float, float]]
"""The ship's centre of gravity, liquids and all, at a tangent of heel and a tau."""


def afloat(
    ship: Ship, volume: float, centre: Centre, deflection: float = 0.0,
    start: tuple[float, float, float] | None = None, t: float | None = None,
) -> Afloat:  # fmt: skip
    """The equilibrium under a centre of gravity; at a heel that is given, balanced lengthwise only.

    B and G stand on one line along gravity: x_G = x_B + tau (z_G - z_B) and
    y_G + z_G t = y_B + z_B t. ``start`` is a guess of mean draft, tau and t.
    """

    def misses(unknown: Floats) -> list[float]:
        lean = unknown[2] if t is None else t
        b = ship.below(unknown[0], unknown[1], deflection, lean)
        x, y, z = centre(lean, unknown[1])
        found = [b.volume / volume - 1.0, (b.x + unknown[1] * (z - b.z) - x) / ship.lpp]
        return found if t is not None else [*found, (b.y + b.z * lean - y - z * lean) / ship.beam]

    guess = start or (ship.draft, 0.0, 0.0)
    found = optimize.root(misses, guess[: 2 if t is not None else 3], tol=1e-14)
    assert max(abs(m) for m in misses(found.x)) < 1e-11, found.message
    mean, tau = float(found.x[0]), float(found.x[1])
    lean = float(found.x[2]) if t is None else t
    level = ship.level(mean, tau, deflection)
    for form in ship.forms:
        dry = [form.is_dry(lambda x, y=y: level(x) + lean * y, lean) for y in form.places()]
        assert form.kind == "appendage" or all(dry), "the deck edge is under water"
    return Afloat(mean, tau, lean, ship.below(mean, tau, deflection, lean))
