"""Readings by repeats and swing extremes."""

import statistics

import pytest
from hypothesis import given
from hypothesis import strategies as st
from textbook import HERE

from incline.record import Reading
from incline.swings import alternates, reduce_reading


def reading(kind, *values):
    return Reading(
        shift=0,
        device="P",
        kind=kind,
        values=values,
        quantity="length",
        note="",
        excluded="",
        where=HERE,
    )


def swing(centre, amplitude, decay, count):
    return [centre + amplitude * (-decay) ** k for k in range(count)]


@given(
    st.floats(-0.5, 0.5),
    st.one_of(st.floats(-0.1, -0.005), st.floats(0.005, 0.1)),
    st.floats(0.5, 0.99),
    st.integers(5, 12),
)
def test_a_decaying_swing_gives_its_centre(centre, amplitude, decay, count):
    found = reduce_reading(reading("swings", *swing(centre, amplitude, decay, count)))
    # The search stops at 1e-10 in the decay; amplitudes are 0.1 m, so 1e-8 m is far below a reading.
    assert found.value == pytest.approx(centre, abs=1e-8)
    assert found.u is not None
    assert found.u < 1e-7
    assert found.count == count


@given(st.floats(-0.5, 0.5), st.floats(0.005, 0.1))
def test_three_extremes_of_an_undamped_swing(centre, amplitude):
    found = reduce_reading(reading("swings", *swing(centre, amplitude, 1.0, 3)))
    assert found.value == pytest.approx(centre, abs=1e-15)
    assert found.u is None


@pytest.mark.parametrize("count", [3, 4])
def test_few_extremes_remove_the_decay_to_first_order(count):
    # (e0 + 2 e1 + e2)/4 leaves A (1 - q)^2 / 4 of the amplitude: second order in the decay.
    for decay in (0.98, 0.96):
        left = reduce_reading(reading("swings", *swing(0.0, 1.0, decay, count))).value
        assert abs(left) <= (1 - decay) ** 2 / 4 + 1e-15


def test_steady_extremes_are_their_own_centre():
    found = reduce_reading(reading("swings", *[0.25] * 6))
    assert (found.value, found.u) == (0.25, 0.0)


def test_repeats_give_mean_and_standard_error():
    values = (0.412, 0.415, 0.411, 0.414)
    found = reduce_reading(reading("repeats", *values))
    assert found.value == pytest.approx(statistics.fmean(values), abs=1e-15)
    # Standard deviation of the mean: JCGM 100:2008, 4.2.3.
    assert found.u == pytest.approx(statistics.stdev(values) / 2.0, rel=1e-12)


def test_noisy_swing_states_an_uncertainty_of_the_right_size():
    import numpy as np

    rng = np.random.default_rng(4)
    errors, stated = [], []
    for _ in range(400):
        values = [v + 0.001 * float(rng.normal()) for v in swing(0.3, 0.05, 0.9, 8)]
        found = reduce_reading(reading("swings", *values))
        errors.append(found.value - 0.3)
        stated.append(found.u)
    # 400 draws give the ratio of two standard deviations to 4 % (one sigma) or so; 15 % is safe.
    assert np.std(errors) == pytest.approx(np.sqrt(np.mean(np.square(stated))), rel=0.15)


def test_extremes_of_a_swing_alternate():
    assert alternates(tuple(swing(0.1, 0.05, 0.9, 5)))
    assert not alternates((0.10, 0.12, 0.14, 0.10))
