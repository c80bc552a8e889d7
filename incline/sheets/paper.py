"""The paper: on every page the vessel, the sheet's title and number, and boxes for initials."""

from __future__ import annotations

from dataclasses import dataclass
from io import BytesIO
from typing import TYPE_CHECKING, Any

from reportlab.lib.units import mm
from reportlab.platypus import (
    BaseDocTemplate,
    Flowable,
    Frame,
    NextPageTemplate,
    PageBreak,
    PageTemplate,
)

from incline.report.fonts import BOLD, REGULAR, register_fonts
from incline.report.stamp import stamped
from incline.report.styles import INK
from incline.report.text import elide
from incline.sheets.book import MARGIN
from incline.sheets.forms import paragraph_of

if TYPE_CHECKING:
    from collections.abc import Callable, Sequence

    from incline.sheets.book import Book

__all__ = ["SheetOf", "Spread", "render"]

_INITIALS = ("Read by (initials)", "Recorded by (initials)", "Checked by (initials)", "Date")
_BOX = 12.0 * mm
_FOOT = _BOX + 20.0
"""From the lower margin to the text: the boxes, and a line of small print below them [pt]."""
_SIDE = 52.0 * mm
"""Width beside the vessel's name for the number of the sheet and the date [pt]."""
_PASSES = 5
"""Most times that the sheets are set; the third has the right numbers as a rule."""
_LONGEST = 300
"""Most characters of a name in the heading of a page; more would leave no room below."""


@dataclass(frozen=True, slots=True)
class SheetOf:
    """One sheet: its title, what stands on it, and whether the paper lies on its side."""

    title: str
    flow: Sequence[Any]
    broad: bool = False


@dataclass(frozen=True, slots=True)
class Spread:
    """Pages on which each sheet begins, and how many pages there are; empty before that is known.

    ``titles`` are those of the sheets, in order.
    """

    titles: tuple[str, ...] = ()
    starts: tuple[int, ...] = ()
    pages: int | None = None

    def count(self, index: int) -> int:
        """Pages of a sheet."""
        ends = (*self.starts[1:], (self.pages or 0) + 1)
        return ends[index] - self.starts[index]


class _Start(Flowable):  # type: ignore[misc]
    """The place where a sheet begins: an entry of the outline, and its page for the list."""

    def __init__(self, title: str, starts: list[int]) -> None:
        super().__init__()
        self.title = title
        self.starts = starts

    def wrap(self, *_available: float) -> tuple[float, float]:
        """No room at all."""
        return 0.0, 0.0

    def draw(self) -> None:
        """Note the page."""
        self.starts.append(self.canv.getPageNumber())
        key = f"sheet-{len(self.starts)}"
        self.canv.bookmarkPage(key)
        self.canv.addOutlineEntry(elide(self.title, 150), key, 0)


class _Page(PageTemplate):  # type: ignore[misc]
    """The pages of one sheet."""

    def __init__(self, book: Book, sheet: SheetOf, number: int, spread: Spread) -> None:
        wide, high = book.page[::-1] if sheet.broad else book.page
        self.book, self.number, self.spread = book, number, spread
        self.paper = (wide, high)
        width = wide - 2.0 * MARGIN
        self.vessel = paragraph_of(
            f"Vessel: {elide(book.trial.vessel.name, _LONGEST)}"
            if book.trial.vessel.name
            else "Vessel:",
            "vessel",
        )
        self.title = paragraph_of(elide(sheet.title, _LONGEST), "title")
        self.name_high = max(26.0, self.vessel.wrap(width - _SIDE - 8.0, high)[1])
        self.title_high = self.title.wrap(width, high)[1]
        top = MARGIN + self.name_high + self.title_high + 14.0
        low = MARGIN + _FOOT
        frame = Frame(MARGIN, low, width, high - top - low, 0, 0, 0, 0, id="text")
        super().__init__(f"sheet-{number}", [frame], onPage=self._furniture, pagesize=(wide, high))

    def _furniture(self, canvas: Any, _document: object) -> None:  # noqa: ANN401 - untyped library
        canvas.saveState()
        canvas.setStrokeColor(INK)
        canvas.setFillColor(INK)
        self._head(canvas)
        self._foot(canvas)
        canvas.restoreState()

    def _head(self, canvas: Any) -> None:  # noqa: ANN401
        wide, high = self.paper
        top, right = high - MARGIN, wide - MARGIN
        low = top - self.name_high
        self.vessel.drawOn(canvas, MARGIN, top - self.vessel.height)
        total = len(self.spread.titles) or ""
        canvas.setFont(BOLD, 10.5)
        canvas.drawRightString(right, top - 10.0, f"Sheet {self.number} of {total}")
        canvas.setFont(REGULAR, 9)
        date = self.book.partial.date
        said = "______________" if date is None else date.isoformat()
        canvas.drawRightString(right, top - 24.0, f"date of test {said}")
        canvas.setLineWidth(0.8)
        canvas.line(MARGIN, low - 4.0, right, low - 4.0)
        self.title.drawOn(canvas, MARGIN, low - 8.0 - self.title_high)

    def _foot(self, canvas: Any) -> None:  # noqa: ANN401
        wide = self.paper[0]
        each = (wide - 2.0 * MARGIN) / len(_INITIALS)
        canvas.setLineWidth(0.6)
        canvas.setFont(REGULAR, 7)
        for i, label in enumerate(_INITIALS):
            left = MARGIN + i * each
            canvas.rect(left, MARGIN + 10.0, each, _BOX)
            canvas.drawString(left + 3.0, MARGIN + 10.0 + _BOX - 8.5, label)
        book = self.book
        origin = f"trial {book.trial.digest[:16]}  ·  " if book.trial.vessel.name else ""
        printed = f"{origin}incline {book.version}  ·  printed {book.printed.isoformat()}"
        canvas.drawString(MARGIN, MARGIN, printed)
        canvas.setFont(BOLD, 8)
        total = "" if self.spread.pages is None else str(self.spread.pages)
        canvas.drawRightString(wide - MARGIN, MARGIN, f"page {canvas.getPageNumber()} of {total}")


def render(book: Book, sheets: Callable[[Spread], Sequence[SheetOf]]) -> bytes:
    """The PDF; set again until the list of sheets with their pages is the one that was printed."""
    register_fonts()
    spread, found = Spread(), None
    data = b""
    for _ in range(_PASSES):
        if found == spread:
            break
        spread = found or spread
        data, found = _pass(book, sheets(spread), spread)
    return data


def _pass(book: Book, sheets: Sequence[SheetOf], spread: Spread) -> tuple[bytes, Spread]:
    """The PDF with the page numbers known so far, and those that it has."""
    target = BytesIO()
    starts: list[int] = []
    document = _document(target, book, sheets, spread)
    flow: list[Any] = []
    for number, sheet in enumerate(sheets, start=1):
        if number > 1:
            flow += [NextPageTemplate(f"sheet-{number}"), PageBreak()]
        flow += [_Start(sheet.title, starts), *sheet.flow]
    identity = f"sheets {book.trial.digest} {book.version} {book.page}"
    document.build(flow, canvasmaker=stamped(book.printed, identity))
    titles = tuple(s.title for s in sheets)
    return target.getvalue(), Spread(titles, tuple(starts), int(document.page))


def _document(
    target: BytesIO, book: Book, sheets: Sequence[SheetOf], spread: Spread
) -> BaseDocTemplate:
    name = elide(book.trial.vessel.name, 150)
    document = BaseDocTemplate(
        target,
        pagesize=book.page,
        title=f"Field sheets of an inclining test{f', {name}' if name else ''}",
        subject="Sheets to be filled in by hand at the test",
        author=f"incline {book.version}",
        creator=f"incline {book.version}",
        producer=f"incline {book.version}",
        lang="en",
        invariant=1,
        initialFontName=REGULAR,
        displayDocTitle=1,
    )
    document.addPageTemplates(
        [_Page(book, sheet, number, spread) for number, sheet in enumerate(sheets, start=1)]
    )
    return document
