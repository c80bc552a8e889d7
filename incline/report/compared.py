"""The lightship found beside those that the trial states: predicted, earlier, a sister's."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING, Any

from incline.comparison import compare, credit, recommendation, situation_named
from incline.comparison.figures import figures_of, figures_of_other
from incline.report.document import Sheet, note, paragraph, part
from incline.report.recorded import about_predicted, pairs_of
from incline.report.show import MISSING, NOT_RECORDED, Kind, Show, signed
from incline.report.tables import Column, Row, facts, grid

if TYPE_CHECKING:
    from incline.comparison import Comparison, Difference, Judgement
    from incline.papers import OtherLightship

__all__ = ["compared"]

_NAMES = {"displacement": "displacement", "vcg": "KG", "lcg": "LCG", "tcg": "TCG"}
_KINDS = {
    "predicted": "Predicted lightship",
    "earlier": "Earlier lightship of this ship",
    "sister": "Lightship of a sister",
}


def compared(sheet: Sheet) -> list[Any]:
    """What was predicted for the test, then each other lightship with its limits."""
    others = sheet.reduction.trial.papers.others
    flow = [
        *part("Predicted before the test, and found"),
        facts(pairs_of(about_predicted(sheet)), sheet.width, abreast=2),
        _found(sheet),
    ]
    if not others:
        said = f"Predicted, earlier or sister's lightship: {NOT_RECORDED}, so nothing is compared."
        return [*flow, paragraph(said)]
    for other in others:
        flow += _other(sheet, other)
    return flow


def _found(sheet: Sheet) -> Any:  # noqa: ANN401 - untyped library
    """What the test found of the same."""
    heel, show = sheet.reduction.outcome.heel, sheet.show
    greatest = max(heel.max_heel_port, heel.max_heel_starboard)
    said = (
        f"Found: GM fluid {show.full(heel.gm_fluid, 'length')}; greatest heel "
        f"{show.degrees(greatest)}°."
    )
    before = sheet.reduction.trial.papers.predicted.heel
    if before is not None and greatest > 1.25 * before:
        said += " The heel was more than a quarter above the predicted one."
    return paragraph(said)


def _other(sheet: Sheet, other: OtherLightship) -> list[Any]:
    situation = situation_named(other.situation) if other.situation else None
    found = compare(figures_of_other(other), figures_of(sheet.reduction), situation)
    came = other.source or f"trial.toml, {other.where.column.split('.')[0]}"
    flow = [
        *part(f"{_KINDS[other.kind]}: {other.name}"),
        _differences(sheet, found),
        note(
            f"Read from {came}. In % of the other value, LCG in % of L "
            f"({sheet.show.full(found.length, 'length')}, {found.length_from}). U: expanded "
            f"uncertainty (95 %) of the difference, where both state one."
        ),
    ]
    if situation is None:
        flow.append(paragraph("The trial names no situation whose limits would count."))
    else:
        flow += _judged(sheet, found)
    return [*flow, *(note(text) for text in found.remarks)]


def _differences(sheet: Sheet, found: Comparison) -> Any:  # noqa: ANN401
    columns = (
        Column("", 0.22, "left"),
        Column("other", 0.14),
        Column("this test", 0.14),
        Column("difference", 0.14),
        Column("in %", 0.10),
        Column("U", 0.12),
        Column("", 0.14, "left"),
    )
    rows: list[Row] = []
    for difference in found.differences:
        rows.append(Row(_difference(sheet.show, difference)))
        if sheet.beside is not None:
            rows.append(Row(_difference(sheet.beside, difference), "beside"))
    return grid(columns, rows, sheet.width)


def _difference(show: Show, d: Difference) -> tuple[str, ...]:
    kind: Kind = "mass" if d.quantity == "displacement" else "length"
    places = 2 if kind == "mass" else 3
    said = {None: "", True: "significant", False: "not significant"}[d.significant]
    percent = MISSING if d.percent is None else show.plain(d.percent, 2)
    values = (show.number(v, kind, places) for v in (d.old.value, d.new.value, d.change))
    name = f"{_NAMES[d.quantity]} [{show.unit(kind)}]"
    return name, *values, percent, show.number(d.U, kind, places), said


def _judged(sheet: Sheet, found: Comparison) -> list[Any]:
    """Each limit of the situation, and what follows."""
    situation = found.situation
    if situation is None:
        return []
    columns = (
        Column("limit of", 0.15, "left"),
        Column("found [%]", 0.10),
        Column("allowed [%]", 0.10),
        Column("status", 0.14, "left"),
        Column("beyond it", 0.19, "left"),
        Column("source", 0.32, "left"),
    )
    rows = [Row(_judgement(j), "stress" if j.status == "beyond" else "plain")
            for j in found.judgements]  # fmt: skip
    verdict = {
        "within": "Within every limit of this situation.",
        "beyond": f"BEYOND limits of this situation: {'; '.join(found.follows)}.",
    }.get(str(found.verdict), "Not every limit could be judged.")
    said = [verdict, recommendation(found, sheet.show.system)]
    return [
        paragraph(f"Limits of the situation {situation.id}: {situation.title}."),
        grid(columns, rows, sheet.width, whole=True),
        *(paragraph(text) for text in said if text),
        *([note(situation.note)] if situation.note else []),
    ]


def _judgement(j: Judgement) -> tuple[str, ...]:
    def percent(value: float | None) -> str:
        return MISSING if value is None or math.isnan(value) else signed(f"{value:.2f}")

    status = "BEYOND" if j.status == "beyond" else j.status
    more = [j.why] if j.why else []
    if j.open:
        more.append("the limit lies within U of the difference")
    return (
        _NAMES.get(j.limit.quantity, j.limit.quantity),
        percent(j.found),
        percent(j.allowed),
        "; ".join([status, *more]),
        j.limit.follows,
        credit(j.limit),
    )
