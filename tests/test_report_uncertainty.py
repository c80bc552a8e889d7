"""The uncertainty in the report: what is printed is what the budgets and the run hold."""

import math
import re
from dataclasses import replace

import made_reduction as made
import made_uncertainty as unsure
import pytest
from made_trial import KG_LIMIT
from read_report import body, pages, printed, section, texts

from incline.defaults import LABEL
from incline.report.amounts import Unit, percent, significant, unit_of
from incline.report.budgets import main_lines
from incline.report.figures_uncertainty import density, distribution_plot, share_plot
from incline.report.show import Show
from incline.units import ANGLE, DENSITY, FRACTION, LENGTH, MASS, MOMENT, SYSTEMS, VOLUME

METRIC, US = Show(SYSTEMS["metric"]), Show(SYSTEMS["us"])
LONG_TON, FOOT = 2240.0 * 0.45359237e-3, 0.3048  # exact by definition


def _minus(text):
    return text.replace("-", "−")


def _section(kind):
    """Text of the section in words and of both appendices."""
    text = body(kind)
    return " ".join(
        section(text, title) for title in ("Uncertainty", "Uncertainty budgets", "Monte Carlo run")
    )


def _kg(units="metric"):
    return made.made_reduction(units).outcome.budgets[1]


def test_kg_interval_is_said_in_words():
    found = _kg().estimate
    low, high = found.value - found.U, found.value + found.U
    said = f"the true KG lies between {low:.4f} m and {high:.4f} m above the baseline"
    assert said in _section("metric")
    assert "19 times out of 20." in _section("metric")


def test_words_take_the_simulated_interval_when_the_first_order_one_fails():
    base = made.made_reduction()
    run = base.simulation
    odd = tuple(replace(r, agrees=r.key != "vcg") for r in run.results)
    text = " ".join(texts(printed(replace(base, simulation=replace(run, results=odd)))))
    low, high = run.results[1].symmetric
    assert f"lies between {low:.4f} m and {high:.4f} m above" in text
    assert "19 times out of 20 (simulated, because the first-order interval was not" in text


@pytest.mark.parametrize(
    ("kind", "unit", "scale"),
    [("metric", "mm", 1e-3), ("us", "in", FOOT / 12.0)],
)
def test_kg_budget_rows_are_in_the_units_of_the_trial(kind, unit, scale):
    text, budget = _section(kind), _kg(kind)
    line = next(x for x in budget.lines if x.name == "hydrostatic table, KM")
    decimals = 2 if unit == "mm" else 3
    u, part, share = line.u / scale, line.part / scale, 100.0 * line.share
    row = f"KM {significant(u)} {unit} {LABEL} normal 1.05 {part:.{decimals}f} {share:.1f}"
    assert row in text
    total = budget.estimate
    assert (
        f"combined {total.u / scale:.{decimals}f} {unit} k = {total.k:.2f}, dof {total.dof:.1f} U = k u "
        f"{total.U / scale:.{decimals}f} {unit} {total.u / scale:.{decimals}f} 100.0"
    ) in text


def test_mass_fraction_density_and_slope_carry_their_units():
    metric, us = _section("metric"), _section("us")
    assert "test weight A, mass 0.0100 t stated normal 250 mm/t 2.50" in metric
    assert "0.200 % stated rectangular 11.0 mm/% 2.20" in metric
    assert "6.00e−06 1/(t m) scatter of this test t, 13.8" in metric
    assert "0.000300 t/m³" in metric
    slope = 6.0e-6 * LONG_TON * FOOT
    assert f"{_minus(f'{slope:.2e}')} 1/(LT ft) scatter of this test t, 13.8" in us
    assert f"{0.01 / LONG_TON:.5f} LT stated" in us
    assert "lb/ft³" in us
    assert not re.search(r"\d (m|mm|t|t m|m³|mm/t|t/mm|mm/%)\b", us)


def test_correlated_part_is_negative_and_printed_so():
    line = next(x for x in _kg().lines if x.name == "test weight B, mass")
    assert line.share < 0.0
    share = _minus(f"{100.0 * line.share:.1f}")
    assert f"test weight B, mass 0.0100 t stated normal −80.0 mm/t −0.80 {share}" in _section(
        "metric"
    )


def test_printed_rows_and_the_rest_make_the_whole():
    budget = _kg()
    shown = main_lines(budget)
    rest = [x for x in budget.lines if x not in shown]
    assert sum(abs(x.share) for x in rest) <= 0.01 * sum(abs(x.share) for x in budget.lines)
    # One row fewer would leave more than a hundredth.
    least = min(abs(x.share) for x in shown)
    assert least + sum(abs(x.share) for x in rest) > 0.01
    assert list(shown) == sorted(shown, key=lambda x: -x.share)
    left = 100.0 * sum(x.share for x in rest)
    assert f"{len(rest)} further inputs – {left:.1f} " in _section("metric")


def test_no_more_rows_than_asked_for():
    budget = _kg()
    many = replace(budget, lines=tuple(replace(x, share=1.0 / 24.0) for x in budget.lines))
    assert len(many.lines) == 24
    assert len(main_lines(many)) == 20
    assert len(main_lines(many, 12)) == 12


def test_only_kg_says_what_residuals_cannot_show():
    said = "disturbances that residuals cannot show:"
    assert _section("metric").count(f"{said} counted where the trial says “not excluded”") == 1
    assert _section("metric").count(said) == 1
    assert _section("bare").count(f"{said} not assessed") == 1


def test_an_interval_is_not_said_to_hold_under_a_finding():
    said = "The residuals point to a disturbance, see “What the residuals say”."
    assert said in _section("metric")
    assert said not in _section("long")


def test_every_result_has_its_budget():
    for name in ("KG", "displacement", "LCG", "TCG", "GM fluid"):
        assert _section("metric").count(f"Budget of {name}") == 1


def test_front_page_names_the_share_that_nobody_measured():
    share = 100.0 * sum(x.share for x in _kg().lines if x.basis == LABEL)
    front = pages("metric")[0]
    assert f"“{LABEL}” are defaults of this program" in front
    assert f"They make up {share:.0f} % of the variance of KG." in front
    everything = tuple(replace(x, basis="stated") for x in _kg().lines)
    base = made.made_reduction()
    some = tuple(
        replace(b, lines=everything if b.key == "vcg" else b.lines) for b in base.outcome.budgets
    )
    data = printed(replace(base, outcome=replace(base.outcome, budgets=some)))
    assert "defaults of this program" not in texts(data)[0]


def test_the_simulated_interval_stands_beside_the_first_order_one():
    front, run = section(body("metric"), "Uncertainty"), made.made_reduction().simulation
    kg, low_high = _kg().estimate, run.results[1].symmetric
    first = f"{kg.value - kg.U:.4f} to {kg.value + kg.U:.4f}"
    assert f"KG [m] {first} {low_high[0]:.4f} to {low_high[1]:.4f} validated" in front
    low, high = run.results[3].symmetric
    assert f"{low:.4f} to {high:.4f} not validated: take the simulated interval" in front
    assert "simulated, 40 000 draws" in front


def test_front_page_without_a_run_says_so():
    assert "no Monte Carlo run was made" in pages("bare")[0]
    assert "simulated" not in pages("bare")[0]


def test_limit_and_probability_of_being_above_it():
    said = "Probability that KG of the lightship is above it: 2.4 % (first order) and 2.3 % (simulated)."
    assert f"Limit of KG set by the trial: {KG_LIMIT:.3f} m. {said}" in pages("metric")[0]
    assert f"Limit of KG set by the trial: {KG_LIMIT / FOOT:.3f} ft. {said}" in pages("us")[0]


@pytest.mark.parametrize(
    ("probability", "said"),
    [
        (0.0, "less than 0.1 %"),
        (0.0004, "less than 0.1 %"),
        (0.5, "50.0 %"),
        (0.9996, "more than 99.9 %"),
    ],
)
def test_probabilities_never_print_as_none_or_certain(probability, said):
    assert percent(probability).replace("\N{NO-BREAK SPACE}", " ") == said


def test_scatter_is_split_and_the_regression_named_as_such():
    text, heel = _section("metric"), made.made_reduction().outcome.heel
    for name, u in (("alike", 4.4e-6), ("own", 5.5e-6), ("left", 2.9e-6)):
        gm = 1000.0 * heel.gm_fluid * u / heel.slope
        assert f"{name} {_minus(f'{u:.2e}')} {gm:.2f}" in text
    assert "slope, as taken in the budgets 6.00e−06" in text
    assert f"regression's own standard error {_minus(f'{heel.u_slope:.2e}')}" in text
    assert "Disagreement between the devices stands for the errors of their lengths" in text
    assert "standard error of GM fluid, regression alone" in " ".join(pages("metric"))


def test_lengths_that_are_stated_are_not_counted_twice():
    base = made.made_reduction()
    slope = replace(unsure.SLOPE, lengths_seen=False, reason="one thing is unknown")
    text = " ".join(
        texts(printed(replace(base, outcome=replace(base.outcome, slope_uncertainty=slope))))
    )
    assert "disagreement between devices is not counted a second time" in text
    assert "This trial: one thing is unknown." in text


def test_covariance_and_correlation_are_printed():
    text, covariance = _section("us"), made.made_reduction("us").outcome.covariance
    scales = (LONG_TON, FOOT, FOOT, FOOT)
    row = " ".join(
        _minus(f"{c / (s * FOOT):.3e}") for c, s in zip(covariance[1], scales, strict=True)
    )
    assert f"KG [ft] {row}" in text
    ratios = [
        c / math.sqrt(covariance[1][1] * covariance[j][j]) for j, c in enumerate(covariance[1])
    ]
    assert " ".join(["KG", *(_minus(f"{r:.3f}") for r in ratios)]) in text


def test_monte_carlo_table_holds_the_run():
    text, run = _section("metric"), made.made_reduction().simulation
    assert "drawn at random 40 000 times" in text
    assert "seed 104961" in text
    for found, name, unit, decimals in zip(
        run.results,
        ("displacement", "KG", "LCG", "TCG", "GM"),
        ("t", "m", "m", "m", "m"),
        (2, 4, 3, 4, 4),
        strict=True,
    ):
        ends = [
            f"{a:.{decimals}f} to {b:.{decimals}f}" for a, b in (found.symmetric, found.shortest)
        ]
        figures = f"{found.mean:.{decimals}f} {found.u:.{decimals}f} {ends[0]} {ends[1]}"
        assert f"{name} [{unit}] {figures} {significant(found.tolerance, 2)}" in text
    assert "not validated: take the simulated interval" in text


def test_unsettled_run_is_said_to_be_so():
    base = made.made_reduction()
    data = printed(replace(base, simulation=replace(base.simulation, settled=False)))
    assert "before its figures had settled" in " ".join(texts(data))
    assert "before its figures had settled" not in _section("metric")


@pytest.mark.parametrize("show", [METRIC, US])
def test_distribution_of_kg_marks_interval_ends_and_limit(show):
    base = made.made_reduction()
    run, kg, found = base.simulation, base.simulation.results[1], _kg().estimate
    axes = distribution_plot(run, kg, found, KG_LIMIT, show, 487.0).axes[0]
    scale = show.scale("length")
    upright = {line.get_xdata()[0] * scale for line in axes.lines if len(line.get_xdata()) == 2}
    ends = (*kg.symmetric, found.value - found.U, found.value + found.U, KG_LIMIT)
    assert sorted(upright) == pytest.approx(sorted(ends), rel=1e-12)
    # The steps hold every draw but the tails beyond 4.5 u, some 1e-5 of them, and rounding.
    heights, edges, _ = axes.patches[0].get_data()
    area = sum(h * (b - a) for h, a, b in zip(heights, edges[:-1], edges[1:], strict=True))
    assert area == pytest.approx(1.0, abs=1e-3)
    curve = max(axes.lines, key=lambda line: len(line.get_xdata()))
    assert max(curve.get_ydata()) == pytest.approx(
        density(0.0, found.dof) * scale / found.u, rel=1e-4
    )


def test_density_is_that_of_student_and_of_the_normal():
    assert density(0.0, 1.0) == pytest.approx(1.0 / math.pi, rel=1e-12)  # Cauchy
    assert density(1.0, 1.0) == pytest.approx(0.5 / math.pi, rel=1e-12)
    assert density(0.0, None) == pytest.approx(1.0 / math.sqrt(2.0 * math.pi), rel=1e-12)
    # Student's t nears the normal as 1 / dof.
    assert density(0.7, 1e5) == pytest.approx(density(0.7, None), rel=1e-4)


def test_bars_of_the_shares_add_up_and_go_left_of_zero():
    budget = _kg()
    axes = share_plot(budget, main_lines(budget, 12), 487.0).axes[0]
    widths = [bar.get_width() for bar in axes.patches]
    assert sum(widths) == pytest.approx(100.0, abs=1e-9)  # rounding of doubles only
    assert min(widths) == pytest.approx(100.0 * min(x.share for x in budget.lines))
    assert axes.get_xlim()[0] < min(widths) < 0.0
    names = [t.get_text() for t in axes.get_yticklabels()]
    assert names[0] == budget.lines[0].name
    assert names[-1].endswith("further inputs")


@pytest.mark.parametrize(
    ("value", "said"),
    [(0.0, "0"), (5.0, "5.00"), (-0.0099996, "−0.0100"), (12345.0, "12345"), (123456.0, "1.23e+05"), (4.54e-6, "4.54e−06")],
)  # fmt: skip
def test_three_significant_digits(value, said):
    assert significant(value) == said


@pytest.mark.parametrize("show", [METRIC, US])
@pytest.mark.parametrize("quantity", [LENGTH, MASS, MOMENT, VOLUME, DENSITY, FRACTION, ANGLE, None])
def test_sensitivity_times_u_is_the_part_in_printed_units(show, quantity):
    below = unit_of(show, quantity)
    result = Unit(show.unit("reading"), show.scale("reading"))
    u, sensitivity = 0.37, -2.9
    printed_product = (u / below.size) * (sensitivity / result.per(below).size)
    assert printed_product == pytest.approx(u * sensitivity / result.size, rel=1e-12)


def test_names_of_compound_units():
    blank = "\N{NO-BREAK SPACE}"
    mm = unit_of(METRIC, LENGTH)
    assert mm.per(mm).name == ""
    assert mm.per(unit_of(METRIC, MASS)).name == "mm/t"
    assert mm.per(unit_of(METRIC, DENSITY)).name == "mm/(t/m³)"
    assert mm.per(unit_of(METRIC, MOMENT)).name == f"mm/(t{blank}m)"
    assert mm.per(unit_of(METRIC, None)).name == f"mm{blank}t{blank}m"
