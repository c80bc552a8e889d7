"""A trial's folder to its record: every file read, everything wrong with them told at once."""

from __future__ import annotations

import difflib
import hashlib
import os
from pathlib import Path
from typing import TYPE_CHECKING, TypeVar

from incline.errors import Defect, FieldDataError, Where
from incline.reading.collect import Collector, folded, quoted
from incline.reading.csvtable import read_table
from incline.reading.headings import open_sheet
from incline.reading.hydrostatics import TABLE_COLUMNS, read_hydrostatics
from incline.reading.ledger import (
    CHANGE_COLUMNS,
    ITEM_COLUMNS,
    check_names,
    check_no_test_weights,
    read_changes,
    read_items,
)
from incline.reading.oddities import shift_remarks, weight_remarks
from incline.reading.readings import check_devices, check_shifts, read_readings, reading_columns
from incline.reading.rolls import ROLL_COLUMNS, read_rolls
from incline.reading.settings import read_head
from incline.reading.tanks import TANK_COLUMNS, read_tanks
from incline.reading.waterline import (
    DRAFT_COLUMNS,
    SAMPLE_COLUMNS,
    check_drafts,
    read_drafts,
    read_samples,
)
from incline.reading.weights import (
    SHIFT_COLUMNS,
    WEIGHT_COLUMNS,
    ShiftTable,
    check_moments,
    check_moves,
    read_shifts,
    read_weights,
)
from incline.record import Trial

if TYPE_CHECKING:
    from collections.abc import Callable, Mapping, Sequence

    from incline.reading.cells import Column, Sheet
    from incline.reading.settings import Frame, Head
    from incline.record import DraftReading, Item, Reading, RollingRun, Tank, Weight

__all__ = ["read_trial"]

_COLUMNS: dict[str, tuple[Column, ...]] = {
    "weights.csv": WEIGHT_COLUMNS,
    "shifts.csv": SHIFT_COLUMNS,
    "readings.csv": (),
    "drafts.csv": DRAFT_COLUMNS,
    "density.csv": SAMPLE_COLUMNS,
    "tanks.csv": TANK_COLUMNS,
    "ledger.csv": ITEM_COLUMNS,
    "changes.csv": CHANGE_COLUMNS,
    "hydrostatics.csv": TABLE_COLUMNS,
    "rolls.csv": ROLL_COLUMNS,
}
_FILES = ("trial.toml", *_COLUMNS)
_OPTIONAL = frozenset({"weights.csv", "tanks.csv", "ledger.csv", "changes.csv", "rolls.csv"})
_ROWS = {
    "weights.csv": "test weights",
    "shifts.csv": "shifts",
    "readings.csv": "readings",
    "drafts.csv": "draft readings",
    "density.csv": "water samples",
    "hydrostatics.csv": "hydrostatics",
}
"""What stands in the rows of the tables that must have some."""
_ABSENT = {
    "tanks.csv": "No tanks.csv: no liquid is deducted and no free surface is taken.",
    "ledger.csv": "No ledger.csv: no item is deducted, added or relocated.",
}
_EXPECTED = "a file that a trial must have"
_Record = TypeVar("_Record")


def read_trial(folder: str | os.PathLike[str]) -> Trial:
    """Read the record of a test.

    Raises FieldDataError with every defect of every file.
    """
    path = Path(folder)
    collector = Collector()
    if not path.is_dir():
        found = "a file" if path.exists() else "no such folder"
        where = Where(str(path))
        raise FieldDataError([Defect(where, "file-missing", found, "the folder of a trial")])
    files = _read_files(path, collector)
    remarks = _strangers(path, files, collector)
    trial = _Reader(files, collector, path).trial(str(path), remarks)
    if collector.defects:
        raise FieldDataError(folded(collector.defects))
    return trial


def _read_files(path: Path, collector: Collector) -> dict[str, bytes]:
    """The bytes of the files that are there; a required one that is not is a defect."""
    files: dict[str, bytes] = {}
    for name in _FILES:
        try:
            files[name] = (path / name).read_bytes()
        except FileNotFoundError:
            if name not in _OPTIONAL:
                collector.add(Where(name), "file-missing", "no such file", _EXPECTED)
        except OSError as error:
            found = error.strerror or "an error"
            collector.add(Where(name), "file-unreadable", found, "a file that can be read")
    return files


def _strangers(path: Path, files: Mapping[str, bytes], collector: Collector) -> list[str]:
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
        absent = sorted(_OPTIONAL - files.keys())
        close = difflib.get_close_matches(name.lower(), absent, n=1, cutoff=0.8)
        if close:
            hint = "rename the file, or move it out of the folder"
            found = f"no such file, but a file {quoted(name)}"
            collector.add(Where(close[0]), "file-missing", found, "the name as given here", hint)
        else:
            remarks.append(f"The file {quoted(name)} is none of a trial's tables and was not read.")
    return remarks


def _digest(files: Mapping[str, bytes]) -> str:
    """Sha256 over the files in the order of their names: name, length and bytes of each."""
    digest = hashlib.sha256()
    for name in sorted(files):
        digest.update(f"{name}\0{len(files[name])}\0".encode())
        digest.update(files[name])
    return digest.hexdigest()


class _Reader:
    """Reads the tables of one trial, each with what it needs of the others."""

    def __init__(self, files: dict[str, bytes], collector: Collector, path: Path) -> None:
        self.files = files
        self.collector = collector
        self.head: Head = read_head(files.get("trial.toml"), collector, path)
        self.sheets = {name: self._sheet(name) for name in _COLUMNS}

    def _sheet(self, name: str) -> Sheet | None:
        """A table with its header matched; None when absent, unreadable or without a header."""
        data = self.files.get(name)
        if data is None:
            return None
        before = len(self.collector.defects)
        raw = read_table(name, data, self.collector)
        unhurt = len(self.collector.defects) == before
        sheet = None
        if raw is not None:
            sheet = open_sheet(raw, _COLUMNS[name] or reading_columns(raw), self.collector)
        empty = sheet is not None and not sheet.rows
        if (empty or raw is None) and unhurt and name not in _OPTIONAL:
            self._empty(name, header=empty)
        return sheet

    def _empty(self, name: str, *, header: bool) -> None:
        found = "a header and no rows" if header else "no rows"
        below = f"a row of {_ROWS[name]} below the header"
        expected = below if header else f"a header and {below}"
        self.collector.add(Where(name), "table-empty", found, expected)

    def trial(self, folder: str, remarks: list[str]) -> Trial:
        """Read everything; of no use once a defect has been collected."""
        head, frame = self.head, self.head.frame
        weights, shifts, by_moment = self._weights()
        drafts, assumed = self._drafts()
        samples, warm = self._pairs("density.csv", read_samples)
        tanks, partial = self._pairs("tanks.csv", read_tanks)
        table, rough = read_hydrostatics(self.sheets["hydrostatics.csv"], frame)
        return Trial(
            folder=folder,
            digest=_digest(self.files),
            vessel=head.vessel,
            occasion=head.occasion,
            settings=head.settings,
            people=head.people,
            devices=head.devices,
            weights=weights,
            shifts=tuple(shifts.shifts),
            readings=self._readings(shifts),
            drafts=drafts,
            samples=samples,
            tanks=tanks,
            items=self._items(weights, tanks),
            changes=self._rows("changes.csv", read_changes),
            table=table,
            rolls=self._rolls(),
            environment=head.environment,
            hydrometer=head.hydrometer,
            condition=head.condition,
            papers=head.papers,
            remarks=(
                *remarks,
                *by_moment,
                *assumed,
                *warm,
                *partial,
                *rough,
                *(said for name, said in _ABSENT.items() if name not in self.files),
            ),
        )

    def _rows(
        self, name: str, read: Callable[[Sheet, Frame], tuple[_Record, ...]]
    ) -> tuple[_Record, ...]:
        sheet = self.sheets[name]
        return read(sheet, self.head.frame) if sheet else ()

    def _pairs(
        self, name: str, read: Callable[[Sheet, Frame], tuple[tuple[_Record, ...], list[str]]]
    ) -> tuple[tuple[_Record, ...], list[str]]:
        """Records with remarks on them."""
        sheet = self.sheets[name]
        return read(sheet, self.head.frame) if sheet else ((), [])

    def _weights(self) -> tuple[tuple[Weight, ...], ShiftTable, list[str]]:
        """Test weights and shifts, and remarks, as when moments were recorded instead of moves."""
        weights = self._rows("weights.csv", read_weights)
        sheet = self.sheets["shifts.csv"]
        if sheet is None:
            return weights, ShiftTable(whole=False), []
        table = read_shifts(sheet, self.head.frame)
        if not weights and any(shift.moves for shift in table.shifts):
            if "weights.csv" not in self.files:
                found = "no such file"
                self.collector.add(Where("weights.csv"), "file-missing", found, _EXPECTED)
            elif self.sheets["weights.csv"] or not self._hurt("weights.csv"):
                self._empty("weights.csv", header=self.sheets["weights.csv"] is not None)
        if table.whole and (table.by_moment or sheet.has("weight")):
            if weights:
                check_moves(sheet, weights, table.shifts)
            check_moments(sheet, weights, table.shifts)
        remark = (
            "The moments of the test weights were recorded as such: no test weight comes into the"
            " ledger by itself."
        )
        of_weights = self.sheets["weights.csv"]
        return weights, table, [
            *([remark] if table.by_moment else []),
            *(weight_remarks(of_weights, weights) if of_weights else []),
            *shift_remarks(weights, table.shifts),
        ]  # fmt: skip

    def _hurt(self, name: str) -> bool:
        return any(d.where.file == name for d in self.collector.defects)

    def _readings(self, shifts: ShiftTable) -> tuple[Reading, ...]:
        sheet = self.sheets["readings.csv"]
        if sheet is None:
            return ()
        readings, whole = read_readings(sheet)
        if shifts.whole and shifts.shifts:
            check_shifts(sheet, [s.number for s in shifts.shifts], readings)
        if self.head.complete and sheet.rows:
            check_devices(sheet, self.head.devices, readings, whole=whole)
        return readings

    def _drafts(self) -> tuple[tuple[DraftReading, ...], list[str]]:
        sheet = self.sheets["drafts.csv"]
        if sheet is None:
            return (), []
        drafts, remarks = read_drafts(sheet, self.head.frame)
        check_drafts(sheet, drafts, self.head.frame)
        return drafts, remarks

    def _rolls(self) -> tuple[RollingRun, ...]:
        sheet = self.sheets["rolls.csv"]
        return read_rolls(sheet, self.head.settings.roll_condition) if sheet else ()

    def _items(self, weights: Sequence[Weight], tanks: Sequence[Tank]) -> tuple[Item, ...]:
        sheet = self.sheets["ledger.csv"]
        if sheet is None:
            return ()
        items = read_items(sheet, self.head.frame)
        people = [p.name for p in self.head.people if p.mass is not None]
        others = {
            **dict.fromkeys((w.id for w in weights), "a test weight"),
            **dict.fromkeys((t.name for t in tanks), "a tank"),
            **dict.fromkeys(people, "a person aboard"),
        }
        check_names(sheet, items, others)
        check_no_test_weights(sheet, items, weights)
        return items
