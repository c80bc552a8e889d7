"""What a field sheet is made of: tables with room to write, labelled boxes, lists to tick off."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING, Any, Literal

from reportlab.lib.enums import TA_LEFT, TA_RIGHT
from reportlab.lib.styles import ParagraphStyle
from reportlab.lib.units import mm
from reportlab.pdfbase.pdfmetrics import stringWidth
from reportlab.platypus import CondPageBreak, Paragraph, Table

from incline.report.fonts import BOLD, REGULAR
from incline.report.styles import INK
from incline.report.text import elide, markup

if TYPE_CHECKING:
    from collections.abc import Iterable, Sequence

__all__ = ["ROW", "Column", "boxes", "form", "line", "paragraph_of", "part", "text"]

ROW = 9.0 * mm
"""Least height of a row that is written in by hand [pt]."""
_PAD = 3.0
_TITLE = 200
"""Most characters of a heading: it stands on every page of its table and cannot break."""
_LINES = 4
"""Cells of more lines are set smaller."""
_SPLIT = 300.0
"""A row higher than this may break over the page [pt]."""


def _style(name: str, size: float, font: str = REGULAR, **more: object) -> ParagraphStyle:
    return ParagraphStyle(
        name,
        fontName=font,
        bulletFontName=REGULAR,
        fontSize=size,
        leading=1.22 * size,
        textColor=INK,
        **more,
    )


_STYLES = {
    s.name: s
    for s in (
        _style("cell_left", 9.5, alignment=TA_LEFT),
        _style("cell_right", 9.5, alignment=TA_RIGHT),
        _style("long_left", 7.5, alignment=TA_LEFT),
        _style("long_right", 7.5, alignment=TA_RIGHT),
        _style("head_left", 8, BOLD, alignment=TA_LEFT),
        _style("head_right", 8, BOLD, alignment=TA_RIGHT),
        _style("label", 7),
        _style("value", 10.5, BOLD),
        _style("part", 11.5, BOLD, spaceBefore=7, spaceAfter=3),
        _style("text", 9, spaceAfter=4),
        _style("vessel", 10.5, BOLD),
        _style("title", 14.5, BOLD),
    )
}


@dataclass(frozen=True, slots=True)
class Column:
    """A column: its heading, its share of the width, and how its cells stand."""

    title: str
    share: float
    align: Literal["left", "right"] = "left"


def paragraph_of(words: str, style: str) -> Paragraph:
    """Words as typed, in one of the styles of the sheets."""
    return Paragraph(markup(words), _STYLES[style])


def text(words: str) -> Paragraph:
    """Running text."""
    return paragraph_of(words, "text")


def part(title: str, need: float = 45 * mm) -> list[Any]:
    """A heading within a sheet; begins a new page unless ``need`` points are left."""
    return [CondPageBreak(need), paragraph_of(title, "part")]


def form(
    columns: Sequence[Column],
    rows: Iterable[Sequence[str]],
    width: float,
    *,
    spare: int = 0,
    high: float = ROW,
) -> Table:
    """A ruled table of ``width`` points with ``spare`` empty rows, its heading repeated by page.

    No row is lower than ``high`` points.
    """
    total = sum(c.share for c in columns)
    widths = [width * c.share / total for c in columns]
    listed = [*map(tuple, rows), *[("",) * len(columns)] * spare]
    head = [paragraph_of(elide(c.title, _TITLE), f"head_{c.align}") for c in columns]
    body = [
        [_cell(t, c.align, w) for t, c, w in zip(row, columns, widths, strict=True)]
        for row in listed
    ]
    return _table([head, *body], widths, [0.0, *[high] * len(body)])


def _cell(words: str, align: str, width: float) -> Paragraph:
    """Words in a cell; smaller where they would take many lines, or a number would break."""
    style = _STYLES[f"cell_{align}"]
    room = width - 2.0 * _PAD
    wide = max((stringWidth(w, REGULAR, style.fontSize) for w in words.split()), default=0.0)
    usual = paragraph_of(words, style.name)
    if wide <= room and usual.wrap(room, 1e6)[1] <= _LINES * style.leading + 0.1:
        return usual
    return paragraph_of(words, f"long_{align}")


def _table(cells: list[list[Paragraph]], widths: list[float], least: list[float]) -> Table:
    heights = [
        max(low, *(_height(c, w) for c, w in zip(row, widths, strict=True)))
        for row, low in zip(cells, least, strict=True)
    ]
    tall = max(heights) > _SPLIT
    return Table(
        cells,
        colWidths=widths,
        rowHeights=None if tall else heights,
        minRowHeights=least if tall else None,
        repeatRows=1,
        splitInRow=int(tall),
        style=[
            ("FONT", (0, 0), (-1, -1), REGULAR, 1, 1),
            ("VALIGN", (0, 0), (-1, -1), "MIDDLE"),
            ("VALIGN", (0, 0), (-1, 0), "BOTTOM"),
            ("LEFTPADDING", (0, 0), (-1, -1), _PAD),
            ("RIGHTPADDING", (0, 0), (-1, -1), _PAD),
            ("TOPPADDING", (0, 0), (-1, -1), _PAD),
            ("BOTTOMPADDING", (0, 0), (-1, -1), _PAD),
            ("GRID", (0, 0), (-1, -1), 0.5, INK),
            ("BOX", (0, 0), (-1, -1), 1.0, INK),
            ("LINEBELOW", (0, 0), (-1, 0), 1.0, INK),
        ],
        hAlign="LEFT",
        spaceBefore=3,
        spaceAfter=7,
    )


def _height(cell: Paragraph, width: float) -> float:
    return float(cell.wrap(width - 2.0 * _PAD, 1e6)[1]) + 2.0 * _PAD


def boxes(
    pairs: Sequence[tuple[str, str]], width: float, *, abreast: int = 2, high: float = 11 * mm
) -> Table:
    """Boxes with a small label and what is known, ``abreast`` on a line, read line by line."""
    filled = [*pairs, *[("", "")] * (-len(pairs) % abreast)]
    cells = [
        [[paragraph_of(label, "label"), paragraph_of(value, "value")] for label, value in row]
        for row in (filled[i : i + abreast] for i in range(0, len(filled), abreast))
    ]
    each = width / abreast
    heights = [
        max(high, *(sum(_height(p, each) for p in cell) - 2.0 * _PAD for cell in row))
        for row in cells
    ]
    tall = max(heights) > _SPLIT
    return Table(
        cells,
        colWidths=[each] * abreast,
        rowHeights=None if tall else heights,
        splitInRow=int(tall),
        style=[
            ("FONT", (0, 0), (-1, -1), REGULAR, 1, 1),
            ("VALIGN", (0, 0), (-1, -1), "TOP"),
            ("LEFTPADDING", (0, 0), (-1, -1), _PAD),
            ("RIGHTPADDING", (0, 0), (-1, -1), _PAD),
            ("TOPPADDING", (0, 0), (-1, -1), _PAD),
            ("BOTTOMPADDING", (0, 0), (-1, -1), _PAD),
            ("GRID", (0, 0), (-1, -1), 0.5, INK),
        ],
        hAlign="LEFT",
        spaceBefore=3,
        spaceAfter=7,
    )


def line(label: str, width: float) -> Table:
    """A box over the whole width for a remark or a name."""
    return boxes(((label, ""),), width, abreast=1, high=14 * mm)
