"""The heeled-hull method on trials without errors: the truth by quadrature shared with nothing."""

import math
from dataclasses import replace

import numpy as np
import pytest
from hull_chain import worked
from hull_ships import (
    BOX,
    CATAMARAN,
    CURVED_VEE,
    CYLINDER,
    HIGH_CHINE,
    LOW_CHINE,
    PATROL,
    ROUND_BILGE,
    SWIM_BARGE,
    VEE,
)
from hull_trial import truth_of, write_hull_trial
from simulate import Mass, SlackTank
from write_trial import Style, trial_tables

from incline.hull import pose_of
from incline.hull.spacing import spacing_misses
from incline.setup import hull_of

BAR = 1e-4
"""m of KG: a tenth of the millimetre to which KG is printed."""
SMALL = (0.0, 1.0, 2.0, 3.0, 0.0, -1.0, -2.0, -3.0, 0.0)
FEW = (0.0, 2.0, 4.0, 8.0, -2.0, -4.0, -8.0)
CASES = {
    "box": (BOX, {}),
    "vee": (VEE, {}),
    "curved vee": (CURVED_VEE, {}),
    "low chine": (LOW_CHINE, {}),
    "high chine": (HIGH_CHINE, {}),
    "swim-ended barge": (SWIM_BARGE, {}),
    "patrol vessel": (PATROL, {}),
    # GM 5.9 m, and wider than long: 8 deg would put the deck edge under
    "catamaran": (CATAMARAN, {"degrees": SMALL}),
    "cylinder": (CYLINDER, {"stations": 3, "arc_points": 200}),
    # chords of an arc: KG is off by their square, 0.08 mm with 48 of them
    "round bilge": (ROUND_BILGE, {"degrees": FEW, "arc_points": 64}),
}


@pytest.mark.parametrize("name", CASES)
def test_lightship_without_errors(name, tmp_path):
    ship, more = CASES[name]
    truth = write_hull_trial(tmp_path, ship, **more)
    found = worked(tmp_path).found
    assert float(found.light_vcg) == pytest.approx(truth.vcg, abs=BAR)
    # Splines along the hull and chords of arcs leave less than 5e-5 of the volume (0.1 mm in a
    # draft of 2 m), and as many of the length in LCG; TCG follows the list, whose share is 1/250.
    assert float(found.light_displacement) == pytest.approx(truth.displacement, rel=5e-5)
    assert float(found.light_lcg) == pytest.approx(truth.lcg, abs=1e-5)
    assert float(found.light_tcg) == pytest.approx(truth.tcg, abs=1e-5)
    # The heels are those at which the truth floats, to the same share.
    assert found.heeling.heel == pytest.approx(truth.tangents, abs=1e-6)


def test_list_to_port_trim_by_the_bow_and_hog(tmp_path):
    truth = write_hull_trial(
        tmp_path, HIGH_CHINE, degrees=FEW, list_tan=-0.009, tau=-0.004, deflection=-0.025
    )
    found = worked(tmp_path).found
    assert float(found.light_vcg) == pytest.approx(truth.vcg, abs=BAR)
    assert float(found.light_tcg) == pytest.approx(truth.tcg, abs=1e-5)
    assert truth.tcg < -0.005


TANK = SlackTank("day tank", "gas oil", "slack", 0.85, 0.16, 9.0, 0.8, 1.1, 0.4, 0.8)
POCKET = SlackTank("double bottom", "water", "slack", 1.0, 1.2, 10.0, 0.0, 0.6, 4.0, 3.0, 1.0)


BOTH = {"rise": -0.6, "travel": -3.0, "allowance": 0.006}


@pytest.mark.parametrize(
    "ship, more",
    [
        (HIGH_CHINE, {"rise": 1.0}),
        (HIGH_CHINE, {"travel": 4.0}),
        (HIGH_CHINE, {"tanks": (POCKET,)}),
        (PATROL, {**BOTH, "tanks": (POCKET,)}),
    ],
    ids=["rise", "travel", "pocketing tank", "all"],
)
def test_weights_that_rise_or_travel_and_liquid_that_meets_the_bottom(ship, more, tmp_path):
    truth = write_hull_trial(tmp_path, ship, degrees=FEW, **more)
    found = worked(tmp_path).found
    assert float(found.light_vcg) == pytest.approx(truth.vcg, abs=BAR)
    # a weight that rises by 1 m, a hundredth of the ship, carries G's height past LCG and TCG
    assert float(found.light_lcg) == pytest.approx(truth.lcg, abs=2e-5)
    assert float(found.light_tcg) == pytest.approx(truth.tcg, abs=2e-5)


def test_the_tank_pockets_within_these_heels():
    # Closed form: a box tank's liquid reaches the bottom at t = 2 h / b.
    assert 2.0 * POCKET.level / POCKET.breadth < np.tan(np.radians(4.0))


def test_fixed_moment_for_a_tank_that_pockets_is_the_unsafe_error(tmp_path):
    """The same trial with the tank recorded by its free-surface moment alone."""
    truth = write_hull_trial(tmp_path, PATROL, degrees=FEW, tanks=(POCKET,))
    file = tmp_path / "tanks.csv"
    text = file.read_text(encoding="utf-8")
    assert ",box" in text
    file.write_text(text.replace(",box", ","), encoding="utf-8")
    found = worked(tmp_path).found
    # The liquid moves less far than the fixed moment says, so that too much is taken off.
    assert float(found.light_vcg) < truth.vcg - 0.005


def test_slack_tank_that_stays_clear(tmp_path):
    # A fixed moment is exact to t^2 / 2 of itself: 0.0136 t m of 60 t at 8 deg, under a micron.
    truth = write_hull_trial(tmp_path, HIGH_CHINE, degrees=FEW, tanks=(TANK,))
    found = worked(tmp_path).found
    assert float(found.light_vcg) == pytest.approx(truth.vcg, abs=1e-5)
    assert float(found.fsm) == pytest.approx(0.85 * 0.4 * 0.8**3 / 12.0, rel=1e-12)


@pytest.mark.parametrize("ship", [HIGH_CHINE, BOX], ids=lambda s: s.name)
def test_changes_between_drafts_and_shifts(ship, tmp_path):
    """A crane mat came aboard and a skip went ashore after the drafts were read."""
    mass = 0.03 * ship.below(ship.draft).volume
    mat = Mass("crane mat", mass, 0.3 * ship.lpp, -0.2 * ship.beam, ship.depth)
    skip = Mass("skip", 0.5 * mass, 0.7 * ship.lpp, -0.1 * ship.beam, ship.depth)
    truth = write_hull_trial(tmp_path, ship, degrees=FEW)
    # The ship of the shifts is that of the trial, the mat among what is to come off.
    scene = truth.scene
    before = replace(scene, deduct=(*scene.deduct, skip), light=_without(scene.light, mat))
    truth = truth_of(replace(scene, deduct=(*scene.deduct, mat), light=_without(scene.light, mat)))
    places = tuple(ship.lpp * s for s in (0.08, 0.5, 0.9))
    for file, of in (("drafts.csv", before), ("ledger.csv", truth.scene)):
        text = trial_tables(of, Style(), places)[file]
        (tmp_path / file).write_text(text, encoding="utf-8")
    rows = "".join(
        f"{change},{m.name},{m.mass!r},{m.x!r},{m.y!r},{m.z!r}\n"
        for change, m in (("aboard", mat), ("ashore", skip))
    )
    head = "change,item,mass [t],x [m],y [m],z [m]\n"
    (tmp_path / "changes.csv").write_text(head + rows, encoding="utf-8")
    found = worked(tmp_path).found
    assert float(found.condition.displacement) > 1.01 * float(found.as_read.displacement)
    assert float(found.as_read.list_tan) > 0.01
    assert float(found.condition.list_tan) == pytest.approx(0.004, abs=1e-6)
    assert float(found.light_displacement) == pytest.approx(truth.displacement, rel=1e-6)
    assert float(found.light_vcg) == pytest.approx(truth.vcg, abs=BAR)
    assert float(found.light_lcg) == pytest.approx(truth.lcg, abs=1e-5)
    assert float(found.light_tcg) == pytest.approx(truth.tcg, abs=1e-5)


def _without(light: Mass, other: Mass) -> Mass:
    """A lightship that makes the same ship as inclined with the other thing aboard."""
    mass = light.mass - other.mass
    at = [(light.mass * getattr(light, c) - other.mass * getattr(other, c)) / mass for c in "xyz"]
    return Mass(light.name, mass, *at)


LAYERS = ((0.5, 1.000), (2.5, 1.026))  # depth of the sample, density: the step is at 1.5 m


def layered_box(draft: float, t: float) -> tuple[float, float, float]:
    """Mass, and its moments N and height, of a box 60 x 12 m in the two layers: closed form.

    The water below 1.5 m, measured along gravity, is heavier by the step; each body of water is
    a box heeled by tangent t.
    """
    area, across = 60.0 * 12.0, 60.0 * 12.0**3 / 12.0
    step = LAYERS[1][1] - LAYERS[0][1]
    mass = lever = 0.0
    for density, deep in ((LAYERS[0][1], draft), (step, draft - 1.5 * math.hypot(1.0, t))):
        mass += density * area * deep
        high = 0.5 * (area * deep**2 + across * t * t)
        lever += density * (across * t + high * t)
    return mass, lever / mass, area


def test_layers_of_water_on_a_box(tmp_path):
    """Displacement and KG of a box in two layers, its weights' moments by hand."""
    write_hull_trial(tmp_path, BOX, list_tan=0.0, tau=0.0, deflection=0.0, rise=0.0)
    toml = tmp_path / "trial.toml"
    text = toml.read_text(encoding="utf-8")
    toml.write_text(f'[density]\nprofile = "layers"\n{text}', encoding="utf-8")
    samples = "".join(f"here,{depth},{density}\n" for depth, density in LAYERS)
    (tmp_path / "density.csv").write_text(f"place,depth [m],density [t/m3]\n{samples}", "utf-8")
    mass, _, area = layered_box(3.0, 0.0)
    vcg, lines, shifts = 4.2, [], ["shift,time,moment [t m]"]
    for n, degrees in enumerate((0.0, 3.0, 6.0, -3.0, -6.0)):
        t = math.tan(math.radians(degrees))
        # the draft amidships that keeps the mass: the interface rises with 1 / cos(heel)
        step = (LAYERS[1][1] - LAYERS[0][1]) / LAYERS[1][1]
        draft = 3.0 + step * 1.5 * (math.hypot(1.0, t) - 1.0)
        now, lever, _ = layered_box(draft, t)
        assert now == pytest.approx(mass, rel=1e-12)
        shifts.append(f"{n},09:{10 + n},{mass * (lever - vcg * t)!r}")
        lines += [f"{n},{d},{1000.0 * k * (t + 0.1)!r}" for d, k in (("P1", 3.75), ("P2", 2.4))]
    (tmp_path / "shifts.csv").write_text("\n".join(shifts) + "\n", encoding="utf-8")
    (tmp_path / "readings.csv").write_text(
        "shift,device,reading [mm]\n" + "\n".join(lines) + "\n", encoding="utf-8"
    )
    (tmp_path / "weights.csv").unlink()
    (tmp_path / "ledger.csv").unlink()
    trial, found, *_ = worked(tmp_path)
    assert trial.settings.layers
    assert mass == pytest.approx(area * (1.000 * 1.5 + 1.026 * 1.5), rel=1e-12)
    assert float(found.condition.displacement) == pytest.approx(mass, rel=1e-12)
    assert float(found.vcg) == pytest.approx(vcg, abs=1e-6)
    # BM goes with the water at the bottom: the interface heels as the surface does.
    across = 60.0 * 12.0**3 / 12.0
    assert float(found.condition.buoyancy.bmt) == pytest.approx(1.026 * across / mass, rel=1e-12)


@pytest.mark.parametrize("arc_points", [12, 24, 48])
def test_chords_of_arcs_lose_the_square_of_their_length(arc_points, tmp_path):
    """Order two, and what is stated for the spacing of points is most of the error."""
    truth = write_hull_trial(
        tmp_path, CYLINDER, degrees=(0.0, 4.0, 8.0, -4.0, -8.0), stations=3, arc_points=arc_points
    )
    trial, found, *_ = worked(tmp_path)
    error = truth.vcg - float(found.light_vcg)
    now = found.condition
    pose = pose_of(now.mean, now.tau, now.deflection, None)
    _, (volume, km, _) = spacing_misses(trial.offsets, hull_of(trial), pose)
    # A chord of an angle a leaves a segment R^2 (a - sin a) / 2 of its sector.
    angle = math.acos(-0.4) / arc_points
    exact = CYLINDER.below(float(now.mean), float(now.tau), 0.020).volume
    left = exact / float(now.buoyancy.volume) - 1.0
    wetted = 2.0 * math.acos(2.0 / 5.0) * 25.0 * 40.0 / 2.0  # R^2 times half the angle, times L
    assert left == pytest.approx(wetted * angle**2 / 6.0 / exact, rel=0.03)
    # Two chords in place of one take three quarters of it away, the rest is added.
    assert volume == pytest.approx(left, rel=0.03)
    # KM of the upright ship depends on where its waterline meets a chord; at the heels of a test it
    # meets several, and KG is off by as much, either way.
    assert 0.25 * error < abs(km) < 4.0 * error
