"""Trials on hulls of closed form: the truth found by quadrature and root finding."""

from __future__ import annotations

from dataclasses import dataclass, replace
from functools import cached_property

import numpy as np
from hull_forms import Afloat, Centre, Form, Ship, afloat
from hull_ships import offset_rows
from scipy import optimize
from simulate import Mass, Scene


@dataclass(frozen=True)
class HullScene(Scene):
    """A scene whose ``hull`` is a `Ship`, bent by ``deflection``.

    ``rises`` are heights above their start of the weights moved at each shift after the first;
    ``stations`` and ``arc_points`` say how finely the offsets are written.
    """

    deflection: float = 0.0
    rises: tuple[float, ...] = ()
    stations: int = 31
    arc_points: int = 48

    @property
    def ship(self) -> Ship:
        return self.hull  # type: ignore[return-value]

    @cached_property
    def _whole(self) -> Mass:
        return self.inclined()

    @cached_property
    def _known(self) -> dict[tuple[float, float], Afloat]:
        return {}

    def centre(self, moment: float = 0.0, lift: float = 0.0) -> Centre:
        """G with its liquids as they lie, under moments of the test weights to starboard and up."""
        whole = self._whole

        def at(t: float, tau: float) -> tuple[float, float, float]:
            total = np.array([0.0, moment, lift])
            for tank in self.tanks:
                total += tank.mass * np.array(tank.moved(t, tau))
            x, y, z = (total / whole.mass + [whole.x, whole.y, whole.z]).tolist()
            return x, y, z

        return at

    def state(self, moment: float = 0.0, lift: float = 0.0) -> Afloat:
        """The floating ship under moments of the test weights."""
        if (moment, lift) not in self._known:
            start = min(
                self._known.items(), key=lambda known: abs(known[0][0] - moment), default=None
            )
            guess = None if start is None else (start[1].mean, start[1].tau, start[1].t)
            volume = self._whole.mass / (self.density * (1.0 + self.allowance))
            found = afloat(self.ship, volume, self.centre(moment, lift), self.deflection, guess)
            self._known[moment, lift] = found
        return self._known[moment, lift]

    def equilibrium(self, moment: float = 0.0) -> tuple[float, float, float]:
        """Mean draft amidships, tangent of heel and tau."""
        found = self.state(moment)
        return found.mean, found.t, found.tau

    def shift_lifts(self) -> list[float]:
        """Moments of the test weights' rise, by shift."""
        mass = {w.name: w.mass for w in self.weights}
        at = dict.fromkeys(mass, 0.0)
        found = [0.0]
        for moves, rise in zip(self.moves, self.rises or (0.0,) * len(self.moves), strict=True):
            at.update((name, rise) for name, _ in moves)
            found.append(sum(mass[n] * at[n] for n in at))
        return found

    def heights(self) -> dict[tuple[int, str], float]:
        z = {w.name: w.z for w in self.weights}
        return {
            (n, name): z[name] + rise
            for n, (moves, rise) in enumerate(zip(self.moves, self.rises, strict=False), start=1)
            for name, _ in moves
        }

    def tangents(self) -> list[float]:
        both = zip(self.shift_moments(), self.shift_lifts(), strict=True)
        return [self.state(self.held(moment), lift).t for moment, lift in both]

    def mark_y(self, x: float) -> float:
        """Half the breadth of the hull where it leaves the water, upright."""
        form = self.ship.forms[0]
        level = self.draft_at(x, 0.0)
        place = np.asarray(x)
        for part in form.parts:
            low, high = (float(part.at(place, np.asarray(s))[1]) for s in (0.0, 1.0))
            if low <= level <= high:
                share = optimize.brentq(
                    lambda s, p=part: float(p.at(place, np.asarray(s))[1]) - level, 0.0, 1.0
                )
                return form.y + float(part.at(place, np.asarray(share))[0])
        raise ValueError(f"no hull at the waterline at x = {x}")

    def draft_at(self, x: float, y: float) -> float:
        found = self.state()
        level = self.ship.level(found.mean, found.tau, self.deflection)
        return float(level(np.asarray(x))) + found.t * y

    def offsets(self) -> list[tuple[object, ...]]:
        return offset_rows(self.ship, self.stations, self.arc_points)

    def forms(self) -> tuple[Form, ...]:
        return self.ship.forms

    def gm(self, moment: float = 0.0) -> float:
        """Slope of N at the heel under a moment, less KG: GM with its liquids free."""
        at = self.state(moment)
        step = 1e-4

        def lever(t: float) -> float:
            there = afloat(
                self.ship, at.buoyancy.volume, self.centre(moment), self.deflection,
                (at.mean, at.tau, at.t), t,
            )  # fmt: skip
            _, y, z = self.centre(moment)(t, there.tau)
            return there.buoyancy.y - y + (there.buoyancy.z - z) * t

        return (lever(at.t + step) - lever(at.t - step)) / (2.0 * step)


def balanced(scene: HullScene, mean: float, tau: float, t: float, vcg: float) -> HullScene:
    """The scene with the lightship that floats at a waterline with its centre of gravity at vcg.

    ``vcg`` is that of the ship as inclined, its liquids as in an upright ship.
    """
    b = scene.ship.below(mean, tau, scene.deflection, t)
    mass = b.volume * scene.density * (1.0 + scene.allowance)
    # the shift of the liquids is the same for every lightship
    liquid = sum(
        (tank.mass * np.array(tank.moved(t, tau)) for tank in scene.tanks), start=np.zeros(3)
    )
    dx, dy, dz = (liquid / mass).tolist()
    z = vcg + dz
    whole = (b.x + tau * (z - b.z) - dx, b.y + (b.z - z) * t - dy, vcg)
    none = replace(scene, light=Mass("lightship", 0.0, 0.0, 0.0, 0.0)).inclined()
    light = mass - none.mass
    at = [
        (mass * g - none.mass * getattr(none, c)) / light for g, c in zip(whole, "xyz", strict=True)
    ]
    return replace(scene, light=Mass("lightship", light, *at))
