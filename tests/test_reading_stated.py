"""Uncertainties that a trial states: each becomes a standard uncertainty in inside units.

A rectangular distribution of half-width a has the standard deviation a / sqrt 3, so a tolerance
gives a / sqrt 3 and a step b, of half-width b / 2, gives b / sqrt 12 (JCGM 100:2008, 4.3.7 and
F.2.2.1).
"""

from __future__ import annotations

import math
import re
from typing import TYPE_CHECKING, Any

import pytest
from small_trial import SMALL, STATED, beside, changed, from_amidships, map_columns, write

from incline.errors import FieldDataError
from incline.reading import read_trial
from incline.record import Correlation, Stated

if TYPE_CHECKING:
    from collections.abc import Iterator, Mapping
    from pathlib import Path

    from incline.record import Trial

ROUNDING = 1e-14  # a few products of numbers rounded to 16 digits


def read(folder: Path, files: Mapping[str, str | bytes | None]) -> Trial:
    return read_trial(write(folder, files))


def said(stated: Mapping[str, Stated]) -> dict[str, tuple[Any, str]]:
    """Statements in a form that compares to rounding."""
    return {key: (pytest.approx(s.u, rel=ROUNDING), s.shape) for key, s in stated.items()}


def normal(u: float) -> tuple[float, str]:
    return u, "normal"


def rectangular(u: float) -> tuple[float, str]:
    return u, "rectangular"


def all_stated(trial: Trial) -> Iterator[tuple[str, Mapping[str, Stated]]]:
    """Place and statements of every record that can have some."""
    groups = (
        trial.people, trial.devices, trial.weights, trial.shifts, trial.drafts, trial.samples,
        trial.tanks, trial.items, trial.changes, [m for s in trial.shifts for m in s.moves],
        [trial.table],
    )  # fmt: skip
    for group in groups:
        for record in group:
            yield str(record.where), record.stated


@pytest.mark.parametrize(
    ("form", "shape", "factor"),
    [
        ("u", "normal", 1.0),
        ("tolerance", "rectangular", 1.0 / math.sqrt(3.0)),
        ("resolution", "rectangular", 1.0 / math.sqrt(12.0)),
    ],
)
@pytest.mark.parametrize(
    ("unit", "written", "inside"),
    [("t", "0.12", 0.12), ("kg", "120", 0.12), ("%", "1.2", 0.12), ("lb", "100", 0.045359237)],
)
def test_forms_and_units(  # weights of 10 t
    tmp_path: Path, form: str, shape: str, factor: float, unit: str, written: str, inside: float
) -> None:
    table = beside("weights.csv", {f"{form} mass [{unit}]": f"{written} ."})
    first, second = read(tmp_path, {**SMALL, "weights.csv": table}).weights
    assert said(first.stated) == {"mass": (inside * factor, shape)}
    assert second.stated == {}


@pytest.mark.parametrize("form", ["tolerance", "resolution"])
def test_a_rectangle_of_that_width_has_that_standard_deviation(tmp_path: Path, form: str) -> None:
    """Moments of a flat density, by the trapezoidal rule, against what the reader makes of it."""
    width = 0.04 * (2.0 if form == "tolerance" else 1.0)
    steps = 2000
    points = [width * (n / steps - 0.5) for n in range(steps + 1)]
    ends = (points[0] ** 2 + points[-1] ** 2) / 2.0
    variance = (sum(p * p for p in points) - ends) / steps
    table = beside("weights.csv", {f"{form} z [m]": "0.04 ."})
    u = read(tmp_path, {**SMALL, "weights.csv": table}).weights[0].stated["z"].u
    assert u == pytest.approx(math.sqrt(variance), rel=1e-6)  # the rule errs by 1 / steps^2


def test_a_trial_without_statements_has_none(tmp_path: Path) -> None:
    trial = read(tmp_path, SMALL)
    assert [stated for _, stated in all_stated(trial) if stated] == []
    assert [d.resolution for d in trial.devices] == [None, None]
    settings = trial.settings
    assert (settings.kg_limit, settings.assumed, settings.correlations) == (None, {}, ())


def test_weights_and_shifts(tmp_path: Path) -> None:
    trial = read(tmp_path, STATED)
    step = rectangular(0.01 / math.sqrt(12.0))
    assert said(trial.weights[0].stated) == {"mass": normal(0.02), "x": step}
    assert said(trial.weights[1].stated) == {
        "mass": rectangular(0.05 / math.sqrt(3.0)),
        "x": step,
    }
    arm = rectangular(0.01 / math.sqrt(3.0))
    assert [[said(m.stated) for m in s.moves] for s in trial.shifts] == [
        [{"y": arm}, {"y": arm}], [{"y": arm}], [{"y": arm, "z": normal(0.03)}], [{}],
    ]  # fmt: skip


def test_moments_given_as_such(tmp_path: Path) -> None:
    shifts = "shift,moment [t m],u moment [%]\n0,0,\n1,80,0.5\n2,0,\n3,80 P,0.5\n"
    trial = read(tmp_path, {**SMALL, "shifts.csv": shifts, "weights.csv": None})
    assert [said(s.stated) for s in trial.shifts] == [
        {}, {"moment": normal(0.4)}, {}, {"moment": normal(0.4)},
    ]  # fmt: skip


def test_drafts(tmp_path: Path) -> None:
    """A freeboard and the height of its point are independent: their variances add."""
    trial = read(tmp_path, STATED)
    step = 0.02 / math.sqrt(12.0)
    assert [said(d.stated) for d in trial.drafts] == [
        {"draft": normal(0.01)},
        {"draft": rectangular(0.005 * 3.0 / math.sqrt(3.0))},
        {"draft": normal(math.sqrt(step**2 + 0.008**2))},
        {"draft": rectangular(step)},
        {},
    ]
    assert len(trial.remarks) == 1
    assert "1 of 5 draft readings state an uncertainty of only one" in trial.remarks[0]


def test_the_keel_does_not_scale_the_uncertainty_of_a_draft(tmp_path: Path) -> None:
    """A percentage is of the draft as written at the marks."""
    toml = SMALL["trial.toml"].replace(
        'marks_from = "baseline"', 'marks_from = "underside of keel"\nkeel_thickness = "250 mm"'
    )
    table = beside("drafts.csv", {"u draft [%]": "1 1 . . 1"})
    trial = read(tmp_path, {**SMALL, "trial.toml": toml, "drafts.csv": table})
    assert trial.drafts[0].draft == 2.75
    assert said(trial.drafts[0].stated) == {"draft": normal(0.03)}


def test_density(tmp_path: Path) -> None:
    trial = read(tmp_path, STATED)
    step = rectangular(0.0005 / math.sqrt(12.0))
    assert [said(s.stated) for s in trial.samples] == [{"density": step}] * 2


@pytest.mark.parametrize(("unit", "written"), [("1", "0.002"), ("%", "0.2")])
def test_relative_density(tmp_path: Path, unit: str, written: str) -> None:
    """Of a density of 1.000 x 0.96 t/m3, 0.2 % is 0.00192 t/m3."""
    table = f"place,relative density [1],u relative density [{unit}]\nfore,1,{written}\n"
    toml = SMALL["trial.toml"] + '\n[density]\nrelative_to = "0.96 t/m3"\n'
    trial = read(tmp_path, {**SMALL, "density.csv": table, "trial.toml": toml})
    assert said(trial.samples[0].stated) == {"density": normal(0.00192)}


def test_tanks(tmp_path: Path) -> None:
    """The mass of 8.5 t from 10 m3 and 0.85 t/m3: relative variances of the factors add."""
    trial = read(tmp_path, STATED)
    box, full, empty, slack = trial.tanks
    assert said(box.stated) == {"mass": normal(0.1), "fsm": normal(0.05 * 9.0)}  # of 4 x 3^3 / 12
    density = 0.01 / math.sqrt(3.0)
    assert said(full.stated) == {
        "volume": normal(0.3),
        "density": rectangular(density),
        "y": rectangular(0.1 / math.sqrt(3.0)),
        "mass": normal(math.sqrt((0.85 * 0.3) ** 2 + (10.0 * density) ** 2)),
    }
    assert empty.stated == {}
    assert said(slack.stated) == {"mass": normal(0.2), "fsm": normal(0.205)}


def tank(tmp_path: Path, columns: Mapping[str, str], old: str = "", new: str = "") -> Trial:
    table = beside("tanks.csv", columns)
    assert not old or table.count(old) == 1
    return read(tmp_path, {**SMALL, "tanks.csv": table.replace(old, new) if old else table})


def test_mass_of_a_tank_from_its_volume_alone(tmp_path: Path) -> None:
    """Without a mass written, and without an uncertainty of the density: said in a remark."""
    trial = tank(tmp_path, {"tolerance volume [%]": ". 3 . ."}, "0.85,,10,8.5", "0.85,,10,")
    assert said(trial.tanks[1].stated)["mass"] == rectangular(8.5 * 0.03 / math.sqrt(3.0))
    assert "tank 2 C is that stated of its volume alone" in trial.remarks[0]


def test_mass_of_a_box_from_its_density_alone(tmp_path: Path) -> None:
    trial = tank(tmp_path, {"u density [t/m3]": "0.004 . . ."})
    assert said(trial.tanks[0].stated)["mass"] == normal(6.0 * 0.004)
    assert "tank 1 P is that stated of its density alone" in trial.remarks[0]


def test_a_weighed_mass_does_not_depend_on_the_density(tmp_path: Path) -> None:
    trial = tank(tmp_path, {"u density [t/m3]": ". . . 0.004"})
    assert said(trial.tanks[3].stated) == {"density": normal(0.004)}
    assert trial.remarks == ()


def test_the_mass_itself_comes_first(tmp_path: Path) -> None:
    trial = tank(tmp_path, {"u volume [m3]": ". 0.3 . .", "u mass [t]": ". 0.05 . ."})
    assert said(trial.tanks[1].stated)["mass"] == normal(0.05)


def test_a_percentage_of_nothing_is_nothing(tmp_path: Path) -> None:
    trial = tank(tmp_path, {"u mass [t]": "0.1 . 0 .", "u fsm [%]": "10 10 10 10"})
    assert trial.tanks[2].stated == {}
    assert trial.tanks[1].stated["fsm"].u == 0.0


def test_ledger_and_changes(tmp_path: Path) -> None:
    trial = read(tmp_path, STATED)
    assert [said(i.stated) for i in trial.items] == [
        {"mass": normal(0.05)},
        {},
        {"mass": normal(0.04), "to_x": normal(0.5), "to_y": rectangular(0.06 / math.sqrt(3.0))},
    ]
    assert [said(c.stated) for c in trial.changes] == [
        {"mass": rectangular(0.5 / math.sqrt(12.0)), "y": normal(0.1)},
        {"mass": rectangular(0.1 / math.sqrt(12.0))},
    ]


def test_devices_and_people(tmp_path: Path) -> None:
    trial = read(tmp_path, STATED)
    pendulum, inclinometer = trial.devices
    assert said(pendulum.stated) == {"length": rectangular(0.003 / math.sqrt(3.0))}
    assert said(inclinometer.stated) == {"scale": normal(0.001)}
    assert pendulum.resolution == pytest.approx(0.001, rel=ROUNDING)
    assert inclinometer.resolution == pytest.approx(math.radians(0.01), rel=ROUNDING)
    assert said(trial.people[0].stated) == {
        "mass": normal(0.008),
        "x": normal(0.1),
        "y": rectangular(0.05 * 1.5 / math.sqrt(3.0)),  # no sign, though y is to port
        "z": rectangular(1.0 / math.sqrt(12.0)),
    }


def test_the_span_of_a_u_tube_is_its_length(tmp_path: Path) -> None:
    new = 'kind = "u-tube"\nspan = "4 m"\nu_span = "0.1 %"\nresolution = "1/16 in"'
    files = changed("trial.toml", 'kind = "pendulum"\nlength = "4 m"', new)
    device = read(tmp_path, files).devices[0]
    assert said(device.stated) == {"length": normal(0.004)}
    assert device.resolution == pytest.approx(0.0254 / 16.0, rel=ROUNDING)


def test_hydrostatic_table(tmp_path: Path) -> None:
    assert said(read(tmp_path, STATED).table.stated) == {
        "volume": normal(0.002),
        "km": normal(0.005),
        "lcb": rectangular(0.012 / math.sqrt(3.0)),
    }


def test_limit_assumptions_and_correlations(tmp_path: Path) -> None:
    settings = read(tmp_path, STATED).settings
    assert settings.kg_limit == 5.4
    assert settings.assumed == pytest.approx(
        {"draft": 0.008, "tank_mass": 0.02, "draft_shared": 0.4, "arm_shared": 0.25}, rel=ROUNDING
    )
    (correlation,) = settings.correlations
    assert isinstance(correlation, Correlation)
    assert (correlation.a, correlation.b) == ("test weight A, mass", "tank 1 P, mass")
    assert correlation.r == -0.5
    assert correlation.where.column == "correlations[1].between"


def test_a_percentage_is_of_the_value_as_written_from_amidships(tmp_path: Path) -> None:
    table = beside("changes.csv", {"u x [%]": "1 ."}).replace("mat,1.5,30", "mat,1.5,20")
    change = read(tmp_path, {**from_amidships(), "changes.csv": table}).changes[0]
    assert change.centre.x == 50.0
    assert said(change.stated) == {"x": normal(0.2)}


def test_the_same_statements_in_us_units(tmp_path: Path) -> None:
    """Tables in feet and long tons give the same uncertainties to rounding."""
    ton = 1.0160469088

    def scaled(cell: str, unit: float) -> str:
        number, _, side = cell.partition(" ")
        return f"{float(number) / unit!r} {side}"

    def us(text: str) -> str:
        text = map_columns(text, r".*\[m\]", lambda c: scaled(c, 0.3048))
        text = map_columns(text, r".*\[m3\]", lambda c: scaled(c, 0.3048**3))
        text = map_columns(text, r".*\[t\]", lambda c: scaled(c, ton))
        return text.replace("[m]", "[ft]").replace("[m3]", "[ft3]").replace("[t]", "[LT]")

    files = {n: us(t) if n.endswith(".csv") else t for n, t in STATED.items()}
    found = [(w, said(s)) for w, s in all_stated(read(tmp_path / "a", files))]
    expected = list(all_stated(read(tmp_path / "b", STATED)))
    assert len([s for _, s in expected if s]) == 23
    # Comments are lost on the way, so places differ in their rows.
    rows = [{k: (s.u, s.shape) for k, s in stated.items()} for _, stated in expected]
    assert [s for _, s in found] == rows


def test_feet_and_inches(tmp_path: Path) -> None:
    table = beside("drafts.csv", {"tolerance draft [m]": '1/2" 1/2" . . 1/2"'})
    draft = read(tmp_path, {**SMALL, "drafts.csv": table}).drafts[0]
    assert said(draft.stated) == {"draft": rectangular(0.0127 / math.sqrt(3.0))}


def test_columns_left_blank_say_nothing(tmp_path: Path) -> None:
    table = beside("drafts.csv", {"u draft [m]": ". . . . .", "tolerance draft [m]": ". . . . ."})
    assert all(not d.stated for d in read(tmp_path, {**SMALL, "drafts.csv": table}).drafts)


@pytest.mark.parametrize(
    ("file", "columns", "hint"),
    [
        ("changes.csv", {"u mas [t]": ". ."}, 'did you mean "u mass"?'),
        ("changes.csv", {"tolerence y [m]": ". ."}, 'did you mean "tolerance y"?'),
    ],
)
def test_hints_on_headings(
    tmp_path: Path, file: str, columns: Mapping[str, str], hint: str
) -> None:
    with pytest.raises(FieldDataError, match=re.escape(hint)):
        read(tmp_path, {**SMALL, file: beside(file, columns)})


def test_hint_on_an_assumption(tmp_path: Path) -> None:
    files = changed("trial.toml", "tank_mass =", "tank_mas =", STATED)
    with pytest.raises(FieldDataError, match='did you mean "tank_mass"'):
        read(tmp_path, files)


@pytest.mark.parametrize("units", ["metric", "us"])
def test_what_a_blank_trial_proposes_can_be_read(
    tmp_path: Path, pytestconfig: Any, units: str
) -> None:
    """Every line of the blank ``trial.toml`` that is commented out, put in force in a full trial."""
    text = (pytestconfig.rootpath / "templates" / units / "trial.toml").read_text("utf-8")
    lines = re.findall(r"^# (\[[^ ]+\]|[a-z_]+ = .*)$", text, flags=re.MULTILINE)
    toml = SMALL["trial.toml"]
    anchors = {
        "u_volume": "allowance", "u_km": "allowance", "u_lcb": "allowance", "u_length": "length",
        "resolution": "length", "u_mass": "mass",
    }  # fmt: skip
    filled = {
        '["", ""]': '["a", "b"]', 'name = ""': 'name = "demihull"', 'volume = ""': 'volume = "moulded"',
        'allowance = ""': 'allowance = "0.5 %"',
    }  # fmt: skip
    for proposed in lines:
        anchor = anchors.get(proposed.split(" ")[0])
        if proposed.startswith('use = "offsets"'):  # of the hydrostatics, not of a drawing
            anchor = "allowance"
        line = proposed
        for blank, value in filled.items():
            line = line.replace(blank, value)
        if anchor is None:
            toml += f"{line}\n"
        else:
            toml = re.sub(rf"^({anchor} = .*)$", rf"\1\n{line}", toml, flags=re.MULTILINE)
    half = "0,0", "2.5,0", "2.5,5"
    rows = [f"{n},{x},{point},demihull" for n, x in enumerate((0, 30, 60)) for point in half]
    table = "\n".join(["station,x [m],half breadth [m],height [m],body", *rows])
    trial = read(tmp_path, {**SMALL, "trial.toml": toml, "offsets.csv": table})
    assert set(trial.table.stated) == {"volume", "km", "lcb"}
    assert trial.settings.use == "offsets"
    assert [(b.kind, b.y > 2.5, b.mirrored) for b in trial.offsets.bodies] == [("hull", True, True)]
    assert trial.offsets.allowance == 0.005
    assert set(trial.devices[0].stated) == {"length"}
    assert trial.devices[0].resolution is not None
    assert set(trial.people[0].stated) == {"mass"}
    assert trial.settings.kg_limit is not None
    assert set(trial.settings.assumed) == {"draft", "tank_mass", "draft_shared"}
    assert [c.r for c in trial.settings.correlations] == [0.5]
