"""The hull of a trial by itself, for hydrostatics before any test is held."""

from __future__ import annotations

from dataclasses import dataclass
from pathlib import Path
from typing import TYPE_CHECKING, Literal

from incline.errors import FieldDataError
from incline.reading.bodies import read_plan
from incline.reading.collect import BAD, Collector, folded
from incline.reading.offsets import read_bodies
from incline.reading.plausible import hull_of
from incline.reading.settings import check_ids, given_density, read_axes, read_units, read_vessel
from incline.reading.tables import (
    OFFSETS,
    digest_of,
    open_table,
    read_files,
    tell_empty,
    tell_missing,
)
from incline.reading.tomlfile import FILE, Document
from incline.record import Offsets, Vessel

if TYPE_CHECKING:
    import os
    from collections.abc import Mapping

    from incline.reading.bodies import HullPlan
    from incline.reading.plausible import Hull

__all__ = ["HullRecord", "read_offsets"]


@dataclass(frozen=True, slots=True, kw_only=True)
class HullRecord:
    """A vessel and its shape; ``density`` [t/m3] of ``[hydrostatics]``, None when not given.

    ``x_origin`` and ``units`` are as in `incline.record.Settings`, ``digest`` and ``remarks`` as in
    `incline.record.Trial`, the digest over the two files alone.
    """

    folder: str
    digest: str
    vessel: Vessel
    x_origin: Literal["after perpendicular", "amidships"]
    units: Literal["metric", "us"]
    density: float | None
    offsets: Offsets
    remarks: tuple[str, ...]


def read_offsets(folder: str | os.PathLike[str]) -> HullRecord:
    """Read the hull from ``trial.toml`` and ``offsets.csv`` of a trial's folder.

    Of ``trial.toml`` only ``[vessel]``, ``[axes]``, ``[output]``, ``[offsets]``, ``[[bodies]]`` and
    the density of ``[hydrostatics]`` are looked at. Raises FieldDataError with every defect of
    these.
    """
    path, collector = Path(folder), Collector()
    files = read_files(path, (FILE, OFFSETS), collector)
    document = Document(files.get(FILE), collector)
    vessel, sound = read_vessel(document.section("vessel"))
    axes = document.section("axes")
    x_origin, units = read_axes(axes), read_units(document.section("output"))
    x_shift = vessel.lpp / 2.0 if x_origin == "amidships" else 0.0
    hull = hull_of(vessel, BAD if "x_origin" in axes.failed else x_shift, known=sound)
    plan = read_plan(document, hull, needed=True)
    check_ids([b.name for b in plan.bodies], "bodies", "name", collector)
    density = given_density(document.section("hydrostatics"), "density")
    offsets, remarks = _offsets(files, plan, hull, collector)
    if offsets is None or collector.defects:
        raise FieldDataError(folded(collector.defects))
    return HullRecord(
        folder=str(path),
        digest=digest_of(files),
        vessel=vessel,
        x_origin=x_origin,
        units=units,
        density=density,
        offsets=offsets,
        remarks=tuple(remarks),
    )


def _offsets(
    files: Mapping[str, bytes], plan: HullPlan, hull: Hull, collector: Collector
) -> tuple[Offsets | None, list[str]]:
    if OFFSETS not in files:
        if not any(d.where.file == OFFSETS for d in collector.defects):
            tell_missing(OFFSETS, collector, "the hull's offsets")
        return None, []
    sheet, blank = open_table(OFFSETS, files[OFFSETS], collector)
    if blank:
        tell_empty(OFFSETS, sheet, collector)
    return read_bodies(sheet, plan, hull) if sheet else (None, [])
