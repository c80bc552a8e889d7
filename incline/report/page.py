"""Margins, running header and footer, the mark of a draft, and the canvas that counts pages."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from reportlab.lib.units import mm
from reportlab.pdfbase.pdfmetrics import stringWidth
from reportlab.pdfgen.canvas import Canvas

from incline.report.fonts import BOLD, REGULAR
from incline.report.styles import RULE
from incline.report.text import elide

if TYPE_CHECKING:
    from incline.papers import Papers
    from incline.record import Trial
    from incline.report.headings import Heading

__all__ = ["BOTTOM", "LEFT", "RIGHT", "TOP", "Furniture", "PageCanvas", "issue_of"]

LEFT, RIGHT, TOP, BOTTOM = 21 * mm, 15 * mm, 21 * mm, 18 * mm
_SMALL, _MARK = 7, 150
"""Type sizes [pt] of header and footer, and of the mark of a draft."""
_COUNT = 80.0
"""Width [pt] kept for ``page 12 of 34``."""
_PALE = 0.86


def issue_of(papers: Papers) -> str:
    """What the report is: a draft, or an issue, with its number."""
    kind = "draft" if papers.status == "draft" else "issue"
    number = elide(papers.number, 20)
    return f"{kind} {number}" if number else kind


class Furniture:
    """What stands on every page of a report."""

    def __init__(self, trial: Trial, page: tuple[float, float], version: str) -> None:
        self.trial = trial
        self.page = page
        self.version = version

    def draw(self, canvas: Any, _document: object) -> None:  # noqa: ANN401 - untyped library
        """Mark, header and footer of one page, under what the page says."""
        trial, (wide, high) = self.trial, self.page
        canvas.saveState()
        if trial.papers.status == "draft":
            self._mark(canvas)
        canvas.setFont(REGULAR, _SMALL)
        head, foot = high - TOP + 5 * mm, BOTTOM - 6 * mm
        issue = issue_of(trial.papers)
        shown = issue.upper() if trial.papers.status == "draft" else issue
        right = f"inclining test of {trial.occasion.date.isoformat()}  ·  {shown}"
        room = wide - LEFT - RIGHT - stringWidth(right, REGULAR, _SMALL) - 12
        canvas.drawString(LEFT, head, _fit(trial.vessel.name, room))
        canvas.drawRightString(wide - RIGHT, head, right)
        canvas.drawString(LEFT, foot, f"trial {trial.digest[:16]}  ·  incline {self.version}")
        canvas.saveState()
        canvas.translate(wide - RIGHT - _COUNT, foot)
        canvas.doForm(f"page-{canvas.getPageNumber()}")
        canvas.restoreState()
        canvas.setStrokeColor(RULE)
        canvas.setLineWidth(0.4)
        canvas.line(LEFT, head - 4, wide - RIGHT, head - 4)
        canvas.line(LEFT, foot + 9, wide - RIGHT, foot + 9)
        canvas.restoreState()

    def _mark(self, canvas: Any) -> None:  # noqa: ANN401
        """The word DRAFT across the page in pale outline, drawn first: it hides nothing."""
        wide, high = self.page
        canvas.saveState()
        canvas.translate(wide / 2.0, high / 2.0)
        canvas.rotate(56.0)
        canvas.setStrokeColorRGB(_PALE, _PALE, _PALE)
        canvas.setLineWidth(0.8)
        word = canvas.beginText(-stringWidth("DRAFT", BOLD, _MARK) / 2.0, -0.36 * _MARK)
        word.setFont(BOLD, _MARK)
        word.setTextRenderMode(1)
        word.textOut("DRAFT")
        word.setTextRenderMode(0)
        canvas.drawText(word)
        canvas.restoreState()


def _fit(text: str, room: float) -> str:
    """As much of a line of small text as there is room for."""
    line, most = elide(text, 200), 200
    while stringWidth(line, REGULAR, _SMALL) > room and most > 1:
        most = min(most, len(line)) - 1
        line = elide(text, most)
    return line


class PageCanvas(Canvas):  # type: ignore[misc]
    """A canvas that fills in page numbers when all pages are known.

    Pages refer to small forms, which are drawn last: the flow is set once.
    """

    def __init__(self, *args: object, **options: object) -> None:
        super().__init__(*args, **options)
        self._places: dict[str, int] = {}
        self._asked: dict[str, tuple[float, float]] = {}
        self._headings = 0

    def note_heading(self, heading: Heading) -> None:
        """Put a heading into the outline, and remember the page of a section."""
        self._headings += 1
        key = heading.key or f"part-{self._headings}"
        self.bookmarkPage(key)
        self.addOutlineEntry(heading.getPlainText(), key, heading.level)
        self._places[key] = self.getPageNumber()

    def page_of(self, key: str, width: float, size: float) -> None:
        """The page of a section, flush right at the current origin, as soon as it is known."""
        self._asked[key] = (width, size)
        self.saveState()
        self.translate(-width, 0.0)
        self.doForm(f"place-{key}")
        self.restoreState()

    def save(self) -> None:
        """Draw the numbers that pages have referred to, and finish the file."""
        last = self.getPageNumber() - 1
        for number in range(1, last + 1):
            self._write(f"page-{number}", f"page {number} of {last}", _COUNT, _SMALL)
        for key, (width, size) in self._asked.items():
            self._write(f"place-{key}", str(self._places[key]), width, size)
        super().save()

    def _write(self, form: str, text: str, width: float, size: float) -> None:
        self.beginForm(form, 0.0, -0.4 * size, width, 1.2 * size)
        self.setFont(REGULAR, size)
        self.drawRightString(width, 0.0, text)
        self.endForm()
