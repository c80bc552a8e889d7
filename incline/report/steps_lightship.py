"""Steps through the ledger to lightship."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

from incline.report.arithmetic import Sum, Term, Value
from incline.report.digits import Relation
from incline.report.show import MISSING
from incline.report.steps import Board, Cell, Chapter, Head, Lay, Travel
from incline.report.steps_units import Units
from incline.report.text import markup

if TYPE_CHECKING:
    from incline.report.document import Sheet
    from incline.result import Estimate, LedgerLine

__all__ = ["ledger_board", "lightship_chapter"]

ACTIONS = {
    "deduct": "Deduct: aboard at the test, no part of lightship",
    "add": "Add: part of lightship, not yet aboard",
    "relocate": "Relocate: aboard, but not in its final place",
}


@dataclass(frozen=True, slots=True)
class _Ledger:
    """What the ledger's table and the last divisions share: moments of the whole by axis."""

    ship: tuple[Value | None, ...]
    sums: dict[str, tuple[Value, ...]]
    masses: dict[str, Value]
    light: tuple[Value | None, ...]
    weight: Value


_AXES = ("x", "y", "z")
_WEIGHT = "Δ\N{NO-BREAK SPACE}"
_NAMES = {"x": "LCG", "y": "TCG", "z": "KG"}


def _whole(sheet: Sheet, *, units: bool) -> _Ledger:
    """The ledger's totals as values; without units in the table."""
    outcome, u = sheet.reduction.outcome, Units(sheet.show)
    make = u.of if units else u.bare
    state, lines = outcome.as_inclined, outcome.ledger.lines
    centre = (state.lcg, state.tcg, state.vcg)
    light = outcome.lightship
    found = (light.lcg, light.tcg, light.vcg)
    least = {a: _needed(sheet, e) for a, e in zip(_AXES, found, strict=True)}
    ship = tuple(
        None
        if c is None
        else make(
            "moment", state.displacement * c, f"Σm{a}", f"Δ\N{NO-BREAK SPACE}{_NAMES[a]}", least[a]
        )
        for a, c in zip(_AXES, centre, strict=True)
    )
    masses, sums = {}, {}
    for action in ACTIONS:
        some = [line for line in lines if line.action == action]
        sign = -1.0 if action == "deduct" else 1.0
        masses[action] = make("mass", sign * sum(x.mass for x in some), "Σw", "w")
        sums[action] = tuple(
            make("moment", math.fsum(moment_of(x)[i] for x in some), f"Σm{a}", "m", least[a])
            for i, a in enumerate(_AXES)
        )
    mass = light.displacement.value or math.nan
    ends = tuple(
        None
        if e.value is None or c is None
        else make("moment", mass * e.value, f"M{a}", f"M<sub>{a}</sub>", least[a])
        for a, e, c in zip(_AXES, found, centre, strict=True)
    )
    return _Ledger(ship, sums, masses, ends, make("mass", mass, "Δ_L", "Δ<sub>L</sub>"))


def _needed(sheet: Sheet, found: Estimate) -> int:
    """Decimals of a sum of moments for its centre to follow; single items may need more."""
    show, light = sheet.show, sheet.reduction.outcome.lightship.displacement.value
    if not light or light < 0.0:
        return 1
    room = light / show.scale("mass") * 0.5 * 10.0 ** -show.decimals(found.u, "length", 3)
    return max(1, math.ceil(-math.log10(room)))


def moment_of(line: LedgerLine) -> tuple[float, float, float]:
    """What the line adds to the three first moments [t m]."""
    at = (line.centre.x, line.centre.y, line.centre.z)
    if line.to is not None:
        to = (line.to.x, line.to.y, line.to.z)
        x, y, z = (line.mass * (b - a) for a, b in zip(at, to, strict=True))
        return x, y, z
    sign = -1.0 if line.action == "deduct" else 1.0
    x, y, z = (sign * line.mass * a for a in at)
    return x, y, z


def lightship_chapter(sheet: Sheet) -> Chapter:
    """Sums of the ledger and the divisions that end it."""
    outcome, u = sheet.reduction.outcome, Units(sheet.show)
    state, whole = outcome.as_inclined, _whole(sheet, units=True)
    weight = u.of("mass", state.displacement, "Δ", "Δ")
    parts = whole.masses
    steps: list[Lay] = [
        Lay(
            "Lightship displacement",
            whole.weight,
            Sum((weight, parts["deduct"], parts["add"]), "Δ + Σw"),
        )
    ]
    light = outcome.lightship
    ends = (light.lcg, light.tcg, light.vcg)
    centres = (state.lcg, state.tcg, state.vcg)
    for i, axis in enumerate(_AXES):
        start, end, found, at = whole.ship[i], whole.light[i], ends[i], centres[i]
        if start is None or end is None or found.value is None or at is None:
            continue
        name = _NAMES[axis]
        arm = u.of("length", at, name, name, 4 if axis == "y" else 3)
        total = Sum(
            (start, *(whole.sums[a][i] for a in ACTIONS)),
            f"{_WEIGHT}{name} + Σm<sub>{axis}</sub>",
        )
        least = sheet.show.decimals(found.u, "length", 3)
        result = u.of("length", found.value, f"{name} light", f"{name}<sub>L</sub>", least)
        steps += [
            Lay(f"Moment as inclined, {axis}", start, weight * arm),
            Lay(f"Moment of lightship, {axis}", end, total),
            Lay(f"{name} of lightship", result, end / whole.weight),
        ]
    said = "Masses and moments of the items stand in the ledger, “From as inclined to lightship”."
    return Chapter("Lightship", (said, *steps))


def ledger_board(sheet: Sheet) -> Board:
    """The ledger: every line with mass, centre and moments, sums by action, lightship."""
    show, whole = sheet.show, _whole(sheet, units=False)
    outcome, u = sheet.reduction.outcome, Units(sheet.show)
    length, moment = show.unit("length"), show.unit("moment")
    heads = (
        Head("item", 0.20, left=True),
        Head(f"mass [{show.unit('mass')}]", 0.115),
        *(Head(f"{a} [{length}]", 0.105) for a in _AXES),
        *(Head(f"mass × {a} [{moment}]", 0.123) for a in _AXES),
    )
    state, light = outcome.as_inclined, outcome.lightship
    start = [
        MISSING if c is None else u.bare("length", c, _NAMES[a], "", 4 if a == "y" else 3)
        for a, c in zip(_AXES, (state.lcg, state.tcg, state.vcg), strict=True)
    ]
    weight = u.bare("mass", state.displacement, "Δ")
    rows: list[tuple[Cell, ...]] = [
        ("As inclined", weight, *start, *(m or MISSING for m in whole.ship))
    ]
    totals, relations = {0}, []
    for action, title in ACTIONS.items():
        some = [x for x in outcome.ledger.lines if x.action == action]
        rows.append((title,))
        made = [_line(sheet, u, line) for line in some]
        rows += [row for row, _ in made] or [("none", *[""] * 7)]
        relations += [r for _, links in made for r in links]
        if some:
            mass = whole.masses[action]
            shown = Travel(mass) if action == "relocate" else mass
            rows.append(("sum", shown, "", "", "", *whole.sums[action]))
            totals.add(len(rows) - 1)
            relations += _column_sums(whole, action, [row for row, _ in made])
    ends = [
        MISSING
        if e.value is None
        else u.bare("length", e.value, f"{_NAMES[a]} light", "", show.decimals(e.u, "length", 3))
        for a, e in zip(_AXES, (light.lcg, light.tcg, light.vcg), strict=True)
    ]
    rows.append(("Lightship", whole.weight, *ends, *(m or MISSING for m in whole.light)))
    totals.add(len(rows) - 1)
    return Board("", heads, tuple(rows), tuple(relations), frozenset(totals))


def _line(sheet: Sheet, u: Units, line: LedgerLine) -> tuple[tuple[Cell, ...], list[Relation]]:
    lines = sheet.reduction.outcome.ledger.lines
    sign = -1.0 if line.action == "deduct" else 1.0
    mass = u.recorded("mass", sign * line.mass, "ledger w", "", [x.mass for x in lines])
    mass = Value(mass.amount, mass.place, "", "", mass.least)
    cells: list[Cell] = []
    moments: list[Value] = []
    relations = []
    for i, axis in enumerate(_AXES):
        at = getattr(line.centre, axis)
        arm = u.recorded(
            "length", at, f"ledger {axis}", "", [getattr(x.centre, axis) for x in lines]
        )
        moment = u.bare("moment", moment_of(line)[i], f"m{axis}")
        moments.append(moment)
        cells.append(arm)
        term: Term = mass * arm
        if line.to is not None:
            end = u.recorded("length", getattr(line.to, axis), f"ledger {axis}")
            cells[-1] = Travel(arm, end)
            term = mass * (end - arm)
        relations.append(Relation(moment, term))
    name = line.name if line.source == "ledger" else f"{line.name} [{line.source}]"
    return (markup(name), mass if line.to is None else Travel(mass), *cells, *moments), relations


def _column_sums(whole: _Ledger, action: str, rows: list[tuple[Cell, ...]]) -> list[Relation]:
    columns = {1: whole.masses[action], **{5 + i: v for i, v in enumerate(whole.sums[action])}}
    return [
        Relation(total, Sum(tuple(_counted(row[i]) for row in rows), "Σ"))
        for i, total in columns.items()
    ]


def _counted(cell: Cell) -> Value:
    """The value of a cell that holds one."""
    value = cell.start if isinstance(cell, Travel) else cell
    assert isinstance(value, Value)  # noqa: S101 - masses and moments are values
    return value
