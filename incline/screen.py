"""The result as plain text for a terminal, in the trial's units."""

from __future__ import annotations

import math
import textwrap
from functools import partial
from typing import TYPE_CHECKING

from incline.remarks import NAMES
from incline.telling import NOTHING, TOO_FEW, groups_of, place_of, tally
from incline.units import DENSITY, LENGTH, MASS, MOMENT, SYSTEMS, VOLUME

if TYPE_CHECKING:
    from collections.abc import Sequence

    from incline.record import Trial
    from incline.result import Estimate, Outcome, Reduction, Rolling, Simulation
    from incline.units import UnitSystem

__all__ = ["show", "summary"]

_RULE = "-" * 72
_NAME = 12
"""Most characters of a device's name in the table."""


def summary(reduction: Reduction) -> str:
    """What was read from a trial that can be reduced."""
    trial = reduction.trial
    excluded = sum(1 for r in trial.readings if r.excluded)
    wrap = partial(textwrap.fill, width=80, initial_indent="  - ", subsequent_indent="    ")
    lines = [
        _title(trial),
        f"  test weights {len(trial.weights)}, shifts {len(trial.shifts)},"
        f" devices {len(trial.devices)}, readings {len(trial.readings)} ({excluded} excluded)",
        f"  draft readings {len(trial.drafts)}, water samples {len(trial.samples)},"
        f" tanks {len(trial.tanks)}, ledger items {len(trial.items)}",
        "The records read without defects and can be reduced.",
        *(["Remarks"] if reduction.remarks else []),
        *(wrap(r) for r in reduction.remarks),
    ]
    return "\n".join(lines)


def show(reduction: Reduction) -> str:
    """The whole result, a screenful or two."""
    trial, outcome = reduction.trial, reduction.outcome
    system = SYSTEMS[trial.settings.units]
    parts = [
        _title(trial),
        _RULE,
        *_as_inclined(outcome, system),
        "",
        *_heel(outcome, system),
        *_rolling(reduction.rolling, system),
        "",
        *_ledger(outcome, system),
        "",
        *_lightship(outcome, system),
    ]
    parts += _uncertainty(reduction, system)
    parts += _findings(reduction, system)
    if reduction.with_excluded is not None:
        excluded = sum(1 for r in trial.readings if r.excluded)
        parts += [
            "",
            f"With the {excluded} excluded reading(s) counted, for comparison:",
            *_lightship(reduction.with_excluded, system)[1:],
        ]
    if reduction.remarks:
        wrap = partial(textwrap.fill, width=80, initial_indent="  - ", subsequent_indent="    ")
        parts += ["", "Remarks", *(wrap(r) for r in reduction.remarks)]
    parts += [
        "",
        "u: standard uncertainty; U = k u covers 95 %, every input counted.",
        "Assumed figures are engineering judgement, not measured.",
        "Acceptance rests with the flag administration or its recognised organisation.",
    ]
    return "\n".join(parts)


def _title(trial: Trial) -> str:
    words = f"{trial.vessel.name}, {trial.occasion.date.isoformat()}, {trial.occasion.place}"
    return textwrap.fill(words, width=80, subsequent_indent="  ")


def _row(label: str, value: str, unit: str, note: str = "") -> str:
    return f"  {label:<31}{value:>11} {unit:<6}{note}".rstrip()


def _length(system: UnitSystem, value: float | None, decimals: int = 3) -> str:
    if value is None:
        return "-"
    return system.show(value, LENGTH, system.length, decimals)


def _as_inclined(outcome: Outcome, system: UnitSystem) -> list[str]:
    ship, water = outcome.as_inclined, outcome.as_inclined.waterline
    tilt = None if ship.list_tan is None else math.degrees(math.atan(ship.list_tan))
    sag = _length(system, water.deflection)
    tonnes = system.show(ship.displacement, MASS, system.mass, 2)
    places = 4 if system.name == "metric" else 3
    density = system.show(ship.density, DENSITY, system.density, places)
    cubic = system.show(ship.volume, VOLUME, system.volume, 2)
    return [
        "As inclined (test weights at their start; x from the after perpendicular)",
        _row("draft at after perpendicular", _length(system, ship.draft_ap), system.length),
        _row("draft at forward perpendicular", _length(system, ship.draft_fp), system.length),
        _row("trim, positive by the stern", _length(system, ship.trim), system.length),
        _row("deflection, positive sagging", sag, system.length),
        _row("list, positive to starboard", "-" if tilt is None else f"{tilt:.2f}", "deg"),
        _row("density of the water", density, system.density),
        _row(f"volume from the {'table' if ship.hull is None else 'hull'}", cubic, system.volume),
        _row("displacement", tonnes, system.mass),
        _row("LCB", _length(system, ship.lcb), system.length),
        _row("KB", _length(system, ship.kb), system.length),
        _row("BM", _length(system, ship.bmt), system.length),
        _row("KM", _length(system, ship.kmt), system.length),
    ]


def _heel(outcome: Outcome, system: UnitSystem) -> list[str]:
    heel, free, ship = outcome.heel, outcome.free_surface, outcome.as_inclined
    port, starboard = (math.degrees(a) for a in (heel.max_heel_port, heel.max_heel_starboard))
    lines = [
        f"Heel: {heel.method} method, {sum(not p.excluded for p in heel.points)} readings,"
        f" {port:.2f} deg port to {starboard:.2f} deg starboard",
        f"  {'device':<12}{'readings':>9}{f'GM alone [{system.length}]':>15}"
        f"{f'std. error [{system.length}]':>18}{'R squared':>12}",
    ]
    for d in heel.devices:
        r2 = "-" if d.r_squared is None else f"{d.r_squared:.6f}"
        lines.append(
            f"  {_short(d.id):<12}{d.readings:>9}{_length(system, d.gm, 4):>15}"
            f"{_length(system, d.u_gm, 4):>18}{r2:>12}"
        )
    moment = system.show(free.moment, MOMENT, system.moment, 2)
    error = f"std. error {_length(system, heel.u_gm_fluid, 4)}"
    return [
        *lines,
        _row("GM as measured (liquids free)", _length(system, heel.gm_fluid), system.length, error),
        _row("free-surface moment", moment, system.moment),
        _row("free-surface correction", _length(system, free.correction), system.length),
        _row("KG as inclined", _length(system, ship.vcg), system.length),
        _row("LCG as inclined", _length(system, ship.lcg), system.length),
        _row("TCG as inclined", _length(system, ship.tcg), system.length),
    ]


def _short(name: str) -> str:
    """A device's name in its column."""
    return name if len(name) <= _NAME else f"{name[: _NAME - 3]}..."


def _rolling(rolling: Rolling | None, system: UnitSystem) -> list[str]:
    if rolling is None:
        return []
    verdict = "agrees" if rolling.agrees else "does NOT agree with GM as measured"
    note = f"u {_length(system, rolling.u_gm, 2)}, a check only: {verdict}"
    gm = _length(system, rolling.gm, 2)
    return [_row("GM by rolling period", gm, system.length, note)]


def _ledger(outcome: Outcome, system: UnitSystem) -> list[str]:
    ledger = outcome.ledger

    def count(action: str) -> str:
        number = sum(1 for line in ledger.lines if line.action == action)
        return f"{number} line" if number == 1 else f"{number} lines"

    def mass(value: float) -> str:
        return system.show(value, MASS, system.mass, 3)

    balance = system.show(ledger.balance, MOMENT, system.moment, 6)
    return [
        "Ledger",
        _row("to deduct", mass(ledger.deduct), system.mass, count("deduct")),
        _row("to add", mass(ledger.add), system.mass, count("add")),
        _row("to relocate", mass(ledger.relocate), system.mass, count("relocate")),
        _row("moments about G sum to", balance, system.moment, "(self-check: zero)"),
    ]


def _lightship(outcome: Outcome, system: UnitSystem) -> list[str]:
    light = outcome.lightship
    rows: Sequence[tuple[str, Estimate, bool]] = (
        ("displacement", light.displacement, True),
        ("KG", light.vcg, False),
        ("LCG from after perpendicular", light.lcg, False),
        ("TCG, positive to starboard", light.tcg, False),
    )
    lines = ["LIGHTSHIP"]
    for label, estimate, is_mass in rows:
        if estimate.value is None:
            lines.append(_row(label, "not determined", ""))
            continue
        kind, unit = (MASS, system.mass) if is_mass else (LENGTH, system.length)
        places = 2 if is_mass else 3
        note = "" if estimate.u is None else f"u {system.show(estimate.u, kind, unit, places + 1)}"
        if estimate.U is not None and estimate.k is not None:
            expanded = system.show(estimate.U, kind, unit, places + 1)
            note += f", U {expanded}, k {estimate.k:.2f}"
        lines.append(_row(label, system.show(estimate.value, kind, unit, places), unit, note))
    return lines


_SHOWN = 6  # budget lines on the screen; the report has them all


def _uncertainty(reduction: Reduction, system: UnitSystem) -> list[str]:
    """Largest inputs of KG, the limit if there is one, and the Monte Carlo verdict."""
    outcome, simulation = reduction.outcome, reduction.simulation
    kg = next(b for b in outcome.budgets if b.key == "vcg")
    assumed = sum(line.share for line in kg.lines if line.basis.startswith("assumed"))
    share = f"{100.0 * assumed:.0f} % of its variance is assumed"
    lines = ["", f"What the uncertainty of KG comes from ({share})"]
    fold = partial(textwrap.fill, width=80, initial_indent="  ", subsequent_indent=" " * 12)
    lines += [
        fold(f"{100.0 * line.share:5.1f} %  {line.name} ({line.basis.partition(':')[0]})")
        for line in kg.lines[:_SHOWN]
    ]
    rest = kg.lines[_SHOWN:]
    if rest:
        lines.append(f"  {100.0 * sum(r.share for r in rest):5.1f} %  {len(rest)} further inputs")
    limit = reduction.trial.settings.kg_limit
    if limit is not None and outcome.kg_above_limit is not None:
        chance = outcome.kg_above_limit if simulation is None else simulation.kg_above_limit
        lines.append(
            f"  KG above the limit of {_length(system, limit)} {system.length}:"
            f" probability {100.0 * (chance or 0.0):.2g} %"
        )
    return lines if simulation is None else [*lines, *_monte_carlo(simulation, system)]


def _monte_carlo(simulation: Simulation, system: UnitSystem) -> list[str]:
    lines = ["", f"Monte Carlo, {simulation.draws} draws: 95 % intervals"]
    for r in simulation.results:
        kind, unit = (MASS, system.mass) if r.key == "displacement" else (LENGTH, system.length)
        places = 2 if r.key == "displacement" else 4
        low, high = (system.show(v, kind, unit, places) for v in r.symmetric)
        verdict = "agrees with first order" if r.agrees else "first order NOT validated: use this"
        lines.append(f"  {NAMES[r.key]:<13}{low:>9} to {high:>9} {unit:<4} {verdict}")
    return lines


def _findings(reduction: Reduction, system: UnitSystem) -> list[str]:
    """What the residuals point to, with KG if so, and how the criteria came out."""
    diagnosis, lines = reduction.diagnosis, ["", "What the residuals say"]
    wrap = partial(textwrap.fill, width=80, initial_indent="  ", subsequent_indent="    ")
    if diagnosis is None:
        lines.append(wrap(TOO_FEW))
    elif not diagnosis.findings:
        lines.append(wrap(NOTHING))
    else:
        for group in groups_of(diagnosis):
            for finding in group:
                also = "or " if finding.rank else ""
                kg = _length(system, finding.vcg_if_so)
                lines.append(
                    wrap(
                        f"{also}{finding.cause} ({place_of(finding)}): {finding.size};"
                        f" KG {kg} {system.length} if so"
                    )
                )
            lines.append(wrap(f"  {group[0].advice}"))
    if reduction.checks:
        lines.append(wrap(f"Criteria: {tally(reduction.checks)} (incline check lists them)"))
    return lines
