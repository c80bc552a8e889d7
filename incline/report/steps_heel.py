"""Steps from the test weights and the readings to the slope and GM."""

from __future__ import annotations

from typing import TYPE_CHECKING

from incline.moments import place_weights
from incline.report.arithmetic import Sum, Value
from incline.report.digits import Relation
from incline.report.show import MISSING
from incline.report.steps import Board, Cell, Chapter, Head, Lay
from incline.report.steps_readings import readings_chapters
from incline.report.steps_units import Units
from incline.report.text import markup

if TYPE_CHECKING:
    from incline.moments import Placing
    from incline.record import Trial
    from incline.report.document import Sheet
    from incline.result import ShiftMoment

__all__ = ["heel_chapters"]


def heel_chapters(sheet: Sheet) -> tuple[Chapter, ...]:
    """Moments by shift, tangents of every reading, and, for a straight line, slope and GM."""
    return (_moments(sheet), *readings_chapters(sheet))


def _moments(sheet: Sheet) -> Chapter:
    """Mass times travel of every weight that is away from its start, and their sums."""
    trial, heel = sheet.reduction.trial, sheet.reduction.outcome.heel
    unit = sheet.show.unit("moment")
    if not trial.weights:
        return Chapter(
            "Moments by shift",
            (f"The trial gives the moments themselves [{unit}]; see the readings below.",),
        )
    rising = any(s.vertical for s in heel.shifts)
    board = _moment_board(sheet, rising=rising)
    parts: list[Board | Lay | str] = [
        "Mass w times travel from the start (index 0) of each weight that is away from it; M is "
        "their sum at the shift, to starboard.",
        board,
    ]
    if rising:
        parts.append(
            "H is the same sum upwards. A weight that rose adds H times the tangent of heel to the "
            "moment; the tangent θ is that of the fit itself, found in two rounds."
        )
        parts.append(_corrected(sheet))
    return Chapter("Moments by shift", tuple(parts))


def _moment_board(sheet: Sheet, *, rising: bool) -> Board:
    trial, show = sheet.reduction.trial, sheet.show
    length, moment = show.unit("length"), show.unit("moment")
    axes = "yz" if rising else "y"
    heads = [
        Head("shift", 0.07, left=True),
        Head("weight", 0.13, left=True),
        Head(f"w [{show.unit('mass')}]", 0.11),
    ]
    for axis in axes:
        heads += [
            Head(f"{axis}<sub>0</sub> [{length}]", 0.11),
            Head(f"{axis} [{length}]", 0.11),
            Head(f"w ({axis} − {axis}<sub>0</sub>) [{moment}]", 0.15),
        ]
    heads += [Head(f"{'MH'['yz'.index(a)]} [{moment}]", 0.15) for a in axes]
    rows: list[tuple[Cell, ...]] = []
    relations: list[Relation] = []
    placing = place_weights(trial)
    for n, shift in enumerate(sheet.reduction.outcome.heel.shifts):
        some, links = _shift_rows(sheet, placing, n, shift, axes)
        rows += some
        relations += links
    return Board("Moments of the test weights", tuple(heads), tuple(rows), tuple(relations))


def _shift_rows(
    sheet: Sheet, placing: Placing, n: int, shift: ShiftMoment, axes: str
) -> tuple[list[tuple[Cell, ...]], list[Relation]]:
    """Rows of one shift: each displaced weight, with the sums beside the last."""
    u, trial = Units(sheet.show), sheet.reduction.trial
    places = [k for k in range(len(placing.names)) if placing.change[k, n] > 0.0]
    totals = {"y": shift.transverse, "z": shift.vertical}
    sums = [u.bare("moment", totals[a], "M" if a == "y" else "H") for a in axes]
    products: dict[str, list[Value]] = {a: [] for a in axes}
    rows: list[tuple[Cell, ...]] = []
    relations: list[Relation] = []
    for i, k in enumerate(places):
        name = placing.names[k][0]
        w = next(w.mass for w in trial.weights if w.id == name)
        mass = u.recorded("mass", w, "w", among=[x.mass for x in trial.weights])
        cells: list[Cell] = [str(shift.shift) if i == 0 else "", markup(name), mass]
        for axis in axes:
            at, start = _arms(placing, k, name, axis, trial)
            ends = [u.recorded("length", v, axis, among=_all(placing, axis)) for v in (start, at)]
            product = u.bare("moment", w * (at - start), f"w{axis}")
            relations.append(Relation(product, mass * (ends[1] - ends[0])))
            products[axis].append(product)
            cells += [*ends, product]
        last = i == len(places) - 1
        rows.append((*cells, *(sums if last else [""] * len(axes))))
    if not places:
        rows.append((str(shift.shift), MISSING, "", *[""] * (3 * len(axes)), *sums))
    relations += [
        Relation(total, Sum(tuple(products[a]), "Σ")) for a, total in zip(axes, sums, strict=True)
    ]
    return rows, relations


def _all(placing: Placing, axis: str) -> list[float]:
    return [float(v) for v in getattr(placing, axis)]


def _arms(placing: Placing, k: int, name: str, axis: str, trial: Trial) -> tuple[float, float]:
    """Where a weight stands and where it started [m]."""
    arms = getattr(placing, axis)
    index = [w.id for w in trial.weights].index(name)
    return float(arms[k]), float(arms @ placing.start[:, index])


def _corrected(sheet: Sheet) -> Board:
    """Moments in the fit where weights rose."""
    u, heel, unit = Units(sheet.show), sheet.reduction.outcome.heel, sheet.show.unit("moment")
    fitted = {p.shift: p.moment for p in heel.points}
    rows: list[tuple[Cell, ...]] = []
    relations: list[Relation] = []
    for s in heel.shifts:
        if s.shift not in fitted:
            continue
        across, up = u.bare("moment", s.transverse, "M"), u.bare("moment", s.vertical, "H")
        whole = u.bare("moment", fitted[s.shift], "M_f")
        heeled = (fitted[s.shift] - s.transverse) / s.vertical if s.vertical else 0.0
        theta = u.ratio(heeled, "θ", least=5)
        relations.append(Relation(whole, across + up * theta))
        rows.append((str(s.shift), across, up, theta, whole))
    heads = (
        Head("shift", 0.12, left=True),
        Head(f"M [{unit}]", 0.22),
        Head(f"H [{unit}]", 0.22),
        Head("θ", 0.22),
        Head(f"M + H θ [{unit}]", 0.22),
    )
    return Board("Moments in the fit", heads, tuple(rows), tuple(relations))
