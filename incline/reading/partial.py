"""A trial that is not complete yet: what can be read of it, with what is wrong set aside."""

from __future__ import annotations

import datetime
from dataclasses import dataclass, replace
from typing import TYPE_CHECKING

from incline.errors import Where
from incline.reading.collect import BAD, Collector, folded
from incline.reading.folder import read_records
from incline.reading.tomlfile import FILE

if TYPE_CHECKING:
    import os

    from incline.errors import Defect
    from incline.record import Trial, Weight

__all__ = ["Partial", "read_partial"]

_NOT_YET = frozenset({
    "cell-missing", "column-missing", "device-without-readings", "drafts-too-few", "key-missing",
    "moments-equal", "moments-too-few", "table-empty", "weight-nowhere",
})  # fmt: skip
"""Defects that say only that something is not there yet."""
_SHIFTING = frozenset({"cells-too-many", "file-quoting"})
"""Defects of a row that leave its cells under headings which need not be their own."""


@dataclass(frozen=True, slots=True)
class Partial:
    """What could be read of a trial.

    ``trial`` has NaN for numbers, and stand-ins for words, that are missing or cannot be read: ask
    `knows` before using a word. ``wrong`` are the entries that are there and cannot be used,
    ``missing`` what a whole trial has and this one has not, yet.
    """

    trial: Trial
    wrong: tuple[Defect, ...]
    missing: tuple[Defect, ...]

    @property
    def whole(self) -> bool:
        """Whether nothing is wrong or missing, as `incline.read_trial` demands."""
        return not (self.wrong or self.missing)

    @property
    def date(self) -> datetime.date | None:
        """The day of the test; None when it is not known."""
        return self.trial.occasion.date if self.knows(Where(FILE, 0, "test"), "date") else None

    @property
    def told(self) -> tuple[Defect, ...]:
        """What is wrong, in file order; the same in many rows of a column told once."""
        return tuple(sorted(folded(self.wrong)))

    def knows(self, where: Where, column: str) -> bool:
        """Whether a cell, or a key of a section of ``trial.toml``, is free of defects.

        ``where`` is that of the record: a row of a table, or a section such as ``devices[1]``.
        Cells of a column that a table lacks, and everything in a file that is absent, are not
        known.
        """
        place = replace(where, column=column)
        if not where.row:
            place = replace(where, column=f"{where.column}.{column}")
        return not any(
            d.where == place
            or (d.code in _SHIFTING and d.where.row and d.where == replace(where, column=""))
            or (d.where.file == where.file and _covers(d, column, in_table=where.row > 0))
            for d in (*self.wrong, *self.missing)
        )


def _covers(defect: Defect, column: str, *, in_table: bool) -> bool:
    """Whether a defect takes away a whole file, or a column of it."""
    if not in_table:
        return defect.code in ("file-missing", "file-unreadable", "file-encoding", "toml-syntax")
    return defect.code in ("column-missing", "unit-missing", "unit-wrong") and (
        defect.where.column == column
    )


def read_partial(folder: str | os.PathLike[str]) -> Partial:
    """Read as much of a trial as there is, with its defects aside.

    Raises FieldDataError only when there is no such folder.
    """
    collector = Collector()
    trial = read_records(folder, collector)
    wrong = tuple(d for d in collector.defects if not _is_missing(d))
    bad = {d.where.row for d in wrong if d.where.file == "weights.csv"}
    weights = tuple(_blanked(w) if w.where.row in bad else w for w in trial.weights)
    missing = tuple(d for d in collector.defects if _is_missing(d))
    return Partial(replace(trial, weights=weights), wrong, missing)


def _blanked(weight: Weight) -> Weight:
    """A test weight of a row with a bad cell: its name alone, as the rest may be out of place."""
    return replace(weight, mass=BAD, certificate="", x=BAD, z=BAD, stated={})


def _is_missing(defect: Defect) -> bool:
    """A key without a value, or a file that is absent, is no mistake while a trial is planned."""
    if defect.code == "file-missing":
        return defect.found == "no such file"
    return defect.code in _NOT_YET or defect.found == '""'
