"""Everything wrong with a trial is told at once: what, where, what was found, what was expected."""

from __future__ import annotations

from typing import TYPE_CHECKING

import pytest
from defect_cases import CASES, SMOOTH, TOML, Files, Found, key, repeated, row, text, without
from hull_cases import HULLS
from slip_cases import SLIPS
from small_trial import SMALL, write

from incline.errors import Defect, FieldDataError, Where
from incline.reading import read_trial
from incline.record import Trial

if TYPE_CHECKING:
    from collections.abc import Mapping
    from pathlib import Path

CODES = [
    "file-missing",
    "file-encoding",
    "file-quoting",
    "file-unreadable",
    "toml-syntax",
    "key-missing",
    "key-unknown",
    "value-wrong",
    "column-missing",
    "column-unknown",
    "column-twice",
    "unit-missing",
    "unit-wrong",
    "unit-unwanted",
    "number-unreadable",
    "number-not-finite",
    "number-negative",
    "number-not-positive",
    "side-and-sign",
    "cell-missing",
    "cells-too-many",
    "id-twice",
    "weight-nowhere",
    "weight-in-two-places",
    "weight-unknown",
    "device-unknown",
    "shift-unknown",
    "device-without-readings",
    "reading-twice",
    "readings-split",
    "readings-apart",
    "readings-no-kind",
    "moments-too-few",
    "moments-equal",
    "drafts-too-few",
    "tank-contradiction",
    "item-listed-twice",
    "table-not-monotonic",
    "table-not-grid",
    "shift-order",
    "shift-twice",
    "table-empty",
    "uncertainty-twice",
    "uncertainty-too-large",
    "implausible",
    "outside-vessel",
    "draft-twice",
    "file-separator",
    "header-missing",
    "station-x",
    "station-open",
    "station-sides",
    "station-twice",
    "station-order",
    "stations-too-few",
    "points-too-few",
    "point-twice",
    "section-crosses",
    "section-downwards",
    "line-broken",
    "line-order",
    "line-twice",
    "body-unknown",
    "body-without-stations",
    "body-overlap",
    "depths-too-few",
]


def defects_of(folder: Path, files: Mapping[str, str | bytes | None]) -> tuple[Defect, ...]:
    with pytest.raises(FieldDataError, match=r"found .*; expected ") as caught:
        read_trial(write(folder, files))
    return caught.value.defects


def places(defects: tuple[Defect, ...]) -> list[Found]:
    return [(d.code, d.where.file, d.where.row, d.where.column) for d in defects]


def _name(case: object) -> str:
    if isinstance(case, list):
        return "+".join(dict.fromkeys(code for code, *_ in case)) or "none"
    return ""


@pytest.mark.parametrize(("files", "expected"), CASES, ids=_name)
def test_each_defect_and_no_other(tmp_path: Path, files: Files, expected: list[Found]) -> None:
    if not expected:
        assert isinstance(read_trial(write(tmp_path, files)), Trial)
        return
    defects = defects_of(tmp_path, files)
    assert sorted(places(defects)) == sorted(expected)
    for defect in defects:
        assert defect.found
        assert defect.expected
        assert len(defect.found) <= 150  # two quotations of 60 characters at most
        assert "\n" not in str(defect)


@pytest.mark.parametrize(("files", "expected", "words"), [*SLIPS, *HULLS], ids=_name)
def test_each_slip_is_told_in_words(
    tmp_path: Path, files: Files, expected: list[Found], words: str
) -> None:
    test_each_defect_and_no_other(tmp_path, files, expected)
    if expected:
        assert any(words in str(d) for d in defects_of(tmp_path, files))


def test_every_code_has_a_case() -> None:
    expected = [found for _, found, *_ in [*CASES, *SLIPS, *HULLS]]
    assert {code for found in expected for code, *_ in found} == set(CODES)


def test_the_same_fault_in_many_rows_is_told_four_times(tmp_path: Path) -> None:
    """Nine readings in a unit that does not exist: three of them in full, then how many more."""
    readings = SMALL["readings.csv"].replace(",mm,", ",mmm,").replace(",deg,", ",degs,")
    defects = defects_of(tmp_path, {**SMALL, "readings.csv": readings})
    assert places(defects) == [("unit-wrong", "readings.csv", n, "unit") for n in (2, 3, 4, 5)]
    assert "5 more rows of this column" in defects[-1].found
    lines = readings.split("\n")
    few = "\n".join([*lines[:6], *SMALL["readings.csv"].split("\n")[6:]])
    assert len(defects_of(tmp_path, {**SMALL, "readings.csv": few})) == 5


def test_unknown_names_are_each_told(tmp_path: Path) -> None:
    readings = SMALL["readings.csv"].replace("P1,", "P7,")
    extra = "".join(f"{n},Q,,0,,,mm,,\n" for n in range(4))
    defects = defects_of(tmp_path, {**SMALL, "readings.csv": readings + extra})
    names = {d.found for d in defects if d.code == "device-unknown"}
    assert names == {'"P7"', '"Q"'}


def test_the_small_trial_has_no_defect(tmp_path: Path) -> None:
    assert read_trial(write(tmp_path, SMALL)).remarks == ()


def test_defects_of_all_files_are_told_at_once(tmp_path: Path) -> None:
    files = {
        **SMALL,
        TOML: SMALL[TOML].replace('"60 m"', '"60 t"').replace('"metric"', '"both"'),
        "weights.csv": SMALL["weights.csv"].replace("B,10,", "B,ten,"),
        "readings.csv": SMALL["readings.csv"].replace("3,P1", "7,P1"),
        "tanks.csv": SMALL["tanks.csv"].replace("10,8.5", "10,9.5"),
        "drafts.csv": None,
        "changes.csv": SMALL["changes.csv"].encode("utf-16"),
    }
    assert places(defects_of(tmp_path, files)) == [
        ("file-encoding", "changes.csv", 1, ""),
        ("file-missing", "drafts.csv", 0, ""),
        ("shift-unknown", "readings.csv", 8, "shift"),
        ("tank-contradiction", "tanks.csv", 3, "mass"),
        ("value-wrong", TOML, 0, "output.units"),
        ("unit-wrong", TOML, 0, "vessel.lpp"),
        ("number-unreadable", "weights.csv", 3, "mass"),
    ]


def test_a_local_encoding_names_the_byte_and_the_remedy(tmp_path: Path) -> None:
    ledger = SMALL["ledger.csv"].replace("hatch cover", "prêt").encode("cp1252")
    (defect,) = defects_of(tmp_path, {**SMALL, "ledger.csv": ledger})
    assert defect.found == "the byte 0xEA"
    assert "CSV UTF-8" in defect.hint


def test_what_was_found_is_quoted_and_cut(tmp_path: Path) -> None:
    files = row("changes.csv", 2, f"aboard,crane mat,{'x' * 200}\x1b[31m,30,0,5")
    (defect,) = defects_of(tmp_path, files)
    assert defect.found == '"' + "x" * 59 + '…"'
    (defect,) = defects_of(tmp_path, row("changes.csv", 2, "aboard,crane mat,\x1b[31m,30,0,5"))
    assert defect.found == '"\\x1b[31m"'


@pytest.mark.parametrize(
    ("files", "hint"),
    [
        (text(TOML, "beam =", "beem ="), 'did you mean "beam"?'),
        (row("shifts.csv", 7, "3,09:30,b,-4,,"), 'did you mean "B"?'),
        (row("changes.csv", 2, "aboard,mat,1,5,30,0,5"), "decimals have a point"),
        (row("changes.csv", 2, 'aboard,mat,"1,5",30,0,5'), "decimals have a point"),
        (row("drafts.csv", 2, "1.5,P,3,002,,6"), "write 3.002; decimals have a point"),
        (row("shifts.csv", 4, "0,,B,4,25,5.5"), "write 4.25; decimals have a point"),
        (row("readings.csv", 8, "3,P1,,111 P,,,mm,7,"), "decimals have a point"),
        (repeated(["300,5,301,2"] * 4, SMOOTH), "write, for example, 300.5; decimals have a point"),
        (row("changes.csv", 1, "change,item,mass [tons],x [m],y [m],z [m]"), "LT for long tons"),
        (key('check = "initial-list"', 'check = "intial-list"'), 'did you mean "initial-list"?'),
    ],
)
def test_hints(tmp_path: Path, files: Files, hint: str) -> None:
    assert any(hint in d.hint for d in defects_of(tmp_path, files))


def test_a_start_told_in_two_places_names_both(tmp_path: Path) -> None:
    (defect,) = defects_of(tmp_path, row("shifts.csv", 3, "0,9:00,A,4.00 P,30,"))
    assert defect.where.file == "shifts.csv"
    assert defect.found == '"30"'
    assert '"29.5 m" as in weights.csv, row 2' in defect.expected
    assert defect.hint == ""


def test_decimal_points_in_a_file_with_semicolons(tmp_path: Path) -> None:
    table = SMALL["changes.csv"].replace(",", ";")
    defects = defects_of(tmp_path, {**SMALL, "changes.csv": table})
    assert places(defects) == [
        ("number-unreadable", "changes.csv", 2, "mass"),
        ("number-unreadable", "changes.csv", 3, "mass"),
    ]
    assert "decimal commas" in defects[0].hint


@pytest.mark.parametrize("kind", ["nothing", "file"])
def test_no_folder(tmp_path: Path, kind: str) -> None:
    place = tmp_path / "trial"
    if kind == "file":
        place.write_text("not a folder")
    with pytest.raises(FieldDataError, match="the folder of a trial") as caught:
        read_trial(place)
    assert [d.code for d in caught.value.defects] == ["file-missing"]
    assert caught.value.defects[0].where == Where(str(place))


def test_an_empty_folder_lacks_every_required_file(tmp_path: Path) -> None:
    assert places(defects_of(tmp_path, {})) == [
        ("file-missing", f, 0, "")
        for f in (
            "density.csv", "drafts.csv", "hydrostatics.csv", "readings.csv", "shifts.csv", TOML,
        )
    ]  # fmt: skip


def test_a_folder_in_the_place_of_a_file(tmp_path: Path) -> None:
    (tmp_path / "tanks.csv").mkdir()
    found = places(defects_of(tmp_path, without("tanks.csv")))
    assert found == [("file-unreadable", "tanks.csv", 0, "")]
