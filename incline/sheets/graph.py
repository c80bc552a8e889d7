"""Graph paper for the running plot: round scales, fine squares, and the line that is expected."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING, Any

from reportlab.lib.colors import Color
from reportlab.pdfbase.pdfmetrics import stringWidth
from reportlab.platypus import Flowable

from incline.report.fonts import REGULAR
from incline.report.show import signed
from incline.report.styles import INK

if TYPE_CHECKING:
    from collections.abc import Sequence

__all__ = ["GraphPaper", "Scale", "scale_of"]

_FAINT = Color(0.55, 0.55, 0.55)
_FINE = 10
"""Fine squares in a division."""
_NEAR = 16.0
"""Points of the line closer than this share one word [pt]."""
_LEFT, _BELOW, _ABOVE = 46.0, 34.0, 6.0


@dataclass(frozen=True, slots=True)
class Scale:
    """Divisions of an axis on both sides of zero; ``step`` is None where there are no figures."""

    below: int
    above: int
    step: float | None

    @property
    def divisions(self) -> int:
        """All of them."""
        return self.below + self.above

    def share(self, value: float) -> float:
        """How far along the axis a value lies, 0 to 1."""
        return (value / (self.step or 1.0) + self.below) / self.divisions

    def label(self, division: int) -> str:
        """The figure at a division, counted from zero."""
        if self.step is None:
            return "0" if division == 0 else ""
        decimals = max(0, -math.floor(math.log10(self.step) + 1e-9))
        return signed(f"{division * self.step:.{decimals}f}") if division else "0"


def scale_of(values: Sequence[float], most: int, margin: float) -> Scale:
    """The finest scale with steps of 1, 2 or 5 that holds the values, in ``most`` divisions.

    ``margin`` is the share of room beyond them; an axis without values that differ from zero gets
    no figures.
    """
    high, low = (margin * max(0.0, *(s * v for v in values), 0.0) for s in (1.0, -1.0))
    if not (math.isfinite(high + low) and high + low > 0.0):
        return Scale(most // 2, most - most // 2, None)
    power = math.floor(math.log10((high + low) / most)) - 1
    for step in (m * 10.0**p for p in range(power, power + 4) for m in (1.0, 2.0, 5.0)):
        above, below = (max(1, math.ceil(v / step - 1e-9)) for v in (high, low))
        if above + below <= most:
            return Scale(below, above, step)
    raise AssertionError("four decades of steps hold any values")


class GraphPaper(Flowable):  # type: ignore[misc]
    """A sheet of squares with axes through zero.

    ``line`` are points of what is expected, joined by a dashed line; ``marks`` points of it with
    a word beside each. Both in the units of the axes.
    """

    def __init__(
        self,
        size: tuple[float, float],
        scales: tuple[Scale, Scale],
        names: tuple[str, str],
        line: Sequence[tuple[float, float]] = (),
        marks: Sequence[tuple[float, float, str]] = (),
    ) -> None:
        super().__init__()
        self.width, self.height = size
        self.scales, self.names = scales, names
        self.line, self.marks = line, marks
        self.hAlign = "LEFT"
        self.spaceBefore, self.spaceAfter = 2.0, 6.0

    def wrap(self, *_available: float) -> tuple[float, float]:
        """Size on the page [pt]."""
        return self.width, self.height

    def _at(self, x: float, y: float) -> tuple[float, float]:
        return (
            _LEFT + self.scales[0].share(x) * (self.width - _LEFT - 1.0),
            _BELOW + self.scales[1].share(y) * (self.height - _BELOW - _ABOVE),
        )

    def draw(self) -> None:
        """Squares, axes, figures, names, and what is expected."""
        canvas = self.canv
        canvas.saveState()
        canvas.setFillColor(INK)
        self._squares(canvas)
        canvas.setStrokeColor(INK)
        self._figures(canvas)
        self._expected(canvas)
        canvas.restoreState()

    def _squares(self, canvas: Any) -> None:  # noqa: ANN401 - untyped library
        left, low = _LEFT, _BELOW
        right, high = self.width - 1.0, self.height - _ABOVE
        for axis, scale in enumerate(self.scales):
            fine = scale.divisions * _FINE
            for i in range(fine + 1):
                division, rest = divmod(i, _FINE)
                zero = not rest and division == scale.below
                middle = 0.4 if 2 * rest == _FINE else 0.2
                canvas.setStrokeColor(_FAINT if rest else INK)
                canvas.setLineWidth(1.2 if zero else middle if rest else 0.5)
                if axis == 0:
                    x = left + (right - left) * i / fine
                    canvas.line(x, low, x, high)
                else:
                    y = low + (high - low) * i / fine
                    canvas.line(left, y, right, y)

    def _figures(self, canvas: Any) -> None:  # noqa: ANN401
        across, up = self.scales
        canvas.setFont(REGULAR, 8)
        for i in range(-across.below, across.above + 1):
            x = self._at(i * (across.step or 1.0), 0.0)[0]
            canvas.drawCentredString(x, _BELOW - 11.0, across.label(i))
        for i in range(-up.below, up.above + 1):
            y = self._at(0.0, i * (up.step or 1.0))[1]
            canvas.drawRightString(_LEFT - 4.0, y - 2.8, up.label(i))
        canvas.setFont(REGULAR, 9)
        canvas.drawCentredString((_LEFT + self.width) / 2.0, 6.0, self.names[0])
        canvas.saveState()
        canvas.translate(9.0, (_BELOW + self.height) / 2.0)
        canvas.rotate(90.0)
        canvas.drawCentredString(0.0, 0.0, self.names[1])
        canvas.restoreState()

    def _expected(self, canvas: Any) -> None:  # noqa: ANN401
        if self.line:
            path = canvas.beginPath()
            path.moveTo(*self._at(*self.line[0]))
            for point in self.line[1:]:
                path.lineTo(*self._at(*point))
            canvas.setLineWidth(0.9)
            canvas.setDash([6.0, 3.0])
            canvas.drawPath(path)
            canvas.setDash([])
        canvas.setFont(REGULAR, 8)
        canvas.setLineWidth(0.9)
        words: list[tuple[tuple[float, float], list[str]]] = []
        for x, y, word in self.marks:
            at = self._at(x, y)
            canvas.circle(*at, 2.6, stroke=1, fill=0)
            near = next((w for w in words if math.dist(w[0], at) < _NEAR), None)
            if near:
                near[1].append(word)
            else:
                words.append((at, [word]))
        for at, several in words:
            self._word(canvas, at, ", ".join(several))

    def _word(self, canvas: Any, at: tuple[float, float], word: str) -> None:  # noqa: ANN401
        """Below and to the right of a point, on white, clear of a line that rises."""
        wide = stringWidth(word, REGULAR, 8)
        left = at[0] + 5.0
        if left + wide > self.width - 3.0:
            left = self.width - 3.0 - wide
        canvas.saveState()
        canvas.setFillColorRGB(1.0, 1.0, 1.0)
        canvas.rect(left - 1.0, at[1] - 14.0, wide + 2.0, 9.5, stroke=0, fill=1)
        canvas.restoreState()
        canvas.drawString(left, at[1] - 12.0, word)
