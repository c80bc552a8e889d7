"""Values of the hydrostatic table at a waterline; broadcasts over a leading axis of draws."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING, Any, Literal

from incline.buoyancy import Buoyancy

if TYPE_CHECKING:
    import numpy as np
    from numpy.typing import NDArray

    from incline.record import HydrostaticTable

    Floats = NDArray[np.float64]

__all__ = ["LEVEL", "Curves", "TableValues"]

_MOMENTS = frozenset({"lcb", "kb", "bmt", "bml"})
"""Columns that are moments over the volume: the cubic rule interpolates the moments themselves,
which are smoother than their ratios (and polynomials for a wall-sided hull)."""


@dataclass(frozen=True, slots=True)
class TableValues:
    """Table columns at a draft and trim, and the derivatives by draft that the trim terms need."""

    value: dict[str, Floats]
    slope: dict[str, Floats]


class Curves:
    """A hydrostatic table made continuous in draft and trim.

    ``rule`` "cubic" joins rows by not-a-knot cubic splines of volume and of its moments (a parabola
    through three rows, a line through two); "linear" joins the tabulated columns by straight lines.
    Across trims the rule is the same. Outside the table the last piece continues: `covers` tells.
    """

    def __init__(
        self, table: HydrostaticTable, lpp: float, rule: Literal["cubic", "linear"]
    ) -> None:
        import numpy as np

        self.lpp = lpp
        self.rule = rule
        self.drafts = (table.drafts[0], table.drafts[-1])
        self.trims = (table.trims[0], table.trims[-1])
        columns = {
            name: np.asarray(getattr(table, name), dtype=float)
            for name in ("volume", "lcb", "kb", "bmt", "lcf", "area", "bml")
            if getattr(table, name) is not None
        }
        self.names = tuple(columns)
        if rule == "cubic":
            columns = {n: c * columns["volume"] if n in _MOMENTS else c for n, c in columns.items()}
        stacked = np.stack(list(columns.values()), axis=-1)  # trim, draft, column
        self._by_draft = _piecewise(np.asarray(table.drafts), np.moveaxis(stacked, 0, 1), rule)
        self._by_draft_slope = self._by_draft.derivative()
        self._across: Any = None
        if len(table.trims) > 1:
            weights = np.eye(len(table.trims))
            self._across = _piecewise(np.asarray(table.trims), weights, rule)

    @property
    def even(self) -> bool:
        """Whether the table is for a single trim."""
        return self._across is None

    def covers(self, draft: float, trim: float) -> bool:
        """Whether a waterline lies inside the table (a single trim covers every trim)."""
        slack = 1e-9  # metres: a waterline on the edge is inside
        inside = self.drafts[0] - slack <= draft <= self.drafts[1] + slack
        if not self.even:
            inside = inside and self.trims[0] - slack <= trim <= self.trims[1] + slack
        return inside

    def tells_lcg(self, trim: float) -> bool:
        """Whether the table says where B is at a trim [m]: it has several, or BM_L, or this one."""
        return not self.even or "bml" in self.names or abs(trim - self.trims[0]) < LEVEL

    def at(self, draft: Floats, trim: Floats, *, slopes: bool = True) -> TableValues:
        """Columns at entry draft and trim [m]; arrays of one shape."""
        values = self._across_trims(self._by_draft(draft), trim)
        value = {name: values[..., i] for i, name in enumerate(self.names)}
        slope: dict[str, Floats] = {}
        if slopes:
            changes = self._across_trims(self._by_draft_slope(draft), trim)
            slope = {name: changes[..., i] for i, name in enumerate(self.names)}
        if self.rule == "cubic":
            volume = value["volume"]
            for name in _MOMENTS.intersection(self.names):
                value[name] = value[name] / volume
                if slopes:
                    slope[name] = (slope[name] - value[name] * slope["volume"]) / volume
        return TableValues(value, slope)

    def _across_trims(self, values: Floats, trim: Floats) -> Floats:
        """Columns (..., column) at a trim, from columns at every tabulated trim."""
        import numpy as np

        if self._across is None:
            single: Floats = values[..., 0, :]
            return single
        blended: Floats = np.einsum("...tc,...t->...c", values, self._across(trim))
        return blended

    def buoyancy(
        self,
        mean: Floats,
        tau: Floats,
        deflection: Floats | None,
        list_tan: Floats | None = None,  # noqa: ARG002 - a table is for the upright ship
    ) -> Buoyancy:
        """Volume and centre of buoyancy at a waterline.

        ``mean`` [m] is the mean of the drafts at the perpendiculars, ``tau`` trim over length,
        ``deflection`` [m] the extra draft amidships. A table with several trims is entered at the
        draft amidships. A table for one trim is entered at the draft at the centre of flotation,
        with the second trim correction and the travel of B where BM_L is tabulated.
        """
        import numpy as np

        trim = tau * self.lpp
        if self.even:
            return self._even_keel(mean, tau, deflection)
        share, entry = np.full_like(mean, 0.75), mean
        if deflection is not None:
            if {"bml", "lcf"} <= set(self.names):
                share = self._deflection_factor(self.at(mean, trim), mean)
            entry = mean + share * deflection
        v = self.at(entry, trim, slopes=False).value
        return _upright(v, v["lcb"], v["kb"], v["bmt"], entry, share)

    def _even_keel(self, mean: Floats, tau: Floats, deflection: Floats | None) -> Buoyancy:
        import numpy as np

        bend = np.zeros_like(mean) if deflection is None else deflection
        table_tau = self.trims[0] / self.lpp
        more = tau - table_tau
        at_ap = mean + more * self.lpp / 2.0
        entry, share = mean, np.full_like(mean, 0.75)
        for _ in range(3):  # Newton on entry + more x lcf(entry) = draft at AP: quadratic
            found = self.at(entry, entry)
            share = self._deflection_factor(found, entry)
            if "lcf" in found.value:
                miss = entry + more * found.value["lcf"] - at_ap - share * bend
                entry = entry - miss / (1.0 + more * found.slope["lcf"])
            else:
                entry = mean + share * bend
        found = self.at(entry, entry)
        v, s = found.value, found.slope
        if "bml" not in v:
            # B's travel as for a box, so that small trims have their effect; whether LCG may be
            # told from it is decided by `tells_lcg`.
            box = self.lpp**2 / (12.0 * entry)
            return _upright(v, v["lcb"] - box * more, v["kb"], v["bmt"], entry, share)
        inertia_slope = s["volume"] * v["bml"] + v["volume"] * s["bml"]
        trim_volume = 0.5 * more**2 * inertia_slope
        kb = v["kb"] + 0.5 * v["bml"] * (tau**2 - table_tau**2)
        bmt = v["bmt"] * v["volume"] / (v["volume"] + trim_volume)
        x = v["lcb"] - v["bml"] * more
        return _upright(v, x, kb, bmt, entry, share, trim_volume)

    def _deflection_factor(self, found: TableValues, like: Floats) -> Floats:
        """Share of the midship deflection that adds volume: 1 - 4 I_mid / (L^2 Aw), or 3/4."""
        import numpy as np

        v = found.value
        if not {"bml", "lcf"} <= v.keys():
            return np.full_like(like, 0.75)
        area = v.get("area", found.slope["volume"])
        about_mid = v["bml"] * v["volume"] + area * (v["lcf"] - self.lpp / 2.0) ** 2
        share: Floats = 1.0 - 4.0 * about_mid / (self.lpp**2 * area)
        return share


def _upright(
    values: dict[str, Floats],
    x: Floats,
    kb: Floats,
    bmt: Floats,
    entry: Floats,
    share: Floats,
    trim_volume: Floats | None = None,
) -> Buoyancy:
    import numpy as np

    more = np.zeros_like(entry) if trim_volume is None else trim_volume
    return Buoyancy(
        volume=values["volume"] + more,
        x=x,
        y=np.zeros_like(entry),
        z=kb,
        yb=np.zeros_like(entry),
        kb=kb,
        bmt=bmt,
        entry=entry,
        trim_volume=more,
        deflection_factor=share,
    )


LEVEL = 0.0005
"""A trim [m] below which a ship counts as being at the table's own trim: half a millimetre."""


def _piecewise(x: Floats, y: Floats, rule: Literal["cubic", "linear"]) -> Any:  # noqa: ANN401 - untyped library
    """Piecewise polynomial through the points, first axis of y."""
    import numpy as np
    from scipy.interpolate import CubicSpline, PPoly

    if rule == "cubic":
        return CubicSpline(x, y, bc_type="not-a-knot")
    steps = np.diff(x).reshape(-1, *(1,) * (y.ndim - 1))
    return PPoly(np.stack([np.diff(y, axis=0) / steps, y[:-1]]), x)
