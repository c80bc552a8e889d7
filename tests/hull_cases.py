"""Hulls with one thing wrong: the defects that must be told, and words of one of them."""

from __future__ import annotations

from defect_cases import TOML, Files, Found
from small_trial import HULL, SMALL, changed, map_columns

CSV = "offsets.csv"
HEAD = "station,x [m],half breadth [m],height [m]"
ONE_BODY = {
    **SMALL,
    TOML: SMALL[TOML] + '\n[offsets]\nvolume = "extreme"\n[method]\nheel = "heeled-hull"\n',
    "hydrostatics.csv": None,
}


def lines(file: str, new: dict[int, str], files: dict[str, str] = HULL) -> Files:
    """The hull with lines of a file replaced; numbers as a spreadsheet shows them."""
    rows = files[file].split("\n")
    for number, text in new.items():
        rows[number - 1] = text
    return {**files, file: "\n".join(rows)}


def key(old: str, new: str) -> Files:
    return {**changed(TOML, old, new, HULL)}


def ship(*stations: str, head: str = HEAD) -> Files:
    """One body: stations as rows of half breadth and height, spaces between, ``/`` between rows.

    Such as ``2 30: 0 0 / 6 0 / 6 5``.
    """
    text = [head]
    for station in stations:
        name, x = station.split(":")[0].split()
        points = station.split(":")[1].split("/")
        text += [",".join([name, x, *point.split()]) for point in points]
    return {**ONE_BODY, CSV: "\n".join(text)}


def middle(points: str) -> Files:
    """The barge with another section amidships: rows 5 and on."""
    return ship(f"0 0:{BOX}", f"mid 30:{points}", f"2 60:{BOX}")


def column(pattern: str, factor: float) -> Files:
    """The hull with every figure of a column multiplied."""
    return {**HULL, CSV: map_columns(HULL[CSV], pattern, lambda c: f"{float(c) * factor:g}")}


def at(column: str, *rows: int, code: str) -> list[Found]:
    return [(code, CSV, number, column) for number in rows]


def head(key: str, code: str = "value-wrong") -> list[Found]:
    return [(code, TOML, 0, key)]


BOX = "0 0 / 6 0 / 6 5"
SIDED = f"{HEAD},side"
NAMED = f"{HEAD},line"
HULLS: list[tuple[Files, list[Found], str]] = [
    (dict(HULL), [], ""),
    # stations by themselves
    (lines(CSV, {3: "0,0.5,6,0,,chine,barge"}), at("x", 3, code="station-x"),
     'found "0.5" in station "0"; expected one x for all rows of a station'),
    (lines(CSV, {3: "0,,6,0,,chine,barge"}), at("x", 3, code="cell-missing"), ""),
    (lines(CSV, {8: "2,sixty,0,0,S,,barge"}), at("x", 8, code="number-unreadable"), ""),
    (lines(CSV, {2: "0,0,0.5,0,,,barge"}), at("half breadth", 2, code="station-open"),
     'found station "0" starting at half breadth "0.5"'),
    (lines(CSV, {5: "1,30,6,5,,,barge", 7: "1,30,0,0,,deck,barge"}),
     at("half breadth", 5, code="station-open"), "from the keel to the deck edge"),
    (lines(CSV, {11: "2,60,0,0.1,P,,barge"}), at("height", 11, code="station-open"),
     "both sides starting at one point"),
    (lines(CSV, {3: "0,0,-6,0,,chine,barge"}), at("half breadth", 3, code="number-negative"), ""),
    (middle("0 0"), at("", 5, code="points-too-few"), 'one point in station "mid"'),
    (middle("0 0 / 0 0"), [], ""),
    (middle("0 5 / 6 5 / 6 5"), [], ""),
    (middle("0 0 / 6 5"), [], ""),
    (middle("0 0 / 6 0 / 6 0 / 6 5"), at("", 7, code="point-twice"),
     'the point of row 6 again, in station "mid"'),
    (middle("0 0 / 6 0 / 6 2 / 6 1 / 6 5"), at("", 8, code="section-crosses"),
     'meets that to row 7, in station "mid"'),
    (middle("0 0 / 6 0 / 6 2 / 5 2 / 6.5 1 / 6 5"), at("", 9, code="section-crosses"), 'station "mid"'),
    (middle("0 0 / 6 0 / 6 2 / 5 3 / 6 4 / 6 2"), at("", 10, code="section-crosses"), 'station "mid"'),
    (middle("0 0 / 5 0 / 6 4 / 6.5 3"), at("", 7, code="section-crosses"), "passes through the deck"),
    (middle("0 0 / 5 0 / 5.5 3 / 6 4 / 6.5 3"), at("", 8, code="section-crosses"), "through the deck"),
    (middle(f"{BOX} / {BOX}"), at("", 8, code="section-crosses"), "names of their own"),
    (middle("0 5 / 6 5 / 6 0"), at("height", 5, code="section-downwards"), 'round station "mid"'),
    (middle("0 1 / 2 1 / 2 0 / 6 0 / 6 5 / 5.5 5.5 / 5 5.5 / 5 5"), [], ""),  # tunnel and bulwark
    (middle("0 -1 / 0 0 / 6 0 / 6 5 / 6.3 5"), [], ""),  # fin and fender
    (middle("0 0 / 6 0 / 6 5 / 0 5.2"), [], ""),  # cambered deck
    # sides
    (ship(f"0 0:{BOX}", "1 30:0 0 S / 6 0 S / 6 5 S", f"2 60:{BOX}", head=SIDED),
     at("side", 5, code="station-sides"), "only side S of"),
    (lines(CSV, {11: "2,60,0,0,,,barge"}), at("side", 11, code="station-sides"), "the point at the keel in both"),
    (lines(CSV, {11: "2,60,0,0,port,,barge"}), [], ""),
    (lines(CSV, {11: "2,60,0,0,C,,barge"}), at("side", 11, code="value-wrong"), "S or P"),
    (ship(f"0 0:{BOX}", "1 30:0 0 S / 6 0 S / 6 5 S / 0 0 P / 7 0 P / 7 4 P", f"2 60:{BOX}", head=SIDED),
     [], ""),
    (ship(f"0 0:{BOX}", "1 30:0 0 S / 6 0 S / 6 5 S / 0 0 P / 5 0 P / 6 3.4 P / 6.1 3 P", f"2 60:{BOX}",
          head=SIDED), at("", 10, code="section-crosses"), "through the deck"),
    # names
    (lines(CSV, {3: ",0,6,0,,chine,barge"}), at("station", 3, code="cell-missing"), ""),
    (ship(f"0 0:{BOX}", f"1 20:{BOX}", f"2 40:{BOX}", f"1 60:{BOX}"),
     at("station", 11, code="station-twice"), 'station "1" again, after row 5'),
    (ship("0 0:0 0", "1 30:0 0", "2 60:0 0", "0 0:6 5", "1 30:6 5", "2 60:6 5"),
     at("station", 5, 6, 7, code="station-twice"), "its rows together"),
    # along the ship
    (ship(f"0 0:{BOX}", f"2 60:{BOX}"), at("station", 0, code="stations-too-few"), "found two stations of"),
    (ship(f"0 0:{BOX}", f"1 30:{BOX}", f"1a 30:{BOX}", f"2 60:{BOX}"), [], ""),
    (ship(f"0 0:{BOX}", f"1 60:{BOX}", f"1a 60:{BOX}"), at("x", 8, code="stations-too-few"),
     'station "1a" with no other between two breaks'),
    (ship(f"0 0:{BOX}", f"1 40:{BOX}", f"2 30:{BOX}", f"3 60:{BOX}"), at("x", 8, code="station-order"),
     'found "30" of station "2" after "40" of station "1"'),
    (ship(f"0 60:{BOX}", f"1 30:{BOX}", f"2 0:{BOX}"), at("x", 5, 8, code="station-order"), "from aft forward"),
    # lines
    (lines(CSV, {6: "1,30,6,0,,,barge"}), at("line", 5, code="line-broken"),
     'no point on line "chine" in station "1"'),
    (lines(CSV, {6: "1,30,6,0,,chime,barge"}),
     at("line", 5, code="line-broken") + at("line", 6, code="line-broken"), 'did you mean "chine"?'),
    (lines(CSV, {6: "1,30,6,0,,deck,barge", 7: "1,30,6,5,,chine,barge"}), at("line", 5, code="line-order"),
     'the order "chine", "deck"'),
    (lines(CSV, {6: "1,30,6,0,,chine,barge\n1,30,6,2,,Chine,barge"}), at("line", 7, code="line-twice"), "twice"),
    # bodies
    (lines(CSV, {14: "a,2,0,-1,,,skegs"}), [*at("body", 14, code="body-unknown"),
                                           *at("", 14, code="points-too-few"),
                                           *at("half breadth", 15, code="station-open")], "did you mean"),
    (lines(CSV, {15: "a,2,0.25,-1,,,"}), at("body", 15, code="cell-missing"), ""),
    (key('name = "skeg"', 'name = "rudder"'), at("body", 14, 15, 16, 17, code="body-unknown")
     + head("bodies[2]", "body-without-stations"), "one of the [[bodies]]"),
    (key('name = "skeg"', 'name = "Barge"'), head("bodies[2].name", "id-twice"), ""),
    (key('name = "skeg"\n', ""), head("bodies[2].name", "key-missing"), ""),
    (lines(CSV, {1: "station,x [m],half breadth [m],height [m],side,line"}),
     at("body", 1, code="column-missing") + at("", 2, 3, 4, 5, code="cells-too-many"), ""),
    ({**HULL, CSV: map_columns(HULL[CSV].replace(",body", ",note"), "note", str)},
     at("body", 1, code="column-missing"), "to which of the [[bodies]]"),
    ({**ONE_BODY, CSV: HULL[CSV].replace("barge", "hull")}, at("body", 14, 15, 16, 17, code="body-unknown"),
     "has no [[bodies]]"),
    (key('kind = "appendage"', 'kind = "keel"'), head("bodies[2].kind"), ""),
    (key('name = "barge"', 'name = "barge"\nkind = "appendage"'), head("bodies[1].kind"), "of the kind hull"),
    (key('y = "3 m S"\n', ""), head("bodies[2].mirrored"), "off the centreplane"),
    (key("mirrored = true", 'mirrored = "yes"'), head("bodies[2].mirrored"), "without quotation marks"),
    (key('y = "3 m S"', 'y = "3000 m S"'), head("bodies[2].y", "outside-vessel"), "did you mean mm"),
    (key('y = "3 m S"', 'y = "0.1 m S"'), at("half breadth", 15, 18, code="body-overlap"), 'station "a"'),
    (key("mirrored", "mirror"), head("bodies[2].mirror", "key-unknown"), 'did you mean "mirrored"?'),
    (key('[[bodies]]\nname = "skeg"', '[bodies2]\nname = "skeg"'),
     head("bodies2", "key-unknown") + at("body", 14, 15, 16, 17, code="body-unknown"), ""),
    # size
    ({**HULL, CSV: HULL[CSV].replace("half breadth [m]", "half breadth [ft]")},
     at("half breadth", 1, code="implausible"), '"10.09"; expected a largest half breadth'),
    ({**HULL, CSV: HULL[CSV].replace("height [m]", "height [ft]")}, at("height", 1, code="implausible"),
     "a highest point of the hull from 9.843 to 49.21 ft (did you mean m?)"),
    ({**HULL, CSV: HULL[CSV].replace("x [m]", "x [ft]")}, at("x", 1, code="implausible"),
     "from the first station to the last from 157.5 to 275.6 ft (did you mean m?)"),
    (column(r"half breadth .*", 2), at("half breadth", 3, 4, 6, 7, code="outside-vessel"),
     "half breadths count from the centreplane"),
    (column(r"half breadth .*", 1000), at("half breadth", 3, 4, 6, 7, code="outside-vessel"), "did you mean mm"),
    (column(r"height .*", 1000), at("height", 4, 7, 10, 13, code="outside-vessel"), "did you mean mm"),
    (column(r"x .*", 1000), at("x", 5, 8, 14, 17, 20, code="outside-vessel"), "did you mean mm"),
    (column(r"x .*", 0.75), at("x", 1, code="implausible"), "from 48 to 84 m"),
    # trial.toml and the other files
    (key('[offsets]\nvolume = "moulded"\nallowance = "0.5 %"\n', "[offsets]\n"),
     head("offsets.volume", "key-missing"), ""),
    (key('allowance = "0.5 %"\n', ""), head("offsets.allowance", "key-missing"), ""),
    (key('volume = "moulded"\nallowance = "0.5 %"', 'volume = "extreme"\nallowance = "0.5 %"'),
     head("offsets.allowance"), ""),
    (key('u_volume = "0.3 %"', 'u_volume = "1 m3"'), head("offsets.u_volume", "unit-wrong"), ""),
    (key('tolerance_km = "6 mm"', 'lcg = "6 mm"'), head("offsets.lcg", "key-unknown"), ""),
    (key('[hydrostatics]\nvolume = "moulded"\nallowance = "0 %"\n', ""), [], ""),
    ({**HULL, CSV: None, "hydrostatics.csv": SMALL["hydrostatics.csv"]}, [("file-missing", CSV, 0, "")],
     "since trial.toml has [offsets]"),
    ({**HULL, CSV: HEAD, "hydrostatics.csv": SMALL["hydrostatics.csv"]}, [("table-empty", CSV, 0, "")],
     "found a header and no rows; expected a row of offsets"),
    ({**SMALL, TOML: SMALL[TOML] + '\n[[bodies]]\nname = "hull"\n'}, [("file-missing", CSV, 0, "")],
     "since trial.toml has [[bodies]]"),
    ({**HULL, CSV: None, "offset.csv": HULL[CSV]}, [("file-missing", CSV, 0, "")], 'a file "offset.csv"'),
    ({**SMALL, "hydrostatics.csv": None}, [("file-missing", "hydrostatics.csv", 0, "")], "unless it has offsets.csv"),
    ({**SMALL, "hydrostatics.csv": None, CSV: HEAD}, [("table-empty", CSV, 0, "")], "a row of offsets"),
    ({**SMALL, CSV: HEAD}, [], ""),
    ({**HULL, CSV: HULL[CSV].encode("utf-16")}, [("file-encoding", CSV, 1, "")], ""),
    ({**HULL, "hydrostatics.csv": "draft [m],volume [m3],lcb [m],kb [m],km [m]\n"}, [], ""),
    # choices
    (key("[hydrostatics]", '[hydrostatics]\nuse = "offsets"'), head("hydrostatics.use"), "no hydrostatics.csv"),
    ({**SMALL, TOML: SMALL[TOML].replace("[hydrostatics]", '[hydrostatics]\nuse = "table"')},
     head("hydrostatics.use"), "no offsets.csv"),
    (key("[hydrostatics]", '[hydrostatics]\nuse = "drawing"'), head("hydrostatics.use"), ""),
    ({**SMALL, TOML: SMALL[TOML] + '\n[method]\nheel = "heeled-hull"\n'}, head("method.heel"), "there and in use"),
    ({**SMALL, TOML: SMALL[TOML] + '\n[method]\nheel = "heeled"\n'}, head("method.heel"), 'did you mean "heeled-hull"?'),
    ({**SMALL, TOML: SMALL[TOML] + '\n[method]\nheel = "wall-sided"\n'}, [], ""),
    ({**changed(TOML, "[hydrostatics]", '[method]\nheel = "heeled-hull"\n[hydrostatics]\nuse = "table"', HULL),
      "hydrostatics.csv": SMALL["hydrostatics.csv"]}, head("method.heel"), "there and in use"),
    ({**SMALL, TOML: SMALL[TOML] + '\n[density]\nprofile = "layers"\n'}, head("density.profile"), "offsets.csv"),
    (key("[offsets]", '[density]\nprofile = "layers"\n[offsets]'), [], ""),
    (key("[offsets]", '[density]\nprofile = "layer"\n[offsets]'), head("density.profile"), ""),
    ({**key("[offsets]", '[density]\nprofile = "layers"\n[offsets]'),
      "density.csv": SMALL["density.csv"].replace("aft,2,", "aft,,")},
     [("cell-missing", "density.csv", 3, "depth")], "takes the water as layers"),
    ({**key("[offsets]", '[density]\nprofile = "layers"\n[offsets]'),
      "density.csv": "place,density [kg/m3]\nfore,1025\naft,1025\n"},
     [("column-missing", "density.csv", 1, "depth")], "takes the water as layers"),
    ({**key("[offsets]", '[density]\nprofile = "layers"\n[offsets]'),
      "density.csv": SMALL["density.csv"].replace("aft,2,", "aft,1,")},
     [("depths-too-few", "density.csv", 0, "depth")], "two depths at least"),
]  # fmt: skip
