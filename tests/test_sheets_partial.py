"""Reading a trial that is not complete: what is there, what is wrong, what is still missing."""

import math

import pytest
from conftest import DEMO_TRIALS, ROOT
from test_cli import incline
from test_sheets import WORKBOAT, planned, printed, sheet, texts

from incline.errors import FieldDataError
from incline.reading import read_trial
from incline.reading.partial import read_partial
from incline.sheets.sequence import rows_of


@pytest.mark.parametrize("name", ["workboat-metric", "supply-vessel-us", "disturbed-metric"])
def test_a_whole_trial_is_read_as_ever(name):
    partial = read_partial(DEMO_TRIALS / name)
    assert partial.whole
    assert partial.trial == read_trial(DEMO_TRIALS / name)
    assert partial.date == partial.trial.occasion.date


@pytest.mark.parametrize("units", ["metric", "us"])
def test_a_blank_trial_has_nothing_wrong_and_much_missing(units):
    partial = read_partial(ROOT / "templates" / units)
    assert partial.wrong == ()
    assert partial.missing
    assert partial.date is None
    assert math.isnan(partial.trial.vessel.lpp)
    assert not partial.knows(partial.trial.devices[0].where, "kind")


def test_an_empty_folder_is_read_and_no_folder_is_not(tmp_path):
    assert read_partial(tmp_path).trial.shifts == ()
    with pytest.raises(FieldDataError, match="no such folder"):
        read_partial(tmp_path / "nowhere")


def test_a_wrong_cell_is_told_and_left_blank_and_the_rest_is_used(write_folder, tmp_path):
    folder = planned(write_folder)
    tanks = (folder / "tanks.csv").read_text(encoding="utf-8")
    assert "slack" in tanks
    (folder / "tanks.csv").write_text(tanks.replace("slack", "slakc"), encoding="utf-8")
    partial = read_partial(folder)
    assert [d.code for d in partial.wrong] == ["value-wrong"]
    bad = next(t for t in partial.trial.tanks if not partial.knows(t.where, "state"))
    assert partial.knows(bad.where, "density")
    found = sheet(texts(printed(tmp_path, partial)), "Tanks")
    assert bad.name in found
    assert f"{bad.contents} 0.8500" in found
    assert "pressed full" in found


@pytest.mark.parametrize("row", ["A,1,152,CAL A-26,12.000,4.600", "A,1.15z,CAL A-26,12.000,4.600"])
def test_a_row_of_a_weight_with_a_bad_cell_is_left_blank_but_for_its_name(
    write_folder, tmp_path, row
):
    folder = planned(write_folder)
    whole = (folder / "weights.csv").read_text(encoding="utf-8")
    old = "A,1.152,CAL A-26,12.000,4.600"
    assert old in whole
    (folder / "weights.csv").write_text(whole.replace(old, row), encoding="utf-8")
    partial = read_partial(folder)
    (bad, *others) = partial.trial.weights
    assert bad.id == "A"
    assert math.isnan(bad.mass + bad.x + bad.z)
    assert all(math.isfinite(w.mass + w.x + w.z) for w in others)
    found = sheet(texts(printed(tmp_path, partial)), "Test weights")
    assert "A B CAL B-26 1.1480 14.000 4.600 solid" in found
    assert all(r.moment is None for r in rows_of(partial) if r.places["A"].y != -3.4)


def test_an_arrow_stands_only_where_a_weight_is_known_to_have_moved(write_folder):
    """Every place is listed at every shift; the start of D is left out, and shift 2 wholly."""
    head = "shift,weight,y [m]\n"
    places = {0: "PPS", 1: "SPSS", 3: "SSSS", 4: "SSSP", 5: "SSSP"}
    rows = [
        f"{n},{w},{'-' if at == 'P' else ''}3.4\n"
        for n, sides in places.items()
        for w, at in zip("ABCD", sides, strict=False)
    ]
    folder = planned(write_folder)
    (folder / "shifts.csv").write_text(head + "".join(rows), encoding="utf-8")
    moved = {r.number: set(r.moved) for r in rows_of(read_partial(folder))}
    assert moved == {0: set(), 1: {"A"}, 3: {"B"}, 4: {"D"}, 5: set()}


def test_marks_without_drafts_are_places_to_read(write_folder, tmp_path):
    folder = planned(write_folder)
    (folder / "drafts.csv").write_text(
        "x [m],side,draft [m],y [m]\n1.2,P,,4.1\n1.2,S,,4.1\n27,P,,3.0\n", encoding="utf-8"
    )
    partial = read_partial(folder)
    assert partial.wrong == ()
    found = sheet(texts(printed(tmp_path, partial)), "Drafts and freeboards")
    assert "1.200 P 4.100 1.200 S 4.100 27.000 P 3.000" in found


def test_positions_count_from_where_the_trial_counts_them(write_folder, tmp_path):
    folder = planned(write_folder)
    text = (folder / "trial.toml").read_text(encoding="utf-8")
    moved = text.replace('x_origin = "after perpendicular"', 'x_origin = "amidships"')
    assert moved != text
    (folder / "trial.toml").write_text(moved, encoding="utf-8")
    (folder / "drafts.csv").write_text("x [m],side,draft [m]\n-13.1,P,1.9\n", encoding="utf-8")
    partial = read_partial(folder)
    pages = texts(printed(tmp_path, partial))
    assert "−13.100 P" in sheet(pages, "Drafts and freeboards")
    assert "from amidships" in sheet(pages, "Drafts and freeboards")


def test_names_in_every_script_of_a_hundred_and_twenty_letters_are_whole(write_folder, tmp_path):
    name = ("Νηρηίς Ærøskøbing Łódź çà et là " * 5)[:120].strip()
    folder = planned(write_folder)
    for file in ("trial.toml", "tanks.csv"):
        text = (folder / file).read_text(encoding="utf-8")
        text = text.replace("Kestrel Sound", name).replace("Day tank", name)
        (folder / file).write_text(text, encoding="utf-8")
    pages = texts(printed(tmp_path, read_partial(folder)))
    assert all(f"Vessel: {name}" in p for p in pages)
    assert sheet(pages, "Tanks").count(name) >= 2


def test_the_command_writes_a_file_named_after_vessel_and_day(write_folder, tmp_path):
    folder = planned(write_folder)
    run = incline("sheets", folder, cwd=tmp_path)
    assert run.returncode == 0, run.stderr
    assert run.stderr == ""
    made = tmp_path / "kestrel-sound-2026-03-14-sheets.pdf"
    assert made.read_bytes().startswith(b"%PDF")
    again = incline("sheets", folder, cwd=tmp_path)
    assert again.returncode == 1
    assert "--force" in again.stderr
    assert incline("sheets", folder, "--force", cwd=tmp_path).returncode == 0


def test_the_command_tells_what_it_left_blank_and_writes_all_the_same(write_folder, tmp_path):
    folder = planned(write_folder)
    text = (folder / "weights.csv").read_text(encoding="utf-8").replace("A,1.152,", "A,1.15z,")
    (folder / "weights.csv").write_text(text, encoding="utf-8")
    run = incline("sheets", folder, "-o", "s.pdf", cwd=tmp_path)
    assert run.returncode == 0
    assert "weights.csv, row" in run.stderr
    assert '"1.15z"' in run.stderr
    assert "no such file" not in run.stderr
    assert (tmp_path / "s.pdf").exists()


def test_blank_sheets_twice_are_the_same_to_the_byte(tmp_path):
    for name in ("a.pdf", "b.pdf"):
        run = incline(
            "sheets", "--blank", "--units", "us", "-o", name,
            cwd=tmp_path, SOURCE_DATE_EPOCH="1780000000",
        )  # fmt: skip
        assert run.returncode == 0, run.stderr
    assert (tmp_path / "a.pdf").read_bytes() == (tmp_path / "b.pdf").read_bytes()


@pytest.mark.parametrize(
    "arguments",
    [[], ["--blank", WORKBOAT], ["--blank", "--gm", "1"], ["--blank", "--displacement", "-3 t"],
     ["--blank", "--paper", "a3"], ["--blank", "--gm", "100 m"],
     ["--blank", "--displacement", "2000000 t"], [WORKBOAT, "--gm", "50 m"],
     [WORKBOAT, "--displacement", "0.3 t"], [WORKBOAT, "--displacement", "310000 t"]],
)  # fmt: skip
def test_wrong_usage_exits_2(arguments, tmp_path):
    run = incline("sheets", *arguments, cwd=tmp_path)
    assert run.returncode == 2
    assert "Traceback" not in run.stderr
    assert not list(tmp_path.iterdir())


@pytest.mark.parametrize(
    ("file", "old", "new"),
    [
        ("readings.csv", ",414", ",4l4"),  # a letter for a figure
        ("shifts.csv", "-3.400", "3.400"),  # nothing moves: no moment at all
        ("tanks.csv", "Day tank", "tank " * 1200),  # higher than a page
        ("weights.csv", "A,1.152", "A,1.152,,,,,"),  # cells out of place
    ],
)
def test_slips_do_not_keep_the_sheets_from_being_printed(write_folder, tmp_path, file, old, new):
    folder = planned(write_folder, without=())
    text = (folder / file).read_text(encoding="utf-8")
    assert old in text
    (folder / file).write_text(text.replace(old, new), encoding="utf-8")
    data = printed(tmp_path, read_partial(folder), gm=1.0, displacement=300.0)
    assert data.startswith(b"%PDF")
    assert sheet(texts(data), "End checks")
