"""The command hydrostatics as a user runs it: tables, options, files, what it refuses."""

import csv
import re
import shutil
import sys

import numpy as np
import pytest
from conftest import DEMO_TRIALS
from hull_cases import ship
from scipy.constants import foot, long_ton
from small_trial import HULL, changed, write

from incline import read_offsets, read_trial
from incline import reduce as work_out
from incline.cli import main
from incline.hull import Hull, Integrated
from incline.hydrostatics import Curves

CHINE = DEMO_TRIALS / "chine-metric"
BARGE = ship("0 0:0 0 / 6 0 / 6 5", "1 30:0 0 / 6 0 / 6 5", "2 60:0 0 / 6 0 / 6 5")
"""A box 60 x 12 x 5 m by its offsets."""


@pytest.fixture
def incline(capsys, monkeypatch):
    """The command run in this process: exit status, standard output, standard error."""

    def run(*arguments):
        monkeypatch.setattr(sys, "argv", ["incline", *map(str, arguments)])
        with pytest.raises(SystemExit) as left:
            main()
        found = capsys.readouterr()
        return left.value.code or 0, found.out, found.err

    return run


def table_of(text):
    """Headings, units and figures of the tables on the screen, one list of rows for each trim."""
    blocks = text.split("\nTrim ")[1:]
    found = []
    for block in blocks:
        lines = block.split("\n\n")[0].splitlines()
        figures = [[float(v) for v in line.split()] for line in lines[3:]]
        found.append((float(lines[0].split()[0]), lines[1].split(), lines[2].split(), figures))
    return found


@pytest.fixture
def barge(tmp_path):
    return write(tmp_path / "barge", BARGE)


def test_box_on_the_screen(incline, barge):
    # Box 60 x 12 m: volume 720 T, KB T/2, BM 12/T, TPC 720 x 1.025 / 100, BM_L 300/T and MCT
    # = D BM_L / (100 L) = 720 x 1.025 x 300 / 6000 at every draft.
    status, out, err = incline("hydrostatics", barge, "--from", "2 m", "--to", "4 m", "--step", "50 cm")  # fmt: skip
    assert (status, err) == (0, "")
    ((trim, heads, units, figures),) = table_of(out)
    assert heads == ["draft", "volume", "displ.", "LCB", "KB", "BM", "KM", "LCF", "TPC", "MCT"]
    assert units == ["m", "m3", "t", "m", "m", "m", "m", "m", "t/cm", "t", "m/cm"]
    assert (trim, len(figures)) == (0.0, 5)
    for t, *rest in figures:
        exact = (
            720.0 * t,
            738.0 * t,
            30.0,
            t / 2.0,
            12.0 / t,
            t / 2.0 + 12.0 / t,
            30.0,
            7.38,
            36.9,
        )
        assert rest == pytest.approx(exact, abs=5.1e-3 if rest[0] > 1e4 else 5.1e-4)
    assert max(map(len, out.splitlines())) <= 80


def test_trims_heel_and_deflection(incline, barge):
    # At 3 m: LCB goes aft by L^2 tau / (12 T), B rises by L^2 tau^2 / (24 T); at 10 degrees
    # KN = sin (KM + BM tan^2 / 2); two thirds of the deflection count in the volume.
    at = ("--from", "3 m", "--to", "3.5 m", "--step", "0.5 m")
    _, out, _ = incline("hydrostatics", barge, *at, "--trim", "0.6 m", "--trim", "-0.3 m", "--trim", "0.6 m")  # fmt: skip
    tables = table_of(out)
    assert [t[0] for t in tables] == [-0.3, 0.6]
    for trim, _, _, figures in tables:
        tau = trim / 60.0
        assert figures[0][3:5] == pytest.approx([30.0 - 100.0 * tau, 1.5 + 50.0 * tau**2], abs=5.1e-4)  # fmt: skip
    _, out, _ = incline("hydrostatics", barge, *at, "--heel", "10", "--deflection", "120 mm")
    ((_, heads, units, figures),) = table_of(out)
    assert (heads[-2:], units[-2:]) == (["TCB", "KN"], ["m", "m"])
    assert figures[0][1] == pytest.approx(720.0 * 3.08, abs=5.1e-3)
    t, area = np.tan(np.radians(10.0)), 720.0
    # KB of the bent waterline: 1/2 of the mean of (3 + d)^2, d up to 0.12 m in a parabola
    kb = area * (9.0 + 2.0 * 3.0 * 0.08 + 8.0 / 15.0 * 0.12**2) / (2.0 * area * 3.08)
    bm = 8640.0 / (area * 3.08)
    kn = np.sin(np.radians(10.0)) * (kb + bm + 0.5 * bm * t * t)
    assert figures[0][-1] == pytest.approx(kn, abs=5.1e-5)
    assert figures[0][-2] == pytest.approx(bm * t, abs=5.1e-4)
    assert "Heeled 10.000 deg to starboard, deflection 120.0 mm (positive sagging)" in out.replace("\n", " ")  # fmt: skip


def test_allowance_and_density_count_in_the_displacement_alone(incline, tmp_path):
    folder = write(tmp_path / "t", HULL)  # moulded, allowance 0.5 %, two skegs under the bottom
    _, out, _ = incline("hydrostatics", folder, "--from", "3 m", "--to", "4 m", "--step", "1 m", "--density", "1.010 t/m3")  # fmt: skip
    ((_, _, _, figures),) = table_of(out)
    skegs = (
        2.0 * 0.5 * 1.6 * 4.0
    )  # 0.5 m x 1 m times p^2, p(s) = 1 + s/2 - s^2/2 through three stations
    assert figures[0][1] == pytest.approx(2160.0 + skegs, abs=5.1e-3)
    assert figures[0][2] == pytest.approx((2160.0 + skegs) * 1.010 * 1.005, abs=5.1e-3)
    assert "moulded, displacement with 0.5 % for shell and appendages" in out.replace("\n", " ")


def test_us_units(incline, tmp_path):
    folder = write(tmp_path / "t", changed("trial.toml", 'units = "metric"', 'units = "us"', BARGE))
    status, out, _ = incline("hydrostatics", folder, "--from", "3 m", "--to", "3.5 m", "--step", "0.5 m")  # fmt: skip
    assert status == 0
    ((_, heads, units, figures),) = table_of(out)
    assert units == ["ft", "ft3", "LT", "ft", "ft", "ft", "ft", "ft", "LT/in", "LT", "ft/in"]
    assert heads[-2] == "TPI"
    inch, lt = foot / 12.0, long_ton / 1000.0
    expected = [
        3.0 / foot, 2160.0 / foot**3, 2214.0 / lt, 30.0 / foot, 1.5 / foot, 4.0 / foot,
        5.5 / foot, 30.0 / foot, 738.0 * inch / lt, 2214.0 * 100.0 / 60.0 * inch / lt / foot,
    ]  # fmt: skip
    assert figures[0] == pytest.approx(expected, abs=0.051, rel=1e-4)


def test_from_amidships(incline, tmp_path):
    text = BARGE["trial.toml"].replace("after perpendicular", "amidships").replace("20 m", "-10 m")
    files = {**BARGE, "trial.toml": text}
    for old, new in (("0,0,", "0,-30,"), ("1,30,", "1,0,"), ("2,60,", "2,30,")):
        files["offsets.csv"] = re.sub(rf"^{old}", new, files["offsets.csv"], flags=re.MULTILINE)
    folder = write(tmp_path / "mid", files)
    at = ("--from", "3 m", "--to", "3.5 m", "--step", "0.5 m", "--trim", "0.6 m")
    _, out, _ = incline("hydrostatics", folder, *at, "--csv", tmp_path / "mid.csv")
    ((_, _, _, figures),) = table_of(out)
    assert "forward of amidships" in out.replace("\n", " ")
    assert (figures[0][3], figures[0][7]) == pytest.approx((-1.0, 0.0), abs=5.1e-4)
    with (tmp_path / "mid.csv").open(encoding="utf-8", newline="") as file:
        first = next(csv.DictReader(file))
    assert float(first["lcb [m]"]) == pytest.approx(-1.0, abs=5.1e-6)
    assert float(first["lcf [m]"]) == pytest.approx(0.0, abs=5.1e-6)


@pytest.mark.parametrize(
    "folder, options, top",
    [
        ("barge", (), 5.0),
        ("barge", ("--trim", "0.5 m", "--trim", "-0.3 m"), 4.75),
        ("barge", ("--heel", "10"), 5.0 - 6.0 * np.tan(np.radians(10.0))),
        ("barge", ("--deflection", "0.2 m"), 4.8),
        ("chine", (), 3.0),
    ],
)
def test_drafts_without_options_stay_between_keel_and_deck(incline, barge, folder, options, top):
    status, out, _ = incline("hydrostatics", barge if folder == "barge" else CHINE, *options)
    assert status == 0
    for _, _, _, figures in table_of(out):
        drafts = [row[0] for row in figures]
        assert 0.0 < drafts[0] < 0.1 * top
        assert 0.9 * top < drafts[-1] <= top
        assert 11 <= len(drafts) <= 25
        assert np.diff(drafts) == pytest.approx(drafts[1] - drafts[0], abs=1e-9)


# --- the table as a file ---------------------------------------------------------------------------


@pytest.fixture
def both(incline, tmp_path):
    """The demo trial with offsets and the table made from them, every 2 cm at three trims."""
    folder = tmp_path / "both"
    shutil.copytree(CHINE, folder)
    toml = folder / "trial.toml"
    text = toml.read_text(encoding="utf-8")
    part = '[hydrostatics]\nvolume = "moulded"\nallowance = "0.5 %"\n\n[offsets]'
    toml.write_text(text.replace("[offsets]", part), encoding="utf-8")
    trims = [v for t in (-0.1, 0.0, 0.1, 0.2) for v in ("--trim", f"{t} m")]
    status, out, err = incline(
        "hydrostatics", folder, "--from", "0.8 m", "--to", "1.5 m", "--step", "2 cm", *trims,
        "--csv", folder / "hydrostatics.csv",
    )  # fmt: skip
    assert (status, err) == (0, "")
    assert "its volume is moulded" in out
    return folder


def test_table_reads_back_as_the_hull(both):
    # Without deflection and list the table is the hull: interpolated where a chine leaves the water,
    # which no cubic follows, in steps of 2 cm and of 0.1 m of trim.
    trial = read_trial(both)
    curves = Curves(trial.table, trial.vessel.lpp, "cubic")
    hull = Integrated(Hull(trial.offsets, trial.vessel.lpp))
    mean, tau = (a.ravel() for a in np.meshgrid(np.linspace(0.9, 1.4, 21), np.array([-0.004, 0.003, 0.0055])))  # fmt: skip
    a, b = (c.buoyancy(mean, tau, None, None) for c in (curves, hull))
    assert a.volume == pytest.approx(b.volume, rel=1e-4)
    assert a.x == pytest.approx(b.x, abs=1e-3)
    assert a.kb + a.bmt == pytest.approx(b.kb + b.bmt, abs=5e-3)
    # at its own rows the five decimals of the file are all that is lost
    row = np.asarray(1.2)
    a, b = (c.buoyancy(row, np.asarray(0.1 / 20.4), None, None) for c in (curves, hull))
    for name in ("volume", "x", "z", "bmt"):
        assert getattr(a, name) == pytest.approx(float(getattr(b, name)), abs=5.1e-6)


def test_remark_says_how_far_the_table_is_from_the_hull(both):
    # The table knows nothing of list, and takes a deflection as so much more draft.
    found = work_out(read_trial(both))
    volume, km, lcb = found.outcome.as_inclined.hull.table
    assert abs(volume) < 5e-4
    assert abs(km) < 3e-3
    assert abs(lcb) < 1e-2
    (remark,) = [r for r in found.remarks if "Against the integrated hull it has" in r]
    said = re.search(r"it has (\S+) % volume, (\S+) mm KM and (\S+) mm LCB", remark).groups()
    expected = [100.0 * volume, 1000.0 * km, 1000.0 * lcb]
    assert [float(s) for s in said] == pytest.approx(expected, abs=0.051)


def test_table_in_us_units_reads_back(incline, tmp_path):
    folder = write(tmp_path / "t", changed("trial.toml", 'units = "metric"', 'units = "us"', BARGE))
    at = ("--from", "2 m", "--to", "4 m", "--step", "0.25 m")
    assert incline("hydrostatics", folder, *at, "--csv", folder / "hydrostatics.csv")[0] == 0
    head = (folder / "hydrostatics.csv").read_text(encoding="utf-8").splitlines()[0]
    assert head == "trim [ft],draft [ft],volume [ft3],lcb [ft],kb [ft],bm [ft],lcf [ft],area [ft2],bml [ft]"  # fmt: skip
    trial = read_trial(folder)
    found = Curves(trial.table, 60.0, "cubic").buoyancy(
        np.asarray(3.1), np.asarray(0.0), None, None
    )
    exact = (2232.0, 30.0, 1.55, 12.0 / 3.1)
    assert (found.volume, found.x, found.kb, found.bmt) == pytest.approx(exact, rel=1e-5)


# --- what it refuses -------------------------------------------------------------------------------


@pytest.mark.parametrize(
    "options, words",
    [
        (("--from", "3 furlongs"), "a unit of length"),
        (("--step", "0.5"), "a number and a unit"),
        (("--trim", "nose down"), "--trim"),
        (("--deflection", "1 t"), "--deflection"),
        (("--density", "0 t/m3"), "a density above zero"),
        (("--density", "1.025 m"), "--density"),
        (("--heel", "90"), "a heel under 90 degrees"),
        (("--heel", "nan"), "a heel under 90 degrees"),
        (("--from", "3 m", "--to", "2 m"), "a highest draft above the lowest"),
        (("--step", "0 m"), "a step above zero"),
        (("--step", "0.1 mm"), "at most 2000 drafts"),
        (("--heel", "5", "--csv", "table.csv"), "a trial's table is for the upright ship"),
        (("--levitate",), "--levitate"),
    ],
)
def test_wrong_usage(incline, barge, options, words, tmp_path, monkeypatch):
    monkeypatch.chdir(tmp_path)
    status, out, err = incline("hydrostatics", barge, *options)
    assert (status, out) == (2, "")
    assert words in err
    assert not (tmp_path / "table.csv").exists()


def test_waterlines_off_the_hull_are_all_listed(incline, barge, tmp_path):
    status, out, err = incline(
        "hydrostatics",
        barge,
        "--from",
        "-1 m",
        "--to",
        "7 m",
        "--step",
        "2 m",
        "--csv",
        tmp_path / "table.csv",
    )
    assert (status, out) == (1, "")
    assert err.startswith("incline: 2 problems\n")
    assert "found draft -1.000 m, trim 0.000 m; expected a waterline above the hull's lowest point" in err  # fmt: skip
    assert "found draft 7.000 m, trim 0.000 m: 2.000 m above the deck edge" in err
    assert not (tmp_path / "table.csv").exists()
    # heel and trim bring the deck edge to the water as well
    assert incline("hydrostatics", barge, "--from", "4 m", "--to", "4.5 m", "--heel", "12")[0] == 1
    assert incline("hydrostatics", barge, "--from", "4 m", "--to", "4.5 m", "--trim", "2.1 m")[0] == 1  # fmt: skip


def test_files(incline, barge, tmp_path):
    table = tmp_path / "table.csv"
    assert incline("hydrostatics", barge, "--csv", table)[0] == 0
    before = table.read_bytes()
    status, out, err = incline("hydrostatics", barge, "--csv", table, "--trim", "0.1 m")
    assert (status, out) == (1, "")
    assert "exists already" in err
    assert table.read_bytes() == before
    assert incline("hydrostatics", barge, "--csv", table, "--trim", "0.1 m", "--force")[0] == 0
    assert table.read_bytes() != before


def test_problems_of_the_hull_are_told_together(incline, tmp_path):
    text = BARGE["offsets.csv"].replace("1,30,6,0", "1,30,six,0").replace("2,60,6,5", "2,60,6,five")
    status, out, err = incline("hydrostatics", write(tmp_path / "t", {**BARGE, "offsets.csv": text}))  # fmt: skip
    assert (status, out) == (1, "")
    assert "2 problems" in err
    assert 'row 6, column "half breadth": found "six"' in err
    assert 'found "five"' in err
    status, _, err = incline("hydrostatics", DEMO_TRIALS / "workboat-metric")
    assert status == 1
    assert "offsets.csv: found no such file" in err
    assert incline("hydrostatics", tmp_path / "nowhere")[0] == 1


def test_only_the_vessel_and_its_offsets_are_read(incline, tmp_path):
    # Before any test is held there are no readings; other files may be in any state.
    files = {
        "trial.toml": BARGE["trial.toml"],
        "offsets.csv": BARGE["offsets.csv"],
        "readings.csv": "?",
    }
    folder = write(tmp_path / "t", files)
    assert incline("hydrostatics", folder)[0] == 0
    assert read_offsets(folder).vessel.lpp == 60.0
