"""Slips in the offsets that a ship could have are told in a remark; fair hulls get none."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

import pytest
from hull_ships import SHIPS
from hull_trial import write_hull_trial
from offset_slips import Sections, launch, written
from small_trial import HULL, changed, map_columns, write

from incline.reading import read_offsets, read_trial

if TYPE_CHECKING:
    from collections.abc import Mapping
    from pathlib import Path


def remarks(folder: Path, files: Mapping[str, str | None]) -> tuple[str, ...]:
    return read_offsets(write(folder, files)).remarks


def slipped(station: int, point: int, column: int, value: float) -> Sections:
    """The launch with one figure written otherwise."""
    hull = launch()
    place = list(hull[station][1][point])
    place[column] = value
    hull[station][1][point] = (place[0], place[1])
    return hull


# fair hulls


@pytest.mark.parametrize("count", [11, 21, 31])
@pytest.mark.parametrize("name", SHIPS)
def test_fair_ships_are_not_remarked_on(tmp_path: Path, name: str, count: int) -> None:
    write_hull_trial(
        tmp_path, SHIPS[name], degrees=(0.0, 2.0, -2.0, 0.0), list_tan=0.0, stations=count
    )
    assert not [r for r in read_trial(tmp_path).remarks if "offsets.csv" in r]


@pytest.mark.parametrize("places", [1, 2, 3])
def test_rounded_figures_are_not_remarked_on(tmp_path: Path, places: int) -> None:
    """Rounding to a decimetre is 0.8 % of the beam of 6 m, and that is less than a slip."""
    hull = [
        (x, [(round(y, places), round(z, places)) for y, z in points]) for x, points in launch()
    ]
    assert remarks(tmp_path, written(hull)) == ()


def test_the_demo_trial_with_offsets_is_not_remarked_on(pytestconfig: Any) -> None:
    assert read_trial(pytestconfig.rootpath / "demo_trials" / "chine-metric").remarks == ()


def test_undeclared_knuckles_are_not_remarked_on(tmp_path: Path) -> None:
    """The bottom rises in straight lines from two stations to the ends; a forecastle steps up."""
    hull: Sections = []
    for k in range(10):
        x = 19.0 * k / 9.0
        keel = 0.25 * max(19.0 / 3.0 - x, 0.0) + 0.3 * max(x - 38.0 / 3.0, 0.0)
        deck = 2.9 + (1.0 if x > 12.0 else 0.0)
        hull.append((x, [(0.0, keel), (2.7, keel + 0.4), (3.0, deck)]))
    assert remarks(tmp_path, written(hull)) == ()


# a slip in one figure


@pytest.mark.parametrize("station", range(1, 9))
@pytest.mark.parametrize(
    "slip", [lambda y: y - 1.0, lambda y: y - 0.5, lambda y: y - 0.27, lambda y: y + 0.27]
)
def test_a_half_breadth_off_the_fair_line(tmp_path: Path, station: int, slip: Any) -> None:
    """Whole digits and digits changed about, such as 1.68 for 2.68 or 2.47 for 2.74."""
    right = launch()[station][1][2][0]
    wrong = slip(right)
    if wrong < 0.0:  # at the last but one the launch is 0.77 m wide: refused as a number
        wrong = right + 1.0
    (found,) = remarks(tmp_path, written(slipped(station, 2, 0, wrong)))
    row = 4 * station + 4
    assert found.startswith(f'Station "{station}" of hull (rows {row - 2} to {row + 1} of offsets')
    assert f"half breadth {wrong:g} in row {row} (point 3 of 4)" in found


@pytest.mark.parametrize("station", range(1, 9))
def test_a_height_with_its_sign_lost(tmp_path: Path, station: int) -> None:
    wrong = -launch()[station][1][1][1]
    found = remarks(tmp_path, written(slipped(station, 1, 1, wrong)))
    assert f"height {wrong:g} in row {4 * station + 3} (point 2 of 4)" in found[-1]


def test_the_curve_passes_near_the_right_figure(tmp_path: Path) -> None:
    """The lines are cubic or nearly so: the curve gives the figure within the rounding."""
    right = launch()[3][1][2][0]
    (found,) = remarks(tmp_path, written(slipped(3, 2, 0, 1.68)))
    near = float(found.split("passes near ")[1].split(".  ")[0].split(". Check")[0])
    assert near == pytest.approx(right, abs=0.02)  # a leave-one-out cubic doubles 0.005 of each


def test_a_line_by_its_name_and_in_its_unit(tmp_path: Path) -> None:
    rows = written(slipped(3, 2, 0, 1.68))["offsets.csv"].split("\n")
    lines = ["line", *["keel", "garboard", "chine", "deck edge"] * 10]
    text = "\n".join(f"{row},{line}" for row, line in zip(rows, lines, strict=True))
    feet = map_columns(text, r"half breadth .*", lambda c: f"{float(c) / 0.3048:.3f}")
    files = written(launch()) | {
        "offsets.csv": feet.replace("half breadth [m]", "half breadth [ft]")
    }
    (found,) = remarks(tmp_path, files)
    assert "half breadth 5.512 in row 16 (line chine)" in found  # 1.68 m
    near = float(found.split("passes near ")[1].split(". Check")[0])
    assert near == pytest.approx(launch()[3][1][2][0] / 0.3048, abs=0.05)


@pytest.mark.parametrize(("station", "other"), [(4, 7), (5, 8), (6, 3), (7, 4), (8, 5)])
def test_a_station_with_the_figures_of_another(tmp_path: Path, station: int, other: int) -> None:
    hull = launch()
    hull[station] = (hull[station][0], hull[other][1])
    (found,) = remarks(tmp_path, written(hull))
    assert found.startswith(f'Station "{station}" of hull')


def test_one_station_with_another_number_of_points(tmp_path: Path) -> None:
    hull = launch()
    del hull[5][1][1]
    (found,) = remarks(tmp_path, written(hull))
    assert found.startswith('Station "5" of hull (rows 22 to 24 of offsets.csv) has 3 points')
    assert "every other station of the body 4 points" in found


def test_a_slip_where_stations_have_different_numbers_of_points(tmp_path: Path) -> None:
    """Points in the middle of the topsides of every second station change nothing of the hull."""
    hull = launch()
    for _, points in hull[::2]:
        (y, z), (y_deck, z_deck) = points[2:]
        points.insert(3, ((y + y_deck) / 2.0, (z + z_deck) / 2.0))
    assert remarks(tmp_path / "fair", written(hull)) == ()
    hull[5][1][2] = (1.68, hull[5][1][2][1])
    (found,) = remarks(tmp_path / "slip", written(hull))
    assert found.startswith('Station "5" of hull')
    assert "at height" in found


# datum, breadth, and stations that are not there


def moved(by: float) -> dict[str, str]:
    """The launch with every height counted from another datum."""
    return written([(x, [(y, z + by) for y, z in points]) for x, points in launch()])


@pytest.mark.parametrize("by", [-1.1, -0.3, 0.3, 0.9])
def test_heights_from_another_datum(tmp_path: Path, by: float) -> None:
    """The depth is 2.9 m: a tenth of it is beyond what sheer and rake of keel account for."""
    edge, lowest = remarks(tmp_path, moved(by))
    assert edge.startswith("The deck edge amidships is")
    assert "the depth in [vessel] is 2.9 m" in edge
    assert f"lies {abs(by):g} m {'above' if by > 0.0 else 'below'} the baseline" in lowest


def test_an_appendage_below_the_baseline_is_no_other_datum(tmp_path: Path) -> None:
    assert remarks(tmp_path, HULL) == ()  # its skegs reach 1 m below


def test_a_cambered_deck_is_not_the_deck_edge(tmp_path: Path) -> None:
    hull = [(x, [*points, (0.0, points[-1][1] + 0.5)]) for x, points in launch()]
    assert remarks(tmp_path, written(hull)) == ()


@pytest.mark.parametrize("factor", [0.94, 1.06])
def test_a_breadth_unlike_the_beam(tmp_path: Path, factor: float) -> None:
    hull = [(x, [(y * factor, z) for y, z in points]) for x, points in launch()]
    (found,) = remarks(tmp_path, written(hull))
    assert f"The largest breadth in offsets.csv is {6.0 * factor:.4g} m" in found
    assert "the beam in [vessel] is 6 m" in found


@pytest.mark.parametrize(
    ("left", "told"),
    [
        (slice(1, 10), "The first of all stations in offsets.csv"),
        (slice(0, 9), "The last of all stations in offsets.csv"),
    ],
)
def test_an_end_without_its_station(tmp_path: Path, left: slice, told: str) -> None:
    (found,) = remarks(tmp_path, written(launch()[left]))
    assert found.startswith(told)
    assert "2.111 m" in found  # 19 m / 9


def test_a_hull_that_ends_in_a_line_is_whole(tmp_path: Path) -> None:
    hull = launch()[:9]
    hull[-1] = (hull[-1][0], [(0.0, z) for _, z in hull[-1][1]])
    assert not [r for r in remarks(tmp_path, written(hull)) if "last of all" in r]


@pytest.mark.parametrize("station", range(2, 8))
def test_a_station_missing_between(tmp_path: Path, station: int) -> None:
    hull = launch()
    del hull[station]
    (found,) = remarks(tmp_path, written(hull))
    assert found.startswith(f'Between station "{station - 1}" and station "{station}"')
    assert "there are 4.22" in found  # two steps of 2.111 m


def test_gaps_that_lack_no_station(tmp_path: Path) -> None:
    """Half steps at both ends, and a parallel body drawn by its two ends."""
    box: Any = [(0.0, 0.0), (3.0, 0.0), (3.0, 2.9)]
    ends: Any = [(0.0, 0.5), (2.0, 0.6), (2.5, 2.9)]
    places = [0.0, 1.0, 2.0, 4.0, 15.0, 17.0, 18.0, 19.0]
    hull = [(x, list(box if 4.0 <= x <= 15.0 else ends)) for x in places]
    assert not [r for r in remarks(tmp_path, written(hull)) if "missing station" in r]


@pytest.mark.parametrize(("x", "told"), [("61.1", False), ("61.3", True), ("-1.3", True)])
def test_a_draft_mark_outside_the_stations(tmp_path: Path, x: str, told: bool) -> None:
    """Two per cent of 60 m is 1.2 m; the stations stand from 0 to 60 m."""
    found = read_trial(write(tmp_path, changed("drafts.csv", "58.5,", f"{x},", HULL))).remarks
    if not told:
        assert found == ()
        return
    (remark,) = found
    assert remark.startswith(f"Draft marks at x {x} m in drafts.csv stand outside the stations")
    assert "run from 0 m to 60 m" in remark
