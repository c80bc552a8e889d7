"""The hull's offsets are read as they stand, with or without the rest of the trial."""

from __future__ import annotations

import hashlib
import itertools
import math
from typing import TYPE_CHECKING

import pytest
from hypothesis import given
from hypothesis import strategies as st
from small_trial import (
    BOTH,
    HULL,
    SMALL,
    beside,
    changed,
    map_columns,
    table_rows,
    table_text,
    write,
)

from incline.errors import FieldDataError, Where
from incline.reading import read_offsets, read_trial
from incline.reading.sections import area, crossing, deck_crossing
from incline.record import Body, OffsetPoint, Offsets, Stated, Station

if TYPE_CHECKING:
    from collections.abc import Mapping
    from pathlib import Path

FT = 0.3048  # m, by definition (NIST SP 811, appendix B.6)


def offsets(folder: Path, files: Mapping[str, str | None]) -> Offsets:
    found = read_trial(write(folder, files)).offsets
    assert found is not None
    return found


def bodies(folder: Path, files: Mapping[str, str | None]) -> list[list[tuple[object, ...]]]:
    """Stations of each body without the places they were read from."""
    return [
        [(s.name, s.x, s.starboard, s.port) for s in body.stations]
        for body in offsets(folder, files).bodies
    ]


def test_the_record_says_what_the_files_say(tmp_path: Path) -> None:
    trial = read_trial(write(tmp_path, HULL))
    side = (OffsetPoint(0.0, 0.0), OffsetPoint(6.0, 0.0, "chine"), OffsetPoint(6.0, 5.0, "deck"))
    skeg = (OffsetPoint(0.0, -1.0), OffsetPoint(0.25, -1.0), OffsetPoint(0.25, 0.0))
    line = (OffsetPoint(0.0, 0.0), OffsetPoint(0.0, 0.0))

    def station(name: str, x: float, points: tuple[OffsetPoint, ...], row: int) -> Station:
        where = Where("offsets.csv", row)
        return Station(name=name, x=x, starboard=points, port=points, where=where)

    assert trial.offsets == Offsets(
        bodies=(
            Body(
                name="barge",
                stations=(
                    station("0", 0.0, side, 2),
                    station("1", 30.0, side, 5),
                    station("2", 60.0, side, 8),
                ),
            ),
            Body(
                name="skeg",
                kind="appendage",
                y=3.0,
                mirrored=True,
                stations=(
                    station("a", 2.0, skeg, 14),
                    station("b", 6.0, skeg, 17),
                    station("c", 10.0, line, 20),
                ),
            ),
        ),
        allowance=0.005,
        stated={
            "volume": Stated(0.003, "normal"),
            "km": Stated(
                pytest.approx(0.006 / math.sqrt(3.0), rel=1e-15), "rectangular"
            ),  # JCGM 100:2008, 4.3.7
        },
    )
    first, _, last = trial.offsets.bodies[0].stations
    assert first.starboard is first.port
    assert last.starboard is not last.port
    assert trial.table is None
    assert trial.remarks == ()
    settings = trial.settings
    assert (settings.method, settings.use, settings.layers) == (None, "offsets", False)


def test_a_table_needs_no_offsets(tmp_path: Path) -> None:
    trial = read_trial(write(tmp_path, SMALL))
    assert trial.offsets is None
    assert trial.table is not None


def test_x_from_amidships(tmp_path: Path) -> None:
    files = {
        **HULL,
        "trial.toml": HULL["trial.toml"].replace("after perpendicular", "amidships"),
        "offsets.csv": map_columns(HULL["offsets.csv"], r"x .*", lambda c: str(float(c) - 30.0)),
    }
    write(tmp_path / "b", files)
    found, expected = read_offsets(tmp_path / "b"), read_offsets(write(tmp_path / "a", HULL))
    assert found.x_origin == "amidships"
    assert found.offsets == expected.offsets  # exact: every x is a multiple of a half


def test_feet_and_inches(tmp_path: Path) -> None:
    text = map_columns(HULL["offsets.csv"], r"(x|half breadth) .*", lambda c: f"{float(c) / FT!r}")
    text = text.replace("x [m]", "x [ft]").replace("half breadth [m]", "half breadth [ft]")
    text = map_columns(
        text, r"height .*", lambda c: {"5": "16 ft 4 7/8 in", "-1": "-3'-3\""}.get(c, c)
    )
    found = bodies(tmp_path / "a", {**HULL, "offsets.csv": text})
    expected = bodies(tmp_path / "b", HULL)
    for (_, x, side, _), (_, x_metric, side_metric, _) in zip(
        itertools.chain(*found), itertools.chain(*expected), strict=True
    ):
        assert x == pytest.approx(x_metric, rel=1e-15)
        assert [p.y for p in side] == pytest.approx([p.y for p in side_metric], rel=1e-15)
    deck, keel = found[0][0][2][-1], found[1][0][2][0]
    assert deck.z == pytest.approx((16 + 4.875 / 12) * FT, rel=1e-15)
    assert keel.z == pytest.approx(-3.25 * FT, rel=1e-15)


def test_semicolons_and_decimal_commas(tmp_path: Path) -> None:
    rows = [[c.replace(".", ",") for c in row] for row in table_rows(HULL["offsets.csv"])]
    files = {**HULL, "offsets.csv": table_text(rows, ";")}
    assert bodies(tmp_path / "a", files) == bodies(tmp_path / "b", HULL)


def test_sides_in_words_and_between_each_other(tmp_path: Path) -> None:
    rows = table_rows(HULL["offsets.csv"])
    rows[7:13] = [rows[n] for n in (10, 7, 8, 11, 12, 9)]
    text = table_text(rows).replace(",S,", ",Starboard,").replace(",P,", ",port,")
    assert bodies(tmp_path / "a", {**HULL, "offsets.csv": text}) == bodies(tmp_path / "b", HULL)


def test_sides_that_differ(tmp_path: Path) -> None:
    text = HULL["offsets.csv"].replace("2,60,6,5,P,deck", "2,60,5.5,4.5,P,deck")
    last = offsets(tmp_path, {**HULL, "offsets.csv": text}).bodies[0].stations[-1]
    assert last.starboard[-1] == OffsetPoint(6.0, 5.0, "deck")
    assert last.port[-1] == OffsetPoint(5.5, 4.5, "deck")


def test_a_body_to_port(tmp_path: Path) -> None:
    for name, y in (("a", "3 m P"), ("b", "-3 m")):
        found = offsets(tmp_path / name, changed("trial.toml", "3 m S", y, HULL))
        assert found.bodies[1].y == -3.0


def test_bodies_station_by_station(tmp_path: Path) -> None:
    """The rows of the bodies may alternate; those of a station stand together."""
    rows = table_rows(HULL["offsets.csv"])
    order = [*rows[:4], *rows[13:16], *rows[4:7], *rows[16:19], *rows[7:13], *rows[19:]]
    files = {**HULL, "offsets.csv": table_text(order)}
    assert bodies(tmp_path / "a", files) == bodies(tmp_path / "b", HULL)


def test_one_line_in_any_spelling(tmp_path: Path) -> None:
    text = HULL["offsets.csv"].replace("2,60,6,0,S,chine", "2,60,6,0,S,CHINE")
    found = offsets(tmp_path, {**HULL, "offsets.csv": text}).bodies[0].stations
    assert {s.starboard[1].line for s in found} == {"chine"}


def test_two_stations_at_one_place_have_one_x(tmp_path: Path) -> None:
    """A break written in metres on one side and in feet on the other: 30 m is 98 ft 5.1 in."""
    head = HULL["offsets.csv"].split("\n")[0].removesuffix(",side,line,body")
    box = "0,0", "6,0", "6,5"
    places = (("0", "0"), ("1", "30"), ("1a", f"{30 / FT!r} ft"), ("2", "60"))
    rows = [f"{name},{x},{point}" for name, x in places for point in box]
    files = {
        **HULL,
        "trial.toml": SMALL["trial.toml"] + '\n[offsets]\nvolume = "extreme"\n',
        "offsets.csv": "\n".join([head, *rows]),
    }
    found = offsets(tmp_path, files)
    assert [s.x for s in found.bodies[0].stations] == [0.0, 30.0, 30.0, 60.0]
    assert (found.bodies[0].name, found.allowance) == ("hull", None)


@pytest.mark.parametrize("method", ["straight-line", "wall-sided", "heeled-hull"])
def test_choices(tmp_path: Path, method: str) -> None:
    sections = f'[method]\nheel = "{method}"\n\n[density]\nprofile = "layers"\n\n[offsets]'
    found = read_trial(write(tmp_path, changed("trial.toml", "[offsets]", sections, HULL))).settings
    assert (found.method, found.layers) == (method, True)


# remarks


def test_both_descriptions_without_a_choice(tmp_path: Path) -> None:
    files = {**HULL, "hydrostatics.csv": SMALL["hydrostatics.csv"]}
    trial = read_trial(write(tmp_path / "a", files))
    assert trial.table is not None
    assert trial.settings.use == "offsets"
    (remark,) = trial.remarks
    assert "does not say which to use: the offsets count" in remark
    for use in ("offsets", "table"):
        text = f'[hydrostatics]\nuse = "{use}"'
        chosen = read_trial(
            write(tmp_path / use, changed("trial.toml", "[hydrostatics]", text, files))
        )
        assert chosen.settings.use == use
        assert chosen.remarks == ()


def test_a_body_without_a_mirror_image(tmp_path: Path) -> None:
    files = changed("trial.toml", "mirrored = true\n", "", HULL)
    (remark,) = read_trial(write(tmp_path, files)).remarks
    assert remark.startswith("The body skeg lies to starboard")


def test_a_slack_box_without_its_depth(tmp_path: Path) -> None:
    trial = read_trial(write(tmp_path, changed("tanks.csv", "box,1.2", "box")))
    assert not trial.tanks[0].box
    assert trial.tanks[0].fsm == 1.0 * 4 * 3**3 / 12
    (remark,) = trial.remarks
    assert remark.startswith("The tank 1 P is a box without its depth")


def test_a_tank_that_is_no_box(tmp_path: Path) -> None:
    text = beside("tanks.csv", {"u y [m]": "0 0 . 0"}).replace("4,3,box,1.2", "4,3,,1.2")
    text = text.replace("0.5,,,10,-2", "0.5,,6,10,-2")
    trial = read_trial(write(tmp_path, {**SMALL, "tanks.csv": text}))
    assert not trial.tanks[0].box
    assert trial.remarks == ()


# the hull by itself


def test_the_hull_by_itself(tmp_path: Path) -> None:
    two = {name: HULL[name] for name in ("trial.toml", "offsets.csv")}
    found = read_offsets(write(tmp_path / "a", two))
    trial = read_trial(write(tmp_path / "b", HULL))
    assert (found.offsets, found.vessel) == (trial.offsets, trial.vessel)
    assert (found.units, found.density, found.remarks) == ("metric", None, ())
    digest = hashlib.sha256()
    for name in sorted(two):
        data = two[name].encode()
        digest.update(name.encode() + b"\0" + str(len(data)).encode() + b"\0" + data)
    assert found.digest == digest.hexdigest()


def test_the_hull_before_the_test(tmp_path: Path) -> None:
    """What the test will add need not be there, and what is unknown elsewhere does not matter."""
    head, _, rest = HULL["trial.toml"].partition("[test]")
    sections = rest[rest.index("[offsets]") :]
    text = f"""{head}
[test]
date = "not yet"
weather = 3
[axes]
x_origin = "after perpendicular"
[output]
units = "us"
[hydrostatics]
density = "64 lb/ft3"
stations = 11
[drawing]
number = 7
{sections}"""
    folder = write(tmp_path, {"trial.toml": text, "offsets.csv": HULL["offsets.csv"]})
    found = read_offsets(folder)
    assert found.units == "us"
    assert found.density == pytest.approx(1.0252, abs=5e-5)  # 64 lb/ft3 of salt water, recalled
    assert [b.name for b in found.offsets.bodies] == ["barge", "skeg"]


@pytest.mark.parametrize(
    ("files", "expected"),
    [
        ({"offsets.csv": None}, [("file-missing", "offsets.csv")]),
        ({"trial.toml": None}, [("file-missing", "trial.toml")]),
        ({"offsets.csv": HULL["offsets.csv"].split("\n")[0]}, [("table-empty", "offsets.csv")]),
        ({"offsets.csv": ""}, [("table-empty", "offsets.csv")]),
        (
            {
                "offsets.csv": HULL["offsets.csv"].replace("1,30,6,0,", "1,30,six,0,"),
                "trial.toml": HULL["trial.toml"].replace('"metric"', '"imperial"'),
            },
            [("number-unreadable", "offsets.csv"), ("value-wrong", "trial.toml")],
        ),
    ],
)
def test_defects_of_the_hull_by_itself(
    tmp_path: Path, files: dict[str, str | None], expected: list[tuple[str, str]]
) -> None:
    with pytest.raises(FieldDataError, match=r"found .*; expected ") as caught:
        read_offsets(write(tmp_path, {**HULL, **files}))
    assert [(d.code, d.where.file) for d in caught.value.defects] == expected


def test_no_folder(tmp_path: Path) -> None:
    with pytest.raises(FieldDataError, match="the folder of a trial"):
        read_offsets(tmp_path / "trial")


def test_the_hull_of_a_whole_trial(tmp_path: Path) -> None:
    folder = write(tmp_path, BOTH)
    assert read_offsets(folder).offsets == read_trial(folder).offsets


# the plane geometry of sections

CURVES = st.lists(st.floats(0.05, 1.0), min_size=4, max_size=30)


def arc(steps: list[float]) -> list[tuple[float, float]]:
    """Points on a quarter of an ellipse, 6 m wide and 5 m high, from its lowest point upwards."""
    angles = [0.0, *itertools.accumulate(steps)]
    share = 0.5 * math.pi / angles[-1]
    return [(6.0 * math.sin(a * share), 5.0 - 5.0 * math.cos(a * share)) for a in angles]


@given(CURVES)
def test_a_convex_side_does_not_cross_itself(steps: list[float]) -> None:
    side = arc(steps)
    assert crossing(side) is None
    assert deck_crossing(side, side[-1][1]) is None
    assert 0.0 < area(side, side[-1][1]) < 6.0 * 5.0 * math.pi / 4.0


@given(CURVES, st.data())
def test_two_points_in_the_wrong_order_cross(steps: list[float], data: st.DataObject) -> None:
    """Of four points on a convex curve the first and third, second and fourth join across."""
    side = arc(steps)
    k = data.draw(st.integers(1, len(side) - 3))
    side[k], side[k + 1] = side[k + 1], side[k]
    assert crossing(side) == (k, k + 2)


@given(st.floats(0.1, 4.9), st.floats(0.1, 4.9))
def test_a_height_out_of_order_on_an_upright_side(a: float, b: float) -> None:
    """The line runs back on itself wherever the second height is below the first."""
    side = [(0.0, 0.0), (6.0, 0.0), (6.0, a), (6.0, b), (6.0, 5.0)]
    if abs(a - b) > 1e-3:
        assert (crossing(side) is None) == (a < b)


def test_areas_of_known_sections() -> None:
    assert area([(0, 0), (6, 0), (6, 5)], 5) == 30.0
    assert area([(0, 0), (6, 3)], 3) == 9.0
    assert area([(0, 5), (6, 5), (6, 0)], 0) == -30.0
    assert area([(0, 1), (2, 1), (2, 0), (6, 0), (6, 5)], 5) == 28.0  # a tunnel of 2 m by 1 m
