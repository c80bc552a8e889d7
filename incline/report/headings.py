"""Headings, and the room that keeps them with what follows."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from reportlab.platypus import CondPageBreak, KeepTogether, Paragraph, Table

from incline.report.styles import STYLES
from incline.report.text import markup

if TYPE_CHECKING:
    from collections.abc import Iterator, Sequence

__all__ = ["Heading", "Room", "Whole", "settle", "stays_whole"]

_ROWS, _TEXT = 2, 34.0
"""What must follow a heading on its page: rows under a table's header, or points of text."""
_SMALL, _FEW, _LOW = 120.0, 13, 260.0
"""A table is kept whole up to this height [pt], or with few rows, its header among them, up to
a greater one."""
_SENTENCE = 60.0
"""Height of a text that does not stand alone before its table [pt]."""
_MOST = 600.0
"""Points that are there on every empty page: more is never asked for."""


class Heading(Paragraph):  # type: ignore[misc]
    """A heading of a section (level 0) or of a part of one (level 1), for outline and contents."""

    def __init__(self, title: str, level: int, key: str = "") -> None:
        super().__init__(markup(title), STYLES["part" if level else "section"])
        self.title, self.level, self.key = title, level, key


class Whole(KeepTogether):  # type: ignore[misc]
    """Flowables that stay on one page where one page holds them."""

    def __init__(self, parts: Sequence[Any]) -> None:
        super().__init__(list(parts))
        self.parts = tuple(parts)


class Room(CondPageBreak):  # type: ignore[misc]
    """Begins a new page unless there is room for the headings here and what follows them."""

    def __init__(self, least: float) -> None:
        super().__init__(least)
        self.least = least
        self.below: tuple[Any, ...] = ()

    def wrap(self, width: float, height: float) -> tuple[float, float]:
        """No size of its own; asks for a new page when ``height`` is too little."""
        self.height = min(max(self.least, _needed(self.below, width, self.canv)), _MOST)
        taken: tuple[float, float] = super().wrap(width, height)
        return taken


def _needed(below: Sequence[Any], width: float, canvas: Any) -> float:  # noqa: ANN401 - untyped library
    """Height of headings with the beginning of what follows; a sentence brings its table [pt]."""
    *headed, last = below or (None,)
    if not headed or isinstance(headed[-1], Heading):
        return sum(_beginning(f, width, canvas) for f in below)
    *headed, sentence = headed
    above = sum(_beginning(f, width, canvas) for f in headed)
    whole = _whole(sentence, width, canvas)
    if whole > _SENTENCE:
        return above + _beginning(sentence, width, canvas)
    return above + whole + _beginning(last, width, canvas)


def _beginning(flowable: Any, width: float, canvas: Any) -> float:  # noqa: ANN401 - untyped library
    """Height of as much of a flowable as should stand below its heading [pt]."""
    if isinstance(flowable, Whole):
        return sum(_whole(f, width, canvas) for f in flowable.parts)
    before = float(flowable.getSpaceBefore())
    _, high = flowable.wrapOn(canvas, width, 1e6)
    if isinstance(flowable, Heading):
        return before + float(high) + float(flowable.getSpaceAfter())
    if isinstance(flowable, Table) and not stays_whole(flowable):
        rows = flowable._rowHeights[: flowable.repeatRows + _ROWS]  # noqa: SLF001 - not offered otherwise
        return before + float(sum(rows))
    if isinstance(flowable, Paragraph):
        return before + min(float(high), _TEXT)
    return before + float(high)


def _held(flow: Sequence[Any], start: int) -> Iterator[Any]:
    """Headings and what follows them; where that is a sentence before a table, both."""
    for n in range(start, len(flow)):
        if isinstance(flow[n], Room):
            continue
        yield flow[n]
        if not isinstance(flow[n], Heading):
            after = flow[n + 1] if n + 1 < len(flow) else None
            if isinstance(flow[n], Paragraph) and isinstance(after, Table):
                yield after
            return


def stays_whole(table: Table) -> bool:
    """Whether a table that has been measured is small enough not to be split."""
    rows, high = table._rowHeights, float(sum(table._rowHeights))  # noqa: SLF001 - not offered otherwise
    return high <= _SMALL or (len(rows) <= _FEW and high <= _LOW)


def _whole(flowable: Any, width: float, canvas: Any) -> float:  # noqa: ANN401
    """Height of a flowable with the space around it [pt]."""
    _, high = flowable.wrapOn(canvas, width, 1e6)
    return float(flowable.getSpaceBefore()) + float(high) + float(flowable.getSpaceAfter())


def settle(flow: list[Any]) -> list[Any]:
    """The flow with each room knowing what it keeps together: headings and what follows them."""
    for i, room in enumerate(flow):
        if isinstance(room, Room):
            room.below = tuple(_held(flow, i + 1))
    return flow
