"""Sentences a reviewer should see: what was assumed, what could not be found, what looks odd."""

from __future__ import annotations

from typing import TYPE_CHECKING

from incline.swings import alternates
from incline.units import LENGTH, SYSTEMS

if TYPE_CHECKING:
    from incline.record import Trial
    from incline.result import HullEntry, Outcome, Simulation
    from incline.units import UnitSystem

__all__ = ["NAMES", "remarks_on", "remarks_on_simulation"]


def remarks_on(trial: Trial, outcome: Outcome) -> list[str]:
    """Remarks of the reading first, then of the waterline, the water and the devices."""
    counted = {p.device for p in outcome.heel.points if not p.excluded}
    system = SYSTEMS[trial.settings.units]
    return [
        *trial.remarks,
        *_waterline(outcome, system),
        *_table(trial, outcome, system),
        *_aboard(trial),
        *(
            ["One water sample: the scatter of the density cannot be seen."]
            if len(trial.samples) < 2
            else []
        ),
        *_slope(outcome),
        *_method(outcome, system),
        *(
            f"Every reading of device {d.id} is excluded."
            for d in trial.devices
            if d.id not in counted
        ),
        *(
            f"The swing extremes of device {r.device} at shift {r.shift} do not alternate."
            for r in trial.readings
            if r.kind == "swings" and not alternates(r.values)
        ),
    ]


def _method(outcome: Outcome, system: UnitSystem) -> list[str]:
    """What the straight line is off by, whether it was used or not, and tanks that pocket."""
    heel, said = outcome.heel, []
    kg = {m.method: m.vcg for m in heel.others}
    kg[heel.method] = outcome.lightship.vcg.value or 0.0
    exact = kg.get("heeled-hull")
    if exact is not None:
        off = kg["straight-line"] - exact
        text = f"the hull puts the straight-line KG {_off(off, system)}"
        if "wall-sided" in kg:
            text += f", and that of the wall-sided formula {_off(kg['wall-sided'] - exact, system)}"
        said.append(f"Integrated at its true waterlines, {text}.")
    elif heel.by_offsets is not None:
        said.append(
            f"By the trial's offsets, which are not used, the {heel.method} method puts KG"
            f" {_off(heel.by_offsets, system)}. KG is not corrected for it; its uncertainty"
            " includes as much."
        )
    elif heel.method == "straight-line":
        said.append(
            "A straight line through heel and moment puts KG low by about"
            f" {_small(heel.curvature_kg, system)} at these heels if the hull is wall-sided, by"
            " several times as much where her sides slope or a chine is near the water. KG is not"
            " corrected for it. Its uncertainty includes as much as for a wall-sided hull and no"
            " more, and the probability of KG being above a limit is low by as much."
        )
    else:
        said.append(
            "The wall-sided formula is wrong, and may err to either side, where the ship's sides"
            " slope or a chine is near the waterline: KG's uncertainty includes as much as the"
            " formula changes it."
        )
    if exact is not None and heel.method != "heeled-hull":
        said.append(
            f"The {heel.method} method was asked for: its KG is not corrected for that difference,"
            " which its uncertainty includes."
        )
    exactly = heel.method != "straight-line"
    how = (
        "its exact lever is used instead of a fixed free-surface moment"
        if exactly
        else "a fixed free-surface moment is too large for it there, and KG comes out too low: use"
        " another method, or empty or fill the tank"
    )
    said.extend(
        f"The liquid in tank {name} reaches the bottom or the top of the tank at the heels of this"
        f" test: {how}."
        for name in heel.pocketing
    )
    return said


def _off(length: float, system: UnitSystem) -> str:
    """How far off a KG is: 9.9 mm low, on the unsafe side."""
    return f"{_small(abs(length), system)} {'low, on the unsafe side' if length < 0.0 else 'high'}"


def _small(length: float, system: UnitSystem) -> str:
    """A length in the unit of readings: 4.2 mm, 0.17 in."""
    places = 1 if system.name == "metric" else 2
    return f"{system.show(length, LENGTH, system.reading, places)} {system.reading}"


def _waterline(outcome: Outcome, system: UnitSystem) -> list[str]:
    inclined = outcome.as_inclined
    said = []
    if inclined.lcg is None:
        # A box has BM_L = L^2 / (12 T), and B rises by BM_L tau^2 / 2.
        rise = inclined.trim**2 / (24.0 * inclined.draft_mid)
        said.append(
            "LCG is not determined: the ship is trimmed and the hydrostatic table has neither"
            " several trims nor BM_L or MCT. The rise of B by trim is left out of KM too; for a box"
            f" of this length and draft it would raise KG by {_small(rise, system)}."
        )
    if inclined.tcg is None:
        said.append("TCG is not determined: the drafts do not show the list.")
    if inclined.waterline.dof == 0:
        said.append(
            "There are no more draft readings than unknowns: errors of the drafts cannot be seen."
        )
    said.extend(
        f"The draft reading at x = {system.show(r.x, LENGTH, system.length, 2)} {system.length},"
        f" side {r.side}, is {_small(r.residual, system)} off the fitted waterline, more than the"
        " others allow: read it again."
        for r in inclined.waterline.residuals
        if r.flagged
    )
    return said


_TRIMMED = 0.005  # trim over length from which a table for another trim is worth a warning
_COARSE = 0.003  # m of KM between straight-line and curved interpolation


def _table(trial: Trial, outcome: Outcome, system: UnitSystem) -> list[str]:
    """What the hydrostatic table leaves open at this waterline."""
    ship, entry, said = outcome.as_inclined, outcome.as_inclined.entry, []
    if ship.list_tan is None and any(s.vertical for s in outcome.heel.shifts):
        said.append(
            "Test weights moved up or down while the list is unknown: it is taken as zero there."
        )
    if ship.hull is not None:
        said.extend(_hull(outcome, ship.hull, system))
    if entry is None:
        return said
    if entry.less_hull is not None:
        against = _apart(entry.less_hull, system)
        said.append(f"The offsets are not used. Against them the table has{against}.")
    more = abs(ship.trim - entry.table_trims[0]) / trial.vessel.lpp
    if entry.table_trims[0] == entry.table_trims[1] and more > _TRIMMED:
        said.append(
            f"The hydrostatic table is for another trim than the ship's, by {100.0 * more:.1f} % of"
            " the length: how her waterplane changes with trim is not in it, and KM may be off by"
            " more than shown where her ends are flared. Use a table for the actual trim."
        )
    straight = entry.linear_km - ship.kmt
    if abs(straight) > _COARSE:
        said.append(
            "The rows of the hydrostatic table are far apart: straight lines between them would"
            f" give a KM that differs by {_small(straight, system)}."
        )
    return said


_COARSE_OFFSETS = 0.25  # share of the variance of KG from which the offsets call for more points
_TWICE = 2e-4  # share of the volume in two bodies from which it is worth a warning


def _hull(outcome: Outcome, hull: HullEntry, system: UnitSystem) -> list[str]:
    """What the integration leaves open, and how far the trial's table is from it."""
    said = []
    if outcome.as_inclined.list_tan is None and outcome.heel.method == "heeled-hull":
        said.append("The list being unknown, the heels are taken from the upright.")
    if hull.table is not None:
        said.append(
            "The hydrostatic table is not used. Against the integrated hull it has"
            f"{_apart(hull.table, system)}."
        )
    kg = next((b for b in outcome.budgets if b.key == "vcg"), None)
    open_ = 0.0 if kg is None else sum(x.share for x in kg.lines if x.name.startswith("spacing of"))
    if open_ > _COARSE_OFFSETS:
        said.append(
            f"{100.0 * open_:.0f} % of the variance of KG is that the offsets have few stations or"
            " points: more of them, or named lines at knuckles, would lessen it."
        )
    if hull.layers:
        said.append(
            f"The water is taken as {len(hull.layers)} layers by the depths of the samples; the"
            " density is the mean of the water displaced."
        )
    for one, other, volume in hull.overlaps:
        twice = volume / outcome.as_inclined.volume
        if twice > _TWICE:
            said.append(
                f"The bodies {one} and {other} stand in one another: about {100.0 * twice:.2g} % of"
                " the volume is counted twice. End an appendage at the shell."
            )
    return said


def _apart(miss: tuple[float, float, float], system: UnitSystem) -> str:
    volume, km, lcb = miss
    return (
        f" {100.0 * volume:+.2f} % volume, {_signed(km, system)} KM and {_signed(lcb, system)} LCB"
        " at this waterline"
    )


def _signed(length: float, system: UnitSystem) -> str:
    text = _small(length, system)
    return text if text.startswith("-") else f"+{text}"


def _aboard(trial: Trial) -> list[str]:
    """Things that came aboard after the drafts and are never taken off again."""
    listed = {i.name.casefold() for i in trial.items} | {w.id.casefold() for w in trial.weights}
    listed |= {p.name.casefold() for p in trial.people} | {t.name.casefold() for t in trial.tanks}
    return [
        f"{c.name} came aboard after the drafts and stands in no other list: it counts as part of"
        " the lightship."
        for c in trial.changes
        if c.change == "aboard" and c.name.casefold() not in listed
    ]


def _slope(outcome: Outcome) -> list[str]:
    slope = outcome.slope_uncertainty
    if slope.u is None:
        return ["The readings leave no scatter to judge the slope by: its uncertainty is left out."]
    return [f"Scatter of the readings: {slope.reason}."] if slope.reason else []


NAMES = {
    "displacement": "displacement", "vcg": "KG", "lcg": "LCG", "tcg": "TCG", "gm_fluid": "GM",
}  # fmt: skip


def remarks_on_simulation(simulation: Simulation) -> list[str]:
    """What the Monte Carlo run says against the first-order figures, if anything."""
    said = []
    odd = [NAMES[r.key] for r in simulation.results if not r.agrees]
    if odd:
        said.append(
            f"The first-order interval is not validated by Monte Carlo for {', '.join(odd)}"
            " (JCGM 101, clause 8): take the simulated interval there."
        )
    if simulation.settled is False:
        said.append(f"Monte Carlo stopped at {simulation.draws} draws before its figures settled.")
    return said
