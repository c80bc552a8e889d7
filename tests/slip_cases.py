"""Trials with a slip of the unit, of the origin or of the file: the defects and a word of each."""

from __future__ import annotations

from defect_cases import TOML, Files, Found, row, text
from small_trial import SMALL, from_amidships

RELATIVE = {**SMALL, "density.csv": "place,relative density [1]\nfore,1025\n"}


def replaced(file: str, old: str, new: str) -> Files:
    """The small trial with a passage of one file put differently wherever it stands."""
    assert old in SMALL[file]
    return {**SMALL, file: SMALL[file].replace(old, new)}


def headless(file: str) -> Files:
    lines = [line for line in SMALL[file].split("\n") if not line.startswith("#")]
    return {**SMALL, file: "\n".join(lines[1:])}


def swapped_origin() -> Files:
    files = from_amidships()
    return {**files, TOML: files[TOML].replace("amidships", "after perpendicular")}


def at(file: str, column: str, *rows: int, code: str = "outside-vessel") -> list[Found]:
    return [(code, file, number, column) for number in rows]


def head(key: str, code: str = "implausible") -> list[Found]:
    return [(code, TOML, 0, key)]


SLIPS: list[tuple[Files, list[Found], str]] = [
    # densities
    (replaced("density.csv", "kg/m3", "t/m3"), at("density.csv", "density", 2, 3, code="implausible"),
     "from 0.95 to 1.08 t/m3 (did you mean kg/m3?)"),
    (row("density.csv", 2, "forward,1,1.025,9.5,1"), at("density.csv", "density", 2, code="implausible"),
     "from 950 to 1080 kg/m3 (did you mean t/m3?)"),
    ({**RELATIVE, TOML: SMALL[TOML] + '\n[density]\nrelative_to = "0.999 t/m3"\n'},
     at("density.csv", "relative density", 2, code="implausible"), "0.95 to 1.08 t/m3"),
    ({**RELATIVE, TOML: SMALL[TOML] + '\n[density]\nrelative_to = "999 t/m3"\n'},
     head("density.relative_to"), "did you mean kg/m3?"),
    (row("tanks.csv", 5, "4 S,ballast,slack,1025,,,4.1,40,2,0.5,,2,,,"),
     [*at("tanks.csv", "density", 5, code="implausible")], "from 0.3 to 3 t/m3 (did you mean kg/m3?)"),
    (text(TOML, "[hydrostatics]", '[hydrostatics]\ndensity = "1.025 kg/m3"'),
     head("hydrostatics.density"), "did you mean t/m3?"),
    # the vessel, its devices and people
    (text(TOML, '"60 m"', '"60000 m"'), head("vessel.lpp"), "did you mean mm or cm?"),
    (text(TOML, '"12 m"', '"1200 m"'), head("vessel.beam"), "did you mean cm?"),
    (text(TOML, '"5 m"', '"5000 m"'), head("vessel.depth"), "did you mean mm or cm?"),
    (text(TOML, '"4 m"', '"4 mm"'), head("devices[1].length"), "from 300 to 40000 mm"),
    (text(TOML, '"80 kg"', '"80 t"'), head("people[1].mass"), "did you mean kg?"),
    (text(TOML, '"80 kg"', '"0.08 kg"'), head("people[1].mass"), "did you mean t?"),
    (text(TOML, '"1.5 m P"', '"15 m P"'), head("people[1].y", "outside-vessel"), "y from -12 to 12 m"),
    # places
    (row("weights.csv", 2, "A,10,CAL 1,29500,5500"),
     at("weights.csv", "x", 2) + at("weights.csv", "z", 2), "x from -15 to 75 m (did you mean mm?)"),
    (replaced("shifts.csv", ",4.00 ", ",400 "), at("shifts.csv", "y", 3, 4), "y from -12 to 12 m"),
    (row("shifts.csv", 6, "2,09:20,A,-4,295,55"), at("shifts.csv", "x", 6), "x from -15 to 75 m"),
    (row("tanks.csv", 3, "2 C,gas oil,pressed full,0.85,,10,8.5,20,0,-6,,,,,"),
     at("tanks.csv", "z", 3), "z from -5 to 60 m"),
    (row("ledger.csv", 4, "relocate,anchor,2,5,0,5.5,-55,0,5.5,"), at("ledger.csv", "to x", 4), "x from -15"),
    (row("changes.csv", 2, "aboard,crane mat,1.5,30,12.1,5"), at("changes.csv", "y", 2), "y from -12"),
    (row("changes.csv", 2, "aboard,crane mat,1.5,75,-12,60"), [], ""),
    (row("changes.csv", 2, "aboard,crane mat,1.5,30,0,200 ft 3 in"), at("changes.csv", "z", 2),
     "from -16.4 to 196.9 ft"),
    (row("drafts.csv", 2, "1.5,P,3000,,,6"), at("drafts.csv", "draft", 2), "did you mean mm?"),
    (row("drafts.csv", 2, "1.5,P,300,,,6"), at("drafts.csv", "draft", 2), "did you mean cm?"),
    (row("drafts.csv", 2, "1.5,P,10.5,,,6"), at("drafts.csv", "draft", 2), "did you mean ft?"),
    (row("drafts.csv", 2, "1.5,P,3,,,600"), at("drafts.csv", "y", 2), "did you mean mm or cm?"),
    (row("drafts.csv", 4, "30,P,,2000,5000,6"),
     at("drafts.csv", "freeboard", 4) + at("drafts.csv", "point height", 4), "did you mean mm?"),
    (row("hydrostatics.csv", 2, "2.5,1800,-0.5,1.25,6.05,30,720,120"), at("hydrostatics.csv", "lcb", 2),
     "check x_origin"),
    (row("hydrostatics.csv", 2, "2.5,1800,30,1.25,6.05,61,720,120"), at("hydrostatics.csv", "lcf", 2),
     "lcf from 0 to 60 m"),
    (text(TOML, "after perpendicular", "amidships"), at("drafts.csv", "x", 6) + at("ledger.csv", "to x", 4),
     "x counts from amidships: check x_origin in trial.toml"),
    (swapped_origin(), at("drafts.csv", "x", 2, 3) + at("ledger.csv", "x", 2, 4) + at("tanks.csv", "x", 2),
     "x counts from the after perpendicular: check x_origin in trial.toml"),
    # tanks, ledger, drafts
    (row("tanks.csv", 3, "2 C,gas oil,pressed full,0.85,,10,8.5,20,0,1,,,4,3,"),
     at("tanks.csv", "length", 3, code="tank-contradiction"), "a tank that is pressed full"),
    (row("tanks.csv", 4, "3 S,,empty,,,,,,,,,2,,,"),
     at("tanks.csv", "second moment", 4, code="tank-contradiction"), "a tank that is empty"),
    (row("tanks.csv", 3, "2 C,gas oil,pressed full,0.85,1,,10.2,20,0,1,,,4,3,box"), [], ""),
    (row("ledger.csv", 2, "deduct,Test weights on deck,20,30,0,6,,,,"),
     at("ledger.csv", "item", 2, code="item-listed-twice"), "come off by themselves"),
    (row("ledger.csv", 2, "deduct,weights B + A,20,30,0,6,,,,"),
     at("ledger.csv", "item", 2, code="item-listed-twice"), "come off by themselves"),
    (row("ledger.csv", 2, "deduct,block A,2,30,0,6,,,,"), [], ""),
    (row("ledger.csv", 2, "deduct,contest weightlifting bench,2,30,0,6,,,,"), [], ""),
    (row("drafts.csv", 3, "1.5,P,3.00,,,6\n1.5,S,3.00,,,6"), at("drafts.csv", "", 3, code="draft-twice"),
     "all of row 2 again"),
    (row("drafts.csv", 3, "1.5,P,3.01,,,6\n1.5,S,3.00,,,6"), [], ""),
    # tables as files
    (replaced("weights.csv", "\n", ";\n"), at("weights.csv", "", 1, code="file-separator"),
     "stray semicolons at the ends of the lines"),
    (replaced("changes.csv", "5\n", "5;\n"), at("changes.csv", "", 2, code="file-separator"),
     "stray semicolons"),
    *((headless(f), at(f, "", 1, code="header-missing"), "the first row does not look like a header")
      for f in ("weights.csv", "shifts.csv", "readings.csv", "drafts.csv", "hydrostatics.csv",
                "tanks.csv", "ledger.csv", "density.csv")),
    (replaced("drafts.csv", ",", " "), at("drafts.csv", "", 1, code="header-missing"), "expected a header: x, side"),
    (replaced("drafts.csv", ",", "|"), at("drafts.csv", "", 1, code="file-unreadable"), "vertical bars"),
    (row("weights.csv", 1, "id,mass (t),certificate,x (m),z [m]"),
     at("weights.csv", "mass (t)", 1, code="column-unknown") + at("weights.csv", "x (m)", 1, code="column-unknown"),
     "write the unit in square brackets: mass [t]"),
    (row("drafts.csv", 2, "1.5,P,2,998,,,6"), at("drafts.csv", "", 2, code="cells-too-many"),
     "a decimal comma splits the number: write 2.998"),
    ({**SMALL, "readings.csv": SMALL["readings.csv"].split("\n")[0]},
     at("readings.csv", "", 0, code="table-empty"), "a row of readings below the header"),
    # words for what is written
    (row("drafts.csv", 2, "1.5,P,9-10-1,,,6"), at("drafts.csv", "draft", 2, code="number-unreadable"),
     "8 ft 3 1/2 in or 8'-3 1/2\""),
    (text(TOML, "2026-02-03", '"2026-02-30"'), head("test.date", "value-wrong"), "there is no such day"),
    (text(TOML, "2026-02-03", "2026-02-30"), at(TOML, "", 9, code="toml-syntax"), "there is no such day"),
    (text(TOML, '"12 m"', "12 m"), at(TOML, "", 5, code="toml-syntax"), 'write beam = "12 m"'),
    (text(TOML, '"12 m"', "“12 m”"), at(TOML, "", 5, code="toml-syntax"), "plain quotation marks"),
    (text(TOML, '"12 m"', '"12 m'), at(TOML, "", 5, code="toml-syntax"), "a quotation mark at each end"),
    (text(TOML, '"12 m"', ""), at(TOML, "", 5, code="toml-syntax"), "a value after the equals sign"),
    (text(TOML, '"12 m"', "12,5"), at(TOML, "", 5, code="toml-syntax"), "write beam = 12.5"),
    (text(TOML, '"12 m"', '"12 m" moulded'), at(TOML, "", 5, code="toml-syntax"), "except a remark after #"),
    (text(TOML, 'beam = "12 m"', 'beam "12 m"'), at(TOML, "", 5, code="toml-syntax"), "an equals sign"),
    (text(TOML, 'beam = "12 m"', "beam, moulded"), at(TOML, "", 5, code="toml-syntax"), "an equals sign"),
    (text(TOML, 'beam = "12 m"', 'lpp = "12 m"'), at(TOML, "", 5, code="toml-syntax"), "each name once"),
    (text(TOML, "[output]", "[axes]"), at(TOML, "", 15, code="toml-syntax"), "each section once"),
    (text(TOML, "[output]", "[output"), at(TOML, "", 15, code="toml-syntax"), "a section in brackets"),
    ({**SMALL, TOML: SMALL[TOML].replace("Basin", "Hafenstraße").encode("cp1252")},
     at(TOML, "", 10, code="file-encoding"), "save the file as UTF-8 text"),
]  # fmt: skip
