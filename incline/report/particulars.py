"""Vessel, drawings, test and people; axes, signs, units and method."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from incline.report.document import Sheet, bullet, note, paragraph, part
from incline.report.recorded import (
    about_environment,
    about_ship,
    about_test,
    about_vessel,
    pairs_of,
)
from incline.report.show import MISSING, NOT_RECORDED
from incline.report.tables import Column, facts, grid

if TYPE_CHECKING:
    from incline.record import Person

__all__ = ["conventions", "test", "vessel"]


def vessel(sheet: Sheet) -> list[Any]:
    """Particulars of the vessel, and the drawings and documents that were used."""
    return [
        facts(pairs_of(about_vessel(sheet)), sheet.width, abreast=2),
        *part("Drawings and documents used"),
        *_documents(sheet),
    ]


def _documents(sheet: Sheet) -> list[Any]:
    found = sheet.reduction.trial.papers.documents
    if not found:
        return [paragraph(f"Drawings and documents: {NOT_RECORDED}.")]
    columns = (
        Column("title", 0.36, "left"),
        Column("number", 0.17, "left"),
        Column("revision", 0.11, "left"),
        Column("date", 0.12, "left"),
        Column("used for", 0.24, "left"),
    )
    rows = [
        [d.title, *(t or NOT_RECORDED for t in (d.number, d.revision, d.date, d.use))]
        for d in found
    ]
    return [grid(columns, rows, sheet.width)]


def test(sheet: Sheet) -> list[Any]:
    """The occasion, its surroundings by shift, the ship's own condition, and who was there."""
    return [
        facts(pairs_of(about_test(sheet)), sheet.width),
        *part("Surroundings"),
        facts(pairs_of(about_environment(sheet)), sheet.width, abreast=2),
        *part("Weather and tide by shift"),
        *_by_shift(sheet),
        *part("Condition of the ship"),
        facts(pairs_of(about_ship(sheet)), sheet.width),
        *part("People"),
        *_people(sheet),
    ]


def _by_shift(sheet: Sheet) -> list[Any]:
    shifts = sheet.reduction.trial.shifts
    if not any(s.weather or s.tide for s in shifts):
        return [paragraph(f"Weather and tide by shift: {NOT_RECORDED}.")]
    columns = (
        Column("shift", 0.08, "left"),
        Column("time", 0.12, "left"),
        Column("weather", 0.50, "left"),
        Column("tide", 0.30, "left"),
    )
    rows = [
        [str(s.number), *(t or NOT_RECORDED for t in (s.time, s.weather, s.tide))] for s in shifts
    ]
    return [grid(columns, rows, sheet.width)]


def _people(sheet: Sheet) -> list[Any]:
    people = sheet.reduction.trial.people
    if not people:
        return [paragraph(f"People at the test: {NOT_RECORDED}.")]
    show = sheet.show
    length = show.unit("length")
    columns = (
        Column("name", 0.32, "left"),
        Column("role", 0.28, "left"),
        Column(f"mass aboard [{show.unit('mass')}]", 0.13),
        *(Column(f"{axis} [{length}]", 0.09) for axis in "xyz"),
    )
    aboard = [p.mass for p in people if p.mass is not None]
    said = f"Aboard during the shifts: {len(aboard)}, together {show.full(sum(aboard), 'mass')}."
    return [grid(columns, [_person(sheet, p) for p in people], sheet.width), note(said)]


def _person(sheet: Sheet, person: Person) -> list[str]:
    show, centre = sheet.show, person.centre
    mass = "not aboard" if person.mass is None else show.number(person.mass, "mass")
    if centre is None:
        places = [MISSING] * 3
    else:
        places = [show.number(v, "length") for v in (centre.x, centre.y, centre.z)]
    return [person.name, person.role or NOT_RECORDED, mass, *places]


def conventions(sheet: Sheet) -> list[Any]:
    """Axes, signs and units of every number in the report, and the method in words."""
    settings, show = sheet.reduction.trial.settings, sheet.show
    origin = "x is measured forward from the after perpendicular (AP)."
    if settings.x_origin == "amidships":
        half = show.full(sheet.reduction.trial.vessel.lpp / 2.0, "length")
        origin += (
            f" The trial recorded x from amidships, positive forward; half the length between "
            f"perpendiculars, {half}, has been added to every recorded x."
        )
    length, mass, moment = (show.unit(k) for k in ("length", "mass", "moment"))
    lines = (
        origin,
        "y is measured from the centreplane, positive to starboard; z is measured up from the "
        "baseline, the moulded keel line.",
        "Heel, list and moments are positive with the starboard side down. Trim is the draft aft "
        "less the draft forward, positive by the stern. Deflection is positive when amidships is "
        "deeper than the straight line between the perpendiculars (sag).",
        f"Lengths are in {length}, masses in {mass}, moments of mass in {moment}, densities in "
        f"{show.unit('density')}, deflections of pendulums in {show.unit('reading')}, angles in "
        f"degrees. Numbers are rounded for print only; the calculation carries full precision.",
        "M: transverse moment of the test weights about their start positions. t: tangent of the "
        "heel. Δ: displacement. KM: height of the transverse metacentre. GM: metacentric height, "
        "fluid when slack liquids are free to move. FSM: free-surface moment, density times the "
        "second moment of area of the liquid surface about its own centreline. τ: trim over "
        "length between perpendiculars.",
        f"Method: {_method(sheet)} All devices share one ship, each has a zero offset of its own; "
        "counted readings have equal weights unless every device states the resolution of its "
        "readings.",
    )
    return [bullet(line) for line in lines]


_LEAST = "by least squares of the tangents: the reading is uncertain, the moment nearly exact."
_METHODS = {
    "straight-line": f"a straight line of tangent on moment {_LEAST} GM = 1 / (b Δ), b its slope.",
    "wall-sided": f"the equilibrium at each shift with KM t + BM t³/2 for the hull {_LEAST}",
    "heeled-hull": f"the equilibrium of the integrated hull at each shift {_LEAST}",
}


def _method(sheet: Sheet) -> str:
    return _METHODS[sheet.reduction.outcome.heel.method]
