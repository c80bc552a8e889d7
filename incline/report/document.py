"""The paper: what every section needs, headings that stay with what follows, the file made."""

from __future__ import annotations

from dataclasses import dataclass
from io import BytesIO
from typing import TYPE_CHECKING, Any, Literal

from reportlab.lib.pagesizes import A4, LETTER
from reportlab.platypus import BaseDocTemplate, Frame, PageTemplate, Paragraph

from incline.report.fonts import REGULAR
from incline.report.headings import Heading, Room, settle
from incline.report.page import BOTTOM, LEFT, RIGHT, TOP, Furniture, PageCanvas
from incline.report.show import Show
from incline.report.stamp import stamped
from incline.report.styles import STYLES
from incline.report.text import elide, markup
from incline.units import SYSTEMS

if TYPE_CHECKING:
    import datetime

    from incline.report.show import Kind
    from incline.result import Reduction

__all__ = [
    "Options", "Sheet", "bullet", "heading", "note", "paragraph", "part", "render",
]  # fmt: skip

_SIZES = {"A4": A4, "Letter": LETTER}


@dataclass(frozen=True, slots=True, kw_only=True)
class Options:
    """How a report is set.

    ``beside`` prints US units beside the metric ones (or the reverse) in the tables of results;
    ``paper`` None takes the paper that goes with the units.
    """

    beside: bool = False
    paper: Literal["A4", "Letter"] | None = None


@dataclass(frozen=True, slots=True)
class Sheet:
    """What every section needs: the reduction, number formats, and the width of the text [pt]."""

    reduction: Reduction
    show: Show
    report_date: datetime.date
    version: str
    options: Options = Options()

    @property
    def page(self) -> tuple[float, float]:
        """Width and height of the paper [pt]."""
        wide, high = _SIZES[self.options.paper or self.show.system.page]
        return float(wide), float(high)

    @property
    def width(self) -> float:
        """Width of the text [pt]."""
        return self.page[0] - float(LEFT + RIGHT)

    @property
    def beside(self) -> Show | None:
        """Number formats of the other unit system; None unless both are printed."""
        if not self.options.beside:
            return None
        return Show(SYSTEMS["us" if self.show.system.name == "metric" else "metric"])

    def full(self, value: float | None, kind: Kind, decimals: int | None = None) -> str:
        """Number and unit; the other system's under it where both are printed."""
        own, other = self.show.full(value, kind, decimals), self.beside
        if other is None or value is None:
            return own
        return f"{own}\n{other.full(value, kind, decimals)}"

    def units(self, kind: Kind) -> str:
        """The unit for a heading; the other system's after it where both are printed."""
        own, other = self.show.unit(kind), self.beside
        return own if other is None else f"{own}; {other.unit(kind)}"


def heading(number: str, title: str, need: float = 0.0) -> list[Any]:
    """A numbered section heading; begins a new page where what follows has no room to begin."""
    gap = "\N{NO-BREAK SPACE}\N{NO-BREAK SPACE}"
    return [Room(need), Heading(f"{number}{gap}{title}", 0, f"section-{number.rpartition(' ')[2]}")]


def part(title: str, need: float = 0.0) -> list[Any]:
    """A heading inside a section; begins a new page unless ``need`` points are left.

    However small ``need`` is, the heading stays with the beginning of what follows it.
    """
    return [Room(need), Heading(title, 1)]


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
    """The flow set on pages with headers and footers, headings put into the outline."""

    def __init__(self, target: BytesIO, sheet: Sheet) -> None:
        trial = sheet.reduction.trial
        super().__init__(
            target,
            pagesize=sheet.page,
            title=f"Inclining test of {elide(trial.vessel.name, 150)}",
            author=elide(trial.papers.author, 150) or f"incline {sheet.version}",
            subject=f"Lightship from the test at {elide(trial.occasion.place, 150)}, "
            f"{trial.occasion.date.isoformat()}",
            creator=f"incline {sheet.version}",
            producer=f"incline {sheet.version}",
            keywords=f"inclining test, lightship, {trial.papers.status}, {trial.digest}",
            lang="en",
            invariant=1,
            initialFontName=REGULAR,
            displayDocTitle=1,
            pageMode="UseOutlines",
        )
        high = sheet.page[1] - TOP - BOTTOM
        frame = Frame(LEFT, BOTTOM, sheet.width, high, 0, 0, 0, 0, id="text")
        drawn = Furniture(trial, sheet.page, sheet.version)
        self.addPageTemplates([PageTemplate("page", [frame], onPage=drawn.draw)])

    def afterFlowable(self, flowable: object) -> None:  # noqa: N802 - the library's name
        """Put headings into the outline, and tell the contents where sections begin."""
        if isinstance(flowable, Heading):
            self.canv.note_heading(flowable)


def render(sheet: Sheet, flow: list[Any]) -> bytes:
    """The PDF of a flow, which is used up."""
    target = BytesIO()
    identity = f"{sheet.reduction.trial.digest} {sheet.version} {sheet.options} {sheet.show.system}"
    document = _Document(target, sheet)
    document.build(settle(flow), canvasmaker=stamped(sheet.report_date, identity, PageCanvas))
    return target.getvalue()
