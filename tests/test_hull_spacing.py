"""What is stated of stations and points that lie apart is of the size of the true error."""

import numpy as np
import pytest
from drawn import drawn, one, pose, prism, station, stretches, upright_sides
from hull_ships import BOX, LOW_CHINE, PATROL, ROUND_BILGE

from incline.hull import Hull
from incline.hull.spacing import bulged, coarsened, spacing_misses

FINE = 400
"""Steps on an arc whose chords count as the curve: their error is 1/70 of that of 48."""


def figures(offsets, lpp, at):
    """Volume, KM and LCB."""
    found = Hull(offsets, lpp).displaced(at)
    return np.array([float(v) for v in (found.volume, found.z + found.bmt, found.x)])


def apart(offsets, other, lpp, at):
    """What the first hull has less than the other, as misses are stated."""
    a, b = figures(offsets, lpp, at), figures(other, lpp, at)
    return np.array([b[0] / a[0] - 1.0, b[1] - a[1], b[2] - a[2]])


def stated(offsets, lpp, at):
    return tuple(np.array(m) for m in spacing_misses(offsets, Hull(offsets, lpp), at))


@pytest.mark.parametrize("steps", [5, 8, 16, 32])
def test_points_of_a_circle(steps):
    # One point more to a chord takes three quarters of its error away (the square of the step); the
    # rest is added, to the fourth power. Points stand on the waterline, which KM is sensitive to.
    def circle(n):
        a = stretches([0.0, np.arccos(0.4), 2.0], n)
        return prism(np.stack([5.0 * np.sin(a), 5.0 - 5.0 * np.cos(a)], axis=-1), (0.0, 40.0))

    true = apart(circle(steps), circle(FINE), 40.0, pose(3.0))
    _, by_points = stated(circle(steps), 40.0, pose(3.0))
    assert by_points[0] == pytest.approx(true[0], rel=0.05)
    assert by_points[1] == pytest.approx(true[1], rel=0.1)


@pytest.mark.parametrize("steps", [6, 8, 16])
def test_points_of_a_bilge_between_flats(steps):
    # A quarter circle between flat bottom and side: its first and last chord turn half as much.
    def hull(n):
        a = np.linspace(0.0, np.pi / 2.0, n + 1)
        arc = zip(4.0 + 2.0 * np.sin(a), 2.0 - 2.0 * np.cos(a), strict=True)
        return prism([(0.0, 0.0), *arc, (6.0, 5.0)], (0.0, 40.0))

    true = apart(hull(steps), hull(FINE), 40.0, pose(3.0))
    _, by_points = stated(hull(steps), 40.0, pose(3.0))
    assert by_points[:2] == pytest.approx(true[:2], rel=0.5)


@pytest.mark.parametrize("steps", [8, 24, 48])
def test_points_of_a_round_bilged_ship(steps):
    at = pose(3.0, 0.004, 0.02)
    coarse, fine = (drawn(ROUND_BILGE, 31, n) for n in (steps, FINE))
    true = apart(coarse, fine, ROUND_BILGE.lpp, at)
    _, by_points = stated(coarse, ROUND_BILGE.lpp, at)
    assert by_points == pytest.approx(true, rel=0.5)


def test_knuckles_stay_sharp():
    # Straight sections: a chine is no part of a curve, named or not, if it turns by more than 25
    # degrees.
    for ship in (BOX, PATROL, LOW_CHINE):
        _, by_points = stated(drawn(ship), ship.lpp, pose(ship.draft, 0.004))
        assert by_points == pytest.approx([0.0, 0.0, 0.0], abs=1e-12)
    section = [(0.0, 0.0), (4.0, 0.0), (5.0, 1.0), (5.0, 4.0)]
    _, by_points = stated(prism(section, (0.0, 40.0)), 40.0, pose(2.0))
    assert by_points == pytest.approx([0.0, 0.0, 0.0], abs=1e-12)


def cosine(count):
    x = np.linspace(0.0, 60.0, count)
    return upright_sides(x, 6.0 * np.cos(np.pi * (x - 30.0) / 80.0), 5.0)


SMOOTH = {
    "cosine": (cosine, 60.0, 3.0),
    "round bilge": (lambda n: drawn(ROUND_BILGE, n, 6), ROUND_BILGE.lpp, 3.0),
    "patrol vessel": (lambda n: drawn(PATROL, n), PATROL.lpp, 1.12),
}


@pytest.mark.parametrize("count", [11, 15, 21, 31])
@pytest.mark.parametrize("name", SMOOTH)
def test_stations_of_smooth_hulls(name, count):
    # Splines miss by the fourth power of the distance, the patrol vessel's, whose plan has a jump of
    # curvature, by the third: half as many stations err 8 to 16 times as much, so that a third of
    # what is stated is on the safe side. A figure's difference may pass through zero at some
    # spacing; all three of them, as heights at the draft, do not.
    make, lpp, draft = SMOOTH[name]
    at = pose(draft, 0.004, 0.02)
    heights = np.array([draft, 1.0, draft / lpp])
    true = np.linalg.norm(heights * apart(make(count), make(201), lpp, at))
    by_stations, _ = stated(make(count), lpp, at)
    assert 0.0 < true < np.linalg.norm(heights * by_stations) / 3.0


def test_straight_hulls_leave_nothing_open():
    by_stations, by_points = stated(drawn(BOX), 60.0, pose(3.0, 0.01))
    assert by_stations == pytest.approx([0.0, 0.0, 0.0], abs=1e-11)
    assert by_points == pytest.approx([0.0, 0.0, 0.0], abs=1e-12)


def test_which_stations_and_points_the_other_hulls_have():
    section = [(0.0, 0.0), (3.0, 0.5), (4.0, 4.0)]
    places = (0.0, 1.0, 2.0, 3.0, 3.0, 4.0, 5.0, 6.0, 7.0)
    half = coarsened(one(*(station(x, section) for x in places))).bodies[0].stations
    assert [s.x for s in half] == [0.0, 2.0, 3.0, 3.0, 5.0, 7.0]
    (body,) = bulged(one(*(station(x, section) for x in places))).bodies
    assert [s.x for s in body.stations] == list(places)
    assert {len(s.starboard) for s in body.stations} == {5}
    assert all([(p.y, p.z) for p in s.starboard[::2]] == section for s in body.stations)
