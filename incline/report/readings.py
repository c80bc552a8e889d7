"""Devices, and every reading as recorded with what it was reduced to."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from incline.report.document import Sheet, note, paragraph, part
from incline.report.show import MISSING, NOT_RECORDED
from incline.report.tables import Column, grid

if TYPE_CHECKING:
    from incline.record import Device, Reading
    from incline.report.show import RawKind
    from incline.result import HeelPoint

__all__ = ["devices_and_readings"]


_LONG = 24
"""Characters of a device's name from which its column is wider."""


def devices_and_readings(sheet: Sheet) -> list[Any]:
    """Table of devices, table of readings, and the exclusions with their reasons."""
    return [
        *part("Devices"),
        _devices(sheet),
        *part("Readings as recorded, and reduced"),
        *_readings(sheet),
        *part("Readings left out"),
        *_exclusions(sheet),
    ]


def _devices(sheet: Sheet) -> Any:  # noqa: ANN401 - untyped library
    columns = (
        Column("device", 0.17, "left"),
        Column("kind", 0.12, "left"),
        Column(f"length or span [{sheet.show.unit('length')}]", 0.11),
        Column("place", 0.16, "left"),
        Column("calibration", 0.15, "left"),
        Column("damping", 0.15, "left"),
        Column("read by", 0.14, "left"),
    )
    return grid(columns, [_device(sheet, d) for d in sheet.reduction.trial.devices], sheet.width)


def _device(sheet: Sheet, device: Device) -> list[str]:
    return [
        device.id,
        device.kind,
        sheet.show.number(device.length, "length"),
        *(t or NOT_RECORDED for t in (device.place, device.calibration)),
        *(t or NOT_RECORDED for t in (device.damping, device.read_by)),
    ]


def _readings(sheet: Sheet) -> list[Any]:
    trial = sheet.reduction.trial
    more = 0.12 if any(len(d.id) > _LONG for d in trial.devices) else 0.0
    columns = (
        Column("shift", 0.05, "left"),
        Column("device", 0.12 + more, "left"),
        Column("as recorded", 0.25 - more / 2.0, "left"),
        Column("reduced", 0.09),
        Column("u", 0.06),
        Column("unit", 0.06, "left"),
        Column("tangent", 0.09),
        Column("how reduced; note", 0.28 - more / 2.0, "left"),
    )
    decimals = sheet.show.raw_decimals(trial.readings)
    points = {(p.shift, p.device): p for p in sheet.reduction.outcome.heel.points}
    rows = [_reading(sheet, r, points.get((r.shift, r.device)), decimals) for r in trial.readings]
    text = (
        "Readings are positive to starboard heel. Swings are successive extremes of one free "
        "swing. The tangent of a pendulum or U-tube is its reading over its length or span. The "
        "standard uncertainty u of a reduced reading is from its own values; a dash where a single "
        "value cannot tell it."
    )
    return [grid(columns, rows, sheet.width), note(text)]


def _reading(
    sheet: Sheet, reading: Reading, point: HeelPoint | None, decimals: dict[RawKind, int]
) -> list[str]:
    show = sheet.show
    places = decimals[reading.quantity]
    recorded = ", ".join(show.raw(v, reading.quantity, places) for v in reading.values)
    said = [reading.note] if reading.note else []
    if reading.excluded:
        said.append(f"EXCLUDED: {reading.excluded}")
    head = [str(reading.shift), reading.device, recorded]
    if point is None:
        middle = [MISSING, MISSING, show.raw_unit(reading.quantity), MISSING]
    else:
        found = point.reading
        said.insert(0, found.how if found.count == 1 else f"{found.how}, {found.count} values")
        u = MISSING if found.u is None else show.raw(found.u, reading.quantity, places + 1)
        finer = places + (found.count > 1)
        value = show.raw(found.value, reading.quantity, finer)
        middle = [value, u, show.raw_unit(reading.quantity), show.tangent(point.tangent)]
    return [*head, *middle, "; ".join(said)]


def _exclusions(sheet: Sheet) -> list[Any]:
    left_out = [r for r in sheet.reduction.trial.readings if r.excluded]
    if not left_out:
        return [paragraph("None. Every reading counts.")]
    columns = (
        Column("shift", 0.10, "left"),
        Column("device", 0.28, "left"),
        Column("reason given by the surveyor", 0.62, "left"),
    )
    rows = [[str(r.shift), r.device, r.excluded] for r in left_out]
    return [grid(columns, rows, sheet.width)]
