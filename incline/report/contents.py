"""The page of contents: section titles with the pages on which they begin."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from reportlab.platypus.flowables import Flowable

from incline.report.fonts import REGULAR
from incline.report.headings import Heading
from incline.report.styles import RULE

if TYPE_CHECKING:
    from collections.abc import Iterable

__all__ = ["Contents"]

_SIZE, _LINE, _TITLE, _NUMBER = 8.2, 13.2, 62.0, 26.0
"""Type size, distance of lines, where titles begin, width of the page numbers [pt]."""


class Contents(Flowable):  # type: ignore[misc]
    """One line for each section of a flow; each leads to its section."""

    def __init__(self, flow: Iterable[Any]) -> None:
        super().__init__()
        found = (f for f in flow if isinstance(f, Heading) and f.level == 0)
        self.lines = [(f.title, f.key) for f in found]
        self.spaceAfter = 8

    def wrap(self, width: float, _height: float) -> tuple[float, float]:
        """Size on the page in points."""
        self.width, self.height = width, _LINE * len(self.lines)
        return self.width, self.height

    def draw(self) -> None:
        """Draw on the canvas that the page has set."""
        canvas = self.canv
        canvas.setFont(REGULAR, _SIZE)
        canvas.setStrokeColor(RULE)
        canvas.setLineWidth(0.3)
        for i, (title, key) in enumerate(self.lines):
            base = self.height - _LINE * (i + 1) + 4.0
            number, _, words = title.partition("\N{NO-BREAK SPACE}\N{NO-BREAK SPACE}")
            canvas.drawString(0.0, base, number)
            canvas.drawString(_TITLE, base, words)
            canvas.line(0.0, base - 3.0, self.width, base - 3.0)
            canvas.linkRect("", key, (0.0, base - 3.0, self.width, base + _SIZE), relative=1)
            canvas.saveState()
            canvas.translate(self.width, base)
            canvas.page_of(key, _NUMBER, _SIZE)
            canvas.restoreState()
