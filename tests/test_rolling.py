"""GM by the rolling period: worked by hand, its uncertainty, and what the runs must say."""

from __future__ import annotations

import json
import math
from dataclasses import replace
from typing import TYPE_CHECKING

import pytest
from small_trial import SMALL, changed, write

from incline import read_trial, reduce, to_json
from incline.errors import Where
from incline.record import RollingRun
from incline.rolling import FACTORS, SCATTER
from incline.screen import show

if TYPE_CHECKING:
    from pathlib import Path

    from incline.record import Trial
    from incline.result import Reduction

BEAM, GM = 12.0, 1.3
"""Of the small trial's barge; its readings are those of GM 1.3 m, to 1 % and better."""


@pytest.fixture
def barge(tmp_path: Path) -> Trial:
    return read_trial(write(tmp_path, SMALL))


def rolled(trial: Trial, *runs: tuple[int, float], condition: str = "empty") -> Reduction:
    made = tuple(
        RollingRun(run=str(n), rolls=rolls, time=time, where=Where("rolls.csv", n + 1))
        for n, (rolls, time) in enumerate(runs, start=1)
    )
    settings = replace(trial.settings, roll_condition=condition)
    return reduce(replace(trial, rolls=made, settings=settings))


def said(reduction: Reduction, words: str) -> bool:
    return any(words in remark for remark in reduction.remarks)


def test_published_factors() -> None:
    """IMO resolution A.749(18), annex 3: f and its scatter, for ships of up to 70 m."""
    assert dict(FACTORS) == {"empty": 0.88, "20 %": 0.78, "10 %": 0.75, "5 %": 0.73}
    assert SCATTER == 0.05


def test_reading(barge: Trial) -> None:
    assert barge.settings.roll_condition == "empty"
    assert [(r.run, r.rolls, r.time) for r in barge.rolls] == [
        ("1", 5, 46.3), ("2", 5, 46.5), ("3", 6, 55.5),
    ]  # fmt: skip


def test_minutes_and_decimal_commas(tmp_path: Path) -> None:
    files = {**SMALL, "rolls.csv": "run;rolls;time [min]\n1;5;0,75\n"}
    (run,) = read_trial(write(tmp_path, files)).rolls
    assert run.time == 45.0  # 0.75 min, exact in binary


@pytest.mark.parametrize(
    ("condition", "gm"), [("empty", 1.1151), ("20 %", 0.8761), ("10 %", 0.8100), ("5 %", 0.7674)]
)
def test_by_hand(barge: Trial, condition: str, gm: float) -> None:
    """An example of our own: B = 12 m, T = 10 s, so B/T = 1.2 and GM = (1.2 f)^2.

    1.2 x 0.88 = 1.056, squared 1.1151; 0.936 -> 0.8761; 0.9 -> 0.81; 0.876 -> 0.7674.
    """
    found = rolled(barge, (5, 50.0), (5, 50.0), (5, 50.0), condition=condition).rolling
    assert found is not None
    assert found.period == 10.0
    assert found.gm == pytest.approx(gm, abs=5e-5)  # half the last digit worked by hand
    # No scatter between the runs: what is left is twice the relative scatter of f.
    assert found.u_gm / found.gm == pytest.approx(2.0 * 0.05 / FACTORS[condition], rel=1e-12)


def test_scatter_of_the_runs_by_hand(barge: Trial) -> None:
    """Periods 9, 10 and 11 s: standard deviation 1 s, of their mean 1/sqrt(3) s."""
    found = rolled(barge, (5, 45.0), (6, 60.0), (8, 88.0)).rolling
    assert found is not None
    assert found.period == pytest.approx(10.0, rel=1e-15)
    share = 2.0 * math.sqrt((0.05 / 0.88) ** 2 + (1.0 / math.sqrt(3.0) / 10.0) ** 2)
    assert found.u_gm / found.gm == pytest.approx(share, rel=1e-12)


def test_runs_of_the_barge_agree_and_say_nothing(barge: Trial) -> None:
    reduction = reduce(barge)
    found = reduction.rolling
    assert found is not None
    # (46.3/5 + 46.5/5 + 55.5/6) / 3 = (9.26 + 9.30 + 9.25) / 3 = 9.27 s
    assert found.period == pytest.approx(9.27, rel=1e-12)
    assert found.gm == pytest.approx((0.88 * 12.0 / 9.27) ** 2, rel=1e-12)
    assert found.agrees
    assert found.note == ""
    assert not said(reduction, "oll")


def test_agreement_ends_at_two_standard_uncertainties(barge: Trial) -> None:
    """|g - m| = 2 sqrt((c g)^2 + u^2) has two roots g: the edges, with c = 2 x 0.05 / 0.88."""
    plain = reduce(replace(barge, rolls=())).outcome
    measured = next(b.estimate for b in plain.budgets if b.key == "gm_fluid")
    assert measured.value is not None
    assert measured.u is not None
    m, u, a = measured.value, measured.u, (2.0 * 2.0 * 0.05 / 0.88) ** 2
    root = math.sqrt(m**2 - (1.0 - a) * (m**2 - 4.0 * u**2))

    def agrees(gm: float) -> bool:
        found = rolled(barge, *[(5, 5.0 * 0.88 * BEAM / math.sqrt(gm))] * 3).rolling
        assert found is not None
        return found.agrees

    for edge, inward in (((m - root) / (1.0 - a), 1.001), ((m + root) / (1.0 - a), 0.999)):
        assert agrees(edge * inward)
        assert not agrees(edge / inward)


def test_a_doubled_weight_is_refuted_and_changes_no_result(barge: Trial) -> None:
    heavy = replace(barge, weights=tuple(replace(w, mass=2.0 * w.mass) for w in barge.weights))
    with_runs, without = reduce(heavy), reduce(replace(heavy, rolls=()))
    assert with_runs.rolling is not None
    assert not with_runs.rolling.agrees
    assert said(with_runs, "look for a gross error")
    assert with_runs.outcome.lightship == without.outcome.lightship
    assert with_runs.outcome.budgets == without.outcome.budgets
    assert without.rolling is None


def test_good_runs_never_improve_kg(barge: Trial) -> None:
    exact = 5.0 * 0.88 * BEAM / math.sqrt(GM)
    assert (
        rolled(barge, *[(5, exact)] * 20).outcome.lightship
        == reduce(replace(barge, rolls=())).outcome.lightship
    )


@pytest.mark.parametrize(
    ("runs", "lpp", "note"),
    [
        ([(5, 46.3)], 60.0, "1 run, fewer than 3; the scatter between runs cannot be seen."),
        ([(5, 46.3), (5, 46.4)], 60.0, "2 runs, fewer than 3."),
        ([(5, 46.3), (4, 37.0), (3, 27.8)], 60.0, "Fewer than 5 rolls in run 2, 3."),
        ([(5, 46.3)] * 3, 70.0, ""),
        ([(5, 46.3)] * 3, 70.1, "The factor is for ships of up to 70 m; this one is longer."),
    ],
)
def test_weak_runs_are_noted(
    barge: Trial, runs: list[tuple[int, float]], lpp: float, note: str
) -> None:
    reduction = rolled(replace(barge, vessel=replace(barge.vessel, lpp=lpp)), *runs)
    assert reduction.rolling is not None
    assert reduction.rolling.note == note
    assert said(reduction, f"Rolling period: {note}") is bool(note)


def test_a_condition_without_runs_is_remarked(tmp_path: Path) -> None:
    reduction = reduce(read_trial(write(tmp_path, {**SMALL, "rolls.csv": "run,rolls,time [s]\n"})))
    assert reduction.rolling is None
    assert said(reduction, "rolls.csv has no runs")


def test_neither_condition_nor_runs_is_nothing(tmp_path: Path) -> None:
    files = changed("trial.toml", '[rolling]\ncondition = "empty"\n', "")
    del files["rolls.csv"]
    reduction = reduce(read_trial(write(tmp_path, files)))
    assert reduction.rolling is None
    assert not said(reduction, "oll")
    assert json.loads(to_json(reduction))["rolling"] is None
    assert "rolling" not in show(reduction)


def test_json_and_screen(barge: Trial) -> None:
    reduction = reduce(barge)
    found = reduction.rolling
    assert found is not None
    assert json.loads(to_json(reduction))["rolling"] == {
        "period_s": found.period, "factor": 0.88, "gm_m": found.gm, "u_gm_m": found.u_gm,
        "agrees": True, "note": "",
    }  # fmt: skip
    (line,) = (x for x in show(reduction).splitlines() if "by rolling period" in x)
    assert line.split()[4:6] == ["1.30", "m"]
    assert "a check only: agrees" in line
