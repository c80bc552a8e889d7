"""First page: what was tested, by which program, and the result."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from reportlab.platypus import Paragraph, Table

from incline.defaults import LABEL
from incline.report.amounts import RESULTS, Quoted, budget_of, freedom
from incline.report.criteria import criteria_line
from incline.report.document import Sheet, note, paragraph
from incline.report.findings import finding_line
from incline.report.fonts import REGULAR
from incline.report.monte_carlo import intervals, limit
from incline.report.show import MISSING, NOT_DETERMINED, NOT_RECORDED
from incline.report.styles import INK, RULE, STYLES
from incline.report.tables import facts
from incline.report.text import markup
from incline.result import Estimate

if TYPE_CHECKING:
    from incline.result import Outcome

__all__ = ["METHODS", "result", "title_block"]

METHODS = {"straight-line": "straight line of tangent on moment"}


def title_block(sheet: Sheet) -> list[Any]:
    """Vessel, occasion, program and the trial's digest."""
    trial = sheet.reduction.trial
    pairs = (
        ("Identity number", trial.vessel.number or NOT_RECORDED),
        ("Place of the test", trial.occasion.place or NOT_RECORDED),
        ("Date of the test", trial.occasion.date.isoformat()),
        ("Date of this report", sheet.report_date.isoformat()),
        ("Rule set named by the trial", trial.settings.rule_set or "none named"),
        ("Calculated by", f"incline, version {sheet.version}"),
        ("Trial files, SHA-256", trial.digest),
    )
    return [
        Paragraph("Report of an inclining test", STYLES["title"]),
        Paragraph(markup(trial.vessel.name), STYLES["subtitle"]),
        facts(pairs, sheet.width),
    ]


def result(sheet: Sheet) -> list[Any]:
    """The box with the four lightship values and GM, criteria and findings, and what u means."""
    outcome = sheet.reduction.outcome
    found = [(q, _estimate(outcome, q.key)) for q in RESULTS]
    missing = [note(_why(sheet, q.name)) for q, e in found if e.value is None]
    return [
        _box(sheet, [_line(sheet, q, e) for q, e in found]),
        *missing,
        *intervals(sheet),
        *limit(sheet),
        *(paragraph(text) for text in (criteria_line(sheet), finding_line(sheet)) if text),
        *(note(text) for text in _notes(sheet)),
    ]


def _estimate(outcome: Outcome, key: str) -> Estimate:
    if key == "gm_fluid":
        budget = budget_of(outcome, key)
        return Estimate(value=outcome.heel.gm_fluid) if budget is None else budget.estimate
    light: Estimate = getattr(outcome.lightship, key)
    return light


def _line(sheet: Sheet, quoted: Quoted, found: Estimate) -> list[str]:
    value, u, wide = sheet.show.estimate(found, quoted.kind, quoted.least)
    unit = "" if found.value is None else sheet.show.unit(quoted.kind)
    if quoted.key == "tcg":
        side = sheet.show.side(found.value)
        unit = f"{unit} ({side})" if side else unit
    reach = MISSING if found.U is None else f"± {wide}".replace("± <", "<")
    return [quoted.long, value, unit, u, reach, sheet.show.plain(found.k, 2), freedom(found)]


def _notes(sheet: Sheet) -> list[str]:
    """What GM is, what u counts, and how much of it nobody measured."""
    heel = sheet.reduction.outcome.heel
    said = [
        f"GM is that of the ship as inclined, test weights aboard and slack liquids free to move "
        f"({METHODS.get(heel.method, heel.method)}).",
        "u: standard uncertainty; U = k u: expanded uncertainty for a coverage of 95 %; dof: "
        "effective degrees of freedom. They count the scatter of the readings and of the water "
        "samples, and errors of drafts, density, test weights and their places, devices, "
        "hydrostatics, free surfaces, and of the mass and place of all that stands in the ledger: "
        "every input that the section on uncertainty lists.",
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


def _box(sheet: Sheet, lines: list[list[str]]) -> Table:
    shares = (0.33, 0.12, 0.165, 0.09, 0.125, 0.07, 0.10)
    heads = ["", "value", "unit", "u", "U", "k", "dof"]
    looks = ("result_left", "figure", "result_left", *["result_right"] * 4)
    head = [
        Paragraph(h, STYLES["head_left" if look.endswith("left") else "head_right"])
        for h, look in zip(heads, looks, strict=True)
    ]
    body = [
        [
            Paragraph(markup(t), STYLES["unknown" if t == NOT_DETERMINED else k])
            for t, k in zip(line, looks, strict=True)
        ]
        for line in lines
    ]
    unknown = [
        ("SPAN", (1, i), (2, i)) for i, row in enumerate(lines, 1) if row[1] == NOT_DETERMINED
    ]
    return Table(
        [head, *body],
        colWidths=[sheet.width * s for s in shares],
        style=[
            *unknown,
            ("FONT", (0, 0), (-1, -1), REGULAR, 1, 1),
            ("BOX", (0, 0), (-1, -1), 1.1, INK),
            ("LINEBELOW", (0, 0), (-1, 0), 0.5, INK),
            ("LINEBELOW", (0, 1), (-1, -3), 0.25, RULE),
            ("LINEABOVE", (0, -1), (-1, -1), 0.5, INK),
            ("VALIGN", (0, 0), (-1, -1), "MIDDLE"),
            ("TOPPADDING", (0, 0), (-1, -1), 2.2),
            ("BOTTOMPADDING", (0, 0), (-1, -1), 2.8),
            ("LEFTPADDING", (0, 0), (-1, -1), 5),
            ("RIGHTPADDING", (0, 0), (-1, -1), 5),
        ],
        hAlign="LEFT",
        spaceBefore=2,
        spaceAfter=5,
    )
