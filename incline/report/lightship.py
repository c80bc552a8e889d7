"""The ledger from as inclined to lightship, and the result with every reading counted."""

from __future__ import annotations

from dataclasses import replace
from typing import TYPE_CHECKING, Any

from incline.report.canvas_backend import FigureFlowable
from incline.report.document import Sheet, note, paragraph, part
from incline.report.figures_ledger import waterfall_plot
from incline.report.show import MISSING, NOT_DETERMINED, Kind, signed
from incline.report.steps import calculation_of
from incline.report.steps_page import board_table
from incline.report.tables import Column, grid

if TYPE_CHECKING:
    from collections.abc import Iterable

    from incline.report.steps import Board
    from incline.result import Outcome

__all__ = ["all_counted", "to_lightship"]

_NAMES: dict[str, Kind] = {
    "mass": "mass", "x": "length", "y": "length", "z": "length",
    "mass × x": "moment", "mass × y": "moment", "mass × z": "moment",
}  # fmt: skip
"""Headings of the ledger after the item, and their kinds."""


def to_lightship(sheet: Sheet) -> list[Any]:
    """All lines with masses, centres and moments; totals; self-check."""
    found, other = calculation_of(sheet), None
    if sheet.beside is not None:
        also = calculation_of(replace(sheet, show=sheet.beside))
        other = (also.ledger, also.digits)
    table = board_table(_headed(sheet, found.ledger), found.digits, sheet.width, other)
    return [*table, *_sums(sheet), *_waterfall(sheet), *_bases(sheet)]


def _headed(sheet: Sheet, board: Board) -> Board:
    """The ledger with both units in its headings where both are printed."""
    heads = [
        replace(head, markup=f"{name}<br/>[{sheet.units(kind)}]")
        for head, (name, kind) in zip(board.heads[1:], _NAMES.items(), strict=True)
    ]
    return replace(board, heads=(board.heads[0], *heads))


def _waterfall(sheet: Sheet) -> list[Any]:
    outcome = sheet.reduction.outcome
    if not outcome.ledger.lines:
        return []
    picture = FigureFlowable(waterfall_plot(outcome, sheet.show, sheet.width))
    return [
        *part("From KG as inclined to KG of the lightship", picture.height + 24.0),
        picture,
        note(
            "What an item changes depends on what has gone before it; small ones stand together. "
            "−: taken off, +: added, →: moved."
        ),
    ]


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
