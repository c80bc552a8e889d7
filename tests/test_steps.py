"""The calculation on paper, recomputed from the numbers on the paper."""

import datetime
import math
import re
from dataclasses import replace
from decimal import Decimal
from functools import cache
from pathlib import Path

import pytest
from hypothesis import given
from hypothesis import strategies as st
from printed_steps import follows, lines_of, rows_of, section, steps_of, value_of
from read_report import printed
from small_trial import SMALL, changed, write

from incline import read_trial, reduce
from incline.report import steps_page
from incline.report.arithmetic import Power, Sum, Value
from incline.report.digits import Relation, settle
from incline.report.document import Sheet, heading, render
from incline.report.fonts import register_fonts
from incline.report.show import Show
from incline.report.steps import calculation_of

DEMOS = Path(__file__).resolve().parent.parent / "demo_trials"
FOLLOWING = "(?:With the excluded readings counted|Uncertainty)"
NAMES = ("workboat-metric", "supply-vessel-us", "disturbed-metric")


@cache
def reduction(name):
    return reduce(read_trial(DEMOS / name))


@cache
def paper(name):
    return lines_of(printed(reduction(name)))


@cache
def calculation(name):
    return section(paper(name), "Calculation, step by step", FOLLOWING)


def sheet_of(found):
    return Sheet(found, Show.of(found), datetime.date(2026, 5, 1), "0")


def settled(found):
    return calculation_of(sheet_of(found))


@pytest.mark.parametrize("name", NAMES)
def test_every_step_follows_from_the_numbers_on_the_page(name):
    steps = steps_of(calculation(name))
    assert [s.number for s in steps] == list(range(1, len(steps) + 1))
    assert len(steps) > 30
    worked = [s for s in steps if s.put_in is not None and not s.put_in.startswith("sum over")]
    assert len(worked) > 25
    assert [s for s in worked if not follows(value_of(s.put_in), s.result)] == []


@pytest.mark.parametrize("name", NAMES)
def test_waterline_is_the_sum_of_drafts_times_factors(name):
    lines = calculation(name)
    rows = rows_of(lines, "Drafts at the marks", 7)
    assert len(rows) == len(reduction(name).trial.drafts)
    steps = steps_of(lines)[:4]
    assert [s.said.split(" = ")[0].split()[-1] for s in steps] == ["Tm", "τ", "d", "λ"]
    for column, step in enumerate(steps, start=3):
        total = sum(value_of(row[2]) * value_of(row[column]) for row in rows)
        assert follows(total, step.result)


@pytest.mark.parametrize("name", NAMES)
def test_factors_are_those_of_least_squares(name):
    """They give back a waterline put into the drafts: 1, x, the parabola and y are reproduced."""
    rows = [
        [float(value_of(c)) for c in r]
        for r in rows_of(calculation(name), "Drafts at the marks", 7)
    ]
    scale = reduction(name).trial.vessel.lpp / (0.3048 if "us" in name else 1.0)
    shapes = (
        lambda x, y: 1.0,  # noqa: ARG005
        lambda x, y: scale / 2.0 - x,  # noqa: ARG005
        lambda x, y: 1.0 - (2.0 * x / scale - 1.0) ** 2,  # noqa: ARG005
        lambda x, y: y,  # noqa: ARG005
    )
    for j, shape in enumerate(shapes):
        for column in range(4):
            got = sum(row[3 + column] * shape(row[0], row[1]) for row in rows)
            # Factors have six decimals or more, arms up to 142 ft, ten rows.
            assert got == pytest.approx(float(j == column), abs=1e-3)


def rows_title(lines, device):
    return next(line for line in lines if line.startswith(f"{device}: t ="))


def devices_of(name):
    """Rows of each device's table, its name with them."""
    lines = calculation(name)
    for device in reduction(name).outcome.heel.devices:
        yield device.id, lines, rows_of(lines, f"{device.id}: t =", 6)


@pytest.mark.parametrize("name", NAMES)
def test_tangents_products_and_sums_follow_from_their_rows(name):
    per_foot = 12 if "us" in name else 1000
    for device, lines, rows in devices_of(name):
        body, at = rows[:9], lines.index("means; sums", lines.index(rows_title(lines, device)))
        assert len(body) == 9
        last = ["", *lines[at : at + 5]]
        title = rows_title(lines, device)
        length = value_of(re.search(r"l = ([\d.]+)", title)[1])
        mean_t, mean_m = value_of(last[1 + 1]), value_of(last[1 + 2])
        for _, r, t, m, product, square in body:
            assert follows(value_of(r) / (per_foot * length), t)
            assert follows((value_of(m) - mean_m) * (value_of(t) - mean_t), product)
            assert follows((value_of(m) - mean_m) ** 2, square)
        for column, total in ((4, last[4]), (5, last[5])):
            assert follows(sum(value_of(row[column]) for row in body), total)
        assert follows(sum(value_of(row[2]) for row in body) / 9, last[2])
        assert follows(sum(value_of(row[3]) for row in body) / 9, last[3])


@pytest.mark.parametrize("name", NAMES)
def test_moments_follow_from_masses_and_travels(name):
    lines = calculation(name)
    at = lines.index("Moments of the test weights") + 1 + 7
    text = " ".join(
        lines[at : lines.index("Tangents of heel, and their products with the moments")]
    )
    weights = {w.id for w in reduction(name).trial.weights}
    number = r"(−?\d+\.\d+)"
    rows = re.findall(rf"(\S+) {number} {number} {number} {number}(?: {number})?", text)
    moments, running = [], Decimal(0)
    for weight, mass, start, end, product, total in rows:
        assert weight in weights
        assert follows(value_of(mass) * (value_of(end) - value_of(start)), product)
        running += value_of(product)
        if total:
            assert follows(running, total)
            moments.append(total)
            running = Decimal(0)
    fitted = {p.moment for p in reduction(name).outcome.heel.points if abs(p.moment) > 1e-9}
    assert len(set(moments)) == len({round(m, 3) for m in fitted})


@pytest.mark.parametrize("name", NAMES)
def test_ledger_moments_add_up_and_give_lightship(name):
    text = " ".join(
        section(paper(name), "From as inclined to lightship", "Calculation, step by step")
    )
    number = r"(−?\d+\.\d+)"
    travel = rf"\(({number[1:-1]})\) {number} → {number} {number} → {number} {number} → {number} {number} {number} {number}"
    lines = {"deduct": [], "add": []}
    parts = re.split(
        r"Deduct: [^−\d]*|Add: aboard?|Add: part of lightship, not yet aboard|Relocate: [^(]*", text
    )
    whole, deduct, add, relocate = parts[0], parts[1], parts[2], text.split("final place")[1]
    sums = []
    for key, part in (("deduct", deduct), ("add", add)):
        items, total = part.rsplit(" sum ", 1) if " sum " in part else (part, "")
        lines[key] = re.findall(
            rf"{number} {number} {number} {number} {number} {number} {number}", items
        )
        for w, x, y, z, mx, my, mz in lines[key]:
            for arm, moment in ((x, mx), (y, my), (z, mz)):
                assert follows(value_of(w) * value_of(arm), moment)
        if lines[key]:
            totals = re.findall(number, total)[:4]
            for column, found in zip((0, 4, 5, 6), totals, strict=True):
                assert follows(sum(value_of(line[column]) for line in lines[key]), found)
            sums.append(totals)
    for row in re.findall(travel, relocate):
        w, *ends, mx, my, mz = row
        for i, moment in enumerate((mx, my, mz)):
            assert follows(
                value_of(w) * (value_of(ends[2 * i + 1]) - value_of(ends[2 * i])), moment
            )
    assert len(lines["deduct"]) + len(lines["add"]) >= 8
    start, end = re.findall(number, whole)[:7], re.findall(number, text.split("Lightship ")[1])[:7]
    assert follows(sum((value_of(s[0]) for s in sums), value_of(start[0])), end[0])
    for arm in (1, 2, 3):
        assert follows(value_of(end[3 + arm]) / value_of(end[0]), end[arm])


@pytest.mark.parametrize("name", NAMES)
def test_a_value_is_printed_alike_wherever_it_stands(name):
    steps = settled(reduction(name)).steps()
    known = {}
    for step in steps:
        symbol = step.formula.split(" = ")[0]
        known.setdefault(symbol, set()).add(step.result)
    carried = [
        (step.number, symbol)
        for step in steps
        for symbol, text in step.values.items()
        if symbol in known
        and text not in known[symbol]
        and symbol not in {"FSM", "w", "m", "ρ", "l", "b"}
    ]
    assert carried == []


@pytest.mark.parametrize("name", NAMES)
def test_last_steps_are_the_results_of_the_first_page(name):
    steps, front = steps_of(calculation(name)), " ".join(paper(name)[:60])
    for symbol in ("LCGL", "TCGL", "KGL"):
        step = next(s for s in steps if f" {symbol} = " in s.said)
        assert step.result.split()[0] in front


def test_the_page_says_that_its_arithmetic_holds():
    said = "was worked out again from the numbers as printed and agrees"
    for name in NAMES:
        assert said in " ".join(calculation(name))


def test_a_result_that_does_not_follow_is_named():
    good = reduction("workboat-metric")
    state = replace(good.outcome.as_inclined, vcg=good.outcome.as_inclined.vcg + 0.01)
    wrong = replace(good, outcome=replace(good.outcome, as_inclined=state))
    said = " ".join(lines_of(printed(wrong)))
    step = next(s for s in settled(wrong).steps() if s.name == "KG, solid")
    assert not step.follows
    assert re.search(
        rf"do not rely on this report before the cause is found: [\d, ]*\b{step.number}\b", said
    )


HARD = {
    "angles, changes, fitted and averaged swings": SMALL,
    "weights that rise": changed("shifts.csv", "2,09:20,A,-4,29.5,5.5", "2,09:20,A,-4,29.5,6.9"),
    "resolutions stated": {
        **SMALL,
        "trial.toml": SMALL["trial.toml"]
        .replace('length = "4 m"', 'length = "4 m"\nresolution = "1 mm"')
        .replace('kind = "inclinometer"', 'kind = "inclinometer"\nresolution = "0.01 deg"'),
    },
    "moments given": {
        **{k: v for k, v in SMALL.items() if k != "weights.csv"},
        "shifts.csv": "shift,time,moment [t m]\n0,9:00,0\n1,9:10,80\n2,9:20,0\n3,9:30,-80\n",
    },
    "feet and long tons": changed("trial.toml", 'units = "metric"', 'units = "us"'),
    "extreme volume": changed("trial.toml", 'volume = "moulded"\nallowance = "0 %"', 'volume = "extreme"'),
}  # fmt: skip


@pytest.mark.parametrize("case", HARD)
def test_steps_follow_for_every_kind_of_record(case, tmp_path):
    found = reduce(read_trial(write(tmp_path / "t", HARD[case])))
    sheet = sheet_of(found)
    whole = calculation_of(sheet)
    assert whole.sound
    register_fonts()
    flow = [*heading("1", "Calculation"), *steps_page.calculation(sheet)]
    steps = steps_of(lines_of(render(sheet, flow)))
    assert len(steps) == len(whole.steps())
    for step in steps:
        if step.put_in is not None and not step.put_in.startswith(("sum over", "with all")):
            assert follows(value_of(step.put_in), step.result), step


amounts = st.floats(0.001, 5000.0).map(lambda v: float(f"{v:.12g}"))


@given(st.lists(amounts, min_size=5, max_size=5))
def test_settled_digits_make_every_result_follow(seen):
    """A chain like the report's: quotients, differences of near values, and a long sum."""
    a, b, c, d, e = (Value(v, name) for v, name in zip(seen, "abcde", strict=True))
    ratio = Value(seen[0] / seen[1], "ratio", least=5)
    near = Value(seen[2] + seen[0] / seen[1] - seen[3], "near")
    square = Value((seen[2] + seen[0] / seen[1] - seen[3]) * seen[4] ** 2, "square", least=2)
    long = Value(math.fsum(v * (i + 1) for i, v in enumerate(seen)), "long", least=1)
    relations = [
        Relation(ratio, a / b),
        Relation(near, c + ratio - d),
        Relation(square, near * Power(e)),
        Relation(long, Sum(tuple(v * (i + 1) for i, v in enumerate((a, b, c, d, e))), "Σ")),
    ]
    digits = settle(relations)
    # A number of 1e7 with twelve decimals is at the end of a double: results need not go there.
    if max(digits.values()) < 12:
        assert all(r.follows(digits) for r in relations)
    assert digits["long"] >= 1
    assert digits["ratio"] >= 5


def test_digits_are_raised_only_where_a_result_needs_them():
    """2.0 m x 3.0 m = 6.0 m2 needs no more; 1/3 + 1/3 = 0.667 needs more than 0.333 + 0.333."""
    whole = Relation(
        Value(6.0, "area", least=1), Value(2.0, "a", least=1) * Value(3.0, "b", least=1)
    )
    assert settle([whole]) == {"area": 1, "a": 1, "b": 1}
    third = Value(1.0 / 3.0, "third")
    assert settle([Relation(Value(2.0 / 3.0, "two"), third + third)]) == {"two": 3, "third": 4}


def test_a_five_rounds_away_from_zero_as_by_hand():
    for amount, shown in ((48.15, "48.2"), (-48.15, "−48.2"), (0.0, "0.0"), (-0.01, "0.0")):
        assert Value(amount, "v", least=1).bare({"v": 1}) == shown
