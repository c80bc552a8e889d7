"""Vessel, test and people; axes, signs, units and method."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from incline.report.document import Sheet, bullet, paragraph, part
from incline.report.show import MISSING, NOT_RECORDED
from incline.report.tables import Column, facts, grid

if TYPE_CHECKING:
    from incline.record import Person

__all__ = ["conventions", "vessel_and_test"]


def vessel_and_test(sheet: Sheet) -> list[Any]:
    """Particulars of the vessel and of the occasion, and who was there."""
    trial, show = sheet.reduction.trial, sheet.show
    vessel, occasion = trial.vessel, trial.occasion
    ship = (
        ("Name", vessel.name),
        ("Identity number", vessel.number),
        ("Kind", vessel.kind),
        ("Flag", vessel.flag),
        ("Builder", vessel.builder),
        ("Length, AP to FP", show.full(vessel.lpp, "length")),
        ("Beam", show.full(vessel.beam, "length")),
        ("Depth", show.full(vessel.depth, "length")),
    )
    test = (
        ("Date", occasion.date.isoformat()),
        ("Place", occasion.place),
        ("Berth and mooring", occasion.berth),
        ("Weather", occasion.weather),
        ("Depth of water", show.full(occasion.water_depth, "length")),
        ("Notes", occasion.notes),
    )
    return [
        *part("Vessel"),
        facts([(k, v or NOT_RECORDED) for k, v in ship], sheet.width, abreast=2),
        *part("Test"),
        facts([(k, v or NOT_RECORDED) for k, v in test], sheet.width),
        *part("People"),
        *_people(sheet),
    ]


def _people(sheet: Sheet) -> list[Any]:
    people = sheet.reduction.trial.people
    if not people:
        return [paragraph("People at the test: not recorded.")]
    show = sheet.show
    length = show.unit("length")
    columns = (
        Column("name", 0.32, "left"),
        Column("role", 0.28, "left"),
        Column(f"mass aboard [{show.unit('mass')}]", 0.13),
        *(Column(f"{axis} [{length}]", 0.09) for axis in "xyz"),
    )
    return [grid(columns, [_person(sheet, p) for p in people], sheet.width)]


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
        "Method: a straight line of tangent on moment by least squares, because the reading is "
        "uncertain and the moment nearly exact. All devices share one slope b, each has a zero "
        "offset of its own; counted readings have equal weights unless every device states the "
        "resolution of its readings. GM = 1 / (b Δ).",
    )
    return [bullet(line) for line in lines]
