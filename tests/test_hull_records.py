"""Trials on a hull kept in other ways: the same lightship; and the commands from end to end."""

import json
import re
import shutil
import sys
from dataclasses import replace

import numpy as np
import pypdf
import pytest
from conftest import DEMO_TRIALS
from demos import demo_files
from hull_chain import worked
from hull_edits import column, kept, misread, rewritten
from hull_ships import BOX, HIGH_CHINE, PATROL
from hull_trial import write_hull_trial

from incline import read_trial, reduce
from incline.cli import main

FEW = (0.0, 1.5, 3.0, 0.0, -1.5, -3.0)


def light(folder):
    """Displacement, KG, LCG and TCG of the lightship by the chain."""
    found = worked(folder).found
    every = found.light_displacement, found.light_vcg, found.light_lcg, found.light_tcg
    return [float(v) for v in every if v is not None]


def true(truth):
    return [truth.displacement, truth.vcg, truth.lcg, truth.tcg]


def test_us_units(tmp_path):
    """The demo's records, unrounded, with all its tables and the hull in US units."""
    for units in ("metric", "us"):
        folder = tmp_path / units
        folder.mkdir()
        for file, text in demo_files("chine-metric", rounded=False, units=units).items():
            (folder / file).write_text(text, encoding="utf-8")
    # Twelve digits are left of sixteen after conversions and Newton's method; TCG is 4 mm.
    assert light(tmp_path / "us") == pytest.approx(light(tmp_path / "metric"), rel=1e-9, abs=1e-10)
    assert "[ft]" in (tmp_path / "us" / "offsets.csv").read_text(encoding="utf-8")


def test_x_from_amidships(tmp_path):
    write_hull_trial(tmp_path / "aft", HIGH_CHINE, degrees=FEW, travel=2.0)
    shutil.copytree(tmp_path / "aft", tmp_path / "mid")
    half = HIGH_CHINE.lpp / 2.0
    for file in (tmp_path / "mid").glob("*.csv"):
        column(tmp_path / "mid", file.name, r"(to )?x \[m\]", lambda x: x - half)

    def toml(text):
        text = text.replace("after perpendicular", "amidships")
        return re.sub(
            r'^x = "(\S+) m"', lambda m: f'x = "{float(m[1]) - half!r} m"', text, flags=re.MULTILINE
        )

    rewritten(tmp_path / "mid", "trial.toml", toml)
    assert read_trial(tmp_path / "mid").settings.x_origin == "amidships"
    # x of 30 m less 15 m and back again loses a digit
    assert light(tmp_path / "mid") == pytest.approx(light(tmp_path / "aft"), rel=1e-9, abs=1e-10)


def test_excluded_reading(tmp_path):
    truth = write_hull_trial(tmp_path, PATROL, degrees=FEW)
    misread(tmp_path, 2, "P2", lambda r: r + 40.0, exclude="read in a hurry")
    result = reduce(read_trial(tmp_path))
    assert result.outcome.lightship.vcg.value == pytest.approx(truth.vcg, abs=1e-5)
    counted = result.with_excluded
    assert counted is not None
    assert abs(counted.lightship.vcg.value - truth.vcg) > 0.005
    (point,) = (p for p in result.outcome.heel.points if p.excluded)
    # what it is off by, against the curve: 40 mm on the pendulum's length
    assert point.residual == pytest.approx(0.040 / truth.scene.lengths["P2"], rel=1e-3)


def test_one_device(tmp_path):
    truth = write_hull_trial(tmp_path, PATROL, degrees=FEW)
    kept(tmp_path, "readings.csv", lambda row: row["device"] == "P1")
    rewritten(
        tmp_path, "trial.toml",
        lambda t: re.sub(r'\[\[devices\]\]\nid = "P2"\n(?:[a-z]+ = .*\n)+', "", t),
    )  # fmt: skip
    result = reduce(read_trial(tmp_path))
    assert [d.id for d in result.outcome.heel.devices] == ["P1"]
    assert result.outcome.lightship.vcg.value == pytest.approx(truth.vcg, abs=1e-5)


def test_every_device_by_itself_has_the_gm_of_all(tmp_path):
    """Readings straightened by the curve's bend lie on one line for each device."""
    write_hull_trial(tmp_path, HIGH_CHINE, degrees=(0.0, 2.0, 4.0, 8.0, -2.0, -4.0, -8.0))
    heel = reduce(read_trial(tmp_path)).outcome.heel
    for device in heel.devices:
        # what splines along the hull leave in the heels, 1e-9 of 0.1
        assert device.gm == pytest.approx(heel.gm_fluid, rel=1e-6)
        assert device.r_squared == pytest.approx(1.0, abs=1e-9)
    most = np.degrees([heel.max_heel_port, heel.max_heel_starboard])
    assert most == pytest.approx([8.0, 8.0], abs=1e-5)


def test_moments_given_directly(tmp_path):
    truth = write_hull_trial(tmp_path, PATROL, degrees=FEW)
    weights = truth.scene.weights
    rows = [f"{n},{9 + n // 6:02d}:{10 * (n % 6):02d},{m!r}" for n, m in enumerate(truth.moments)]
    (tmp_path / "shifts.csv").write_text(
        "shift,time,moment [t m]\n" + "\n".join(rows) + "\n", encoding="utf-8"
    )
    (tmp_path / "weights.csv").unlink()
    off = "".join(
        f"deduct,weight {w.name},{w.mass!r},{w.x!r},{w.y!r},{w.z!r},,,\n" for w in weights
    )
    rewritten(tmp_path, "ledger.csv", lambda t: t + off)
    assert light(tmp_path) == pytest.approx(true(truth), rel=1e-5, abs=1e-5)


@pytest.mark.parametrize("ship", [BOX, PATROL], ids=lambda s: s.name)
def test_marks_on_one_side_do_not_tell_the_list(ship, tmp_path):
    """Nor do those of a hull whose marks stand at several breadths; upright is taken and said."""
    truth = write_hull_trial(tmp_path, ship, degrees=FEW, list_tan=0.0)
    kept(tmp_path, "drafts.csv", lambda row: row["side"] == "S")
    result = reduce(read_trial(tmp_path))
    assert result.outcome.lightship.tcg.value is None
    assert result.outcome.as_inclined.waterline.deflection == pytest.approx(0.020, abs=1e-9)
    assert result.outcome.lightship.vcg.value == pytest.approx(truth.vcg, abs=1e-5)
    assert any("the heels are taken from the upright" in r for r in result.remarks)
    assert any("TCG is not determined" in r for r in result.remarks)


def test_misread_reading_is_found_on_a_hull(tmp_path):
    """The hull's curve is taken out first; what the reading should have been lies on it."""
    truth = write_hull_trial(
        tmp_path, HIGH_CHINE, degrees=(0.0, 2.0, 4.0, 6.0, 0.0, -2.0, -4.0, -6.0)
    )
    rng = np.random.default_rng(9)
    column(tmp_path, "readings.csv", r"reading \[mm\]", lambda r: r + float(rng.normal()))
    clean = reduce(read_trial(tmp_path))
    assert clean.diagnosis.findings == ()
    misread(tmp_path, 6, "P1", lambda r: r + 20.0)
    result = reduce(read_trial(tmp_path))
    finding = result.diagnosis.findings[0]
    assert (finding.cause, finding.shift, finding.device) == ("misread reading", 6, "P1")
    # With the reading out, KG is what the others give: noise of 1 mm leaves 2 mm.
    assert finding.vcg_if_so == pytest.approx(truth.vcg, abs=0.002)
    assert abs(result.outcome.lightship.vcg.value - truth.vcg) > 2.0 * abs(
        finding.vcg_if_so - truth.vcg
    )
    # What the readings should be with that disturbance in them, on their own scale: bend and all.
    points = [p for p in result.outcome.heel.points if not p.excluded]
    off = [p.tangent - e for p, e in zip(points, finding.expected, strict=True)]
    assert max(map(abs, off)) < 0.002  # 1 mm of noise on 2.4 m, four times over
    assert np.ptp(finding.expected) == pytest.approx(np.ptp([p.tangent for p in points]), rel=0.05)


def test_chine_is_no_finding_by_the_method_that_knows_it(tmp_path):
    """By the straight line the hull's own curve stands out of small noise; integrated it does not."""
    write_hull_trial(tmp_path, HIGH_CHINE, degrees=(0.0, 2.0, 4.0, 6.0, 0.0, -2.0, -4.0, -6.0))
    rng = np.random.default_rng(9)
    column(tmp_path, "readings.csv", r"reading \[mm\]", lambda r: r + 0.3 * float(rng.normal()))
    trial = read_trial(tmp_path)
    assert reduce(trial).diagnosis.findings == ()
    straight = replace(trial, settings=replace(trial.settings, method="straight-line"))
    assert reduce(straight).diagnosis.findings


# --- commands -----------------------------------------------------------------------------------

DEMO = DEMO_TRIALS / "chine-metric"


@pytest.fixture
def command(monkeypatch, capsys):
    """Run a command; gives its exit status and what it wrote on both streams."""

    def run(*arguments):
        monkeypatch.setattr(sys, "argv", ["incline", *map(str, arguments)])
        with pytest.raises(SystemExit) as ended:
            main()
        out, err = capsys.readouterr()
        return ended.value.code or 0, out, err

    return run


def test_demo_from_end_to_end(command, tmp_path, monkeypatch):
    monkeypatch.setenv("SOURCE_DATE_EPOCH", "1770000000")
    files = [tmp_path / "one.json", tmp_path / "two.json"]
    for file in files:
        status, out, err = command("reduce", DEMO, "--json", file)
        assert status == 0, err
    assert files[0].read_bytes() == files[1].read_bytes()
    told = json.loads(files[0].read_text(encoding="utf-8"))
    assert told["heel"]["method"] == "heeled-hull"
    assert "heeled-hull method" in out
    assert "volume from the hull" in out
    straight = next(m for m in told["heel"]["other_methods"] if m["method"] == "straight-line")
    low = 1000.0 * (told["lightship"]["vcg_m"]["value"] - straight["vcg_m"])
    words = " ".join(out.split())
    assert f"straight-line KG {low:.1f} mm low, on the unsafe side" in words

    failed = [c["id"] for c in told["checks"] if c["status"] == "fail"]
    status, out, _ = command("check", DEMO)
    assert status == (3 if failed else 0)
    assert all(one in out for one in failed)

    report = tmp_path / "report.pdf"
    status, _, err = command("report", DEMO, "-o", report, "--draws", "10000")
    assert status == 0, err
    text = " ".join(" ".join(p.extract_text() for p in pypdf.PdfReader(report).pages).split())
    assert "Methods compared" in text
    assert "heeled-hull (used)" in text
    assert f"{-low:.2f}".replace("-", "") in text  # less the method used, mm

    status, out, err = command("compare", files[0], DEMO)
    assert status == 0, err
    kg = re.search(r"KG, m +(\S+) +(\S+) +(\S+)", out)
    assert kg is not None
    assert kg[1] == kg[2] == f"{told['lightship']['vcg_m']['value']:.3f}"
    assert float(kg[3]) == 0.0
