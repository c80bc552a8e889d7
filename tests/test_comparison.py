"""Two lightships compared: the published limits, their edges, what cannot be judged, the command."""

from __future__ import annotations

import json
import math
from dataclasses import replace
from typing import TYPE_CHECKING

import pytest
from conftest import DEMO_TRIALS
from small_trial import SMALL, changed, write
from test_cli import incline

from incline import FieldDataError, read_trial, reduce, to_json
from incline.comparison import (
    Comparison,
    Figures,
    compare,
    read_pair,
    show_comparison,
    situation_named,
    situations,
)
from incline.comparison import to_json as comparison_json
from incline.errors import InclineError
from incline.result import Estimate

if TYPE_CHECKING:
    from pathlib import Path

WORKBOAT = DEMO_TRIALS / "workboat-metric"
BASE = {"displacement": 1000.0, "vcg": 4.0, "lcg": 40.0, "tcg": 0.0}


def ship(lpp: float | None = 100.0, u: float | None = None, **figures: float | None) -> Figures:
    known = {q: Estimate(value=v, u=u) for q, v in (BASE | figures).items()}
    return Figures(name="Ship", path="ship.toml", lpp=lpp, **known)


def judged(situation: str, lpp: float | None = 100.0, **figures: float | None) -> Comparison:
    return compare(ship(lpp), ship(lpp, **figures), situation_named(situation))


def flat(comparison: Comparison) -> str:
    """What is shown, on one line."""
    return " ".join(show_comparison(comparison).split())


PUBLISHED = {
    # SOLAS II-1/5.2 (cargo ship's sister; displacement by length is tested below)
    ("sister-cargo", "lcg", "incline this ship herself"): 0.5,
    # SOLAS II-1/5.5 (passenger ship's five-yearly survey)
    ("passenger-survey", "displacement", "re-incline"): 2.0,
    ("passenger-survey", "lcg", "re-incline"): 1.0,
    # SOLAS II-1/5.4 and its explanatory notes
    ("alteration", "displacement", "give new stability information"): 1.0,
    ("alteration", "displacement", "re-incline"): 2.0,
    ("alteration", "lcg", "give new stability information"): 0.5,
    ("alteration", "lcg", "re-incline"): 1.0,
    ("alteration", "vcg", "give new stability information"): 0.5,
    ("alteration", "vcg", "re-incline"): 1.0,
    # HSC Code 2.7.2
    ("high-speed-craft", "displacement", "incline the craft"): 2.0,
    ("high-speed-craft", "lcg", "incline the craft"): 1.0,
    # 46 CFR 28.535
    ("us-fishing-sister", "displacement", "incline this vessel herself"): 3.0,
    ("us-fishing-sister", "lcg", "incline this vessel herself"): 1.0,
    # 46 CFR 144.315
    (
        "us-towing-changes",
        "weight changes",
        "find the lightship anew as the Coast Guard decides",
    ): 2.0,
    ("us-towing-changes", "lcg", "find the lightship anew as the Coast Guard decides"): 1.0,
}


def test_published_limits() -> None:
    found = {
        (s.id, x.quantity, x.follows): x.percent(None)
        for s in situations()
        for x in s.limits
        if not x.by_length
    }
    assert found == PUBLISHED


def test_every_limit_has_its_source_and_evidence() -> None:
    for s in situations():
        assert s.title
        assert s.limits
        for x in s.limits:
            assert x.source
            assert x.edition
            assert x.evidence in ("read", "reported", "memory")
    assert {s.id for s in situations() if s.sister} == {"sister-cargo", "us-fishing-sister"}


@pytest.mark.parametrize(
    ("length", "percent"),
    [(20.0, 2.0), (50.0, 2.0), (61.0, 1.9), (105.0, 1.5), (149.0, 1.1), (160.0, 1.0), (300.0, 1.0)],
)
def test_sister_displacement_by_length(length: float, percent: float) -> None:
    """SOLAS II-1/5.2: 2 % to 50 m, 1 % from 160 m, 2 - (L - 50)/110 % between."""
    (limit,) = (x for x in situation_named("sister-cargo").limits if x.quantity == "displacement")
    assert limit.percent(length) == pytest.approx(percent, rel=1e-14)
    assert limit.percent(None) is None
    for sign in (-1.0, 1.0):
        for share, verdict in ((0.9999, "within"), (1.0, "within"), (1.0001, "beyond")):
            tonnes = 1000.0 + sign * share * percent * 10.0
            assert judged("sister-cargo", length, displacement=tonnes).verdict == verdict


@pytest.mark.parametrize("key", [k for k in PUBLISHED if k[1] != "weight changes"])
@pytest.mark.parametrize("sign", [-1.0, 1.0])
def test_each_limit_just_inside_and_just_outside(key: tuple[str, str, str], sign: float) -> None:
    situation, quantity, follows = key
    scale = {"displacement": 1000.0, "vcg": 4.0, "lcg": 100.0}[quantity]
    for share, beyond in ((0.9999, False), (1.0, False), (1.0001, True)):
        value = BASE[quantity] + sign * share * PUBLISHED[key] / 100.0 * scale
        found = judged(situation, **{quantity: value})
        (one,) = (
            j for j in found.judgements
            if j.limit.quantity == quantity and j.limit.follows == follows
        )  # fmt: skip
        assert one.status == ("beyond" if beyond else "within")
        assert (follows in found.follows) is beyond


def test_alteration_in_two_steps() -> None:
    assert judged("alteration", vcg=4.0 * 1.004).follows == ()
    assert judged("alteration", vcg=4.0 * 1.007).follows == ("give new stability information",)
    assert judged("alteration", vcg=4.0 * 1.011).follows == (
        "give new stability information",
        "re-incline",
    )


def test_percentages_are_of_the_old_lightship() -> None:
    """1000 t to 1020 t is 2 %; back, 20 t of 1020 t is 1.96 %."""
    up = compare(ship(), ship(displacement=1020.0)).differences[0]
    down = compare(ship(displacement=1020.0), ship()).differences[0]
    assert up.percent == pytest.approx(2.0, rel=1e-14)
    assert down.percent == pytest.approx(-20.0 / 10.2, rel=1e-14)


def test_length_given_goes_before_the_ships_own() -> None:
    """LCG 0.6 m apart: 0.6 % of 100 m is beyond 0.5 %, of 130 m (0.46 %) it is not."""
    s, moved = situation_named("sister-cargo"), ship(lcg=40.6)
    assert compare(ship(), moved, s).verdict == "beyond"
    assert compare(ship(), moved, s, length=130.0).verdict == "within"
    assert compare(ship(None), moved, s).length == 100.0
    differ = compare(ship(120.0), moved, s)
    assert differ.length == 120.0
    assert any("differ by 17 %" in r for r in differ.remarks)


# ---- what cannot be judged


@pytest.mark.parametrize(
    ("old", "new", "why"),
    [
        ({}, {"lcg": None}, "the new lightship does not state it"),
        ({"lcg": None}, {}, "the old lightship does not state it"),
        ({"lcg": None}, {"lcg": None}, "neither lightship states it"),
    ],
)
def test_a_quantity_not_stated_is_not_judged(
    old: dict[str, None], new: dict[str, None], why: str
) -> None:
    found = compare(ship(**old), ship(**new), situation_named("passenger-survey"))
    assert found.verdict == "not judged"
    assert [(j.status, j.why) for j in found.judgements] == [("within", ""), ("not judged", why)]
    heavier = ship(displacement=1100.0, **new)
    beyond = compare(ship(**old), heavier, situation_named("passenger-survey"))
    assert beyond.verdict == "beyond"
    assert "NOT EVERY LIMIT" in show_comparison(beyond)
    assert why in show_comparison(beyond)


def test_without_a_length_neither_lcg_nor_a_limit_by_length_is_judged() -> None:
    found = judged("sister-cargo", None)
    assert [j.status for j in found.judgements] == ["not judged", "not judged"]
    assert all("--length" in j.why for j in found.judgements)
    survey = judged("passenger-survey", None)
    assert [j.status for j in survey.judgements] == ["within", "not judged"]


def test_an_old_kg_of_zero_has_no_percentage() -> None:
    found = compare(ship(vcg=0.0), ship(), situation_named("alteration"))
    assert [j.status for j in found.judgements if j.limit.quantity == "vcg"] == ["not judged"] * 2


def test_a_quantity_without_limits_that_is_not_stated_is_remarked() -> None:
    found = judged("passenger-survey", vcg=None)
    assert found.verdict == "within"
    assert any("KG cannot be compared" in r for r in found.remarks)


def test_without_a_situation_nothing_is_judged() -> None:
    found = compare(ship(), ship(displacement=2000.0))
    assert found.verdict is None
    assert found.judgements == ()
    assert "nothing is judged" in show_comparison(found)


# ---- weights added and removed (46 CFR 144.315)


def towing(changes: list[float] | None, displacement: float = 1000.0) -> tuple[str, str]:
    found = compare(
        ship(), ship(displacement=displacement), situation_named("us-towing-changes"),
        weight_changes=changes,
    )  # fmt: skip
    (one,) = (j for j in found.judgements if j.limit.quantity == "weight changes")
    return one.status, one.why


def test_weights_are_summed_without_their_signs() -> None:
    """10.1 t off and 10 t on: 2.01 % of 1000 t, although displacement changes by 0.01 %."""
    assert towing([10.0, -10.0]) == ("within", "")
    assert towing([10.0, -10.1], 999.9) == ("beyond", "")


def test_without_the_weights_only_a_large_change_of_displacement_tells() -> None:
    status, why = towing(None, 1010.0)
    assert status == "not judged"
    assert "--weight-change" in why
    assert towing(None, 1020.1)[0] == "beyond"
    assert towing(None, 979.9)[0] == "beyond"


def test_what_the_weights_leave_unexplained_is_counted() -> None:
    """15 t listed, 22 t gained: 7 t more at least were added, 2.2 % together."""
    status, why = towing([15.0], 1022.0)
    assert status == "beyond"
    assert "0.7 % of displacement unexplained" in why


# ---- significance


def test_significance_by_hand() -> None:
    """u of 3 t and 4 t: 5 t for the difference, U = 1.960 x 5 = 9.80 t at 95 %."""
    for change, significant in ((9.79, False), (9.81, True), (-9.81, True)):
        d = compare(ship(u=3.0), ship(u=4.0, displacement=1000.0 + change)).differences[0]
        assert d.u == 5.0
        assert pytest.approx(9.79982, abs=5e-6) == d.U  # normal quantile 1.959964
        assert d.significant is significant


def test_degrees_of_freedom_widen_the_interval() -> None:
    """Equal u with 5 degrees each: 10 together (Welch-Satterthwaite), t = 2.228 (tables)."""
    old = replace(ship(), displacement=Estimate(value=1000.0, u=1.0, dof=5.0))
    new = replace(ship(), displacement=Estimate(value=1003.0, u=1.0, dof=5.0))
    d = compare(old, new).differences[0]
    assert pytest.approx(2.228 * math.sqrt(2.0), abs=5e-4 * math.sqrt(2.0)) == d.U
    assert d.significant is False


def test_no_significance_unless_both_state_an_uncertainty() -> None:
    found = compare(ship(u=1.0), ship(displacement=1500.0))
    assert {d.significant for d in found.differences} == {None}
    assert "u not stated" in show_comparison(found)


def test_a_limit_within_the_uncertainty_is_said() -> None:
    """15 t and 20 t limit, U 5 x 1.96 = 9.8 t: the limit could be passed; at 5 t it could not."""
    s = situation_named("passenger-survey")
    near = compare(ship(u=3.0), ship(u=4.0, displacement=1015.0), s).judgements[0]
    far = compare(ship(u=3.0), ship(u=4.0, displacement=1005.0), s).judgements[0]
    unknown = compare(ship(), ship(displacement=1015.0), s).judgements[0]
    assert (near.status, near.open) == ("within", True)
    assert (far.status, far.open) == ("within", False)
    assert unknown.open is None


# ---- sisters (MSC/Circ.1158)


@pytest.mark.parametrize(("calculated", "taken"), [(4.1, "KG 4.100 m."), (3.9, "KG 4.000 m.")])
def test_a_sister_takes_the_higher_kg(calculated: float, taken: str) -> None:
    found = judged("sister-cargo", displacement=1005.0, lcg=40.2, vcg=calculated)
    words = flat(found)
    assert (
        "MSC/Circ.1158: take the displacement found, 1005.00 t, and the LCG found, 40.200 m"
        in words
    )
    assert taken in words


def test_a_sister_without_kg_or_beyond_the_limits_gets_none() -> None:
    assert "until both are known" in flat(judged("sister-cargo", vcg=None))
    assert "only within every limit" in flat(judged("sister-cargo", displacement=1100.0))
    assert "MSC/Circ.1158" not in show_comparison(judged("passenger-survey"))


# ---- the three forms of a lightship


def toml_of(trial: Path, **changes: str) -> str:
    record = read_trial(trial)
    light = reduce(record).outcome.lightship
    entries = {
        "name": "Lead",
        "displacement": f"{light.displacement.value!r} t",
        "kg": f"{light.vcg.value!r} m",
        "lcg": f"{light.lcg.value!r} m",
        "tcg": f"{light.tcg.value!r} m",
        "lpp": f"{record.vessel.lpp!r} m",
        "x_origin": "after perpendicular",
        "u_displacement": f"{light.displacement.u!r} t",
        "u_kg": f"{light.vcg.u!r} m",
        "u_lcg": f"{light.lcg.u!r} m",
        "u_tcg": f"{light.tcg.u!r} m",
        **changes,
    }
    return "".join(f'{k} = "{v}"\n' for k, v in entries.items() if v)


@pytest.fixture
def three(tmp_path: Path) -> tuple[Path, Path, Path]:
    """One lightship as a trial, as JSON and as TOML."""
    (tmp_path / "light.json").write_text(to_json(reduce(read_trial(WORKBOAT))), encoding="utf-8")
    (tmp_path / "light.toml").write_text(toml_of(WORKBOAT), encoding="utf-8")
    return WORKBOAT, tmp_path / "light.json", tmp_path / "light.toml"


def test_trial_json_and_toml_are_one_lightship(three: tuple[Path, Path, Path]) -> None:
    for a in three:
        for b in three:
            old, new = read_pair(a, b)
            assert old.lpp == new.lpp == 28.5
            for q in BASE:
                x, y = getattr(old, q), getattr(new, q)
                # repr writes every digit, and the unit is the program's own
                assert (x.value, x.u) == (y.value, y.u)
            assert compare(old, new, situation_named("alteration")).verdict == "within"


def test_toml_in_other_units_and_from_amidships(tmp_path: Path) -> None:
    (tmp_path / "a.toml").write_text(
        'displacement = "100 LT"\nvcg = "10 ft"\nlcg = "-1 m"\ntcg = "0.2 m P"\nlpp = "30 m"\n'
        'x_origin = "amidships"\ntolerance_lcg = "3 cm"\nu_displacement = "1 %"\n',
        encoding="utf-8",
    )
    old, _ = read_pair(tmp_path / "a.toml", tmp_path / "a.toml")
    assert old.name == "a"
    assert old.displacement.value == pytest.approx(
        101.6046909, rel=1e-9
    )  # 2240 lb of 0.45359237 kg
    assert old.displacement.u == pytest.approx(1.016046909, rel=1e-9)
    assert old.vcg.value == pytest.approx(3.048, rel=1e-15)
    assert old.lcg.value == 14.0
    assert old.lcg.u == pytest.approx(0.03 / math.sqrt(3.0), rel=1e-15)
    assert old.tcg.value == -0.2


TOML_OK = 'displacement = "100 t"\nlpp = "30 m"\n'


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        ("", [("key-missing", "displacement")]),
        ('displacement = ""', [("value-wrong", "displacement")]),
        ("displacement = 100", [("unit-missing", "displacement")]),
        ('displacement = "0 t"', [("number-not-positive", "displacement")]),
        ('displacement = "100 m"', [("unit-wrong", "displacement")]),
        (TOML_OK + 'vcg = "1 m"\nkg = "1 m"', [("value-wrong", "kg")]),
        (TOML_OK + 'lcg = "1 m"', [("key-missing", "x_origin")]),
        (TOML_OK + 'lcg = "1 m"\nx_origin = "bow"', [("value-wrong", "x_origin")]),
        (
            'displacement = "100 t"\nlcg = "1 m"\nx_origin = "amidships"',
            [("key-missing", "lpp")],
        ),
        (TOML_OK + 'u_kg = "1 m"', [("value-wrong", "u_kg")]),
        (TOML_OK + 'u_displacement = "100 t"', [("uncertainty-too-large", "u_displacement")]),
        (TOML_OK + 'kq = "1 m"\nlgc = "x"', [("key-unknown", "kq"), ("key-unknown", "lgc")]),
        (TOML_OK + "kg 3", [("toml-syntax", "")]),
    ],
)
def test_defects_of_a_toml_file(tmp_path: Path, text: str, expected: list[tuple[str, str]]) -> None:
    path = tmp_path / "light.toml"
    path.write_text(text, encoding="utf-8")
    assert found_in(path) == [(code, str(path), column) for code, column in expected]


def found_in(path: Path) -> list[tuple[str, str, str]]:
    with pytest.raises(FieldDataError, match=r"found .*; expected ") as caught:
        read_pair(WORKBOAT, path)
    return [(d.code, d.where.file, d.where.column) for d in caught.value.defects]


LIGHT = {
    "format": 1,
    "trial": {"name": "Old", "date": "2020-01-01", "lpp_m": 30.0},
    "lightship": {
        k: {"value": 1.0, "u": 0.1, "degrees_of_freedom": None}
        for k in ("displacement_t", "vcg_m", "lcg_m", "tcg_m")
    },
}


def light(path: str, value: object) -> str:
    """The JSON of a lightship with one value put differently; ``...`` leaves it out."""
    tree = json.loads(json.dumps(LIGHT))
    *parents, last = path.split(".")
    at = tree
    for key in parents:
        at = at[key]
    at.pop(last) if value is ... else at.update({last: value})
    return json.dumps(tree)


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        ("{", [("json-syntax", "")]),
        ("[" * 100_000, [("json-syntax", "")]),
        ("[]", [("key-missing", "format")]),
        (light("format", 2), [("value-wrong", "format")]),
        (light("format", True), [("value-wrong", "format")]),
        (light("lightship.vcg_m", ...), [("key-missing", "lightship.vcg_m")]),
        (light("lightship.vcg_m", 3), [("value-wrong", "lightship.vcg_m")]),
        (light("lightship.vcg_m.value", "3"), [("value-wrong", "lightship.vcg_m.value")]),
        (light("lightship.vcg_m.value", True), [("value-wrong", "lightship.vcg_m.value")]),
        (
            light("lightship.vcg_m.value", math.nan),
            [("number-not-finite", "lightship.vcg_m.value")],
        ),
        (light("lightship.lcg_m.value", 10**400), [("number-not-finite", "lightship.lcg_m.value")]),
        (
            light("lightship.displacement_t.value", 0),
            [("number-not-positive", "lightship.displacement_t.value")],
        ),
        (
            light("lightship.displacement_t.value", None),
            [("key-missing", "lightship.displacement_t.value")],
        ),
        (light("lightship.lcg_m.u", -1), [("number-negative", "lightship.lcg_m.u")]),
        (
            light("lightship.lcg_m.degrees_of_freedom", 0),
            [("number-not-positive", "lightship.lcg_m.degrees_of_freedom")],
        ),
        (light("trial.lpp_m", -30), [("number-not-positive", "trial.lpp_m")]),
    ],
)
def test_defects_of_a_json_file(tmp_path: Path, text: str, expected: list[tuple[str, str]]) -> None:
    path = tmp_path / "light.json"
    path.write_text(text, encoding="utf-8")
    assert found_in(path) == [(code, str(path), column) for code, column in expected]


def test_json_without_a_length_or_an_lcg_is_good(tmp_path: Path) -> None:
    path = tmp_path / "light.json"
    tree = json.loads(light("trial.lpp_m", ...))
    tree["lightship"]["lcg_m"]["value"] = None
    path.write_text(json.dumps(tree), encoding="utf-8")
    old, _ = read_pair(path, path)
    assert old.name == "Old, 2020-01-01"
    assert (old.lpp, old.lcg.value) == (None, None)


def test_defects_of_both_are_told_at_once(tmp_path: Path) -> None:
    bad = write(tmp_path / "bad", changed("weights.csv", "B,10,", "B,ten,", SMALL))
    with pytest.raises(FieldDataError, match="ten") as caught:
        read_pair(bad, tmp_path / "nowhere.json")
    assert [(d.code, d.where.file) for d in caught.value.defects] == [
        ("number-unreadable", str(bad / "weights.csv")),
        ("file-missing", str(tmp_path / "nowhere.json")),
    ]


@pytest.mark.parametrize("name", ["light.txt", "trial.toml"])
def test_files_of_other_kinds(tmp_path: Path, name: str) -> None:
    (tmp_path / name).write_text(TOML_OK)
    assert found_in(tmp_path / name) == [("file-unreadable", str(tmp_path / name), "")]


def test_unknown_situation() -> None:
    with pytest.raises(InclineError, match="there are sister-cargo, passenger-survey"):
        situation_named("brother")


# ---- the command


@pytest.fixture
def lights(tmp_path: Path) -> Path:
    heavier = {"displacement": "300 t", "u_displacement": ""}  # 2.9 % above the workboat's
    (tmp_path / "same.toml").write_text(toml_of(WORKBOAT), encoding="utf-8")
    (tmp_path / "heavier.toml").write_text(toml_of(WORKBOAT, **heavier), encoding="utf-8")
    (tmp_path / "bare.toml").write_text(TOML_OK, encoding="utf-8")
    return tmp_path


def test_exit_statuses(lights: Path) -> None:
    survey = ("--situation", "passenger-survey")
    within = incline("compare", WORKBOAT, "same.toml", *survey, cwd=lights)
    assert (within.returncode, within.stderr) == (0, "")
    assert "Within every limit" in within.stdout
    beyond = incline("compare", WORKBOAT, "heavier.toml", *survey, cwd=lights)
    assert (beyond.returncode, beyond.stderr) == (3, "")
    assert "BEYOND the limits of this situation: re-incline." in beyond.stdout
    bare = incline("compare", "bare.toml", "bare.toml", *survey, cwd=lights)
    assert bare.returncode == 1
    assert "NOT JUDGED" in bare.stdout
    assert bare.stderr == "incline: not every limit could be judged\n"
    bad = incline("compare", "no.toml", "no.json", *survey, cwd=lights)
    assert bad.returncode == 1
    assert bad.stderr.startswith("incline: 2 problems\n")
    assert "Traceback" not in bad.stderr


@pytest.mark.parametrize(
    "arguments",
    [
        ["same.toml"],
        ["--situation", "alteration"],
        ["--json", "-"],
        ["same.toml", "same.toml", "--situation", "brother"],
        ["same.toml", "same.toml", "--length", "0"],
        ["same.toml", "same.toml", "--length", "nan"],
        ["same.toml", "same.toml", "--situation", "alteration", "--weight-change", "1 t"],
        ["same.toml", "same.toml", "--situation", "us-towing-changes", "--weight-change", "1"],
    ],
)
def test_wrong_usage(lights: Path, arguments: list[str]) -> None:
    run = incline("compare", *arguments, cwd=lights)
    assert run.returncode == 2
    assert run.stdout == ""


def test_list_of_situations() -> None:
    run = incline("compare")
    assert run.returncode == 0
    for s in situations():
        assert f"\n{s.id} ({s.rule_set})\n" in run.stdout
    told = " ".join(run.stdout.split())
    assert "reported: verify against the current edition" in told  # of what was not read


def test_json_of_the_command(lights: Path) -> None:
    call = ("compare", "same.toml", "heavier.toml", "--situation", "alteration", "--length", "30")
    run = incline(*call, "--json", "-", cwd=lights)
    assert run.returncode == 3
    found = json.loads(run.stdout)
    assert found["verdict"] == "beyond"
    assert found["length_m"] == 30.0
    assert [x["status"] for x in found["limits"]] == ["beyond", "beyond"] + ["within"] * 4
    assert found["differences"]["displacement_t"]["significant"] is None
    assert incline(*call, "--json", "out.json", cwd=lights).returncode == 3
    assert json.loads((lights / "out.json").read_text(encoding="utf-8")) == found
    again = incline(*call, "--json", "out.json", cwd=lights)
    assert again.returncode == 1
    assert "--force" in again.stderr


def test_weights_of_the_command(lights: Path) -> None:
    call = ("compare", "same.toml", "same.toml", "--situation", "us-towing-changes")
    few = incline(*call, "--weight-change", "1.2 t", "--weight-change", "-1200 kg", cwd=lights)
    assert few.returncode == 0
    many = incline(*call, "--weight-change", "3 t", "--weight-change", "-3 t", cwd=lights)
    assert many.returncode == 3  # 6 t of 291 t are 2.06 %


def test_units_shown(lights: Path) -> None:
    metric = show_comparison(compare(*read_pair(WORKBOAT, WORKBOAT)))
    assert "displacement, t " in metric
    feet = incline("compare", "same.toml", "same.toml", "--units", "us", cwd=lights)
    assert "displacement, LT" in feet.stdout
    american = show_comparison(compare(*read_pair(WORKBOAT, DEMO_TRIALS / "supply-vessel-us")))
    assert "displacement, LT" in american


def test_the_same_comparison_gives_the_same_json() -> None:
    a, b = (comparison_json(judged("sister-cargo", vcg=4.1)) for _ in range(2))
    assert a == b
    assert json.loads(a)["recommendation"].endswith("KG 4.100 m.")
