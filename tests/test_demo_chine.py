"""The demo trial with offsets: a sensible vessel on which a straight line is plainly wrong."""

import numpy as np
import pytest
from demo_chine import AVOCET
from hull_mesh import mesh_below


def test_the_vessel_floats_as_such_vessels_do():
    # A vessel of this size has a GM of 0.8 to 2 m, and is heeled 2 to 4 degrees at its test (common
    # practice, no source).
    degrees = np.degrees(np.arctan(AVOCET.tangents()))
    assert 0.8 < AVOCET.gm() < 2.0
    assert 2.0 < -degrees.min() < 4.0
    assert 2.0 < degrees.max() < 4.0
    assert abs(degrees[0]) < 0.5


def test_chine_is_just_above_the_water_and_the_lower_side_dips_it():
    chine = AVOCET.ship.forms[0].parts[1]
    y, z = (float(v) for v in chine.at(np.asarray(10.2), np.asarray(0.0)))
    assert 0.10 < z - AVOCET.draft_at(10.2, 0.0) < 0.15
    at = AVOCET.state(max(AVOCET.shift_moments()))
    assert at.mean + AVOCET.deflection + at.t * y > z


def test_straight_line_puts_kg_more_than_a_centimetre_low():
    # From the exact tangents and the exact KM, the line's slope, and KG = KM - GM - FSM / D.
    tangents, moments = AVOCET.tangents(), AVOCET.shift_moments()
    slope = np.polyfit(moments, tangents, 1)[0]
    start, whole = AVOCET.state(), AVOCET.inclined()
    step = 1e-4
    b = AVOCET.ship.below(start.mean, start.tau, AVOCET.deflection, step)
    km = (b.y + b.z * step) / step
    kg = km - (1.0 / slope + sum(t.fsm for t in AVOCET.tanks)) / whole.mass
    assert -0.020 < kg - whole.z < -0.010


def test_equilibrium_of_the_largest_heel_by_the_mesh_library():
    moment = max(AVOCET.shift_moments())
    at, whole = AVOCET.state(moment), AVOCET.inclined()
    volume, (_, y, z) = mesh_below(AVOCET.ship, at.mean, at.tau, AVOCET.deflection, at.t)
    _, gy, gz = AVOCET.centre(moment)(at.t, at.tau)
    assert volume * 1.0124 * 1.005 == pytest.approx(whole.mass, rel=1e-6)
    assert y + z * at.t == pytest.approx(gy + gz * at.t, abs=1e-6 * AVOCET.ship.beam)
