"""What a hull trial says of itself: bodies in one another, layers, a table beside the offsets."""

import json
import re
import shutil
from dataclasses import replace

import pypdf
import pytest
from conftest import DEMO_TRIALS
from drawn import offsets, station
from hull_chain import worked
from hull_edits import rewritten
from hull_ships import LOW_CHINE
from hull_trial import write_hull_trial

from incline import read_trial, reduce
from incline.cli import main
from incline.hull.overlap import overlaps
from incline.record import Body

CHINE = DEMO_TRIALS / "chine-metric"
BOX = [(0.0, 0.0), (4.0, 0.0), (4.0, 4.0)]


def run(monkeypatch, *words):
    monkeypatch.setattr("sys.argv", ["incline", *map(str, words)])
    try:
        main()
    except SystemExit as stop:
        if stop.code:
            raise


def bodies(*points, y=0.0, mirrored=False):
    hull = Body(name="hull", stations=tuple(station(x, BOX) for x in (0.0, 10.0, 20.0)))
    fin = Body(
        name="fin", kind="appendage", y=y, mirrored=mirrored,
        stations=tuple(station(x, points) for x in (4.0, 9.0)),
    )  # fmt: skip
    return offsets(hull, fin)


def test_a_body_within_another_is_counted_twice_and_told():
    # A box of 1 m by 0.5 m over 5 m of length, wholly inside: 2.5 m3.
    inside = bodies((0.0, 1.0), (0.5, 1.0), (0.5, 1.5), (0.0, 1.5))
    ((one, other, volume),) = overlaps(inside)
    assert (one, other) == ("hull", "fin")
    assert volume == pytest.approx(2.5, rel=0.01)


def test_both_images_of_a_mirrored_body_count():
    inside = bodies((0.0, 1.0), (0.5, 1.0), (0.5, 1.5), (0.0, 1.5), y=2.0, mirrored=True)
    assert overlaps(inside)[0][2] == pytest.approx(5.0, rel=0.01)


def test_bodies_that_touch_have_nothing_in_common():
    assert overlaps(bodies((0.0, -0.5), (0.1, -0.5), (0.1, 0.0), (0.0, 0.0))) == ()
    assert overlaps(bodies((0.0, 0.5), (0.2, 0.5), (0.2, 1.0), (0.0, 1.0), y=6.0)) == ()


def test_the_remark_names_both_bodies():
    trial = read_trial(CHINE)
    hull, skeg = trial.offsets.bodies
    raised = tuple(
        replace(
            s,
            starboard=tuple(replace(p, z=p.z + 0.6) for p in s.starboard),
            port=tuple(replace(p, z=p.z + 0.6) for p in s.port),
        )
        for s in skeg.stations
    )
    skeg = replace(skeg, stations=raised)
    found = reduce(replace(trial, offsets=replace(trial.offsets, bodies=(hull, skeg))))
    (said,) = (r for r in found.remarks if "counted twice" in r)
    assert f"The bodies {hull.name} and {skeg.name} stand in one another" in said
    assert not any("counted twice" in r for r in reduce(trial).remarks)


def test_a_table_in_use_is_held_against_the_offsets(tmp_path, monkeypatch, capsys):
    folder = tmp_path / "both"
    shutil.copytree(CHINE, folder)
    exact = json_of(CHINE, tmp_path, monkeypatch)
    run(
        monkeypatch, "hydrostatics", CHINE, "--from", "0.8 m", "--to", "1.6 m", "--step", "0.02 m",
        "--trim", "0 m", "--trim", "0.2 m", "--csv", folder / "hydrostatics.csv",
    )  # fmt: skip
    stated = capsys.readouterr().out.splitlines()[-3:]
    assert [line.split(" = ")[0] for line in stated] == ["u_volume", "u_km", "u_lcb"]
    keys = "\n".join(
        ["[hydrostatics]", 'volume = "moulded"', 'allowance = "0.5 %"', 'use = "table"', *stated]
    )
    rewritten(folder, "trial.toml", lambda t: f"{keys}\n\n{t}")
    found = json_of(folder, tmp_path, monkeypatch)
    assert found["heel"]["method"] == "straight-line"
    # The straight line on the table is off by what it is off by on the offsets.
    line = next(m for m in exact["heel"]["other_methods"] if m["method"] == "straight-line")
    low = 1000.0 * (line["vcg_m"] - exact["lightship"]["vcg_m"]["value"])
    said = " ".join(found["remarks"])
    (shown,) = re.findall(r"not used, the straight-line method puts KG ([\d.]+) mm low", said)
    # As inclined against lightship: the ratio of their displacements; half a digit printed.
    ratio = exact["lightship"]["displacement_t"]["value"] / exact["as_inclined"]["displacement_t"]
    assert float(shown) == pytest.approx(-low * ratio, abs=0.06)
    assert "The offsets are not used. Against them the table has" in said
    curvature = [
        x for x in found["uncertainty"]["budgets"]["vcg"]["inputs"] if "curvature" in x["name"]
    ]
    assert curvature[0]["basis"] == "difference from the heeled hull"


def json_of(folder, tmp_path, monkeypatch):
    target = tmp_path / f"{folder.name}.json"
    run(monkeypatch, "reduce", folder, "--json", target, "--force")
    return json.loads(target.read_text(encoding="utf-8"))


def test_a_table_of_a_bent_hull_is_not_written(tmp_path, monkeypatch, capsys):
    with pytest.raises(SystemExit) as stop:
        run(
            monkeypatch, "hydrostatics", CHINE, "--deflection", "10 mm",
            "--csv", tmp_path / "hydrostatics.csv",
        )  # fmt: skip
    assert stop.value.code == 2
    assert "upright ship without deflection" in " ".join(capsys.readouterr().err.split())
    assert not (tmp_path / "hydrostatics.csv").exists()


def test_layers_give_the_hull_s_own_volume_and_the_density_of_the_water_displaced(tmp_path):
    folder = tmp_path / "layers"
    shutil.copytree(CHINE, folder)
    samples = "quay,0.2,1.002\nquay,0.6,1.008\nquay,1.4,1.020\n"
    (folder / "density.csv").write_text(f"place,depth [m],density [t/m3]\n{samples}", "utf-8")
    rewritten(folder, "trial.toml", lambda t: f'[density]\nprofile = "layers"\n\n{t}')
    mixed, layered = reduce(read_trial(CHINE)).outcome, reduce(read_trial(folder)).outcome
    one, other = mixed.as_inclined, layered.as_inclined
    # The same waterline cuts off the same volume, whatever the water.
    assert other.volume == pytest.approx(one.volume, rel=1e-9)
    assert other.displacement == pytest.approx(other.volume * other.density * 1.005, rel=1e-12)
    assert [depth for depth, _ in other.hull.layers] == pytest.approx([0.0, 0.4, 1.0])
    assert [density for _, density in other.hull.layers] == pytest.approx([1.002, 1.008, 1.020])
    # Most of the volume lies high: lighter than the mean of the samples.
    assert 1.002 < other.density < 1.010
    names = {x.name for b in layered.budgets for x in b.lines}
    assert "density of the water, where the layers meet" in names
    assert "density of the water, spread of samples" not in names


def test_the_steps_of_a_large_listed_and_trimmed_hull_follow(tmp_path, monkeypatch):
    # Four digits more of LCG than a small vessel needs, and B of the listed ship is not KB.
    truth = write_hull_trial(
        tmp_path / "t", LOW_CHINE, degrees=(0.0, 2.0, 0.0, -2.0), list_tan=0.009
    )
    run(monkeypatch, "report", tmp_path / "t", "-o", tmp_path / "t.pdf", "--draws", "10000")
    text = " ".join(p.extract_text() for p in pypdf.PdfReader(tmp_path / "t.pdf").pages)
    assert "do NOT come out" not in text
    assert "agrees to its last digit" in " ".join(text.split())
    assert float(worked(tmp_path / "t").found.vcg) == pytest.approx(truth.inclined.z, abs=1e-4)


def test_a_waterline_that_cannot_be_found_is_no_number():
    import numpy as np
    from drawn import pose, prism

    from incline.hull import Hull, settle

    hull = Hull(prism(BOX, (0.0, 20.0)), 20.0)
    one = np.asarray(1.0)
    with np.errstate(all="ignore"):
        at, found = settle(hull, pose(2.0), 1e6 * one, 2.0 * one, 10.0 * one)
    assert np.isnan(at.mean)
    assert not found.volume > 0.0
