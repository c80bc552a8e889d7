"""How sure the result is, in words; and the appendix that says what makes it unsure."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING, Any

from incline.report.amounts import RESULTS, budget_of, simulated_of, unit_of
from incline.report.budgets import budgets
from incline.report.document import Sheet, note, paragraph, part
from incline.report.monte_carlo import intervals
from incline.report.show import MISSING, signed
from incline.report.tables import Column, Row, grid

if TYPE_CHECKING:
    from incline.result import SlopeUncertainty

__all__ = ["budget_pages", "in_plain_words", "uncertainty"]


_LEADING = 4
"""Sources of KG's uncertainty named in the sentence on it."""


def uncertainty(sheet: Sheet) -> list[Any]:
    """KG in plain words, what it comes from, and the intervals; the sums are in an appendix."""
    return [
        *(paragraph(text) for text in (*in_plain_words(sheet), *_sources(sheet))),
        *intervals(sheet),
        note("Budgets of every result, and the Monte Carlo run, stand in the appendices."),
    ]


def budget_pages(sheet: Sheet) -> list[Any]:
    """The scatter in three, budgets, covariance."""
    return [*_scatter(sheet), *budgets(sheet), *_together(sheet)]


def _sources(sheet: Sheet) -> list[str]:
    """Where most of the uncertainty of KG comes from."""
    budget = budget_of(sheet.reduction.outcome, "vcg")
    if budget is None or not budget.lines or budget.estimate.u is None:
        return []
    first = sorted(budget.lines, key=lambda x: -abs(x.share))[:_LEADING]
    said = "; ".join(f"{x.name} ({sheet.show.plain(100.0 * x.share, 0)} %)" for x in first)
    return [f"Most of it comes from: {said}. In parentheses: share of the variance of KG."]


def in_plain_words(sheet: Sheet) -> list[str]:
    """The interval of KG for someone who will load the ship."""
    found, show = sheet.reduction.outcome.lightship.vcg, sheet.show
    if found.value is None or found.U is None:
        return ["How far KG may be off cannot be told from this test."]
    ends, kg = (found.value - found.U, found.value + found.U), None
    simulated = simulated_of(sheet.reduction.simulation, "vcg")
    if simulated is not None and not simulated.agrees:
        ends, kg = simulated.symmetric, simulated
    decimals = show.decimals(found.u, "length", 3)
    low, high = (show.full(v, "length", decimals) for v in ends)
    how = " (simulated, because the first-order interval was not validated)" if kg else ""
    return [
        f"The best figure for KG of the lightship is {show.full(found.value, 'length', decimals)}; "
        f"by the evidence of this test the true KG lies between {low} and {high} above the "
        f"baseline with a probability of 95 %, that is, 19 times out of 20{how}.",
        "That holds for the sources listed here. It covers a disturbance that the readings cannot "
        "show only where the trial says that nothing excludes it, and never anything aboard that "
        "nobody wrote down.",
        *_disturbed(sheet),
    ]


def _disturbed(sheet: Sheet) -> list[str]:
    found = sheet.reduction.diagnosis
    if found is None or not found.findings:
        return []
    return [
        "The residuals point to a disturbance, see “What the residuals say”. If it is real the "
        "interval does not hold: KG under each finding is given there."
    ]


def _scatter(sheet: Sheet) -> list[Any]:
    seen = sheet.reduction.outcome.slope_uncertainty
    flow: list[Any] = list(part("Scatter of the readings: ship, devices, single readings"))
    if seen.u is None:
        text = "The readings leave no scatter to judge the slope by: its uncertainty is left out."
        flow.append(paragraph(_ended(text, seen.reason)))
        return flow
    text = (
        "Readings at one shift share the ship's own unsteadiness, and readings of one device share "
        "the error of its length; they are not independent. Each line tells the standard "
        "uncertainty of the slope that this part of the scatter would give alone; the slope is "
        "never taken as surer than the largest of them."
    )
    lengths = (
        "Disagreement between the devices stands for the errors of their lengths, which are "
        "therefore no inputs of their own."
        if seen.lengths_seen
        else "Errors of the devices' lengths and scales are inputs of their own in the budgets; "
        "disagreement between devices is not counted a second time."
    )
    return [*flow, paragraph(text), _parts(sheet, seen), note(_ended(lengths, seen.reason))]


def _ended(text: str, reason: str) -> str:
    """The text, and what this trial cannot tell as a sentence of its own."""
    return f"{text} This trial: {reason.rstrip('.')}." if reason else text


def _parts(sheet: Sheet, seen: SlopeUncertainty) -> Any:  # noqa: ANN401 - untyped library
    show, heel = sheet.show, sheet.reduction.outcome.heel
    unit = unit_of(show, None)
    columns = (
        Column("part of the scatter", 0.52, "left"),
        Column(f"u of the slope [{unit.name}]", 0.20),
        Column(f"the same in GM [{show.unit('reading')}]", 0.17),
        Column("dof", 0.11),
    )

    def row(name: str, u: float | None, dof: str = "") -> tuple[str, ...]:
        if u is None:
            return name, MISSING, MISSING, dof
        gm = show.number(heel.gm_fluid * u / abs(heel.slope), "reading", 2)
        return name, signed(f"{u / unit.size:.2e}"), gm, dof

    rows = (
        Row(row("ship: shifts off the line for all devices alike", seen.ship)),
        Row(row("devices: each with a slope of its own", seen.device)),
        Row(row("single readings: what is left", seen.reading)),
        Row(row("slope, as taken in the budgets", seen.u, f"{seen.dof:.1f}"), "total"),
        Row(
            row("for comparison, the regression's own standard error", heel.u_slope, str(heel.dof))
        ),
    )
    return grid(columns, rows, sheet.width)


def _together(sheet: Sheet) -> list[Any]:
    """Covariance and correlation of the four lightship values."""
    covariance, show = sheet.reduction.outcome.covariance, sheet.show
    four = RESULTS[:4]
    units = [show.unit(q.kind) for q in four]
    scales = [show.scale(q.kind) for q in four]
    columns = (
        Column("", 0.28, "left"),
        *(Column(f"{q.name} [{u}]", 0.18) for q, u in zip(four, units, strict=True)),
    )
    together: list[Row] = [Row(("covariance, in the product of both units", *[""] * 4), "band")]
    alike: list[Row] = [Row(("correlation coefficient", *[""] * 4), "band")]
    for i, row in enumerate(covariance):
        cells = [
            MISSING if c is None else signed(f"{c / (scales[i] * scales[j]):.3e}")
            for j, c in enumerate(row)
        ]
        together.append(Row((f"{four[i].name} [{units[i]}]", *cells)))
        ratios = [_correlation(covariance, i, j) for j in range(4)]
        alike.append(
            Row((four[i].name, *(MISSING if r is None else show.plain(r, 3) for r in ratios)))
        )
    return [
        *part("How the lightship values move together", 150.0),
        grid(columns, [*together, *alike], sheet.width),
        note("First order. Whoever combines two of these values needs it: an error of the drafts, "
             "for one, moves displacement and KG at once."),
    ]  # fmt: skip


def _correlation(covariance: tuple[tuple[float | None, ...], ...], i: int, j: int) -> float | None:
    both, own, other = covariance[i][j], covariance[i][i], covariance[j][j]
    if both is None or not own or not other:
        return None
    return both / math.sqrt(own * other)
