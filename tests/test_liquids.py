"""Liquids in box tanks: closed forms, an independent quadrature, and what any liquid must do."""

import numpy as np
import pytest
from box_liquid import liquid_centre
from hypothesis import given
from hypothesis import strategies as st

from incline.errors import Where
from incline.liquids import BoxTank, TankLiquids, box_shift, pocketing_tanks, reach, tank_liquids
from incline.record import Tank

tanks = st.builds(
    lambda b, depth, share: BoxTank(b, share * depth, depth),
    st.floats(0.5, 12.0), st.floats(0.4, 6.0), st.floats(0.005, 0.995),
)  # fmt: skip
tangents = st.floats(-1.0, 1.0).filter(lambda t: abs(t) > 1e-4)


def test_slack_box_tank():
    # Closed form: 8 m broad, 2 m deep, 3 degrees: 0.139754 m across and 0.003662 m up.
    across, up = box_shift(BoxTank(8.0, 2.0, 4.0), np.tan(np.radians(3.0)))
    assert (across, up) == pytest.approx((0.139754, 0.003662), abs=5e-7)


@pytest.mark.parametrize(
    "level, degrees, ratio",
    [(0.05, 2, 0.773), (0.05, 4, 0.483), (0.2, 4, 1.001), (0.2, 8, 0.776), (2.9, 2, 0.999), (2.9, 4, 0.773)],
)  # fmt: skip
def test_pocketing(level, degrees, ratio):
    # Closed forms for a tank 6 m broad and 3 m deep: exact moment over the fixed one.
    t = np.tan(np.radians(degrees))
    assert reach(BoxTank(6.0, level, 3.0), t) / t == pytest.approx(ratio, abs=5e-4)


@given(tanks, tangents)
def test_any_box_against_quadrature(tank, t):
    across, up = box_shift(tank, np.asarray(t))
    expected = liquid_centre(tank.breadth, tank.depth, tank.level, t)
    # the root of the quadrature is good to 1e-15 of a depth, over a level of 0.5 % of it
    assert (across, up) == pytest.approx(expected, abs=1e-9 * tank.breadth)


@given(tanks, tangents)
def test_heel_to_port_mirrors_heel_to_starboard(tank, t):
    (a, b), (c, d) = box_shift(tank, np.asarray(t)), box_shift(tank, np.asarray(-t))
    assert (a, b) == (-c, d)
    assert reach(tank, np.asarray(t)) == -reach(tank, np.asarray(-t))
    assert np.sign(a) == np.sign(t)
    assert b >= 0.0


@given(tanks)
def test_no_jump_where_the_surface_meets_bottom_or_top(tank):
    # The nearer one is met by a corner of the section, the other by the end of the triangle left.
    least = min(tank.level, tank.depth - tank.level)
    at = np.array([2.0 * least / tank.breadth, tank.depth**2 / (2.0 * tank.breadth * least)])
    assert tank.clear == pytest.approx(at[0], rel=1e-12)
    below, above = (box_shift(tank, at * (1.0 + s)) for s in (-1e-9, 1e-9))
    for one, other in zip(below, above, strict=True):
        assert one == pytest.approx(other, abs=1e-7 * tank.breadth)
    # While clear of both, the fixed moment and its growth with heel: b^2/(12 h) t (1 + t^2 / 2)
    t = 0.999 * tank.clear
    assert reach(tank, np.asarray(t)) == pytest.approx(t * (1.0 + 0.5 * t * t), rel=1e-9)


@given(tanks, tangents)
def test_liquid_always_heels_further(tank, t):
    # Its lever grows by i/v of the surface at that heel and by how far the liquid has risen, both
    # positive: b^2 (12 h) dN/dt with the moment of a unit free-surface moment.
    liquids = TankLiquids([(0, tank)])
    fsm = np.array([1.0])
    _, slope = liquids.at(np.array([t]), fsm)
    assert slope[0] > 0.0
    step = 1e-5
    moments, _ = liquids.at(np.array([t - step, t + step]), fsm)
    assert (moments[1] - moments[0]) / (2.0 * step) > 0.0


def test_moment_of_several_tanks():
    # Tanks that are no boxes act as fixed moments; the box of tank 2 counts with its own.
    box = BoxTank(6.0, 0.05, 3.0)
    fsm = np.array([[10.0, 4.0], [1.0, 8.0]])
    t = np.tan(np.radians([0.0, 2.0, -4.0]))
    moment, slope = TankLiquids([(1, box)]).at(t, fsm)
    share = t * np.array([1.0, 0.773, 0.483])
    assert moment == pytest.approx(fsm[:, :1] * t + fsm[:, 1:] * share, abs=8.0 * 5e-4 * 0.07)
    assert slope[:, 0] == pytest.approx(fsm.sum(axis=1), rel=1e-9)
    start = TankLiquids([(1, box)]).start(np.array([t[1], t[2]]), fsm)
    assert start == pytest.approx([moment[0, 1], moment[1, 2]], rel=1e-12)


def tank(name, **more):
    known = {
        "name": name, "contents": "oil", "state": "slack", "density": 0.85, "level": 0.2,
        "volume": None, "mass": 5.0, "centre": None, "fsm": 3.0, "fsm_basis": "", "where": Where("tanks.csv"),
        "breadth": 6.0, "depth": 3.0, "box": True,
    }  # fmt: skip
    return Tank(**(known | more))


def test_which_tanks_pocket():
    # A surface 0.2 m deep and 6 m broad meets the bottom at t = 2 x 0.2 / 6.
    named = [
        tank("low"), tank("middle", level=1.5), tank("high", level=2.9), tank("shaped", box=False),
        tank("pressed", level=3.0), tank("empty", fsm=0.0),
    ]  # fmt: skip
    assert [i for i, _ in tank_liquids(named).boxes] == [0, 1, 2]
    assert pocketing_tanks(named, [0.0, -0.06, 0.03]) == ("high",)
    assert pocketing_tanks(named, [0.0, -0.067, 0.03]) == ("low", "high")
    assert pocketing_tanks(named, []) == ()
