"""Words in figures: broken into lines that fit, and set where they cover nothing."""

from __future__ import annotations

from typing import TYPE_CHECKING

from reportlab.pdfbase.pdfmetrics import stringWidth

from incline.report.fonts import BOLD, REGULAR, register_fonts
from incline.report.text import clean, elide

if TYPE_CHECKING:
    from collections.abc import Sequence

__all__ = ["Box", "place", "widest", "width_of", "wrapped"]

_MOST = 160
"""Most characters of a name in a figure; longer ones stand whole in the tables."""

Box = tuple[float, float, float, float]
"""Left, bottom, right, top [pt]."""


def width_of(text: str, size: float, *, bold: bool = False) -> float:
    """Width of a line of text [pt]."""
    register_fonts()
    return float(stringWidth(text, BOLD if bold else REGULAR, size))


def wrapped(text: str, size: float, room: float, *, bold: bool = False) -> str:
    """Text in lines no wider than ``room`` [pt]; a word wider than that is broken."""
    lines = [""]
    for word in elide(clean(text), _MOST).split():
        longer = f"{lines[-1]} {word}".strip()
        if width_of(longer, size, bold=bold) <= room:
            lines[-1] = longer
            continue
        if lines[-1]:
            lines.append("")
        for letter in word:
            if lines[-1] and width_of(lines[-1] + letter, size, bold=bold) > room:
                lines.append("")
            lines[-1] += letter
    return "\n".join(lines)


def widest(text: str, size: float) -> float:
    """Width of the longest line [pt]."""
    return max(width_of(line, size) for line in text.split("\n"))


def place(
    at: tuple[float, float], text: str, size: float, taken: Sequence[Box], within: Box
) -> tuple[float, float, Box]:
    """Where to put a word near a point so that it covers nothing: its left end and baseline.

    All in points. Places around the point are tried, nearest first; when all are taken the one
    that covers least is used.
    """
    wide, high = width_of(text, size), 0.95 * size
    best: tuple[float, float, Box] | None = None
    least = float("inf")
    for reach in (4.0, 9.0, 15.0, 22.0):
        for right, up in ((1, 0), (-1, 0), (0, 1), (0, -1), (1, 1), (-1, 1), (1, -1), (-1, -1)):
            left = at[0] + right * reach - wide * (0.5 - 0.5 * right)
            low = at[1] + up * reach - high * (0.5 - 0.5 * up)
            box = (left, low, left + wide, low + high)
            covered = sum(_shared(box, other) for other in taken)
            covered += 1e3 * (wide * high - _shared(box, within) > 1e-6)
            if covered < least:
                least, best = covered, (left, low + 0.18 * size, box)
            if covered == 0.0:
                return left, low + 0.18 * size, box
    assert best is not None  # noqa: S101 - some place was tried
    return best


def _shared(a: Box, b: Box) -> float:
    """Area that two boxes share."""
    wide, high = min(a[2], b[2]) - max(a[0], b[0]), min(a[3], b[3]) - max(a[1], b[1])
    return max(0.0, wide) * max(0.0, high)
