"""``tanks.csv``: liquids aboard, their mass, centre and free surface."""

from __future__ import annotations

import re
from dataclasses import dataclass
from typing import TYPE_CHECKING, Literal

from incline.reading.cells import Column
from incline.reading.collect import BAD, Sign, quoted
from incline.reading.plausible import LIQUID, check
from incline.reading.uncertainty import PERCENT, combined, of_row, written
from incline.record import Point, Stated, Tank
from incline.units import DENSITY, LENGTH, MASS, MOMENT, SECOND_MOMENT, VOLUME, to_inside

if TYPE_CHECKING:
    from incline.reading.cells import Row, Sheet
    from incline.reading.settings import Frame

__all__ = ["TANK_COLUMNS", "read_tanks"]

TANK_COLUMNS = (
    Column("tank", required=True),
    Column("contents", required=True),
    Column("state", required=True),
    Column("density", DENSITY, sign=Sign.POSITIVE, stated=True),
    Column("level", LENGTH, sign=Sign.NOT_NEGATIVE),
    Column("volume", VOLUME, sign=Sign.NOT_NEGATIVE, stated=True),
    Column("mass", MASS, sign=Sign.NOT_NEGATIVE, stated=True, derived=True),
    Column("x", LENGTH, required=True, stated=True),
    Column("y", LENGTH, required=True, transverse=True, stated=True),
    Column("z", LENGTH, required=True, stated=True),
    Column("fsm", MOMENT, sign=Sign.NOT_NEGATIVE, stated=True, derived=True),
    Column("second moment", SECOND_MOMENT, sign=Sign.NOT_NEGATIVE),
    Column("length", LENGTH, sign=Sign.POSITIVE),
    Column("breadth", LENGTH, sign=Sign.POSITIVE),
    Column("shape"),
    Column("depth", LENGTH, sign=Sign.POSITIVE),
    Column("type"),
    Column("sounding"),
)
_NO_DEPTH = (
    "The tank {} is a box without its depth: its free surface counts as a fixed moment, and whether"
    " it reaches the tank's top when the ship heels cannot be told."
)
_MASS_AGREES = 0.005
_FSM_AGREES = 0.01
_State = Literal["empty", "pressed full", "slack"]


def read_tanks(sheet: Sheet, frame: Frame) -> tuple[tuple[Tank, ...], list[str]]:
    """The tanks, and remarks on what they state; two tanks of one name are a defect."""
    tanks: list[Tank] = []
    remarks: list[str] = []
    seen: dict[str, int] = {}
    states: tuple[_State, ...] = ("empty", "pressed full", "slack")
    types: tuple[Literal["deep", "double bottom"], ...] = ("deep", "double bottom")
    for row in sheet.rows:
        name = row.text("tank", required=True)
        before = seen.setdefault(name.casefold(), row.number)
        if before != row.number and name:
            expected = f"a name of its own; row {before} has the same"
            row.fault("tank", "id-twice", quoted(name), expected)
        state = row.choice("state", states)
        mass, centre = _liquid(row, state, frame)
        box = _is_box(row)
        if state == "slack" and box and not row.raw("depth"):
            remarks.append(_NO_DEPTH.format(name))
        fsm, basis = _free_surface(row, state)
        tanks.append(
            Tank(
                name=name,
                contents=row.text("contents", required=state != "empty"),
                state=state or "empty",
                density=row.maybe("density"),
                level=row.maybe("level"),
                volume=row.maybe("volume"),
                mass=mass,
                centre=centre,
                fsm=fsm,
                fsm_basis=basis,
                where=row.where(),
                depth=_depth(row),
                length=row.maybe("length"),
                breadth=row.maybe("breadth"),
                type=row.choice("type", types, "") or "",
                box=box and bool(row.raw("depth")),
                sounding=row.text("sounding"),
                stated=_stated(row, name, state, {"mass": mass, "fsm": fsm}, remarks),
            )
        )
    return tuple(tanks), remarks


def _is_box(row: Row) -> bool:
    """Whether a tank is a box whose surface and level are known; its depth may not be."""
    known = all(row.raw(column) for column in ("length", "breadth", "level"))
    return known and row.raw("shape").casefold() == "box"


def _stated(
    row: Row, name: str, state: _State | None, found: dict[str, float], remarks: list[str]
) -> dict[str, Stated]:
    """The uncertainties of a tank; ``found`` are the mass [t] and free-surface moment [t m]."""
    nothing = {"empty": ("mass", "volume", "fsm"), "pressed full": ("fsm",)}.get(state or "", ())
    for column in written(row, *nothing):
        amount = row.maybe(column)
        relative = row.sheet.placed[column].unit == PERCENT  # a share of nothing is nothing
        if amount is not None and amount > 0.0 and not relative:
            expected = f"no uncertainty of what a tank that is {state} does not have"
            _contradiction(row, column, quoted(row.raw(column)), expected)
    if state == "empty":
        return {}
    said = of_row(row, "mass", "volume", "density", "fsm", "x", "y", "z", computed=found)
    if "mass" in said or (row.raw("mass") and not row.raw("volume")):
        return said
    parts = [
        Stated(said[key].u / value, said[key].shape)
        for key in ("volume", "density")
        if key in said and (value := row.maybe(key))
    ]
    share = combined(parts)
    if share is not None:
        said["mass"] = Stated(share.u * found["mass"], share.shape)
    if len(parts) == 1:
        only = "volume" if "volume" in said else "density"
        remarks.append(
            f"The uncertainty of the mass in tank {name} is that stated of its {only} alone."
        )
    return said


def _depth(row: Row) -> float | None:
    """Depth of the tank [m]; a level above it is a contradiction."""
    depth, level = row.maybe("depth"), row.maybe("level")
    if depth is not None and level is not None and level > depth:
        _contradiction(row, "level", quoted(row.raw("level")), "a level within the tank's depth")
    return depth


def _liquid(row: Row, state: _State | None, frame: Frame) -> tuple[float, Point | None]:
    """Mass [t] and centre of the liquid."""
    if state == "empty":
        for column in ("mass", "volume", "level", "fsm"):
            value = row.maybe(column)
            if value is not None and value > 0.0:
                _contradiction(row, column, quoted(row.raw(column)), "nothing in an empty tank")
        return 0.0, None
    centre = Point(row.need("x") + frame.x_shift, row.need("y"), row.need("z"))
    frame.hull.place(row, centre)
    check(row, "density", row.maybe("density"), LIQUID)
    amounts = _masses(row)
    if not amounts:
        return BAD, centre
    first = amounts[0]
    if first.value <= 0.0:
        expected = f"some liquid in a tank that is {state}"
        _contradiction(row, first.column, quoted(row.raw(first.column)), expected)
    for other in amounts[1:]:
        apart = abs(first.value - other.value)
        if apart > _MASS_AGREES * first.value and apart > first.rounding + other.rounding:
            found = f"{first.value:.6g} t from {first.name}, {other.value:.6g} t from {other.name}"
            _contradiction(row, first.column, found, "two masses that agree within 0.5 %")
    return first.value, centre


def _masses(row: Row) -> list[_Amount]:
    """Every way in which the row tells the mass, the most direct first; none after a defect."""
    box = row.choice("shape", ("box",), "") == "box"
    ways = [("mass",), ("volume", "density")]
    if box and row.raw("level"):
        ways.append(("length", "breadth", "level", "density"))
    elif (
        row.raw("level") and not row.raw("mass") and not row.raw("volume") and not row.raw("shape")
    ):
        expected = "the mass or the volume beside the level, or shape box with length and breadth"
        _contradiction(row, "level", quoted(row.raw("level")), expected)
        return []
    started = [way for way in ways if row.raw(way[-2] if len(way) > 1 else way[0])]
    whole = [way for way in started if all(row.raw(c) for c in way)]
    if not whole:
        for column in started[0] if started else ():
            if not row.raw(column):
                row.missing(column, "what the mass of the liquid is worked out from")
        if not started and row.raw("shape").casefold() in ("", "box"):
            _contradiction(row, "mass", "no mass", "mass, or volume and density, of the liquid")
    return [_product(row, way) for way in whole]


@dataclass(frozen=True, slots=True)
class _Amount:
    """A mass [t], where it comes from, and how far the rounding of what was written moves it."""

    column: str
    name: str
    value: float
    rounding: float


def _product(row: Row, columns: tuple[str, ...]) -> _Amount:
    value = 1.0
    share = 0.0
    for column in columns:
        factor = row.need(column)
        value *= factor
        share += _half_step(row, column) / factor if factor else 0.0
    return _Amount(columns[0], " x ".join(columns), value, share * value)


def _half_step(row: Row, column: str) -> float:
    """Half a unit of the last digit written, in inside units; zero for fractions and powers."""
    spec = row.sheet.placed[column]
    match = re.fullmatch(r"[+-]?\d*(?:[.,](\d*))?", row.raw(column))
    if match is None or spec.unit is None or spec.column.quantity is None:
        return 0.0
    return to_inside(0.5 * 10.0 ** -len(match[1] or ""), spec.unit, spec.column.quantity)


def _free_surface(row: Row, state: _State | None) -> tuple[float, str]:
    """Free-surface moment [t m] and how it was found; zero unless the tank is slack."""
    fsm = row.maybe("fsm")
    if state != "slack":
        _check_no_surface(row, state)
        if state == "pressed full" and fsm is not None and fsm > 0.0:
            expected = "no free surface in a tank that is pressed full"
            _contradiction(row, "fsm", quoted(row.raw("fsm")), expected)
        return 0.0, ""
    inertias: list[tuple[str, float]] = []
    second, length, breadth = (row.maybe(c) for c in ("second moment", "length", "breadth"))
    if second is not None:
        inertias.append(("density x second moment of area", second))
    if length is not None and breadth is not None:
        cube = breadth * breadth * breadth  # a power would overflow with an error
        inertias.append(("density x length x breadth^3 / 12", length * cube / 12.0))
    elif length is not None or breadth is not None:
        row.missing("length" if length is None else "breadth", "length and breadth of the surface")
        return BAD, ""
    found = [("as recorded", fsm)] if fsm is not None else []
    if inertias and not row.raw("density"):
        if not found:
            row.missing("density", "density, for the free-surface moment")
            return BAD, ""
    else:
        found += [(how, (row.maybe("density") or BAD) * inertia) for how, inertia in inertias]
    return _agreed(row, found)


def _check_no_surface(row: Row, state: _State | None) -> None:
    """Only a slack tank has a surface; of a box length and breadth give the volume too."""
    names = ["second moment"] if row.raw("shape") else ["second moment", "length", "breadth"]
    said = [c for c in names if row.raw(c)]
    if state is None or said in (["length"], ["breadth"]) or not said:
        return
    expected = f"no surface of the liquid in a tank that is {state}, or state slack"
    _contradiction(row, said[0], quoted(row.raw(said[0])), expected)


def _agreed(row: Row, found: list[tuple[str, float]]) -> tuple[float, str]:
    """The first free-surface moment, when it is above zero and the others agree."""
    if not found:
        expected = "fsm, second moment, or length and breadth of the surface in a slack tank"
        _contradiction(row, "fsm", "no free surface", expected)
        return BAD, ""
    how, fsm = found[0]
    if fsm <= 0.0:
        expected = "a free-surface moment above zero in a slack tank"
        _contradiction(row, "fsm", f"{fsm:g} t m, {how}", expected)
    for other_how, other in found[1:]:
        if abs(fsm - other) > _FSM_AGREES * fsm > 0.0:
            text = f"{fsm:.6g} t m {how}, {other:.6g} t m from {other_how}"
            _contradiction(row, "fsm", text, "free-surface moments that agree within 1 %")
    return fsm, how


def _contradiction(row: Row, column: str, found: str, expected: str) -> None:
    row.fault(column, "tank-contradiction", found, expected)
