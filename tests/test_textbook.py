"""The main job against exercises with published answers, to half a unit of the last digit."""

import pytest
from test_regression import HANSEN
from textbook import FOOT, LONG_TON, item, single_shift, trial, with_weight

from incline import reduce
from incline.record import Point

FT_TON = FOOT * LONG_TON


def kg(t, unit=1.0):
    return reduce(t).outcome.as_inclined.vcg / unit


def test_b1_licence_question():
    # USCG-style licence question, 2018 (read): 30 tons x 30 ft, 28 ft pendulum, 12 in, 4000 tons.
    t = single_shift(30 * LONG_TON, 30 * FOOT, 1 * FOOT, 28 * FOOT, 4000 * LONG_TON, 27.64 * FOOT)
    assert kg(t, FOOT) == pytest.approx(21.34, abs=0.005)


def test_b2_slope_then_a_weight_removed():
    # US Naval Academy, EN400 course notes, chapter 3 (recalled from memory, verify).
    m = 200 * FT_TON
    tangent = m / (28591 * FT_TON)
    removed = (item("deduct", 50 * LONG_TON, 30 * FOOT),)
    t = trial(7986 * LONG_TON, 22.47 * FOOT, [0.0, m, -m], {"P": [0.0, tangent, -tangent]},
              {"P": None}, "tangent", removed)  # fmt: skip
    found = reduce(t).outcome
    assert found.as_inclined.vcg / FOOT == pytest.approx(18.89, abs=0.005)
    assert found.lightship.vcg.value / FOOT == pytest.approx(18.82, abs=0.005)


@pytest.mark.parametrize(
    "weight, distance, deflection, length, displacement, km, expected",
    [
        # B3, B5: Barrass & Derrett, Ship Stability for Masters and Mates (from memory, verify).
        (25, 15, 0.20, 4, 8000, 7.0, 6.06),
        (15, 10, 0.25, 8, 3150, 6.1, 4.58),
        # B6: university examination, Dhaka 2022 (read).
        (6, 14, 0.120, 11, 4300, 7.25, 5.46),
    ],
)
def test_metric_exercises(weight, distance, deflection, length, displacement, km, expected):
    t = single_shift(weight, distance, deflection, length, displacement, km)
    assert kg(t) == pytest.approx(expected, abs=0.005)


def test_b4_displacement_from_gm():
    # Barrass & Derrett (from memory, verify): 10 t x 12 m, GM 0.6 m, 25 cm in 10 m gives 8000 t.
    found = reduce(single_shift(10, 12, 0.25, 10, 8000, 7.0)).outcome
    assert found.heel.gm_fluid == pytest.approx(0.6, abs=1e-9)


def test_b7_loading_then_list():
    # Barrass & Derrett, 5th ed., p. 116-117 (read): 8000 t, KG 7.6, KM 8.70; loads and a discharge.
    m = 100.0
    tangent = m / (8000 * 1.1)
    items = (
        item("add", 250, 6.1, 7.6), item("add", 300, 0.6, -6.1), item("deduct", 50, 1.2, -4.6),
    )  # fmt: skip
    t = trial(8000, 8.70, [0, m, -m], {"P": [0, tangent, -tangent]}, {"P": None}, "tangent", items)
    light = reduce(t).outcome.lightship
    assert light.displacement.value == pytest.approx(8500, abs=1e-6)
    assert light.vcg.value * 8500 == pytest.approx(62445, abs=0.5)
    assert light.vcg.value == pytest.approx(7.35, abs=0.005)
    assert light.tcg.value == pytest.approx(0.035, abs=0.0005)
    assert light.tcg.value * 8500 == pytest.approx(300, abs=0.5)


def light_kg(displacement, kg_start, items, unit_mass=1.0, unit_length=1.0):
    """KG of a ship that starts at kg_start, after a ledger, through the whole reduction."""
    m, gm = 1.0, 1.0
    d = displacement * unit_mass
    tangent = m / (d * gm)
    km = kg_start * unit_length + gm
    ledger = tuple(item(a, w * unit_mass, z * unit_length) for a, w, z in items)
    t = trial(d, km, [0, m, -m], {"P": [0, tangent, -tangent]}, {"P": None}, "tangent", ledger)
    light = reduce(t).outcome.lightship
    return light.displacement.value / unit_mass, light.vcg.value / unit_length


def test_b8_cargo_loaded():
    # Nicholls's Seamanship, p. 517 (read): tons and feet.
    cargo = [(1000, 24), (1500, 22), (1250, 21), (1100, 19), (900, 23), (600, 25), (400, 18)]
    mass, height = light_kg(3250, 20, [("add", w, z) for w, z in cargo], LONG_TON, FOOT)
    assert mass == pytest.approx(10000, abs=1e-6)
    assert mass * height == pytest.approx(212050, abs=0.5)
    assert height == pytest.approx(21.2, abs=0.05)


def test_b9_discharge_then_gm():
    # Same source, exercise 21 (read): KM 13.5 ft, GM 1.1 ft afterwards.
    taken = [("deduct", 1500, 21), ("deduct", 2000, 17), ("deduct", 1200, 12)]
    _, height = light_kg(6000, 16, taken, LONG_TON, FOOT)
    assert 13.5 - height == pytest.approx(1.1, abs=0.05)


def test_b10_one_weight_on_or_off():
    # Subramaniam, Ship Stability I (read).
    assert light_kg(9900, 4, [("add", 100, 15)])[1] == pytest.approx(4.11, abs=0.005)
    assert light_kg(12600, 6, [("deduct", 600, 11)])[1] == pytest.approx(5.75, abs=0.005)


def test_b15_weight_table_backwards():
    # Biran 2003, 7.2.2 (read; totals recomputed): masses at height and distance along.
    rows = [
        (1247.66, 5.93, 32.04), (3.60, 9.60, 11.00), (5.00, 7.30, 3.50), (177.21, 1.56, 30.88),
        (4.50, 4.65, 8.45), (103.09, 4.61, 27.19), (993.94, 4.35, 42.62), (90.00, 6.08, 38.66),
    ]  # fmt: skip
    forward = [("add", m, z) for m, z, _ in rows[1:]]
    mass, height = light_kg(rows[0][0], rows[0][1], forward)
    assert mass == pytest.approx(2625.00, abs=0.005)
    assert height == pytest.approx(4.9955, abs=0.00005)
    back = [("deduct", m, z) for m, z, _ in rows[1:]]
    mass, height = light_kg(2625.00, 4.9955, back)
    assert mass == pytest.approx(1247.66, abs=0.005)
    # 4.9955 is rounded at its fourth decimal, which 2625/1247.66 magnifies.
    assert height == pytest.approx(5.93, abs=0.005)


def test_hansen_trial_through_the_whole_reduction():
    # The real test of 1985 (see test_regression): D GM is 1/b, whatever the displacement; both
    # KM and displacement are invented here, in long tons and feet.
    moments = [float(m) * FT_TON for m in HANSEN[:, 0]]
    values = {f"P{j}": [float(v) for v in HANSEN[:, j]] for j in (1, 2, 3)}
    t = trial(5000 * LONG_TON, 60 * FOOT, moments, values, dict.fromkeys(values), "tangent")
    heel = reduce(t).outcome.heel
    assert heel.slope * FT_TON == pytest.approx(4.796281e-6, abs=5e-13)
    assert heel.u_slope * FT_TON == pytest.approx(1.5214e-8, abs=5e-13)
    assert heel.gm_fluid * 5000 * LONG_TON == pytest.approx(FT_TON / 4.796281e-6, rel=2e-7)
    assert heel.residual_sd == pytest.approx(1.7757e-4, abs=5e-9)
    alone = [1 / (d.slope * FT_TON) for d in heel.devices]
    assert alone == pytest.approx([208415.5, 208224.1, 208846.0], abs=0.05)


def test_facts_of_the_trade():
    # Common practice, no source: where G goes when weights come, go and move.
    d, z = 1000.0, 5.0
    assert light_kg(d, z, [("add", 50, 1.0)])[1] < z
    assert light_kg(d, z, [("deduct", 50, 1.0)])[1] > z
    assert light_kg(d, z, [("add", 50, 9.0)])[1] > z
    m = 10.0
    moved = (item("relocate", 20.0, 4.0, 1.0, to=Point(33.0, -2.0, 6.5)),)
    tangent = m / (d * 1.0)
    t = trial(d, z + 1.0, [0, m, -m], {"P": [0, tangent, -tangent]}, {"P": None}, "tangent", moved)
    light = reduce(t).outcome.lightship
    # G moves parallel to the shift, by w d / D.
    assert light.vcg.value - z == pytest.approx(20.0 * 2.5 / d, abs=1e-12)
    assert light.tcg.value == pytest.approx(-20.0 * 3.0 / d, abs=1e-12)
    assert light.lcg.value - 30.0 == pytest.approx(20.0 * 3.0 / d, abs=1e-12)


def test_test_weights_leave_the_ledger_once():
    base = single_shift(10, 12, 0.25, 10, 8000, 7.0)
    by_weight = reduce(with_weight(base, 10.0, 12.0)).outcome
    assert by_weight.heel.gm_fluid == pytest.approx(0.6, abs=1e-12)
    assert by_weight.lightship.displacement.value == pytest.approx(7990.0, abs=1e-9)
    expected = (8000 * by_weight.as_inclined.vcg - 10 * 4.0) / 7990
    assert by_weight.lightship.vcg.value == pytest.approx(expected, abs=1e-12)
    assert by_weight.ledger.balance < 1e-8  # t m, of moments of 5e4 t m in double precision
