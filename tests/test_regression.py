"""The line fits against certified and published values."""

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from incline.regression import fit_grouped_line, slope_form

# J. Hansen, "An analytical treatment of the accuracy of the results of the inclining experiment",
# Naval Engineers Journal 97(4), May 1985; data as carried by A. Biran, Ship Hydrostatics and
# Stability, Butterworth-Heinemann 2003, example 7.1. Moment in ft ton, tangents of three pendulums.
HANSEN = np.array(
    [
        [3853.7, 0.01869, 0.01854, 0.01788],
        [2570.1, 0.01259, 0.01255, 0.01214],
        [1286.8, 0.00648, 0.00641, 0.00615],
        [3.8, 0.00042, 0.00047, 0.00000],
        [-3785.8, -0.01791, -0.01802, -0.01850],
        [-2523.3, -0.01194, -0.01203, -0.01235],
        [-1263.7, -0.00574, -0.00599, -0.00646],
        [-0.6, 0.00000, 0.00000, -0.00063],
    ]
)
MOMENT = np.tile(HANSEN[:, 0], 3)
TANGENT = HANSEN[:, 1:].T.ravel()
PENDULUM = np.repeat(np.arange(3), 8)
ONE = np.zeros(24, dtype=np.intp)


def test_hansen_published_line_through_the_origin():
    # The source's own method, moment on tangent without intercept: 208355.65 ft ton.
    assert pytest.approx(208355.65, abs=0.005) == (MOMENT @ TANGENT) / (TANGENT @ TANGENT)


def test_hansen_moment_on_tangent_with_an_intercept():
    # Recomputed from the data, independently of this program: 208361.13 ft ton.
    assert fit_grouped_line(TANGENT, MOMENT, ONE).slope == pytest.approx(208361.13, abs=0.005)


def test_hansen_tangent_on_moment():
    # Recomputed from the data, independently of this program: 208494.86 ft ton.
    assert 1 / fit_grouped_line(MOMENT, TANGENT, ONE).slope == pytest.approx(208494.86, abs=0.005)


def test_hansen_common_slope_with_an_intercept_for_each_pendulum():
    # Recomputed, to the digits known: b 4.796281e-6 +- 1.5214e-8 per ft ton, s 1.7757e-4, 20 dof.
    line = fit_grouped_line(MOMENT, TANGENT, PENDULUM)
    assert line.slope == pytest.approx(4.796281e-6, abs=5e-13)
    assert line.u_slope == pytest.approx(1.5214e-8, abs=5e-13)
    assert line.sd == pytest.approx(1.7757e-4, abs=5e-9)
    assert line.dof == 20


def test_hansen_single_pendulums():
    # Recomputed, to the digits known.
    alone = [1 / fit_grouped_line(MOMENT[:8], HANSEN[:, j], ONE[:8]).slope for j in (1, 2, 3)]
    assert alone == pytest.approx([208415.5, 208224.1, 208846.0], abs=0.05)


def test_hansen_slopes_agree_but_the_points_do_not_fit_a_line():
    # Recomputed: homogeneity of slopes F = 0.070; lack of fit F = 8.97 on (6, 14).
    line = fit_grouped_line(MOMENT, TANGENT, PENDULUM)
    rest = float(((TANGENT - line.fitted) ** 2).sum())
    apart = sum(
        float(((t - fit_grouped_line(MOMENT[:8], t, ONE[:8]).fitted) ** 2).sum())
        for t in HANSEN[:, 1:].T
    )
    homogeneity = (rest - apart) / 2 / (apart / 18)
    assert homogeneity == pytest.approx(0.070, abs=0.0005)
    means = HANSEN[:, 1:].mean(axis=1)
    ship = 3 * float(((means - fit_grouped_line(HANSEN[:, 0], means, ONE[:8]).fitted) ** 2).sum())
    assert (ship / 6) / ((rest - ship) / 14) == pytest.approx(8.97, abs=0.005)


# NIST Statistical Reference Datasets, Norris (linear, certified to 15 digits).
NORRIS_X = np.array(
    [0.2, 337.4, 118.2, 884.6, 10.1, 226.5, 666.3, 996.3, 448.6, 777.0, 558.2, 0.4, 0.6, 775.5, 666.9,
     338.0, 447.5, 11.6, 556.0, 228.1, 995.8, 887.6, 120.2, 0.3, 0.3, 556.8, 339.1, 887.2, 999.0, 779.0,
     11.1, 118.3, 229.2, 669.1, 448.9, 0.5]
)  # fmt: skip
NORRIS_Y = np.array(
    [0.1, 338.8, 118.1, 888.0, 9.2, 228.1, 668.5, 998.5, 449.1, 778.9, 559.2, 0.3, 0.1, 778.1, 668.8,
     339.3, 448.9, 10.8, 557.7, 228.3, 998.0, 888.8, 119.6, 0.3, 0.6, 557.6, 339.3, 888.0, 998.5, 778.9,
     10.2, 117.6, 228.9, 668.4, 449.2, 0.2]
)  # fmt: skip


def test_nist_norris():
    # 36 points in double precision: agreement to 1e-11 of certified values is rounding.
    line = fit_grouped_line(NORRIS_X, NORRIS_Y, np.zeros(36, dtype=np.intp))
    assert line.slope == pytest.approx(1.00211681802045, rel=1e-11)
    assert line.intercepts[0] == pytest.approx(-0.262323073774029, rel=1e-11)
    assert line.u_slope == pytest.approx(0.429796848199937e-3, rel=1e-11)
    assert line.sd == pytest.approx(0.884796396144373, rel=1e-11)
    assert line.dof == 34


def test_gum_h3_calibration_line():
    # JCGM 100:2008, H.3: thermometer corrections; slope 0.00218 (0.00067), intercept at 20 C
    # -0.1712, s 0.0035, to the digits printed.
    t = np.array(
        [21.521, 22.012, 22.512, 23.003, 23.507, 23.999, 24.513, 25.002, 25.503, 26.010, 26.511]
    )
    b = np.array(
        [-0.171, -0.169, -0.166, -0.159, -0.164, -0.165, -0.156, -0.157, -0.159, -0.161, -0.160]
    )
    line = fit_grouped_line(t - 20.0, b, np.zeros(11, dtype=np.intp))
    assert line.slope == pytest.approx(0.00218, abs=5e-6)
    assert line.u_slope == pytest.approx(0.00067, abs=5e-6)
    assert line.intercepts[0] == pytest.approx(-0.1712, abs=5e-5)
    assert line.sd == pytest.approx(0.0035, abs=5e-5)


@given(
    st.integers(1, 4),
    st.integers(3, 9),
    st.floats(1e-8, 1e-3),
    st.integers(0, 2**32 - 1),
)
def test_closed_form_equals_statsmodels(devices: int, shifts: int, slope: float, seed: int):
    rng = np.random.default_rng(seed)
    x = np.tile(rng.uniform(-1.0, 1.0, shifts) / slope * 0.05, devices)
    group = np.repeat(np.arange(devices), shifts)
    y = slope * x + rng.normal(size=devices)[group] + 1e-4 * rng.normal(size=len(x))
    # Both are double precision on order-one numbers; tangents of order one lose four digits
    # against a spread of 1e-4 to 0.1, so 1e-9 of the slope's scale is rounding.
    scale = 1.0 / float(np.ptp(x))
    each = np.arange(len(x))
    closed = slope_form(each, group, y, len(x)).slope(x, np.ones(devices))
    assert closed == pytest.approx(fit_grouped_line(x, y, group).slope, abs=1e-9 * scale)


def test_closed_form_broadcasts_over_draws_of_moments_and_lengths():
    shift, lengths = np.tile(np.arange(8), 3), np.array([2.0, 3.0, 4.0])
    form = slope_form(shift, PENDULUM, TANGENT * lengths[PENDULUM], 8)
    moments = np.stack([HANSEN[:, 0], 2.0 * HANSEN[:, 0], -HANSEN[:, 0]])
    one = form.slope(HANSEN[:, 0], lengths)
    assert one == pytest.approx(fit_grouped_line(MOMENT, TANGENT, PENDULUM).slope, rel=1e-12)
    drawn = form.slope(moments, np.stack([lengths, lengths, 2.0 * lengths]))
    assert drawn == pytest.approx([one, one / 2.0, -one / 2.0], rel=1e-12)
