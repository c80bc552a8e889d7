"""First page: what was tested, by which program, and the result."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING, Any

from reportlab.platypus import Paragraph, Table

from incline.report.document import Sheet, note
from incline.report.fonts import REGULAR
from incline.report.show import MISSING, NOT_DETERMINED, NOT_RECORDED, Kind
from incline.report.styles import INK, RULE, STYLES
from incline.report.tables import facts
from incline.report.text import markup

if TYPE_CHECKING:
    from incline.result import Estimate

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
    """The box with the four lightship values and GM as measured."""
    light, heel = sheet.reduction.outcome.lightship, sheet.reduction.outcome.heel
    rows: tuple[tuple[str, Estimate, Kind, int, str], ...] = (
        ("Lightship displacement", light.displacement, "mass", 2, "displacement"),
        ("KG of lightship, above baseline", light.vcg, "length", 3, "KG"),
        ("LCG of lightship, forward of AP", light.lcg, "length", 3, "LCG"),
        ("TCG of lightship, + to starboard", light.tcg, "length", 3, "TCG"),
    )
    known = any(e.u is not None for _, e, _, _, _ in rows)
    lines = [_line(sheet, *row, known=known) for row in rows]
    lines.append(_gm_line(sheet, known=known))
    notes = [_why(sheet, word) for _, e, _, _, word in rows if e.value is None]
    notes.append(
        f"GM is that of the ship as inclined, test weights aboard and slack liquids free to move "
        f"({METHODS.get(heel.method, heel.method)}, {heel.dof} degrees of freedom); its standard "
        f"error is that of the fitted slope alone."
    )
    notes.append(
        "u: standard uncertainty; U = k u: expanded uncertainty for a coverage of 95 %; dof: "
        "degrees of freedom. They come from the scatter of the test itself: the fitted slope, the "
        "drafts and the water samples. Errors of masses and arms, device lengths, hydrostatics and "
        "free surfaces are not included."
        if known
        else "The uncertainty of the lightship values has not been evaluated."
    )
    return [_box(sheet, lines, known=known), *(note(n) for n in notes)]


def _line(
    sheet: Sheet, name: str, found: Estimate, kind: Kind, least: int, _word: str, *, known: bool
) -> list[str]:
    value, u, wide = sheet.show.estimate(found, kind, least)
    unit = "" if found.value is None else sheet.show.unit(kind)
    if name.startswith("TCG"):
        unit = f"{unit} {sheet.show.side(found.value)}".strip()
    if not known:
        return [name, value, unit]
    reach = MISSING if found.U is None else f"± {wide}".replace("± <", "<")
    return [name, value, unit, u, reach, sheet.show.plain(found.k, 2), _freedom(sheet, found.dof)]


def _freedom(sheet: Sheet, dof: float | None) -> str:
    """Degrees of freedom, fractional ones with a decimal; an endless number as such."""
    if dof is None or math.isfinite(dof):
        return sheet.show.plain(dof, 1)
    return "∞"


def _gm_line(sheet: Sheet, *, known: bool) -> list[str]:
    heel, show = sheet.reduction.outcome.heel, sheet.show
    name = "GM fluid, as measured"
    value, unit = show.number(heel.gm_fluid, "length"), show.unit("length")
    error = show.number(heel.u_gm_fluid, "length", 4)
    if known:
        return [name, value, unit, error, MISSING, MISSING, str(heel.dof)]
    spread = "" if heel.u_gm_fluid is None else f", standard error {error}"
    return [name, value, f"{unit}{spread}"]


def _why(sheet: Sheet, word: str) -> str:
    """The remarks that speak of the quantity."""
    said = [r for r in sheet.reduction.remarks if word in r]
    return " ".join(said) if said else f"{word} {NOT_DETERMINED}: see the remarks."


def _box(sheet: Sheet, lines: list[list[str]], *, known: bool) -> Table:
    shares = (0.34, 0.14, 0.17, 0.09, 0.11, 0.07, 0.08) if known else (0.42, 0.18, 0.40)
    heads = ["", "value", "unit", "u", "U", "k", "dof"] if known else ["", "value", "unit"]
    looks = ("result_left", "figure", "result_left", *["result_right"] * 4)
    head = [
        Paragraph(h, STYLES["head_left" if look.endswith("left") else "head_right"])
        for h, look in zip(heads, looks, strict=False)
    ]
    body = [
        [
            Paragraph(markup(t), STYLES["unknown" if t == NOT_DETERMINED else k])
            for t, k in zip(line, looks, strict=False)
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
