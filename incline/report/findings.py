"""What the residuals say: findings, what could not have shown, and which readings matter most."""

from __future__ import annotations

from itertools import zip_longest
from typing import TYPE_CHECKING, Any

from incline.diagnosis.evidence import EVIDENCE, NOT_EXCLUDED
from incline.diagnosis.search import times_of
from incline.report.canvas_backend import FigureFlowable
from incline.report.document import Sheet, note, paragraph, part
from incline.report.figures_findings import finding_plot
from incline.report.show import MISSING
from incline.report.tables import Column, facts, grid
from incline.telling import NOTHING, TOO_FEW, groups_of, place_of

if TYPE_CHECKING:
    from collections.abc import Sequence

    from incline.result import Finding, Influence, Unseen

__all__ = ["finding_line", "residuals"]

_READINGS = 10
"""Most single readings whose influence is printed."""
_EITHER_WAY = ("wind or current changed once", "slow drift")
"""Disturbances without a sign of their own."""
_INTRO = (
    "The readings less the common fit are held against a list of disturbances, each with the "
    "shape it would leave. One is named only where it fits better than chance would let it in 19 "
    "of 20 undisturbed trials. A finding is something to look into: nothing has been dropped or "
    "corrected because of it."
)


def residuals(sheet: Sheet) -> list[Any]:
    """Findings one after another, with plots and tables; or that there was too little to go by."""
    found = sheet.reduction.diagnosis
    if found is None:
        return [paragraph(TOO_FEW)]
    groups = groups_of(found)
    flow: list[Any] = [paragraph(_INTRO)]
    base = [p.fitted for p in sheet.reduction.outcome.heel.points if not p.excluded]
    if not groups:
        flow += [paragraph(NOTHING), _plot(sheet, base, ())]
    for number, group in enumerate(groups, start=1):
        flow += _group(sheet, number, group, base)
        base = list(group[0].expected) or base
    if groups and groups[-1][0].expected:
        flow += _left(sheet, base)
    return [*flow, *_unseen(sheet, found.unseen), *_influence(sheet, found.influence)]


def finding_line(sheet: Sheet) -> str:
    """The leading finding in a sentence or two, or that there is none."""
    found = sheet.reduction.diagnosis
    if found is None:
        return TOO_FEW
    groups = groups_of(found)
    if not groups:
        return NOTHING
    first = groups[0][0]
    said = f"The residuals point to: {first.cause} ({place_of(first)})."
    if first.vcg_if_so is not None:
        said += f" KG of the lightship if so: {_if_so(sheet, first)}."
    if len(groups) > 1:
        said += f" Then to: {'; '.join(f'{g[0].cause} ({place_of(g[0])})' for g in groups[1:])}."
    return f"{said} See “What the residuals say”."


def _plot(sheet: Sheet, base: Sequence[float], expected: Sequence[float]) -> FigureFlowable:
    times = [float(t) for t in times_of(sheet.reduction.trial)]
    heel = sheet.reduction.outcome.heel
    return FigureFlowable(finding_plot(heel, base, expected, times, sheet.show, sheet.width))


def _group(sheet: Sheet, number: int, group: Sequence[Finding], base: Sequence[float]) -> list[Any]:
    """A finding, what explains the same nearly as well, and the plot."""
    first, rivals = group[0], group[1:]
    show = sheet.show
    score = f"{show.plain(first.score, 1)}, critical value {show.plain(first.critical, 1)}"
    pairs = (
        ("Where", place_of(first)),
        ("Size", first.size),
        ("Score", score),
        ("KG of lightship if so", _if_so(sheet, first, after=number > 1)),
        ("What to do", first.advice),
    )
    flow = [
        *part(f"Finding {number}: {first.cause}", 230.0),
        facts(pairs, sheet.width),
        _plot(sheet, base, first.expected),
    ]
    return [*flow, *_rivals(sheet, rivals)] if rivals else flow


def _if_so(sheet: Sheet, finding: Finding, *, after: bool = False) -> str:
    """KG under a finding, and by how much that is higher or lower than the reported one.

    With ``after`` those before it are also at work.
    """
    show, now = sheet.show, sheet.reduction.outcome.lightship.vcg
    if finding.vcg_if_so is None or now.value is None:
        return "cannot be told"
    change = finding.vcg_if_so - now.value
    way = "higher" if change > 0.0 else "lower"
    decimals = show.decimals(now.u, "length", 3)
    kg = show.full(finding.vcg_if_so, "length", decimals)
    kg += " together with the findings above" if after else ""
    return f"{kg}, {show.full(abs(change), 'reading')} {way} than the result"


def _rivals(sheet: Sheet, rivals: Sequence[Finding]) -> list[Any]:
    show, now = sheet.show, sheet.reduction.outcome.lightship.vcg.value
    columns = (
        Column("explains it nearly as well", 0.20, "left"),
        Column("where", 0.14, "left"),
        Column("size", 0.24, "left"),
        Column(f"KG if so [{show.unit('length')}]", 0.09),
        Column(f"less result [{show.unit('reading')}]", 0.08),
        Column("what to do", 0.25, "left"),
    )
    rows = [
        (
            r.cause,
            place_of(r),
            r.size,
            show.number(r.vcg_if_so, "length"),
            show.number(_less(r.vcg_if_so, now), "reading"),
            r.advice,
        )
        for r in rivals
    ]
    return [grid(columns, rows, sheet.width)]


def _less(value: float | None, base: float | None) -> float | None:
    return None if value is None or base is None else value - base


def _left(sheet: Sheet, base: Sequence[float]) -> list[Any]:
    rest = _plot(sheet, base, ())
    return [*part("What is left when the findings are taken out", rest.height + 24.0), rest]


def _unseen(sheet: Sheet, unseen: Sequence[Unseen]) -> list[Any]:
    if not unseen:
        return []
    show = sheet.show
    columns = (
        Column("disturbance", 0.25, "left"),
        Column("size that would show [deg]", 0.13),
        Column(f"what it does to KG [{show.unit('reading')}]", 0.14),
        Column("evidence in the trial", 0.48, "left"),
    )
    return [
        *part("What this trial could not have shown", 110.0),
        grid(columns, [_hidden(sheet, u) for u in unseen], sheet.width),
        note(
            "Size: a disturbance of this size, at its worst for KG, would be found in nine trials "
            "of ten; a smaller one may be there and not show. Its effect is what KG is off by, "
            "low where negative. Where the trial says that nothing excludes a disturbance, one of "
            "any size up to this counts in the uncertainty of KG."
        ),
    ]


def _hidden(sheet: Sheet, one: Unseen) -> tuple[str, ...]:
    if one.size == 0.0:
        return one.cause, "none", "any", _evidence(sheet, one)
    effect = sheet.show.number(one.vcg, "reading")
    if one.cause in _EITHER_WAY:
        effect = f"± {sheet.show.number(abs(one.vcg), 'reading')}"
    size = sheet.show.degrees(one.size, 3)  # a tangent this small is its angle
    return one.cause, size, effect, _evidence(sheet, one)


def _evidence(sheet: Sheet, one: Unseen) -> str:
    if one.excluded_by:
        return f"excluded by: {one.excluded_by}"
    stated = sheet.reduction.trial.settings.evidence.get(EVIDENCE.get(one.cause, ""), "")
    if stated == NOT_EXCLUDED:
        return "not excluded: counts in the budget of KG"
    return "the trial does not say; not counted in the budget of KG"


def _influence(sheet: Sheet, influence: Sequence[Influence]) -> list[Any]:
    """KG without each shift and device, and without the readings that matter most."""
    if not influence:
        return []
    show = sheet.show
    shifts = [(f"shift {i.shift}", i.change) for i in influence if i.device is None]
    devices = [(f"device {i.device}", i.change) for i in influence if i.shift is None]
    single = [i for i in influence if i.shift is not None and i.device is not None]
    ranked = sorted(single, key=lambda i: -abs(i.change))[:_READINGS]
    readings = [(f"shift {i.shift}, {i.device}", i.change) for i in ranked]
    unit = f"change of KG [{show.unit('reading')}]"
    columns = [
        c
        for title, share in (("without the shift", 0.14), ("device", 0.19), ("reading", 0.25))
        for c in (Column(title, share, "left"), Column(unit, 0.14))
    ]
    rows = [
        tuple(text for cell in line for text in _changed(sheet, cell))
        for line in zip_longest(shifts, devices, readings)
    ]
    return [
        *part("KG without each shift, device and reading", 120.0),
        grid(columns, rows, sheet.width),
        note(
            f"KG of the lightship without it, less KG of the result; of the single readings the "
            f"{len(readings)} that matter most. Nothing has been left out of the result for this."
        ),
    ]


def _changed(sheet: Sheet, cell: tuple[str, float] | None) -> tuple[str, str]:
    if cell is None:
        return "", ""
    return cell[0], sheet.show.number(cell[1], "reading", 2) or MISSING
