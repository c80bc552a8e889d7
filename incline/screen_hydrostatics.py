"""A table of hydrostatics on the screen, and as the CSV that a trial reads."""

from __future__ import annotations

import math
import textwrap
from typing import TYPE_CHECKING

from incline.defaults import DEFAULTS
from incline.units import AREA, LENGTH, MASS, MASS_PER_LENGTH, MOMENT_PER_LENGTH, SYSTEMS, VOLUME

if TYPE_CHECKING:
    from collections.abc import Callable

    from incline.hull.spacing import Miss
    from incline.reading import HullRecord
    from incline.tabulation import HydrostaticRow, Tabulation
    from incline.units import Quantity, UnitSystem

    _Column = tuple[str, str, int, Callable[[HydrostaticRow], str]]

__all__ = ["hydrostatics_csv", "show_hydrostatics", "stated_lines"]

_UNITS = {
    "metric": {"area": "m2", "tpc": "t/cm", "mct": "t m/cm"},
    "us": {"area": "ft2", "tpc": "LT/in", "mct": "LT ft/in"},
}


def show_hydrostatics(hull: HullRecord, table: Tabulation, density: float) -> str:
    """The table in the trial's units; ``density`` [t/m3] is that of displacement, TPC and MCT."""
    system = SYSTEMS[hull.units]
    heeled = table.heel != 0.0
    columns = _columns(hull, system, density, heeled=heeled)
    lines = [f"{hull.vessel.name}: hydrostatics integrated from offsets"]
    lines += [_fold(said) for said in _basis(hull, table, density, system)]
    trims = sorted({row.trim for row in table.rows})
    for trim in trims:
        shown = system.show(trim, LENGTH, system.length, 3)
        lines += ["", f"Trim {shown} {system.length} (positive by the stern)"]
        lines.append(" ".join(f"{name:>{width}}" for name, _, width, _ in columns))
        lines.append(" ".join(f"{unit:>{width}}" for _, unit, width, _ in columns))
        lines += [
            " ".join(f"{value(row):>{width}}" for _, _, width, value in columns)
            for row in table.rows
            if row.trim == trim
        ]
    return "\n".join([*lines, "", *map(_fold, _open(table, system))])


def _fold(text: str) -> str:
    return textwrap.fill(text, width=80)


def _basis(hull: HullRecord, table: Tabulation, density: float, system: UnitSystem) -> list[str]:
    """What the figures are of."""
    allowance = hull.offsets.allowance
    skin = (
        "extreme"
        if allowance is None
        else f"moulded, displacement with {100.0 * allowance:g} % for shell and appendages"
    )
    origin = "amidships" if hull.x_origin == "amidships" else "the after perpendicular"
    said = [
        f"Volume {skin}, in water of {density:.4f} t/m3. Drafts amidships above baseline; LCB and"
        f" LCF forward of {origin}; TPC and MCT per {'cm' if system.name == 'metric' else 'inch'}."
    ]
    if table.heel or table.deflection:
        sag = system.show(table.deflection, LENGTH, system.reading, 1)
        said.append(
            f"Heeled {math.degrees(table.heel):.3f} deg to starboard, deflection {sag}"
            f" {system.reading} (positive sagging); KN is the righting lever about the keel."
        )
    return said


def _columns(
    hull: HullRecord, system: UnitSystem, density: float, *, heeled: bool
) -> list[_Column]:
    """Heading, unit, width, and the text of a row."""
    units = _UNITS[system.name]
    factor = density * (1.0 + (hull.offsets.allowance or 0.0))
    back = hull.vessel.lpp / 2.0 if hull.x_origin == "amidships" else 0.0
    length = system.length

    def column(name: str, quantity: Quantity, unit: str, width: int, places: int) -> _Column:
        def text(row: HydrostaticRow) -> str:
            value = _value(row, name, factor, back, hull.vessel.lpp)
            return system.show(value, quantity, unit, places)

        return name, unit, width, text

    found = [
        column("draft", LENGTH, length, 6, 3),
        column("volume", VOLUME, system.volume, 9, 2 if system.name == "metric" else 1),
        column("displ.", MASS, system.mass, 8, 2),
        column("LCB", LENGTH, length, 7, 3),
        column("KB", LENGTH, length, 6, 3),
        column("BM", LENGTH, length, 7, 3),
        column("KM", LENGTH, length, 7, 3),
    ]
    if heeled:
        return [*found, column("TCB", LENGTH, length, 7, 3), column("KN", LENGTH, length, 8, 4)]
    return [
        *found,
        column("LCF", LENGTH, length, 7, 3),
        column("TPC" if system.name == "metric" else "TPI", MASS_PER_LENGTH, units["tpc"], 6, 3),
        column("MCT", MOMENT_PER_LENGTH, units["mct"], 8, 3),
    ]


def _value(row: HydrostaticRow, name: str, factor: float, back: float, lpp: float) -> float:
    """One figure in inside units; ``factor`` makes tonnes of volume, ``back`` is taken off x."""
    return {
        "draft": row.draft,
        "volume": row.volume,
        "displ.": row.volume * factor,
        "LCB": row.lcb - back,
        "KB": row.kb,
        "BM": row.bmt,
        "KM": row.kmt,
        "TCB": row.tcb,
        "KN": row.kn,
        "LCF": row.lcf - back,
        "TPC": row.area * factor,
        "TPI": row.area * factor,
        "MCT": row.volume * factor * row.bml / lpp,
    }[name]


def _open(table: Tabulation, system: UnitSystem) -> list[str]:
    """What the spacing of the offsets leaves open."""

    def told(miss: Miss) -> str:
        km, lcb = (system.show(v, LENGTH, system.reading, 2) for v in miss[1:])
        unit = system.reading
        return f"{100.0 * miss[0]:+.3f} % volume, {km} {unit} KM, {lcb} {unit} LCB"

    return [
        f"Every second station left out would change: {told(table.by_stations)}; the error left in"
        " the table is usually less than a third of that where the lines are smooth.",
        f"Points joined by arcs instead of straight lines would change: {told(table.by_points)}.",
        *_rows_apart(table, system),
        "MCT is displacement x BM_L over length, the usual approximation of GM_L by BM_L.",
    ]


def _rows_apart(table: Tabulation, system: UnitSystem) -> list[str]:
    if table.between is None:
        return []
    miss = system.show(table.between, LENGTH, system.reading, 1)
    return [
        f"KM read between these drafts with every second one left out would be up to {miss}"
        f" {system.reading} off; with all of them, about a third of that where a chine comes near"
        " the water, and far less elsewhere. Use smaller steps where that is too much."
    ]


def stated_lines(hull: HullRecord, table: Tabulation) -> list[str]:
    """Lines for ``[hydrostatics]`` of trial.toml: uncertainties of a table made from offsets.

    The defaults for a hull as built, with a third of what every second station changes, what arcs
    for edges change, and a third of what every second draft left out does to KM.
    """
    system = SYSTEMS[hull.units]
    defaults = ("hull_volume", "hull_km", "hull_lcb")
    between = (0.0, (table.between or 0.0) / 3.0, 0.0)
    volume, km, lcb = (
        math.hypot(DEFAULTS[name].value, stations / 3.0, points, rows)
        for name, stations, points, rows in zip(
            defaults, table.by_stations, table.by_points, between, strict=True
        )
    )
    shown = [system.show(v, LENGTH, system.reading, 2) for v in (km, lcb)]
    return [
        f'u_volume = "{100.0 * volume:.2f} %"',
        f'u_km = "{shown[0]} {system.reading}"',
        f'u_lcb = "{shown[1]} {system.reading}"',
    ]


def hydrostatics_csv(hull: HullRecord, table: Tabulation) -> str:
    """The table as ``hydrostatics.csv`` of the trial, on the volume as drawn and in its units."""
    system = SYSTEMS[hull.units]
    length, area = system.length, _UNITS[system.name]["area"]
    back = hull.vessel.lpp / 2.0 if hull.x_origin == "amidships" else 0.0
    columns: tuple[tuple[str, Quantity, str, Callable[[HydrostaticRow], float]], ...] = (
        ("trim", LENGTH, length, lambda r: r.trim),
        ("draft", LENGTH, length, lambda r: r.draft),
        ("volume", VOLUME, system.volume, lambda r: r.volume),
        ("lcb", LENGTH, length, lambda r: r.lcb - back),
        ("kb", LENGTH, length, lambda r: r.kb),
        ("bm", LENGTH, length, lambda r: r.bmt),
        ("lcf", LENGTH, length, lambda r: r.lcf - back),
        ("area", AREA, area, lambda r: r.area),
        ("bml", LENGTH, length, lambda r: r.bml),
    )
    lines = [",".join(f"{name} [{unit}]" for name, _, unit, _ in columns)]
    lines += [
        ",".join(system.show(value(row), quantity, unit, 5) for _, quantity, unit, value in columns)
        for row in table.rows
    ]
    return "\n".join(lines) + "\n"
