"""The hulls the heeled method is tried on: closed forms, a mesh library, equilibrium."""

import itertools
from dataclasses import replace

import numpy as np
import pytest
from hull_forms import Arc, afloat
from hull_mesh import closed, mesh_below
from hull_ships import (
    BOX,
    CATAMARAN,
    CYLINDER,
    HIGH_CHINE,
    ROUND_BILGE,
    SHIPS,
    VEE,
    offset_rows,
    panels,
    stations,
)
from scipy.interpolate import CubicSpline

WATERLINES = [(0.0, 0.0, 0.0), (0.006, 0.02, 0.0), (0.006, 0.02, 0.05), (-0.004, -0.03, -0.14)]
"""tau, deflection, t."""


def righting(ship, t, vcg):
    """The lever from the keel point over G [m] on a plane square to gravity, trim free."""
    start = ship.below(ship.draft)
    found = afloat(ship, start.volume, lambda *_: (start.x, 0.0, vcg), t=t)
    return (found.buoyancy.y + (found.buoyancy.z - vcg) * t) / np.hypot(1.0, t)


def test_box():
    # Closed form of a box: volume 2160, KB 1.5, BM 4; GZ = sin(heel) (GM + BM tan^2 / 2).
    found = BOX.below(3.0)
    assert (found.volume, found.x, found.z) == pytest.approx((2160.0, 30.0, 1.5), rel=1e-12)
    moments = {0.017455065: 50.262717, 0.034920769: 100.697523,
               0.052407779: 151.477445, 0.069926812: 202.777395}  # fmt: skip
    for t, moment in moments.items():
        lever = righting(BOX, t, 4.2) * np.hypot(1.0, t)  # w d = D GZ / cos
        assert 1.025 * 2160.0 * lever == pytest.approx(moment, abs=5e-7 + 3000.0 * 5e-10)


def test_box_with_stern_trim_and_deflection():
    # x_B = L/2 - L^2 tau/(12 T), z_B = T/2 + L^2 tau^2/(24 T); a rectangle takes up 2/3 of the
    # deflection in volume (closed forms).
    found = BOX.below(3.0, 0.01)
    assert found.x == pytest.approx(30.0 - 3600.0 * 0.01 / 36.0, rel=1e-12)
    assert found.z == pytest.approx(1.5 + 3600.0 * 1e-4 / 72.0, rel=1e-12)
    assert BOX.below(3.0, 0.0, 0.12).volume == pytest.approx(720.0 * 3.08, rel=1e-12)


@pytest.mark.parametrize(
    "degrees, kn", [(2, 0.139683182), (4, 0.279710592), (10, 0.705649068), (20, 1.468826533)]
)
def test_prism(degrees, kn):
    # Triangular prism, apex down, half angle 45 degrees, T 3, L 40 (closed form): KN.
    t = np.tan(np.radians(degrees))
    assert VEE.below(3.0).volume == pytest.approx(360.0, rel=1e-12)
    assert righting(VEE, t, 0.0) == pytest.approx(kn, abs=5e-10)


def test_cylinder():
    # Circular cylinder R 5, T 3, L 40 (closed form): B below the axis at every heel, so KM = R.
    found = CYLINDER.below(3.0)
    assert (found.volume, found.z) == pytest.approx((792.673425, 1.762547718), abs=5e-7)
    for degrees in (1.0, 4.0, 8.0):
        t = np.tan(np.radians(degrees))
        assert righting(CYLINDER, t, 3.8) == pytest.approx(1.2 * np.sin(np.arctan(t)), rel=1e-11)


def test_catamaran():
    # Two boxes 30 x 2 x 1.2 m, centres 6 m apart (closed form): volume 144, KM 8.377778; vertical
    # sides, so N = KM t + BM t^3 / 2.
    assert CATAMARAN.below(1.2).volume == pytest.approx(144.0, rel=1e-12)
    t = 0.05
    lever = righting(CATAMARAN, t, 0.0) * np.hypot(1.0, t)
    assert lever == pytest.approx(8.3777778 * t + 7.7777778 * t**3 / 2.0, rel=1e-8)


@pytest.mark.parametrize("name", SHIPS)
@pytest.mark.parametrize("waterline", WATERLINES)
def test_a_mesh_library_agrees(name, waterline):
    ship = SHIPS[name]
    found = ship.below(ship.draft, *waterline)
    volume, centre = mesh_below(ship, ship.draft, *waterline)
    # 1e-6 of the volume, and of the length or breadth in position: what is left of the mesh's steps
    assert volume == pytest.approx(found.volume, rel=1e-6)
    assert centre[0] == pytest.approx(found.x, abs=1e-6 * ship.lpp)
    assert centre[1] == pytest.approx(found.y, abs=1e-6 * ship.beam)
    assert centre[2] == pytest.approx(found.z, abs=1e-6 * ship.draft)


@pytest.mark.parametrize("name", SHIPS)
def test_meshes_are_closed(name):
    assert closed(SHIPS[name])


@pytest.mark.parametrize("name", SHIPS)
def test_more_nodes_change_nothing(name):
    ship = SHIPS[name]
    ends = ship.forms[0].ends
    more = tuple(ends[0] + (ends[1] - ends[0]) * s for s in (0.123, 0.35, 0.61, 0.89))
    finer = replace(
        ship, forms=tuple(replace(f, breaks=(*f.breaks, *more)) if f.ends == ends else f for f in ship.forms)
    )  # fmt: skip
    for waterline in WATERLINES:
        a, b = (s.below(ship.draft, *waterline) for s in (ship, finer))
        assert (a.volume, a.x, a.y, a.z) == pytest.approx(
            (b.volume, b.x, b.y, b.z), rel=1e-9, abs=1e-11
        )


@pytest.mark.parametrize("name", SHIPS)
def test_heel_to_port_mirrors_heel_to_starboard(name):
    ship = SHIPS[name]
    a, b = (ship.below(ship.draft, 0.005, 0.02, t) for t in (0.06, -0.06))
    assert (a.volume, a.x, a.y, a.z) == pytest.approx((b.volume, b.x, -b.y, b.z), rel=1e-12)
    assert a.y > 0.0


@pytest.mark.parametrize("ship", [HIGH_CHINE, ROUND_BILGE], ids=lambda s: s.name)
def test_equilibrium_found_from_g_is_that_of_the_heel(ship):
    # The heel is given first and G found from N; then G is given, and heel and trim come back.
    start = ship.below(ship.draft, 0.006, 0.02, 0.05)
    x = start.x + 0.006 * (ship.vcg - start.z)
    y = start.y + (start.z - ship.vcg) * 0.05
    found = afloat(ship, start.volume, lambda *_: (x, y, ship.vcg), 0.02)
    assert (found.mean, found.tau, found.t) == pytest.approx((ship.draft, 0.006, 0.05), abs=1e-10)


@pytest.mark.parametrize("name", SHIPS)
def test_offsets_run_from_the_keel_outwards_and_up(name):
    for form in SHIPS[name].forms:
        places = list(stations(form, 31, 48))
        x = [at for at, _ in places]
        assert x == sorted(x)
        assert (x[0], x[-1]) == form.ends
        for _, points in places:
            y, z = np.array([p[:2] for p in points]).T
            assert y[0] == 0.0
            assert np.all(y >= 0.0)
            assert not np.any((np.diff(y) == 0.0) & (np.diff(z) == 0.0))
    assert len({r[5] for r in offset_rows(SHIPS[name])}) == len(SHIPS[name].forms)


def from_stations(form):
    """The form again: cubic splines along the lines through its points, between the knuckles."""
    places = list(stations(form, 31, 48))
    x = np.array([at for at, _ in places])
    points = np.array([[p[:2] for p in found] for _, found in places])
    cuts = [0, *(np.flatnonzero(np.diff(x) == 0.0) + 1), len(x)]

    def line(k, axis):
        runs = [
            (x[a], CubicSpline(x[a:b], points[a:b, k, axis])) for a, b in itertools.pairwise(cuts)
        ]

        def along(at):
            found = runs[0][1](at)
            for start, run in runs[1:]:
                found = np.where(at >= start, run(at), found)
            return found

        return along

    count = points.shape[1]
    lines = [(line(k, 0), line(k, 1)) for k in range(count)]
    return replace(form, parts=panels(*lines), lines=("",) * count)


@pytest.mark.parametrize("name", SHIPS)
def test_offsets_describe_the_ship(name):
    ship = SHIPS[name]
    again = replace(ship, forms=tuple(from_stations(f) for f in ship.forms))
    t = 0.05
    a, b = (s.below(ship.draft, 0.006, 0.02, t) for s in (ship, again))
    arcs = any(isinstance(p, Arc) for f in ship.forms for p in f.parts)
    # Lines are cubics or less in most ships, so that splines lose nothing; the patrol vessel's plan
    # has a jump of curvature. Chords cut off at most 5e-4 of an arc's section in 48 steps.
    assert b.volume == pytest.approx(a.volume, rel=5e-4 if arcs else 1e-6)
    height = (b.y + b.z * t - a.y - a.z * t) / t  # what KG would be off by
    assert abs(height) < (2e-4 if arcs else 2e-6)
