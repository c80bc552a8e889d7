"""Paper on which the readings of a device are plotted as they come, beside what is expected."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from incline.sheets.forms import ROW, Column, form, text
from incline.sheets.graph import GraphPaper, scale_of
from incline.sheets.readings import expected_of, reduced_of, shown_by

if TYPE_CHECKING:
    from incline.record import Device
    from incline.sheets.book import Book
    from incline.sheets.readings import Shown
    from incline.sheets.sequence import ShiftRow

__all__ = ["running_plot"]

_PLOT_ROW = 22.7
"""Height of a row beside the plot [pt]: 8 mm."""
_PLOT_LEAST, _PLOT_MOST = 300.0, 400.0
_AROUND_PLOT = 245.0
"""What else stands on an upright page with a plot: margins, heading, boxes, notes [pt]."""


def running_plot(book: Book, device: Device) -> list[Any]:
    """Graph paper scaled to what is expected, and a table of the points to plot."""
    shown = shown_by(book, device)
    expected = [(r, expected_of(book, device, shown, r)) for r in book.rows]
    high = book.page[1] - _AROUND_PLOT - _PLOT_ROW * (len(book.rows) + 1)
    paper = (book.width, min(_PLOT_MOST, max(_PLOT_LEAST, high)))
    return [
        text(_explained(book)),
        _paper(book, shown, device, paper),
        _points(book, device, shown, expected),
    ]


def _explained(book: Book) -> str:
    said = (
        "Plot each reduced reading, less that of the first shift, against its moment before the"
        " next weight moves. A point off the line of the others is read again."
    )
    known, show = book.prediction, book.show
    if known is None or not any(r.moment for r in book.rows):
        return said
    return (
        f"{said} Dashed: what is expected with GM {show.full(known.gm, 'length')}"
        f" ({known.gm_from}) and displacement {show.full(known.displacement, 'mass', 1)}"
        f" ({known.displacement_from}): a guide, not a limit."
    )


def _paper(book: Book, shown: Shown, device: Device, size: tuple[float, float]) -> GraphPaper:
    moments, across = _across(book)
    heights = {
        r.number: e for r in book.rows if (e := expected_of(book, device, shown, r)) is not None
    }
    up = f"deflection from zero, to starboard [{shown.unit}]"
    if not any(heights.values()):
        heights = {}
        up = f"deflection from zero, to starboard: 1 division = ________ {shown.unit}"
    scales = (scale_of(list(moments.values()), 10, 1.15), scale_of(list(heights.values()), 10, 1.3))
    points: dict[tuple[float, float], list[int]] = {}
    for number, height in heights.items():
        points.setdefault((round(moments[number], 9), round(height, 9)), []).append(number)
    marks = [(*at, ", ".join(map(str, numbers))) for at, numbers in points.items()]
    return GraphPaper(size, scales, (across, up), _line(points) if points else (), marks)


def _across(book: Book) -> tuple[dict[int, float], str]:
    """Moments by shift as plotted, and what stands below the paper; none where all are zero."""
    unit, size = book.show.unit("moment"), book.show.scale("moment")
    moments = {r.number: r.moment / size for r in book.rows if r.moment is not None}
    if any(moments.values()):
        return moments, f"moment to starboard [{unit}]"
    steps = {r.number: float(r.steps) for r in book.rows if r.steps is not None}
    if any(steps.values()):
        return steps, f"moment to starboard: 1 move of a weight = ____________ {unit}"
    return {}, f"moment to starboard: 1 division = ____________ {unit}"


def _line(points: dict[tuple[float, float], list[int]]) -> list[tuple[float, float]]:
    """The points in order, carried a little beyond the outermost on each side."""
    ordered = sorted(points)
    (a, b), (y, z) = ordered[0], ordered[-1]
    return [(1.08 * a, 1.08 * b), *ordered, (1.08 * y, 1.08 * z)]


def _points(
    book: Book, device: Device, shown: Shown, expected: list[tuple[ShiftRow, float | None]]
) -> Any:  # noqa: ANN401 - untyped library
    unit, plain = book.show.unit("moment"), book.show.plain
    stepped = any(r.steps is not None for r in book.rows)
    columns = (
        Column("shift", 0.10),
        Column("moment, in moves" if stepped else f"moment [{unit}]", 0.20, "right"),
        Column(f"expected [{shown.unit}]", 0.20, "right"),
        Column(f"reduced reading [{shown.unit}]", 0.22, "right"),
        Column("less the first", 0.18, "right"),
        Column("plotted", 0.10),
    )
    zero = reduced_of(book, device, book.rows[0]) if book.rows else None
    rows = []
    for row, value in expected:
        read = reduced_of(book, device, row)
        less = None if read is None or zero is None else read - zero
        rows.append((
            str(row.number),
            book.moment(row),
            "" if value is None else plain(value, shown.decimals),
            "" if read is None else plain(read / shown.size, shown.decimals),
            "" if less is None else plain(less / shown.size, shown.decimals),
            "",
        ))  # fmt: skip
    return form(columns, rows, book.width, high=min(ROW, _PLOT_ROW))
