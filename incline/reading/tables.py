"""The files of a trial's folder: their bytes, and its tables with their headers matched."""

from __future__ import annotations

import difflib
import hashlib
from typing import TYPE_CHECKING

from incline.errors import Defect, FieldDataError, Where
from incline.reading.collect import quoted
from incline.reading.csvtable import read_table
from incline.reading.headings import open_sheet
from incline.reading.hull_choices import HullFiles
from incline.reading.hydrostatics import TABLE_COLUMNS
from incline.reading.ledger import CHANGE_COLUMNS, ITEM_COLUMNS
from incline.reading.readings import reading_columns
from incline.reading.rolls import ROLL_COLUMNS
from incline.reading.stations import OFFSET_COLUMNS
from incline.reading.tanks import TANK_COLUMNS
from incline.reading.tomlfile import FILE
from incline.reading.waterline import DRAFT_COLUMNS, SAMPLE_COLUMNS
from incline.reading.weights import SHIFT_COLUMNS, WEIGHT_COLUMNS

if TYPE_CHECKING:
    from collections.abc import Iterable, Mapping
    from pathlib import Path

    from incline.reading.cells import Column, Sheet
    from incline.reading.collect import Collector

__all__ = [
    "OFFSETS", "TABLE", "TABLES", "Tables", "digest_of", "open_table", "read_files", "strangers",
    "tell_empty", "tell_missing",
]  # fmt: skip

TABLE, OFFSETS = "hydrostatics.csv", "offsets.csv"
"""The two descriptions of the hull; a trial has one of them at least."""
_COLUMNS: dict[str, tuple[Column, ...]] = {
    "weights.csv": WEIGHT_COLUMNS,
    "shifts.csv": SHIFT_COLUMNS,
    "readings.csv": (),
    "drafts.csv": DRAFT_COLUMNS,
    "density.csv": SAMPLE_COLUMNS,
    "tanks.csv": TANK_COLUMNS,
    "ledger.csv": ITEM_COLUMNS,
    "changes.csv": CHANGE_COLUMNS,
    TABLE: TABLE_COLUMNS,
    OFFSETS: OFFSET_COLUMNS,
    "rolls.csv": ROLL_COLUMNS,
}
TABLES = tuple(_COLUMNS)
_ROWS = {
    "weights.csv": "test weights",
    "shifts.csv": "shifts",
    "readings.csv": "readings",
    "drafts.csv": "draft readings",
    "density.csv": "water samples",
    TABLE: "hydrostatics",
    OFFSETS: "offsets",
}
"""What stands in the rows of the tables that may have to have some."""
_REQUIRED = frozenset({FILE, "shifts.csv", "readings.csv", "drafts.csv", "density.csv"})
_EXPECTED = "a file that a trial must have"


def read_files(path: Path, names: Iterable[str], collector: Collector) -> dict[str, bytes]:
    """The bytes of the files that are there; a required one that is not is a defect.

    Raises FieldDataError when there is no such folder.
    """
    if not path.is_dir():
        found = "a file" if path.exists() else "no such folder"
        where = Where(str(path))
        raise FieldDataError([Defect(where, "file-missing", found, "the folder of a trial")])
    files: dict[str, bytes] = {}
    for name in names:
        try:
            files[name] = (path / name).read_bytes()
        except FileNotFoundError:
            if name in _REQUIRED:
                tell_missing(name, collector)
        except OSError as error:
            found = error.strerror or "an error"
            collector.add(Where(name), "file-unreadable", found, "a file that can be read")
    return files


def strangers(path: Path, files: Mapping[str, bytes], collector: Collector) -> list[str]:
    """Tables that are none of a trial's: a defect when a name looks like a slip, else a remark."""
    remarks: list[str] = []
    try:
        names = sorted(p.name for p in path.iterdir() if p.suffix.lower() == ".csv")
    except OSError:
        return remarks
    for name in names:
        if name in _COLUMNS or (
            name.lower() in files and (path / name).samefile(path / name.lower())
        ):
            continue
        absent = sorted(_COLUMNS.keys() - _REQUIRED - files.keys())
        close = difflib.get_close_matches(name.lower(), absent, n=1, cutoff=0.8)
        if close:
            hint = "rename the file, or move it out of the folder"
            found = f"no such file, but a file {quoted(name)}"
            collector.add(Where(close[0]), "file-missing", found, "the name as given here", hint)
        else:
            remarks.append(f"The file {quoted(name)} is none of a trial's tables and was not read.")
    return remarks


def digest_of(files: Mapping[str, bytes]) -> str:
    """Sha256 over the files in the order of their names: name, length and bytes of each."""
    digest = hashlib.sha256()
    for name in sorted(files):
        digest.update(f"{name}\0{len(files[name])}\0".encode())
        digest.update(files[name])
    return digest.hexdigest()


def open_table(name: str, data: bytes, collector: Collector) -> tuple[Sheet | None, bool]:
    """A table with its header matched, and whether it is sound but without rows.

    The sheet is None when the table is unreadable or without a header.
    """
    before = len(collector.defects)
    raw = read_table(name, data, collector)
    unhurt = len(collector.defects) == before
    sheet = None
    if raw is not None:
        sheet = open_sheet(raw, _COLUMNS[name] or reading_columns(raw), collector)
    return sheet, unhurt and (raw is None or (sheet is not None and not sheet.rows))


def tell_missing(name: str, collector: Collector, expected: str = _EXPECTED) -> None:
    """Collect that a file is needed but not there."""
    collector.add(Where(name), "file-missing", "no such file", expected)


def tell_empty(name: str, sheet: Sheet | None, collector: Collector) -> None:
    """Collect that a table has no rows, or not even a header, and must have some."""
    below = f"a row of {_ROWS[name]} below the header"
    found, expected = (
        ("a header and no rows", below) if sheet else ("no rows", f"a header and {below}")
    )
    collector.add(Where(name), "table-empty", found, expected)


class Tables:
    """The tables of a folder as sheets; None when absent, unreadable or without a header.

    ``hull`` says which descriptions of the hull there are; a header without rows is none.
    """

    def __init__(self, files: Mapping[str, bytes], collector: Collector) -> None:
        self.files = files
        self.collector = collector
        self.sheets: dict[str, Sheet | None] = dict.fromkeys(TABLES)
        self._blank: set[str] = set()
        for name in files.keys() & self.sheets.keys():
            self.sheets[name], blank = open_table(name, files[name], collector)
            if blank:
                self._blank.add(name)
        for name in _REQUIRED & self._blank:
            self.lack(name)
        self.hull = self._hull()

    def _hull(self) -> HullFiles:
        table, offsets = (
            name not in self._blank and (name in self.files or self._hurt(name))
            for name in (TABLE, OFFSETS)
        )
        if not table and not offsets:
            header_only = OFFSETS in self._blank and TABLE not in self._blank
            self.lack(OFFSETS if header_only else TABLE, f"{_EXPECTED} unless it has {OFFSETS}")
        return HullFiles(table=table or not offsets, offsets=offsets)

    def _hurt(self, name: str) -> bool:
        return any(d.where.file == name for d in self.collector.defects)

    def lack(self, name: str, expected: str = _EXPECTED) -> None:
        """Collect that a table must be there with rows, unless another defect of it is told."""
        if name in self._blank:
            tell_empty(name, self.sheets[name], self.collector)
        elif name not in self.files and not self._hurt(name):
            tell_missing(name, self.collector, expected)
