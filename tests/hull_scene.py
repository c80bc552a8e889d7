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

    ``rises`` and ``travels`` are how far above and forward of their start the weights moved at each
    shift after the first then stand; ``stations`` and ``arc_points`` say how finely the offsets are
    written.
    """

    deflection: float = 0.0
    rises: tuple[float, ...] = ()
    travels: tuple[float, ...] = ()
    stations: int = 31
    arc_points: int = 48

    @property
    def ship(self) -> Ship:
        return self.hull  # type: ignore[return-value]

    @cached_property
    def _whole(self) -> Mass:
        return self.inclined()

    @cached_property
    def _known(self) -> dict[tuple[float, float, float], Afloat]:
        return {}

    def centre(self, moment: float = 0.0, lift: float = 0.0, ahead: float = 0.0) -> Centre:
        """G with its liquids as they lie, under moments of the test weights.

        These are to starboard, up and forward.
        """
        whole = self._whole

        def at(t: float, tau: float) -> tuple[float, float, float]:
            total = np.array([ahead, moment, lift])
            for tank in self.tanks:
                total += tank.mass * np.array(tank.moved(t, tau))
            x, y, z = (total / whole.mass + [whole.x, whole.y, whole.z]).tolist()
            return x, y, z

        return at

    def state(self, moment: float = 0.0, lift: float = 0.0, ahead: float = 0.0) -> Afloat:
        """The floating ship under moments of the test weights."""
        if (moment, lift, ahead) not in self._known:
            start = min(
                self._known.items(), key=lambda known: abs(known[0][0] - moment), default=None
            )
            guess = None if start is None else (start[1].mean, start[1].tau, start[1].t)
            volume = self._whole.mass / (self.density * (1.0 + self.allowance))
            centre = self.centre(moment, lift, ahead)
            self._known[moment, lift, ahead] = afloat(
                self.ship, volume, centre, self.deflection, guess
            )
        return self._known[moment, lift, ahead]

    def equilibrium(self, moment: float = 0.0) -> tuple[float, float, float]:
        """Mean draft amidships, tangent of heel and tau."""
        found = self.state(moment)
        return found.mean, found.t, found.tau

    def _carried(self, ways: tuple[float, ...]) -> list[float]:
        """Moments by shift of weights that go by ``ways`` from their start when they are moved."""
        mass = {w.name: w.mass for w in self.weights}
        at = dict.fromkeys(mass, 0.0)
        found = [0.0]
        for moves, way in zip(self.moves, ways or (0.0,) * len(self.moves), strict=True):
            at.update((name, way) for name, _ in moves)
            found.append(sum(mass[n] * at[n] for n in at))
        return found

    def shift_lifts(self) -> list[float]:
        """Moments of the test weights' rise, by shift."""
        return self._carried(self.rises)

    def shift_trimmings(self) -> list[float]:
        """Moments of the test weights' travel forward, by shift."""
        return self._carried(self.travels)

    def _stands(self, axis: str, ways: tuple[float, ...]) -> dict[tuple[int, str], float]:
        start = {w.name: getattr(w, axis) for w in self.weights}
        return {
            (n, name): start[name] + way
            for n, (moves, way) in enumerate(zip(self.moves, ways, strict=False), start=1)
            for name, _ in moves
        }

    def heights(self) -> dict[tuple[int, str], float]:
        return self._stands("z", self.rises)

    def lengthwise(self) -> dict[tuple[int, str], float]:
        return self._stands("x", self.travels)

    def tangents(self) -> list[float]:
        every = zip(self.shift_moments(), self.shift_lifts(), self.shift_trimmings(), strict=True)
        return [self.state(self.held(moment), *others).t for moment, *others in every]

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
