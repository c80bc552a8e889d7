"""Steps from the waterline to volume, KB, BM and LCB by the hydrostatic table."""

from __future__ import annotations

from typing import TYPE_CHECKING

from incline.hydrostatics import Curves
from incline.report.arithmetic import Power, Value
from incline.report.steps import Chapter, Lay
from incline.report.steps_units import Units

if TYPE_CHECKING:
    from incline.report.arithmetic import Term
    from incline.report.document import Sheet
    from incline.report.show import Kind

__all__ = ["hydrostatics"]

_COLUMNS: tuple[tuple[str, Kind, str, str], ...] = (
    ("Volume", "volume", "volume", "∇"),
    ("KB", "length", "kb", "KB"),
    ("BM", "length", "bmt", "BM"),
    ("LCB", "length", "lcb", "LCB"),
)
_TOGETHER = (
    "The entry draft and the table's values at it depend on one another; they were found together, "
    "by iteration, and hold together as printed."
)
_INTEGRATED = "integrated from the offsets at this waterline"


def hydrostatics(sheet: Sheet) -> Chapter:
    """The waterline of the shifts, the entry into the table, and what it gives."""
    trial, state = sheet.reduction.trial, sheet.reduction.outcome.as_inclined
    before = _shifts_waterline(sheet) if trial.changes else ()
    if trial.table is None or state.entry is None:
        return Chapter("Hydrostatics", (*before, *_carried(sheet, _INTEGRATED)))
    entered = _Entered(sheet)
    if len(trial.table.trims) > 1:
        steps: tuple[Lay | str, ...] = (*entered.several_trims(), *_carried(sheet, _read(sheet)))
    else:
        steps = (_TOGETHER, *entered.one_trim())
    return Chapter("Hydrostatics entered", (*before, *steps))


def _read(sheet: Sheet) -> str:
    rule = sheet.reduction.trial.settings.interpolation
    return f"from the table at T<sub>e</sub> and trim, {rule} interpolation"


def _carried(sheet: Sheet, how: str) -> tuple[Lay, ...]:
    """Volume and centre of buoyancy as they come."""
    state, u = sheet.reduction.outcome.as_inclined, Units(sheet.show)
    lays = [
        Lay("Volume of displacement", u.of("volume", state.volume, "∇", "∇"), how=how),
        Lay("Height of the centre of buoyancy", u.of("length", state.kb, "KB", "KB"), how=how),
        Lay("Metacentric radius", u.of("length", state.bmt, "BM", "BM"), how=how),
    ]
    if state.lcb is not None:
        lcb = u.of("length", state.lcb, "LCB", "LCB")
        lays.append(Lay("Longitudinal centre of buoyancy", lcb, how=how))
    return tuple(lays)


def _shifts_waterline(sheet: Sheet) -> tuple[Lay | str, ...]:
    """The drafts after what came or left since they were read."""
    state, u = sheet.reduction.outcome.as_inclined, Units(sheet.show)
    lpp = u.recorded("length", sheet.reduction.trial.vessel.lpp, "L", "L")
    ap, fp, mean, trim, tau = shifts_draft(sheet)
    how = "at which displacement and moments are those after the changes"
    found: list[Lay | str] = [
        "What came aboard or left since the drafts were read moved the waterline. From here on all "
        "is at the waterline of the shifts.",
        Lay("Draft at the after perpendicular", ap, how=how),
        Lay("Draft at the forward perpendicular", fp, how=how),
        Lay("Mean draft", mean, (ap + fp) / 2),
        Lay("Trim, + by the stern", trim, ap - fp),
        Lay("Trim over length", tau, trim / lpp),
    ]
    if state.list_tan is not None:
        lean = u.ratio(state.list_tan, "λ", "λ")
        found.append(Lay("Tangent of list", lean, how="with the moments of the changes"))
    return tuple(found)


def shifts_draft(sheet: Sheet) -> tuple[Value, Value, Value, Value, Value]:
    """T_A, T_F, T_m, trim and tau of the shifts; those of the drafts when nothing changed."""
    trial, state = sheet.reduction.trial, sheet.reduction.outcome.as_inclined
    u, some = Units(sheet.show), bool(trial.changes)
    length = [
        u.of("length", v, place if some else read, symbol)
        for v, place, read, symbol in (
            (state.draft_ap, "T_A", "T_A read", "T<sub>A</sub>"),
            (state.draft_fp, "T_F", "T_F read", "T<sub>F</sub>"),
            ((state.draft_ap + state.draft_fp) / 2.0, "T_m shifts", "T_m", "T<sub>m</sub>"),
            (state.trim, "trim", "trim read", "t"),
        )
    ]
    tau = u.ratio(state.trim / trial.vessel.lpp, "τ" if some else "tau read", "τ")
    return length[0], length[1], length[2], length[3], tau


class _Entered:
    """The table's columns at the entry draft, as values."""

    def __init__(self, sheet: Sheet) -> None:
        trial, self.state = sheet.reduction.trial, sheet.reduction.outcome.as_inclined
        self.u = u = Units(sheet.show)
        self.sheet = sheet
        assert trial.table is not None  # noqa: S101 - the caller has looked
        assert self.state.entry is not None  # noqa: S101
        self.table, self.entered = trial.table, self.state.entry
        self.curves = Curves(trial.table, trial.vessel.lpp, trial.settings.interpolation)
        self.ap, self.fp, self.mean, self.trim, self.tau = shifts_draft(sheet)
        self.lpp = u.recorded("length", trial.vessel.lpp, "L", "L")
        self.entry = u.of("length", self.entered.draft, "T_e", "T<sub>e</sub>")
        self.bent = self.state.waterline.deflection is not None
        self.bend = u.of("length", self.state.waterline.deflection or 0.0, "d", "d", 4)
        self.factor = u.ratio(self.entered.deflection_factor, "C_d", "C<sub>d</sub>", 4)

    def several_trims(self) -> list[Lay]:
        """The entry draft of a table that is interpolated to the trim."""
        if not self.bent:
            return [Lay("Entry draft, amidships", self.entry, self.mean)]
        draft = (self.state.draft_ap + self.state.draft_fp) / 2.0
        return [
            *self._waterplane(draft),
            *self._share_of_deflection(draft),
            Lay("Entry draft, amidships", self.entry, self.mean + self.factor * self.bend),
        ]

    def _columns(self, draft: float) -> tuple[dict[str, float], dict[str, float]]:
        import numpy as np

        found = self.curves.at(np.asarray(draft), np.asarray(self.state.trim))
        value = {n: float(v) for n, v in found.value.items()}
        return value, {n: float(s) for n, s in found.slope.items()}

    def _waterplane(self, draft: float) -> list[Lay]:
        """What the share of the deflection is worked out from, where the table has it."""
        value, slope = self._columns(draft)
        if not {"bml", "lcf"} <= value.keys():
            return []
        u, how = self.u, "from the table at T<sub>m</sub> and trim"
        return [
            Lay("Volume there", u.of("volume", value["volume"], "∇_t", "∇<sub>0</sub>"), how=how),
            Lay("Area of the waterplane there",
                u.power_of_length(area_of(value, slope), 2, "A", "A<sub>w</sub>", 2), how=how),
            Lay("LCF there", u.of("length", value["lcf"], "LCF", "LCF"), how=how),
            Lay("Longitudinal BM there",
                u.of("length", value["bml"], "BM_L", "BM<sub>L</sub>"), how=how),
        ]  # fmt: skip

    def _share_of_deflection(self, draft: float) -> list[Lay]:
        """How much of the deflection adds volume."""
        value, slope = self._columns(draft)
        if not {"bml", "lcf"} <= value.keys():
            return [
                Lay(
                    "Share of the deflection that counts",
                    self.factor,
                    how="3/4: no BM<sub>L</sub> in the table",
                )
            ]
        u = self.u
        area = u.power_of_length(area_of(value, slope), 2, "A", "A<sub>w</sub>", 2)
        lcf = u.of("length", value["lcf"], "LCF", "LCF")
        bml = u.of("length", value["bml"], "BM_L", "BM<sub>L</sub>")
        volume = u.of("volume", value["volume"], "∇_t", "∇<sub>0</sub>")
        half = self.sheet.reduction.trial.vessel.lpp / 2.0
        inside = value["bml"] * value["volume"] + area_of(value, slope) * (value["lcf"] - half) ** 2
        inertia = u.power_of_length(inside, 4, "I_M", "I<sub>M</sub>", 0)
        return [
            Lay("Second moment of the waterplane about amidships", inertia,
                bml * volume + area * Power(lcf - self.lpp / 2)),
            Lay("Share of the deflection that counts", self.factor,
                1 - 4 * inertia / (Power(self.lpp) * area)),
        ]  # fmt: skip

    def one_trim(self) -> list[Lay]:
        """Entry at the centre of flotation, then trim corrections where BM_L is known."""
        value, slope = self._columns(self.entered.draft)
        u, how = self.u, _at_entry(self.sheet)
        table_tau = self.table.trims[0] / self.sheet.reduction.trial.vessel.lpp
        more = self.tau - u.ratio(table_tau, "τ_0", "τ<sub>0</sub>") if table_tau else self.tau
        lays = [
            Lay(
                f"{name} in the table",
                u.of(kind, value[n], f"{sign}_t", f"{sign}<sub>0</sub>"),
                how=how,
            )
            for name, kind, n, sign in _COLUMNS
        ]
        if "area" in value or "bml" in value:
            area = u.power_of_length(area_of(value, slope), 2, "A", "A<sub>w</sub>", 2)
            lays.append(Lay("Area of the waterplane", area, how=how))
        term: Term = self.mean
        if "lcf" in value:
            lcf = u.of("length", value["lcf"], "LCF", "LCF")
            lays.append(Lay("LCF in the table", lcf, how=how))
            term = self.mean + more * (self.lpp / 2 - lcf)
        if "bml" in value:
            bml = u.of("length", value["bml"], "BM_L", "BM<sub>L</sub>")
            lays.append(Lay("Longitudinal BM in the table", bml, how=how))
        if self.bent:
            lays += self._share_of_deflection(self.entered.draft)
            term = term + self.factor * self.bend
        where = "at the centre of flotation" if self.entered.at_lcf else "amidships"
        lays.append(Lay(f"Entry draft, {where}", self.entry, term))
        return [*lays, *self._corrected(value, slope, table_tau)]

    def _corrected(
        self, value: dict[str, float], slope: dict[str, float], table_tau: float
    ) -> list[Lay]:
        """What trim does to a table for another trim."""
        u, state = self.u, self.state
        v0 = u.of("volume", value["volume"], "∇_t", "∇<sub>0</sub>")
        kb0, bm0, lcb0 = (
            u.of("length", value[n], f"{name}_t", f"{name}<sub>0</sub>")
            for n, name in (("kb", "KB"), ("bmt", "BM"), ("lcb", "LCB"))
        )
        volume = u.of("volume", state.volume, "∇", "∇")
        kb, bm = u.of("length", state.kb, "KB", "KB"), u.of("length", state.bmt, "BM", "BM")
        lcb = None if state.lcb is None else u.of("length", state.lcb, "LCB", "LCB")
        if "bml" not in value:
            plain = [
                Lay("Volume of displacement", volume, v0),
                Lay("Height of the centre of buoyancy", kb, kb0),
                Lay("Metacentric radius", bm, bm0),
            ]
            own = "from the table, which is for this trim"
            level = [Lay("Longitudinal centre of buoyancy", lcb, how=own)] if lcb else []
            return [*plain, *level]
        bml = u.of("length", value["bml"], "BM_L", "BM<sub>L</sub>")
        zero = u.ratio(table_tau, "τ_0", "τ<sub>0</sub>")
        more = self.tau - zero if table_tau else self.tau
        squares = Power(self.tau) - Power(zero) if table_tau else Power(self.tau)
        rate = u.power_of_length(
            slope["volume"] * value["bml"] + value["volume"] * slope["bml"],
            3,
            "I_L'",
            "I<sub>L</sub>′",
            0,
        )
        second = u.of("volume", self.entered.trim_volume, "δ∇", "δ∇", 3)
        how = "growth of I<sub>L</sub> = BM<sub>L</sub> ∇<sub>0</sub> with the draft in the table"
        lays = [
            Lay("Second moment by draft", rate, how=how),
            Lay("Second trim correction", second, Power(more) * rate / 2),
            Lay("Volume of displacement", volume, v0 + second),
            Lay("Height of the centre of buoyancy", kb, kb0 + bml * squares / 2),
            Lay("Metacentric radius", bm, bm0 * v0 / volume),
        ]
        if lcb:
            lays.append(Lay("Longitudinal centre of buoyancy", lcb, lcb0 - bml * more))
        return lays


def area_of(value: dict[str, float], slope: dict[str, float]) -> float:
    """Area of the waterplane [m2]: tabulated, or how fast the volume grows with the draft."""
    return value.get("area", slope["volume"])


def _at_entry(sheet: Sheet) -> str:
    rule = sheet.reduction.trial.settings.interpolation
    return f"from the table at T<sub>e</sub>, {rule} interpolation"
