"""Trials on a hull that cannot be reduced: told plainly, with exit status 1 and no figure."""

import math
import sys

import pytest
from hull_edits import column, misread, with_keys
from hull_ships import BOX, HIGH_CHINE, PATROL, VEE
from hull_trial import write_hull_trial

from incline import read_trial, reduce, to_json
from incline.cli import main
from incline.errors import FieldDataError
from incline.screen import show, summary

FEW = (0.0, 2.0, 4.0, -2.0, -4.0)
METHODS = ("heeled-hull", "wall-sided", "straight-line")
DRAFT, MASS, READING = r"draft \[m\]", r"mass \[t\]", r"reading \[mm\]"


def told(folder):
    """The defects of a trial that is refused."""
    with pytest.raises(FieldDataError) as refused:
        reduce(read_trial(folder))
    return refused.value.defects


def on_screen(folder, monkeypatch, capsys, command="reduce"):
    """Exit status and what stands on standard output and error."""
    monkeypatch.setattr(sys, "argv", ["incline", command, str(folder)])
    with pytest.raises(SystemExit) as ended:
        main()
    out, err = capsys.readouterr()
    return ended.value.code, out, err


def deeper(folder, by):
    column(folder, "drafts.csv", DRAFT, lambda d: d + by)


SLIPS = {
    # the box is 6 m deep and floats at 3 m
    "deck edge under at the drafts": (
        BOX, lambda f: deeper(f, 3.5), "deck-edge-immersed", "drafts.csv",
        "above the deck edge at the draft readings (mean draft 6.500 m",
    ),
    "hull above the water": (
        BOX, lambda f: column(f, "offsets.csv", r"height \[m\]", lambda z: z + 3.8),
        "waterline-below-hull", "drafts.csv", "lowest point, 3.800 m above baseline",
    ),
    "deck edge under at the largest heels": (
        BOX, lambda f: deeper(f, 2.7), "deck-edge-immersed", "shifts.csv", "at shift 2;",
    ),
    "readings of the other side": (
        PATROL, lambda f: column(f, "readings.csv", READING, lambda r: -r), "sign-all",
        "readings.csv", "no positive GM: stop the test",
    ),
    "readings in cm": (
        PATROL, lambda f: column(f, "readings.csv", READING, lambda r: 10.0 * r), "heel-absurd",
        "readings.csv", "device P1 heels",
    ),
    "weights in another unit": (
        HIGH_CHINE, lambda f: column(f, "weights.csv", MASS, lambda m: 0.1 * m),
        "equilibrium-none", "readings.csv", "do not correct a loll by moving weight to the high side",
    ),
    "hardly any draft": (
        BOX, lambda f: column(f, "drafts.csv", DRAFT, lambda d: 0.1 * d), "equilibrium-none",
        "readings.csv", "check the drafts, the masses of the weights and the readings",
    ),
    "one reading ten times too large": (
        PATROL, lambda f: misread(f, 2, "P2", lambda r: 10.0 * r), "equilibrium-none",
        "readings.csv", "misread reading, shift 2, device P2",
    ),
}  # fmt: skip


@pytest.mark.parametrize("method", METHODS)
@pytest.mark.parametrize("slip", SLIPS)
def test_refused_by_every_method(slip, method, tmp_path):
    """A hull that cannot stand so gives no figure, whatever method is asked for."""
    ship, change, code, file, words = SLIPS[slip]
    write_hull_trial(tmp_path, ship, degrees=FEW, stations=9)
    change(tmp_path)
    with_keys(tmp_path, f'[method]\nheel = "{method}"')
    found = told(tmp_path)
    assert {d.code for d in found} == {code}
    assert {d.where.file for d in found} == {file}
    assert any(words in str(d) for d in found)


@pytest.mark.parametrize("slip", ["deck edge under at the drafts", "weights in another unit"])
@pytest.mark.parametrize("command", ["reduce", "check"])
def test_exit_status_and_no_figure(slip, command, tmp_path, monkeypatch, capsys):
    ship, change, _, file, words = SLIPS[slip]
    write_hull_trial(tmp_path, ship, degrees=FEW, stations=9)
    change(tmp_path)
    status, out, err = on_screen(tmp_path, monkeypatch, capsys, command)
    assert status == 1
    assert file in err
    assert words in err
    assert "Traceback" not in err + out
    assert "LIGHTSHIP" not in out
    assert "nan" not in (out + err).lower().split()


def test_deck_edge_under_at_one_shift_names_that_shift(tmp_path):
    # Freeboard 0.45 m less trim and deflection: 12 m of beam at 4 deg takes 0.42 m, at 3 deg 0.31 m.
    write_hull_trial(tmp_path, BOX, degrees=(0.0, 2.0, 4.0, 0.0, -2.0, -3.0), list_tan=0.0)
    deeper(tmp_path, 2.45)
    (only,) = told(tmp_path)
    assert only.code == "deck-edge-immersed"
    assert "at shift 2;" in str(only)
    rows = (tmp_path / "shifts.csv").read_text(encoding="utf-8").splitlines()
    assert rows[only.where.row - 1].startswith("2,")


def test_ship_that_lolls_at_her_start_is_refused(tmp_path):
    """Moments so small that GM is below zero upright: N = KM t + BM t^3 / 2 rights her beyond.

    At 4 deg BM t^2 / 2 is 10 mm: a GM of -5 mm still asks for a moment to starboard there.
    """
    write_hull_trial(tmp_path, BOX, degrees=FEW, list_tan=0.0, tau=0.0, deflection=0.0)
    truth = 1.3 + 0.5 * 4.0 * math.tan(math.radians(4.0)) ** 2  # m, moment over D t at 4 deg
    column(tmp_path, "weights.csv", MASS, lambda m: m * 0.005 / truth)
    (only,) = told(tmp_path)
    assert only.code == "equilibrium-none"
    assert "no stable equilibrium at shift 0:" in str(only)
    assert "stop the test" in str(only)


def test_offsets_in_millimetres(tmp_path):
    write_hull_trial(tmp_path, PATROL, degrees=FEW)
    for heading in ("x", "half breadth", "height"):
        column(tmp_path, "offsets.csv", rf"{heading} \[m\]", lambda v: 1000.0 * v)
    found = told(tmp_path)
    assert {d.where.column for d in found} == {"x", "half breadth", "height"}
    assert all("did you mean mm" in str(d) for d in found)


@pytest.mark.parametrize("method", METHODS)
@pytest.mark.parametrize("ship", [VEE, HIGH_CHINE], ids=lambda s: s.name)
def test_either_a_figure_or_a_refusal(ship, method, tmp_path):
    """Readings, masses and drafts multiplied: never NaN, and the methods agree on what is refused."""
    outcomes = []
    for n, (file, what, factor) in enumerate(
        (f, w, k)
        for f, w, factors in (
            ("readings.csv", READING, (0.02, 3.0)),
            ("weights.csv", MASS, (0.2, 5.0)),
            ("drafts.csv", DRAFT, (0.3, 1.6)),
        )
        for k in factors
    ):
        folder = tmp_path / str(n)
        write_hull_trial(folder, ship, degrees=FEW, stations=9)
        column(folder, file, what, lambda v, k=factor: k * v)
        with_keys(folder, f'[method]\nheel = "{method}"')
        try:
            result = reduce(read_trial(folder))
        except FieldDataError:
            outcomes.append("refused")
            continue
        to_json(result)  # raises for NaN
        words = (show(result) + summary(result)).lower()
        assert "nan" not in words.replace(",", " ").split()
        assert result.outcome.as_inclined.hull.freeboard > 0.0
        assert result.outcome.heel.gm_fluid > 0.0
        outcomes.append("figure")
    assert set(outcomes) == {"refused", "figure"}
