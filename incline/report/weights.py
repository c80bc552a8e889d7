"""Test weights, where they stood at each shift, and the moments that follow."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from incline.report.document import Sheet, note, paragraph, part
from incline.report.plan import plan
from incline.report.show import NOT_RECORDED
from incline.report.tables import Column, grid

if TYPE_CHECKING:
    from collections.abc import Sequence

    from incline.record import Move, Weight

__all__ = ["weights_and_moments"]

_SIDE_BY_SIDE = 6
"""Weights in one table of positions; more go into further tables."""


def weights_and_moments(sheet: Sheet) -> list[Any]:
    """Weights with certificates, positions by shift, moments by shift."""
    trial = sheet.reduction.trial
    if not trial.weights:
        return [
            paragraph("The trial gives the moments themselves; test weights are not recorded."),
            *plan(sheet),
            *part("Moments about the start positions"),
            *_moments(sheet),
        ]
    chunks = [
        trial.weights[i : i + _SIDE_BY_SIDE] for i in range(0, len(trial.weights), _SIDE_BY_SIDE)
    ]
    return [
        *part("Test weights"),
        _weights(sheet),
        *part("Transverse positions by shift"),
        *(_positions(sheet, chunk) for chunk in chunks),
        note(
            f"y in {sheet.show.unit('length')}, + to starboard; an arrow marks the weights that "
            "moved at a shift. Where a weight also moved along the ship or up, its new x or z "
            "stands below."
        ),
        *plan(sheet),
        *part("Moments about the start positions"),
        *_moments(sheet),
    ]


def _weights(sheet: Sheet) -> Any:  # noqa: ANN401 - untyped library
    show, length = sheet.show, sheet.show.unit("length")
    columns = (
        Column("weight", 0.26, "left"),
        Column(f"mass [{show.unit('mass')}]", 0.14),
        Column(f"x at start [{length}]", 0.14),
        Column(f"z at start [{length}]", 0.14),
        Column("certificate", 0.32, "left"),
    )
    rows = [
        [
            w.id,
            show.number(w.mass, "mass", 4),
            show.number(w.x, "length"),
            show.number(w.z, "length"),
            w.certificate or NOT_RECORDED,
        ]
        for w in sheet.reduction.trial.weights
    ]
    return grid(columns, rows, sheet.width)


def _positions(sheet: Sheet, weights: Sequence[Weight]) -> Any:  # noqa: ANN401
    trial = sheet.reduction.trial
    columns = (
        Column("shift", 0.07, "left"),
        Column("time", 0.10, "left"),
        *(Column(w.id, 0.83 / _SIDE_BY_SIDE) for w in weights),
    )
    standing: dict[str, str] = {}
    rows: list[list[str]] = []
    for i, shift in enumerate(trial.shifts):
        moved = {m.weight: m for m in shift.moves}
        standing |= {name: sheet.show.number(m.y, "length") for name, m in moved.items()}
        cells = [
            _place(sheet, standing.get(w.id, NOT_RECORDED), moved.get(w.id) if i else None)
            for w in weights
        ]
        rows.append([str(shift.number), shift.time or NOT_RECORDED, *cells])
    share = sum(c.share for c in columns)
    return grid(columns, rows, sheet.width * share)


def _place(sheet: Sheet, standing: str, move: Move | None) -> str:
    if move is None:
        return standing
    lines = [f"→\N{NO-BREAK SPACE}{standing}"]
    for axis, value in (("x", move.x), ("z", move.z)):
        if value is not None:
            lines.append(f"{axis} {sheet.show.number(value, 'length')}")
    return "\n".join(lines)


def _moments(sheet: Sheet) -> list[Any]:
    show, heel = sheet.show, sheet.reduction.outcome.heel
    unit = show.unit("moment")
    columns = (
        Column("shift", 0.12, "left"),
        Column("time", 0.22, "left"),
        Column(f"transverse, to starboard [{unit}]", 0.33),
        Column(f"vertical, upwards [{unit}]", 0.33),
    )
    rows = [
        [
            str(s.shift),
            s.time or NOT_RECORDED,
            show.number(s.transverse, "moment"),
            show.number(s.vertical, "moment"),
        ]
        for s in heel.shifts
    ]
    text = (
        "Sum of mass times the change of y (transverse) and of z (vertical) since the first shift."
    )
    if any(s.vertical for s in heel.shifts):
        text += (
            " A weight that rose adds its vertical moment times the tangent of heel to the moment "
            "in the fit."
        )
    return [grid(columns, rows, sheet.width), note(text)]
