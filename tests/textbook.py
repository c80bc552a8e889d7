"""Trials built in Python around the numbers of an exercise: displacement and KM are given."""

from __future__ import annotations

import datetime
from dataclasses import replace

from scipy import constants

from incline.errors import Where
from incline.record import (
    Device,
    DraftReading,
    HydrostaticTable,
    Item,
    Move,
    Occasion,
    Point,
    Reading,
    Sample,
    Settings,
    Shift,
    Trial,
    Vessel,
    Weight,
)

HERE = Where("textbook")
FOOT = constants.foot
LONG_TON = constants.long_ton / 1000.0
LPP, DRAFT = 60.0, 3.0


def table(
    displacement: float, km: float, *, kb: float = 1.5, lcb: float = LPP / 2
) -> HydrostaticTable:
    """Fresh-water table whose row at draft 3 m has the displacement [t] and KM [m] asked for."""
    drafts = (2.0, 3.0, 4.0)

    def row(middle: float) -> tuple[tuple[float, ...], ...]:
        return ((middle, middle, middle),)

    return HydrostaticTable(
        drafts=drafts,
        trims=(0.0,),
        volume=(tuple(displacement * d / DRAFT for d in drafts),),
        lcb=row(lcb),
        kb=row(kb),
        bmt=row(km - kb),
        lcf=row(LPP / 2),
        area=None,
        bml=row(LPP**2 / 12.0 / DRAFT),
        bml_basis="tabulated",
        where=HERE,
    )


def level_drafts() -> tuple[DraftReading, ...]:
    return tuple(
        DraftReading(x=x, side=side, y=y, draft=DRAFT, freeboard=None, where=HERE)
        for x in (0.0, LPP)
        for side, y in (("P", -5.0), ("S", 5.0))
    )


def readings(values: dict[str, list[float]], quantity: str = "length") -> tuple[Reading, ...]:
    return tuple(
        Reading(
            shift=n, device=device, kind="single", values=(v,), quantity=quantity,
            note="", excluded="", where=HERE,
        )
        for device, vs in values.items()
        for n, v in enumerate(vs)
    )  # fmt: skip


def trial(
    displacement: float,
    km: float,
    moments: list[float],
    values: dict[str, list[float]],
    lengths: dict[str, float | None],
    quantity: str = "length",
    items: tuple[Item, ...] = (),
) -> Trial:
    """Moments given directly; no test weights, so that the ship as inclined is the lightship."""
    return Trial(
        folder="textbook",
        digest="",
        vessel=Vessel(name="Exercise", number="0", lpp=LPP, beam=10.0, depth=6.0),
        occasion=Occasion(date=datetime.date(2026, 1, 1), place="paper"),
        settings=Settings(
            x_origin="after perpendicular", units="metric", rule_set="", method=None,
            allowance=None, keel_thickness=0.0, interpolation="cubic",
        ),
        people=(),
        devices=tuple(
            Device(id=d, kind="pendulum", length=length, where=HERE) for d, length in lengths.items()
        ),
        weights=(),
        shifts=tuple(
            Shift(number=n, time="", moves=(), moment=m, where=HERE) for n, m in enumerate(moments)
        ),
        readings=readings(values, quantity),
        drafts=level_drafts(),
        samples=(
            Sample(place="alongside", depth=None, density=1.0, temperature=None, share=1.0, where=HERE),
        ),
        tanks=(),
        items=items,
        changes=(),
        table=table(displacement, km),
    )  # fmt: skip


def single_shift(
    weight: float, distance: float, deflection: float, length: float, displacement: float, km: float
) -> Trial:
    """One weight moved across and back, to both sides: the same deflection each way."""
    m = weight * distance
    return trial(
        displacement, km, [0.0, m, -m], {"P": [0.0, deflection, -deflection]}, {"P": length}
    )


def with_weight(base: Trial, mass: float, distance: float) -> Trial:
    """The same trial with the moment made by a real weight on the centreline, moved by distance."""
    ys = (0.0, distance, -distance)
    return replace(
        base,
        weights=(Weight(id="W", mass=mass, certificate="", x=30.0, z=4.0, where=HERE),),
        shifts=tuple(
            Shift(
                number=n, time="", moment=None, where=HERE,
                moves=(Move(weight="W", y=y, x=None, z=None, where=HERE),),
            )
            for n, y in enumerate(ys)
        ),
    )  # fmt: skip


def item(action: str, mass: float, z: float, y: float = 0.0, to: Point | None = None) -> Item:
    return Item(
        action=action, name=f"{action} {mass} {z} {y}", mass=mass, centre=Point(30.0, y, z), to=to,
        basis="", where=HERE,
    )  # fmt: skip
