"""Trimmed, heeled, deflected hulls against a mesh library and against closed forms by quadrature."""

from dataclasses import replace

import numpy as np
import pytest
from conftest import DEMO_TRIALS
from demo_chine import AVOCET
from drawn import drawn, faceted, pose
from hull_forms import Arc
from hull_mesh import mesh_below
from hull_ships import CYLINDER, PATROL, ROUND_BILGE, SHIPS, SWIM_BARGE, stations

from incline import read_offsets
from incline.hull import Hull

WATERLINES = [
    (0.0, 0.0, 0.0), (0.006, 0.02, 0.0), (0.006, 0.02, 0.05), (-0.004, -0.03, -0.14), (-0.012, 0.0, 0.09),
]  # fmt: skip
"""tau, deflection, t."""


def prepared(ship):
    """31 stations. Chords of 400 steps on an arc of 2 radians cut (2/400)^2/6 = 4e-6 off its area."""
    return Hull(drawn(ship, 31, 400), ship.lpp)


def assert_alike(found, volume, centre, ship, share):
    """A share of the volume, and of length, beam and draft in the centre's x, y and z."""
    assert float(found.volume) == pytest.approx(volume, rel=share)
    for name, value, scale in zip("xyz", centre, (ship.lpp, ship.beam, ship.draft), strict=True):
        assert float(getattr(found, name)) == pytest.approx(value, abs=share * scale), name


@pytest.mark.parametrize("name", SHIPS)
def test_every_ship_as_the_mesh_library_and_quadrature_have_it(name):
    ship = SHIPS[name]
    hull = prepared(ship)
    for waterline in WATERLINES:
        found = hull.displaced(pose(ship.draft, *waterline))
        assert_alike(found, *mesh_below(ship, ship.draft, *waterline), ship, 1e-5)
        b = ship.below(ship.draft, *waterline)
        assert_alike(found, b.volume, (b.x, b.y, b.z), ship, 1e-5)
        # What is left by heights is what KG would be off by: a millimetre is a hundredth of the bar.
        t = waterline[2]
        assert found.y + found.z * t == pytest.approx(b.y + b.z * t, abs=1e-5 * ship.draft)


@pytest.mark.parametrize("ship", [CYLINDER, ROUND_BILGE], ids=lambda s: s.name)
def test_few_chords_against_a_mesh_of_the_same_chords(ship):
    # With 12 chords on an arc the hull is 0.1 to 0.7 % small; the mesh of those very chords agrees.
    places = [
        [(x, [p[:2] for p in points]) for x, points in stations(form, 31, 12)]
        for form in ship.forms
    ]
    same = replace(
        ship, forms=tuple(faceted(f, p) for f, p in zip(ship.forms, places, strict=True))
    )
    hull = Hull(drawn(ship, 31, 12), ship.lpp)
    for waterline in WATERLINES[2:4]:
        found = hull.displaced(pose(ship.draft, *waterline))
        assert_alike(found, *mesh_below(same, ship.draft, *waterline), ship, 1e-5)
        assert float(found.volume) < 0.9996 * ship.below(ship.draft, *waterline).volume


def test_demo_trial_as_its_file_has_it():
    # The file's own points, splined along the lines: the mesh is of the hull that was written down.
    record = read_offsets(DEMO_TRIALS / "chine-metric")
    hull = Hull(record.offsets, record.vessel.lpp)
    forms = tuple(
        faceted(form, [(s.x, [(p.y, p.z) for p in s.starboard]) for s in body.stations])
        for form, body in zip(PATROL.forms, record.offsets.bodies, strict=True)
    )
    written = replace(PATROL, forms=forms)
    for waterline in WATERLINES[1:4]:
        found = hull.displaced(pose(1.15, *waterline))
        assert_alike(found, *mesh_below(written, 1.15, *waterline), PATROL, 1e-5)
        # Rounded to a millimetre, 0.3 mm each, over some 60 points: 1e-4 of a draft of a metre.
        b = PATROL.below(1.15, *waterline)
        assert_alike(found, b.volume, (b.x, b.y, b.z), PATROL, 3e-4)
    assert record.vessel.lpp == AVOCET.ship.lpp


def test_every_body_and_side_counts():
    # Heeled to either side the hull is its own mirror image, waterplane and all.
    for ship in SHIPS.values():
        hull = Hull(drawn(ship, 11, 8), ship.lpp)
        a, b = (hull.displaced(pose(ship.draft, 0.005, 0.02, t)) for t in (0.06, -0.06))
        for name in ("volume", "of_x", "of_z", "area", "area_x", "area_xx", "area_yy"):
            assert getattr(a, name) == pytest.approx(getattr(b, name), rel=1e-12)
        for name in ("of_y", "area_y", "area_xy"):
            assert getattr(a, name) == pytest.approx(-getattr(b, name), rel=1e-9, abs=1e-9)


def test_poses_together_and_one_by_one():
    # Blocks of draws, ends of the waterline and all, change nothing.
    hull = prepared(SWIM_BARGE)
    mean = np.linspace(0.4, 3.4, 12).reshape(3, 4)
    many = hull.displaced(pose(mean, 0.01, 0.02, np.linspace(-0.1, 0.1, 4)))
    assert many.volume.shape == (3, 4)
    for i, j in np.ndindex(3, 4):
        one = hull.displaced(pose(mean[i, j], 0.01, 0.02, np.linspace(-0.1, 0.1, 4)[j]))
        assert many.volume[i, j] == pytest.approx(float(one.volume), rel=1e-12)
        assert many.of_y[i, j] == pytest.approx(float(one.of_y), rel=1e-12, abs=1e-10)


def test_waterline_that_leaves_the_hull_just_at_a_station():
    # The raked ends leave the water 6.5 m from their knuckles, at x = 2.5 and 57.5, where a quarter of
    # the stations' distance ends: within rounding, on either side of it. Closed form: a box and two
    # wedges.
    hull = prepared(SWIM_BARGE)
    drafts = 2.6 + 1e-15 * np.arange(-20, 21)
    expected = 12.0 * (42.0 * 2.6 + 2.6**2 / 0.4)
    assert hull.displaced(pose(drafts)).volume == pytest.approx(expected, rel=1e-12)


def test_appendage_under_water_counts_as_a_closed_body():
    # The patrol vessel's skeg, its top above the keel line or not: volume by its own closed form.
    assert not any(isinstance(p, Arc) for f in PATROL.forms for p in f.parts)
    whole = prepared(PATROL)
    bare = Hull(drawn(replace(PATROL, forms=PATROL.forms[:1])), PATROL.lpp)
    skeg = replace(PATROL, forms=PATROL.forms[1:])
    for waterline in WATERLINES:
        apart = (
            whole.displaced(pose(1.12, *waterline)).volume
            - bare.displaced(pose(1.12, *waterline)).volume
        )
        assert apart == pytest.approx(skeg.below(1.12, *waterline).volume, rel=1e-9)
    assert whole.freeboard(pose(0.0)) == bare.freeboard(pose(0.0))
    assert whole.reach[0] < bare.reach[0]
