"""What carries the ship at one waterline, and the floating ship; broadcasts over draws."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING, Protocol

if TYPE_CHECKING:
    import numpy as np
    from numpy.typing import NDArray

    Floats = NDArray[np.float64]

__all__ = ["Afloat", "Buoyancy", "Condition"]


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Buoyancy:
    """What carries the ship at one waterline: volume [m3], centre and metacentric radius [m].

    ``x``, ``y``, ``z`` are those of B at the listed waterline; ``yb``, ``kb`` and ``bmt`` those of
    the upright ship at the same drafts on the centreline (a table knows no other, and its ``y`` is
    zero). ``x`` of a table for one trim without BM_L is an estimate (see
    `incline.hydrostatics.Curves.tells_lcg`). ``entry`` [m] is the draft at which a table was
    entered, ``trim_volume`` [m3] the second trim correction, ``deflection_factor`` the share of the
    deflection that counts in the entry draft.
    """

    volume: Floats
    x: Floats
    y: Floats
    z: Floats
    yb: Floats
    kb: Floats
    bmt: Floats
    entry: Floats
    trim_volume: Floats
    deflection_factor: Floats


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Condition:
    """The floating ship. ``mean`` and ``tau`` as in `Afloat.buoyancy`; displacement [t]."""

    mean: Floats
    tau: Floats
    deflection: Floats | None
    list_tan: Floats | None
    buoyancy: Buoyancy
    displacement: Floats

    @property
    def start(self) -> Floats:
        """Tangent of the list with the test weights at their start; zero where it is unknown."""
        return 0.0 * self.mean if self.list_tan is None else self.list_tan


class Afloat(Protocol):
    """Anything that tells what carries the ship: a hydrostatic table, or a hull."""

    def buoyancy(
        self, mean: Floats, tau: Floats, deflection: Floats | None, list_tan: Floats | None
    ) -> Buoyancy:
        """What carries the ship at a waterline.

        ``mean`` [m] is the mean of the drafts at the perpendiculars, ``tau`` trim over length,
        ``deflection`` [m] the extra draft amidships, ``list_tan`` the tangent of list; None where
        the drafts do not tell.
        """
        ...
