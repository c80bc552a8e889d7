"""Differences of two lightships, whether they are significant, and which limits they exceed."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING, Literal

from incline.budget import coverage_factor, effective_dof
from incline.result import Estimate

if TYPE_CHECKING:
    from collections.abc import Sequence

    from incline.comparison.figures import Figures
    from incline.situations import Limit, Situation

__all__ = ["GIVEN", "Comparison", "Difference", "Judgement", "compare"]

Quantity = Literal["displacement", "vcg", "lcg", "tcg"]
_QUANTITIES: tuple[Quantity, ...] = ("displacement", "vcg", "lcg", "tcg")
_NAMES = {"displacement": "displacement", "vcg": "KG", "lcg": "LCG", "tcg": "TCG"}
GIVEN = "as given"
_ROUNDING = 1e-9  # share of a limit; a difference equal to the limit is within
_LENGTHS_DIFFER = 1e-3  # share of the length


@dataclass(frozen=True, slots=True, kw_only=True)
class Difference:
    """New less old [t, m].

    ``percent`` is signed, of the old value for displacement and VCG, of L for LCG, None for TCG;
    ``scale`` is what it is of [t, m]. ``u`` and the expanded ``U`` (95 %) are those of the
    difference, None unless both lightships state an uncertainty.
    """

    quantity: Quantity
    old: Estimate
    new: Estimate
    change: float | None
    scale: float | None
    percent: float | None
    u: float | None
    U: float | None

    @property
    def significant(self) -> bool | None:
        """Whether the difference is more than its expanded uncertainty; None when not known."""
        if self.change is None or self.U is None:
            return None
        return abs(self.change) > self.U


@dataclass(frozen=True, slots=True, kw_only=True)
class Judgement:
    """One limit held against a difference.

    ``found`` and ``allowed`` are in percent, ``amount`` is the limit in t or m. ``why`` says what
    stands in the way of judging, or what else the reader must know. ``open`` is True when the
    limit lies within the expanded uncertainty of the difference.
    """

    limit: Limit
    status: Literal["within", "beyond", "not judged"]
    found: float | None
    allowed: float | None
    amount: float | None
    why: str
    open: bool | None


@dataclass(frozen=True, slots=True, kw_only=True)
class Comparison:
    """Two lightships compared; without a situation there are differences only.

    ``length`` is L [m] and ``length_from`` where it came from. ``weight_changes`` [t] are the
    weights added (positive) and removed (negative), None when not given.
    """

    old: Figures
    new: Figures
    situation: Situation | None
    length: float | None
    length_from: str
    weight_changes: tuple[float, ...] | None
    differences: tuple[Difference, ...]
    judgements: tuple[Judgement, ...]
    remarks: tuple[str, ...]

    @property
    def verdict(self) -> Literal["within", "beyond", "not judged"] | None:
        """Beyond when any limit is; within only when every limit is; None without a situation."""
        found = {j.status for j in self.judgements}
        if self.situation is None:
            return None
        if "beyond" in found:
            return "beyond"
        return "within" if found == {"within"} else "not judged"

    @property
    def follows(self) -> tuple[str, ...]:
        """What the limits exceeded lead to, each once."""
        beyond = [j.limit.follows for j in self.judgements if j.status == "beyond"]
        return tuple(dict.fromkeys(beyond))


def compare(
    old: Figures,
    new: Figures,
    situation: Situation | None = None,
    *,
    length: float | None = None,
    weight_changes: Sequence[float] | None = None,
) -> Comparison:
    """Compare ``new`` with ``old``, the earlier, approved, calculated or lead ship's lightship.

    ``length`` [m] is the L of the rules; without it the length between perpendiculars counts.
    ``weight_changes`` [t] are the weights added (positive) and removed (negative).
    """
    length, length_from, remarks = _length(old, new, length)
    differences = {q: _difference(q, old, new, length) for q in _QUANTITIES}
    changes = None if weight_changes is None else tuple(weight_changes)
    limits = () if situation is None else situation.limits
    missing = [d for d in differences.values() if d.change is None]
    remarks += [
        f"{_NAMES[d.quantity]} cannot be compared: {_not_stated(d)}."
        for d in missing
        if situation is None or d.quantity not in {limit.quantity for limit in limits}
    ]
    if any(d.u is not None for d in differences.values()):
        remarks.append(
            "The uncertainty of a difference takes the two lightships' errors as independent; what"
            " they share (one hydrostatic table, one estimate in both ledgers) makes it smaller."
        )
    return Comparison(
        old=old,
        new=new,
        situation=situation,
        length=length,
        length_from=length_from,
        weight_changes=changes,
        differences=tuple(differences.values()),
        judgements=tuple(
            _weights_judged(limit, length, differences["displacement"], changes)
            if limit.quantity == "weight changes"
            else _judged(limit, length, differences[limit.quantity])
            for limit in limits
        ),
        remarks=tuple(remarks),
    )


def _length(old: Figures, new: Figures, given: float | None) -> tuple[float | None, str, list[str]]:
    """L [m], where it came from, and a remark when the two ships' lengths differ."""
    remarks = []
    a, b = old.lpp, new.lpp
    if a is not None and b is not None and abs(a - b) > _LENGTHS_DIFFER * a:
        used = "given" if given is not None else "old"
        remarks.append(
            "The two lightships state lengths between perpendiculars that differ by"
            f" {100.0 * abs(a - b) / a:.2g} %; the {used} one counts as L."
        )
    if given is not None:
        return given, GIVEN, remarks
    if a is not None:
        return a, "length between perpendiculars of the old lightship", remarks
    if b is not None:
        return b, "length between perpendiculars of the new lightship", remarks
    return None, "not known", remarks


def _difference(quantity: Quantity, old: Figures, new: Figures, length: float | None) -> Difference:
    a: Estimate = getattr(old, quantity)
    b: Estimate = getattr(new, quantity)
    change = None if a.value is None or b.value is None else b.value - a.value
    scale = {"displacement": a.value, "vcg": a.value, "lcg": length}.get(quantity)
    percent = None if change is None or not scale else 100.0 * change / abs(scale)
    u = expanded = None
    if change is not None and a.u is not None and b.u is not None:
        u = math.hypot(a.u, b.u)
        parts = [(e.u**2, e.dof) for e in (a, b) if e.u is not None and e.dof is not None]
        expanded = u * coverage_factor(effective_dof(u**2, parts))
    return Difference(
        quantity=quantity, old=a, new=b, change=change, scale=scale, percent=percent, u=u,
        U=expanded,
    )  # fmt: skip


def _not_stated(difference: Difference) -> str:
    """Which of the two lightships lacks the quantity."""
    lacking = [
        word for word, e in (("old", difference.old), ("new", difference.new)) if e.value is None
    ]
    ships = "neither lightship states it" if len(lacking) == 2 else ""
    return ships or f"the {lacking[0]} lightship does not state it"


def _judged(limit: Limit, length: float | None, difference: Difference) -> Judgement:
    allowed = limit.percent(length)
    if difference.change is None:
        return _open(limit, allowed, _not_stated(difference))
    if allowed is None or (difference.scale is None and limit.quantity == "lcg"):
        return _open(limit, allowed, "the length is not known; give it with --length")
    if difference.percent is None or difference.scale is None:
        return _open(limit, allowed, "the old value is zero, so that there is no percentage of it")
    return _held(limit, allowed, abs(difference.percent), abs(difference.scale), difference.U)


def _held(
    limit: Limit, allowed: float, found: float, scale: float, expanded: float | None, why: str = ""
) -> Judgement:
    """A difference of ``found`` percent of ``scale`` against ``allowed`` percent."""
    amount = allowed / 100.0 * scale
    near = None if expanded is None else abs(found / 100.0 * scale - amount) <= expanded
    return Judgement(
        limit=limit,
        status="beyond" if found > allowed * (1.0 + _ROUNDING) else "within",
        found=found,
        allowed=allowed,
        amount=amount,
        why=why,
        open=near,
    )


def _open(limit: Limit, allowed: float | None, why: str) -> Judgement:
    return Judgement(
        limit=limit, status="not judged", found=None, allowed=allowed, amount=None, why=why,
        open=None,
    )  # fmt: skip


def _weights_judged(
    limit: Limit,
    length: float | None,
    displacement: Difference,
    changes: tuple[float, ...] | None,
) -> Judgement:
    """The sum of all weights added and removed, which is no less than what displacement changed.

    Without the weights, a change of displacement beyond the limit tells that they are beyond it.
    """
    allowed, scale, net = limit.percent(length), displacement.scale, displacement.change
    if allowed is None or scale is None or net is None:  # displacement is always stated
        return _open(limit, allowed, _not_stated(displacement))
    total = abs(net) if changes is None else math.fsum(map(abs, changes))
    if changes is None:
        judged = _held(
            limit, allowed, 100.0 * total / scale, scale, displacement.U,
            "by the change of displacement alone; the sum of the weights can only be larger",
        )  # fmt: skip
        if judged.status == "beyond":
            return judged
        why = "list every weight added and removed with --weight-change"
        return _open(limit, allowed, why)
    why, more = "", abs(net - math.fsum(changes))
    if more > max(displacement.U or 0.0, _ROUNDING * scale):
        # What was not listed is a weight too: it counts towards the sum.
        total += more
        why = (
            f"the weights listed leave {100.0 * more / scale:.2g} % of displacement unexplained,"
            " which is counted too"
        )
    return _held(limit, allowed, 100.0 * total / scale, scale, None, why)
