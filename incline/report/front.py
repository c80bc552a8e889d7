"""First page: what was tested, by which program, and the result."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING, Any

from reportlab.platypus import Paragraph

from incline.defaults import LABEL
from incline.report.amounts import RESULTS, Quoted, budget_of, freedom
from incline.report.closing import remarks_of
from incline.report.criteria import criteria_line
from incline.report.document import Sheet, note, paragraph, part
from incline.report.findings import finding_line
from incline.report.fonts import REGULAR
from incline.report.monte_carlo import limit
from incline.report.page import issue_of
from incline.report.show import MISSING, NOT_DETERMINED, NOT_RECORDED
from incline.report.styles import INK, RULE, STYLES
from incline.report.tables import Column, Listed, facts, grid
from incline.report.text import markup
from incline.report.uncertainty import in_plain_words
from incline.result import Estimate

if TYPE_CHECKING:
    from incline.papers import Papers
    from incline.report.show import Show
    from incline.result import Outcome

__all__ = ["METHODS", "history", "result", "title_block"]

METHODS = {
    "straight-line": "straight line of tangent on moment",
    "wall-sided": "wall-sided formula at each shift",
    "heeled-hull": "hull integrated at each shift",
}


def title_block(sheet: Sheet) -> list[Any]:
    """Vessel, occasion, issue, program and the trial's digest."""
    trial = sheet.reduction.trial
    papers = trial.papers
    pairs = (
        ("Identity number", trial.vessel.number or NOT_RECORDED),
        ("Place of the test", trial.occasion.place or NOT_RECORDED),
        ("Date of the test", trial.occasion.date.isoformat()),
        ("Date of this report", sheet.report_date.isoformat()),
        ("Author", papers.author or NOT_RECORDED),
        ("Submitted to", papers.submitted_to or NOT_RECORDED),
        ("Rule set named by the trial", trial.settings.rule_set or "none named"),
        ("Calculated by", f"incline, version {sheet.version}"),
        ("Trial files, SHA-256", trial.digest),
    )
    return [
        Paragraph("Report of an inclining test", STYLES["title"]),
        Paragraph(markup(trial.vessel.name), STYLES["subtitle"]),
        Paragraph(markup(_issue(papers)), STYLES["issue"]),
        facts(pairs, sheet.width),
    ]


def _issue(papers: Papers) -> str:
    """Draft or issue in a line; what the last revision says."""
    if papers.status == "draft":
        return f"{issue_of(papers).capitalize()}: not issued, and not to be relied on"
    last = papers.revisions[-1]
    return f"{issue_of(papers).capitalize()} of {last.date.isoformat()}: {last.description}"


def history(sheet: Sheet) -> list[Any]:
    """The issues of the report so far."""
    papers = sheet.reduction.trial.papers
    title = part("Issues of this report")
    if not papers.revisions:
        return [*title, paragraph(f"{issue_of(papers).capitalize()}; no issue so far.")]
    columns = (
        Column("number", 0.10, "left"),
        Column("date", 0.14, "left"),
        Column("description", 0.52, "left"),
        Column("by", 0.24, "left"),
    )
    rows = [
        [r.number, r.date.isoformat(), r.description, r.by or NOT_RECORDED]
        for r in papers.revisions
    ]
    return [*title, grid(columns, rows, sheet.width)]


def result(sheet: Sheet) -> list[Any]:
    """The box with the four lightship values and GM, how sure KG is, criteria and findings."""
    outcome = sheet.reduction.outcome
    found = [(q, _estimate(outcome, q.key)) for q in RESULTS]
    missing = [note(_why(sheet, q.name)) for q, e in found if e.value is None]
    lines: list[list[str]] = []
    for quoted, estimate in found:
        lines.append(_line(sheet.show, quoted, estimate))
        if sheet.beside is not None and estimate.value is not None:
            lines.append(["", *_line(sheet.beside, quoted, estimate)[1:5], "", ""])
    said = (in_plain_words(sheet)[0], criteria_line(sheet), finding_line(sheet), _assumed(sheet))
    return [
        _box(sheet, lines),
        *missing,
        *(paragraph(text) for text in said if text),
        *limit(sheet),
        *part("The ship as inclined, and the test"),
        facts(_as_tested(sheet), sheet.width, abreast=2),
        *(note(text) for text in _notes(sheet)),
    ]


def _as_tested(sheet: Sheet) -> list[tuple[str, str]]:
    """What a reader checks first: how she floated, how far she was heeled, by whom."""
    trial, outcome, show = sheet.reduction.trial, sheet.reduction.outcome, sheet.show
    ship, heel = outcome.as_inclined, outcome.heel
    ends = "by the stern" if ship.trim > 0.0 else "by the head"
    listed = NOT_DETERMINED
    if ship.list_tan is not None:
        side = "starboard" if ship.list_tan > 0.0 else "port"
        listed = f"{show.degrees(abs(math.atan(ship.list_tan)))}° to {side}"
    excluded = sum(1 for r in trial.readings if r.excluded)
    left = f", {excluded} excluded" if excluded else ""
    heels = ((heel.max_heel_port, "port"), (heel.max_heel_starboard, "starboard"))
    return [
        ("Draft at AP", show.full(ship.draft_ap, "length")),
        ("Draft at FP", show.full(ship.draft_fp, "length")),
        ("Trim", f"{show.full(abs(ship.trim), 'length')} {ends}"),
        ("List", listed),
        ("Density of the water", show.full(ship.density, "density")),
        ("Displacement", sheet.full(ship.displacement, "mass")),
        ("KM", sheet.full(ship.kmt, "length")),
        ("Greatest heel", ", ".join(f"{show.degrees(h)}° to {side}" for h, side in heels)),
        ("Shifts; devices", f"{len(trial.shifts)}; {len(heel.devices)}"),
        ("Readings", f"{len(trial.readings)}{left}"),
    ]


def _assumed(sheet: Sheet) -> str:
    """How much was assumed, and where it stands."""
    count = len(remarks_of(sheet.reduction))
    if not count:
        return ""
    return f"Assumptions and remarks that bear on the result: {count}, in section 2."


def _estimate(outcome: Outcome, key: str) -> Estimate:
    if key == "gm_fluid":
        budget = budget_of(outcome, key)
        return Estimate(value=outcome.heel.gm_fluid) if budget is None else budget.estimate
    light: Estimate = getattr(outcome.lightship, key)
    return light


def _line(show: Show, quoted: Quoted, found: Estimate) -> list[str]:
    value, u, wide = show.estimate(found, quoted.kind, quoted.least)
    unit = "" if found.value is None else show.unit(quoted.kind)
    if quoted.key == "tcg":
        side = show.side(found.value)
        unit = f"{unit} ({side})" if side else unit
    reach = MISSING if found.U is None else f"± {wide}".replace("± <", "<")
    return [quoted.long, value, unit, u, reach, show.plain(found.k, 2), freedom(found)]


def _notes(sheet: Sheet) -> list[str]:
    """What GM is, what u counts, and how much of it nobody measured."""
    heel = sheet.reduction.outcome.heel
    said = [
        f"GM is that of the ship as inclined, test weights aboard and slack liquids free to move "
        f"({METHODS[heel.method]}).",
        "u: standard uncertainty; U = k u: expanded uncertainty for a coverage of 95 %; dof: "
        "effective degrees of freedom. They count the scatter of the readings and of the water "
        "samples, and errors of drafts, density, test weights and their places, devices, "
        "hydrostatics, free surfaces, and of the mass and place of all that stands in the ledger: "
        "every input that appendix A lists.",
    ]
    kg = budget_of(sheet.reduction.outcome, "vcg")
    lines = () if kg is None else kg.lines
    if any(x.basis == LABEL for x in lines):
        share = 100.0 * sum(x.share for x in lines if x.basis == LABEL)
        said.append(
            f"Inputs marked “{LABEL}” are defaults of this program, used where the trial states no "
            f"uncertainty; they are not measurements. They make up {sheet.show.plain(share, 0)} % "
            f"of the variance of KG."
        )
    if sheet.reduction.simulation is None:
        said.append("The intervals are first order; no Monte Carlo run was made to check them.")
    return said


def _why(sheet: Sheet, word: str) -> str:
    """The remarks that speak of the quantity."""
    said = [r for r in sheet.reduction.remarks if word in r]
    return " ".join(said) if said else f"{word} {NOT_DETERMINED}: see the remarks."


_HEADS = ("", "value", "unit", "u", "U", "k", "dof")
_SHARES = (0.33, 0.12, 0.165, 0.09, 0.125, 0.07, 0.10)
_LOOKS = ("result_left", "figure", "result_left", *["result_right"] * 4)
_BESIDE = ("beside_left", "beside_right", "beside_left", *["beside_right"] * 4)


def _box(sheet: Sheet, lines: list[list[str]]) -> Listed:
    """The results; a line without a name says the one above in other units."""
    head = [
        Paragraph(h, STYLES["head_left" if look.endswith("left") else "head_right"])
        for h, look in zip(_HEADS, _LOOKS, strict=True)
    ]
    table = Listed(
        [head, *(_box_row(line) for line in lines)],
        colWidths=[sheet.width * s for s in _SHARES],
        style=[
            ("FONT", (0, 0), (-1, -1), REGULAR, 1, 1),
            ("BOX", (0, 0), (-1, -1), 1.1, INK),
            ("LINEBELOW", (0, 0), (-1, 0), 0.5, INK),
            ("VALIGN", (0, 0), (-1, -1), "MIDDLE"),
            ("TOPPADDING", (0, 0), (-1, -1), 2.2),
            ("BOTTOMPADDING", (0, 0), (-1, -1), 2.8),
            ("LEFTPADDING", (0, 0), (-1, -1), 5),
            ("RIGHTPADDING", (0, 0), (-1, -1), 5),
            *(command for i, line in enumerate(lines, 1) for command in _box_look(i, line)),
        ],
        hAlign="LEFT",
        spaceBefore=2,
        spaceAfter=5,
    )
    table.titles, table.texts = _HEADS, tuple(tuple(line) for line in lines)
    return table


def _box_row(line: list[str]) -> list[Paragraph]:
    looks = _LOOKS if line[0] else _BESIDE
    return [
        Paragraph(markup(t), STYLES["unknown" if t == NOT_DETERMINED else k])
        for t, k in zip(line, looks, strict=True)
    ]


def _box_look(i: int, line: list[str]) -> list[tuple[Any, ...]]:
    """Rules between the results, the one before GM darker."""
    if not line[0]:
        return [("TOPPADDING", (0, i), (-1, i), 0), ("BOTTOMPADDING", (0, i - 1), (-1, i - 1), 0)]
    span = [("SPAN", (1, i), (2, i))] if line[1] == NOT_DETERMINED else []
    last = line[0] == RESULTS[-1].long
    rule = [("LINEABOVE", (0, i), (-1, i), 0.5, INK) if last
            else ("LINEABOVE", (0, i), (-1, i), 0.25, RULE)] if i > 1 else []  # fmt: skip
    return [*span, *rule]
