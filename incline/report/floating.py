"""Condition as inclined: drafts and waterline, density, hydrostatics, displacement."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from incline.report.canvas_backend import FigureFlowable
from incline.report.document import Sheet, note, paragraph, part
from incline.report.figures_waterline import waterline_plot
from incline.report.hull import hull_entry
from incline.report.show import MISSING, NOT_DETERMINED, NOT_RECORDED
from incline.report.table_rows import table_rows
from incline.report.tables import Column, facts, grid, steps

if TYPE_CHECKING:
    from incline.result import DraftResidual

__all__ = ["as_inclined"]

_SIDES = {"P": "port", "S": "starboard", "C": "centre"}


def as_inclined(sheet: Sheet) -> list[Any]:
    """Everything between the draft readings and the displacement."""
    return [
        *part("Drafts as read and the fitted waterline"),
        *_drafts(sheet),
        *part("Waterline", 40.0),
        *_waterline(sheet),
        *part("Density of the water"),
        *_density(sheet),
        *_changes(sheet),
        *part(_entry_title(sheet)),
        *_entry(sheet),
        *table_rows(sheet),
        *hull_entry(sheet),
        *part("Displacement and metacentre"),
        *_displacement(sheet),
    ]


def _entry_title(sheet: Sheet) -> str:
    used = sheet.reduction.outcome.as_inclined.entry is not None
    return "Entry into the hydrostatic table" if used else "Drafts during the shifts"


def _drafts(sheet: Sheet) -> list[Any]:
    trial, show = sheet.reduction.trial, sheet.show
    line = sheet.reduction.outcome.as_inclined.waterline
    length, small = show.unit("length"), show.unit("reading")
    columns = (
        Column(f"x [{length}]", 0.12),
        Column("side", 0.12, "left"),
        Column(f"freeboard [{length}]", 0.13),
        Column(f"draft above baseline [{length}]", 0.16),
        Column(f"fitted [{length}]", 0.13),
        Column(f"residual [{small}]", 0.12),
        Column("studentised", 0.12),
        Column("", 0.10, "left"),
    )
    boards = {(d.x, d.side, d.draft): d.freeboard for d in trial.drafts}
    rows = [_draft_row(sheet, r, boards.get((r.x, r.side, r.draft))) for r in line.residuals]
    keel = trial.settings.keel_thickness
    drafts_note = "Drafts are above the moulded baseline"
    if keel:
        thick = show.full(keel, "reading")
        drafts_note += f"; the keel thickness of {thick} has been taken off readings at the marks"
    if line.sd is None:
        spread = "cannot be told, there being as many unknowns as readings"
    else:
        spread = f"{show.full(line.sd, 'reading', 2)}, with {line.dof} degrees of freedom"
    drafts_note += f". Standard deviation of the residuals: {spread}."
    if any(r.flagged for r in line.residuals):
        drafts_note += " A flagged reading lies farther off than chance allows; it has been kept."
    return [grid(columns, rows, sheet.width), note(drafts_note)]


def _draft_row(sheet: Sheet, found: DraftResidual, freeboard: float | None) -> list[str]:
    show = sheet.show
    return [
        show.number(found.x, "length"),
        _SIDES[found.side],
        show.number(freeboard, "length"),
        show.number(found.draft, "length"),
        show.number(found.fitted, "length"),
        show.number(found.residual, "reading", 2 if show.system.name == "us" else 1),
        show.plain(found.studentised, 2),
        "flagged" if found.flagged else "",
    ]


def _waterline(sheet: Sheet) -> list[Any]:
    trial, show = sheet.reduction.trial, sheet.show
    line = sheet.reduction.outcome.as_inclined.waterline
    lean = NOT_DETERMINED
    if line.list_tan is not None:
        side = "starboard" if line.list_tan > 0.0 else "port"
        lean = f"tangent {show.tangent(line.list_tan)}"
        lean += f" ({side} side down)" if show.tangent(abs(line.list_tan)).strip("0.") else ""
    bend = NOT_DETERMINED
    if line.deflection is not None:
        bend = show.full(line.deflection, "reading")
        bend += " (sag)" if line.deflection > 0.0 else " (hog)" if line.deflection < 0.0 else ""
    pairs = (
        ("Draft at AP", sheet.full(line.draft_ap, "length")),
        ("Draft amidships", sheet.full(line.draft_mid, "length")),
        ("Draft at FP", sheet.full(line.draft_fp, "length")),
        ("Trim, + by the stern", sheet.full(line.trim, "length")),
        ("Deflection", bend),
        ("List from the drafts", lean),
    )
    figure = waterline_plot(line, trial.vessel.lpp, show, sheet.width)
    flow = FigureFlowable(figure)
    return [
        facts(pairs, sheet.width, abreast=2),
        *part("Profile of the measured waterline", flow.height + 26),
        flow,
    ]


def _density(sheet: Sheet) -> list[Any]:
    trial, show = sheet.reduction.trial, sheet.show
    columns = (
        Column("place", 0.36, "left"),
        Column(f"depth [{show.unit('length')}]", 0.16),
        Column("temperature", 0.16),
        Column("weight in the mean", 0.16),
        Column(f"density [{show.unit('density')}]", 0.16),
    )
    rows = [
        [
            s.place or NOT_RECORDED,
            NOT_RECORDED if s.depth is None else show.number(s.depth, "length", 2),
            show.temperature(s.temperature),
            show.plain(s.share, 2),
            show.number(s.density, "density"),
        ]
        for s in trial.samples
    ]
    values = [s.density for s in trial.samples]
    mean = show.full(sheet.reduction.outcome.as_inclined.density, "density")
    text = f"Weighted mean of the samples: {mean}."
    if len(values) > 1:
        spread = show.full(max(values) - min(values), "density")
        text += f" Largest less smallest sample: {spread}."
    return [grid(columns, rows, sheet.width), paragraph(text)]


def _changes(sheet: Sheet) -> list[Any]:
    trial, show = sheet.reduction.trial, sheet.show
    title = part("Changes between the draft readings and the shifts")
    if not trial.changes:
        return [*title, paragraph("None recorded.")]
    length = show.unit("length")
    columns = (
        Column("item", 0.46, "left"),
        Column("change", 0.12, "left"),
        Column(f"mass [{show.unit('mass')}]", 0.15),
        *(Column(f"{axis} [{length}]", 0.09) for axis in "xyz"),
    )
    rows = [
        [
            c.name,
            c.change,
            show.number(c.mass, "mass"),
            *(show.number(v, "length") for v in (c.centre.x, c.centre.y, c.centre.z)),
        ]
        for c in trial.changes
    ]
    return [*title, grid(columns, rows, sheet.width)]


def _entry(sheet: Sheet) -> list[Any]:
    """How the table was entered, in sentences."""
    trial, show, state = sheet.reduction.trial, sheet.show, sheet.reduction.outcome.as_inclined
    entry, line = state.entry, state.waterline
    said = [
        f"During the shifts the drafts were {show.number(state.draft_ap, 'length')} at AP, "
        f"{show.number(state.draft_mid, 'length')} amidships and "
        f"{show.full(state.draft_fp, 'length')} at FP, the trim {show.full(state.trim, 'length')}."
    ]
    if entry is None or trial.table is None:
        return [paragraph(" ".join(said))]
    where = "the draft at the centre of flotation" if entry.at_lcf else "the draft amidships"
    said.append(
        f"The table was entered at {show.full(entry.draft, 'length')}, {where}, between its limits "
        f"of {show.number(entry.table_drafts[0], 'length')} and "
        f"{show.full(entry.table_drafts[1], 'length')}."
    )
    low, high = entry.table_trims
    if low == high:
        said.append(f"It holds one trim, {show.full(low, 'length')}.")
    else:
        said.append(
            f"Its trims run from {show.number(low, 'length')} to {show.full(high, 'length')}; it "
            f"was interpolated to the actual trim."
        )
    if entry.trim_volume:
        said.append(
            f"The second trim correction of volume is {show.full(entry.trim_volume, 'volume', 3)}."
        )
    if line.deflection is not None:
        share = show.plain(entry.deflection_factor, 4)
        said.append(f"The share {share} of the deflection counts ({entry.deflection_basis}).")
    said.append(f"Rows are joined by {trial.settings.interpolation} interpolation.")
    if trial.settings.interpolation == "cubic":
        said.append(
            f"Straight lines between rows would give KM {show.full(entry.linear_km, 'length', 4)}."
        )
    if trial.table.bml_basis:
        said.append(f"Longitudinal metacentric radius: {trial.table.bml_basis}.")
    return [paragraph(" ".join(said))]


def _displacement(sheet: Sheet) -> list[Any]:
    trial, show, state = sheet.reduction.trial, sheet.show, sheet.reduction.outcome.as_inclined
    volume, density = show.number(state.volume, "volume", 3), show.number(state.density, "density")
    offsets = None if state.hull is None else trial.offsets
    allowance = trial.settings.allowance if offsets is None else offsets.allowance
    if allowance is None:
        formula, values = "Δ = ∇ ρ   (extreme volume)", f"{volume} × {density}"
    else:
        formula = "Δ = ∇ ρ (1 + a)   (moulded volume, shell and appendages a)"
        values = f"{volume} × {density} × (1 + {show.plain(allowance, 5)})"
    if show.system.name == "us":
        values += " / 2240"
    lcb = "LCB could not be found" if state.lcb is None else "at the trimmed waterline"
    return [
        steps(
            (
                (formula, values, sheet.full(state.displacement, "mass")),
                (
                    "KM = KB + BM",
                    f"{show.number(state.kb, 'length')} + {show.number(state.bmt, 'length')}",
                    sheet.full(state.kmt, "length"),
                ),
                (
                    "LCB",
                    lcb,
                    MISSING if state.lcb is None else sheet.full(state.lcb, "length"),
                ),
            ),
            sheet.width,
        )
    ]
