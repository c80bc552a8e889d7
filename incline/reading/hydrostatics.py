"""``hydrostatics.csv``: the table of hydrostatics as a grid over draft and trim."""

from __future__ import annotations

import itertools
from dataclasses import dataclass
from typing import TYPE_CHECKING

from incline.errors import Where
from incline.reading.cells import Column
from incline.reading.collect import BAD, NOTHING, Sign, quoted
from incline.reading.smoothness import Figure, Station, smoothness_remarks
from incline.record import HydrostaticTable
from incline.units import AREA, LENGTH, MASS, MASS_PER_LENGTH, MOMENT_PER_LENGTH, VOLUME

if TYPE_CHECKING:
    from incline.reading.cells import Row, Sheet
    from incline.reading.settings import Frame

__all__ = ["TABLE_COLUMNS", "read_hydrostatics"]

TABLE_COLUMNS = (
    Column("draft", LENGTH, required=True),
    Column("trim", LENGTH),
    Column("volume", VOLUME, sign=Sign.POSITIVE),
    Column("displacement", MASS, sign=Sign.POSITIVE),
    Column("lcb", LENGTH, required=True),
    Column("kb", LENGTH, required=True),
    Column("km", LENGTH),
    Column("bm", LENGTH),
    Column("lcf", LENGTH),
    Column("area", AREA, sign=Sign.POSITIVE),
    Column("tpc", MASS_PER_LENGTH, sign=Sign.POSITIVE),
    Column("bml", LENGTH, sign=Sign.POSITIVE),
    Column("kml", LENGTH, sign=Sign.POSITIVE),
    Column("mct", MOMENT_PER_LENGTH, sign=Sign.POSITIVE),
)
_SAME = 1e-9
"""Drafts and trims [m] closer than this are one: rounding of the arithmetic, never of a table."""
_BASIS = {
    "bml": "as tabulated",
    "kml": "KM_L less KB",
    "mct": "from the moment to change trim, MCT x length / displacement",
}


@dataclass(frozen=True, slots=True)
class _Choice:
    """Which of the columns that say the same the table has; None when it has none."""

    volume: str | None
    km: str | None
    area: str | None
    bml: str | None


@dataclass(frozen=True, slots=True, kw_only=True)
class _Entry:
    """One row in inside units; BAD where a cell could not be read."""

    row: Row
    draft: float
    trim: float
    volume: float
    lcb: float
    kb: float
    bmt: float
    lcf: float
    area: float
    bml: float


_NO_TABLE = HydrostaticTable(
    drafts=(), trims=(), volume=(), lcb=(), kb=(), bmt=(), lcf=None, area=None, bml=None,
    bml_basis="", where=Where("hydrostatics.csv"),
)  # fmt: skip


def read_hydrostatics(sheet: Sheet | None, frame: Frame) -> tuple[HydrostaticTable, list[str]]:
    """The table, and remarks on figures that look like slips.

    Of no use once a defect has been collected, as when there is no sheet.
    """
    if sheet is None:
        return _NO_TABLE, []
    choice = _Choice(
        sheet.one_of(("volume", "displacement"), required=True),
        sheet.one_of(("km", "bm"), required=True),
        sheet.one_of(("area", "tpc")),
        sheet.one_of(("bml", "kml", "mct")),
    )
    density = _density(sheet, choice, frame)
    entries = [_entry(row, choice, density, frame) for row in sheet.rows]
    groups = _by_trim(entries)
    for group in groups:
        _check_ascending(group, choice.volume or "volume")
    _check_grid(sheet, groups)

    def grid(name: str) -> tuple[tuple[float, ...], ...]:
        return tuple(tuple(float(getattr(e, name)) for e in group) for group in groups)

    table = HydrostaticTable(
        drafts=tuple(e.draft for e in groups[0]) if groups else (),
        trims=tuple(group[0].trim for group in groups),
        volume=grid("volume"),
        lcb=grid("lcb"),
        kb=grid("kb"),
        bmt=grid("bmt"),
        lcf=grid("lcf") if sheet.has("lcf") else None,
        area=grid("area") if choice.area else None,
        bml=grid("bml") if choice.bml else None,
        bml_basis=_BASIS.get(choice.bml or "", ""),
        where=Where(sheet.file),
        stated=frame.table_stated,
    )
    return table, _remarks(groups, choice, density, frame)


def _remarks(
    groups: list[list[_Entry]], choice: _Choice, density: float, frame: Frame
) -> list[str]:
    if choice.volume is None or choice.km is None:
        return []
    size = density if choice.volume == "displacement" else 1.0
    above = choice.km == "km"
    stations = [
        [
            Station(
                row=e.row, draft=e.draft, volume=e.volume, lcb=e.lcb, km=e.kb + e.bmt, area=e.area
            )
            for e in group
        ]
        for group in groups
    ]
    kb = {e.row.number: e.kb for group in groups for e in group}
    return smoothness_remarks(
        stations,
        Figure(choice.volume, lambda _, v: v * size),
        Figure(choice.km, lambda s, v: v if above else v - kb[s.row.number]),
        Figure("lcb", lambda _, v: v - frame.x_shift),
        frame.lpp,
    )


def _density(sheet: Sheet, choice: _Choice, frame: Frame) -> float:
    """Density [t/m3] that the table's masses are for; BAD when not needed or not there."""
    massive = [
        n for n in (choice.volume, choice.area, choice.bml) if n in ("displacement", "tpc", "mct")
    ]
    if frame.table_density is not None or not massive:
        return BAD if frame.table_density is None else frame.table_density
    where = Where("trial.toml", 0, "hydrostatics.density")
    expected = f"the density of the water, for {' and '.join(massive)} in {sheet.file}"
    sheet.collector.add(where, "key-missing", NOTHING, expected)
    return BAD


def _entry(row: Row, choice: _Choice, density: float, frame: Frame) -> _Entry:
    kb = row.need("kb")
    volume = row.need(choice.volume) if choice.volume else BAD
    if choice.volume == "displacement":
        volume /= density
    area = row.need(choice.area) if choice.area else BAD
    bml = row.need(choice.bml) if choice.bml else BAD
    if choice.bml == "kml":
        bml -= kb
    elif choice.bml == "mct":
        bml *= frame.lpp / (volume * density)
    lcb = row.need("lcb") + frame.x_shift
    lcf = row.need("lcf") + frame.x_shift if row.sheet.has("lcf") else BAD
    frame.hull.centre(row, "lcb", lcb)
    frame.hull.centre(row, "lcf", lcf)
    return _Entry(
        row=row,
        draft=row.need("draft") - frame.table_down,
        trim=row.need("trim") if row.sheet.has("trim") else 0.0,
        volume=volume,
        lcb=lcb,
        kb=kb,
        bmt=_above_keel(row, choice.km, kb),
        lcf=lcf,
        area=area / density if choice.area == "tpc" else area,
        bml=_positive(row, choice.bml, bml),
    )


def _above_keel(row: Row, column: str | None, kb: float) -> float:
    """BM [m] from BM or KM; it is above zero in every ship."""
    if column is None:
        return BAD
    value = row.need(column)
    return _positive(row, column, value - kb if column == "km" else value)


def _positive(row: Row, column: str | None, value: float) -> float:
    if column is not None and value <= 0.0:
        expected = f"{column} above {'kb' if column.startswith('k') else 'zero'}"
        row.fault(column, "number-not-positive", quoted(row.raw(column)), expected)
        return BAD
    return value


def _by_trim(entries: list[_Entry]) -> list[list[_Entry]]:
    """Rows of each trim in the order of the file, trims ascending; rows without a trim left out."""
    groups: list[list[_Entry]] = []
    for entry in entries:
        mine = next((g for g in groups if abs(g[0].trim - entry.trim) < _SAME), None)
        if mine is not None:
            mine.append(entry)
        elif entry.trim == entry.trim:
            groups.append([entry])
    return sorted(groups, key=lambda g: g[0].trim)


def _check_ascending(group: list[_Entry], volume: str) -> None:
    for below, entry in itertools.pairwise(group):
        for column, before, now in (
            ("draft", below.draft, entry.draft),
            (volume, below.volume, entry.volume),
        ):
            if now <= before:
                found = f"{quoted(entry.row.raw(column))} after {quoted(below.row.raw(column))}"
                expected = f"{column} rising from row to row at each trim"
                entry.row.fault(column, "table-not-monotonic", found, expected)


def _check_grid(sheet: Sheet, groups: list[list[_Entry]]) -> None:
    """Each trim must have the same drafts, two at least."""
    if not groups or any(e.draft != e.draft for g in groups for e in g):
        return
    first = groups[0]
    if len(first) < 2:
        sheet.fault("draft", "table-not-grid", "one draft", "two drafts at least at each trim")
        return
    for group in groups[1:]:
        same = len(group) == len(first) and all(
            abs(a.draft - b.draft) < _SAME for a, b in zip(first, group, strict=True)
        )
        if not same:
            found = f"other drafts than at the trim of row {first[0].row.number}"
            group[0].row.fault("trim", "table-not-grid", found, "the same drafts at every trim")
