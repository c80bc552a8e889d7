"""The ledger from as inclined to lightship, and the result with every reading counted."""

from __future__ import annotations

from dataclasses import replace
from typing import TYPE_CHECKING, Any

from incline.report.document import Sheet, note, paragraph, part
from incline.report.show import MISSING, NOT_DETERMINED, Kind, signed
from incline.report.tables import Column, Row, grid

if TYPE_CHECKING:
    from collections.abc import Iterable

    from incline.report.show import Show
    from incline.result import LedgerLine, Outcome

__all__ = ["all_counted", "to_lightship"]

_ACTIONS = {
    "deduct": "Deduct: aboard at the test, no part of lightship",
    "add": "Add: part of lightship, not yet aboard",
    "relocate": "Relocate: aboard, but not in its final place",
}


def to_lightship(sheet: Sheet) -> list[Any]:
    """All lines with masses, centres and moments; totals; self-check."""
    outcome, show = sheet.reduction.outcome, sheet.show
    length, moment = sheet.units("length"), sheet.units("moment")
    columns = (
        Column("item", 0.28, "left"),
        Column(f"mass [{sheet.units('mass')}]", 0.11),
        *(Column(f"{axis} [{length}]", 0.09) for axis in "xyz"),
        *(Column(f"mass × {axis} [{moment}]", 0.115) for axis in "xyz"),
    )
    rows = _rows(outcome, show)
    if sheet.beside is not None:
        rows = _in_both(rows, _rows(outcome, sheet.beside))
    return [grid(columns, rows, sheet.width), *_sums(sheet), *_bases(sheet)]


def _rows(outcome: Outcome, show: Show) -> list[Row]:
    """As inclined, every line by what is done with it, lightship; in one unit system."""
    state, light = outcome.as_inclined, outcome.lightship
    rows = [_total(show, "As inclined", state.displacement, (state.lcg, state.tcg, state.vcg))]
    for action, title in _ACTIONS.items():
        rows += _group(show, title, [x for x in outcome.ledger.lines if x.action == action])
    centre = (light.lcg.value, light.tcg.value, light.vcg.value)
    return [*rows, _total(show, "Lightship", light.displacement.value, centre)]


def _in_both(rows: list[Row], others: list[Row]) -> list[Row]:
    """Each row of numbers with the same in other units below them."""
    return [
        replace(own, other=("", *other.cells[1:])) if any(other.cells[1:]) else own
        for own, other in zip(rows, others, strict=True)
    ]


def _total(
    show: Show,
    name: str,
    mass: float | None,
    centre: tuple[float | None, float | None, float | None],
) -> Row:
    places = [show.number(c, "length") for c in centre]
    moments = [show.mass_by_length(mass, c) for c in centre]
    return Row((name, show.number(mass, "mass"), *places, *moments), "total")


def _group(show: Show, title: str, lines: list[LedgerLine]) -> list[Row]:
    """The lines of one action under their heading, with the sum of mass and moments."""
    rows = [Row((title, *[""] * 7), "band")]
    if not lines:
        return [*rows, Row(("none", *[""] * 7))]
    rows += [_line(show, line) for line in lines]
    sign = -1.0 if lines[0].action == "deduct" else 1.0
    mass = sign * sum(line.mass for line in lines)
    text = show.number(mass, "mass")
    if lines[0].action == "relocate":
        text = f"({text})"
    moments = [show.number(sum(_moment(line)[i] for line in lines), "moment") for i in range(3)]
    return [*rows, Row(("sum", text, "", "", "", *moments), "total")]


def _moment(line: LedgerLine) -> tuple[float, float, float]:
    """What the line adds to the three first moments [t m]."""
    at = (line.centre.x, line.centre.y, line.centre.z)
    if line.to is not None:
        to = (line.to.x, line.to.y, line.to.z)
        x, y, z = (line.mass * (b - a) for a, b in zip(at, to, strict=True))
        return x, y, z
    sign = -1.0 if line.action == "deduct" else 1.0
    x, y, z = (sign * line.mass * a for a in at)
    return x, y, z


def _line(show: Show, line: LedgerLine) -> Row:
    mass = show.number(line.mass if line.action != "deduct" else -line.mass, "mass")
    places = [show.number(c, "length") for c in (line.centre.x, line.centre.y, line.centre.z)]
    if line.to is not None:
        mass = f"({mass})"
        ends = (show.number(c, "length") for c in (line.to.x, line.to.y, line.to.z))
        places = [f"{a}\n→ {b}" for a, b in zip(places, ends, strict=True)]
    name = line.name if line.source == "ledger" else f"{line.name} [{line.source}]"
    return Row((name, mass, *places, *(show.number(m, "moment") for m in _moment(line))))


def _sums(sheet: Sheet) -> list[Any]:
    ledger, show = sheet.reduction.outcome.ledger, sheet.show
    light = sheet.reduction.outcome.lightship.displacement.value

    def share(mass: float) -> str:
        part_of = f", {show.plain(100.0 * mass / light, 2)} % of lightship" if light else ""
        return f"{show.full(mass, 'mass')}{part_of}"

    balance = signed(f"{ledger.balance / show.scale('moment'):.1e}")
    return [
        paragraph(
            f"To deduct {share(ledger.deduct)}; to add {share(ledger.add)}; to relocate "
            f"{share(ledger.relocate)}."
        ),
        paragraph(
            f"Self-check: the moments of all parts about the resulting centre of gravity add up to "
            f"zero on each axis; the largest remainder is {balance} {show.unit('moment')}."
        ),
        note(
            "The source of a line that does not come from the trial's own ledger stands in "
            "brackets. A relocated mass, in parentheses, is already part of the displacement; only "
            "its travel counts. A dash: not determined, see the remarks."
        ),
    ]


def _bases(sheet: Sheet) -> list[Any]:
    known = [(i.name, i.action, i.basis) for i in sheet.reduction.trial.items if i.basis]
    if not known:
        return []
    columns = (
        Column("item", 0.40, "left"),
        Column("action", 0.12, "left"),
        Column("basis of mass and centre", 0.48, "left"),
    )
    return [*part("Basis of ledger items"), grid(columns, known, sheet.width)]


def all_counted(sheet: Sheet) -> list[Any]:
    """The result beside what it would be with the excluded readings; nothing without exclusions."""
    other = sheet.reduction.with_excluded
    if other is None:
        return []
    show = sheet.show
    columns = (
        Column("", 0.40, "left"),
        Column("as reported", 0.20),
        Column("every reading counted", 0.20),
        Column("difference", 0.20),
    )
    rows: list[list[str]] = []
    pairs = zip(_values(sheet.reduction.outcome), _values(other), strict=False)
    for (name, kind, ours), (_, _, theirs) in pairs:
        gap = MISSING if ours is None or theirs is None else show.number(theirs - ours, kind, 4)
        cells = [NOT_DETERMINED if v is None else show.number(v, kind, 4) for v in (ours, theirs)]
        rows.append([f"{name} [{show.unit(kind)}]", *cells, gap])
    return [
        paragraph(
            "The surveyor left readings out, with the reasons given above. This is what the same "
            "calculation yields when they count."
        ),
        grid(columns, rows, sheet.width),
    ]


def _values(outcome: Outcome) -> Iterable[tuple[str, Kind, float | None]]:
    light = outcome.lightship
    return (
        ("GM fluid", "length", outcome.heel.gm_fluid),
        ("regression's standard error of GM fluid", "length", outcome.heel.u_gm_fluid),
        ("KG as inclined", "length", outcome.as_inclined.vcg),
        ("lightship displacement", "mass", light.displacement.value),
        ("lightship KG", "length", light.vcg.value),
        ("lightship LCG", "length", light.lcg.value),
        ("lightship TCG", "length", light.tcg.value),
    )
