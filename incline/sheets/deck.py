"""A sketch of the deck from above with the places of the test weights."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING, Any

from reportlab.pdfbase.pdfmetrics import stringWidth
from reportlab.platypus import Flowable

from incline.report.fonts import BOLD, REGULAR
from incline.report.styles import INK

if TYPE_CHECKING:
    from collections.abc import Iterator, Sequence

__all__ = ["DeckPlan", "Spot"]

_SIZE = 9.0
_ARM = 2.2
_GAP = 9.0


@dataclass(frozen=True, slots=True)
class Spot:
    """A place of a test weight [m] and the short mark by which the sheet names it."""

    mark: str
    x: float
    y: float


class DeckPlan(Flowable):  # type: ignore[misc]
    """The deck seen from above, bow to the right and starboard below.

    ``length`` and ``beam`` [m] set the scales along and across, which differ; without them the
    spots do. Spots that are not known are left out: the sketch is then for the hand.
    """

    def __init__(
        self, size: tuple[float, float], length: float, beam: float, spots: Sequence[Spot]
    ) -> None:
        super().__init__()
        self.width, self.height = size
        self.spots = [s for s in spots if math.isfinite(s.x + s.y)]
        xs, ys = [s.x for s in self.spots], [abs(s.y) for s in self.spots]
        known = math.isfinite(length) and length > 0.0
        low, high = min([0.0, *xs]), max([length if known else 1.0, *xs])
        self.along = (low, max(high, low + 1e-6))
        wide = beam if math.isfinite(beam) and beam > 0.0 else 2.4 * max([0.5, *ys])
        self.half = max([wide / 2.0, *ys])
        self.hAlign = "LEFT"
        self.spaceBefore, self.spaceAfter = 3.0, 6.0

    def wrap(self, *_available: float) -> tuple[float, float]:
        """Size on the page [pt]."""
        return self.width, self.height

    def _at(self, x: float, y: float) -> tuple[float, float]:
        low, high = self.along
        room = self.width - 60.0
        return 30.0 + room * (x - low) / (high - low), self.height / 2.0 * (
            1.0 - 0.8 * y / self.half
        )

    def draw(self) -> None:
        """Outline, centreline, sides, and the spots with their marks."""
        canvas = self.canv
        canvas.saveState()
        canvas.setStrokeColor(INK)
        canvas.setFillColor(INK)
        self._outline(canvas)
        canvas.setFont(BOLD, _SIZE)
        canvas.setLineWidth(1.0)
        points = [self._at(s.x, s.y) for s in self.spots]
        taken = [_box(x, y, 0.0, 0.0) for x, y in points]
        for spot, (x, y) in zip(self.spots, points, strict=True):
            canvas.line(x - _ARM, y - _ARM, x + _ARM, y + _ARM)
            canvas.line(x - _ARM, y + _ARM, x + _ARM, y - _ARM)
            self._mark(canvas, spot.mark, (x, y), taken)
        canvas.restoreState()

    def _outline(self, canvas: Any) -> None:  # noqa: ANN401 - untyped library
        middle, half = self.height / 2.0, 0.40 * self.height
        stern, bow = 30.0, self.width - 30.0
        shoulder = stern + 0.78 * (bow - stern)
        path = canvas.beginPath()
        path.moveTo(shoulder, middle + half)
        path.lineTo(stern, middle + half)
        path.lineTo(stern, middle - half)
        path.lineTo(shoulder, middle - half)
        path.curveTo(0.5 * (shoulder + bow), middle - half, bow, middle - 0.35 * half, bow, middle)
        path.curveTo(bow, middle + 0.35 * half, 0.5 * (shoulder + bow), middle + half, shoulder,
                     middle + half)  # fmt: skip
        canvas.setLineWidth(0.8)
        canvas.drawPath(path)
        canvas.setDash([8.0, 3.0, 2.0, 3.0])
        canvas.setLineWidth(0.4)
        canvas.line(stern - 10.0, middle, bow + 10.0, middle)
        canvas.setDash([])
        canvas.setFont(REGULAR, 8)
        canvas.drawString(stern, middle + half + 4.0, "PORT")
        canvas.drawString(stern, middle - half - 10.0, "STARBOARD")
        canvas.drawCentredString(0.5 * (stern + bow), middle + half + 4.0, "forward  →")

    def _mark(
        self,
        canvas: Any,  # noqa: ANN401
        word: str,
        at: tuple[float, float],
        taken: list[tuple[float, float, float, float]],
    ) -> None:
        """The mark beside its spot, where it covers no other, and a thin line between them."""
        wide = stringWidth(word, BOLD, _SIZE)
        x, y = next(
            (
                p
                for p in self._around(at, wide)
                if not any(_meet(_box(*p, wide, _SIZE), t) for t in taken)
            ),
            (at[0] + _GAP, at[1] + _GAP),
        )
        taken.append(_box(x, y, wide, _SIZE))
        near = (min(max(at[0], x), x + wide), min(max(at[1], y), y + _SIZE))
        canvas.setLineWidth(0.3)
        canvas.line(*at, *near)
        canvas.setLineWidth(1.0)
        canvas.drawString(x, y + 1.2, word)

    def _around(self, at: tuple[float, float], wide: float) -> Iterator[tuple[float, float]]:
        """Lower left corners for a word on the sketch, ever farther off; abreast of its spot first.

        Places of a weight differ across the ship, so a word ahead or astern is clear of the others.
        """
        for ring in range(1, 14):
            turns = [2.0 * math.pi * n / (8 * ring) for n in range(8 * ring)]
            for angle in sorted(turns, key=lambda t: round(abs(math.sin(t)), 6)):
                x = at[0] + (_GAP * ring + wide / 2.0) * math.cos(angle) - wide / 2.0
                y = at[1] + (_GAP * ring + _SIZE / 2.0) * math.sin(angle) - _SIZE / 2.0
                if 0.0 <= x <= self.width - wide and 0.0 <= y <= self.height - _SIZE:
                    yield x, y


def _box(x: float, y: float, wide: float, high: float) -> tuple[float, float, float, float]:
    """Left, right, low and high edge of a word, or of a cross where it has no size."""
    if not wide:
        return x - _ARM, x + _ARM, y - _ARM, y + _ARM
    return x, x + wide, y, y + high


def _meet(a: tuple[float, float, float, float], b: tuple[float, float, float, float]) -> bool:
    return a[0] < b[1] and b[0] < a[1] and a[2] < b[3] and b[2] < a[3]
