"""Sensitivities of the chain against exact derivatives of the same physics written again.

The reference writes the formulas out again, plainly, with the closed form of the wall-sided demo
hull in place of its table, differentiated by the complex step (Squire and Trapp, SIAM Review 40(1),
1998).
"""

from itertools import pairwise
from types import SimpleNamespace

import numpy as np
import pytest
from demos import DEMOS, demo_files

from incline import read_trial, reduce
from incline.ledger import lines_of
from incline.reduction import observe, work_out

NAME = "supply-vessel-us"


@pytest.fixture(scope="module")
def trial(tmp_path_factory):
    folder = tmp_path_factory.mktemp("exact")
    for file, text in demo_files(NAME, rounded=False).items():
        (folder / file).write_text(text, encoding="utf-8")
    return read_trial(folder)


def reference(  # noqa: PLR0915 - one page of formulas, in the order of the sums
    trial, stage, moved, step
):
    """Results when the input ``moved`` (field, item) is off by ``step``, which may be complex."""
    given = stage.model.given
    values = {n: getattr(given, n).astype(complex) for n in given.__dataclass_fields__}
    field, item = moved
    values[field][... if item is None else item] += step
    g = SimpleNamespace(**values)

    hull, lpp = DEMOS[NAME][0].hull, trial.vessel.lpp
    area, x_f, across, along = hull.waterplane()
    solve = stage.model.plan.waterline.solve
    mean, tau, deflection, list_tan = (solve[i] @ g.drafts for i in range(4))
    i_mid = along + area * (x_f - lpp / 2) ** 2
    share = 1 - 4 * i_mid / (lpp**2 * area)
    entry = mean + tau * (lpp / 2 - x_f) + share * deflection
    low, x_low, z_low = hull.upright(hull.chine)
    rise = entry - hull.chine
    volume = low + area * rise
    x_b = (x_low + area * x_f * rise - along * tau) / volume
    z_b = (z_low + area * rise * (entry + hull.chine) / 2 + along * tau**2 / 2) / volume
    displacement = volume * g.density * g.volume_factor * (1 + stage.model.plan.allowance)

    observed = observe(trial)
    raw = observed.tangents * observed.lengths[observed.device]
    tangents = raw / g.lengths[observed.device]
    placing = stage.model.plan.placing
    transverse = (g.weights @ placing.owner * g.place_y) @ placing.change
    vertical = (g.weights @ placing.owner * g.place_z) @ placing.change

    def slope_of(moments):
        top = bottom = 0.0
        for j in range(len(observed.devices)):
            m = moments[observed.shift[observed.device == j]]
            centred = m - m.sum() / len(m)
            top += (centred * tangents[observed.device == j]).sum()
            bottom += (centred * m).sum()
        return top / bottom

    moments, slope = transverse, slope_of(transverse)
    for _ in range(2):
        moments = transverse + vertical * (list_tan + slope * moments)
        slope = slope_of(moments)
    slope = slope + g.slope_shift
    fsm = g.fsm.sum()
    gm = 1 / (slope * displacement)
    vcg = z_b + across / volume + g.km_shift - gm - fsm / displacement
    lcg = x_b + g.lcb_shift + tau * (vcg - z_b)
    tcg = gm * list_tan

    start = placing.start
    light = displacement - g.weights.sum()
    mx = displacement * lcg - (g.weights * g.weight_x).sum()
    my = displacement * tcg - (g.weights * (g.place_y @ start)).sum()
    mz = displacement * vcg - (g.weights * (g.place_z @ start)).sum()
    for i, line in enumerate(lines_of(trial)):
        sign = {"deduct": -1, "add": 1, "relocate": 0}[line.action]
        light = light + sign * g.mass[i]
        away = line.action == "relocate"
        mx = mx + sign * g.mass[i] * g.x[i] + away * g.mass[i] * (g.to_x[i] - g.x[i])
        my = my + sign * g.mass[i] * g.y[i] + away * g.mass[i] * (g.to_y[i] - g.y[i])
        mz = mz + sign * g.mass[i] * g.z[i] + away * g.mass[i] * (g.to_z[i] - g.z[i])
    return np.array([light, mz / light, mx / light, my / light, gm])


def test_sensitivities_agree_with_the_complex_step(trial):
    stage = work_out(trial, observe(trial))
    sources = stage.model.sources
    # The table's splines pass through exact values: the results agree to rounding first.
    plain = reference(trial, stage, (sources[0].field, sources[0].item), 0.0)
    for budget, expected in zip(stage.outcome.budgets, plain, strict=True):
        assert budget.estimate.value == pytest.approx(expected.real, abs=1e-9)
    assert len(sources) > 70
    tiny = 1e-20  # no difference is taken, so that a step below rounding is exact
    for source in sources:
        exact = reference(trial, stage, (source.field, source.item), 1j * tiny).imag / tiny
        for budget, expected in zip(stage.outcome.budgets, exact, strict=True):
            line = next(line for line in budget.lines if line.name == source.name)
            # 1e-6 of the sensitivity; where it is worth less than a millionth part of the result's
            # uncertainty it only has to be that small.
            small = 1e-6 * budget.estimate.u / line.u
            assert line.sensitivity == pytest.approx(expected, rel=1e-6, abs=small), line.name


def test_budget_adds_up_and_is_sorted(trial):
    for budget in reduce(trial).outcome.budgets:
        shares = [line.share for line in budget.lines]
        assert sum(shares) == pytest.approx(1.0, abs=1e-9)
        assert all(a >= b - 1e-8 for a, b in pairwise(shares))
