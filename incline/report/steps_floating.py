"""Steps from the drafts to the displacement and the metacentre."""

from __future__ import annotations

from typing import TYPE_CHECKING

from incline.flotation import plan_waterline
from incline.report.arithmetic import Sum, Value
from incline.report.digits import Relation
from incline.report.steps import Board, Chapter, Head, Lay
from incline.report.steps_hydrostatics import hydrostatics
from incline.report.steps_units import Units

if TYPE_CHECKING:
    from incline.report.arithmetic import Term
    from incline.report.document import Sheet

__all__ = ["floating_chapters"]


def floating_chapters(sheet: Sheet) -> tuple[Chapter, ...]:
    """Waterline, water density, hydrostatics, displacement."""
    return (_waterline(sheet), _density(sheet), hydrostatics(sheet), _displacement(sheet))


_FITTED = (
    "The waterline is T = T<sub>m</sub> − τ (x − L/2) + d (1 − (2x/L − 1)²) + λ y, fitted to the "
    "drafts by least squares. Each unknown is then a sum of the drafts times factors c that depend "
    "on the places of the marks alone."
)


def _waterline(sheet: Sheet) -> Chapter:
    trial, line = sheet.reduction.trial, sheet.reduction.outcome.as_inclined.waterline
    u = Units(sheet.show)
    lpp = u.recorded("length", trial.vessel.lpp, "L", "L")
    mean = u.of("length", (line.draft_ap + line.draft_fp) / 2.0, "T_m", "T<sub>m</sub>")
    tau = u.ratio(line.tau, "tau read", "τ")
    bend = u.of("length", line.deflection or 0.0, "d", "d", 4)
    lean = u.ratio(line.list_tan or 0.0, "list read", "λ")
    found = [(mean, 0), (tau, 1)]
    found += [(bend, 2)] if line.deflection is not None else []
    found += [(lean, 3)] if line.list_tan is not None else []
    draft_ap = u.of("length", line.draft_ap, "T_A read", "T<sub>A</sub>")
    draft_fp = u.of("length", line.draft_fp, "T_F read", "T<sub>F</sub>")
    trim = u.of("length", line.trim, "trim read", "t")
    midships = u.of("length", line.draft_mid, "T_M read", "T<sub>M</sub>")
    names = ("Mean draft", "Trim over length", "Deflection amidships, + sag", "Tangent of list")
    board, sums = _marks(sheet, u, [(value, column) for value, column in found])
    steps = [Lay(names[c], value, sums[c]) for value, c in found]
    with_bend = [Lay("Draft amidships", midships, mean + bend)] if line.deflection else []
    return Chapter(
        "Waterline through the drafts",
        (
            _FITTED,
            board,
            *steps,
            Lay("Draft at the after perpendicular", draft_ap, mean + tau * lpp / 2),
            Lay("Draft at the forward perpendicular", draft_fp, mean - tau * lpp / 2),
            Lay("Trim, + by the stern", trim, tau * lpp),
            *with_bend,
        ),
    )


def _marks(sheet: Sheet, u: Units, found: list[tuple[Value, int]]) -> tuple[Board, dict[int, Sum]]:
    """The table of marks with the factors of each unknown, and the sums that give them."""
    trial, length = sheet.reduction.trial, sheet.show.unit("length")
    solve = plan_waterline(trial.drafts, trial.vessel.lpp).solve
    drafts = [
        u.recorded("length", d.draft, "T", "T", [o.draft for o in trial.drafts])
        for d in trial.drafts
    ]
    factors: dict[int, list[Value]] = {}
    for _, column in found:
        power = -1 if column in (1, 3) else 0
        factors[column] = [
            u.power_of_length(float(c), power, f"c{column}", f"c{column}", 6) for c in solve[column]
        ]
    signs = {0: "T<sub>m</sub>", 1: "τ", 2: "d", 3: "λ"}
    labels = {c: f"Σ c<sub>{'mτdλ'[c]}</sub>{chr(160)}T" for c in factors}
    told = "sum over the marks of factor × draft"
    sums = {
        c: Sum(tuple(f * t for f, t in zip(column, drafts, strict=True)), labels[c], told)
        for c, column in factors.items()
    }
    heads = [
        Head(f"x [{length}]", 0.13),
        Head(f"y [{length}]", 0.13),
        Head(f"T [{length}]", 0.14),
        *(
            Head(f"c<sub>{'mτdλ'[c]}</sub>{f' [1/{length}]' if c in (1, 3) else ''}", 0.15)
            for c in factors
        ),
    ]
    rows = [
        (
            u.recorded("length", d.x, "mark x", "x", [o.x for o in trial.drafts]),
            u.recorded("length", d.y, "mark y", "y", [o.y for o in trial.drafts]),
            t,
            *(column[i] for column in factors.values()),
        )
        for i, (d, t) in enumerate(zip(trial.drafts, drafts, strict=True))
    ]
    relations = tuple(Relation(v, v) for row in rows for v in row[:2])
    names = ", ".join(signs[c] for c in factors)
    return Board(
        f"Drafts at the marks, and the factors of {names}", tuple(heads), tuple(rows), relations
    ), sums


def _density(sheet: Sheet) -> Chapter:
    trial, u = sheet.reduction.trial, Units(sheet.show)
    among = [s.density for s in trial.samples]
    samples = [u.recorded("density", s.density, "ρ_i", "ρ", among) for s in trial.samples]
    mean = u.of("density", sheet.reduction.outcome.as_inclined.density, "ρ", "ρ", 5)
    hull = sheet.reduction.outcome.as_inclined.hull
    if hull is not None and hull.layers:
        how = "layers weighted by the volume in each, integrated"
        step = Lay("Density of the water displaced", mean, how=how)
    elif len({s.share for s in trial.samples}) == 1:
        total = Sum(tuple(samples), "Σ ρ<sub>i</sub>")
        step = Lay("Density of the water, mean of the samples", mean, total / len(samples))
    else:
        shares = [u.ratio(s.share, "share", "s", 2) for s in trial.samples]
        heavy = Sum(
            tuple(s * r for s, r in zip(shares, samples, strict=True)),
            "Σ s<sub>i</sub>\N{NO-BREAK SPACE}ρ<sub>i</sub>",
        )
        step = Lay(
            "Density of the water, mean of the samples weighted by s",
            mean,
            heavy / Sum(tuple(shares), "Σ s<sub>i</sub>"),
        )
    return Chapter("Density of the water", (step,))


def _displacement(sheet: Sheet) -> Chapter:
    trial, state = sheet.reduction.trial, sheet.reduction.outcome.as_inclined
    u = Units(sheet.show)
    density = u.of("density", state.density, "ρ", "ρ", 5)
    volume = u.of("volume", state.volume, "∇", "∇")
    weight = u.of("mass", state.displacement, "Δ", "Δ")
    hull = None if state.hull is None else trial.offsets
    share = trial.settings.allowance if hull is None else hull.allowance
    whole = 1.0 if share is None else 1.0 + share
    name = "the volume is extreme" if share is None else "a: shell and appendages"

    def heavy(some: Value) -> Term:
        term = u.as_mass(some * density)
        if share is None:
            return term
        return u.as_mass(some * density * (1 + u.ratio(share, "a", "a", 4)))

    steps = [Lay(f"Displacement; {name}", weight, heavy(volume))]
    if trial.changes:
        signs = {"aboard": 1.0, "ashore": -1.0}
        every = [c.mass for c in trial.changes]
        changes = [
            u.recorded("mass", signs[c.change] * c.mass, "w change", "w", every)
            for c in trial.changes
        ]
        before = state.displacement - sum(signs[c.change] * c.mass for c in trial.changes)
        read = u.of("volume", before / state.density / whole, "∇ read", "∇<sub>0</sub>")
        first = u.of("mass", before, "Δ read", "Δ<sub>0</sub>")
        total = Sum((first, *changes), "Δ<sub>0</sub> + Σw", "with all changes")
        steps = [
            Lay(
                "Volume when the drafts were read", read, how="at the waterline through the drafts"
            ),
            Lay(f"Displacement when the drafts were read; {name}", first, heavy(read)),
            Lay("Displacement during the shifts", weight, total),
            Lay("The same from the waterline of the shifts", weight, heavy(volume)),
        ]
    kb, bm, km = (
        u.of("length", v, s, s) for v, s in ((state.kb, "KB"), (state.bmt, "BM"), (state.kmt, "KM"))
    )
    steps.append(Lay("Height of the metacentre", km, kb + bm))
    return Chapter("Displacement and metacentre", tuple(steps))
