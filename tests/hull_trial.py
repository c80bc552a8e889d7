"""Whole trials without errors on ships of closed form, heeled as far as asked, and their truth."""

from __future__ import annotations

from dataclasses import dataclass, replace
from functools import cache
from pathlib import Path

import numpy as np
from hull_forms import Displaced, Ship, afloat
from hull_scene import HullScene, balanced
from simulate import Mass, SlackTank
from write_trial import Style, trial_tables, trial_toml

HEAD = {
    "number": "T-1", "date": "2026-02-03", "place": "Basin", "berth": "slack lines",
    "weather": "calm", "water_depth": "20.0", "rules": "IMO",
}  # fmt: skip


@dataclass(frozen=True)
class Truth:
    """What a trial should give: the lightship, and the ship as inclined [m, t, t m].

    The ship as inclined has its weights at their start and its liquids as in an upright ship;
    ``mean`` to ``list_tan`` are its waterline (see `hull_forms`), ``gm`` the slope of its curve of
    levers there, liquids free. Moments and tangents are by shift.
    """

    displacement: float
    vcg: float
    lcg: float
    tcg: float
    inclined: Mass
    buoyancy: Displaced
    mean: float
    tau: float
    deflection: float
    list_tan: float
    gm: float
    moments: tuple[float, ...]
    lifts: tuple[float, ...]
    tangents: tuple[float, ...]
    scene: HullScene


def hull_scene(
    ship: Ship,
    *,
    degrees: tuple[float, ...] = (0.0, 2.0, 4.0, 8.0, 0.0, -2.0, -4.0, -8.0, 0.0),
    mean: float | None = None,
    tau: float = 0.006,
    deflection: float = 0.020,
    list_tan: float = 0.004,
    vcg: float | None = None,
    rise: float = 0.0,
    travel: float = 0.0,
    tanks: tuple[SlackTank, ...] = (),
    density: float = 1.025,
    allowance: float = 0.0,
    stations: int = 31,
    arc_points: int = 48,
) -> HullScene:
    """A ship with two weights, a few things to deduct and add, heeled to ``degrees`` at each shift.

    Zero degrees are the weights back at their start, where the ship has its list; the other heels
    are from upright. The weights stand ``rise`` higher and ``travel`` farther forward [m] whenever
    they are away from their start.
    """
    vcg = ship.vcg if vcg is None else vcg
    mean = ship.draft if mean is None else mean
    middle, deck = 0.45 * ship.lpp, 0.95 * ship.depth
    mass = ship.below(mean, tau, deflection, list_tan).volume * density * (1.0 + allowance)
    scene = HullScene(
        hull=ship,  # type: ignore[arg-type]
        light=Mass("lightship", 0.0, 0.0, 0.0, 0.0),
        density=density,
        deduct=(Mass("staging", 0.004 * mass, 0.3 * ship.lpp, 0.1 * ship.beam, deck),),
        add=(Mass("anchor", 0.003 * mass, 0.8 * ship.lpp, 0.05 * ship.beam, deck),),
        relocate=(),
        people=(Mass("A. Surveyor, in charge", 0.08, middle, 0.2, deck),),
        tanks=tanks,
        weights=tuple(Mass(n, 0.01 * mass, middle + dx, 0.0, deck) for n, dx in (("A", -1), ("B", 1))),
        moves=(),
        allowance=allowance,
        lengths={"P1": 3.75, "P2": 2.40},
        zeros={"P1": 0.11, "P2": 0.173},
        deflection=deflection,
        stations=stations,
        arc_points=arc_points,
    )  # fmt: skip
    heels = [float(np.tan(np.radians(d))) for d in degrees]
    most = max(heels, key=abs)
    (need,) = _levers(balanced(scene, mean, tau, list_tan, vcg), [most])
    # heavy enough to reach the largest heel at a third of the beam off the centreplane
    each = abs(need) / (0.67 * ship.beam) if most else 0.01 * mass
    scene = replace(scene, weights=tuple(replace(w, mass=each) for w in scene.weights))
    scene = balanced(scene, mean, tau, list_tan, vcg)
    moments = _levers(scene, heels, 2.0 * each * rise, 2.0 * each * travel)
    arms = [0.0 if h == 0.0 else m / (2.0 * each) for h, m in zip(heels, moments, strict=True)]
    return replace(
        scene,
        moves=tuple((("A", a), ("B", a)) for a in arms[1:]),
        rises=tuple(rise if h else 0.0 for h in heels[1:]) if rise else (),
        travels=tuple(travel if h else 0.0 for h in heels[1:]) if travel else (),
    )


def _levers(
    scene: HullScene, heels: list[float], lift: float = 0.0, ahead: float = 0.0
) -> list[float]:
    """The moments of the weights that hold a scene at tangents of heel."""
    mass = scene.inclined().mass
    start = scene.state()
    found = []
    for t in heels:
        if t == 0.0:
            found.append(0.0)
            continue
        centre = scene.centre(0.0, lift, ahead)
        at = afloat(
            scene.ship, start.buoyancy.volume, centre, scene.deflection,
            (start.mean, start.tau, t), t,
        )  # fmt: skip
        _, y, z = centre(t, at.tau)
        b = at.buoyancy
        found.append(mass * (b.y + b.z * t - y - z * t))
    return found


def truth_of(scene: HullScene) -> Truth:
    """The truth of a scene, by its own equilibria."""
    light, start = scene.light, scene.state()
    return Truth(
        displacement=light.mass, vcg=light.z, lcg=light.x, tcg=light.y,
        inclined=scene.inclined(), buoyancy=start.buoyancy,
        mean=start.mean, tau=start.tau, deflection=scene.deflection, list_tan=start.t,
        gm=scene.gm(), moments=tuple(scene.shift_moments()), lifts=tuple(scene.shift_lifts()),
        tangents=tuple(scene.tangents()), scene=scene,
    )  # fmt: skip


@cache
def _written(
    ship: Ship, style: Style | None, more: str, scene: tuple[tuple[str, object], ...]
) -> tuple[dict[str, str], Truth]:
    """The files and the truth of a trial; the equilibria of one are found once."""
    made = hull_scene(ship, **dict(scene))  # type: ignore[arg-type]
    style = style or Style()
    head = {**HEAD, "name": f"Test {ship.name}", "depth": str(ship.depth), "more": more}
    places = tuple(ship.lpp * s for s in (0.08, 0.5, 0.9))
    files = {"trial.toml": trial_toml(made, style, head), **trial_tables(made, style, places)}
    return files, truth_of(made)


def write_hull_trial(
    folder: Path, ship: Ship, *, style: Style | None = None, more: str = "", **scene: object
) -> Truth:
    """Write a trial without errors into ``folder`` and give its truth.

    ``scene`` as in `hull_scene`; ``more`` is added to trial.toml before the devices. Drafts are read
    at six marks, and figures are written in full unless the ``style`` rounds them.
    """
    files, truth = _written(ship, style, more, tuple(sorted(scene.items())))
    folder.mkdir(parents=True, exist_ok=True)
    for file, text in files.items():
        (folder / file).write_text(text, encoding="utf-8", newline="\n")
    return truth
