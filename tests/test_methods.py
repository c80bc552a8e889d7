"""The three methods against closed forms, against each other, and against other fitting code."""

import json
import math
from functools import cache

import numpy as np
import pytest
import statsmodels.api as sm
from conftest import DEMO_TRIALS
from demos import DEMOS, demo_files
from hull_chain import worked
from hull_edits import column, with_keys
from hull_forms import afloat
from hull_ships import BOX, HIGH_CHINE, LOW_CHINE, PATROL, VEE
from hull_trial import write_hull_trial
from scipy.optimize import least_squares

from incline import read_trial, reduce, to_json
from incline.reading import read_offsets
from incline.screen import show
from incline.screen_hydrostatics import hydrostatics_csv
from incline.tabulation import tabulate

LEVEL = {"tau": 0.0, "list_tan": 0.0, "deflection": 0.0}


def chosen(folder, method):
    """The trial with a method asked for."""
    with_keys(folder, f'[method]\nheel = "{method}"')
    return folder


@pytest.mark.parametrize("degrees, low", [(1.0, 0.609), (2.0, 2.439), (3.0, 5.493), (4.0, 9.780)])
def test_straight_line_on_a_box_heeled_to_one_angle(degrees, low, tmp_path):
    # Closed form: box 60 x 12 x 3 m, GM 1.3 m, BM 4 m, heeled to one angle and as far the other way:
    # KG low by BM t^2 / 2. The figures are printed to half a micron.
    write_hull_trial(tmp_path, BOX, degrees=(0.0, degrees, 0.0, -degrees, 0.0), **LEVEL)
    found = worked(tmp_path, "straight-line").found
    assert 1000.0 * (4.2 - float(found.vcg)) == pytest.approx(low, abs=5e-4)
    for method in ("wall-sided", "heeled-hull"):
        assert float(worked(tmp_path, method).found.vcg) == pytest.approx(4.2, abs=1e-8)


@pytest.mark.parametrize("most", [2.0, 4.0, 8.0])
def test_straight_line_on_a_box_at_many_heels(most, tmp_path):
    """KG is low by 1/2 BM sum(t^4) / sum(t^2), and by the next term of the same least squares."""
    degrees = tuple(most * s for s in (0.0, 0.3, 0.7, 1.0, 0.0, -0.3, -0.7, -1.0, 0.0))
    truth = write_hull_trial(tmp_path, BOX, degrees=degrees, **LEVEL)
    low = truth.inclined.z - float(worked(tmp_path, "straight-line").found.vcg)
    t = np.array(truth.tangents)
    first = 0.5 * 4.0 * (t**4).sum() / (t**2).sum()
    # With M = D GM (t + a t^3), a = BM / (2 GM), and b the slope of t on M by least squares, 1 / b is
    # D GM (S2 + 2 a S4 + a^2 S6) / (S2 + a S4).
    a = 4.0 / (2.0 * 1.3)
    s2, s4, s6 = ((t**n).sum() for n in (2, 4, 6))
    exact = 1.3 * ((s2 + 2.0 * a * s4 + a * a * s6) / (s2 + a * s4) - 1.0)
    assert low == pytest.approx(exact, abs=1e-8)
    # what the short formula leaves out, relative to it: a t^2 times the spread of t^2, below a t^2 / 2
    assert low == pytest.approx(first, rel=0.5 * a * (t**2).max())


def test_straight_line_error_about_a_list(tmp_path):
    """About a list t0 the curve is steeper by 3/2 BM t0^2, and the line's slope with it."""
    list_tan, small = 0.02, 1.0
    degrees = tuple(math.degrees(math.atan(list_tan)) + s for s in (small, 0.5, -0.5, -small))
    truth = write_hull_trial(
        tmp_path, BOX, degrees=(0.0, *degrees), **{**LEVEL, "list_tan": list_tan}
    )
    low = truth.inclined.z - float(worked(tmp_path, "straight-line").found.vcg)
    t = np.array([list_tan, *truth.tangents[1:]])
    away = t - t.mean()
    expected = 0.5 * 4.0 * (away * t**3).sum() / (away * away).sum()
    # to the next term, as above, whose size is a share a t^2 of it
    assert low == pytest.approx(expected, rel=2e-3)
    assert expected > 1.5 * 4.0 * list_tan**2


def test_wall_sided_is_exact_on_a_parabolic_section(tmp_path):
    # Half-breadth 6 sqrt(z / 3): KM 7.8, BM 6, and N = KM t + BM t^3 / 2 at every heel (closed form).
    write_hull_trial(tmp_path, BOX, **LEVEL)
    rows = ["station,x [m],half breadth [m],height [m],body"]
    y = np.linspace(0.0, 8.0, 321)
    rows += [f"{n},{x},{b!r},{3.0 * (b / 6.0) ** 2!r},hull" for n, x in enumerate((0, 25, 50))
             for b in y.tolist()]  # fmt: skip
    (tmp_path / "offsets.csv").write_text("\n".join(rows) + "\n", encoding="utf-8")
    toml = tmp_path / "trial.toml"
    text = toml.read_text(encoding="utf-8").replace('lpp = "60.0 m"', 'lpp = "50.0 m"')
    text = text.replace('beam = "12.0 m"', 'beam = "16.0 m"')
    toml.write_text(text, encoding="utf-8")
    for name in ("weights.csv", "ledger.csv"):
        (tmp_path / name).unlink()
    drafts = "".join(f"{x},{s},3.0,6\n" for x in (4, 25, 45) for s in "PS")
    (tmp_path / "drafts.csv").write_text("x [m],side,draft [m],y [m]\n" + drafts, "utf-8")
    mass, shifts, readings = 1.025 * 1200.0, ["shift,time,moment [t m]"], []
    for n, degrees in enumerate((0.0, 2.0, 4.0, 8.0, -2.0, -4.0, -8.0)):
        t = math.tan(math.radians(degrees))
        shifts.append(f"{n},09:{10 + n},{mass * (2.8 * t + 3.0 * t**3)!r}")
        readings += [f"{n},{d},{1000.0 * k * t!r}" for d, k in (("P1", 3.75), ("P2", 2.4))]
    (tmp_path / "shifts.csv").write_text("\n".join(shifts) + "\n", encoding="utf-8")
    text = "shift,device,reading [mm]\n" + "\n".join(readings) + "\n"
    (tmp_path / "readings.csv").write_text(text, encoding="utf-8")
    wall_sided, exact = (worked(tmp_path, m).found for m in ("wall-sided", "heeled-hull"))
    # Chords of 25 mm lie 13 micron inside the section at most; where the waterline meets them counts
    # in BM with three times that of 6 m, 4e-5 m.
    assert float(exact.condition.buoyancy.volume) == pytest.approx(1200.0, rel=1e-5)
    assert float(exact.vcg) == pytest.approx(5.0, abs=5e-5)
    assert float(wall_sided.vcg) == pytest.approx(5.0, abs=5e-5)
    straight = float(worked(tmp_path, "straight-line").found.vcg)
    assert float(exact.vcg) - straight > 0.04


def errors(folder, truth):
    """KG of each method less the truth [m]."""
    return {
        m: float(worked(folder, m).found.light_vcg) - truth.vcg
        for m in ("straight-line", "wall-sided", "heeled-hull")
    }


def test_wall_sided_may_correct_the_wrong_way_near_a_chine(tmp_path):
    """Above a chine that dips, the lever falls short of the line: KG comes out high by a line.

    The wall-sided term raises it further. On a chine that stays under it corrects nearly all.
    """
    four = (0.0, 2.0, 4.0, -2.0, -4.0)
    high = errors(tmp_path / "a", write_hull_trial(tmp_path / "a", HIGH_CHINE, degrees=four))
    assert high["wall-sided"] > high["straight-line"] > 0.02
    low = errors(tmp_path / "b", write_hull_trial(tmp_path / "b", LOW_CHINE, degrees=four))
    assert abs(low["wall-sided"]) < 0.1 * abs(low["straight-line"])
    assert low["straight-line"] < -0.002
    assert max(abs(e["heeled-hull"]) for e in (high, low)) < 1e-6


def test_wall_sided_with_a_table_only(write_folder):
    """The workboat's hull is wall-sided: without noise its KG comes back from KM and BM."""
    name = "workboat-metric"
    folder = chosen(write_folder(demo_files(name, rounded=False, noisy=False)), "wall-sided")
    result = reduce(read_trial(folder))
    heel, light = result.outcome.heel, result.outcome.lightship
    assert heel.method == "wall-sided"
    assert [m.method for m in heel.others] == ["straight-line"]
    # Its tanks are not recorded as boxes; a free surface's own cubic term, 1/2 FSM t^3, is left.
    most = max(heel.max_heel_port, heel.max_heel_starboard)
    left = 0.5 * result.outcome.free_surface.moment / DEMOS[name][0].light.mass * most**2
    error = light.vcg.value - DEMOS[name][0].light.z
    assert -1e-7 < error < left
    assert left < 2e-4
    straight = heel.others[0].vcg - DEMOS[name][0].light.z
    assert straight < -0.001
    # What the formula changes is counted, and said.
    line = _curvature_line(result)
    assert line.part == pytest.approx(light.vcg.value - heel.others[0].vcg, rel=0.05)
    assert any("may err to either side" in r for r in result.remarks)


def _curvature_line(result):
    budget = next(b for b in result.outcome.budgets if b.key == "vcg")
    (line,) = (n for n in budget.lines if n.name.startswith("curvature that"))
    return line


@pytest.fixture(scope="module")
def patrol(tmp_path_factory):
    folder = tmp_path_factory.mktemp("patrol")
    truth = write_hull_trial(
        folder, PATROL, degrees=(0.0, 1.5, 3.0, 0.0, -1.5, -3.0), deflection=0.0
    )
    return folder, truth, reduce(read_trial(folder))


def copied(folder, to):
    to.mkdir()
    for file in folder.iterdir():
        (to / file.name).write_bytes(file.read_bytes())
    return to


def test_every_method_is_told(patrol):
    _, truth, result = patrol
    told = json.loads(to_json(result))["heel"]
    assert told["method"] == "heeled-hull"
    other = {m["method"]: m for m in told["other_methods"]}
    assert set(other) == {"wall-sided", "straight-line"}
    folder = patrol[0]
    for method, of in other.items():
        found = worked(folder, method).found
        assert of["vcg_m"] == pytest.approx(float(found.light_vcg), abs=1e-12)
        assert of["gm_fluid_m"] == pytest.approx(float(found.gm_fluid), abs=1e-12)
    # Nothing of the curve is left out, and no source says so.
    names = [line.name for b in result.outcome.budgets for line in b.lines]
    assert not any("leaves out" in n for n in names)
    off = 1000.0 * (other["straight-line"]["vcg_m"] - truth.vcg)
    (remark,) = (r for r in result.remarks if "straight-line KG" in r)
    assert (
        f"straight-line KG {abs(off):.1f} mm {'low, on the unsafe side' if off < 0 else 'high'}"
        in remark
    )
    wall_sided = 1000.0 * (other["wall-sided"]["vcg_m"] - result.outcome.lightship.vcg.value)
    side = "low, on the unsafe side" if wall_sided < 0.0 else "high"
    assert f"wall-sided formula {abs(wall_sided):.1f} mm {side}" in remark
    assert " ".join(remark.split()) in " ".join(show(result).split())


@pytest.mark.parametrize("method", ["straight-line", "wall-sided"])
def test_another_method_with_offsets(method, patrol, tmp_path):
    """The hull is integrated all the same; the difference is the method's uncertainty."""
    folder, _, exact = patrol
    result = reduce(read_trial(chosen(copied(folder, tmp_path / "other"), method)))
    outcome = result.outcome
    assert outcome.heel.method == method
    assert outcome.heel.others[0].method == "heeled-hull"
    assert outcome.as_inclined.hull is not None
    for key in ("volume", "displacement", "kb", "bmt", "lcb"):
        value = getattr(exact.outcome.as_inclined, key)
        assert getattr(outcome.as_inclined, key) == pytest.approx(value, rel=1e-12)
    difference = exact.outcome.lightship.vcg.value - outcome.lightship.vcg.value
    assert outcome.heel.others[0].vcg - outcome.lightship.vcg.value == pytest.approx(
        difference, abs=1e-9
    )
    line = _curvature_line(result)
    assert line.basis == "difference from the heeled hull"
    # to first order: GM goes with the inverse of the slope, and they differ by a few per cent
    assert line.part == pytest.approx(abs(difference), rel=0.01)
    assert any(f"The {method} method was asked for" in r for r in result.remarks)


def test_table_in_place_of_the_offsets(patrol, tmp_path):
    """The hull's own table, entered: a straight line on the same KM."""
    folder, _, exact = patrol
    there = copied(folder, tmp_path / "table")
    hull = read_offsets(there)
    drafts = [0.9 + 0.02 * k for k in range(25)]
    table = tabulate(hull.offsets, hull.vessel.lpp, drafts, (-0.1, 0.0, 0.1, 0.2))
    (there / "hydrostatics.csv").write_text(hydrostatics_csv(hull, table), encoding="utf-8")
    toml = there / "trial.toml"
    text = toml.read_text(encoding="utf-8")
    both = '[hydrostatics]\nvolume = "moulded"\nallowance = "0 %"\n'
    toml.write_text(f"{both}\n{text}", encoding="utf-8")
    beside = reduce(read_trial(there))
    assert beside.outcome.lightship.vcg.value == pytest.approx(
        exact.outcome.lightship.vcg.value, abs=1e-12
    )
    # The table's figures have five decimals; a list of 0.2 deg is not in it, which adds a volume of
    # BM t^2 / 2 times the flare's tangent: below 1e-4 of it.
    share, km, lcb = beside.outcome.as_inclined.hull.table
    assert abs(share) < 1e-4
    assert abs(km) < 5e-5
    assert abs(lcb) < 5e-5
    assert any("The hydrostatic table is not used" in r for r in beside.remarks)
    toml.write_text(f'{both}use = "table"\n\n{text}', encoding="utf-8")
    entered = reduce(read_trial(there)).outcome
    assert entered.heel.method == "straight-line"
    assert [m.method for m in entered.heel.others] == ["wall-sided"]
    assert entered.as_inclined.hull is None
    line = next(m for m in exact.outcome.heel.others if m.method == "straight-line")
    assert entered.lightship.vcg.value == pytest.approx(line.vcg, abs=2e-4)


def noisy(folder, sd):
    """The trial's readings with noise [m]."""
    rng = np.random.default_rng(4)
    column(
        folder, "readings.csv", r"reading \[mm\]", lambda r: r + 1000.0 * sd * float(rng.normal())
    )


@pytest.mark.parametrize("ship", [VEE, HIGH_CHINE], ids=lambda s: s.name)
def test_linearised_fit_is_the_fit(ship, tmp_path):
    """Ordinary least squares (statsmodels) of the straightened tangents gives the chain's slope."""
    write_hull_trial(tmp_path, ship)
    noisy(tmp_path, 0.002)
    trial, found, seen, *_ = worked(tmp_path)
    bend, line = found.heeling.bend, found.heeling.regressor
    member = (seen.device[:, None] == np.arange(2)).astype(float)
    scale = abs(line).max()
    design = np.column_stack([line[seen.shift] / scale, member])
    fit = sm.OLS(seen.tangents - bend[seen.shift], design).fit()
    assert fit.params[0] / scale == pytest.approx(float(found.heeling.slope), rel=1e-6)
    heel = reduce(trial).outcome.heel
    assert heel.slope == pytest.approx(float(found.heeling.slope), rel=1e-6)
    assert heel.residual_sd == pytest.approx(math.sqrt(fit.ssr / fit.df_resid), rel=1e-6)
    assert heel.dof == len(seen.tangents) - 3
    fitted = [p.fitted for p in heel.points]
    assert fitted == pytest.approx(fit.fittedvalues + bend[seen.shift], abs=1e-9)


@pytest.mark.parametrize("ship", [VEE, HIGH_CHINE], ids=lambda s: s.name)
def test_general_least_squares_on_the_true_hull_finds_the_same_kg(ship, tmp_path):
    """KG and the zeros by scipy's trust region, heels by root finding on the closed form."""
    truth = write_hull_trial(tmp_path, ship, degrees=(0.0, 3.0, 7.0, -6.0))
    noisy(tmp_path, 0.002)
    _, found, seen, *_ = worked(tmp_path)
    b, mass = truth.buoyancy, truth.inclined.mass
    guesses = [(truth.mean, truth.tau, t) for t in truth.tangents]

    @cache
    def heels(vcg):
        # G on the line through B at the waterline of the drafts; moments shift it from there.
        x = b.x + truth.tau * (vcg - b.z)
        y = b.y + (b.z - vcg) * truth.list_tan
        every = []
        for i, moment in enumerate(truth.moments):
            centre = (x, y + moment / mass, vcg)
            at = afloat(ship, b.volume, lambda *_, c=centre: c, truth.deflection, guesses[i])
            guesses[i] = (at.mean, at.tau, at.t)
            every.append(at.t)
        return np.array(every)

    def misses(unknown):
        return seen.tangents - unknown[1 + seen.device] - heels(float(unknown[0]))[seen.shift]

    best = least_squares(
        misses, [ship.vcg + 0.01, 0.11, 0.17], x_scale=[1.0, 0.1, 0.1], xtol=1e-12, ftol=1e-14,
        gtol=1e-14,
    )  # fmt: skip
    assert abs(best.x[0] - truth.inclined.z) > 5e-5  # the noise shows
    assert float(found.vcg) == pytest.approx(best.x[0], abs=1e-6)


def test_shipped_demo_has_a_straight_line_twelve_millimetres_low():
    result = reduce(read_trial(DEMO_TRIALS / "chine-metric"))
    light, true = result.outcome.lightship, DEMOS["chine-metric"][0].light
    for estimate, value in zip(
        (light.displacement, light.vcg, light.lcg, light.tcg),
        (true.mass, true.z, true.x, true.y),
        strict=True,
    ):
        assert abs(estimate.value - value) < estimate.U
    straight = next(m for m in result.outcome.heel.others if m.method == "straight-line")
    # 12.7 mm by the exact tangents and KM of the true hull; noise is common to both methods but for
    # the weight that each heel has in them, far below a millimetre here.
    assert 1000.0 * (light.vcg.value - straight.vcg) == pytest.approx(12.7, abs=0.6)
