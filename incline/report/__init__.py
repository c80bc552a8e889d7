"""The report of a reduction as a PDF: the calculation step by step, ready to be signed."""

from __future__ import annotations

from typing import TYPE_CHECKING

from incline.files import write_whole
from incline.report.document import Options, Sheet, render
from incline.report.export import tables_of
from incline.report.figure_style import drawing_style
from incline.report.fonts import register_fonts
from incline.report.order import story
from incline.report.show import Show

if TYPE_CHECKING:
    import datetime
    from pathlib import Path

    from incline.result import Reduction

__all__ = ["Options", "write_pdf"]


def write_pdf(
    reduction: Reduction,
    path: Path,
    report_date: datetime.date,
    version: str,
    options: Options | None = None,
    tables: Path | None = None,
) -> list[Path]:
    """Write the report to ``path``, and every table of it as CSV into the folder ``tables``.

    What stands there is replaced; whether to is the caller's question. Gives the files written.
    The same arguments give the same bytes. A file appears whole or not at all; raises
    InclineError when the disk refuses it.
    """
    register_fonts()
    sheet = Sheet(reduction, Show.of(reduction), report_date, version, options or Options())
    with drawing_style():
        flow = story(sheet)
        files = {} if tables is None else {tables / n: data for n, data in tables_of(flow).items()}
        files = {path: render(sheet, flow), **files}
    for place, data in files.items():
        write_whole(place, data)
    return list(files)
