"""What a report says besides measurements, as it is read from ``trial.toml`` and the tables."""

from __future__ import annotations

import datetime
import json
import math
from typing import TYPE_CHECKING

import pytest
from small_trial import SMALL, changed, write

from incline import reduce, to_json
from incline.errors import FieldDataError
from incline.papers import Known, Papers
from incline.reading import read_trial
from incline.record import Condition

if TYPE_CHECKING:
    from pathlib import Path

PAPERS = """
[report]
status = "issued"
number = 2
author = "A. Surveyor"
submitted_to = "the flag administration"

[[revisions]]
number = 1
date = 2026-02-10
description = "first issue"
by = "A. Surveyor"

[[revisions]]
number = "2"
date = "2026-03-01"
description = "tank 4 S sounded again"

[[documents]]
title = "Lines plan"
number = "TB-101"
revision = 3
date = 2019-05-04
use = "hydrostatics"

[[deviations]]
what = "none"

[[anomalies]]
what = "shift 3, I1"
explanation = "bumped"

[[signatures]]
part = "tested"
name = "A. Surveyor"
organisation = "Yard"

[predicted]
gm = "1.28 m"
heel = "1.6 deg"
freeboard = "1.90 m"
by = "the yard"

[[compare]]
kind = "sister"
name = "Lead barge"
situation = "sister-cargo"
displacement = "2190 t"
u_displacement = "0.5 %"
kg = "4.10 m"
lcg = "1.00 m"
x_origin = "amidships"
lpp = "60 m"

[condition]
state = "complete"
drafts = "crew of three aboard"
"""
TOML = "trial.toml"


def with_papers(old: str = "", new: str = "") -> dict[str, str]:
    files = {**SMALL, TOML: SMALL[TOML] + PAPERS}
    return changed(TOML, old, new, files) if old else files


def places(folder: Path, files: dict[str, str]) -> list[tuple[str, str]]:
    with pytest.raises(FieldDataError, match="found") as caught:
        read_trial(write(folder, files))
    return [(d.code, d.where.column or d.where.file) for d in caught.value.defects]


def test_a_trial_without_them_is_a_draft(tmp_path: Path) -> None:
    trial = read_trial(write(tmp_path, SMALL))
    assert trial.papers == Papers()
    assert trial.papers.status == "draft"
    assert trial.condition == Condition()


def test_every_section_is_read(tmp_path: Path) -> None:
    trial = read_trial(write(tmp_path, with_papers()))
    papers = trial.papers
    assert (papers.status, papers.number, papers.author) == ("issued", "2", "A. Surveyor")
    assert papers.submitted_to == "the flag administration"
    assert [(r.number, r.date, r.by) for r in papers.revisions] == [
        ("1", datetime.date(2026, 2, 10), "A. Surveyor"),
        ("2", datetime.date(2026, 3, 1), ""),
    ]
    (document,) = papers.documents
    assert (document.number, document.revision, document.date) == ("TB-101", "3", "2019-05-04")
    assert [(d.what, d.reason, d.allowed_by) for d in papers.deviations] == [("none", "", "")]
    assert papers.anomalies[0].explanation == "bumped"
    assert (papers.signatures[0].part, papers.signatures[0].organisation) == ("tested", "Yard")
    before = papers.predicted
    assert (before.gm, before.freeboard, before.by) == (1.28, 1.9, "the yard")
    assert before.heel == pytest.approx(1.6 * math.pi / 180.0, rel=1e-14)
    assert trial.condition == Condition(state="complete", drafts="crew of three aboard")


def test_a_lightship_to_compare_with_is_read_in_inside_units(tmp_path: Path) -> None:
    (other,) = read_trial(write(tmp_path, with_papers())).papers.others
    assert (other.kind, other.name, other.situation) == ("sister", "Lead barge", "sister-cargo")
    assert other.displacement == Known(2190.0, pytest.approx(10.95, rel=1e-12))
    assert other.vcg == Known(4.1)
    assert other.lcg == Known(31.0)  # half of 60 m forward of the after perpendicular
    assert other.tcg == Known(None)
    assert other.lpp == 60.0


@pytest.mark.parametrize(("kind", "length"), [("earlier", 60.0), ("sister", None)])
def test_the_ships_own_length_serves_her_own_earlier_lightship(
    tmp_path: Path, kind: str, length: float | None
) -> None:
    files = with_papers('kind = "sister"', f'kind = "{kind}"')
    files = changed(
        TOML, 'x_origin = "amidships"\nlpp = "60 m"\n', 'x_origin = "after perpendicular"\n', files
    )
    (other,) = read_trial(write(tmp_path, files)).papers.others
    assert other.lpp == length


def test_a_lightship_may_come_from_a_json_file_of_a_reduction(tmp_path: Path) -> None:
    result = reduce(read_trial(write(tmp_path / "earlier", SMALL)))
    section = '\n[[compare]]\nkind = "earlier"\nfile = "earlier.json"\n'
    folder = write(tmp_path / "now", {**SMALL, TOML: SMALL[TOML] + section})
    (folder / "earlier.json").write_text(to_json(result), encoding="utf-8")
    (other,) = read_trial(folder).papers.others
    light = result.outcome.lightship
    assert (other.kind, other.source) == ("earlier", "earlier.json")
    assert other.name == "Test Barge, 2026-02-03"
    for known, found in ((other.displacement, light.displacement), (other.vcg, light.vcg)):
        assert (known.value, known.u, known.dof) == (found.value, found.u, found.dof)


def test_defects_of_that_file_are_told_with_the_others(tmp_path: Path) -> None:
    section = '\n[[compare]]\nkind = "earlier"\nfile = "old.json"\n'
    files = changed(TOML, 'beam = "12 m"', 'beam = "12 t"')
    files[TOML] += section
    files["old.json"] = json.dumps({"format": 1, "trial": {}, "lightship": {}})
    found = places(tmp_path, files)
    assert ("unit-wrong", "vessel.beam") in found
    assert ("key-missing", "lightship.displacement_t") in found


def test_words_by_shift_and_by_tank(tmp_path: Path) -> None:
    shifts = SMALL["shifts.csv"].replace("z [m]\n", "z [m],weather,tide\n")
    shifts = shifts.replace("0,9:00,A,4.00 P,,", "0,9:00,A,4.00 P,,,calm,ebb")
    shifts = shifts.replace("0,,B,4.00 S,,", "0,,B,4.00 S,,,fog,ebb")
    tanks = SMALL["tanks.csv"].replace("shape,depth [m]", "shape,depth [m],sounding")
    tanks = tanks.replace(",4,3,box,1.2", ",4,3,box,1.2,0.50 m at the pipe")
    trial = read_trial(write(tmp_path, {**SMALL, "shifts.csv": shifts, "tanks.csv": tanks}))
    assert [(s.weather, s.tide) for s in trial.shifts] == [("calm; fog", "ebb"), *[("", "")] * 3]
    assert [t.sounding for t in trial.tanks] == ["0.50 m at the pipe", "", "", ""]


CASES = {
    ('status = "issued"', 'status = "final"'): [("value-wrong", "report.status")],
    ("\nnumber = 2\nauthor", "\nauthor"): [("key-missing", "report.number")],
    ("\nnumber = 2\nauthor", "\nnumber = 3\nauthor"): [("value-wrong", "report.number")],
    ("\nnumber = 2\nauthor", "\nnumber = 2.5\nauthor"): [("value-wrong", "report.number")],
    ('date = "2026-03-01"', 'date = "1 March"'): [("value-wrong", "revisions[2].date")],
    ("date = 2026-02-10", "date = 2026-02-02"): [("value-wrong", "revisions[1].date")],
    ("date = 2026-02-10", "date = 2026-02-03"): [],
    ('date = "2026-03-01"', "date = 2026-02-09"): [("value-wrong", "revisions[2].date")],
    ("\nnumber = 1\ndate", "\nnumber = 2\ndate"): [("value-wrong", "revisions[2].number")],
    ("\nnumber = 1\ndate", "\nnumber = 3\ndate"): [("value-wrong", "revisions[2].number")],
    ("\nnumber = 1\ndate", "\nnumber = 0\ndate"): [("value-wrong", "revisions[1].number")],
    ("\nnumber = 1\ndate", '\nnumber = "A"\ndate'): [],
    ('status = "issued"', ""): [],
    ("date = 2026-02-10", ""): [("key-missing", "revisions[1].date")],
    ('description = "first issue"', ""): [("key-missing", "revisions[1].description")],
    ('title = "Lines plan"', 'name = "Lines plan"'): [
        ("key-missing", "documents[1].title"), ("key-unknown", "documents[1].name"),
    ],
    ('what = "none"', ""): [("key-missing", "deviations[1].what")],
    ('explanation = "bumped"', ""): [("key-missing", "anomalies[1].explanation")],
    ('part = "tested"', 'part = "agreed"'): [("value-wrong", "signatures[1].part")],
    ('heel = "1.6 deg"', 'heel = "1.6 m"'): [("unit-wrong", "predicted.heel")],
    ('freeboard = "1.90 m"', 'freeboard = "0 m"'): [("number-not-positive", "predicted.freeboard")],
    ('kind = "sister"', 'kind = "brother"'): [("value-wrong", "compare[1].kind")],
    ('situation = "sister-cargo"', 'situation = "sister"'): [("value-wrong", "compare[1].situation")],
    ('displacement = "2190 t"\nu_displacement = "0.5 %"', ""): [
        ("key-missing", "compare[1].displacement"),
    ],
    ('x_origin = "amidships"', ""): [("key-missing", "compare[1].x_origin")],
    ('kg = "4.10 m"', 'kg = "4.10 m"\nfile = "old.json"'): [
        ("value-wrong", f"compare[1].{key}") for key in ("displacement", "kg", "lcg", "x_origin", "lpp")
    ] + [("key-unknown", "compare[1].u_displacement"), ("file-missing", "compare[1].file")],
    ("[condition]", "[condition]\nhull = 3"): [("key-unknown", "condition.hull")],
    ('state = "complete"', "state = 3"): [("value-wrong", "condition.state")],
}  # fmt: skip


@pytest.mark.parametrize(("change", "expected"), CASES.items(), ids=lambda c: str(c)[:50])
def test_each_defect_and_no_other(
    tmp_path: Path, change: tuple[str, str], expected: list[tuple[str, str]]
) -> None:
    files = with_papers(*change)
    if expected:
        assert sorted(places(tmp_path, files)) == sorted(expected)
    else:
        assert read_trial(write(tmp_path, files)).papers.revisions


def test_a_lightship_file_or_situation_that_is_not_there_is_told_where_it_is_named(
    tmp_path: Path,
) -> None:
    section = '\n[[compare]]\nkind = "earlier"\nfile = "old.json"\nsituation = "passenger"\n'
    with pytest.raises(FieldDataError, match="found") as caught:
        read_trial(write(tmp_path, {**SMALL, TOML: SMALL[TOML] + section}))
    missing, situation = map(str, caught.value.defects)
    assert missing.startswith('trial.toml, compare[1].file: found no file "old.json"')
    assert 'found "passenger"; expected one of the situations ' in situation
    assert "passenger-survey" in situation


def test_an_issue_without_history_is_a_defect(tmp_path: Path) -> None:
    files = {**SMALL, TOML: SMALL[TOML] + '\n[report]\nstatus = "issued"\nnumber = "A"\n'}
    assert places(tmp_path, files) == [("key-missing", "report.number")]
