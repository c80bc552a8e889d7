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
_SAVE_AS = 'save the file as "CSV UTF-8"'


@dataclass(frozen=True, slots=True)
class RawTable:
    """Cells as text, stripped; ``rows`` carry the row number that a spreadsheet shows."""

    file: str
    header_row: int
    header: tuple[str, ...]
    rows: tuple[tuple[int, tuple[str, ...]], ...]
    decimal_comma: bool


def decode(file: str, data: bytes, collector: Collector) -> str | None:
    """UTF-8 text with or without a byte order mark; None and a defect for anything else."""
    expected = "text in UTF-8"
    if data[:2] in (b"\xff\xfe", b"\xfe\xff"):
        collector.add(Where(file, 1), "file-encoding", "UTF-16 text", expected, _SAVE_AS)
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
    collector.add(Where(file, row), "file-encoding", found, expected, _SAVE_AS)
    return None


def read_table(file: str, data: bytes, collector: Collector) -> RawTable | None:
    """Split a file into header and rows; None when it is unreadable or holds no header.

    Cells are separated by commas with decimal points, or by semicolons with decimal commas; the
    header line decides. Blank lines and lines that start with ``#`` are passed over.
    """
    text = decode(file, data, collector)
    if text is None:
        return None
    header: tuple[int, tuple[str, ...]] | None = None
    mark = ","
    rows: list[tuple[int, tuple[str, ...]]] = []
    for number, line in enumerate(_LINE_END.split(text), start=1):
        where = Where(file, number)
        if _is_comment(line, where if header else None, collector):
            continue
        if header is None:
            mark = ";" if ";" in line else ","
            if mark not in line and "\t" in line:
                expected = "commas or semicolons between columns"
                collector.add(where, "file-unreadable", "tabs between columns", expected)
                return None
        cells = _split(line, mark, where, collector)
        if not any(cells):
            continue
        if header is None:
            header = (number, cells)
        else:
            rows.append((number, cells))
    if header is None:
        return None
    return RawTable(file, header[0], header[1], tuple(rows), mark == ";")


def _is_comment(line: str, where: Where | None, collector: Collector) -> bool:
    """Whether to pass over a line; a row below the header such as ``#3,oil,...`` is a defect.

    A spreadsheet may put a comment with a comma in it between quotation marks.
    """
    start = line.lstrip().removeprefix('"').lstrip()
    if start and not start.startswith("#"):
        return False
    if where and re.match(r'#\w[^,;"]*"?[,;]\s*"?[^,;"\s]', start):
        expected = "a row that does not start with #, or a comment that starts with # and a space"
        collector.add(where, "value-wrong", quoted(line.strip()), expected)
    return True


def _split(line: str, mark: str, where: Where, collector: Collector) -> tuple[str, ...]:
    """Cells of one line. A quotation mark counts only as the first thing in a cell."""
    cells: list[str] = []
    place = 0
    while True:
        start = place
        while start < len(line) and line[start] in " \t":
            start += 1
        if line[start : start + 1] == '"':
            cell, place = _quoted_cell(line, mark, start, where, collector)
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
    return tuple(cells)


def _quoted_cell(
    line: str, mark: str, start: int, where: Where, collector: Collector
) -> tuple[str, int]:
    """A cell between quotation marks (doubled inside), and where the mark after it stands."""
    match = re.compile(r'"((?:[^"]|"")*+)"[ \t]*').match(line, start)
    if match and line[match.end() : match.end() + 1] in ("", mark):
        return match[1].replace('""', '"'), match.end()
    collector.add(
        where,
        "file-quoting",
        quoted(line[start:]),
        "a quotation mark at the start of a cell and one at its end, on the same line",
        "a mark for inches inside such a cell is written twice",
    )
    return "", len(line)
