"""Headings, and the room that keeps them with what follows."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from reportlab.platypus import CondPageBreak, KeepTogether, Paragraph, Table

from incline.report.styles import STYLES
from incline.report.text import markup

if TYPE_CHECKING:
    from collections.abc import Sequence

__all__ = ["Heading", "Room", "Whole", "settle"]

_ROWS, _TEXT = 2, 34.0
"""What must follow a heading on its page: rows under a table's header, or points of text."""
_SMALL = 120.0
"""Height of a table that is kept whole under its heading [pt]."""
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
        need = sum(_beginning(f, width, self.canv) for f in self.below)
        self.height = min(max(self.least, need), _MOST)
        taken: tuple[float, float] = super().wrap(width, height)
        return taken


def _beginning(flowable: Any, width: float, canvas: Any) -> float:  # noqa: ANN401 - untyped library
    """Height of as much of a flowable as should stand below its heading [pt]."""
    if isinstance(flowable, Whole):
        return sum(_whole(f, width, canvas) for f in flowable.parts)
    before = float(flowable.getSpaceBefore())
    _, high = flowable.wrapOn(canvas, width, 1e6)
    if isinstance(flowable, Heading):
        return before + float(high) + float(flowable.getSpaceAfter())
    if isinstance(flowable, Table) and high > _SMALL:
        rows = flowable._rowHeights[: flowable.repeatRows + _ROWS]  # noqa: SLF001 - not offered otherwise
        return before + float(sum(rows))
    if isinstance(flowable, Paragraph):
        return before + min(float(high), _TEXT)
    return before + float(high)


def _whole(flowable: Any, width: float, canvas: Any) -> float:  # noqa: ANN401
    """Height of a flowable with the space around it [pt]."""
    _, high = flowable.wrapOn(canvas, width, 1e6)
    return float(flowable.getSpaceBefore()) + float(high) + float(flowable.getSpaceAfter())


def settle(flow: list[Any]) -> list[Any]:
    """The flow with each room knowing what it keeps together: headings and what follows them."""
    for i, room in enumerate(flow):
        if isinstance(room, Room):
            below: list[Any] = []
            for flowable in flow[i + 1 :]:
                if isinstance(flowable, Room):
                    continue
                below.append(flowable)
                if not isinstance(flowable, Heading):
                    break
            room.below = tuple(below)
    return flow
