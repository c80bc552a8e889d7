"""From GM to the centre of gravity as inclined: free surface, KG, LCG, TCG."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from incline.report.document import Sheet, note, paragraph, part
from incline.report.show import MISSING, NOT_DETERMINED, NOT_RECORDED
from incline.report.tables import Column, Row, facts, grid

if TYPE_CHECKING:
    from collections.abc import Iterable

    from incline.record import Tank

__all__ = ["centre_of_gravity"]


def centre_of_gravity(sheet: Sheet) -> list[Any]:
    """Tanks with their free surfaces, then KG, LCG and TCG."""
    return [
        *part("Liquids aboard and their free surfaces"),
        *_tanks(sheet),
        *part("Centre of gravity as inclined, test weights aboard at their start", 60.0),
        facts(_found(sheet), sheet.width, abreast=2),
        note(
            "KG is solid: the virtual rise of G by slack liquids is taken out. KB, LCB and KM are "
            "at the waterline of the shifts."
        ),
    ]


def _tanks(sheet: Sheet) -> list[Any]:
    trial, show = sheet.reduction.trial, sheet.show
    if not trial.tanks:
        return [paragraph("No tanks recorded.")]
    length = show.unit("length")
    columns = (
        Column("tank", 0.17, "left"),
        Column("contents", 0.12, "left"),
        Column("state", 0.09, "left"),
        Column(f"density [{show.unit('density')}]", 0.09),
        Column(f"level [{length}]", 0.07),
        Column(f"mass [{show.unit('mass')}]", 0.09),
        *(Column(f"{axis} [{length}]", 0.08) for axis in "xyz"),
        Column(f"FSM [{show.unit('moment')}]", 0.10),
    )
    rows: list[Row] = []
    for tank in trial.tanks:
        rows.append(Row(tuple(_tank(sheet, tank))))
        if tank.sounding:
            rows.append(Row(("", f"Sounding: {tank.sounding}"), "under"))
    free = sheet.reduction.outcome.free_surface
    mass = show.number(sum(t.mass for t in trial.tanks), "mass")
    rows.append(
        Row(
            ("total", "", "", "", "", mass, "", "", "", show.number(free.moment, "moment")), "total"
        )
    )
    bases = [f"{basis}: {', '.join(names)}." for basis, names in _bases(trial.tanks).items()]
    flow: list[Any] = [grid(columns, rows, sheet.width)]
    if bases:
        flow.append(note("Free-surface moments. " + " ".join(bases)))
    return flow


def _bases(tanks: Iterable[Tank]) -> dict[str, list[str]]:
    """How free-surface moments were found, with the tanks of each way."""
    found: dict[str, list[str]] = {}
    for tank in tanks:
        if tank.fsm_basis and tank.fsm:
            found.setdefault(tank.fsm_basis, []).append(tank.name)
    return found


def _tank(sheet: Sheet, tank: Tank) -> list[str]:
    show, centre = sheet.show, tank.centre
    places = [MISSING] * 3
    if centre is not None:
        places = [show.number(v, "length") for v in (centre.x, centre.y, centre.z)]
    return [
        tank.name,
        tank.contents or NOT_RECORDED,
        tank.state,
        show.number(tank.density, "density"),
        show.number(tank.level, "length"),
        show.number(tank.mass, "mass"),
        *places,
        show.number(tank.fsm, "moment"),
    ]


def _found(sheet: Sheet) -> list[tuple[str, str]]:
    outcome = sheet.reduction.outcome
    state, heel, free = outcome.as_inclined, outcome.heel, outcome.free_surface

    def known(value: float | None, decimals: int) -> str:
        return NOT_DETERMINED if value is None else sheet.full(value, "length", decimals)

    return [
        ("GM fluid, as measured", known(heel.gm_fluid, 3)),
        ("Virtual rise of G, ΣFSM / Δ", known(free.correction, 4)),
        ("GM solid", known(heel.gm_fluid + free.correction, 3)),
        ("KG", known(state.vcg, 3)),
        ("LCG", known(state.lcg, 3)),
        ("TCG", known(state.tcg, 4)),
    ]
