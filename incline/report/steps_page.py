"""The calculation on paper: numbered steps in aligned columns, and its tables."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from reportlab.platypus import Paragraph, Table

from incline.report.arithmetic import Value
from incline.report.document import Sheet, note, paragraph, part
from incline.report.fonts import REGULAR
from incline.report.steps import Board, Calculation, Cell, Lay, Step, Travel, calculation_of
from incline.report.styles import INK, RULE, STYLES
from incline.report.tables import SHADE
from incline.report.text import markup

if TYPE_CHECKING:
    from collections.abc import Iterator, Sequence

    from incline.report.arithmetic import Digits
    from incline.report.steps import Chapter

__all__ = ["board_table", "calculation"]

_SHARES = (0.05, 0.32, 0.41, 0.22)
_DIGIT = "\N{NO-BREAK SPACE}\N{NO-BREAK SPACE}"
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
    return [
        Table(
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
    ]


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


def _set(text: str, style: str) -> Paragraph:
    """A paragraph of markup with its subscripts."""
    return Paragraph(text.replace("<sub>", _SUB), STYLES[style])


def board_table(board: Board, digits: Digits, width: float) -> list[Any]:
    """A table of values; a title above it where it has one."""
    looks: list[tuple[Any, ...]] = []
    body: list[list[Any]] = []
    deepest = [_deepest(board, i, digits) for i in range(len(board.heads))]
    for i, row in enumerate(board.rows, start=1):
        bold = i - 1 in board.totals
        if len(row) == 1:
            cells: list[Any] = [_set(str(row[0]), "head_left")]
            body.append([*cells, *[""] * (len(board.heads) - 1)])
            looks += [("SPAN", (0, i), (-1, i)), ("BACKGROUND", (0, i), (-1, i), SHADE)]
            continue
        if bold:
            looks.append(("LINEABOVE", (0, i), (-1, i), 0.6, INK))
            if i > 1:
                looks.append(("NOSPLIT", (0, i - 1), (-1, i)))
        kind = "head" if bold else "cell"
        body.append(
            [
                _set(_cell(c, digits, d), f"{kind}_{'left' if h.left else 'right'}")
                for c, h, d in zip(row, board.heads, deepest, strict=True)
            ]
        )
    heads = [_set(h.markup, "head_left" if h.left else "head_right") for h in board.heads]
    total = sum(h.share for h in board.heads)
    title = [_set(board.title, "caption")] if board.title else []
    table = Table(
        [heads, *body],
        colWidths=[width * h.share / total for h in board.heads],
        repeatRows=1,
        splitInRow=1,
        style=[*_frame(len(body)), *looks],
        hAlign="LEFT",
        spaceBefore=2,
        spaceAfter=7,
    )
    return [*title, table]


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
        return f"({start})" if cell.end is None else f"{start}<br/>→ {cell.end.bare(digits)}"
    if not isinstance(cell, Value):
        return cell.text(digits)
    room = max(0, deepest - digits[cell.place])
    return cell.bare(digits) + room * _DIGIT
