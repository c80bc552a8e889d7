"""CSV bytes to a header and rows: encoding, dialect, comments, quotes. Meaning comes later."""

from __future__ import annotations

import re
from dataclasses import dataclass
from typing import TYPE_CHECKING

from incline.errors import Where
from incline.reading.collect import quoted

if TYPE_CHECKING:
    from incline.reading.collect import Collector

__all__ = ["RawTable", "decode", "read_table"]

_LINE_END = re.compile(r"\r\n|\r|\n")
_BYTE_LINE_END = re.compile(rb"\r\n|\r|\n")
_QUOTED = re.compile(r'"((?:[^"]|"")*+)"[ \t]*')
_OTHER_MARKS = (("\t", "tabs"), ("|", "vertical bars"))


@dataclass(frozen=True, slots=True)
class RawTable:
    """Cells as text, stripped; ``rows`` carry the row number that a spreadsheet shows.

    ``broken`` are the rows whose cells end early, at a quotation mark without its fellow.
    """

    file: str
    header_row: int
    header: tuple[str, ...]
    rows: tuple[tuple[int, tuple[str, ...]], ...]
    decimal_comma: bool
    broken: frozenset[int]


def decode(
    file: str, data: bytes, collector: Collector, remedy: str = 'save the file as "CSV UTF-8"'
) -> str | None:
    """UTF-8 text with or without a byte order mark; None and a defect for anything else."""
    expected = "text in UTF-8"
    if data[:2] in (b"\xff\xfe", b"\xfe\xff"):
        collector.add(Where(file, 1), "file-encoding", "UTF-16 text", expected, remedy)
        return None
    data = data.removeprefix(b"\xef\xbb\xbf")
    place = data.find(b"\0")
    try:
        text = data.decode("utf-8")
    except UnicodeDecodeError as error:
        text, place = "", error.start
    if place < 0:
        return text
    row = 1 + len(_BYTE_LINE_END.findall(data[:place]))
    found = f"the byte 0x{data[place]:02X}"
    collector.add(Where(file, row), "file-encoding", found, expected, remedy)
    return None


def read_table(file: str, data: bytes, collector: Collector) -> RawTable | None:
    """Split a file into header and rows; None when it is unreadable or holds no header.

    Cells are separated by commas with decimal points, or by semicolons with decimal commas; the
    header line decides. Blank lines and lines that start with ``#`` are passed over.
    """
    text = decode(file, data, collector)
    if text is None:
        return None
    lines = enumerate(_without_strays(file, _LINE_END.split(text), collector), start=1)
    header_row, line = next(((n, s) for n, s in lines if not _is_blank(s)), (0, ""))
    where = Where(file, header_row)
    mark = ";" if ";" in line else ","
    header, whole = _split(line, mark, where, collector)
    other = next((name for odd, name in _OTHER_MARKS if odd in line), "")
    if mark not in line and other:
        expected = "commas or semicolons between columns"
        collector.add(where, "file-unreadable", f"{other} between columns", expected)
        return None
    if not header_row or not whole:
        return None
    rows: list[tuple[int, tuple[str, ...]]] = []
    broken: set[int] = set()
    for number, row in lines:
        where = Where(file, number)
        if _is_comment(row, where, collector):
            continue
        cells, whole = _split(row, mark, where, collector)
        if not whole:
            broken.add(number)
        if any(cells) or not whole:
            rows.append((number, cells))
    return RawTable(file, header_row, header, tuple(rows), mark == ";", frozenset(broken))


def _without_strays(file: str, lines: list[str], collector: Collector) -> list[str]:
    """The lines of a table with commas, freed of semicolons that end the header or most rows."""
    filled = [(n, s.rstrip(" \t")) for n, s in enumerate(lines, start=1) if not _is_blank(s)]
    header = filled[0][1].rstrip(";, \t") if filled else ""
    ending = [n for n, s in filled if s.endswith(";")]
    if "," not in header or ";" in header or not ending:
        return lines
    if ending[0] != filled[0][0] and 2 * len(ending) <= len(filled) - 1:
        return lines
    found = "stray semicolons at the ends of the lines"
    expected = "nothing after the last cell, where commas stand between columns"
    collector.add(Where(file, ending[0]), "file-separator", found, expected)
    return [s if _is_blank(s) else s.rstrip("; \t") for s in lines]


def _is_blank(line: str) -> bool:
    """Whether a line is a comment or holds nothing but separators.

    A spreadsheet may put a comment with a comma in it between quotation marks.
    """
    start = line.strip(" \t,;").removeprefix('"').lstrip()
    return not start or start.startswith("#")


def _is_comment(line: str, where: Where, collector: Collector) -> bool:
    """Whether to pass over a line below the header; a row such as ``#3,oil,...`` is a defect.

    Prose has a space after its commas, rows have none.
    """
    start = line.strip().removeprefix('"').lstrip()
    if start and not start.startswith("#"):
        return False
    if re.match(r'#\w[^,;]*[,;](?! ).*[^,;"\s]', start):
        expected = "a row that does not start with #, or a comment that starts with # and a space"
        collector.add(where, "value-wrong", quoted(line.strip()), expected)
    return True


def _split(
    line: str, mark: str, where: Where, collector: Collector
) -> tuple[tuple[str, ...], bool]:
    """Cells of one line, and whether it could be read to its end.

    A quotation mark counts only as the first thing in a cell.
    """
    cells: list[str] = []
    place = 0
    whole = True
    while True:
        start = place
        while start < len(line) and line[start] in " \t":
            start += 1
        if line[start : start + 1] == '"':
            match = _QUOTED.match(line, start)
            whole = bool(match and line[match.end() : match.end() + 1] in ("", mark))
            if not match or not whole:
                _stray_mark(line[start:], where, collector)
                break
            cell, place = match[1].replace('""', '"'), match.end()
        else:
            end = line.find(mark, place)
            place = len(line) if end < 0 else end
            cell = line[start:place]
        cells.append(cell.strip())
        if place >= len(line):
            break
        place += 1
    while cells and not cells[-1]:
        cells.pop()
    return tuple(cells), whole


def _stray_mark(rest: str, where: Where, collector: Collector) -> None:
    collector.add(
        where,
        "file-quoting",
        quoted(rest),
        "a quotation mark at the start of a cell and one at its end, on the same line",
        "a mark for inches inside such a cell is written twice",
    )
