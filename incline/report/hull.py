"""The hull in the report: how it was integrated, and what the methods of heel make of it."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING, Any

from incline.report.canvas_backend import FigureFlowable
from incline.report.document import Sheet, note, paragraph, part
from incline.report.figures_hull import lever_plot, section_plot
from incline.report.hull_tables import bodies, layers, thinned
from incline.report.show import MISSING, signed
from incline.report.tables import Column, Row, grid

if TYPE_CHECKING:
    from incline.result import HullEntry

__all__ = ["hull_entry", "methods"]


def hull_entry(sheet: Sheet) -> list[Any]:
    """What was integrated, what it leaves open, and the sections; nothing without a hull."""
    trial, ship = sheet.reduction.trial, sheet.reduction.outcome.as_inclined
    if ship.hull is None or trial.offsets is None:
        return []
    sections = FigureFlowable(section_plot(trial.offsets, ship, sheet.show, sheet.width))
    return [
        *part("Hull integrated from its offsets", sections.height + 40.0),
        paragraph(_how(sheet, ship.hull)),
        sections,
        *thinned(trial.offsets),
        *bodies(sheet, trial.offsets),
        *layers(sheet, ship.hull),
        *_misses(sheet, ship.hull),
    ]


def _how(sheet: Sheet, hull: HullEntry) -> str:
    trial, show = sheet.reduction.trial, sheet.show
    count = len(trial.offsets.bodies) if trial.offsets else 0
    whole = "one body" if count == 1 else f"{count} bodies"
    water = (
        f" The water is taken as {len(hull.layers)} layers of density." if hull.layers[1:] else ""
    )
    return (
        f"{hull.stations} stations of {whole}, cut at the trimmed, bent and listed waterline itself"
        " and integrated: sections exactly between their points, lengthwise along smooth lines"
        " through the stations. KB, BM and KM are those of the upright ship at these drafts."
        f" The deck edge stays {show.full(hull.freeboard, 'length')} clear of the water at every"
        f" shift.{water}{_overlap(sheet, hull)}"
    )


def _overlap(sheet: Sheet, hull: HullEntry) -> str:
    """Bodies that stand in one another, in a sentence with the volume counted twice."""
    if not hull.overlaps:
        return ""
    said = "; ".join(
        f"{one} and {other}, {sheet.show.full(volume, 'volume', 3)}"
        for one, other, volume in hull.overlaps
    )
    return f" Bodies stand in one another, and that volume counts twice: {said}."


def _misses(sheet: Sheet, hull: HullEntry) -> list[Any]:
    """What spacing, the trial's table and the response surface are worth."""
    show = sheet.show
    columns = (
        Column("what", 0.52, "left"),
        Column("volume [%]", 0.16),
        Column(f"KM [{show.unit('reading')}]", 0.16),
        Column(f"LCB [{show.unit('reading')}]", 0.16),
    )
    lines = [
        ("every second station left out, less all stations", hull.by_stations),
        ("points joined by arcs, less straight lines", hull.by_points),
    ]
    if hull.table is not None:
        lines.append(("the trial's hydrostatic table, not used, less the integration", hull.table))
    rows = [
        Row(
            (
                text,
                signed(f"{100.0 * miss[0]:+.3f}"),
                show.number(miss[1], "reading", 2),
                show.number(miss[2], "reading", 2),
            )
        )
        for text, miss in lines
    ]
    return [
        grid(columns, rows, sheet.width),
        note(
            "A third of the first line and the whole of the second count as uncertainties. "
            + _surface(sheet, hull)
        ),
    ]


def _surface(sheet: Sheet, hull: HullEntry) -> str:
    """The largest misses of the response surface, in a sentence."""
    if not hull.surface:
        return ""
    show = sheet.show
    mass, *lengths = hull.surface
    worst = max((m for m in lengths if not math.isnan(m)), default=0.0)
    return (
        "Uncertainties go through a response surface around this condition; against integrating the"
        " hull anew it misses, in ten draws of all inputs, at most"
        f" {show.full(mass, 'mass')} in displacement and {show.full(worst, 'reading', 3)} in KG,"
        " LCG, TCG and GM."
    )


def methods(sheet: Sheet) -> list[Any]:
    """KG by every method that could be used, and the levers they rest on."""
    heel, show = sheet.reduction.outcome.heel, sheet.show
    plot = FigureFlowable(lever_plot(heel, show, sheet.width))
    used = sheet.reduction.outcome.lightship.vcg.value
    columns = (
        Column("method", 0.40, "left"),
        Column(f"lightship KG [{show.unit('length')}]", 0.20),
        Column(f"less the method used [{show.unit('reading')}]", 0.22),
        Column(f"GM fluid [{show.unit('length')}]", 0.18),
    )
    rows = [
        Row((f"{heel.method} (used)", *_kg(sheet, used, used, heel.gm_fluid)), "total"),
        *(Row((m.method, *_kg(sheet, m.vcg, used, m.gm_fluid))) for m in heel.others),
    ]
    balance = _balance(sheet)
    return [
        *part("Methods compared", plot.height + 90.0),
        grid(columns, rows, sheet.width),
        note(
            "Equilibrium at every shift: N(t) = y of B + z of B × t = (KG + H/Δ) t + TCG + M/Δ and"
            " what free liquids add; M and H are the transverse and vertical moments of the test"
            " weights. The straight line puts KM t for N, the wall-sided formula KM t + BM t³/2,"
            " the heeled hull integrates it with the trim free and the displacement constant."
            " A KG that is too low errs to the unsafe side."
        ),
        plot,
        *balance,
    ]


def _balance(sheet: Sheet) -> list[Any]:
    """The equilibrium of every shift in numbers; nothing for a straight line."""
    outcome, show = sheet.reduction.outcome, sheet.show
    heel, ship = outcome.heel, outcome.as_inclined
    levers = heel.levers
    if heel.method == "straight-line" or levers is None or ship.tcg is None:
        return []
    length = show.unit("length")
    columns = (
        Column("shift", 0.10, "left"),
        Column("t", 0.14),
        Column(f"N(t) [{length}]", 0.15),
        Column(f"(KG + H/Δ) t [{length}]", 0.17),
        Column(f"liquids/Δ [{length}]", 0.14),
        Column(f"M/Δ [{length}]", 0.14),
        Column(f"remainder [{show.unit('reading')}]", 0.16),
    )
    rows = []
    for s, t, n, moved in zip(
        heel.shifts, levers.shifts, levers.balance, levers.liquids, strict=True
    ):
        own = (ship.vcg + s.vertical / ship.displacement) * t
        wet, moment = moved / ship.displacement, s.transverse / ship.displacement
        left = n - own - ship.tcg - wet - moment
        parts = [show.number(v, "length", 6) for v in (n, own, wet, moment)]
        remainder = show.number(left, "reading", 3)
        rows.append(Row((str(s.shift), show.plain(t, 6), *parts, remainder)))
    where = (
        "integrated at the settled waterline" if heel.method == "heeled-hull" else "KM t + BM t³/2"
    )
    return [
        *part("Balance at every shift"),
        grid(columns, rows, sheet.width),
        note(
            f"N(t), {where}, less all that stands beside it and TCG ="
            f" {show.full(ship.tcg, 'length', 6)}, leaves the remainder: nothing. t is the heel by"
            f" the fit, KG = {show.full(ship.vcg, 'length', 6)}. A reading is its device's zero"
            " plus t less the list; KG is the one that leaves the least sum of squares of the"
            " readings."
        ),
    ]


def _kg(sheet: Sheet, vcg: float | None, used: float | None, gm: float) -> tuple[str, str, str]:
    show = sheet.show
    less = MISSING if vcg is None or used is None else show.number(vcg - used, "reading", 2)
    return show.number(vcg, "length", 4), less, show.number(gm, "length", 4)
