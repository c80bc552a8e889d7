"""Steps from GM to the centre of gravity as inclined."""

from __future__ import annotations

from typing import TYPE_CHECKING

from incline.report.arithmetic import Power, Sum, Term
from incline.report.steps import Chapter, Lay
from incline.report.steps_hydrostatics import shifts_draft
from incline.report.steps_units import Units

if TYPE_CHECKING:
    from incline.record import Tank
    from incline.report.document import Sheet

__all__ = ["gravity_chapters"]


def gravity_chapters(sheet: Sheet) -> tuple[Chapter, ...]:
    """Free surfaces, and the centre of gravity as inclined."""
    return (_free_surfaces(sheet), _gravity(sheet))


def _free_surfaces(sheet: Sheet) -> Chapter:
    state, u = sheet.reduction.outcome.as_inclined, Units(sheet.show)
    free = sheet.reduction.outcome.free_surface
    slack = [t for t in sheet.reduction.trial.tanks if t.fsm]
    total = u.of("moment", free.moment, "ΣFSM", "ΣFSM")
    rise = u.of("length", free.correction, "GGv", "GG<sub>v</sub>", 4)
    weight = u.of("mass", state.displacement, "Δ", "Δ")
    moments = tuple(u.of("moment", t.fsm, "FSM", "FSM") for t in slack)
    steps: list[Lay] = []
    for tank, moment in zip(slack, moments, strict=True):
        term, how = _surface(u, tank)
        steps.append(Lay(f"Free-surface moment, {tank.name}", moment, term, how))
    whole = Lay("Sum of the free-surface moments", total, Sum(moments, "ΣFSM"))
    if not slack:
        whole = Lay("Sum of the free-surface moments", total, how="no slack tank")
    return Chapter(
        "Free surfaces",
        (*steps, whole, Lay("Virtual rise of G", rise, total / weight)),
    )


def _surface(u: Units, tank: Tank) -> tuple[Term | None, str]:
    """How a tank's free-surface moment comes about."""
    boxlike = tank.fsm_basis.startswith("density x length")
    if not (boxlike and tank.density and tank.length and tank.breadth):
        return None, tank.fsm_basis or "as recorded"
    density = u.recorded("density", tank.density, f"ρ {tank.name}", "ρ")
    length = u.recorded("length", tank.length, f"l {tank.name}", "l")
    breadth = u.recorded("length", tank.breadth, f"b {tank.name}", "b")
    return u.as_mass(density * length * Power(breadth, 3)) / 12, ""


def _gravity(sheet: Sheet) -> Chapter:
    outcome, u = sheet.reduction.outcome, Units(sheet.show)
    state, heel = outcome.as_inclined, outcome.heel
    rise = u.of("length", outcome.free_surface.correction, "GGv", "GG<sub>v</sub>", 4)
    gm, km = u.of("length", heel.gm_fluid, "GM", "GM"), u.of("length", state.kmt, "KM", "KM")
    kg, kb = u.of("length", state.vcg, "KG", "KG"), u.of("length", state.kb, "KB", "KB")
    steps: list[Lay] = []
    fluid = u.of(
        "length", state.vcg + outcome.free_surface.correction, "KG fluid", "KG<sub>f</sub>"
    )
    if heel.method == "straight-line":
        solid = u.of(
            "length", heel.gm_fluid + outcome.free_surface.correction, "GM solid", "GM<sub>s</sub>"
        )
        steps += [
            Lay("GM, liquids held", solid, gm + rise),
            Lay("KG, solid", kg, km - gm - rise),
        ]
    else:
        how = "by the balance at every shift, see “Methods compared”"
        steps += [
            Lay("KG, liquids free to move", fluid, how=how),
            Lay("KG, solid", kg, fluid - rise),
            Lay("GM, liquids free to move, upright", gm, km - fluid),
        ]  # fmt: skip
    if state.lcg is not None and state.lcb is not None:
        *_, tau = shifts_draft(sheet)
        lcb, lcg = (u.of("length", v, s, s) for v, s in ((state.lcb, "LCB"), (state.lcg, "LCG")))
        if state.zb is not None:  # the hull's own B, at the listed waterline
            kb = u.of("length", state.zb, "z_B", "z<sub>B</sub>")
            how = "integrated from the offsets, as LCB"
            steps.append(Lay("Height of B at the listed waterline", kb, how=how))
        steps.append(Lay("Longitudinal centre of gravity", lcg, lcb + tau * (kg - kb)))
    if state.tcg is not None and state.list_tan is not None:
        place = "λ" if sheet.reduction.trial.changes else "list read"
        lean = u.ratio(state.list_tan, place, "λ")
        tcg = u.of("length", state.tcg, "TCG", "TCG", 4)
        if heel.method == "straight-line" or heel.levers is None:
            steps.append(Lay("Transverse centre of gravity", tcg, gm * lean))
        else:
            n = u.of("length", heel.levers.start, "N list", "N<sub>λ</sub>", 4)
            steps += [
                Lay("Lever of buoyancy N at the list", n, how="see “Methods compared”"),
                Lay("Transverse centre of gravity", tcg, n - fluid * lean),
            ]
    return Chapter("Centre of gravity as inclined, test weights at their start", tuple(steps))
