"""Reading a trial: what is on paper is what is in the record, however the files are written."""

from __future__ import annotations

import dataclasses
import hashlib
import math
import re
from typing import TYPE_CHECKING, Any

import pytest
from small_trial import SMALL, changed, from_amidships, map_columns, table_rows, table_text, write

from incline.errors import FieldDataError, Where
from incline.reading import read_trial
from incline.record import Point

if TYPE_CHECKING:
    from collections.abc import Mapping
    from pathlib import Path

    from incline.record import Trial


def read(folder: Path, files: Mapping[str, str | bytes | None]) -> Trial:
    return read_trial(write(folder, files))


def content(value: Any) -> Any:
    """A record without the places, folder and digest of its files."""
    if isinstance(value, Where):
        return None
    if dataclasses.is_dataclass(value):
        names = {f.name for f in dataclasses.fields(value)} - {"folder", "digest"}
        return {n: content(getattr(value, n)) for n in names}
    return [content(v) for v in value] if isinstance(value, tuple) else value


def semicolons(text: str) -> str:
    rows = table_rows(text)
    for row in rows[1:]:
        row[:] = [c.replace(".", ",") for c in row]
    return table_text(rows, ";")


def test_the_record_says_what_the_files_say(tmp_path: Path) -> None:
    trial = read(tmp_path, SMALL)
    assert (trial.vessel.lpp, trial.vessel.beam, trial.vessel.depth) == (60.0, 12.0, 5.0)
    assert trial.occasion.date.isoformat() == "2026-02-03"
    assert [(w.id, w.mass, w.certificate) for w in trial.weights] == [
        ("A", 10.0, "CAL 1, sheet 2"),
        ("B", 10.0, "CAL 2"),
    ]
    assert [s.time for s in trial.shifts] == ["09:00", "09:10", "09:20", "09:30"]
    assert [[(m.weight, m.y) for m in s.moves] for s in trial.shifts] == [
        [("A", -4.0), ("B", 4.0)], [("A", 4.0)], [("A", -4.0)], [("B", -4.0)],
    ]  # fmt: skip
    assert [(r.kind, r.quantity, len(r.values)) for r in trial.readings[:4]] == [
        ("repeats", "length", 2),
        ("single", "angle", 1),
        ("swings", "length", 3),
        ("single", "angle", 1),
    ]
    assert trial.readings[6].values == (-0.111,)
    assert trial.readings[7].values == (-math.radians(1.592),)
    assert trial.readings[7].excluded == "bumped"
    assert trial.readings[4].note == "calm, no wash"
    assert [(d.side, d.y, d.draft, d.freeboard) for d in trial.drafts] == [
        ("P", -6.0, 3.0, None),
        ("S", 6.0, 3.0, None),
        ("P", -6.0, 3.0, 2.0),
        ("S", 6.0, 3.0, 2.0),
        ("C", 0.0, 3.0, None),
    ]
    assert [(s.density, s.share) for s in trial.samples] == [(1.025, 1.0), (1.025, 2.0)]
    assert trial.people[0].mass == pytest.approx(0.080, rel=1e-15)
    assert trial.people[0].centre == Point(20.0, -1.5, 6.0)
    assert trial.items[0].centre == Point(10.0, -2.5, 6.0)
    assert trial.items[2].to == Point(55.0, 0.0, 5.5)
    assert [(c.change, c.mass) for c in trial.changes] == [("aboard", 1.5), ("ashore", 0.5)]
    assert trial.table.bmt[0][1] == 4.0  # KM less KB
    assert trial.table.trims == (0.0,)
    assert trial.readings[4].where == Where("readings.csv", 6)
    assert trial.shifts[0].where == Where("shifts.csv", 3)  # below a comment
    assert trial.remarks == ()


def test_liquids(tmp_path: Path) -> None:
    box, full, empty, slack = read(tmp_path, SMALL).tanks
    assert box.mass == 4 * 3 * 0.5 * 1.0  # box of length, breadth, level
    assert box.fsm == 1.0 * 4 * 3**3 / 12
    assert [t.box for t in (box, full, empty, slack)] == [True, False, False, False]
    assert (full.mass, full.fsm) == (8.5, 0.0)
    assert (empty.mass, empty.fsm, empty.centre) == (0.0, 0.0, None)
    assert (slack.mass, slack.fsm, slack.fsm_basis) == (4.1, 2.05, "as recorded")


@pytest.mark.parametrize(
    "dialect",
    [
        pytest.param(lambda t: ("\ufeff" + t).encode(), id="byte order mark"),
        pytest.param(lambda t: t.replace("\n", "\r\n").encode(), id="CRLF"),
        pytest.param(lambda t: t.replace("\n", "\r").encode(), id="CR"),
        pytest.param(lambda t: t.rstrip("\n").encode(), id="no newline at the end"),
        pytest.param(
            lambda t: f'\n# a comment, "quoted\n{t}\n,,,\n  # end\n'.encode(), id="comments"
        ),
        pytest.param(lambda t: f'"# a comment, in quotes",,\n{t}'.encode(), id="quoted comment"),
        pytest.param(lambda t: t.replace("\n", ",,,\n").encode(), id="empty cells at the end"),
        pytest.param(lambda t: semicolons(t).encode(), id="semicolons"),
        pytest.param(
            lambda t: semicolons(t).replace("\n", ";;\r\n").encode(), id="semicolons CRLF"
        ),
        pytest.param(lambda t: re.sub(",(?! )", " ,\t", t).encode(), id="spaces round cells"),
        pytest.param(lambda t: t.replace(" [", "  [ ").replace("]", " ]").encode(), id="headings"),
    ],
)
def test_every_dialect_gives_the_same_record(tmp_path: Path, dialect: Any) -> None:
    other = {n: dialect(t) if n.endswith(".csv") else t for n, t in SMALL.items()}
    found, expected = read(tmp_path / "other", other), read(tmp_path / "plain", SMALL)
    assert content(found) == content(expected)
    assert found.digest != expected.digest


def test_toml_with_byte_order_mark_and_crlf(tmp_path: Path) -> None:
    text = "\ufeff" + SMALL["trial.toml"].replace("\n", "\r\n")
    found = read(tmp_path / "a", {**SMALL, "trial.toml": text})
    assert content(found) == content(read(tmp_path / "b", SMALL))


def test_headings_in_any_case_and_order(tmp_path: Path) -> None:
    rows = [row[::-1] for row in table_rows(SMALL["hydrostatics.csv"])]
    rows[0] = [heading.replace("draft", "DRAFT").replace("km", "Km") for heading in rows[0]]
    found = read(tmp_path / "a", {**SMALL, "hydrostatics.csv": table_text(rows)})
    assert found.table == read(tmp_path / "b", SMALL).table


def test_x_from_amidships(tmp_path: Path) -> None:
    found = content(read(tmp_path / "a", from_amidships()))
    expected = content(read(tmp_path / "b", SMALL))
    assert found["settings"].pop("x_origin") == "amidships"
    assert expected["settings"].pop("x_origin") == "after perpendicular"
    assert found == expected  # exact: every x is a multiple of a half


def test_feet_and_inches_in_metric_columns(tmp_path: Path) -> None:
    drafts = SMALL["drafts.csv"].replace("1.5,P,3.00", "1.5,P,9'-10 1/8\"")
    drafts = drafts.replace("1.5,S,3.00", '1.5,S,"9\' 10 1/8"""').replace(
        "58.5,C,3.00", "58.5,C,9 ft 10 1/8 in"
    )
    found = [d.draft for d in read(tmp_path, {**SMALL, "drafts.csv": drafts}).drafts]
    expected = (9 * 12 + 10 + 1 / 8) * 0.0254
    assert [found[0], found[1], found[4]] == pytest.approx([expected] * 3, rel=1e-15)


def test_us_units(tmp_path: Path) -> None:
    """The same lengths in feet and masses in long tons give the same record to rounding."""
    ton = 1.0160469088

    def us(text: str) -> str:
        text = map_columns(text, r".*\[m\]", lambda c: _scaled(c, 0.3048))
        text = map_columns(text, r".*\[t\]", lambda c: _scaled(c, ton))
        return text.replace("[m]", "[ft]").replace("[t]", "[LT]")

    files = {n: us(t) if n.endswith(".csv") else t for n, t in SMALL.items()}
    found, expected = read(tmp_path / "a", files), read(tmp_path / "b", SMALL)
    assert _numbers(content(found)) == pytest.approx(_numbers(content(expected)), rel=1e-12)


def _scaled(cell: str, unit: float) -> str:
    number, _, side = cell.partition(" ")
    return f"{float(number) / unit!r} {side}"


def _numbers(value: Any) -> list[float]:
    if isinstance(value, float):
        return [value]
    parts = value.values() if isinstance(value, dict) else value if isinstance(value, list) else ()
    return [n for part in parts for n in _numbers(part)]


def test_marks_from_the_underside_of_keel(tmp_path: Path) -> None:
    """The keel comes off drafts read at marks, not off freeboards, whose points are above baseline."""
    toml = SMALL["trial.toml"].replace(
        'marks_from = "baseline"', 'marks_from = "underside of keel"\nkeel_thickness = "250 mm"'
    )
    trial = read(tmp_path, {**SMALL, "trial.toml": toml})
    assert [d.draft for d in trial.drafts] == [2.75, 2.75, 3.0, 3.0, 2.75]
    assert trial.settings.keel_thickness == 0.25
    assert trial.table.drafts == (2.5, 3.0, 3.5)


def test_table_from_the_underside_of_keel(tmp_path: Path) -> None:
    toml = SMALL["trial.toml"].replace(
        'marks_from = "baseline"', 'marks_from = "baseline"\nkeel_thickness = "250 mm"'
    )
    toml = toml.replace("[hydrostatics]", '[hydrostatics]\ndrafts_from = "underside of keel"')
    trial = read(tmp_path, {**SMALL, "trial.toml": toml})
    assert trial.table.drafts == (2.25, 2.75, 3.25)
    assert [d.draft for d in trial.drafts] == [3.0] * 5
    assert trial.settings.keel_thickness == 0.0


def test_half_the_beam_is_taken_and_said(tmp_path: Path) -> None:
    trial = read(tmp_path, {**SMALL, "drafts.csv": SMALL["drafts.csv"].replace(",6\n", ",\n")})
    assert [d.y for d in trial.drafts] == [-6.0, 6.0, -6.0, 6.0, 0.0]
    assert len(trial.remarks) == 1
    assert "half the beam" in trial.remarks[0]


@pytest.mark.parametrize("y", ["6 P", "-6", "6"])
def test_marks_to_port_may_say_so_or_not(tmp_path: Path, y: str) -> None:
    files = changed("drafts.csv", "1.5,P,3.00,,,6", f"1.5,P,3.00,,,{y}")
    assert read(tmp_path, files).drafts[0].y == -6.0


def test_relative_density(tmp_path: Path) -> None:
    table = "place,relative density [1]\nforward,1.025\n"
    toml = SMALL["trial.toml"] + '\n[density]\nrelative_to = "0.999 t/m3"\n'
    trial = read(tmp_path, {**SMALL, "density.csv": table, "trial.toml": toml})
    assert trial.samples[0].density == pytest.approx(1.025 * 0.999, rel=1e-15)


def test_moments_in_place_of_moves(tmp_path: Path) -> None:
    shifts = "shift,moment [t m]\n0,0\n1,80\n2,0\n3,80 P\n"
    trial = read(tmp_path, {**SMALL, "shifts.csv": shifts, "weights.csv": None})
    assert [s.moment for s in trial.shifts] == [0.0, 80.0, 0.0, -80.0]
    assert all(not s.moves and not s.time for s in trial.shifts)
    assert trial.weights == ()
    assert "no test weight comes into the ledger" in trial.remarks[0]


def test_a_shift_at_which_nothing_moved(tmp_path: Path) -> None:
    text = SMALL["shifts.csv"].replace(
        "2,09:20,A,-4,29.5,5.5", "2,09:20,A,-4,29.5,5.5\n4,10:00,,,,"
    )
    files = {**SMALL, "shifts.csv": text.replace("3,09:30", "5,10:10")}
    files["readings.csv"] = SMALL["readings.csv"].replace("\n3,", "\n5,")
    assert [len(s.moves) for s in read(tmp_path, files).shifts] == [2, 1, 1, 0, 1]


def test_tangents_need_no_length(tmp_path: Path) -> None:
    rows = ["shift,device,reading [1]"]
    rows += [f"{n},{d},{t}" for n, t in enumerate((0, 0.0278, 0, "0.0278 P")) for d in ("P1", "I1")]
    files = changed("trial.toml", 'length = "4 m"\n', "")
    trial = read(tmp_path, {**files, "readings.csv": "\n".join(rows)})
    assert {r.quantity for r in trial.readings} == {"tangent"}
    assert trial.readings[-1].values == (-0.0278,)
    assert trial.devices[0].length is None


def test_a_reading_set_aside_beside_the_one_that_counts(tmp_path: Path) -> None:
    row = '2,P1,,0,,,mm,"calm, no wash",'
    files = changed("readings.csv", row, f"{row}\n2,P1,,35,,,mm,,misread")
    readings = [r for r in read(tmp_path, files).readings if (r.shift, r.device) == (2, "P1")]
    assert [r.excluded for r in readings] == ["", "misread"]


def test_table_by_displacement_tpc_and_mct(tmp_path: Path) -> None:
    """The box again: displacement 1.025 V, TPC = 1.025 Aw / 100, MCT = displacement BM_L / (100 L)."""
    table = (
        "draft [m],displacement [t],lcb [m],kb [m],bm [m],lcf [m],tpc [t/cm],mct [t m/cm]\n"
        "2.5,1845,30,1.25,4.8,30,7.38,36.9\n3,2214,30,1.5,4,30,7.38,36.9\n"
        "3.5,2583,30,1.75,3.428571,30,7.38,36.9\n"
    )
    toml = SMALL["trial.toml"].replace("[hydrostatics]", '[hydrostatics]\ndensity = "1025 kg/m3"')
    found = read(tmp_path / "a", {**SMALL, "hydrostatics.csv": table, "trial.toml": toml}).table
    expected = read(tmp_path / "b", SMALL).table
    for name in ("volume", "bmt", "area", "bml"):
        tolerance = 1e-7 if name == "bml" else 1e-12  # bml is written to six decimals in the other
        one, other = getattr(found, name)[0], getattr(expected, name)[0]
        assert one == pytest.approx(other, rel=tolerance), name
    assert "moment to change trim" in found.bml_basis


def test_table_for_several_trims_in_any_order_of_rows(tmp_path: Path) -> None:
    head = "draft [m],trim [m],volume [m3],lcb [m],kml [m],kb [m],km [m]\n"
    rows = [
        f"{draft},{trim},{720 * draft},{30 - trim},{100 + draft / 2},{draft / 2},6\n"
        for draft in (2.5, 3.0, 3.5)
        for trim in (0.5, -0.5, 0.0)
    ]
    table = read(tmp_path, {**SMALL, "hydrostatics.csv": head + "".join(rows)}).table
    assert table.trims == (-0.5, 0.0, 0.5)
    assert table.drafts == (2.5, 3.0, 3.5)
    assert [row[0] for row in table.lcb] == [30.5, 30.0, 29.5]
    assert table.bml == ((100.0,) * 3,) * 3
    assert table.area is None
    assert table.lcf is None


def test_optional_columns_left_blank_are_not_there(tmp_path: Path) -> None:
    text = map_columns(SMALL["hydrostatics.csv"], r"(lcf|area|bml) .*", lambda _: "")
    table = read(tmp_path, {**SMALL, "hydrostatics.csv": text}).table
    assert (table.lcf, table.area, table.bml, table.bml_basis) == (None, None, None, "")


@pytest.mark.parametrize("rest", [True, False], ids=["header only", "absent"])
def test_optional_tables(tmp_path: Path, rest: bool) -> None:
    files: dict[str, str | None] = {**SMALL}
    for name in ("tanks.csv", "ledger.csv", "changes.csv"):
        files[name] = SMALL[name].split("\n")[0] if rest else None
    trial = read(tmp_path, files)
    assert (trial.tanks, trial.items, trial.changes) == ((), (), ())


def test_rounded_masses_may_differ_by_their_rounding(tmp_path: Path) -> None:
    """0.2 m3 of 0.85 t/m3 is 0.17 t; 0.2 stands for 0.15 to 0.25, so 0.2 t may be written too."""
    files = changed("tanks.csv", "0.85,,10,8.5,", "0.85,,0.2,0.2,")
    assert read(tmp_path, files).tanks[1].mass == 0.2


def test_other_tables_are_named_in_a_remark(tmp_path: Path) -> None:
    trial = read(tmp_path, {**SMALL, "predicted.csv": "a,b\n1,2\n", "notes.txt": "nothing"})
    assert len(trial.remarks) == 1
    assert '"predicted.csv"' in trial.remarks[0]


def test_digest_is_over_the_names_lengths_and_bytes(tmp_path: Path) -> None:
    digest = hashlib.sha256()
    for name in sorted(SMALL):
        data = SMALL[name].encode()
        digest.update(name.encode() + b"\0" + str(len(data)).encode() + b"\0" + data)
    trial = read(tmp_path / "a", {**SMALL, "predicted.csv": "x"})
    assert trial.digest == digest.hexdigest()


@pytest.mark.parametrize("units", ["metric", "us"])
def test_a_blank_trial_lacks_only_what_is_to_be_filled_in(pytestconfig: Any, units: str) -> None:
    with pytest.raises(FieldDataError, match=r"vessel\.name") as caught:
        read_trial(pytestconfig.rootpath / "templates" / units)
    codes = {(d.code, d.where.file.split(".")[1]) for d in caught.value.defects}
    allowed = {("table-empty", "csv"), ("value-wrong", "toml"), ("key-missing", "toml")}
    assert codes <= allowed
    empty = {d.where.file for d in caught.value.defects if d.code == "table-empty"}
    assert empty == {
        f"{n}.csv" for n in ("shifts", "readings", "drafts", "density", "hydrostatics")
    }


@pytest.mark.parametrize("units", ["metric", "us"])
def test_a_blank_trial_has_every_table(pytestconfig: Any, units: str) -> None:
    names = {p.name for p in (pytestconfig.rootpath / "templates" / units).iterdir()}
    assert names == {*SMALL, "offsets.csv"}
