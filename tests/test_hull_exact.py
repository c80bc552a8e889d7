"""The integrated hull against closed forms: boxes, prisms, curves, vertical sides.

Figures are exact closed forms (L 60, B 12, T 3, KG 4.2, 1.025 t/m3 unless said) and hold to half of
their last digit. Where points or stations stand for a curve, two spacings are carried to none
(Richardson), and the order in which the error falls is shown.
"""

from functools import cache

import numpy as np
import pytest
from drawn import (  # fmt: skip
    carried,
    drawn,
    levers,
    offsets,
    one,
    pose,
    prism,
    slopes,
    station,
    stretches,
    upright_sides,
)
from hull_ships import BOX, CATAMARAN, VEE
from hypothesis import given
from hypothesis import strategies as st
from scipy.integrate import simpson
from scipy.optimize import minimize_scalar

from incline.hull import Hull, settle
from incline.record import Body


@cache
def hull(ship):
    return Hull(drawn(ship), ship.lpp)


def below(h, *waterline):
    return h.displaced(pose(*waterline))


def centres(found):
    return [float(v) for v in (found.volume, found.x, found.y, found.z)]


# --- box, with and without trim --------------------------------------------------------------------


def test_box():
    found = below(hull(BOX), 3.0)
    assert found.volume == pytest.approx(2160.0, rel=1e-13)
    assert 1.025 * found.volume == pytest.approx(2214.0, rel=1e-13)
    figures = (found.z, found.bmt, found.z + found.bmt, found.bml, found.x, found.lcf)
    assert figures == pytest.approx((1.5, 4.0, 5.5, 100.0, 30.0, 30.0), rel=1e-12)
    assert (found.y, found.area_y) == pytest.approx((0.0, 0.0), abs=1e-12)


def test_box_inclined():
    # w d = D sin/cos (GM + BM t^2 / 2), GM 1.3 m at 1, 2, 3, 4 degrees: D (N - KG t). The heels are
    # given to 9 decimals, worth 3000 t m x 5e-10.
    t = np.array([0.017455065, 0.034920769, 0.052407779, 0.069926812])
    moments = 2214.0 * (levers(hull(BOX), 3.0, t, 4.2) - 4.2 * t)
    given = [50.262717, 100.697523, 151.477445, 202.777395]
    assert moments == pytest.approx(given, abs=5e-7 + 3000.0 * 5e-10)
    assert slopes(hull(BOX), 3.0, t) == pytest.approx(5.5 + 6.0 * t**2, rel=1e-9)  # KM + 3/2 BM t^2


def test_classical_kg_of_a_box_is_low():
    # KM less the slope of N, by least squares through the origin of tangent on moment: low by 0.609,
    # 2.439, 5.493, 9.780 mm when the test is held at 0 and +- 1, 2, 3, 4 degrees.
    for degrees, low in zip((1, 2, 3, 4), (0.609, 2.439, 5.493, 9.780), strict=True):
        t = np.tan(np.radians([-degrees, 0.0, degrees]))
        arm = levers(hull(BOX), 3.0, t, 4.2) - 4.2 * t
        gm = (arm @ arm) / (arm @ t)
        assert 1000.0 * (gm - 1.3) == pytest.approx(low, abs=5e-4)


def test_least_km_of_a_box():
    # At T = B / sqrt(6) = 4.898979: dKM/dT is zero there, and KM = T.
    h = hull(BOX)

    def km(draft):
        found = below(h, draft)
        return float(found.z + found.bmt)

    at = minimize_scalar(km, bounds=(4.0, 5.8), method="bounded", options={"xatol": 1e-9}).x
    assert at == pytest.approx(4.898979, abs=5e-7)
    assert km(at) == pytest.approx(4.898979, abs=5e-7)


@given(tau=st.floats(-0.04, 0.04), mean=st.floats(2.0, 4.0), vcg=st.floats(1.0, 6.0))
def test_box_with_trim(tau, mean, vcg):
    # x_B = L/2 - L^2 tau/(12 T), z_B = T/2 + L^2 tau^2/(24 T); LCG = x_B + tau (KG - z_B). The other
    # way round, that LCG gives the trim.
    x, z = 30.0 - 300.0 * tau / mean, mean / 2.0 + 150.0 * tau**2 / mean
    found = below(hull(BOX), mean, tau)
    assert (found.volume, found.x, found.z) == pytest.approx((720.0 * mean, x, z), rel=1e-12)
    lcg = x + tau * (vcg - z)
    arrays = (np.asarray(v) for v in (720.0 * mean, vcg, lcg))
    at, _ = settle(hull(BOX), pose(mean + 0.1, 0.0), *arrays)
    assert (at.mean, at.tau) == pytest.approx((mean, tau), abs=1e-9)


def test_catamaran():
    # Two boxes 30 x 2 x 1.2 m, centres 6 m apart, the second a mirror image: volume 144, I 1120,
    # BM 7.777778, KM 8.377778. Vertical sides: N = KM t + BM t^3 / 2.
    found = below(hull(CATAMARAN), 1.2)
    assert (found.volume, found.area_yy) == pytest.approx((144.0, 1120.0), rel=1e-12)
    assert (found.bmt, found.z + found.bmt) == pytest.approx((7.777778, 8.377778), abs=5e-7)
    t = np.array([-0.08, 0.02, 0.05])
    expected = (0.6 + 70.0 / 9.0) * t + 35.0 / 9.0 * t**3
    assert levers(hull(CATAMARAN), 1.2, t) == pytest.approx(expected, rel=1e-9)


# --- prisms of other sections ----------------------------------------------------------------------


def test_triangular_prism():
    # Apex down, half angle 45 degrees, T 3, L 40: volume 360, KB 2, BM 2, KM 4.
    found = below(hull(VEE), 3.0)
    figures = (found.volume, found.z, found.bmt, found.z + found.bmt)
    assert figures == pytest.approx((360.0, 2.0, 2.0, 4.0), rel=1e-12)
    angle = np.radians([2.0, 4.0, 10.0, 20.0])
    kn = levers(hull(VEE), 3.0, np.tan(angle)) * np.cos(angle)
    assert kn == pytest.approx([0.139683182, 0.279710592, 0.705649068, 1.468826533], abs=5e-10)


def cylinder(angles):
    """Chords of a circle of radius 5 m that stands on z = 0, at angles from straight down."""
    return Hull(prism(np.stack([5.0 * np.sin(angles), 5.0 - 5.0 * np.cos(angles)], -1), (0.0, 40.0)), 40.0)  # fmt: skip


def test_circular_cylinder():
    # R 5, T 3, L 40: volume 792.673425, KB 1.762547718, BM 3.237452282, KM 5. The waterline meets a
    # point of the section at every spacing, so that the chords' error is a series in their square.
    water = np.arccos(0.4)

    def figures(steps):
        found = below(cylinder(stretches([0.0, water, 2.0], steps)), 3.0)
        return np.array([found.volume, found.z, found.bmt, found.z + found.bmt])

    exact = np.array([792.673425, 1.762547718, 3.237452282, 5.0])
    found, coarse = carried(figures, 200, order=2)
    assert found[0] == pytest.approx(exact[0], abs=5e-7)
    assert found[1:] == pytest.approx(exact[1:], abs=5e-10)
    assert np.log2((coarse - exact) / (figures(400) - exact)) == pytest.approx(2.0, abs=0.05)


def test_circular_cylinder_has_km_at_its_centre_at_every_heel():
    # N = R t. 2000 chords of 1 mm leave (1e-3)^2 / 12 = 8e-8 of it.
    h = cylinder(np.linspace(0.0, 2.0, 2001))
    angle = np.radians([-20.0, -8.0, 0.5, 1.0, 4.0, 8.0, 20.0])
    n = levers(h, 3.0, np.tan(angle))
    assert n / np.tan(angle) == pytest.approx(5.0, rel=2e-7)
    assert slopes(h, 3.0, np.tan(angle)) == pytest.approx(
        5.0, rel=2e-6
    )  # the waterplane's ends on chords


def parabola(nodes, steps):
    """Half-breadth 6 sqrt(z/3), by chords between even steps of breadth; L 50."""
    y = stretches(nodes, steps)
    return Hull(prism(np.stack([y, y**2 / 12.0], axis=-1), (0.0, 50.0)), 50.0)


def test_parabolic_section_upright():
    # T 3: volume 1200, KB 1.8, BM 6, KM 7.8. Chords between even steps of a parabola lose exactly
    # the square of the step, but for the moments' higher terms.
    def figures(steps):
        found = below(parabola([0.0, 6.0, 8.0], steps), 3.0)
        return np.array([found.volume, found.z, found.bmt, found.z + found.bmt])

    exact = np.array([1200.0, 1.8, 6.0, 7.8])
    found, coarse = carried(figures, 60, order=2)
    assert found == pytest.approx(exact, rel=1e-8)
    assert np.log2((coarse - exact) / (figures(120) - exact)) == pytest.approx(2.0, abs=0.02)


@pytest.mark.parametrize("degrees, gz", [(2, 0.097846266), (4, 0.196341404), (10, 0.502411690)])
def test_parabolic_section_heeled(degrees, gz):
    # The waterline cuts a breadth of 12 m at every heel, about y = 6 t; KG 5. Points stand at both
    # ends of it.
    angle = np.radians(degrees)
    t = np.tan(angle)

    def lever(steps):
        h = parabola([0.0, 6.0 - 6.0 * t, 6.0 + 6.0 * t, 9.0], steps)
        return (levers(h, 3.0, t, 5.0, volume=1200.0) - 5.0 * t) * np.cos(angle)

    found, coarse = carried(lever, 150, order=2)
    assert found == pytest.approx(gz, abs=5e-10)
    assert np.log2((coarse - found) / (lever(300) - found)) == pytest.approx(2.0, abs=0.05)
    wall_sided = (2.8 + 3.0 * t**2) * np.sin(angle)  # exact here, GM 2.8
    assert found == pytest.approx(wall_sided, abs=5e-10)


# --- hulls that change along their length ----------------------------------------------------------


def wigley(steps, count):
    """L 100, B 10, T 6.25: y = 5 (1 - (2x/L)^2) (1 - (1 - z/T)^2), vertical sides above T."""
    z = stretches([0.0, 3.0, 6.25], steps)
    shape = np.append(1.0 - (1.0 - z / 6.25) ** 2, 1.0)
    heights = np.append(z, 8.0)
    x = np.linspace(0.0, 100.0, count)
    plan = 5.0 * (1.0 - (x / 50.0 - 1.0) ** 2)
    return Hull(one(*(station(a, np.stack([b * shape, heights], -1)) for a, b in zip(x, plan, strict=True))), 100.0)  # fmt: skip


@pytest.mark.parametrize(
    "draft, exact",
    [(6.25, (2777.777778, 666.666667, 3809.523810, 3.90625, 1.371428571, 120.0)),
     (3.0, (806.4, 486.4, 1479.534744, None, None, None))],
)  # fmt: skip
def test_wigley_hull(draft, exact):
    # Volume, Aw, I_T, KB, BM, BM_L. The plan is a parabola, which splines hold exactly.
    def figures(steps):
        f = below(wigley(steps, 21), draft)
        return np.array([f.volume, f.area, f.area_yy, f.z, f.bmt, f.bml])

    found, _ = carried(figures, 100, order=2)
    digits = (5e-7, 5e-7, 5e-7, 5e-9, 5e-10, 5e-9)
    for value, expected, half in zip(found, exact, digits, strict=True):
        assert expected is None or value == pytest.approx(expected, abs=half)


def half_ellipse(count):
    """Stations ``count`` apart evenly in s on an ellipse 80 x 16 m, crowded at its blunt ends.

    x = 40 sin(pi/2 sin(pi s/2)): half-breadths there go straight to zero with the distance in s^2.
    """
    s = np.sin(np.pi / 2.0 * np.linspace(-1.0, 1.0, count + 1))
    return 40.0 + 40.0 * np.sin(np.pi / 2.0 * s), 8.0 * np.cos(np.pi / 2.0 * s)


VERTICAL = {
    "rectangle": (lambda _: (np.array([0.0, 80.0]), np.array([8.0, 8.0])), 1.0, 2.0 / 3.0),
    "ellipse": (half_ellipse, np.pi / 4.0, 3.0 / 4.0),
    "parabola": (lambda _: (np.linspace(0.0, 80.0, 9), 8.0 * (1.0 - np.linspace(-1.0, 1.0, 9) ** 2)), 2.0 / 3.0, 4.0 / 5.0),
    "diamond": (lambda _: (np.array([0.0, 40.0, 40.0, 80.0]), np.array([0.0, 8.0, 8.0, 0.0])), 0.5, 5.0 / 6.0),
}  # fmt: skip
"""Waterplanes 80 x 16 m: stations, share of the rectangle, share of deflection in the volume."""


def vertical(name, count, *waterline):
    f = below(Hull(upright_sides(*VERTICAL[name][0](count), 8.0), 80.0), *waterline)
    return np.array([f.volume, f.bmt, f.z, f.x])


@pytest.mark.parametrize(
    "name, volume, bm",
    [
        ("ellipse", 5026.548246, 3.2),
        ("diamond", 3200.0, 2.133333),
        ("parabola", 4266.666667, 2.925714),
    ],
)
def test_vertical_prisms(name, volume, bm):
    # L 80, B 16, T 5. The diamond has a knuckle amidships: its station stands there twice.
    found, coarse = carried(lambda n: vertical(name, n, 5.0), 200, order=4)
    assert found[0] == pytest.approx(volume, abs=5e-7)
    assert found[1] == pytest.approx(bm, abs=5e-7)
    assert found[2:] == pytest.approx([2.5, 40.0], rel=1e-12)
    if name == "ellipse":
        error, finer = (vertical(name, n, 5.0)[0] / (1600.0 * np.pi) - 1.0 for n in (200, 400))
        assert coarse[0] == pytest.approx(volume, rel=1e-5)
        assert np.log2(error / finer) == pytest.approx(4.0, abs=0.3)


@pytest.mark.parametrize("name", VERTICAL)
@pytest.mark.parametrize("deflection", [0.05, -0.12])
def test_share_of_a_parabolic_deflection(name, deflection):
    # A vertical-sided hull takes up k x deflection x Aw: k = 2/3, 3/4, 4/5, 5/6.
    _, share, k = VERTICAL[name]
    area = 1280.0 * share
    found, _ = carried(lambda n: vertical(name, n, 5.0, 0.0, deflection), 100, order=4)
    assert found[0] - 5.0 * area == pytest.approx(k * deflection * area, rel=1e-6)


# --- stations: order of convergence, and a published waterplane ------------------------------------


def test_error_of_stations_falls_with_the_fourth_power_of_their_distance():
    # Half-breadth 6 cos(pi (x - 30)/80) (closed form): area 12 x 160/pi sin(3 pi/8), T 3.
    exact = 12.0 * 160.0 / np.pi * np.sin(3.0 * np.pi / 8.0) * 3.0

    def error(count):
        x = np.linspace(0.0, 60.0, count)
        h = Hull(upright_sides(x, 6.0 * np.cos(np.pi * (x - 30.0) / 80.0), 5.0), 60.0)
        return abs(float(below(h, 3.0).volume) / exact - 1.0)

    # the spline's ends add a term of the fifth power, which fades
    errors = np.array([error(n) for n in (11, 41, 81, 161)])
    assert errors[0] < 1e-5
    assert np.log2(errors[2] / errors[3]) == pytest.approx(4.0, abs=0.3)
    assert np.log2(errors[1] / errors[3]) == pytest.approx(8.0, abs=0.6)


def test_error_of_points_falls_with_the_square_of_their_distance():
    # The circular section with points at even steps, whether the waterline meets one or not.
    error = [
        abs(float(below(cylinder(np.linspace(0.0, 2.0, n + 1)), 3.0).volume) / 792.673425 - 1.0)
        for n in (16, 32, 64, 128, 256)
    ]
    orders = np.log2(np.array(error[:-1]) / error[1:])
    assert np.mean(orders) == pytest.approx(2.0, abs=0.1)


def test_b13_waterplane():
    # Barrass & Derrett, Ship Stability for Masters and Mates, 5th ed., p. 262 (read): half-ordinates
    # from forward at 3 m: area 51.6 m2, centre of flotation 9.767 m from forward. Those are of
    # Simpson's rule, parabolas through three ordinates; the program's spline through all seven is
    # another curve through the same ordinates. Both are right for cubics: they differ by about h/90
    # of each fourth difference on both sides of the ship, for every pair of intervals.
    half = np.array([0.0, 1.2, 1.5, 1.8, 1.8, 1.5, 1.2])[::-1]
    x = np.linspace(0.0, 18.0, 7)
    found = below(Hull(upright_sides(x, half, 3.0), 18.0), 1.0)
    apart = 2.0 * 3.0 / 90.0 * np.abs(np.diff(half, 4)).sum()
    rule = 2.0 * simpson(half, x=x)
    assert rule == pytest.approx(51.6, abs=0.05)
    assert found.area == pytest.approx(rule, abs=apart)
    assert found.area == pytest.approx(51.6, abs=0.05 + apart)
    # Moments about amidships: a difference of areas may stand anywhere within the ship's half length.
    assert 18.0 - found.lcf == pytest.approx(9.767, abs=0.0005 + 9.0 * apart / 51.6)


# --- bodies ----------------------------------------------------------------------------------------


def test_a_repeated_station_in_a_straight_hull_changes_nothing():
    points = [(0.0, 0.0), (5.0, 0.3), (6.0, 2.0), (6.5, 6.0)]
    whole = Hull(one(*(station(x, points) for x in (0.0, 20.0, 60.0))), 60.0)
    broken = Hull(one(*(station(x, points) for x in (0.0, 20.0, 20.0, 60.0))), 60.0)
    for waterline in ((3.0,), (3.0, 0.02, 0.1, 0.15), (0.5, 0.05, 0.0, -0.05)):
        a, b = below(whole, *waterline), below(broken, *waterline)
        assert centres(a) == pytest.approx(centres(b), rel=1e-9, abs=1e-12)


def test_a_hull_in_two_bodies_is_their_sum():
    # Cut across at a knuckle and at an even section alike, and one body of both at once.
    sections = {0.0: 4.0, 25.0: 6.0, 60.0: 5.0}
    parts = [
        tuple(station(x, [(0.0, 0.2), (sections[x], 0.5), (sections[x] + 1.0, 6.0)]) for x in ends)
        for ends in ((0.0, 25.0), (25.0, 60.0))
    ]
    whole = Hull(one(*parts[0], *parts[1]), 60.0)
    bodies = [Body(name=str(i), stations=p) for i, p in enumerate(parts)]
    both = Hull(offsets(*bodies), 60.0)
    apart = [Hull(offsets(b), 60.0) for b in bodies]
    for waterline in ((3.0,), (3.0, 0.02, 0.1, 0.15)):
        names = ("volume", "of_x", "of_y", "of_z", "area", "area_x", "area_y", "area_xx", "area_xy", "area_yy")  # fmt: skip
        one_, two, *halves = (below(h, *waterline) for h in (whole, both, *apart))
        for name in names:
            expected = sum(float(getattr(h, name)) for h in halves)
            assert getattr(two, name) == pytest.approx(expected, rel=1e-12, abs=1e-9)
            assert getattr(one_, name) == pytest.approx(expected, rel=1e-12, abs=1e-9)
