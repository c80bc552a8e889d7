"""A small valid trial as text: a box-shaped barge, two weights, four shifts, two devices.

The barge is 60 m long, 12 m wide and floats upright and level at 3 m in water of 1.025 t/m3, so
that its displacement is 2214 t, KB 1.5 m and BM 4 m; the readings are those of GM 1.3 m. Every
optional table is there. Lengths along the ship are multiples of a half metre, which binary
fractions hold exactly.
"""

from __future__ import annotations

import csv
import io
import re
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from collections.abc import Callable, Mapping
    from pathlib import Path

SMALL: dict[str, str] = {
    "trial.toml": """\
[vessel]
name = "Test Barge"
number = "TB-1"
lpp = "60 m"
beam = "12 m"
depth = "5 m"

[test]
date = 2026-02-03
place = "Basin"

[axes]
x_origin = "after perpendicular"

[output]
units = "metric"

[drafts]
marks_from = "baseline"

[hydrostatics]
volume = "moulded"
allowance = "0 %"

[[devices]]
id = "P1"
kind = "pendulum"
length = "4 m"

[[devices]]
id = "I1"
kind = "inclinometer"

[[people]]
name = "A. Surveyor"
role = "in charge"
mass = "80 kg"
x = "20 m"
y = "1.5 m P"
z = "6 m"

[rolling]
condition = "empty"
""",
    "weights.csv": """\
id,mass [t],certificate,x [m],z [m]
A,10,"CAL 1, sheet 2",29.5,5.5
B,10,CAL 2,30.5,5.5
""",
    "shifts.csv": """\
# positions of the centres
shift,time,weight,y [m],x [m],z [m]
0,9:00,A,4.00 P,,
0,,B,4.00 S,,
1,09:10,A,4,,
2,09:20,A,-4,29.5,5.5
3,09:30,B,-4,,
""",
    "readings.csv": """\
shift,device,kind,reading,reading 2,reading 3,unit,note,exclude
0,P1,repeats,0,0.2,,mm,,
0,I1,,0.00,,,deg,,
1,P1,swings,120,102.5,118,mm,,
1,I1,single,1.592,,,deg,,
2,P1,,0,,,mm,"calm, no wash",
2,I1,,0.01 P,,,deg,,
3,P1,,111 P,,,mm,,
3,I1,,-1.592,,,deg,,bumped
""",
    "drafts.csv": """\
x [m],side,draft [m],freeboard [m],point height [m],y [m]
1.5,P,3.00,,,6
1.5,S,3.00,,,6
30,P,,2.00,5.00,6
30,S,,2.00,5.00,6
58.5,C,3.00,,,
""",
    "density.csv": """\
place,depth [m],density [kg/m3],temperature [C],share
forward,1,1025,9.5,1
aft,2,1025,9.5,2
""",
    "tanks.csv": """\
tank,contents,state,density [t/m3],level [m],volume [m3],mass [t],x [m],y [m],z [m],fsm [t m],second moment [m4],length [m],breadth [m],shape,depth [m]
1 P,water,slack,1.000,0.5,,,10,-2,0.25,,,4,3,box,1.2
2 C,gas oil,pressed full,0.85,,10,8.5,20,0,1,,,,,,2
3 S,,empty,,,,,,,,,,,,,
4 S,ballast,slack,1.025,,,4.1,40,2,0.5,2.05,2,,,,
""",
    "ledger.csv": """\
action,item,mass [t],x [m],y [m],z [m],to x [m],to y [m],to z [m],basis
deduct,staging,0.5,10,2.5 P,6,,,,weighed
add,hatch cover,1.5,40,0,5.5,,,,drawing 7
relocate,anchor,2,5,0,5.5,55,0,5.5,
""",
    "changes.csv": """\
change,item,mass [t],x [m],y [m],z [m]
aboard,crane mat,1.5,30,0,5
ashore,skip,0.5,30,1,5
""",
    "hydrostatics.csv": """\
draft [m],volume [m3],lcb [m],kb [m],km [m],lcf [m],area [m2],bml [m]
2.5,1800,30,1.25,6.05,30,720,120
3.0,2160,30,1.5,5.5,30,720,100
3.5,2520,30,1.75,5.178571,30,720,85.714286
""",
    "rolls.csv": """\
run,rolls,time [s],note
1,5,46.3,
2,5,46.5,
3,6,55.5,from port
""",
}
"""File name -> text of the trial."""


def beside(file: str, columns: Mapping[str, str]) -> str:
    """A table of the small trial with columns added: heading -> the cells, spaces between them.

    A full stop stands for a blank cell.
    """
    rows = table_rows(SMALL[file])
    width = len(rows[0])
    added = zip(*([heading, *cells.split()] for heading, cells in columns.items()), strict=True)
    for row, more in zip(rows, added, strict=True):
        row.extend([""] * (width - len(row)))
        row.extend("" if cell == "." else cell for cell in more)
    return table_text(rows)


def write(folder: Path, files: Mapping[str, str | bytes | None]) -> Path:
    """Write files into a new folder, leaving out those that are None."""
    folder.mkdir(parents=True, exist_ok=True)
    for name, content in files.items():
        if content is not None:
            data = content.encode() if isinstance(content, str) else content
            (folder / name).write_bytes(data)
    return folder


def changed(file: str, old: str, new: str, files: Mapping[str, str] = SMALL) -> dict[str, str]:
    """The trial with one passage of one file put differently; the passage must be there once."""
    assert files[file].count(old) == 1, f"{old!r} stands {files[file].count(old)} times in {file}"
    return {**files, file: files[file].replace(old, new)}


def table_rows(text: str) -> list[list[str]]:
    """Cells of a table, comments left out (read by Python's own csv module)."""
    lines = [line for line in text.splitlines() if line and not line.startswith("#")]
    return list(csv.reader(lines))


def table_text(rows: list[list[str]], mark: str = ",") -> str:
    """A table as a spreadsheet writes it."""
    out = io.StringIO()
    csv.writer(out, delimiter=mark, lineterminator="\n").writerows(rows)
    return out.getvalue()


def map_columns(text: str, pattern: str, change: Callable[[str], str]) -> str:
    """A table with the filled cells of the columns whose heading fits ``pattern`` changed."""
    rows = table_rows(text)
    chosen = [i for i, heading in enumerate(rows[0]) if re.fullmatch(pattern, heading)]
    for row in rows[1:]:
        for i in chosen:
            row[i] = change(row[i]) if row[i] else ""
    return table_text(rows)


def from_amidships() -> dict[str, str]:
    """The small trial with every x counted from amidships, 30 m forward of the perpendicular."""
    columns = r"(to )?x \[m\]|lc[bf] \[m\]"
    files = {
        name: map_columns(text, columns, lambda c: str(float(c) - 30.0))
        if name.endswith(".csv")
        else text.replace("after perpendicular", "amidships").replace("20 m", "-10 m")
        for name, text in SMALL.items()
    }
    assert 'x_origin = "amidships"' in files["trial.toml"]
    return files


_STATED_KEYS = {
    'length = "4 m"': 'tolerance_length = "3 mm"\nresolution = "1 mm"',
    'kind = "inclinometer"': 'u_scale = "0.1 %"\nresolution = "0.01 deg"',
    'mass = "80 kg"': 'u_mass = "10 %"\nu_x = "0.1 m"\ntolerance_y = "5 %"\nresolution_z = "1 m"',
    'place = "Basin"': 'notice_date = 2026-01-19\ngm_before = "1.25 m"\nwater_depth = "7 m"',
    'allowance = "0 %"': 'u_volume = "0.2 %"\nu_km = "5 mm"\ntolerance_lcb = "12 mm"',
}
_SECTIONS = """
[environment]
shelter = "inner basin"
lines = "slack, tended"
gangway = "landed"
wind = "light airs"
wind_speed = "4 kn"
current = "none"

[instruments]
hydrometer_range = "0.998 to 1.031"

[[overrides]]
check = "initial-list"
high = "0.8 deg"
reason = "cargo gear cannot be moved; agreed by letter"

[[overrides]]
check = "movements"
low = 3
reason = "two weights only"

[[overrides]]
check = "liquid-as-weight"
limit = "accepted by the authority"
reason = "letter 12"

[limits]
kg = "5.40 m"

[uncertainty]
draft = "8 mm"
tank_mass = "2 %"
draft_shared = 0.4
arm_shared = "25 %"

[[correlations]]
between = ["test weight A, mass", "tank 1 P, mass"]
r = -0.5
"""


def _stated_toml() -> str:
    text = SMALL["trial.toml"]
    for line, more in _STATED_KEYS.items():
        assert text.count(f"\n{line}\n") == 1
        text = text.replace(f"\n{line}\n", f"\n{line}\n{more}\n")
    return text + _SECTIONS


STATED: dict[str, str] = {
    **SMALL,
    "trial.toml": _stated_toml(),
    "weights.csv": beside(
        "weights.csv",
        {
            "kind": ". liquid",
            "u mass [t]": "0.02 .",
            "tolerance mass [%]": ". 0.5",
            "resolution x [m]": "0.01 0.01",
        },
    ),
    "shifts.csv": beside(
        "shifts.csv", {"tolerance y [m]": "0.01 0.01 0.01 0.01 .", "u z [m]": ". . . 0.03 ."}
    ),
    "drafts.csv": beside(
        "drafts.csv",
        {
            "u draft [m]": "0.01 . . . .",
            "tolerance draft [%]": ". 0.5 . . .",
            "resolution freeboard [m]": ". . 0.02 0.02 .",
            "u point height [m]": ". . 0.008 . .",
        },
    ),
    "density.csv": beside("density.csv", {"resolution density [kg/m3]": "0.5 0.5"}),
    "tanks.csv": beside(
        "tanks.csv",
        {
            "u volume [m3]": ". 0.3 . .",
            "tolerance density [t/m3]": ". 0.01 . .",
            "u mass [t]": "0.1 . . 0.2",
            "u fsm [%]": "5 . . 10",
            "tolerance y [m]": ". 0.1 . .",
            "type": "deep . . .",
        },
    ),
    "ledger.csv": beside(
        "ledger.csv",
        {"u mass [%]": "10 . 2", "u to x [m]": ". . 0.5", "tolerance to y [m]": ". . 0.06"},
    ),
    "changes.csv": beside("changes.csv", {"resolution mass [t]": "0.5 0.1", "u y [m]": "0.1 ."}),
}
"""The small trial with uncertainties stated in every way and in every table that has them."""


_HULL_SECTIONS = """
[offsets]
volume = "moulded"
allowance = "0.5 %"
u_volume = "0.3 %"
tolerance_km = "6 mm"

[[bodies]]
name = "barge"

[[bodies]]
name = "skeg"
kind = "appendage"
y = "3 m S"
mirrored = true
"""

HULL: dict[str, str] = {
    **{name: text for name, text in SMALL.items() if name != "hydrostatics.csv"},
    "trial.toml": SMALL["trial.toml"] + _HULL_SECTIONS,
    "offsets.csv": """\
station,x [m],half breadth [m],height [m],side,line,body
0,0,0,0,,,barge
0,0,6,0,,chine,barge
0,0,6,5,,deck,barge
1,30,0,0,,,barge
1,30,6,0,,chine,barge
1,30,6,5,,deck,barge
2,60,0,0,S,,barge
2,60,6,0,S,chine,barge
2,60,6,5,S,deck,barge
2,60,0,0,P,,barge
2,60,6,0,P,chine,barge
2,60,6,5,P,deck,barge
a,2,0,-1,,,skeg
a,2,0.25,-1,,,skeg
a,2,0.25,0,,,skeg
b,6,0,-1,,,skeg
b,6,0.25,-1,,,skeg
b,6,0.25,0,,,skeg
c,10,0,0,,,skeg
c,10,0,0,,,skeg
""",
}
"""The barge by its offsets, with two skegs under its bottom, in place of the hydrostatic table."""

BOTH: dict[str, str] = {
    **STATED,
    "trial.toml": STATED["trial.toml"].replace("[hydrostatics]", '[hydrostatics]\nuse = "offsets"')
    + _HULL_SECTIONS,
    "offsets.csv": HULL["offsets.csv"],
}
"""The trial that states uncertainties, with the hull in both descriptions."""
