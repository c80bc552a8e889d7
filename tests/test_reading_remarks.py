"""What is read as it stands but looks like a slip is said in a remark, and only then."""

from __future__ import annotations

import re
from typing import TYPE_CHECKING, Any

import pytest
from small_trial import SMALL, changed, from_amidships, write

from incline.reading import read_trial

if TYPE_CHECKING:
    from collections.abc import Mapping
    from pathlib import Path


def remarks(folder: Path, files: Mapping[str, str | None]) -> tuple[str, ...]:
    return read_trial(write(folder, files)).remarks


def box(drafts: list[float], **slips: tuple[int, str]) -> str:
    """A table of the 60 m x 12 m box, with the figure of one row of a column replaced."""
    columns = {
        "draft": [f"{t:.2f}" for t in drafts],
        "volume": [f"{720 * t:.1f}" for t in drafts],
        "lcb": ["30"] * len(drafts),
        "kb": [f"{t / 2:.3f}" for t in drafts],
        "km": [f"{t / 2 + 12 / t:.3f}" for t in drafts],
        "area": ["720"] * len(drafts),
    }
    for name, (row, figure) in slips.items():
        columns[name][row - 2] = figure
    units = {"volume": "m3", "area": "m2"}
    header = ",".join(f"{name} [{units.get(name, 'm')}]" for name in columns)
    return "\n".join([header, *map(",".join, zip(*columns.values(), strict=True))])


DRAFTS = [2.0 + 0.2 * k for k in range(11)]


@pytest.mark.parametrize(
    ("slips", "told"),
    [
        ({"km": (7, "5.86")}, "Row 7 of hydrostatics.csv: km 5.86 does not"),  # for 5.5
        ({"km": (3, "5.56")}, "Row 3 of hydrostatics.csv: km 5.56 does not"),  # for 6.555
        ({"volume": (7, "2170.0")}, "Row 7 of hydrostatics.csv: volume 2170.0 does not"),
        ({"lcb": (11, "30.9")}, "Row 11 of hydrostatics.csv: lcb 30.9 does not"),
        ({"area": (7, "770")}, "From row 6 to row 7"),  # 3.5 % too much in each mean
    ],
)
def test_a_figure_off_its_curve(
    tmp_path: Path, slips: dict[str, tuple[int, str]], told: str
) -> None:
    found, *_ = remarks(tmp_path, {**SMALL, "hydrostatics.csv": box(DRAFTS, **slips)})
    assert found.startswith(told)
    assert re.search(r"check the figures?\.$", found)


def test_two_figures_off_their_curves(tmp_path: Path) -> None:
    table = box(DRAFTS, km=(4, "6.9"), volume=(9, "2500.0"))
    found = remarks(tmp_path, {**SMALL, "hydrostatics.csv": table})
    assert [r.split(": ")[1].split(" ")[0] for r in found if r.startswith("Row")] == [
        "volume",
        "km",
    ]


def test_the_curve_is_named_in_the_unit_of_the_column(tmp_path: Path) -> None:
    """The box has KM = T / 2 + B^2 / (12 T) = 5.5 m at 3 m."""
    (found,) = remarks(tmp_path, {**SMALL, "hydrostatics.csv": box(DRAFTS, km=(7, "5.86"))})
    near = re.search(r"passes near ([0-9.]+);", found)
    assert near is not None
    assert float(near[1]) == pytest.approx(5.5, abs=0.002)  # figures are rounded to 0.001 m


@pytest.mark.parametrize(
    "drafts", [DRAFTS, [0.2, 0.4, 0.6, 1.0, 1.5, 3.5], [2.5, 3.0, 3.5], [2.0, 4.0]]
)
def test_a_smooth_table_is_not_remarked_on(tmp_path: Path, drafts: list[float]) -> None:
    """The KM of the box falls as 1 / T towards small drafts, without a slip in it."""
    assert remarks(tmp_path, {**SMALL, "hydrostatics.csv": box(drafts)}) == ()


def test_a_chine_is_no_slip(tmp_path: Path) -> None:
    """A wedge of 60 degrees below the chine at 3 m and upright sides above: KM has a corner there.

    Below: area 2 L T cot, volume L T^2 cot, KB 2 T / 3, I = 2 L (T cot)^3 / 3.
    """
    cot, length, chine = 2.0, 60.0, 3.0
    lines = ["draft [m],volume [m3],lcb [m],kb [m],km [m],area [m2]"]
    for t in DRAFTS:
        wedge, side = min(t, chine), max(t - chine, 0.0)
        half = wedge * cot
        volume = length * half * wedge + 2.0 * length * half * side
        moment = (
            length * half * wedge * wedge * 2 / 3 + 2.0 * length * half * side * (t + chine) / 2
        )
        kb, bm = moment / volume, 2.0 * length * half**3 / 3.0 / volume
        lines.append(f"{t:.2f},{volume:.1f},30,{kb:.3f},{kb + bm:.3f},{2 * length * half:.1f}")
    assert remarks(tmp_path, {**SMALL, "hydrostatics.csv": "\n".join(lines)}) == ()


def test_a_table_by_displacement_from_amidships(tmp_path: Path) -> None:
    """What the curve gives is told in the column's own unit and from its own origin."""
    rows = [line.split(",") for line in box(DRAFTS, lcb=(7, "31")).split("\n")]
    rows[0][1] = "displacement [t]"
    for row in rows[1:]:
        row[1], row[2] = f"{1.025 * float(row[1]):.2f}", str(float(row[2]) - 30.0)
    rows[5][1] = "3000.00"  # for 2066.40
    files = from_amidships()
    toml = files["trial.toml"].replace("[hydrostatics]", '[hydrostatics]\ndensity = "1.025 t/m3"')
    table = "\n".join(map(",".join, rows)).replace("3000.00", "2090.00")
    found = remarks(tmp_path, {**files, "trial.toml": toml, "hydrostatics.csv": table})
    assert "displacement 2090.00 does not" in found[0]
    assert "near 2066.4;" in found[0]
    assert "lcb 1.0 does not" in found[1]


def test_test_weights_unlike_each_other(tmp_path: Path) -> None:
    (found,) = remarks(tmp_path, changed("weights.csv", "B,10,CAL", "B,1.99,CAL"))
    assert "B of 1.99 t and A of 10 t differ by more than a factor of 5" in found
    assert remarks(tmp_path / "b", changed("weights.csv", "B,10,CAL", "B,2,CAL")) == ()


@pytest.mark.parametrize("celsius", ["-3.5", "41"])
def test_water_of_an_odd_temperature(tmp_path: Path, celsius: str) -> None:
    (found,) = remarks(tmp_path, changed("density.csv", "1,1025,9.5", f"1,1025,{celsius}"))
    assert f"at forward is recorded as {celsius} C" in found


@pytest.mark.parametrize("name", ["tanks.csv", "ledger.csv"])
def test_an_absent_table_is_named(tmp_path: Path, name: str) -> None:
    (found,) = remarks(tmp_path, {**SMALL, name: None})
    assert found.startswith(f"No {name}: no")
    header = {**SMALL, name: SMALL[name].split("\n", maxsplit=1)[0]}
    assert remarks(tmp_path / "b", header) == ()


def test_a_shift_at_which_no_weight_changes_place(tmp_path: Path) -> None:
    shifts = SMALL["shifts.csv"].replace("3,09:30,B,-4,,", "{}\n4,09:40,B,-4,,")
    readings = SMALL["readings.csv"].replace("\n3,", "\n4,")
    for row, said in (
        ("3,09:30,A,-4,,", True),
        ("3,09:30,B,4 S,30.5,5.5", True),
        ("3,09:30,B,4 S,30.5,6", False),
        ("3,09:30,,,,", False),
    ):
        files = {**SMALL, "shifts.csv": shifts.format(row), "readings.csv": readings}
        found = remarks(tmp_path / row.replace(" ", "").replace(":", ""), files)
        assert found == (("At shift 3 no weight changes place: check its rows.",) if said else ())


@pytest.mark.parametrize(
    ("time", "said"), [("08:20", True), ("09:09", True), ("09:10", False), ("23:59", True)]
)
def test_a_clock_that_runs_backwards(tmp_path: Path, time: str, said: bool) -> None:
    found = remarks(tmp_path, changed("shifts.csv", "2,09:20", f"2,{time}"))
    assert (len(found) == 1 and "the clock runs backwards" in found[0]) is (
        said and time != "23:59"
    )


def test_shifts_past_midnight(tmp_path: Path) -> None:
    text = SMALL["shifts.csv"]
    for old, new in (("9:00", "22:50"), ("09:10", "23:40"), ("09:20", "00:30"), ("09:30", "01:20")):
        text = text.replace(old, new)
    assert remarks(tmp_path, {**SMALL, "shifts.csv": text}) == ()


def test_marks_that_do_not_look_counted_from_amidships(tmp_path: Path) -> None:
    files = from_amidships()
    drafts = "x [m],side,draft [m]\n1.5,C,3\n30,C,3\n"
    (found,) = remarks(tmp_path, {**files, "drafts.csv": drafts})
    assert "no draft mark stands abaft it: check x_origin" in found


def test_sides_in_words(tmp_path: Path) -> None:
    drafts = SMALL["drafts.csv"].replace("1.5,P", "1.5,Port").replace("1.5,S", "1.5,Stbd")
    drafts = (
        drafts.replace("30,P", "30,p").replace("30,S", "30,STARBOARD").replace(",C,", ",center,")
    )
    found = read_trial(write(tmp_path, {**SMALL, "drafts.csv": drafts})).drafts
    assert [d.side for d in found] == ["P", "S", "P", "S", "C"]


@pytest.mark.parametrize("demo", ["workboat-metric", "supply-vessel-us"])
def test_nothing_is_remarked_on_in_the_demo_trials(pytestconfig: Any, demo: str) -> None:
    assert read_trial(pytestconfig.rootpath / "demo_trials" / demo).remarks == ()
