"""Propagation and Monte Carlo against the published examples of JCGM 100 and JCGM 101."""

import math

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from textbook import HERE

from incline.budget import budgets_of, coverage_factor, effective_dof
from incline.correlation import Block, blocks_of
from incline.errors import FieldDataError
from incline.montecarlo import numerical_tolerance, shortest_interval, simulate
from incline.record import Correlation
from incline.regression import fit_grouped_line
from incline.sources import Source


def source(name, u, shape="normal", dof=math.inf, **more):
    return Source(
        name=name,
        field="",
        item=None,
        u=u,
        quantity=None,
        basis="stated",
        shape=shape,
        dof=dof,
        **more,
    )


def model_of(function, *estimates):
    """A model of deviations from a function of the inputs themselves."""

    def model(deviations):
        inputs = [e + d for e, d in zip(estimates, deviations, strict=True)]
        found = function(*inputs)
        return np.stack(found) if isinstance(found, tuple) else np.asarray(found)[None, :]

    return model


def total(*inputs):
    return np.sum(inputs, axis=0)


def test_gum_h1_end_gauge():
    # JCGM 100:2008, H.1: components 25 nm (18 dof), 9.7 (25.6), 2.9 (50), 16.6 (2): u 32 nm,
    # 16 degrees of freedom, U(99 %) 93 nm.
    sources = [source("a", 25, dof=18), source("b", 9.7, dof=25.6), source("c", 2.9, dof=50),
               source("d", 16.6, dof=2)]  # fmt: skip
    (budget,), _ = budgets_of(model_of(total, 0, 0, 0, 0), ["y"], sources, (), coverage=0.99)
    assert budget.estimate.u == pytest.approx(32, abs=0.5)
    assert math.floor(budget.estimate.dof) == 16
    assert pytest.approx(93, abs=0.5) == budget.estimate.U
    assert sum(line.share for line in budget.lines) == pytest.approx(1.0, abs=1e-12)


def test_gum_h2_resistance_and_reactance():
    # JCGM 100:2008, H.2: five simultaneous observations of V, I and phase; R 127.732 (0.071),
    # X 219.847 (0.295), Z 254.260 (0.236); r(R,X) -0.588, r(R,Z) -0.485, r(X,Z) 0.993.
    data = np.array(
        [[5.007, 4.994, 5.005, 4.990, 4.999],
         [19.663e-3, 19.639e-3, 19.640e-3, 19.685e-3, 19.678e-3],
         [1.0456, 1.0438, 1.0468, 1.0428, 1.0433]]
    )  # fmt: skip
    u = data.std(axis=1, ddof=1) / math.sqrt(5)
    block = Block((0, 1, 2), np.corrcoef(data))
    model = model_of(
        lambda v, i, p: (v / i * np.cos(p), v / i * np.sin(p), v / i), *data.mean(axis=1)
    )
    sources = [source(n, float(x)) for n, x in zip("VIp", u, strict=True)]
    budgets, covariance = budgets_of(model, ["R", "X", "Z"], sources, (block,))
    values = [b.estimate.value for b in budgets]
    assert values == pytest.approx([127.732, 219.847, 254.260], abs=0.0005)
    # Printed u(X) is that of the direct evaluation, 0.29549; linear propagation gives 0.29558.
    assert [b.estimate.u for b in budgets] == pytest.approx([0.071, 0.295, 0.236], abs=0.0006)
    r = covariance / np.sqrt(np.outer(np.diag(covariance), np.diag(covariance)))
    # The standard's own correlations come from rounded covariances: 0.0005 of its last digit.
    assert [r[0, 1], r[0, 2], r[1, 2]] == pytest.approx([-0.588, -0.485, 0.993], abs=0.0015)


def test_gum_h3_predicted_correction():
    # JCGM 100:2008, H.3: b(30 C) -0.1494 (0.0041) from intercept and slope correlated by -0.930.
    t = np.array(
        [21.521, 22.012, 22.512, 23.003, 23.507, 23.999, 24.513, 25.002, 25.503, 26.010, 26.511]
    )
    b = np.array(
        [-0.171, -0.169, -0.166, -0.159, -0.164, -0.165, -0.156, -0.157, -0.159, -0.161, -0.160]
    )
    line = fit_grouped_line(t - 20.0, b, np.zeros(11, dtype=np.intp))
    design = np.column_stack([np.ones(11), t - 20.0])
    inverse = np.linalg.inv(design.T @ design)
    u = line.sd * np.sqrt(np.diag(inverse))
    r = inverse[0, 1] / math.sqrt(inverse[0, 0] * inverse[1, 1])
    assert u == pytest.approx([0.0029, 0.00067], abs=5e-5)
    assert r == pytest.approx(-0.930, abs=0.0005)
    model = model_of(lambda y1, y2: y1 + 10.0 * y2, line.intercepts[0], line.slope)
    block = Block((0, 1), np.array([[1.0, r], [r, 1.0]]))
    (budget,), _ = budgets_of(
        model, ["b"], [source("y1", float(u[0])), source("y2", float(u[1]))], (block,)
    )
    assert budget.estimate.value == pytest.approx(-0.1494, abs=5e-5)
    assert budget.estimate.u == pytest.approx(0.0041, abs=5e-5)


def simulated(model, sources, draws, seed=1):
    budgets, _ = budgets_of(model, ["vcg"], sources, ())
    return budgets[0], simulate(model, sources, (), budgets, seed=seed, draws=draws).results[0]


def test_supplement_9_2_sum_of_normal_and_rectangular_inputs():
    # JCGM 101:2008, 9.2 (from memory, recomputed): four N(0, 1): 95 % +-3.92; four rectangular
    # of unit standard deviation: +-3.88. 400 000 draws give the ends to 0.01 (one sigma 0.007).
    for shape, half in (("normal", 3.92), ("rectangular", 3.88)):
        sources = [source(n, 1.0, shape) for n in "abcd"]
        _, found = simulated(model_of(total, 0, 0, 0, 0), sources, 400_000)
        assert found.symmetric == pytest.approx((-half, half), abs=0.02)
        assert found.u == pytest.approx(2.0, abs=0.01)


def test_supplement_9_3_mass_calibration_is_not_validated():
    # JCGM 101:2008, 9.3 (from memory, recomputed): Monte Carlo 1.234 mg, u 0.0754, shortest 95 %
    # [1.083, 1.383]; first order u 0.0539, and the first-order interval is not validated.
    def deviation(m_r, d_m, rho_a, rho_w, rho_r):
        return (m_r + d_m) * (1 + (rho_a - 1.2) * (1 / rho_w - 1 / rho_r)) - 1e5

    root3 = math.sqrt(3.0)
    sources = [
        source("m", 0.05), source("d", 0.02), source("a", 0.1 / root3, "rectangular"),
        source("w", 1000 / root3, "rectangular"), source("r", 50 / root3, "rectangular"),
    ]  # fmt: skip
    model = model_of(deviation, 1e5, 1.234, 1.2, 8000.0, 8000.0)
    budget, found = simulated(model, sources, 1_000_000)
    assert budget.estimate.value == pytest.approx(1.234, abs=0.0005)
    assert budget.estimate.u == pytest.approx(0.0539, abs=5e-5)
    # A million draws: mean to 0.0001; the length of the shortest interval is settled to 0.001, but
    # not its place, its length being flat near the least.
    assert found.mean == pytest.approx(1.234, abs=0.0005)
    assert found.u == pytest.approx(0.0754, abs=0.0002)
    assert found.shortest == pytest.approx((1.083, 1.383), abs=0.006)
    assert found.shortest[1] - found.shortest[0] == pytest.approx(0.300, abs=0.0015)
    assert not found.agrees


def test_a_linear_model_is_validated():
    _, found = simulated(model_of(total, 1.0, 2.0), [source("a", 0.3), source("b", 0.4)], 400_000)
    assert found.agrees


def test_scatter_is_drawn_from_a_scaled_and_shifted_t():
    # JCGM 101:2008, 6.4.9: 95 % interval of u times Student's t, here with 5 degrees of freedom.
    sources = [source("a", 2.0, "t", dof=5.0)]
    _, found = simulated(model_of(total, 10.0), sources, 400_000)
    half = 2.0 * coverage_factor(5)
    assert found.symmetric == pytest.approx((10.0 - half, 10.0 + half), abs=0.05)


def test_coverage_factors_of_students_t():
    # JCGM 100:2008, table G.2: t for 95 % and 99 %.
    assert coverage_factor(10) == pytest.approx(2.23, abs=0.005)
    assert coverage_factor(16, 0.99) == pytest.approx(2.92, abs=0.005)
    assert coverage_factor(math.inf) == pytest.approx(1.960, abs=0.0005)
    # G.4.1: fractions are cut, which is on the safe side.
    assert coverage_factor(16.7) == coverage_factor(16)


@given(st.lists(st.tuples(st.floats(0.01, 10.0), st.floats(1.0, 100.0)), min_size=1, max_size=8))
def test_effective_dof_lies_between_the_least_and_the_sum(parts):
    # JCGM 100:2008, G.4.1, formula G.2c.
    squares = [(u**2, dof) for u, dof in parts]
    free = effective_dof(sum(v for v, _ in squares), squares)
    assert min(d for _, d in parts) * (1 - 1e-9) <= free <= sum(d for _, d in parts) * (1 + 1e-9)


def test_numerical_tolerance():
    # JCGM 101:2008, 7.9.2, examples 1 and 2 there: 35 ug, and 2 K.
    assert numerical_tolerance(0.00035, 2) == pytest.approx(0.000005)
    assert numerical_tolerance(2.0, 1) == pytest.approx(0.5)
    assert numerical_tolerance(0.0996, 2) == pytest.approx(0.005)  # rounds to 0.10


def test_shortest_interval_of_an_exponential_begins_at_zero():
    # Closed form: density falls from zero on, so the shortest 95 % interval is [0, -ln 0.05].
    values = -np.log1p(-(np.arange(200_000) + 0.5) / 200_000)
    low, high = shortest_interval(values)
    assert (low, high) == pytest.approx((0.0, -math.log(0.05)), abs=1e-3)


def test_run_settles_and_repeats():
    sources = [source("a", 0.3), source("b", 0.4)]
    model = model_of(total, 1.0, 2.0)
    budgets, _ = budgets_of(model, ["vcg"], sources, ())
    first = simulate(model, sources, (), budgets, seed=5)
    assert first.settled
    assert first.draws < 1_000_000
    assert simulate(model, sources, (), budgets, seed=5) == first
    assert simulate(model, sources, (), budgets, seed=6) != first


def test_fully_correlated_sources_add_linearly_and_opposed_ones_cancel():
    for r, u in ((1.0, 0.7), (-1.0, 0.1), (0.0, 0.5)):
        sources = [source("a", 0.3), source("b", 0.4)]
        blocks = blocks_of(sources, [Correlation("a", "b", r, HERE)] if r else [])
        model = model_of(total, 0.0, 0.0)
        budgets, _ = budgets_of(model, ["vcg"], sources, blocks)
        assert budgets[0].estimate.u == pytest.approx(u, abs=1e-9)
        run = simulate(model, sources, blocks, budgets, seed=3, draws=100_000)
        assert run.results[0].u == pytest.approx(u, rel=0.02)  # 100 000 draws: 0.2 % one sigma


def test_impossible_correlations_are_refused():
    sources = [source(n, 1.0) for n in "abc"]
    stated = [Correlation(a, b, r, HERE) for a, b, r in
              (("a", "b", 0.9), ("b", "c", 0.9), ("a", "c", -0.9))]  # fmt: skip
    with pytest.raises(FieldDataError, match="positive semi-definite") as caught:
        blocks_of(sources, stated)
    assert {d.code for d in caught.value.defects} == {"correlation-impossible"}
    with pytest.raises(FieldDataError, match="did you mean c") as caught:
        blocks_of([source("beam", 1.0), source("c", 1.0)], [Correlation("beam", "cc", 0.1, HERE)])
    assert [d.code for d in caught.value.defects] == ["input-unknown"]
