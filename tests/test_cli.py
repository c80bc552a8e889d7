"""The commands as a user runs them."""

import json
import os
import subprocess
import sys
from pathlib import Path

import pytest
from conftest import DEMO_TRIALS

WORKBOAT = DEMO_TRIALS / "workboat-metric"


def incline(
    *arguments: object, cwd: Path | None = None, **env: str
) -> subprocess.CompletedProcess[str]:
    return subprocess.run(
        [sys.executable, "-m", "incline", *map(str, arguments)],
        capture_output=True, text=True, check=False, cwd=cwd, encoding="utf-8",
        env={**os.environ, "PYTHONPATH": str(DEMO_TRIALS.parent), "PYTHONIOENCODING": "utf-8", **env},
    )  # fmt: skip


@pytest.mark.parametrize(
    "command", [[], ["start"], ["check"], ["reduce"], ["report"], ["sheets"], ["compare"]]
)
def test_help_carries_an_example(command):
    run = incline(*command, "--help")
    assert run.returncode == 0
    assert not command or f"Example: incline {command[0]}" in run.stdout


def test_wrong_usage_exits_2():
    assert incline("reduce").returncode == 2
    assert incline("levitate").returncode == 2
    assert incline("start", "x", "--units", "furlongs").returncode == 2


def test_words_of_options_may_be_in_capitals(tmp_path):
    run = incline("start", "mine", "--units", "Metric", cwd=tmp_path)
    assert run.returncode == 0, run.stderr
    for paper in ("A4", "Letter"):
        run = incline(
            "sheets", "--blank", "--units", "US", "--paper", paper, "-o", paper, cwd=tmp_path
        )
        assert run.returncode == 0, run.stderr


@pytest.mark.parametrize("units", ["metric", "us"])
def test_start_makes_a_trial_that_check_explains(tmp_path, units):
    run = incline("start", "mine", "--units", units, cwd=tmp_path)
    assert run.returncode == 0
    assert (tmp_path / "mine" / "trial.toml").is_file()
    again = incline("start", "mine", cwd=tmp_path)
    assert again.returncode == 1
    assert "not empty" in again.stderr
    blank = incline("check", "mine", cwd=tmp_path)
    assert blank.returncode == 1
    assert "trial.toml, vessel.name" in blank.stderr
    assert "Traceback" not in blank.stderr


def test_check_says_what_was_read():
    run = incline("check", WORKBOAT)
    assert run.returncode == 0
    assert "shifts 9" in run.stdout
    assert "readings 27" in run.stdout


def test_check_prints_every_criterion_in_80_columns():
    run = incline("check", WORKBOAT)
    assert "judged by IMO" in run.stdout
    assert "verify against the current edition" in run.stdout
    assert "NOT RECORDED" in run.stdout
    assert max(map(len, run.stdout.splitlines())) <= 80
    listed = {line.split(" ")[0] for line in run.stdout.splitlines()}
    checks = json.loads(incline("reduce", WORKBOAT, "--json", "-").stdout)["checks"]
    assert {c["id"] for c in checks} <= listed
    assert {c["status"] for c in checks} <= {"pass", "fail", "not recorded", "not applicable"}
    assert {"id", "status", "found", "limit", "unit", "source", "edition", "evidence"} <= checks[
        0
    ].keys()


def _copy(folder, file, old, new):
    folder.mkdir()
    for source in WORKBOAT.iterdir():
        text = source.read_text(encoding="utf-8")
        if source.name == file:
            assert old in text
            text = text.replace(old, new)
        (folder / source.name).write_text(text, encoding="utf-8")
    return folder


def test_check_exits_3_when_a_criterion_is_not_met(tmp_path):
    folder = _copy(tmp_path / "t", "trial.toml", 'set = "IMO"', 'set = "US"')
    run = incline("check", folder)
    assert run.returncode == 3
    assert "NOT MET" in run.stdout
    assert "deflection-15" in run.stdout.split("NOT MET")[1]
    assert run.stderr == ""


def test_check_of_a_trial_that_cannot_be_reduced_exits_1(tmp_path):
    folder = _copy(tmp_path / "t", "weights.csv", "4.600", "4.600")
    rows = (folder / "shifts.csv").read_text(encoding="utf-8")
    flip = rows.replace(",-", ",+").replace(",3.", ",-3.").replace(",+", ",")
    (folder / "shifts.csv").write_text(flip, encoding="utf-8")
    run = incline("check", folder)
    assert run.returncode == 1
    assert "every device heels away from the moment" in run.stderr
    assert "Traceback" not in run.stderr


def test_reduce_prints_tables_and_writes_json(tmp_path):
    run = incline("reduce", WORKBOAT, "--json", "out.json", cwd=tmp_path)
    assert run.returncode == 0
    assert "LIGHTSHIP" in run.stdout
    assert run.stderr == ""
    written = json.loads((tmp_path / "out.json").read_text(encoding="utf-8"))
    screen = incline("reduce", WORKBOAT, "--json", "-")
    assert json.loads(screen.stdout) == written
    assert incline("reduce", WORKBOAT, "--json", "out.json", cwd=tmp_path).returncode == 1
    assert (
        incline("reduce", WORKBOAT, "--json", "out.json", "--force", cwd=tmp_path).returncode == 0
    )


def test_json_keys_are_the_contract():
    result = json.loads(incline("reduce", WORKBOAT, "--json", "-").stdout)
    assert result["format"] == 1
    keys = {
        "program": {"name", "version"},
        "trial": {"name", "date", "digest"},
        "as_inclined": {
            "density_t_m3", "draft_ap_m", "draft_fp_m", "trim_m", "deflection_m", "list_deg",
            "volume_m3", "displacement_t", "lcb_m", "kb_m", "bmt_m", "kmt_m", "vcg_m", "lcg_m", "tcg_m",
        },
        "heel": {
            "method", "gm_fluid_m", "slope_per_tm", "u_gm_fluid_m", "degrees_of_freedom",
            "residual_sd", "devices", "max_heel_deg_port", "max_heel_deg_starboard", "other_methods",
        },
        "free_surface": {"moment_tm", "correction_m"},
        "ledger": {"deduct_t", "add_t", "relocate_t", "balance_residual_tm"},
        "lightship": {"displacement_t", "vcg_m", "lcg_m", "tcg_m"},
    }  # fmt: skip
    for section, names in keys.items():
        assert names <= result[section].keys()
    for estimate in result["lightship"].values():
        assert {"value", "u", "U", "k", "degrees_of_freedom"} <= estimate.keys()
    assert [len(row) for row in result["covariance"]] == [4] * 4
    assert {"checks", "findings", "excluded"} <= result.keys()
    assert len(result["trial"]["digest"]) == 64


def test_report_takes_its_name_from_vessel_and_date_and_overwrites_nothing(tmp_path):
    run = incline("report", WORKBOAT, cwd=tmp_path)
    assert run.returncode == 0, run.stderr
    made = tmp_path / "kestrel-sound-2026-03-14.pdf"
    assert made.read_bytes().startswith(b"%PDF")
    made.write_bytes(b"mine")
    again = incline("report", WORKBOAT, cwd=tmp_path)
    assert again.returncode == 1
    assert "--force" in again.stderr
    assert made.read_bytes() == b"mine"
    assert incline("report", WORKBOAT, "--force", cwd=tmp_path).returncode == 0
    assert made.read_bytes().startswith(b"%PDF")


def test_report_twice_is_the_same_to_the_byte(tmp_path):
    for name in ("a.pdf", "b.pdf"):
        run = incline("report", WORKBOAT, "-o", name, cwd=tmp_path, SOURCE_DATE_EPOCH="1780000000")
        assert run.returncode == 0, run.stderr
    assert (tmp_path / "a.pdf").read_bytes() == (tmp_path / "b.pdf").read_bytes()


def test_nothing_is_written_when_the_trial_is_bad(tmp_path):
    run = incline("report", tmp_path / "nowhere", "-o", tmp_path / "r.pdf")
    assert run.returncode == 1
    assert "Traceback" not in run.stderr
    assert not (tmp_path / "r.pdf").exists()


def test_a_place_that_cannot_be_written_is_said_in_one_line(tmp_path):
    run = incline("report", WORKBOAT, "-o", tmp_path / "no" / "such" / "r.pdf")
    assert run.returncode == 1
    assert run.stderr.startswith("incline: cannot write")


def test_a_terminal_that_knows_no_greek_gets_an_answer(tmp_path):
    folder = tmp_path / "t"
    folder.mkdir()
    for file in WORKBOAT.iterdir():
        text = file.read_text(encoding="utf-8").replace("Kestrel Sound", "Αλκυών")
        (folder / file.name).write_text(text, encoding="utf-8")
    run = incline("reduce", folder, PYTHONIOENCODING="ascii")
    assert run.returncode == 0, run.stderr
