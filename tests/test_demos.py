"""The demo trials recover the ships they were made from."""

import json
import math

import pytest
from conftest import DEMO_TRIALS
from demos import CLEAN, DEMOS, demo_files
from simulate import WallSided

from incline import read_trial, reduce, to_json


def truth(name):
    light = DEMOS[name][0].light
    return light.mass, light.z, light.x, light.y


def found(result):
    light = result.outcome.lightship
    return light.displacement, light.vcg, light.lcg, light.tcg


@pytest.mark.parametrize("name", DEMOS)
def test_shipped_files_are_those_of_the_script(name):
    shipped = {p.name: p.read_text(encoding="utf-8") for p in (DEMO_TRIALS / name).iterdir()}
    assert shipped == demo_files(name)


@pytest.mark.parametrize("name", CLEAN)
def test_demo_recovers_its_true_lightship(name):
    result = reduce(read_trial(DEMO_TRIALS / name))
    for estimate, true in zip(found(result), truth(name), strict=True):
        assert abs(estimate.value - true) < 3.0 * estimate.u
    assert result.outcome.ledger.balance < 1e-9 * truth(name)[0] * 10.0


def straight_line_bias(name, result):
    """KG error of a straight line through the exact tangents of a wall-sided ship with liquids.

    D GM t + 1/2 (D BM - FSM) t^3 = M + const, so the slope misses by the regression of the cubic
    term on the moment: worked out here with the exact tangents.
    """
    scene = DEMOS[name][0]
    tangents = [scene.equilibrium(m)[1] for m in scene.shift_moments()]
    ship = result.outcome.as_inclined
    cubic = 0.5 * (ship.bmt - result.outcome.free_surface.correction)
    mean = math.fsum(tangents) / len(tangents)
    mean_cube = math.fsum(t**3 for t in tangents) / len(tangents)
    top = math.fsum((t - mean) * (t**3 - mean_cube) for t in tangents)
    bottom = math.fsum((t - mean) ** 2 for t in tangents)
    return cubic * top / bottom * ship.displacement / truth(name)[0]


@pytest.mark.parametrize("name", CLEAN)
@pytest.mark.parametrize("semicolon", [False, True])
@pytest.mark.parametrize("units", ["metric", "us"])
def test_noise_free_demo_recovers_everything_but_the_straight_line_bias(
    name, units, semicolon, demo_folder
):
    folder = demo_folder(name, rounded=False, noisy=False, units=units, semicolon=semicolon)
    result = reduce(read_trial(folder))
    displacement, vcg, lcg, tcg = (e.value for e in found(result))
    true = truth(name)
    assert displacement == pytest.approx(true[0], abs=1e-6)
    bias = straight_line_bias(name, result)
    assert true[1] - vcg == pytest.approx(bias, rel=0.02)
    assert bias > 1e-4  # it is there, and on the unsafe side
    # With the bias put back KG is right to a micron; LCG carries tau times the bias, and TCG the
    # list's share of the same cubic term.
    tau = result.outcome.as_inclined.waterline.tau
    assert lcg == pytest.approx(true[2] - tau * bias, abs=1e-6)
    list_tan = result.outcome.as_inclined.list_tan
    assert tcg == pytest.approx(true[3] + list_tan * bias, abs=1e-6)


@pytest.mark.parametrize("name", CLEAN)
def test_units_and_separators_do_not_change_the_result(name, demo_folder):
    def numbers(value):
        if isinstance(value, dict):
            return [n for k, v in sorted(value.items()) if k != "digest" for n in numbers(v)]
        if isinstance(value, list):
            return [n for v in value for n in numbers(v)]
        return [value] if isinstance(value, int | float) else []

    styles = [(u, s) for u in ("metric", "us") for s in (False, True)]
    results = [
        numbers(
            json.loads(
                to_json(
                    reduce(
                        read_trial(
                            demo_folder(name, f"{u}{s}", rounded=False, units=u, semicolon=s)
                        )
                    )
                )
            )
        )
        for u, s in styles
    ]
    assert len(results[0]) > 60
    for other in results[1:]:
        # 1e-9 in m, t, t m, deg. Figures of thousands are sensitivities, differences that lose six
        # digits of sixteen, and degrees of freedom, which go with their fourth power: 1e-8.
        assert other == pytest.approx(results[0], abs=1e-9, rel=1e-8)


def test_simulated_hull_against_its_own_integral():
    # The closed form of the wall-sided hull against direct integration (scipy), heel and trim.
    from scipy.integrate import dblquad

    hull = WallSided(lpp=30.0, beam=8.0, chine=1.0, power=4)
    area, centre, across, along = hull.waterplane()
    draft, t, tau = 2.0, 0.06, 0.01

    def half(x, _=0.0):
        return 4.0 * (1.0 - (x / 30.0) ** 4)

    def above(y, x):
        return draft + t * y - tau * (x - centre)

    def integral(weight):
        # the column from the chine up to the inclined waterline
        return dblquad(weight, 0.0, 30.0, lambda x: -half(x), half, epsabs=1e-9)[0]

    low = area * 2.0 / 3.0
    volume = low + integral(lambda y, x: above(y, x) - 1.0)
    assert volume == pytest.approx(hull.upright(draft)[0], rel=1e-9)
    assert integral(lambda y, x: y * (above(y, x) - 1.0)) == pytest.approx(across * t, rel=1e-9)
    x_moment = low * centre + integral(lambda y, x: x * (above(y, x) - 1.0))
    assert x_moment == pytest.approx(hull.upright(draft)[1] - along * tau, rel=1e-9)
    z_moment = low * 0.6 + integral(lambda y, x: 0.5 * (above(y, x) ** 2 - 1.0))
    expected = hull.upright(draft)[2] + 0.5 * (across * t**2 + along * tau**2)
    assert z_moment == pytest.approx(expected, rel=1e-9)
