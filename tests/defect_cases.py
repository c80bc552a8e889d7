"""Trials with one thing wrong, and the defects that must be told: code, file, row, column."""

from __future__ import annotations

from small_trial import SMALL, STATED, beside, changed

Files = dict[str, str | bytes | None]
Found = tuple[str, str, int, str]


def row(file: str, number: int, new: str) -> Files:
    """The small trial with one line of a file replaced; numbers as a spreadsheet shows them."""
    lines = SMALL[file].split("\n")
    lines[number - 1] = new
    return {**SMALL, file: "\n".join(lines)}


def without(*files: str) -> Files:
    return {**SMALL, **dict.fromkeys(files)}


def text(file: str, old: str, new: str) -> Files:
    return {**changed(file, old, new)}


def added(file: str, columns: dict[str, str]) -> Files:
    """The small trial with columns added to one table (see `beside`)."""
    return {**SMALL, file: beside(file, columns)}


def key(old: str, new: str) -> Files:
    """The trial that states uncertainties, with one passage of ``trial.toml`` put differently."""
    return {**changed("trial.toml", old, new, STATED)}


def repeated(p1: list[str], i1: list[str]) -> Files:
    """The small trial with four values of each device at every shift, as they stand in the rows."""
    lines = ["shift,device,kind,reading,reading 2,reading 3,reading 4,unit"]
    for n, (p, i) in enumerate(zip(p1, i1, strict=True)):
        lines += [f"{n},P1,repeats,{p},mm", f"{n},I1,repeats,{i},deg"]
    return {**SMALL, "readings.csv": "\n".join(lines) + "\n"}


TOML = "trial.toml"
SMOOTH = ["0,0,0,0", "1.59,1.60,1.59,1.58", "0,0.01,0,0", "-1.59,-1.6,-1.59,-1.59"]
CALM = ["300,301,300,302", "411,412,410,411", "301,300,300,300", "189,190,188,189"]
GRID = "draft [m],trim [m],volume [m3],lcb [m],kb [m],km [m]\n"
CASES: list[tuple[Files, list[Found]]] = [
    # files
    (without("drafts.csv"), [("file-missing", "drafts.csv", 0, "")]),
    (row("changes.csv", 1, 'change,"item,mass [t]'), [("file-quoting", "changes.csv", 1, "")]),
    (without("weights.csv"), [("file-missing", "weights.csv", 0, "")]),
    (
        {**without("tanks.csv"), "tank.csv": SMALL["tanks.csv"]},
        [("file-missing", "tanks.csv", 0, "")],
    ),
    (
        {**SMALL, "ledger.csv": SMALL["ledger.csv"].replace("hatch cover", "prêt").encode("cp1252")},
        [("file-encoding", "ledger.csv", 3, "")],
    ),
    (
        {**SMALL, "changes.csv": SMALL["changes.csv"].encode("utf-16")},
        [("file-encoding", "changes.csv", 1, "")],
    ),
    (
        {**SMALL, "changes.csv": SMALL["changes.csv"].encode("utf-16-le")},
        [("file-encoding", "changes.csv", 1, "")],
    ),
    (
        {**SMALL, TOML: SMALL[TOML].replace("Basin", "Hafenstraße").encode("cp1252")},
        [("file-encoding", TOML, 10, "")],
    ),
    (row("weights.csv", 3, 'B,10,"CAL 2,30.5,5.5'), [
        ("file-quoting", "weights.csv", 3, ""),
    ]),
    (row("changes.csv", 3, 'ashore,"skip" 2,0.5,30,1,5'), [
        ("file-quoting", "changes.csv", 3, ""),
    ]),
    (
        {**SMALL, "changes.csv": SMALL["changes.csv"].replace(",", "\t")},
        [("file-unreadable", "changes.csv", 1, "")],
    ),
    # trial.toml
    (text(TOML, 'beam = "12 m"', 'beam "12 m"'), [("toml-syntax", TOML, 5, "")]),
    (text(TOML, "2026-02-03", "2026-02-30"), [("toml-syntax", TOML, 9, "")]),
    (text(TOML, 'place = "Basin"', 'place = "Basin'), [("toml-syntax", TOML, 10, "")]),
    (text(TOML, 'beam = "12 m"\n', ""), [("key-missing", TOML, 0, "vessel.beam")]),
    (text(TOML, 'allowance = "0 %"\n', ""), [("key-missing", TOML, 0, "hydrostatics.allowance")]),
    (text(TOML, 'length = "4 m"\n', ""), [("key-missing", TOML, 0, "devices[1].length")]),
    (text(TOML, 'z = "6 m"\n', ""), [("key-missing", TOML, 0, "people[1].z")]),
    (
        text(TOML, '"baseline"', '"underside of keel"'),
        [("key-missing", TOML, 0, "drafts.keel_thickness")],
    ),
    (
        row("hydrostatics.csv", 1, "draft [m],displacement [t],lcb [m],kb [m],km [m],lcf [m],"
            "area [m2],bml [m]"),
        [("key-missing", TOML, 0, "hydrostatics.density")],
    ),
    (
        row("density.csv", 1, "place,depth [m],relative density [1],temperature [C],share"),
        [("key-missing", TOML, 0, "density.relative_to")],
    ),
    (text(TOML, "beam =", "beem ="), [
        ("key-missing", TOML, 0, "vessel.beam"),
        ("key-unknown", TOML, 0, "vessel.beem"),
    ]),
    (text(TOML, "[output]", '[method]\nshape = ""\n[outputs]\n[output]'), [
        ("key-unknown", TOML, 0, "method.shape"),
        ("key-unknown", TOML, 0, "outputs"),
    ]),
    (text(TOML, 'kind = "inclinometer"', 'kind = "inclinometer"\nlength = "1 m"'), [
        ("key-unknown", TOML, 0, "devices[2].length"),
    ]),
    (text(TOML, '"metric"', '"imperial"'), [("value-wrong", TOML, 0, "output.units")]),
    (text(TOML, '"Test Barge"', '" "'), [("value-wrong", TOML, 0, "vessel.name")]),
    (text(TOML, '"Test Barge"', "7"), [("value-wrong", TOML, 0, "vessel.name")]),
    (text(TOML, "2026-02-03", '"3/2/2026"'), [("value-wrong", TOML, 0, "test.date")]),
    (text(TOML, "2026-02-03", '"2026-02-30"'), [("value-wrong", TOML, 0, "test.date")]),
    (text(TOML, '"moulded"', '"extreme"'), [("value-wrong", TOML, 0, "hydrostatics.allowance")]),
    (text(TOML, '"baseline"', '"baseline"\nkeel_thickness = "9 mm"'), [
        ("value-wrong", TOML, 0, "drafts.keel_thickness"),
    ]),
    (text(TOML, "[[people]]", "[people]"), [("value-wrong", TOML, 0, "people")]),
    (text(TOML, '"60 m"', "60"), [("unit-missing", TOML, 0, "vessel.lpp")]),
    (text(TOML, '"60 m"', '"60"'), [("unit-missing", TOML, 0, "vessel.lpp")]),
    (text(TOML, '"60 m"', '"60 t"'), [("unit-wrong", TOML, 0, "vessel.lpp")]),
    (text(TOML, '"60 m"', '"60,0 m"'), [("number-unreadable", TOML, 0, "vessel.lpp")]),
    (text(TOML, '"12 m"', '"-12 m"'), [("number-not-positive", TOML, 0, "vessel.beam")]),
    (text(TOML, '"0 %"', '"-1 %"'), [("number-negative", TOML, 0, "hydrostatics.allowance")]),
    (text(TOML, 'id = "I1"', 'id = "p1"'), [
        ("device-unknown", "readings.csv", 3, "device"),
        ("device-unknown", "readings.csv", 5, "device"),
        ("device-unknown", "readings.csv", 7, "device"),
        ("device-unknown", "readings.csv", 9, "device"),
        ("device-without-readings", TOML, 0, "devices[2]"),
        ("id-twice", TOML, 0, "devices[2].id"),
    ]),
    # headings
    (row("changes.csv", 1, "change,item,mass [t],x [m],y [m],height [m]"), [
        ("column-missing", "changes.csv", 1, "z"),
        ("column-unknown", "changes.csv", 1, "height"),
    ]),
    (row("changes.csv", 1, "change,item,mass [t],x [m],y [m],y [ft]"), [
        ("column-missing", "changes.csv", 1, "z"),
        ("column-twice", "changes.csv", 1, "y"),
    ]),
    (row("changes.csv", 1, "change,item,mass (t),x [m],y [m],z [m]"), [
        ("column-unknown", "changes.csv", 1, "mass (t)"),
    ]),
    (row("changes.csv", 1, "change,item,mass [t],x [m],y [m],z [m],,"), []),
    (row("changes.csv", 1, ",item,mass [t],x [m],y [m],z [m]"), [
        ("column-unknown", "changes.csv", 1, ""),
        ("column-missing", "changes.csv", 1, "change"),
    ]),
    (row("changes.csv", 1, "change,item,mass,x [m],y [m],z [m]"), [
        ("unit-missing", "changes.csv", 1, "mass"),
    ]),
    (row("changes.csv", 1, "change,item,mass [tons],x [m],y [m],z [m]"), [
        ("unit-wrong", "changes.csv", 1, "mass"),
    ]),
    (row("changes.csv", 1, "change [1],item,mass [t],x [m],y [m],z [m]"), [
        ("unit-unwanted", "changes.csv", 1, "change"),
    ]),
    (row("hydrostatics.csv", 1, "draft [m],volume [m3],lcb [m],kb [m],km [m],lcf [m],bm [m],bml [m]"),
     [("column-twice", "hydrostatics.csv", 1, "bm")]),
    (row("shifts.csv", 2, "shift,time,weight,y [m],x [m],moment [t m]"), [
        ("column-twice", "shifts.csv", 2, "moment"),
    ]),
    # cells
    (row("changes.csv", 2, "aboard,crane mat,1.5 t,30,0,5"), [
        ("number-unreadable", "changes.csv", 2, "mass"),
    ]),
    (row("changes.csv", 2, "aboard,crane mat,#N/A,30,0,5"), [
        ("number-not-finite", "changes.csv", 2, "mass"),
    ]),
    (row("changes.csv", 2, "aboard,crane mat,0,30,0,5"), [
        ("number-not-positive", "changes.csv", 2, "mass"),
    ]),
    (row("density.csv", 2, "forward,-1,1025,9.5,1"), [
        ("number-negative", "density.csv", 2, "depth"),
    ]),
    (row("changes.csv", 2, "aboard,crane mat,1.5,30,-2 P,5"), [
        ("side-and-sign", "changes.csv", 2, "y"),
    ]),
    (row("drafts.csv", 2, "1.5,P,3.00,,,6 S"), [("side-and-sign", "drafts.csv", 2, "y")]),
    (row("drafts.csv", 3, "1.5,S,3.00,,,-6"), [("side-and-sign", "drafts.csv", 3, "y")]),
    (row("drafts.csv", 6, "58.5,C,3.00,,,1"), [("value-wrong", "drafts.csv", 6, "y")]),
    (row("drafts.csv", 6, "58.5,M,3.00,,,"), [("value-wrong", "drafts.csv", 6, "side")]),
    (row("drafts.csv", 6, "58.5,C,,,,"), [("cell-missing", "drafts.csv", 6, "draft")]),
    (row("drafts.csv", 6, "58.5,C,3,2,5,"), [("value-wrong", "drafts.csv", 6, "freeboard")]),
    (row("drafts.csv", 6, "58.5,C,,2,,"), [("cell-missing", "drafts.csv", 6, "point height")]),
    (row("drafts.csv", 6, "58.5,C,,5,5,"), [("number-not-positive", "drafts.csv", 6, "freeboard")]),
    (row("changes.csv", 2, "aboard,crane mat,,30,0,5"), [("cell-missing", "changes.csv", 2, "mass")]),
    (row("changes.csv", 2, "aboard,crane mat,1,5,30,0,5"), [("cells-too-many", "changes.csv", 2, "")]),
    (row("changes.csv", 2, "loaded,crane mat,1.5,30,0,5"), [("value-wrong", "changes.csv", 2, "change")]),
    (row("tanks.csv", 4, "#3 S,,empty"), [("value-wrong", "tanks.csv", 4, "")]),
    # weights and shifts
    (row("weights.csv", 3, "a,10,CAL 2,30.5,5.5"), [
        ("weight-unknown", "shifts.csv", 4, "weight"),
        ("weight-unknown", "shifts.csv", 7, "weight"),
        ("id-twice", "weights.csv", 3, "id"),
        ("weight-nowhere", "weights.csv", 3, ""),
    ]),
    (row("shifts.csv", 4, "0,,,,,"), [("weight-nowhere", "weights.csv", 3, "")]),
    (row("shifts.csv", 4, "0,,,4.00 S,,"), [
        ("cell-missing", "shifts.csv", 4, "weight"),
        ("weight-nowhere", "weights.csv", 3, ""),
    ]),
    (row("shifts.csv", 5, "1,09:10,A,4,,\n1,,A,3,,"), [
        ("weight-in-two-places", "shifts.csv", 6, "weight"),
    ]),
    (row("shifts.csv", 7, "3,09:30,C,-4,,"), [("weight-unknown", "shifts.csv", 7, "weight")]),
    (row("shifts.csv", 7, "three,09:30,B,-4,,"), [("number-unreadable", "shifts.csv", 7, "shift")]),
    (row("shifts.csv", 7, "3,half past,B,-4,,"), [("value-wrong", "shifts.csv", 7, "time")]),
    (row("shifts.csv", 7, "3,,B,-4,,"), [("cell-missing", "shifts.csv", 7, "time")]),
    (row("shifts.csv", 6, "5,09:20,A,-4,,\n2,09:25,,,,"), [("shift-order", "shifts.csv", 7, "shift")]),
    (row("shifts.csv", 7, "3,09:30,B,-4,,\n0,09:40,B,4,,"), [("shift-twice", "shifts.csv", 8, "shift")]),
    (row("shifts.csv", 7, "3,09:30,A,-4,,"), [("moments-too-few", "shifts.csv", 0, "y")]),
    (
        {**SMALL, "shifts.csv": "shift,moment [t m]\n0,5\n1,5\n2,5\n3,5\n", "weights.csv": None},
        [("moments-equal", "shifts.csv", 0, "moment")],
    ),
    (
        {**SMALL, "shifts.csv": "shift,moment [t m]\n0,0\n1,5\n2,0\n3,-5\n"},
        [("weight-nowhere", "weights.csv", 2, ""), ("weight-nowhere", "weights.csv", 3, "")],
    ),
    # readings
    (row("readings.csv", 8, "3,P2,,111 P,,,mm,,"), [("device-unknown", "readings.csv", 8, "device")]),
    (row("readings.csv", 8, "4,P1,,111 P,,,mm,,"), [("shift-unknown", "readings.csv", 8, "shift")]),
    (row("readings.csv", 8, "2,P1,,111 P,,,mm,,"), [("reading-twice", "readings.csv", 8, "device")]),
    (row("readings.csv", 8, "3,P1,,111,112,,mm,,"), [("readings-no-kind", "readings.csv", 8, "kind")]),
    (row("readings.csv", 8, "3,P1,single,111,112,,mm,,"), [("value-wrong", "readings.csv", 8, "kind")]),
    (row("readings.csv", 8, "3,P1,swings,111,112,,mm,,"), [
        ("cell-missing", "readings.csv", 8, "reading 3"),
    ]),
    (row("readings.csv", 8, "3,P1,repeats,111,,112,mm,,"), [
        ("cell-missing", "readings.csv", 8, "reading 2"),
    ]),
    (row("readings.csv", 8, "3,P1,,,,,mm,,"), [("cell-missing", "readings.csv", 8, "reading")]),
    (row("readings.csv", 8, "3,P1,,111,,,kg,,"), [("unit-wrong", "readings.csv", 8, "unit")]),
    (row("readings.csv", 8, "3,P1,,1.6,,,deg,,"), [("unit-wrong", "readings.csv", 8, "unit")]),
    (row("readings.csv", 8, "3,P1,,0.03,,,1,,"), [("unit-wrong", "readings.csv", 8, "unit")]),
    (row("readings.csv", 1, "shift,device,kind,reading,reading 2,reading 4,unit,note,exclude"), [
        ("column-missing", "readings.csv", 1, "reading 3"),
    ]),
    (row("readings.csv", 1, "shift,device,kind,reading [mm],reading 2,reading 3,unit,note,exclude"), [
        ("unit-unwanted", "readings.csv", 1, "reading"),
    ]),
    # decimals behind a comma
    (repeated(CALM, SMOOTH), []),
    (repeated(["300,5,301,2", "411,2,411,4", "300,3,300,4", "189,4,189,5"], SMOOTH), [
        ("readings-split", "readings.csv", n, "reading") for n in (2, 4, 6, 8)
    ]),
    (repeated(CALM, ["0,012,0,010", "1,592,1,588", "0,04,0,05", "-1,592,-1,590"]), [
        ("readings-split", "readings.csv", n, "reading") for n in (3, 5, 7, 9)
    ]),
    (repeated([*CALM[:2], "300,5,301,2", CALM[3]], SMOOTH), [
        ("readings-apart", "readings.csv", 6, "reading"),
    ]),
    (row("readings.csv", 8, "3,P1,repeats,111,112,300,mm,,"), [
        ("readings-apart", "readings.csv", 8, "reading"),
    ]),
    (row("readings.csv", 8, "3,P1,repeats,111,112,300,mm,,a boat passed\n3,P1,,111 P,,,mm,,"), []),
    (row("readings.csv", 8, "3,P1,,111 P,,,mm,7,"), [("value-wrong", "readings.csv", 8, "note")]),
    (row("readings.csv", 8, "3,P1,,111 P,,,mm,,2.5"), [("value-wrong", "readings.csv", 8, "exclude")]),
    (row("drafts.csv", 2, "1.5,P,3,002,,6"), [("value-wrong", "drafts.csv", 2, "freeboard")]),
    (row("shifts.csv", 4, "0,,B,3,95,5.5"), [("outside-vessel", "shifts.csv", 4, "x"),
                                             ("weight-in-two-places", "shifts.csv", 4, "x")]),
    # where the weights start
    (row("shifts.csv", 3, "0,9:00,A,4.00 P,29.5,5.5"), []),
    (row("shifts.csv", 3, "0,9:00,A,4.00 P,30,"), [("weight-in-two-places", "shifts.csv", 3, "x")]),
    (row("shifts.csv", 3, "0,9:00,A,4.00 P,,5.6"), [("weight-in-two-places", "shifts.csv", 3, "z")]),
    (row("shifts.csv", 6, "2,09:20,A,-4,20,5.6"), []),
    # water
    (
        {**SMALL, "drafts.csv": "x [m],side,draft [m]\n30,C,3\n30.5,C,3\n"},
        [("drafts-too-few", "drafts.csv", 0, "")],
    ),
    ({**SMALL, "drafts.csv": "x [m],side,draft [m]\n"}, [("table-empty", "drafts.csv", 0, "")]),
    ({**SMALL, "readings.csv": b""}, [("table-empty", "readings.csv", 0, "")]),
    ({**SMALL, "weights.csv": "id,mass [t],certificate,x [m],z [m]\n"}, [
        ("table-empty", "weights.csv", 0, ""),
    ]),
    # tanks: tank,contents,state,density,level,volume,mass,x,y,z,fsm,second moment,length,breadth,shape
    (row("tanks.csv", 4, "3 S,,empty,,,,1,,,,,,,,"), [("tank-contradiction", "tanks.csv", 4, "mass")]),
    (row("tanks.csv", 4, "3 S,,empty,,0.1,0,0,,,,,,,,"), [
        ("tank-contradiction", "tanks.csv", 4, "level"),
    ]),
    (row("tanks.csv", 3, "2 C,gas oil,pressed full,0.85,,10,9.5,20,0,1,,,,,"), [
        ("tank-contradiction", "tanks.csv", 3, "mass"),
    ]),
    (row("tanks.csv", 3, "2 C,gas oil,pressed full,0.85,,10,8.5,20,0,1,3,,,,"), [
        ("tank-contradiction", "tanks.csv", 3, "fsm"),
    ]),
    (row("tanks.csv", 3, "2 C,gas oil,pressed full,,,10,,20,0,1,,,,,"), [
        ("cell-missing", "tanks.csv", 3, "density"),
    ]),
    (row("tanks.csv", 2, "1 P,water,slack,1.000,0.5,,,10,-2,0.25,,,4,3,"), [
        ("tank-contradiction", "tanks.csv", 2, "level"),
    ]),
    (row("tanks.csv", 2, "1 P,water,slack,1.000,0.5,,,10,-2,0.25,,,4,3,cone"), [
        ("value-wrong", "tanks.csv", 2, "shape"),
    ]),
    (row("tanks.csv", 5, "4 S,ballast,slack,1.025,,,4.1,40,2,0.5,,,,,"), [
        ("tank-contradiction", "tanks.csv", 5, "fsm"),
    ]),
    (row("tanks.csv", 5, "4 S,ballast,slack,1.025,,,4.1,40,2,0.5,0,,,,"), [
        ("tank-contradiction", "tanks.csv", 5, "fsm"),
    ]),
    (row("tanks.csv", 5, "4 S,ballast,slack,1.025,,,4.1,40,2,0.5,2.05,2.1,,,"), [
        ("tank-contradiction", "tanks.csv", 5, "fsm"),
    ]),
    (row("tanks.csv", 5, "4 S,ballast,slack,1.025,,,,40,2,0.5,2.05,2,,,"), [
        ("tank-contradiction", "tanks.csv", 5, "mass"),
    ]),
    (row("tanks.csv", 5, "1 p,ballast,slack,1.025,,,4.1,40,2,0.5,2.05,2,,,"), [
        ("id-twice", "tanks.csv", 5, "tank"),
    ]),
    # ledger
    (row("ledger.csv", 3, "add,Staging,1.5,40,0,5.5,,,,"), [
        ("item-listed-twice", "ledger.csv", 3, "item"),
    ]),
    (row("ledger.csv", 3, "add,b,1.5,40,0,5.5,,,,"), [("item-listed-twice", "ledger.csv", 3, "item")]),
    (row("ledger.csv", 3, "deduct,3 s,1.5,40,0,5.5,,,,"), [
        ("item-listed-twice", "ledger.csv", 3, "item"),
    ]),
    (row("ledger.csv", 3, "deduct,a. surveyor,1.5,40,0,5.5,,,,"), [
        ("item-listed-twice", "ledger.csv", 3, "item"),
    ]),
    (row("ledger.csv", 3, "add,hatch,1.5,40,0,5.5,1,,,"), [("value-wrong", "ledger.csv", 3, "to x")]),
    (row("ledger.csv", 4, "relocate,anchor,2,5,0,5.5,55,0,,"), [
        ("cell-missing", "ledger.csv", 4, "to z"),
    ]),
    # hydrostatics
    (row("hydrostatics.csv", 3, "2.5,2160,30,1.5,5.5,30,720,100"), [
        ("table-not-monotonic", "hydrostatics.csv", 3, "draft"),
    ]),
    (row("hydrostatics.csv", 4, "3.5,2160,30,1.75,5.2,30,720,86"), [
        ("table-not-monotonic", "hydrostatics.csv", 4, "volume"),
    ]),
    (row("hydrostatics.csv", 4, "3.5,2520,30,1.75,1.75,30,720,86"), [
        ("number-not-positive", "hydrostatics.csv", 4, "km"),
    ]),
    (
        {**SMALL, "hydrostatics.csv": GRID + "2,0,1,30,1,6\n3,0,2,30,1,6\n2,1,1,30,1,6\n"},
        [("table-not-grid", "hydrostatics.csv", 4, "trim")],
    ),
    (
        {**SMALL, "hydrostatics.csv": GRID + "2,0,1,30,1,6\n"},
        [("table-not-grid", "hydrostatics.csv", 1, "draft")],
    ),
    # uncertainties in tables
    (added("changes.csv", {"u mass [t]": "-0.1 ."}), [
        ("number-negative", "changes.csv", 2, "u mass"),
    ]),
    (added("changes.csv", {"tolerance y [%]": "-1 ."}), [
        ("number-negative", "changes.csv", 2, "tolerance y"),
    ]),
    (added("changes.csv", {"u mass [t]": "small ."}), [
        ("number-unreadable", "changes.csv", 2, "u mass"),
    ]),
    (added("changes.csv", {"u mass [%]": "1% ."}), [
        ("number-unreadable", "changes.csv", 2, "u mass"),
    ]),
    (added("changes.csv", {"u y [m]": "0.1P ."}), [
        ("number-unreadable", "changes.csv", 2, "u y"),
    ]),
    (added("changes.csv", {"resolution z [m]": "inf ."}), [
        ("number-not-finite", "changes.csv", 2, "resolution z"),
    ]),
    (added("changes.csv", {"u mass [m]": "0.1 ."}), [("unit-wrong", "changes.csv", 1, "u mass")]),
    (added("changes.csv", {"u mass": "0.1 ."}), [("unit-missing", "changes.csv", 1, "u mass")]),
    (added("tanks.csv", {"u level [m]": "0.1 . . ."}), [
        ("column-unknown", "tanks.csv", 1, "u level"),
    ]),
    (added("changes.csv", {"u mass [t]": "0.1 .", "U  Mass [%]": "1 ."}), [
        ("column-twice", "changes.csv", 1, "u mass"),
    ]),
    (added("changes.csv", {"u mass [t]": "0.1 0.1", "tolerance mass [t]": ". 0.1"}), [
        ("uncertainty-twice", "changes.csv", 3, "tolerance mass"),
    ]),
    (added("drafts.csv", {f"{f} draft [m]": "0.1 . . . ." for f in ("u", "tolerance", "resolution")}),
     [("uncertainty-twice", "drafts.csv", 2, "tolerance draft")]),
    (added("weights.csv", {"u mass [t]": "10 9.99"}), [
        ("uncertainty-too-large", "weights.csv", 2, "u mass"),
    ]),
    (added("weights.csv", {"tolerance mass [%]": "173 174"}), [
        ("uncertainty-too-large", "weights.csv", 3, "tolerance mass"),
    ]),
    (added("drafts.csv", {"resolution draft [m]": "10 11 . . ."}), [
        ("uncertainty-too-large", "drafts.csv", 3, "resolution draft"),
    ]),
    (added("drafts.csv", {"u freeboard [m]": ". . 3 2.9 .", "u point height [m]": ". . 0 0.1 ."}), [
        ("uncertainty-too-large", "drafts.csv", 4, "u freeboard"),
    ]),
    (added("density.csv", {"u density [t/m3]": "1 2"}), [
        ("uncertainty-too-large", "density.csv", 3, "u density"),
    ]),
    (added("tanks.csv", {"u volume [m3]": ". 10 . .", "u fsm [t m]": "9 . . 2.0"}), [
        ("uncertainty-too-large", "tanks.csv", 2, "u fsm"),
        ("uncertainty-too-large", "tanks.csv", 3, "u volume"),
    ]),
    (added("changes.csv", {"u y [m]": "1 2", "u x [m]": "40 40"}), []),
    (added("drafts.csv", {"u draft [m]": ". . 0.01 . ."}), [
        ("value-wrong", "drafts.csv", 4, "u draft"),
    ]),
    (added("drafts.csv", {"u freeboard [m]": "0.01 . . . ."}), [
        ("value-wrong", "drafts.csv", 2, "u freeboard"),
    ]),
    (added("ledger.csv", {"u to z [m]": "0.1 . 0.1"}), [("value-wrong", "ledger.csv", 2, "u to z")]),
    (added("shifts.csv", {"u x [m]": "0.1 . . 0.1 ."}), [("value-wrong", "shifts.csv", 2, "u x")]),
    (added("shifts.csv", {"u moment [t m]": "0.1 . . . ."}), [
        ("column-missing", "shifts.csv", 1, "moment"),
    ]),
    (added("density.csv", {"u relative density [1]": "0.1 ."}), [
        ("column-missing", "density.csv", 1, "relative density"),
    ]),
    (
        {**SMALL, "shifts.csv": SMALL["shifts.csv"].replace("z [m]\n", "z [m],u y [m]\n")
         .replace("5.5\n", "5.5\n2,,,,,,0.1\n")},
        [("cell-missing", "shifts.csv", 7, "weight")],
    ),
    (
        {**SMALL, "changes.csv": "change,item,mass [t],x [m],y [m],z [m],u mass [%]\naboard,mat,,9,0,5,1\n"},
        [("cell-missing", "changes.csv", 2, "mass")],
    ),
    (added("tanks.csv", {"u mass [t]": ". . 0.1 .", "u fsm [t m]": ". 0.1 . ."}), [
        ("tank-contradiction", "tanks.csv", 3, "u fsm"),
        ("tank-contradiction", "tanks.csv", 4, "u mass"),
    ]),
    # uncertainties in trial.toml
    (key('tolerance_length = "3 mm"', 'tolerance_length = "-3 mm"'), [
        ("number-negative", TOML, 0, "devices[1].tolerance_length"),
    ]),
    (key('tolerance_length = "3 mm"', 'u_length = "4 m"'), [
        ("uncertainty-too-large", TOML, 0, "devices[1].u_length"),
    ]),
    (key('tolerance_length = "3 mm"', 'u_length = "100 %"'), [
        ("uncertainty-too-large", TOML, 0, "devices[1].u_length"),
    ]),
    (key('tolerance_length = "3 mm"', 'tolerance_length = "3 mm"\nresolution_length = "1 mm"'), [
        ("uncertainty-twice", TOML, 0, "devices[1].resolution_length"),
    ]),
    (key('tolerance_length = "3 mm"', 'tolerance_span = "3 mm"'), [
        ("key-unknown", TOML, 0, "devices[1].tolerance_span"),
    ]),
    (key('tolerance_length = "3 mm"', "tolerance_length = 3"), [
        ("unit-missing", TOML, 0, "devices[1].tolerance_length"),
    ]),
    (key('tolerance_length = "3 mm"', 'tolerance_length = "3 kg"'), [
        ("unit-wrong", TOML, 0, "devices[1].tolerance_length"),
    ]),
    (key('resolution = "1 mm"', 'resolution = "0.01 deg"'), [
        ("unit-wrong", TOML, 0, "devices[1].resolution"),
    ]),
    (key('resolution = "1 mm"', 'resolution = "0 mm"'), [
        ("number-not-positive", TOML, 0, "devices[1].resolution"),
    ]),
    (key('resolution = "0.01 deg"', 'resolution = "1 mm"'), [
        ("unit-wrong", TOML, 0, "devices[2].resolution"),
    ]),
    (key('kind = "pendulum"', 'kind = "level"'), [("value-wrong", TOML, 0, "devices[1].kind")]),
    (key('u_mass = "10 %"', 'u_mass = "80 kg"'), [
        ("uncertainty-too-large", TOML, 0, "people[1].u_mass"),
    ]),
    (text(TOML, 'mass = "80 kg"\nx = "20 m"\ny = "1.5 m P"\nz = "6 m"', 'u_z = "1 m"'), [
        ("value-wrong", TOML, 0, "people[1].u_z"),
    ]),
    (key('u_volume = "0.2 %"', 'u_volume = "2 m3"'), [
        ("unit-wrong", TOML, 0, "hydrostatics.u_volume"),
    ]),
    (key('u_volume = "0.2 %"', 'u_volume = "100 %"'), [
        ("uncertainty-too-large", TOML, 0, "hydrostatics.u_volume"),
    ]),
    (key('u_km = "5 mm"', 'u_km = "1 %"'), [("unit-wrong", TOML, 0, "hydrostatics.u_km")]),
    (key('kg = "5.40 m"', 'kg = "0 m"\nvcg = "5 m"'), [
        ("number-not-positive", TOML, 0, "limits.kg"),
        ("key-unknown", TOML, 0, "limits.vcg"),
    ]),
    (key('draft = "8 mm"', 'drafts = "8 mm"'), [("key-unknown", TOML, 0, "uncertainty.drafts")]),
    (key('draft = "8 mm"', 'draft = "-8 mm"'), [("number-negative", TOML, 0, "uncertainty.draft")]),
    (key('draft = "8 mm"', 'draft = "1 %"'), [("unit-wrong", TOML, 0, "uncertainty.draft")]),
    (key('tank_mass = "2 %"', 'tank_mass = "1 kg"'), [
        ("unit-wrong", TOML, 0, "uncertainty.tank_mass"),
    ]),
    (key('tank_mass = "2 %"', 'tank_mass = "100 %"'), [
        ("uncertainty-too-large", TOML, 0, "uncertainty.tank_mass"),
    ]),
    (key("draft_shared = 0.4", "draft_shared = 1.1"), [
        ("value-wrong", TOML, 0, "uncertainty.draft_shared"),
    ]),
    (key("draft_shared = 0.4", "draft_shared = true"), [
        ("value-wrong", TOML, 0, "uncertainty.draft_shared"),
    ]),
    (key('arm_shared = "25 %"', 'arm_shared = "125 %"'), [
        ("value-wrong", TOML, 0, "uncertainty.arm_shared"),
    ]),
    (key("r = -0.5", "r = -1.5"), [("value-wrong", TOML, 0, "correlations[1].r")]),
    (key("r = -0.5", 'r = "-0.5"'), [("value-wrong", TOML, 0, "correlations[1].r")]),
    (key("r = -0.5", "r = nan"), [("number-not-finite", TOML, 0, "correlations[1].r")]),
    (key("r = -0.5", f"r = {'9' * 400}"), [("value-wrong", TOML, 0, "correlations[1].r")]),
    (key("r = -0.5", ""), [("key-missing", TOML, 0, "correlations[1].r")]),
    (key(', "tank 1 P, mass"]', "]"), [("value-wrong", TOML, 0, "correlations[1].between")]),
    (key(', "tank 1 P, mass"]', ', "test weight A,  mass"]'), [
        ("value-wrong", TOML, 0, "correlations[1].between"),
    ]),
    (key("r = -0.5", '[[correlations]]\nbetween = ["tank 1 P, mass", "test weight A, mass"]\nr = 0'), [
        ("key-missing", TOML, 0, "correlations[1].r"),
        ("id-twice", TOML, 0, "correlations[2].between"),
    ]),
    # rolling test
    (text(TOML, '[rolling]\ncondition = "empty"\n', ""), [
        ("key-missing", TOML, 0, "rolling.condition"),
    ]),
    (text(TOML, '"empty"', '""'), [("key-missing", TOML, 0, "rolling.condition")]),
    (text(TOML, '"empty"', '"half full"'), [("value-wrong", TOML, 0, "rolling.condition")]),
    (text(TOML, '"empty"', "20"), [("value-wrong", TOML, 0, "rolling.condition")]),
    (text(TOML, '"empty"', '"10 %"\nfactor = "0.8"'), [
        ("key-unknown", TOML, 0, "rolling.factor"),
    ]),
    ({**without("rolls.csv"), "roll.csv": SMALL["rolls.csv"]}, [
        ("file-missing", "rolls.csv", 0, ""),
    ]),
    (without("rolls.csv"), []),
    (row("rolls.csv", 1, "run,rolls,time,note"), [("unit-missing", "rolls.csv", 1, "time")]),
    (row("rolls.csv", 1, "run,rolls,time [m],note"), [("unit-wrong", "rolls.csv", 1, "time")]),
    (row("rolls.csv", 1, "run,rolls [1],time [s],note"), [
        ("unit-unwanted", "rolls.csv", 1, "rolls"),
    ]),
    (row("rolls.csv", 1, "run,count,time [s],note"), [
        ("column-missing", "rolls.csv", 1, "rolls"),
        ("column-unknown", "rolls.csv", 1, "count"),
    ]),
    (row("rolls.csv", 2, "1,0,46.3,"), [("number-not-positive", "rolls.csv", 2, "rolls")]),
    (row("rolls.csv", 2, "1,5.5,46.3,"), [("number-unreadable", "rolls.csv", 2, "rolls")]),
    (row("rolls.csv", 2, "1,,46.3,"), [("cell-missing", "rolls.csv", 2, "rolls")]),
    (row("rolls.csv", 2, ",5,,"), [
        ("cell-missing", "rolls.csv", 2, "run"),
        ("cell-missing", "rolls.csv", 2, "time"),
    ]),
    (row("rolls.csv", 3, "2,5,-46.5,"), [("number-not-positive", "rolls.csv", 3, "time")]),
    (row("rolls.csv", 3, "2,5,fast,"), [("number-unreadable", "rolls.csv", 3, "time")]),
    (row("rolls.csv", 4, "2,5,46.5,"), [("id-twice", "rolls.csv", 4, "run")]),
    # what the criteria ask for
    (added("weights.csv", {"kind": ". gas"}), [("value-wrong", "weights.csv", 3, "kind")]),
    (text("tanks.csv", "box,1.2", "box,0.4"), [("tank-contradiction", "tanks.csv", 2, "level")]),
    (text("tanks.csv", "box,1.2", "box,0"), [("number-not-positive", "tanks.csv", 2, "depth")]),
    (added("tanks.csv", {"type": "wing . . ."}), [("value-wrong", "tanks.csv", 2, "type")]),
    (key("2026-01-19", "2026-03-01"), [("value-wrong", TOML, 0, "test.notice_date")]),
    (key("2026-01-19", '"19.1.2026"'), [("value-wrong", TOML, 0, "test.notice_date")]),
    (key('"1.25 m"', '"1.25 t"'), [("unit-wrong", TOML, 0, "test.gm_before")]),
    (key('"4 kn"', '"4 m"'), [("unit-wrong", TOML, 0, "environment.wind_speed")]),
    (key('"4 kn"', '"-4 kn"'), [("number-negative", TOML, 0, "environment.wind_speed")]),
    (key('shelter = "inner basin"', 'shelter = 3\nmooring = "slack"'), [
        ("value-wrong", TOML, 0, "environment.shelter"),
        ("key-unknown", TOML, 0, "environment.mooring"),
    ]),
    (key("0.998 to 1.031", "0.998"), [("value-wrong", TOML, 0, "instruments.hydrometer_range")]),
    (key("0.998 to 1.031", "1.031 to 0.998"), [
        ("value-wrong", TOML, 0, "instruments.hydrometer_range"),
    ]),
    (key('check = "initial-list"', 'check = "list"'), [("value-wrong", TOML, 0, "overrides[1].check")]),
    (key('check = "initial-list"', ""), [("key-missing", TOML, 0, "overrides[1].check")]),
    (key('high = "0.8 deg"', ""), [("key-missing", TOML, 0, "overrides[1].limit")]),
    (key('high = "0.8 deg"', "high = 0.8"), [("unit-missing", TOML, 0, "overrides[1].high")]),
    (key('high = "0.8 deg"', 'high = "0.8 m"'), [("unit-wrong", TOML, 0, "overrides[1].high")]),
    (key('high = "0.8 deg"', 'high = "0.8 deg"\nlow = "0.9 deg"'), [
        ("value-wrong", TOML, 0, "overrides[1].low"),
    ]),
    (key('limit = "accepted by the authority"', "high = 1"), [
        ("value-wrong", TOML, 0, "overrides[3].high"),
    ]),
    (key('reason = "letter 12"', ""), [("key-missing", TOML, 0, "overrides[3].reason")]),
    (key("low = 3", 'low = "three"'), [("number-unreadable", TOML, 0, "overrides[2].low")]),
    (key("low = 3", "low = true"), [("value-wrong", TOML, 0, "overrides[2].low")]),
    (key("low = 3", "low = inf"), [("number-not-finite", TOML, 0, "overrides[2].low")]),
    (key('check = "movements"\nlow = 3', 'check = "initial-list"\nlow = "0 deg"'), [
        ("id-twice", TOML, 0, "overrides[2].check"),
    ]),
]  # fmt: skip
