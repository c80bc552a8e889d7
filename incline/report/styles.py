"""Paragraph styles and colours of the report."""

from __future__ import annotations

from reportlab.lib.colors import Color
from reportlab.lib.enums import TA_LEFT, TA_RIGHT
from reportlab.lib.styles import ParagraphStyle

from incline.report.fonts import BOLD, REGULAR

__all__ = ["INK", "RULE", "STYLES"]

INK = Color(0.0, 0.0, 0.0)
RULE = Color(0.72, 0.72, 0.72)


def _style(
    name: str, size: float, lead: float, font: str = REGULAR, **more: object
) -> ParagraphStyle:
    return ParagraphStyle(
        name,
        fontName=font,
        bulletFontName=REGULAR,
        bulletFontSize=size,
        fontSize=size,
        leading=lead,
        textColor=INK,
        **more,
    )


STYLES: dict[str, ParagraphStyle] = {
    s.name: s
    for s in (
        _style("title", 17, 21, BOLD, spaceAfter=1),
        _style("subtitle", 10.5, 14, spaceAfter=2),
        _style("issue", 9, 12, BOLD, spaceAfter=5),
        _style("section", 11.5, 15, BOLD, spaceBefore=9, spaceAfter=4),
        _style("part", 8.8, 12, BOLD, spaceBefore=6, spaceAfter=2),
        _style("body", 8.2, 11.3, spaceAfter=4),
        _style("bullet", 8.2, 11.3, leftIndent=12, bulletIndent=2, spaceAfter=2.5),
        _style("note", 7, 9.2, spaceAfter=5),
        _style("cell_left", 7.2, 8.9, alignment=TA_LEFT),
        _style("cell_right", 7.2, 8.9, alignment=TA_RIGHT),
        _style("beside_left", 6.4, 7.9, alignment=TA_LEFT),
        _style("beside_right", 6.4, 7.9, alignment=TA_RIGHT),
        _style("head_left", 7.2, 8.9, BOLD, alignment=TA_LEFT),
        _style("head_right", 7.2, 8.9, BOLD, alignment=TA_RIGHT),
        _style("result_left", 9.2, 12, alignment=TA_LEFT),
        _style("result_right", 9.2, 12, alignment=TA_RIGHT),
        _style("figure", 9.2, 12, BOLD, alignment=TA_RIGHT),
        _style("unknown", 9.2, 12, BOLD, alignment=TA_LEFT, leftIndent=28),
    )
}
