"""The calculation on paper: numbered steps in aligned columns, and its tables."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any
from xml.sax.saxutils import unescape

from reportlab.platypus import Paragraph

from incline.report.arithmetic import Value
from incline.report.document import Sheet, note, paragraph, part
from incline.report.fonts import REGULAR
from incline.report.steps import Board, Calculation, Cell, Lay, Step, Travel, calculation_of
from incline.report.styles import INK, RULE, STYLES
from incline.report.tables import SHADE, Listed
from incline.report.text import markup

if TYPE_CHECKING:
    from collections.abc import Iterator, Sequence

    from incline.report.arithmetic import Digits
    from incline.report.steps import Chapter

__all__ = ["board_table", "calculation"]

_SHARES = (0.05, 0.32, 0.41, 0.22)
_NBSP = "\N{NO-BREAK SPACE}"
_DIGIT = 2 * _NBSP
"""As wide as a digit of the typeface."""
_SUB = '<sub rise="1.3" size="5.2">'
"""A subscript that stays clear of the line below."""
_INTRO = (
    "Every result is worked out from the numbers printed beside it, and a number is printed with "
    "the same digits wherever it stands: as many as the results need that follow from it. "
    "A value without an equals sign is carried from the place named."
)
_SOUND = (
    "Each result of this section and of the ledger was worked out again from the numbers as "
    "printed and agrees to its last digit."
)
_UNSOUND = (
    "The steps named here do NOT come out of the numbers printed with them; do not rely on this "
    "report before the cause is found:"
)


def calculation(sheet: Sheet) -> list[Any]:
    """The calculation chapter by chapter; ends with the check of its own arithmetic."""
    found = calculation_of(sheet)
    steps = iter(found.steps())
    flow: list[Any] = [paragraph(_INTRO), *_constants(sheet)]
    for chapter in found.chapters:
        flow += _chapter(sheet, chapter, steps, found.digits)
    return [*flow, paragraph(_verdict(found))]


def _constants(sheet: Sheet) -> list[Any]:
    if sheet.show.system.name == "metric":
        return [note("1000 mm make a metre.")]
    return [note("12 inches make a foot, 2240 lb a long ton (LT).")]


def _verdict(found: Calculation) -> str:
    if found.sound:
        return _SOUND
    wrong = [str(s.number) for s in found.steps() if not s.follows]
    boards = [b for c in found.chapters for b in c.parts if isinstance(b, Board)]
    tables = [
        b.title or "the ledger"
        for b in (*boards, found.ledger)
        if not all(r.follows(found.digits) for r in b.relations)
    ]
    return f"{_UNSOUND} {', '.join([*wrong, *tables])}."


def _chapter(sheet: Sheet, chapter: Chapter, steps: Iterator[Step], digits: Digits) -> list[Any]:
    """Sentences, tables, and runs of steps in one table each."""
    flow: list[Any] = list(part(chapter.title, 70.0))
    run: list[Step] = []
    for piece in chapter.parts:
        if isinstance(piece, Lay):
            run.append(next(steps))
            continue
        flow += _run(run, sheet.width)
        run = []
        if isinstance(piece, Board):
            flow += board_table(piece, digits, sheet.width)
        else:
            flow.append(_set(piece, "body"))
    return [*flow, *_run(run, sheet.width)]


def _run(steps: Sequence[Step], width: float) -> list[Any]:
    """Numbered steps: name over formula, the numbers put in, the result."""
    if not steps:
        return []
    rows = [_step_cells(step) for step in steps]
    table = Listed(
        rows,
        colWidths=[width * s for s in _SHARES],
        style=[
            ("FONT", (0, 0), (-1, -1), REGULAR, 1, 1),
            ("VALIGN", (0, 0), (-1, -1), "BOTTOM"),
            ("VALIGN", (0, 0), (0, -1), "TOP"),
            ("LEFTPADDING", (0, 0), (-1, -1), 2.5),
            ("RIGHTPADDING", (0, 0), (-1, -1), 2.5),
            ("TOPPADDING", (0, 0), (-1, -1), 1.8),
            ("BOTTOMPADDING", (0, 0), (-1, -1), 2.2),
            ("LINEABOVE", (0, 0), (-1, 0), 0.5, INK),
            ("LINEBELOW", (0, 0), (-1, -2), 0.25, RULE),
            ("LINEBELOW", (0, -1), (-1, -1), 0.5, INK),
        ],
        hAlign="LEFT",
        spaceBefore=3,
        spaceAfter=7,
    )
    table.titles = ("step", "name", "formula", "numbers put in", "result")
    table.texts = tuple(
        (str(s.number), s.name, _words(s.formula), _words(s.put_in), s.result) for s in steps
    )
    return [table]


def _step_cells(step: Step) -> list[Any]:
    name = f"{markup(step.name)}<br/>{step.formula}"
    put_in = step.put_in if step.carried else f"=\N{NO-BREAK SPACE}{markup(step.put_in)}"
    result = f"=\N{NO-BREAK SPACE}{markup(step.result)}"
    return [
        _set(f"({step.number})", "cell_left"),
        _set(name, "cell_left"),
        _set(put_in, "cell_left"),
        _set(result, "cell_right"),
    ]


def _words(text: str) -> str:
    """Markup without its tags; a subscript follows an underscore, as in a formula typed."""
    plain = text.replace("<sub>", "_").replace("</sub>", "").replace("<br/>", " ")
    return unescape(plain)


def _set(text: str, style: str) -> Paragraph:
    """A paragraph of markup with its subscripts."""
    return Paragraph(text.replace("<sub>", _SUB), STYLES[style])


def board_table(
    board: Board, digits: Digits, width: float, other: tuple[Board, Digits] | None = None
) -> list[Any]:
    """A table of values; a title above it where it has one.

    ``other`` is the same board in the other units, with its digits: it stands below each number.
    """
    deepest = [_deepest(board, i, digits) for i in range(len(board.heads))]
    body, looks = [], list(_looks(board))
    texts: list[tuple[str, ...]] = []
    for n, row in enumerate(board.rows):
        cells = [_cell(c, digits, d) for c, d in zip(row, deepest, strict=False)]
        texts.append(tuple(_words(c) for c in cells))
        if len(row) == 1:
            body.append([_set(cells[0], "head_left"), *[""] * (len(board.heads) - 1)])
            continue
        beside = None if other is None else _beside(*other, n)
        if beside:
            texts.append(tuple(_words(c) for c in beside))
        body.append(_row(board, cells, beside, bold=n in board.totals))
    heads = [_set(h.markup, "head_left" if h.left else "head_right") for h in board.heads]
    total = sum(h.share for h in board.heads)
    table = Listed(
        [heads, *body],
        colWidths=[width * h.share / total for h in board.heads],
        repeatRows=1,
        splitInRow=1,
        style=[*_frame(len(body)), *looks],
        hAlign="LEFT",
        spaceBefore=2,
        spaceAfter=7,
    )
    table.titles, table.texts = tuple(_words(h.markup) for h in board.heads), tuple(texts)
    return [*([_set(board.title, "caption")] if board.title else []), table]


def _row(board: Board, cells: list[str], beside: list[str] | None, *, bold: bool) -> list[Any]:
    """The cells of a row as paragraphs, the other units below each."""
    row: list[Any] = []
    for i, (text, head) in enumerate(zip(cells, board.heads, strict=True)):
        side = "left" if head.left else "right"
        found = _set(text, f"{'head' if bold else 'cell'}_{side}")
        more = beside[i] if beside else ""
        row.append([found, _set(more, f"beside_{side}")] if more else found)
    return row


def _beside(board: Board, digits: Digits, n: int) -> list[str]:
    """The numbers of a row in the other units; words are not said twice."""
    return ["" if isinstance(c, str) else _cell(c, digits, 0) for c in board.rows[n]]


def _looks(board: Board) -> Iterator[tuple[Any, ...]]:
    """Headings within the table, and totals set off."""
    for i, row in enumerate(board.rows, start=1):
        if len(row) == 1:
            yield from (("SPAN", (0, i), (-1, i)), ("BACKGROUND", (0, i), (-1, i), SHADE))
            yield "NOSPLIT", (0, i), (-1, min(i + 1, len(board.rows)))
        elif i - 1 in board.totals:
            yield "LINEABOVE", (0, i), (-1, i), 0.6, INK
            if i > 1:
                yield "NOSPLIT", (0, i - 1), (-1, i)


def _deepest(board: Board, column: int, digits: Digits) -> int:
    """Most decimals of the numbers in a column."""
    cells = [row[column] for row in board.rows if column < len(row)]
    return max((digits[c.place] for c in cells if isinstance(c, Value)), default=0)


def _frame(rows: int) -> list[tuple[Any, ...]]:
    return [
        ("FONT", (0, 0), (-1, -1), REGULAR, 1, 1),
        ("VALIGN", (0, 0), (-1, -1), "TOP"),
        ("VALIGN", (0, 0), (-1, 0), "BOTTOM"),
        ("LEFTPADDING", (0, 0), (-1, -1), 2.5),
        ("RIGHTPADDING", (0, 0), (-1, -1), 2.5),
        ("TOPPADDING", (0, 0), (-1, -1), 1.3),
        ("BOTTOMPADDING", (0, 0), (-1, -1), 1.3),
        ("LINEABOVE", (0, 0), (-1, 0), 0.8, INK),
        ("LINEBELOW", (0, 0), (-1, 0), 0.5, INK),
        ("LINEBELOW", (0, 1), (-1, max(1, rows - 1)), 0.25, RULE),
        ("LINEBELOW", (0, -1), (-1, -1), 0.5, INK),
    ]


def _cell(cell: Cell, digits: Digits, deepest: int) -> str:
    """A cell as markup; numbers with fewer decimals than ``deepest`` keep their point in line."""
    if isinstance(cell, str):
        return cell
    if isinstance(cell, Travel):
        start = cell.start.bare(digits)
        return f"({start})" if cell.end is None else f"{start}<br/>→{_NBSP}{cell.end.bare(digits)}"
    if not isinstance(cell, Value):
        return cell.text(digits)
    room = max(0, deepest - digits[cell.place])
    return cell.bare(digits) + room * _DIGIT
