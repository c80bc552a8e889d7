"""Tables of the report: quiet rules, header rows that repeat, cells that wrap and split."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING, Any, Literal

from reportlab.lib.colors import Color
from reportlab.platypus import Paragraph, Table

from incline.report.fonts import REGULAR
from incline.report.headings import stays_whole
from incline.report.styles import INK, RULE, STYLES
from incline.report.text import markup

if TYPE_CHECKING:
    from collections.abc import Iterable, Sequence

__all__ = ["SHADE", "Column", "Listed", "Row", "facts", "grid", "steps"]

SHADE = Color(0.93, 0.93, 0.93)
_PAD = 1.6
_PAGE, _ENOUGH = 600.0, 300.0
"""Points of height that every empty page has, and in which a row taller than that may begin."""


@dataclass(frozen=True, slots=True)
class Column:
    """A column: its heading, its share of the width, and how its cells stand."""

    title: str
    share: float
    align: Literal["left", "right"] = "right"


@dataclass(frozen=True, slots=True)
class Row:
    """Cells of a row; ``look`` sets off totals, and headings and remarks that span the table.

    A ``stress`` row is shaded and bold. An ``under`` row belongs to the one above it: its second
    cell spans all columns but the first. A ``beside`` row belongs to the one above it too, and says
    the same in other units; ``other`` are cells that say so within the row itself.
    """

    cells: tuple[str, ...]
    look: Literal["plain", "total", "band", "span", "stress", "under", "beside"] = "plain"
    other: tuple[str, ...] = ()


class Listed(Table):  # type: ignore[misc]
    """A table that still knows its words: ``titles`` of the columns, and ``texts`` of the rows."""

    titles: tuple[str, ...] = ()
    texts: tuple[tuple[str, ...], ...] = ()
    splitInRow: int  # noqa: N815 - the name of the library

    def split(self, width: float, height: float) -> list[Table]:
        """Parts for this page and the next; a row splits only when no page could hold it.

        None for a small table: it goes to the next page whole.
        """
        if stays_whole(self):
            return []
        allowed, self.splitInRow = self.splitInRow, 0
        parts: list[Table] = super().split(width, height)
        if not parts and allowed and height > _ENOUGH:
            first = self._rowHeights[: self.repeatRows + 1]
            self.splitInRow = int(sum(first) > _PAGE)
            parts = super().split(width, height)
        self.splitInRow = allowed
        for part in parts:
            part.splitInRow = allowed
        return parts


def _cell(text: str, align: str, *, bold: bool) -> Paragraph:
    name = f"{'head' if bold else 'cell'}_{align}"
    return Paragraph(markup(text), STYLES[name])


def _row_cells(columns: Sequence[Column], row: Row) -> list[Any]:
    aligns = [c.align for c in columns]
    if row.look in ("band", "span"):
        heading = row.look == "band"
        return [_cell(row.cells[0], "left", bold=heading), *("" for _ in aligns[1:])]
    if row.look == "under":
        return [*(_cell(t, "left", bold=False) for t in row.cells), *("" for _ in aligns[2:])]
    if row.look == "beside":
        return [
            Paragraph(markup(t), STYLES[f"beside_{a}"])
            for t, a in zip(row.cells, aligns, strict=True)
        ]
    bold = row.look in ("total", "stress")
    cells = [_cell(t, a, bold=bold) for t, a in zip(row.cells, aligns, strict=True)]
    if not row.other:
        return cells
    others = zip(cells, row.other, aligns, strict=True)
    return [[c, Paragraph(markup(t), STYLES[f"beside_{a}"])] if t else c for c, t, a in others]


def _looks(rows: Sequence[Row]) -> list[tuple[Any, ...]]:
    commands: list[tuple[Any, ...]] = []
    for i, row in enumerate(rows, start=1):
        if row.look == "band":
            commands += [("SPAN", (0, i), (-1, i)), ("BACKGROUND", (0, i), (-1, i), SHADE)]
            commands.append(("NOSPLIT", (0, i), (-1, min(i + 1, len(rows)))))  # nor a heading
        elif row.look == "span":
            commands.append(("SPAN", (0, i), (-1, i)))
        elif row.look == "stress":
            commands.append(("BACKGROUND", (0, i), (-1, i), SHADE))
        elif row.look == "under":
            commands += _under(i, stressed=i > 1 and rows[i - 2].look == "stress")
        elif row.look == "beside":
            commands += [("TOPPADDING", (0, i), (-1, i), 0), ("NOSPLIT", (0, i - 1), (-1, i))]
        elif row.look == "total":
            commands.append(("LINEABOVE", (0, i), (-1, i), 0.6, INK))
            if i > 1:
                commands.append(("NOSPLIT", (0, i - 1), (-1, i)))  # no total alone on a page
    return commands


def _under(i: int, *, stressed: bool) -> list[tuple[Any, ...]]:
    """Row ``i`` joined to the one above it: no rule between them, the same shade."""
    shade = [("BACKGROUND", (0, i), (-1, i), SHADE)] if stressed else []
    return [
        ("SPAN", (1, i), (-1, i)),
        ("TOPPADDING", (0, i), (-1, i), 0),
        ("NOSPLIT", (0, i - 1), (-1, i)),
        *shade,
    ]


def _rules(rows: Sequence[Row]) -> list[tuple[Any, ...]]:
    """A thin rule below each row but the last, and none above what belongs to the row."""
    return [
        ("LINEBELOW", (0, i), (-1, i), 0.25, RULE)
        for i, below in enumerate(rows[1:], start=1)
        if below.look not in ("under", "beside")
    ]


def _gaps(columns: Sequence[Column]) -> list[tuple[Any, ...]]:
    """Room before a left-hand column that follows a right-hand one."""
    return [
        ("LEFTPADDING", (i, 0), (i, -1), 9)
        for i in range(1, len(columns))
        if (columns[i - 1].align, columns[i].align) == ("right", "left")
    ]


def grid(
    columns: Sequence[Column],
    rows: Iterable[Row | Sequence[str]],
    width: float,
    *,
    whole: bool = False,
) -> Listed:
    """A table of ``width`` points under one header row; a cell taller than a page splits.

    With ``whole`` no row splits, nor leaves its ``under`` row; cells must be short of a page.
    """
    listed = [r if isinstance(r, Row) else Row(tuple(r)) for r in rows]
    head = [_cell(c.title, c.align, bold=True) for c in columns]
    total = sum(c.share for c in columns)
    style: list[tuple[Any, ...]] = [
        ("FONT", (0, 0), (-1, -1), REGULAR, 1, 1),  # empty cells take no height
        ("VALIGN", (0, 0), (-1, -1), "TOP"),
        ("VALIGN", (0, 0), (-1, 0), "BOTTOM"),
        ("LEFTPADDING", (0, 0), (-1, -1), 2.5),
        ("RIGHTPADDING", (0, 0), (-1, -1), 2.5),
        ("TOPPADDING", (0, 0), (-1, -1), _PAD),
        ("BOTTOMPADDING", (0, 0), (-1, -1), _PAD),
        ("LINEABOVE", (0, 0), (-1, 0), 0.8, INK),
        ("LINEBELOW", (0, 0), (-1, 0), 0.5, INK),
        *_rules(listed),
        ("LINEBELOW", (0, -1), (-1, -1), 0.5, INK),
        *_looks(listed),
        *_gaps(columns),
    ]
    table = Listed(
        [head, *(_row_cells(columns, r) for r in listed)],
        colWidths=[width * c.share / total for c in columns],
        repeatRows=1,
        splitInRow=0 if whole else 1,
        style=style,
        hAlign="LEFT",
        spaceBefore=3,
        spaceAfter=7,
    )
    table.titles = tuple(c.title for c in columns)
    table.texts = tuple(t for r in listed for t in (r.cells, r.other) if t)
    return table


def facts(pairs: Sequence[tuple[str, str]], width: float, *, abreast: int = 1) -> Listed:
    """Label and value; ``abreast`` pairs on a line, read down the first column first."""
    high = -(-len(pairs) // abreast)
    rows: list[list[Any]] = [
        [
            _cell(text, "left", bold=bold)
            for n in range(abreast)
            for bold, text in _pair(pairs, i + n * high)
        ]
        for i in range(high)
    ]
    label = 0.26 if abreast == 1 else 0.40
    shares = [label / abreast, (1.0 - label) / abreast] * abreast
    table = Listed(
        rows,
        colWidths=[width * s for s in shares],
        splitInRow=1,
        style=[
            ("FONT", (0, 0), (-1, -1), REGULAR, 1, 1),
            ("VALIGN", (0, 0), (-1, -1), "TOP"),
            ("LEFTPADDING", (0, 0), (-1, -1), 2.5),
            ("TOPPADDING", (0, 0), (-1, -1), 1.3),
            ("BOTTOMPADDING", (0, 0), (-1, -1), 1.3),
            ("LINEBELOW", (0, 0), (-1, -1), 0.25, RULE),
        ],
        hAlign="LEFT",
        spaceBefore=2,
        spaceAfter=7,
    )
    table.titles, table.texts = ("what", "value"), tuple(pairs)
    return table


def _pair(pairs: Sequence[tuple[str, str]], index: int) -> tuple[tuple[bool, str], ...]:
    label, value = pairs[index] if index < len(pairs) else ("", "")
    return (True, label), (False, value)


def steps(lines: Iterable[tuple[str, str, str]], width: float) -> Listed:
    """Lines of a calculation: formula, the values put in, the result."""
    columns = (
        Column("formula", 0.40, "left"),
        Column("values put in", 0.38, "left"),
        Column("result", 0.22, "right"),
    )
    return grid(columns, lines, width)
