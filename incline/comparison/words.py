"""A comparison as text for a terminal and as JSON."""

from __future__ import annotations

import json
import textwrap
from typing import TYPE_CHECKING, Any

import incline
from incline.comparison.judging import GIVEN
from incline.situations import situations
from incline.units import LENGTH, MASS, SYSTEMS

if TYPE_CHECKING:
    from incline.comparison.figures import Figures
    from incline.comparison.judging import Comparison, Difference, Judgement
    from incline.result import Estimate
    from incline.situations import Limit, Situation
    from incline.units import UnitSystem

__all__ = [
    "FORMAT", "credit", "list_situations", "recommendation", "show_comparison", "to_json",
]  # fmt: skip

FORMAT = 1
_NAMES = {
    "displacement": "displacement", "vcg": "KG", "lcg": "LCG", "tcg": "TCG",
    "weight changes": "sum of weight changes",
}  # fmt: skip
_OF = {"displacement": "", "vcg": "", "lcg": " of L", "weight changes": " of displacement"}
_WIDTH = 80
_RULE = "-" * _WIDTH
_ACCEPTANCE = "Acceptance rests with the flag administration or its recognised organisation."
_VERIFY = "verify against the current edition"


def list_situations() -> str:
    """Every situation with its limits, what follows, source and evidence."""
    lines = ["Situations for incline compare OLD NEW --situation ID"]
    for s in situations():
        lines += ["", f"{s.id} ({s.rule_set})", *_wrapped(s.title, "  ")]
        for x in s.limits:
            said = f"{_NAMES[x.quantity]} {_in_words(x)}, else {x.follows} [{credit(x)}]"
            lines += _wrapped(said, "  - ")
        lines += _wrapped(s.note, "  ") if s.note else []
    return "\n".join(lines)


def _in_words(limit: Limit) -> str:
    points = limit.percent_at
    of = _OF[limit.quantity]
    if not limit.by_length:
        return f"within {points[0][1]:g} %{of}"
    ends = [f"{p:g} % at {a:g} m" for a, p in points]
    return f"within {' to '.join(ends)} of length, straight between{of}"


def credit(limit: Limit) -> str:
    """Source, edition and evidence of a limit."""
    known = limit.evidence if limit.evidence == "read" else f"{limit.evidence}: {_VERIFY}"
    return f"{limit.source}; {limit.edition}; {known}"


def show_comparison(comparison: Comparison, units: str | None = None) -> str:
    """The whole comparison; ``units`` are those of the new or the old trial unless given."""
    c = comparison
    system = SYSTEMS[units or c.new.units or c.old.units or "metric"]
    lines = [f"Old: {c.old.name} ({c.old.path})", f"New: {c.new.name} ({c.new.path})"]
    lines = [*(row for line in lines for row in _wrapped(line)), _RULE]
    lines.append(f"{'':<16}{'old':>10}{'new':>10}{'change':>10}{'in %':>8}{'U (95 %)':>9}")
    lines += [_difference(d, system) for d in c.differences]
    lines.append("In % of the old value, LCG in % of L; LCG from the after perpendicular.")
    if c.situation is not None:
        lines += ["", *_judged(c, c.situation, system)]
    notes = [*c.remarks, *([c.situation.note] if c.situation and c.situation.note else [])]
    if notes:
        lines += ["", "Remarks", *(line for note in notes for line in _wrapped(note, "  - "))]
    lines += ["", _ACCEPTANCE]
    if c.situation is None:
        lines += ["", "No situation was named: nothing is judged.", "", list_situations()]
    return "\n".join(lines)


def _judged(c: Comparison, situation: Situation, system: UnitSystem) -> list[str]:
    """The situation, the length, every limit and the verdict."""
    lines = _wrapped(f"{situation.id}: {situation.title} ({situation.rule_set})")
    if c.length is None:
        lines.append("  L is not known (--length gives it)")
    else:
        shown = system.show(c.length, LENGTH, system.length, 2)
        more = "" if c.length_from == GIVEN else " (--length where the rules define it otherwise)"
        lines += _wrapped(f"L = {shown} {system.length}, {c.length_from}{more}", "  ")
    for judgement in c.judgements:
        lines += _judgement(judgement, system)
    return [*lines, "", *_verdict(c), *_wrapped(recommendation(c, system))]


def _wrapped(text: str, first: str = "") -> list[str]:
    """Lines no wider than the screen, broken between words only."""
    return textwrap.wrap(
        text, _WIDTH, initial_indent=first, subsequent_indent=" " * len(first),
        break_long_words=False, break_on_hyphens=False,
    )  # fmt: skip


def _difference(d: Difference, system: UnitSystem) -> str:
    is_mass = d.quantity == "displacement"
    kind, unit, places = (MASS, system.mass, 2) if is_mass else (LENGTH, system.length, 3)

    def number(value: float | None) -> str:
        return "-" if value is None else system.show(value, kind, unit, places)

    percent = "-" if d.percent is None else f"{d.percent:+.2f}"
    unknown = "" if d.change is None else "u not stated"
    said = {None: unknown, True: "significant", False: "not significant"}[d.significant]
    label = f"{_NAMES[d.quantity]}, {unit}"
    return (
        f"{label:<16}{number(d.old.value):>10}{number(d.new.value):>10}"
        f"{number(d.change):>10}{percent:>8}{number(d.U):>9}  {said}"
    ).rstrip()


def _judgement(j: Judgement, system: UnitSystem) -> list[str]:
    name, of = _NAMES[j.limit.quantity], _OF[j.limit.quantity]
    allowed = "a limit that depends on L" if j.allowed is None else f"{j.allowed:.4g} %{of}"
    if j.amount is not None:
        is_mass = j.limit.quantity in ("displacement", "weight changes")
        kind, unit, places = (MASS, system.mass, 2) if is_mass else (LENGTH, system.length, 3)
        allowed += f" ({system.show(j.amount, kind, unit, places)} {unit})"
    status = {"beyond": "BEYOND", "not judged": "NOT JUDGED"}.get(j.status, j.status)
    found = "" if j.found is None else f"{j.found:.4g} % against "
    lines = _wrapped(f"{name}: {found}{allowed}: {status}", "  ")
    if j.status == "beyond":
        lines += _wrapped(f"what follows: {j.limit.follows}", "    ")
    if j.why:
        lines += _wrapped(j.why, "    ")
    if j.open:
        lines.append("    the limit lies within the uncertainty (95 %) of the difference")
    return [*lines, *_wrapped(credit(j.limit), "    ")]


def _verdict(c: Comparison) -> list[str]:
    if c.verdict == "within":
        return ["Within every limit of this situation."]
    lines = []
    if c.verdict == "beyond":
        lines += _wrapped(f"BEYOND the limits of this situation: {'; '.join(c.follows)}.")
    if any(j.status == "not judged" for j in c.judgements):
        lines.append("NOT EVERY LIMIT COULD BE JUDGED: see what is missing above.")
    return lines


def recommendation(c: Comparison, system: UnitSystem = SYSTEMS["metric"]) -> str:
    """What to take as a sister's lightship (MSC/Circ.1158); empty in other situations."""
    if c.situation is None or not c.situation.sister:
        return ""
    if c.verdict != "within":
        return "MSC/Circ.1158: the lead ship's figures serve only within every limit."

    def metres(value: float | None) -> str:
        if value is None:
            return "not stated"
        return f"{system.show(value, LENGTH, system.length, 3)} {system.length}"

    weight = system.show(c.new.displacement.value or 0.0, MASS, system.mass, 2)
    start = (
        f"MSC/Circ.1158: take the displacement found, {weight} {system.mass}, and the LCG found,"
        f" {metres(c.new.lcg.value)}, with the higher of the lead ship's KG"
        f" ({metres(c.old.vcg.value)}) and the calculated one ({metres(c.new.vcg.value)})"
    )
    old, new = c.old.vcg.value, c.new.vcg.value
    if old is None or new is None:
        return f"{start}: KG cannot be chosen until both are known."
    return f"{start}: KG {metres(max(old, new))}."


def to_json(comparison: Comparison) -> str:
    """The comparison as JSON text [t, m, %]; the same comparison gives the same bytes."""
    c = comparison
    found: dict[str, Any] = {
        "format": FORMAT,
        "program": {"name": "incline", "version": incline.__version__},
        "old": _source(c.old),
        "new": _source(c.new),
        "situation": None if c.situation is None else c.situation.id,
        "length_m": c.length,
        "length_from": c.length_from,
        "weight_changes_t": None if c.weight_changes is None else list(c.weight_changes),
        "differences": {_key(d): _change(d) for d in c.differences},
        "limits": [_limit(j) for j in c.judgements],
        "verdict": c.verdict,
        "follows": list(c.follows),
        "recommendation": recommendation(c),
        "remarks": list(c.remarks),
    }
    return json.dumps(found, indent=2, ensure_ascii=False, allow_nan=False) + "\n"


def _key(d: Difference) -> str:
    return "displacement_t" if d.quantity == "displacement" else f"{d.quantity}_m"


def _source(figures: Figures) -> dict[str, Any]:
    return {"name": figures.name, "path": figures.path, "lpp_m": figures.lpp}


def _change(d: Difference) -> dict[str, Any]:
    def side(estimate: Estimate) -> dict[str, float | None]:
        return {"value": estimate.value, "u": estimate.u, "degrees_of_freedom": estimate.dof}

    return {
        "old": side(d.old),
        "new": side(d.new),
        "difference": d.change,
        "percent": d.percent,
        "u": d.u,
        "U": d.U,
        "significant": d.significant,
    }


def _limit(j: Judgement) -> dict[str, Any]:
    return {
        "quantity": j.limit.quantity.replace(" ", "_"),
        "found_percent": j.found,
        "allowed_percent": j.allowed,
        "status": j.status,
        "follows": j.limit.follows,
        "limit_within_uncertainty": j.open,
        "note": j.why,
        "source": j.limit.source,
        "edition": j.limit.edition,
        "evidence": j.limit.evidence,
    }
