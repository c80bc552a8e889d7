"""The ledger from as-inclined to lightship: its lines, sums and self-check."""

from __future__ import annotations

from typing import TYPE_CHECKING

from incline.record import Point
from incline.result import Ledger, LedgerLine

if TYPE_CHECKING:
    from incline.moments import Placing
    from incline.record import Trial

__all__ = ["balance", "lines_of", "summarise", "test_weight_lines"]


def lines_of(trial: Trial) -> tuple[LedgerLine, ...]:
    """Ledger lines other than test weights: tank liquids and people (off), then the items."""
    tanks = [
        LedgerLine(
            action="deduct",
            name=t.name,
            mass=t.mass,
            centre=t.centre,
            to=None,
            source="tanks",
            stated=t.stated,
        )
        for t in trial.tanks
        if t.centre is not None and t.mass > 0.0
    ]
    people = [
        LedgerLine(
            action="deduct",
            name=p.name,
            mass=p.mass,
            centre=p.centre,
            to=None,
            source="people",
            stated=p.stated,
        )
        for p in trial.people
        if p.mass is not None and p.centre is not None
    ]
    items = [
        LedgerLine(
            action=i.action,
            name=i.name,
            mass=i.mass,
            centre=i.centre,
            to=i.to,
            source="ledger",
            stated=i.stated,
        )
        for i in trial.items
    ]
    return (*tanks, *people, *items)


def test_weight_lines(trial: Trial, placing: Placing) -> tuple[LedgerLine, ...]:
    """The test weights where they start, as the drafts were read with them."""
    return tuple(
        LedgerLine(
            action="deduct",
            name=w.id,
            mass=w.mass,
            centre=Point(float(x), float(y), float(z)),
            to=None,
            source="test weights",
        )
        for w, x, y, z in zip(
            trial.weights,
            placing.start_x,
            placing.y @ placing.start,
            placing.z @ placing.start,
            strict=True,
        )
    )


def balance(
    lines: tuple[LedgerLine, ...],
    displacement: float,
    inclined: tuple[float | None, float | None, float | None],
    light: tuple[float | None, float | None, float | None],
) -> float:
    """Largest sum, over the axes known, of the moments of all parts about lightship G [t m].

    Each part stands once with its sign: the ship as inclined, deductions (minus), additions, and a
    relocated item at its old place (minus) and its new one. Zero to rounding.
    """
    sums = []
    for axis, whole, centre in zip("xyz", inclined, light, strict=True):
        if whole is None or centre is None:
            continue
        total = displacement * (whole - centre)
        for line in lines:
            arm = getattr(line.centre, axis) - centre
            if line.action == "add":
                total += line.mass * arm
            else:
                total -= line.mass * arm
            if line.to is not None:
                total += line.mass * (getattr(line.to, axis) - centre)
        sums.append(abs(total))
    return max(sums)


def summarise(lines: tuple[LedgerLine, ...], residual: float) -> Ledger:
    """Sums by action [t] beside the lines; ``residual`` from `balance`."""
    total = {
        action: sum(line.mass for line in lines if line.action == action)
        for action in ("deduct", "add", "relocate")
    }
    return Ledger(
        lines=lines,
        deduct=total["deduct"],
        add=total["add"],
        relocate=total["relocate"],
        balance=residual,
    )
