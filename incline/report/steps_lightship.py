"""Steps from GM to the centre of gravity, and through the ledger to lightship."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

from incline.report.arithmetic import Power, Relation, Sum, Term, Value
from incline.report.show import MISSING
from incline.report.steps import Board, Cell, Chapter, Head, Lay, Travel
from incline.report.steps_hydrostatics import shifts_draft
from incline.report.steps_units import Units

if TYPE_CHECKING:
    from incline.record import Tank
    from incline.report.document import Sheet
    from incline.result import Estimate, LedgerLine

__all__ = ["ACTIONS", "ledger_board", "lightship_chapters"]

ACTIONS = {
    "deduct": "Deduct: aboard at the test, no part of lightship",
    "add": "Add: part of lightship, not yet aboard",
    "relocate": "Relocate: aboard, but not in its final place",
}


def lightship_chapters(sheet: Sheet) -> tuple[Chapter, ...]:
    """Free surfaces, centre of gravity as inclined, lightship."""
    return (_free_surfaces(sheet), _gravity(sheet), _lightship(sheet))


def _free_surfaces(sheet: Sheet) -> Chapter:
    state, u = sheet.reduction.outcome.as_inclined, Units(sheet.show)
    free = sheet.reduction.outcome.free_surface
    slack = [t for t in sheet.reduction.trial.tanks if t.fsm]
    total = u.of("moment", free.moment, "ΣFSM", "ΣFSM")
    rise = u.of("length", free.correction, "GGv", "GG<sub>v</sub>", 4)
    weight = u.of("mass", state.displacement, "Δ", "Δ")
    moments = tuple(u.of("moment", t.fsm, "FSM", "FSM") for t in slack)
    steps: list[Lay] = []
    for tank, moment in zip(slack, moments, strict=True):
        term, how = _surface(u, tank)
        steps.append(Lay(f"Free-surface moment, {tank.name}", moment, term, how))
    whole = Lay("Sum of the free-surface moments", total, Sum(moments, "ΣFSM"))
    if not slack:
        whole = Lay("Sum of the free-surface moments", total, how="no slack tank")
    return Chapter(
        "Free surfaces",
        (*steps, whole, Lay("Virtual rise of G", rise, total / weight)),
    )


def _surface(u: Units, tank: Tank) -> tuple[Term | None, str]:
    """How a tank's free-surface moment comes about."""
    boxlike = tank.fsm_basis.startswith("density x length")
    if not (boxlike and tank.density and tank.length and tank.breadth):
        return None, tank.fsm_basis or "as recorded"
    density = u.recorded("density", tank.density, f"ρ {tank.name}", "ρ")
    length = u.recorded("length", tank.length, f"l {tank.name}", "l")
    breadth = u.recorded("length", tank.breadth, f"b {tank.name}", "b")
    return u.as_mass(density * length * Power(breadth, 3)) / 12, ""


def _gravity(sheet: Sheet) -> Chapter:
    outcome, u = sheet.reduction.outcome, Units(sheet.show)
    state, heel = outcome.as_inclined, outcome.heel
    rise = u.of("length", outcome.free_surface.correction, "GGv", "GG<sub>v</sub>", 4)
    gm, km = u.of("length", heel.gm_fluid, "GM", "GM"), u.of("length", state.kmt, "KM", "KM")
    kg, kb = u.of("length", state.vcg, "KG", "KG"), u.of("length", state.kb, "KB", "KB")
    steps: list[Lay] = []
    if heel.method == "straight-line":
        solid = u.of("length", heel.gm_fluid + outcome.free_surface.correction, "GM solid", "GM<sub>s</sub>")
        steps += [
            Lay("GM, liquids held", solid, gm + rise),
            Lay("KG, solid", kg, km - gm - rise),
        ]
    else:
        fluid = u.of("length", state.vcg + outcome.free_surface.correction, "KG fluid", "KG<sub>f</sub>")
        steps += [
            Lay("KG, liquids free to move", fluid, how="from the fit of N(t), not from a straight line"),
            Lay("KG, solid", kg, fluid - rise),
            Lay("GM, liquids free to move, upright", gm, km - fluid),
        ]  # fmt: skip
    if state.lcg is not None and state.lcb is not None:
        *_, tau = shifts_draft(sheet)
        lcb, lcg = (u.of("length", v, s, s) for v, s in ((state.lcb, "LCB"), (state.lcg, "LCG")))
        steps.append(Lay("Longitudinal centre of gravity", lcg, lcb + tau * (kg - kb)))
    if state.tcg is not None and state.list_tan is not None:
        place = "λ" if sheet.reduction.trial.changes else "list read"
        lean = u.ratio(state.list_tan, place, "λ")
        tcg = u.of("length", state.tcg, "TCG", "TCG", 4)
        steps.append(Lay("Transverse centre of gravity", tcg, gm * lean))
    return Chapter("Centre of gravity as inclined, test weights at their start", tuple(steps))


@dataclass(frozen=True, slots=True)
class _Ledger:
    """What the ledger's table and the last divisions share: moments of the whole by axis."""

    ship: tuple[Value | None, ...]
    sums: dict[str, tuple[Value, ...]]
    masses: dict[str, Value]
    light: tuple[Value | None, ...]
    weight: Value


_AXES = ("x", "y", "z")
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
        else make("moment", state.displacement * c, f"Σm{a}", f"M<sub>{a}</sub>", least[a])
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


def _lightship(sheet: Sheet) -> Chapter:
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
        total = Sum((start, *(whole.sums[a][i] for a in ACTIONS)), f"Δ\N{NO-BREAK SPACE}{name} + Σm<sub>{axis}</sub>")
        least = sheet.show.decimals(found.u, "length", 3)
        result = u.of("length", found.value, f"{name} light", f"{name}<sub>L</sub>", least)
        ship = Value(start.amount, start.place, f"Δ\N{NO-BREAK SPACE}{name}", start.unit, start.least)
        steps += [
            Lay(f"Moment as inclined, {axis}", ship, weight * arm),
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
        Head("item", 0.25, left=True),
        Head(f"mass w [{show.unit('mass')}]", 0.11),
        *(Head(f"{a} [{length}]", 0.09) for a in _AXES),
        *(Head(f"w × {a} [{moment}]", 0.125) for a in _AXES),
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


def _line(
    sheet: Sheet, u: Units, line: LedgerLine
) -> tuple[tuple[Cell, ...], list[Relation]]:
    lines = sheet.reduction.outcome.ledger.lines
    sign = -1.0 if line.action == "deduct" else 1.0
    mass = u.recorded("mass", sign * line.mass, "ledger w", "", [x.mass for x in lines])
    mass = Value(mass.amount, mass.place, "", "", mass.least)
    cells: list[Cell] = []
    moments: list[Value] = []
    relations = []
    for i, axis in enumerate(_AXES):
        at = getattr(line.centre, axis)
        arm = u.recorded("length", at, f"ledger {axis}", "", [getattr(x.centre, axis) for x in lines])
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
    return (name, mass if line.to is None else Travel(mass), *cells, *moments), relations


def _column_sums(
    whole: _Ledger, action: str, rows: list[tuple[Cell, ...]]
) -> list[Relation]:
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
