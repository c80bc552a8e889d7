"""Uncertainty budgets: for each result the inputs that matter, the largest share first."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING, Any

from incline.report.amounts import RESULTS, Quoted, Unit, budget_of, freedom, unit_of
from incline.report.canvas_backend import FigureFlowable
from incline.report.document import Sheet, note, part
from incline.report.figures_uncertainty import share_plot
from incline.report.show import MISSING, NOT_DETERMINED
from incline.report.tables import Column, Row, grid

if TYPE_CHECKING:
    from incline.result import Budget, BudgetLine, Estimate

__all__ = ["budgets", "main_lines"]

_MOST = 20
_ENOUGH = 0.99
"""Share of the variance, correlations by their size, that the printed rows account for."""

_CANNOT_SEE = "disturbances that residuals cannot show: not assessed"
_HIDDEN = (
    "disturbances that residuals cannot show: counted where the trial says “not excluded”, else "
    "not; their size and what they would do to KG stand in “What the residuals say”"
)


def main_lines(budget: Budget, most: int = _MOST) -> tuple[BudgetLine, ...]:
    """The lines that matter, in the budget's order.

    Those with the greatest shares of either sign, until the rest is below a hundredth.
    """
    ranked = sorted(range(len(budget.lines)), key=lambda i: (-abs(budget.lines[i].share), i))
    left = math.fsum(abs(line.share) for line in budget.lines)
    spare = (1.0 - _ENOUGH) * left
    kept: set[int] = set()
    for i in ranked[:most]:
        if left <= spare:
            break
        kept.add(i)
        left -= abs(budget.lines[i].share)
    return tuple(line for i, line in enumerate(budget.lines) if i in kept)


def budgets(sheet: Sheet) -> list[Any]:
    """KG first, with a plot of its shares, then the others."""
    order = sorted(RESULTS, key=lambda q: q.key != "vcg")
    flow: list[Any] = []
    for quoted in order:
        budget = budget_of(sheet.reduction.outcome, quoted.key)
        if budget is not None:
            flow += _one(sheet, quoted, budget)
    return flow


def _one(sheet: Sheet, quoted: Quoted, budget: Budget) -> list[Any]:
    title = f"Budget of {'GM fluid' if quoted.key == 'gm_fluid' else quoted.name}"
    if budget.estimate.value is None or budget.estimate.u is None:
        return [*part(title, 50.0), note(f"{quoted.name} {NOT_DETERMINED}: see the remarks.")]
    plot: list[Any] = []
    need = 110.0
    if quoted.key == "vcg" and budget.lines:
        picture = FigureFlowable(share_plot(budget, main_lines(budget, 12), sheet.width))
        plot, need = [picture], picture.height + 24.0
    flow = [*part(title, need), *plot, _table(sheet, quoted, budget, budget.estimate)]
    return [*flow, note(_READING)] if quoted.key == "vcg" else flow


_READING = (
    "u: standard uncertainty of the input; its basis is stated by the trial, assumed, or the "
    "scatter of the test itself. Degrees of freedom are printed where they are not endless. "
    "Sensitivity: change of the result for one unit of the input, without a unit where both have "
    "the same. Part: sensitivity times u. "
    "Share: of the variance of the result, correlations included; with correlations a share may "
    "be negative."
)


def _table(sheet: Sheet, quoted: Quoted, budget: Budget, found: Estimate) -> Any:  # noqa: ANN401 - untyped library
    result = Unit(sheet.show.unit(quoted.fine), sheet.show.scale(quoted.fine))
    columns = (
        Column("input", 0.242, "left"),
        Column("u", 0.112),
        Column("basis", 0.275, "left"),
        Column("shape, dof", 0.113, "left"),
        Column("sensitivity", 0.118),
        Column(f"part [{result.name}]", 0.08),
        Column("share [%]", 0.06),
    )
    u = found.u or 0.0
    decimals = sheet.show.decimals(u, quoted.fine, 0) + 1
    shown = main_lines(budget)
    rows = [_row(sheet, line, result, decimals) for line in shown]
    rest = len(budget.lines) - len(shown)
    if rest:
        share = math.fsum(x.share for x in budget.lines) - math.fsum(x.share for x in shown)
        name = f"{rest} further input{'s' if rest > 1 else ''}"
        rows.append(Row((name, *[""] * 4, MISSING, _share(sheet, share))))
    if quoted.key == "vcg":
        assessed = sheet.reduction.diagnosis is not None
        rows.append(Row((_HIDDEN if assessed else _CANNOT_SEE, *[""] * 6), "span"))
    combined = sheet.show.number(u, quoted.fine, decimals)
    cells = (
        "combined",
        f"{combined}\N{NO-BREAK SPACE}{result.name}",
        f"k = {sheet.show.plain(found.k, 2)}, dof {freedom(found)}",
        "U = k u",
        sheet.show.full(found.U, quoted.fine, decimals),
        combined,
        _share(sheet, math.fsum(x.share for x in budget.lines)),
    )
    return grid(columns, [*rows, Row(cells, "total")], sheet.width)


def _row(sheet: Sheet, line: BudgetLine, result: Unit, decimals: int) -> Row:
    unit = unit_of(sheet.show, line.quantity)
    shape = line.shape if math.isinf(line.dof) else f"{line.shape}, {line.dof:.1f}"
    cells = (
        line.name,
        unit.amount(line.u),
        line.basis,
        shape,
        result.per(unit).amount(line.sensitivity),
        sheet.show.plain(line.part / result.size, decimals),
        _share(sheet, line.share),
    )
    return Row(cells)


def _share(sheet: Sheet, share: float) -> str:
    return sheet.show.plain(100.0 * share, 1)
