"""A ship whose equilibrium is known in closed form, and whole trials made from it.

The hull has vertical sides above a chine, so that every waterline above the chine is exact: with
the waterplane's area A, its centre x_F and moments of inertia I_T and I_L about that centre, and
the plane z = T + t y - tau (x - x_F),

    V = V0 + A (T - z0),   V y_B = I_T t,   V x_B = X - I_L tau,
    V z_B = Z + (I_T t^2 + I_L tau^2) / 2.

Liquids in box tanks with free surfaces move by the same formulas. Everything is in m, t, t/m3.
"""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import TYPE_CHECKING

from box_liquid import liquid_centre
from numpy.polynomial import Polynomial

if TYPE_CHECKING:
    from hull_forms import Form


@dataclass(frozen=True)
class WallSided:
    """Half-breadth beam/2 (1 - (x/lpp)^power); below the chine breadth grows as sqrt(z/chine)."""

    lpp: float
    beam: float
    chine: float
    power: int
    skeg: tuple[float, float, float] = (0.0, 0.0, 0.0)  # volume, x, z

    def waterplane(self) -> tuple[float, float, float, float]:
        """Area, centre, and moments of inertia about the axes through the centre."""
        s = Polynomial([0.0, 1.0 / self.lpp])
        half = self.beam / 2.0 * (1.0 - s**self.power)
        x = Polynomial([0.0, 1.0])

        def over(p: Polynomial) -> float:
            return float(p.integ()(self.lpp) - p.integ()(0.0))

        area = over(2.0 * half)
        centre = over(2.0 * half * x) / area
        across = over(2.0 / 3.0 * half**3)
        along = over(2.0 * half * x**2) - area * centre**2
        return area, centre, across, along

    def upright(self, draft: float) -> tuple[float, float, float]:
        """Volume and its moments about x = 0 and the baseline, at a level waterline."""
        area, centre, _, _ = self.waterplane()
        low = area * self.chine * 2.0 / 3.0
        volume, x, z = self.skeg
        sides = area * (draft - self.chine)
        return (
            low + sides + volume,
            (low + sides) * centre + volume * x,
            low * 0.6 * self.chine + sides * (draft + self.chine) / 2.0 + volume * z,
        )


@dataclass(frozen=True)
class Mass:
    """Something with a mass and a centre."""

    name: str
    mass: float
    x: float
    y: float
    z: float
    to: tuple[float, float, float] | None = None


@dataclass(frozen=True)
class SlackTank:
    """A tank; length and breadth of the liquid's surface are zero unless it is slack.

    With a ``depth`` it is a box, whose liquid may meet its top or bottom when the ship heels.
    """

    name: str
    contents: str
    state: str
    density: float
    volume: float
    x: float
    y: float
    z: float
    length: float = 0.0
    breadth: float = 0.0
    depth: float = 0.0

    @property
    def level(self) -> float:
        """Depth of the liquid in a box."""
        return self.volume / (self.length * self.breadth)

    @property
    def mass(self) -> float:
        return self.density * self.volume

    @property
    def fsm(self) -> float:
        return self.density * self.length * self.breadth**3 / 12.0

    @property
    def fsm_along(self) -> float:
        return self.density * self.breadth * self.length**3 / 12.0

    def moved(self, t: float, tau: float) -> tuple[float, float, float]:
        """Where the liquid's centre goes from upright and even keel."""
        if not self.mass:
            return 0.0, 0.0, 0.0
        along = self.fsm_along / self.mass
        across, up = self.fsm / self.mass * t, 0.5 * self.fsm / self.mass * t**2
        if self.depth:
            across, up = liquid_centre(self.breadth, self.depth, self.level, t)
        return -along * tau, across, up + 0.5 * along * tau**2


@dataclass(frozen=True)
class Scene:
    """A true lightship and everything about its test."""

    hull: WallSided
    light: Mass
    density: float
    deduct: tuple[Mass, ...]
    add: tuple[Mass, ...]
    relocate: tuple[Mass, ...]
    people: tuple[Mass, ...]
    tanks: tuple[SlackTank, ...]
    weights: tuple[Mass, ...]  # at their start
    moves: tuple[tuple[tuple[str, float], ...], ...]  # by shift after the first: weight, new y
    allowance: float = 0.0
    lengths: dict[str, float] = field(default_factory=dict)
    zeros: dict[str, float] = field(default_factory=dict)  # tangent at upright
    recorded: dict[str, float] = field(default_factory=dict)  # lengths written down wrong
    # A line that comes taut at this moment [t m], to starboard if positive, and from there on takes
    # this share of what is added.
    line: tuple[float, float] | None = None
    rolls: tuple[tuple[int, float], ...] = ()  # of a rolling test: full rolls, seconds

    def inclined(self) -> Mass:
        """The ship as inclined, liquids where they lie upright: lightship and all aboard."""
        parts = [
            self.light,
            *self.deduct,
            *self.people,
            *self.weights,
            *(Mass(t.name, t.mass, t.x, t.y, t.z) for t in self.tanks),
            *(Mass(a.name, -a.mass, a.x, a.y, a.z) for a in self.add),
        ]
        total = sum(p.mass for p in parts)
        moments = [sum(p.mass * getattr(p, c) for p in parts) for c in "xyz"]
        for r in self.relocate:  # at the test it still lies at its old place
            assert r.to is not None
            for i, c in enumerate("xyz"):
                moments[i] -= r.mass * (r.to[i] - getattr(r, c))
        return Mass("as inclined", total, *(m / total for m in moments))

    def heights(self) -> dict[tuple[int, str], float]:
        """Heights of test weights that went up or down, by shift and weight; here none does."""
        return {}

    def lengthwise(self) -> dict[tuple[int, str], float]:
        """The same for the x of weights that went along the ship."""
        return {}

    def offsets(self) -> list[tuple[object, ...]]:
        """Rows of the table of offsets: station, x, half-breadth, height, line, body; here none."""
        return []

    def forms(self) -> tuple[Form, ...]:
        """The bodies that the offsets are of."""
        return ()

    def shift_moments(self) -> list[float]:
        at = {w.name: w.y for w in self.weights}
        mass = {w.name: w.mass for w in self.weights}
        start = dict(at)
        found = [0.0]
        for moves in self.moves:
            at.update(moves)
            found.append(sum(mass[n] * (at[n] - start[n]) for n in at))
        return found

    def held(self, moment: float) -> float:
        """What is left of a moment when the line has taken its share."""
        if self.line is None:
            return moment
        taut, share = self.line
        over = moment - taut
        return moment - share * over if over * taut > 0.0 else moment

    def equilibrium(self, moment: float = 0.0) -> tuple[float, float, float]:
        """Draft at the centre of flotation, tangent of heel and tau, under a moment."""
        ship = self.inclined()
        area, _, across, along = self.hull.waterplane()
        volume = ship.mass / (self.density * (1.0 + self.allowance))
        draft = self.hull.chine + (volume - self.hull.upright(self.hull.chine)[0]) / area
        _, x_moment, z_moment = self.hull.upright(draft)
        fsm = sum(t.fsm for t in self.tanks)
        fsm_along = sum(t.fsm_along for t in self.tanks)

        t = tau = 0.0
        for _ in range(60):  # only the heights depend on t and tau, weakly: converges to rounding
            height = z_moment / volume - ship.z
            height += 0.5 * (across / volume - fsm / ship.mass) * t**2
            height += 0.5 * (along / volume - fsm_along / ship.mass) * tau**2
            t = (ship.y + moment / ship.mass) / (across / volume + height - fsm / ship.mass)
            tau = (x_moment / volume - ship.x) / (along / volume + height - fsm_along / ship.mass)
        return draft, t, tau

    def tangents(self) -> list[float]:
        """Heel at every shift."""
        return [self.equilibrium(self.held(m))[1] for m in self.shift_moments()]

    def mark_y(self, _x: float) -> float:
        """How far off the centreplane the draft marks are."""
        return self.hull.beam / 2.0

    def draft_at(self, x: float, y: float) -> float:
        _, centre, _, _ = self.hull.waterplane()
        draft, t, tau = self.equilibrium()
        return draft + t * y - tau * (x - centre)

    def tank_x(self, tank: SlackTank) -> float:
        """Where the liquid's centre lies along the ship at the trim of the test."""
        return tank.x + tank.moved(0.0, self.equilibrium()[2])[0]

    def table_row(self, draft: float, trim: float) -> dict[str, float]:
        """True hydrostatics at the draft amidships and trim, without the allowance."""
        area, centre, across, along = self.hull.waterplane()
        tau = trim / self.hull.lpp
        at_centre = draft + tau * (self.hull.lpp / 2.0 - centre)
        volume, x, z = self.hull.upright(at_centre)
        return {
            "draft": draft,
            "trim": trim,
            "volume": volume,
            "lcb": (x - along * tau) / volume,
            "kb": (z + 0.5 * along * tau**2) / volume,
            "bm": across / volume,
            "lcf": centre,
            "area": area,
            "bml": along / volume,
        }
