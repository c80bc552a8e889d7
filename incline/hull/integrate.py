"""The hull cut at a waterline: volume, centre of buoyancy and waterplane by integration.

Lengthwise each interval of stations is integrated by Gauss's rule on the lofted surface, which is
exact there for areas and nearly so for moments. Where the waterline leaves the hull inside a cell,
the rule is moved onto the wet part.
"""

from __future__ import annotations

import dataclasses
from dataclasses import dataclass
from functools import cache
from typing import TYPE_CHECKING

from incline.hull.loft import runs_of
from incline.hull.sections import cut

if TYPE_CHECKING:
    from collections.abc import Sequence

    import numpy as np
    from numpy.typing import NDArray

    from incline.hull.loft import Run
    from incline.record import Offsets

    Floats = NDArray[np.float64]

__all__ = ["Displaced", "Hull", "Pose"]

_NODES = 3
"""Gauss nodes in a cell: exact to degree 5."""
_CELLS, _FINE_CELLS, _FEW_CORNERS = 2, 4, 16
"""Cells in an interval of stations: more of them for sections of few corners, where each long edge
that the waterline meets at a small angle leaves a kink along the hull."""
_END_NODES = 8
_SECANTS = 8
_AT_ONCE = 60_000
"""Corners worked on at once: what fits in a processor's cache."""


@dataclass(frozen=True, slots=True, eq=False)
class Pose:
    """A waterline, arrays of one shape.

    Its height above the baseline is mean - tau (x - L/2) + deflection (1 - (2x/L - 1)^2) + t y:
    ``mean`` [m] at amidships on the centreline, ``tau`` trim over length, positive by the stern,
    ``deflection`` [m] positive sagging, ``tangent`` of heel positive starboard down.
    """

    mean: Floats
    tau: Floats
    deflection: Floats
    tangent: Floats

    def moved(self, mean: Floats, tau: Floats) -> Pose:
        """The same heel and deflection at another mean draft and trim."""
        return dataclasses.replace(self, mean=mean, tau=tau)


@dataclass(frozen=True, slots=True, eq=False)
class Displaced:
    """What a waterline cuts off. All arrays have the shape of the pose's.

    ``volume`` [m3] and its moments ``of_x``, ``of_y``, ``of_z`` [m4]; of the waterplane, projected
    on the baseline plane: ``area`` [m2], first moments ``area_x``, ``area_y`` [m3] and second
    moments ``area_xx``, ``area_xy``, ``area_yy`` [m4], about the origin. In layered water
    all are weighted by density over the mean density.
    """

    volume: Floats
    of_x: Floats
    of_y: Floats
    of_z: Floats
    area: Floats
    area_x: Floats
    area_y: Floats
    area_xx: Floats
    area_xy: Floats
    area_yy: Floats

    @property
    def x(self) -> Floats:
        """LCB [m]."""
        return self.of_x / self.volume

    @property
    def y(self) -> Floats:
        """Centre of buoyancy to starboard [m]."""
        return self.of_y / self.volume

    @property
    def z(self) -> Floats:
        """Height of the centre of buoyancy [m]."""
        return self.of_z / self.volume

    @property
    def bmt(self) -> Floats:
        """Transverse metacentric radius [m] about the waterplane's own axis."""
        return (self.area_yy - self.area_y**2 / self.area) / self.volume

    @property
    def lcf(self) -> Floats:
        """Longitudinal centre of flotation [m]."""
        return self.area_x / self.area

    @property
    def bml(self) -> Floats:
        """Longitudinal metacentric radius [m]."""
        return (self.area_xx - self.area_x**2 / self.area) / self.volume


@dataclass(frozen=True, slots=True, eq=False)
class _Laid:
    """A run with its sections at the Gauss nodes, and at the ends of the cells.

    ``x``, ``weight`` (S,), ``y``, ``z`` (S, P); ``edge_x`` (C + 1,), ``edge_y``, ``edge_z``.
    """

    run: Run
    x: Floats
    weight: Floats
    y: Floats
    z: Floats
    edge_x: Floats
    edge_y: Floats
    edge_z: Floats


class Hull:
    """A hull made ready to be cut. ``lpp`` [m] is the length between perpendiculars.

    ``layers`` are depths [m] of the tops of layers of water with the step of density there over
    the mean density, the first at the surface: ((0, 1),) in mixed water.
    """

    def __init__(
        self,
        offsets: Offsets,
        lpp: float,
        layers: Sequence[tuple[float, float]] = ((0.0, 1.0),),
    ) -> None:
        self.lpp = lpp
        self.layers = tuple(layers)
        self._laid = [_lay(run) for body in offsets.bodies for run in runs_of(body)]

    @property
    def reach(self) -> tuple[float, float]:
        """Lowest and highest point of the hull [m]."""
        low = min(float(r.edge_z.min()) for r in self._laid)
        return low, max(float(r.edge_z.max()) for r in self._laid)

    def displaced(self, pose: Pose) -> Displaced:
        """Integrals below the waterline, for poses of any shape."""
        import numpy as np

        flat = [np.ravel(a) for a in np.broadcast_arrays(*dataclasses.astuple(pose))]
        count = len(flat[0])
        total = np.zeros((10, count))
        for run in self._laid:
            step = max(1, _AT_ONCE // run.y.size)
            for first in range(0, count, step):
                some = slice(first, first + step)
                part = Pose(*(a[some] for a in flat))
                for depth, share in self.layers:
                    total[:, some] += share * self._of_run(run, part, depth)
        return Displaced(*(row.reshape(np.shape(pose.mean)) for row in total))

    def freeboard(self, pose: Pose) -> Floats:
        """Least height of a deck edge above the waterline [m], appendages left out."""
        import numpy as np

        least = np.full(np.shape(pose.mean), np.inf)
        for run in self._laid:
            if run.run.closed:
                continue
            y, z = run.edge_y[:, [0, -1]], run.edge_z[:, [0, -1]]
            level = self._level(run.edge_x, pose)[..., None] + pose.tangent[..., None, None] * y
            least = np.minimum(least, (z - level).min(axis=(-1, -2)))
        return least

    def _level(self, x: Floats, pose: Pose) -> Floats:
        """Height of the waterline on the centreline, (..., x)."""
        half = self.lpp / 2.0
        bend = 1.0 - (x / half - 1.0) ** 2
        level: Floats = (
            pose.mean[..., None]
            - pose.tau[..., None] * (x - half)
            + pose.deflection[..., None] * bend
        )
        return level

    def _of_run(self, run: _Laid, pose: Pose, depth: float) -> Floats:
        """The ten integrals (10, draws) of one run."""
        import numpy as np

        if depth:
            # Depth is measured along gravity, u along z.
            down = depth * np.sqrt(1.0 + pose.tangent**2 + pose.tau**2)
            pose = pose.moved(pose.mean - down, pose.tau)
        tangent = pose.tangent[:, None]
        weight = np.broadcast_to(run.weight, (len(pose.mean), len(run.weight)))
        edge = self._level(run.edge_x, pose)
        above = (run.edge_z - edge[..., None] - tangent[..., None] * run.edge_y).min(axis=-1)
        wet = above < 0.0
        which, cell = np.nonzero(wet[:, 1:] != wet[:, :-1])
        if len(which):
            weight = weight.copy()
            for node in range(_NODES):
                weight[which, cell * _NODES + node] = 0.0
        level = self._level(run.x, pose)
        u = run.z - level[..., None] - tangent[..., None] * run.y
        total = _integrals(run.x, weight, level, tangent, run.y, u)
        if len(which):
            ends = self._of_ends(run, pose, which, cell, above)
            for k in range(len(which)):  # a pose may have several
                total[:, which[k]] += ends[:, k]
        return total

    def _of_ends(
        self,
        run: _Laid,
        pose: Pose,
        which: NDArray[np.intp],
        cell: NDArray[np.intp],
        least: Floats,
    ) -> Floats:
        """Integrals over the wet part of cells inside which the waterline leaves the hull.

        ``least`` (draws, C + 1) is the height of each cell end's lowest point above the waterline.
        """
        import numpy as np

        some = Pose(*(a[which] for a in dataclasses.astuple(pose)))
        tangent = some.tangent[:, None]
        half = self.lpp / 2.0

        def sections(x: Floats) -> tuple[Floats, Floats, Floats]:
            y, z = run.run.at(x)
            level = (
                some.mean[:, None]
                - some.tau[:, None] * (x - half)
                + some.deflection[:, None] * (1.0 - (x / half - 1.0) ** 2)
            )
            return y, z - level[..., None] - tangent[..., None] * y, level

        aft, fore = least[which, cell], least[which, cell + 1]
        aft_wet = aft < 0.0
        start = np.where(aft_wet, run.edge_x[cell], run.edge_x[cell + 1])
        inside, low = start, np.where(aft_wet, aft, fore)
        outside = np.where(aft_wet, run.edge_x[cell + 1], run.edge_x[cell])
        high = np.where(aft_wet, fore, aft)
        for _ in range(_SECANTS):  # false position, the end that stays counted half (Illinois)
            x = inside + (outside - inside) * low / (low - high)
            _, u, _ = sections(x[:, None])
            now = u.min(axis=(-1, -2))
            under = now < 0.0
            low, high = np.where(under, now, 0.5 * low), np.where(under, 0.5 * high, now)
            inside, outside = np.where(under, x, inside), np.where(under, outside, x)
        # Either side of the bracket may be the one that came close.
        end = inside + (outside - inside) * low / (low - high)
        nodes, weights = _gauss(_END_NODES)
        wide = 0.5 * (end - start)
        x = (0.5 * (end + start))[:, None] + wide[:, None] * nodes
        y, u, level = sections(x)
        return _integrals(x, np.abs(wide)[:, None] * weights, level, tangent, y, u)


@cache
def _gauss(count: int) -> tuple[Floats, Floats]:
    import numpy as np

    nodes, weights = np.polynomial.legendre.leggauss(count)
    return nodes, weights


def _integrals(
    x: Floats, weight: Floats, level: Floats, tangent: Floats, y: Floats, u: Floats
) -> Floats:
    """Sum over sections (draws, S): the ten figures of `Displaced`, (10, draws)."""
    import numpy as np

    part = cut(y, u)
    of_z = part.about_u + level * part.area + tangent * part.about_y
    rows = [
        part.area, x * part.area, part.about_y, of_z,
        part.breadth, x * part.breadth, part.breadth_1,
        x * x * part.breadth, x * part.breadth_1, part.breadth_2,
    ]  # fmt: skip
    return np.stack([(weight * row).sum(axis=-1) for row in rows])


def _lay(run: Run) -> _Laid:
    import numpy as np

    nodes, weights = _gauss(_NODES)
    cells = _FINE_CELLS if len(run.side) <= _FEW_CORNERS else _CELLS
    steps = np.linspace(0.0, 1.0, cells, endpoint=False)
    starts, gaps = run.stations[:-1], np.diff(run.stations)
    edge = np.append((starts[:, None] + gaps[:, None] * steps).ravel(), run.stations[-1])
    half = 0.5 * np.diff(edge)
    x = (0.5 * (edge[1:] + edge[:-1])[:, None] + half[:, None] * nodes).ravel()
    y, z = run.at(x)
    edge_y, edge_z = run.at(edge)
    return _Laid(run, x, (half[:, None] * weights).ravel(), y, z, edge, edge_y, edge_z)
