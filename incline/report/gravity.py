"""From GM to the centre of gravity as inclined: free surface, KG, LCG, TCG."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from incline.report.document import Sheet, note, paragraph, part
from incline.report.show import MISSING, NOT_DETERMINED, NOT_RECORDED
from incline.report.tables import Column, Row, grid, steps

if TYPE_CHECKING:
    from collections.abc import Iterable

    from incline.record import Tank

__all__ = ["centre_of_gravity"]


def centre_of_gravity(sheet: Sheet) -> list[Any]:
    """Tanks with their free surfaces, then KG, LCG and TCG line by line."""
    return [
        *part("Liquids aboard and their free surfaces"),
        *_tanks(sheet),
        *part("Centre of gravity as inclined, test weights aboard at their start", 60.0),
        steps(_lines(sheet), sheet.width),
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


def _lines(sheet: Sheet) -> list[tuple[str, str, str]]:
    outcome, show = sheet.reduction.outcome, sheet.show
    state, heel, free = outcome.as_inclined, outcome.heel, outcome.free_surface
    weight = show.number(state.displacement, "mass")
    km, gm, rise = (show.number(v, "length") for v in (state.kmt, heel.gm_fluid, free.correction))
    return [
        (
            "free-surface correction = ΣFSM / Δ",
            f"{show.number(free.moment, 'moment')} / {weight}",
            sheet.full(free.correction, "length"),
        ),
        (
            "GM solid = GM fluid + correction",
            f"{gm} + {rise}",
            sheet.full(heel.gm_fluid + free.correction, "length"),
        ),
        (
            "KG = KM − GM fluid − correction",
            f"{km} − {gm} − {rise}",
            sheet.full(state.vcg, "length"),
        ),
        _lcg_line(sheet),
        _tcg_line(sheet),
    ]


def _lcg_line(sheet: Sheet) -> tuple[str, str, str]:
    state, show = sheet.reduction.outcome.as_inclined, sheet.show
    formula = "LCG = LCB + τ (KG − KB)"
    if state.lcg is None or state.lcb is None:
        return formula, "see the remarks", NOT_DETERMINED
    tau = state.trim / sheet.reduction.trial.vessel.lpp
    values = (
        f"{show.number(state.lcb, 'length')} + ({show.plain(tau, 6)}) × "
        f"({show.number(state.vcg, 'length')} − {show.number(state.kb, 'length')})"
    )
    return formula, values, sheet.full(state.lcg, "length")


def _tcg_line(sheet: Sheet) -> tuple[str, str, str]:
    state, heel, show = (
        sheet.reduction.outcome.as_inclined,
        sheet.reduction.outcome.heel,
        sheet.show,
    )
    formula = "TCG = GM fluid × tangent of list"
    if state.tcg is None:
        return formula, "see the remarks", NOT_DETERMINED
    values = f"{show.number(heel.gm_fluid, 'length', 4)} × ({show.plain(state.list_tan, 6)})"
    return formula, values, sheet.full(state.tcg, "length", 4)
