"""The paper: page template, header and footer, headings, and the file made in two passes."""

from __future__ import annotations

import hashlib
from dataclasses import dataclass
from io import BytesIO
from typing import TYPE_CHECKING, Any

from reportlab.lib.pagesizes import A4, LETTER
from reportlab.lib.units import mm
from reportlab.pdfbase.pdfmetrics import stringWidth
from reportlab.pdfgen.canvas import Canvas
from reportlab.platypus import BaseDocTemplate, CondPageBreak, Frame, PageTemplate, Paragraph

from incline.report.fonts import REGULAR, register_fonts
from incline.report.show import Show
from incline.report.styles import RULE, STYLES
from incline.report.text import elide, markup

if TYPE_CHECKING:
    import datetime
    from collections.abc import Callable

    from incline.result import Reduction

__all__ = ["Sheet", "bullet", "heading", "note", "paragraph", "part", "render"]

_LEFT, _RIGHT, _TOP, _BOTTOM = 21 * mm, 15 * mm, 21 * mm, 18 * mm
_SIZES = {"A4": A4, "Letter": LETTER}


@dataclass(frozen=True, slots=True, eq=False)
class Sheet:
    """What every section needs: the reduction, number formats, and the width of the text [pt]."""

    reduction: Reduction
    show: Show
    report_date: datetime.date
    version: str

    @property
    def page(self) -> tuple[float, float]:
        """Width and height of the paper [pt]."""
        wide, high = _SIZES[self.show.system.page]
        return float(wide), float(high)

    @property
    def width(self) -> float:
        """Width of the text [pt]."""
        return self.page[0] - float(_LEFT + _RIGHT)


class _Heading(Paragraph):  # type: ignore[misc]
    """A section heading that also stands in the PDF's outline."""


def heading(number: int, title: str, need: float) -> list[Any]:
    """A numbered section heading; begins a new page unless ``need`` points are left."""
    text = f"{number}\N{NO-BREAK SPACE}\N{NO-BREAK SPACE}{title}"
    return [CondPageBreak(need), _Heading(markup(text), STYLES["section"])]


def part(title: str, need: float = 32 * mm) -> list[Any]:
    """A heading inside a section; begins a new page unless ``need`` points are left."""
    return [CondPageBreak(need), Paragraph(markup(title), STYLES["part"])]


def paragraph(text: str) -> Paragraph:
    """Running text, printed as typed."""
    return Paragraph(markup(text), STYLES["body"])


def note(text: str) -> Paragraph:
    """Small text under a table or plot, printed as typed."""
    return Paragraph(markup(text), STYLES["note"])


def bullet(text: str) -> Paragraph:
    """One entry of a list, printed as typed."""
    return Paragraph(markup(text), STYLES["bullet"], bulletText="•")


class _Document(BaseDocTemplate):  # type: ignore[misc]
    """One pass over the flow; ``pages`` is the number of pages when a pass has found it."""

    def __init__(self, target: BytesIO, sheet: Sheet, pages: int | None) -> None:
        trial = sheet.reduction.trial
        super().__init__(
            target,
            pagesize=sheet.page,
            title=f"Inclining test of {elide(trial.vessel.name, 150)}",
            author=f"incline {sheet.version}",
            subject=f"Lightship from the test at {elide(trial.occasion.place, 150)}, "
            f"{trial.occasion.date.isoformat()}",
            creator=f"incline {sheet.version}",
            producer=f"incline {sheet.version}",
            keywords=f"inclining test, lightship, {trial.digest}",
            lang="en",
            invariant=1,
            initialFontName=REGULAR,
            displayDocTitle=1,
        )
        self.sheet = sheet
        self.pages = pages
        high = sheet.page[1] - _TOP - _BOTTOM
        frame = Frame(_LEFT, _BOTTOM, sheet.width, high, 0, 0, 0, 0, id="text")
        self.addPageTemplates([PageTemplate("page", [frame], onPage=self._furniture)])

    def _furniture(self, canvas: Any, _document: object) -> None:  # noqa: ANN401 - untyped library
        """Header and footer of one page."""
        sheet, trial = self.sheet, self.sheet.reduction.trial
        wide, high = sheet.page
        canvas.saveState()
        canvas.setFont(REGULAR, 7)
        date = trial.occasion.date.isoformat()
        head, foot = high - _TOP + 5 * mm, _BOTTOM - 6 * mm
        right = f"inclining test of {date}"
        room = sheet.width - stringWidth(right, REGULAR, 7) - 12
        canvas.drawString(_LEFT, head, _fit(trial.vessel.name, room))
        canvas.drawRightString(wide - _RIGHT, head, right)
        total = "" if self.pages is None else str(self.pages)
        canvas.drawString(_LEFT, foot, f"trial {trial.digest[:16]}  ·  incline {sheet.version}")
        canvas.drawRightString(wide - _RIGHT, foot, f"page {canvas.getPageNumber()} of {total}")
        canvas.setStrokeColor(RULE)
        canvas.setLineWidth(0.4)
        canvas.line(_LEFT, head - 4, wide - _RIGHT, head - 4)
        canvas.line(_LEFT, foot + 9, wide - _RIGHT, foot + 9)
        canvas.restoreState()

    def afterFlowable(self, flowable: object) -> None:  # noqa: N802 - the library's name
        """Put section headings into the outline."""
        if isinstance(flowable, _Heading):
            title = flowable.getPlainText()
            key = f"section-{title.split()[0]}"
            self.canv.bookmarkPage(key)
            self.canv.addOutlineEntry(title, key, 0)


def _fit(text: str, room: float) -> str:
    """As much of a line of 7-point text as there is room for."""
    line, most = elide(text, 200), 200
    while stringWidth(line, REGULAR, 7) > room and most > 1:
        most = min(most, len(line)) - 1
        line = elide(text, most)
    return line


def _stamped(sheet: Sheet, *, counting: bool) -> Callable[..., Canvas]:
    """Canvas whose dates and identifier come from the report, never from a clock or the machine.

    ``counting`` tells figures that the pass is only to find the number of pages.
    """
    stamp = f"D:{sheet.report_date:%Y%m%d}000000+00'00'"
    identity = f"{sheet.reduction.trial.digest} {stamp} {sheet.version}"

    def make(*args: object, **options: object) -> Canvas:
        canvas = Canvas(*args, **options)
        canvas.counting = counting
        canvas.setDateFormatter(lambda *_: stamp)
        canvas._doc.signature = hashlib.md5(identity.encode(), usedforsecurity=False)  # noqa: SLF001
        return canvas

    return make


def render(sheet: Sheet, story: Callable[[Sheet], list[Any]]) -> bytes:
    """The PDF; the flow is set twice, first to count the pages."""
    register_fonts()
    pages: int | None = None
    target = BytesIO()
    for _ in range(2):
        target = BytesIO()
        document = _Document(target, sheet, pages)
        document.build(story(sheet), canvasmaker=_stamped(sheet, counting=pages is None))
        pages = int(document.page)
    return target.getvalue()
