"""Where the words of a PDF stand: lines with their widths, and those that lie on one another."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

from reportlab.pdfbase.pdfmetrics import stringWidth

from incline.report.fonts import BOLD, REGULAR, register_fonts

if TYPE_CHECKING:
    from collections.abc import Iterator

    from pypdf import PageObject


@dataclass(frozen=True, order=True)
class Line:
    """A level line of text: its baseline, left end, width and type size [pt]."""

    y: float
    x: float
    width: float
    size: float
    text: str

    @property
    def right(self) -> float:
        return self.x + self.width


def lines_of(page: PageObject) -> list[Line]:
    """The level lines of a page, page numbers apart (they are forms with places of their own)."""
    register_fonts()
    found: list[Line] = []

    def visit(text: str, cm: list[float], tm: list[float], font: dict | None, size: float) -> None:
        plain = text.strip()
        if not plain or not font or abs(cm[1]) > 1e-6 or plain == "DRAFT":
            return
        x = cm[0] * tm[4] + cm[2] * tm[5] + cm[4]
        y = cm[1] * tm[4] + cm[3] * tm[5] + cm[5]
        face = BOLD if "Bold" in str(font.get("/BaseFont")) else REGULAR
        if y > 0.0:
            found.append(Line(round(y, 2), x, stringWidth(plain, face, size), size, plain))

    page.extract_text(visitor_text=visit)
    return sorted(found)


def overlaps(lines: list[Line]) -> Iterator[tuple[Line, Line]]:
    """Pairs that lie on one another, by more than half a point, within half a letter's height."""
    for i, a in enumerate(lines):
        for b in lines[i + 1 :]:
            if b.y - a.y >= 0.5 * min(a.size, b.size):
                break
            if a.x < b.right - 0.5 and b.x < a.right - 0.5:
                yield a, b
