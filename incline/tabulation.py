"""A table of hydrostatics from a hull's offsets, over drafts and trims."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

from incline.errors import Defect, FieldDataError, Where
from incline.hull import Hull, Pose
from incline.hull.spacing import spacing_misses
from incline.hydrostatics import Curves
from incline.record import HydrostaticTable

if TYPE_CHECKING:
    from collections.abc import Sequence

    import numpy as np
    from numpy.typing import NDArray

    from incline.hull.spacing import Miss
    from incline.record import Offsets

    Floats = NDArray[np.float64]

__all__ = ["HydrostaticRow", "Tabulation", "drafts_between", "drafts_for", "tabulate"]


@dataclass(frozen=True, slots=True, kw_only=True)
class HydrostaticRow:
    """Hydrostatics at one draft and trim: metres and powers of it, on the volume as drawn.

    ``draft`` is amidships between perpendiculars, positive ``trim`` by the stern. ``lcb``, ``lcf``
    are forward of the after perpendicular; ``tcb`` is the centre of buoyancy to starboard, ``kn``
    the righting lever about the keel, (tcb + kb tan(heel)) cos(heel).
    """

    draft: float
    trim: float
    volume: float
    lcb: float
    tcb: float
    kb: float
    bmt: float
    bml: float
    lcf: float
    area: float
    kn: float

    @property
    def kmt(self) -> float:
        """KM [m]."""
        return self.kb + self.bmt


@dataclass(frozen=True, slots=True, kw_only=True)
class Tabulation:
    """Rows by trim, then draft, with what the spacing of the offsets may be worth.

    ``by_stations`` and ``by_points`` are shares of volume, and metres of KM and LCB, in the middle
    row. ``between`` [m] is the largest error of KM between rows when every second draft is left
    out and the curves through the others are read; None with fewer than five drafts.
    """

    rows: tuple[HydrostaticRow, ...]
    heel: float
    deflection: float
    by_stations: Miss
    by_points: Miss
    between: float | None


def drafts_for(
    offsets: Offsets,
    lpp: float,
    trims: Sequence[float] = (0.0,),
    *,
    heel: float = 0.0,
    deflection: float = 0.0,
) -> tuple[float, ...]:
    """A dozen or two of round drafts [m], from near the keel to where the deck edge is still dry.

    Where that leaves hardly any at the trims [m], heel [rad] and deflection [m], those of the
    upright ship.
    """
    import numpy as np

    hull = Hull(offsets, lpp)
    hulls = (body for body in offsets.bodies if body.kind == "hull")
    low = min(p.z for body in hulls for s in body.stations for p in (*s.starboard, *s.port))
    level = 0.0 * np.asarray(trims)
    bent = Pose(level, np.asarray(trims) / lpp, level + deflection, level + math.tan(heel))
    upright = float(hull.freeboard(Pose(*(np.zeros(()),) * 4)))
    top = float(hull.freeboard(bent).min())
    if top - low < 0.2 * (upright - low):
        top = upright
    step = (top - low) / 24.0
    nice = 10.0 ** math.floor(math.log10(step))
    step = next(nice * m for m in (1.0, 2.0, 2.5, 5.0, 10.0) if nice * m >= step)
    first, last = math.ceil((low + step) / step - 1e-9), math.floor(top / step + 1e-9)
    return tuple(round(n * step, 9) for n in range(first, last + 1))


_MOST_ROWS = 2000


def drafts_between(
    usual: Sequence[float], lowest: float | None, highest: float | None, step: float | None
) -> tuple[float, ...]:
    """Drafts from ``lowest`` to ``highest`` by ``step`` [m]; None takes the ``usual`` ones' own.

    Raises ValueError when they do not go together.
    """
    low = usual[0] if lowest is None else lowest
    high = usual[-1] if highest is None else highest
    by = usual[1] - usual[0] if step is None else step
    if not (by > 0.0 and high > low):
        raise ValueError("a step above zero, and a highest draft above the lowest")
    if (high - low) / by > _MOST_ROWS:
        raise ValueError(f"at most {_MOST_ROWS} drafts")
    return tuple(round(low + n * by, 9) for n in range(int((high - low) / by + 1e-6) + 1))


def tabulate(
    offsets: Offsets,
    lpp: float,
    drafts: Sequence[float],
    trims: Sequence[float] = (0.0,),
    *,
    heel: float = 0.0,
    deflection: float = 0.0,
) -> Tabulation:
    """Integrate a hull over drafts and trims [m], at a heel [rad] and a deflection [m].

    Raises FieldDataError for waterlines below the hull or above its deck edge.
    """
    import numpy as np

    hull = Hull(offsets, lpp)
    trim, draft = (a.ravel() for a in np.meshgrid(trims, drafts, indexing="ij"))
    pose = Pose(draft, trim / lpp, 0.0 * draft + deflection, 0.0 * draft + math.tan(heel))
    _refuse(hull, pose, draft, trim)
    found = hull.displaced(pose)
    kn = (found.y + found.z * pose.tangent) * math.cos(heel)
    columns = {
        "draft": draft, "trim": trim, "volume": found.volume, "lcb": found.x, "tcb": found.y,
        "kb": found.z, "bmt": found.bmt, "bml": found.bml, "lcf": found.lcf, "area": found.area,
        "kn": kn,
    }  # fmt: skip
    rows = tuple(
        HydrostaticRow(**{name: float(column[i]) for name, column in columns.items()})
        for i in range(len(draft))
    )
    middle = Pose(
        *(a[len(draft) // 2] for a in (pose.mean, pose.tau, pose.deflection, pose.tangent))
    )
    by_stations, by_points = spacing_misses(offsets, hull, middle)
    return Tabulation(
        rows=rows,
        heel=heel,
        deflection=deflection,
        by_stations=by_stations,
        by_points=by_points,
        between=_between(rows, len(drafts), lpp),
    )


_FEW_DRAFTS = 5


def _between(rows: Sequence[HydrostaticRow], drafts: int, lpp: float) -> float | None:
    """The largest error of KM at drafts left out."""
    import numpy as np

    if drafts < _FEW_DRAFTS:
        return None
    worst = 0.0
    for first in range(0, len(rows), drafts):
        every = rows[first : first + drafts]
        kept = every[::2]

        def column(name: str, some: Sequence[HydrostaticRow] = kept) -> tuple[tuple[float, ...]]:
            return (tuple(float(getattr(r, name)) for r in some),)

        table = HydrostaticTable(
            drafts=column("draft")[0], trims=(every[0].trim,), volume=column("volume"),
            lcb=column("lcb"), kb=column("kb"), bmt=column("bmt"), lcf=None, area=None, bml=None,
            bml_basis="", where=Where("hydrostatics.csv"),
        )  # fmt: skip
        left = every[1 : 2 * len(kept) - 2 : 2]
        at = np.array([r.draft for r in left])
        b = Curves(table, lpp, "cubic").buoyancy(at, 0.0 * at + every[0].trim / lpp, None)
        worst = max(worst, float(np.abs(b.kb + b.bmt - [r.kmt for r in left]).max()))
    return worst


def _refuse(hull: Hull, pose: Pose, draft: Floats, trim: Floats) -> None:
    low, _ = hull.reach
    dry = hull.freeboard(pose)
    deep = hull.displaced(pose).volume
    defects = []
    for d, t, f, v in zip(draft, trim, dry, deep, strict=True):
        at = f"draft {d:.3f} m, trim {t:.3f} m"
        if not v > 0.0:
            expected = f"a waterline above the hull's lowest point, {low:.3f} m above baseline"
            defects.append(Defect(Where("drafts"), "waterline-below-hull", at, expected))
        elif f < 0.0:
            found = f"{at}: {-f:.3f} m above the deck edge"
            expected = "a waterline below the deck edge all along the hull"
            defects.append(Defect(Where("drafts"), "deck-edge-immersed", found, expected))
    if defects:
        raise FieldDataError(defects)
