"""The rows of the hydrostatic table around the waterline, for a reader who recomputes by hand."""

from __future__ import annotations

from bisect import bisect_right
from typing import TYPE_CHECKING, Any

from incline.report.document import Sheet, part
from incline.report.show import MISSING, Kind
from incline.report.tables import Column, Row, grid

if TYPE_CHECKING:
    from collections.abc import Sequence

__all__ = ["table_rows"]

_COLUMNS: tuple[tuple[str, str, Kind, int], ...] = (
    ("volume", "volume", "volume", 2),
    ("lcb", "LCB", "length", 3),
    ("kb", "KB", "length", 3),
    ("bmt", "BM", "length", 3),
    ("lcf", "LCF", "length", 3),
    ("bml", "longitudinal BM", "length", 3),
)
"""Field of the record, heading, kind, decimals."""


def table_rows(sheet: Sheet) -> list[Any]:
    """Two rows on each side of the entry draft, for the trims on each side of the actual trim."""
    table, show = sheet.reduction.trial.table, sheet.show
    state = sheet.reduction.outcome.as_inclined
    if table is None or state.entry is None:
        return []
    known = [c for c in _COLUMNS if getattr(table, c[0]) is not None]
    columns = (
        Column(f"draft [{show.unit('length')}]", 1.0),
        *(Column(f"{title} [{show.unit(kind)}]", 1.0) for _, title, kind, _ in known),
    )
    rows: list[Row] = []
    for i in _around(table.trims, state.trim, 1):
        if len(table.trims) > 1:
            trim = f"trim {show.full(table.trims[i], 'length')}"
            rows.append(Row((trim, *[""] * len(known)), "band"))
        for j in _around(table.drafts, state.entry.draft, 2):
            cells = [show.number(table.drafts[j], "length")]
            for name, _, kind, decimals in known:
                column = getattr(table, name)
                cells.append(
                    MISSING if column is None else show.number(column[i][j], kind, decimals)
                )
            rows.append(Row(tuple(cells)))
    return [*part("Rows of the table around the waterline"), grid(columns, rows, sheet.width)]


def _around(values: Sequence[float], at: float, each_side: int) -> range:
    """Indices of the values next to ``at``, at most ``each_side`` on either side."""
    above = bisect_right(values, at)
    return range(max(0, above - each_side), min(len(values), above + each_side))
