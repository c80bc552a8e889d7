"""A trial's folder to its record: every file read, everything wrong with them told at once."""

from __future__ import annotations

import os
from pathlib import Path
from typing import TYPE_CHECKING, TypeVar

from incline.errors import FieldDataError
from incline.reading.collect import Collector, folded
from incline.reading.extent import mark_remarks
from incline.reading.hydrostatics import read_hydrostatics
from incline.reading.ledger import check_names, check_no_test_weights, read_changes, read_items
from incline.reading.oddities import shift_remarks, weight_remarks
from incline.reading.offsets import read_bodies
from incline.reading.readings import check_devices, check_shifts, read_readings
from incline.reading.rolls import read_rolls
from incline.reading.settings import read_head
from incline.reading.starts import check_starts
from incline.reading.tables import (
    OFFSETS,
    TABLE,
    TABLES,
    Tables,
    digest_of,
    read_files,
    strangers,
)
from incline.reading.tanks import read_tanks
from incline.reading.tomlfile import FILE
from incline.reading.waterline import check_drafts, check_layers, read_drafts, read_samples
from incline.reading.weights import (
    ShiftTable,
    check_moments,
    check_moves,
    read_shifts,
    read_weights,
)
from incline.record import Trial

if TYPE_CHECKING:
    from collections.abc import Callable, Sequence

    from incline.reading.cells import Sheet
    from incline.reading.settings import Frame, Head
    from incline.record import (
        DraftReading,
        HydrostaticTable,
        Item,
        Offsets,
        Reading,
        RollingRun,
        Sample,
        Tank,
        Weight,
    )

__all__ = ["read_records", "read_trial"]

_ABSENT = {
    "tanks.csv": "No tanks.csv: no liquid is deducted and no free surface is taken.",
    "ledger.csv": "No ledger.csv: no item is deducted, added or relocated.",
}
_BOTH = (
    "offsets.csv and hydrostatics.csv are both there and trial.toml does not say which to use: the"
    " offsets count."
)
_Record = TypeVar("_Record")


def read_trial(folder: str | os.PathLike[str]) -> Trial:
    """Read the record of a test.

    Raises FieldDataError with every defect of every file.
    """
    collector = Collector()
    trial = read_records(folder, collector)
    if collector.defects:
        raise FieldDataError(folded(collector.defects))
    return trial


def read_records(folder: str | os.PathLike[str], collector: Collector) -> Trial:
    """The records of a test as far as they can be read; what is wrong goes to ``collector``.

    With defects collected the trial is not fit to be reduced: BAD stands for a number, and an
    empty text or the first of the words allowed for a word, that is missing or cannot be read.
    Raises FieldDataError when there is no such folder.
    """
    path = Path(folder)
    files = read_files(path, (FILE, *TABLES), collector)
    remarks = strangers(path, files, collector)
    return _Reader(files, collector, path).trial(str(path), remarks)


class _Reader:
    """Reads the tables of one trial, each with what it needs of the others."""

    def __init__(self, files: dict[str, bytes], collector: Collector, path: Path) -> None:
        self.files = files
        self.collector = collector
        self.tables = Tables(files, collector)
        self.sheets = self.tables.sheets
        self.head: Head = read_head(files.get(FILE), self.tables.hull, collector, path)

    def trial(self, folder: str, remarks: list[str]) -> Trial:
        """Read everything; of no use once a defect has been collected."""
        head = self.head
        weights, shifts, by_moment = self._weights()
        drafts, assumed = self._drafts()
        samples, warm = self._samples()
        tanks, partial = self._pairs("tanks.csv", read_tanks)
        table, rough = self._table()
        offsets, shape = self._offsets()
        marked = self.sheets["drafts.csv"], self.sheets[OFFSETS]
        return Trial(
            folder=folder,
            digest=digest_of(self.files),
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
            offsets=offsets,
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
                *shape,
                *mark_remarks(drafts, offsets, marked, head.frame.hull),
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
            self.tables.lack("weights.csv")
        if table.whole and (table.by_moment or sheet.has("weight")):
            if weights:
                check_moves(sheet, weights, table.shifts)
            check_moments(sheet, weights, table.shifts)
        of_weights = self.sheets["weights.csv"]
        if of_weights:
            check_starts(sheet, of_weights, weights, table.shifts)
        remark = (
            "The moments of the test weights were recorded as such: no test weight comes into the"
            " ledger by itself."
        )
        return weights, table, [
            *([remark] if table.by_moment else []),
            *(weight_remarks(of_weights, weights) if of_weights else []),
            *shift_remarks(weights, table.shifts),
        ]  # fmt: skip

    def _samples(self) -> tuple[tuple[Sample, ...], list[str]]:
        samples, remarks = self._pairs("density.csv", read_samples)
        sheet = self.sheets["density.csv"]
        if sheet is not None and self.head.settings.layers:
            check_layers(sheet, samples)
        return samples, remarks

    def _table(self) -> tuple[HydrostaticTable | None, list[str]]:
        if not self.tables.hull.table:
            return None, []
        return read_hydrostatics(self.sheets[TABLE], self.head.frame)

    def _offsets(self) -> tuple[Offsets | None, list[str]]:
        plan, there = self.head.plan, self.tables.hull
        if plan.said and not there.offsets:
            self.tables.lack(OFFSETS, f"the hull's offsets, since {FILE} has {plan.said[0]}")
        sheet = self.sheets[OFFSETS] if there.offsets else None
        if sheet is None:
            return None, []
        offsets, remarks = read_bodies(sheet, plan, self.head.frame.hull)
        if there.table and not self.head.use_said:
            remarks.append(_BOTH)
        return offsets, remarks

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
