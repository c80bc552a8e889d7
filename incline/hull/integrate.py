"""The hull cut at a waterline: volume, centre of buoyancy and waterplane by integration.

Lengthwise each interval of stations is integrated by Gauss's rule on the lofted surface, which is
exact there for areas and nearly so for moments. Where the waterline leaves the hull inside a cell,
the rule is moved onto the wet part.
"""

from __future__ import annotations

import copy
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
_LOOKS = 17
"""Points in a cell between which the waterline's end is looked for."""
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
    """The sections of all runs at the Gauss nodes and at the ends of cells, corners made as many.

    ``x`` (S + E,) and corners ``y``, ``z`` (S + E, P): S nodes, three a cell in the order of the
    cells, then E cell ends. ``weight`` (S,). Each cell (C,) has its ``run``, and its ends ``aft``
    and ``fore`` as indices of cell ends. ``deck_x`` (D,), ``deck_y``, ``deck_z`` (D, 2) are the
    deck edges of hulls.
    """

    x: Floats
    y: Floats
    z: Floats
    weight: Floats
    run: NDArray[np.intp]
    aft: NDArray[np.intp]
    fore: NDArray[np.intp]
    deck_x: Floats
    deck_y: Floats
    deck_z: Floats


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
        self.layers: tuple[tuple[float, float], ...] = tuple(layers)
        self._runs = [run for body in offsets.bodies for run in runs_of(body)]
        self._laid = _lay(self._runs)

    @property
    def reach(self) -> tuple[float, float]:
        """Lowest and highest point of the hull [m]."""
        return float(self._laid.z.min()), float(self._laid.z.max())

    def unlayered(self) -> Hull:
        """The same hull in mixed water."""
        plain = copy.copy(self)
        plain.layers = ((0.0, 1.0),)
        return plain

    def displaced(self, pose: Pose) -> Displaced:
        """Integrals below the waterline, for poses of any shape."""
        import numpy as np

        mean = np.asarray(pose.mean)
        if mean.size == 1:
            flat = [np.reshape(a, 1) for a in _parts(pose)]
        else:
            flat = [np.ravel(a) for a in np.broadcast_arrays(*_parts(pose))]
        count = len(flat[0])
        total = np.zeros((10, count))
        step = max(1, _AT_ONCE // self._laid.y.size)
        for first in range(0, count, step):
            some = slice(first, first + step)
            part = Pose(*(a[some] for a in flat))
            for depth, share in self.layers:
                total[:, some] += share * self._below(part, depth)
        return Displaced(*(row.reshape(mean.shape) for row in total))

    def freeboard(self, pose: Pose) -> Floats:
        """Least height of a deck edge above the waterline [m], appendages left out."""
        laid = self._laid
        level = self._level(laid.deck_x, pose)[..., None]
        level = level + pose.tangent[..., None, None] * laid.deck_y
        least: Floats = (laid.deck_z - level).min(axis=(-1, -2))
        return least

    def _level(self, x: Floats, pose: Pose) -> Floats:
        """Height of the waterline on the centreline, (..., x)."""
        ahead = x - self.lpp / 2.0
        bend = 1.0 - (ahead / (self.lpp / 2.0)) ** 2
        level: Floats = (
            pose.mean[..., None] - pose.tau[..., None] * ahead + pose.deflection[..., None] * bend
        )
        return level

    def _below(self, pose: Pose, depth: float) -> Floats:
        """The ten integrals (10, draws) below a depth under the waterline."""
        import numpy as np

        laid, nodes = self._laid, len(self._laid.weight)
        if depth:
            # Depth is measured along gravity, u along z.
            down = depth * np.sqrt(1.0 + pose.tangent**2 + pose.tau**2)
            pose = pose.moved(pose.mean - down, pose.tau)
        tangent = pose.tangent[:, None]
        level = self._level(laid.x, pose)
        u = laid.z - level[..., None] - tangent[..., None] * laid.y
        least = u[:, nodes:].min(axis=-1)
        wet = least < 0.0
        which, cell = np.nonzero(wet[:, laid.fore] != wet[:, laid.aft])
        weight = laid.weight
        if len(which):
            weight = np.repeat(weight[None], len(pose.mean), axis=0)
            weight.reshape(len(pose.mean), -1, _NODES)[which, cell] = 0.0
        total = _integrals(
            laid.x[:nodes], weight, level[:, :nodes], tangent, laid.y[:nodes], u[:, :nodes]
        )
        for r in {int(r) for r in laid.run[cell]}:
            mine = laid.run[cell] == r
            draws, some = which[mine], cell[mine]
            ends = (laid.x[nodes + laid.aft[some]], laid.x[nodes + laid.fore[some]])
            dry_aft = ~wet[draws, laid.aft[some]]
            part = Pose(*(a[draws] for a in _parts(pose)))
            found = self._of_ends(self._runs[r], part, *ends, dry_aft)
            np.add.at(total.T, draws, found.T)
        return total

    def _of_ends(
        self, run: Run, pose: Pose, aft: Floats, fore: Floats, dry_aft: NDArray[np.bool_]
    ) -> Floats:
        """Integrals over the wet part of cells inside which the waterline leaves the hull.

        One cell a pose, between ``aft`` and ``fore``. Where the lowest point of the section passes
        the waterline is found between points close together, as on a straight line.
        """
        import numpy as np

        tangent = pose.tangent[:, None]

        def above(x: Floats) -> tuple[Floats, Floats, Floats]:
            y, z = run.at(x)
            ahead = x - self.lpp / 2.0
            level = (
                pose.mean[:, None]
                - pose.tau[:, None] * ahead
                + pose.deflection[:, None] * (1.0 - (ahead / (self.lpp / 2.0)) ** 2)
            )
            return y, z - level[..., None] - tangent[..., None] * y, level

        dry, start = np.where(dry_aft, aft, fore), np.where(dry_aft, fore, aft)
        share = np.linspace(0.0, 1.0, _LOOKS)
        x = start[:, None] + (dry - start)[:, None] * share
        least = above(x)[1].min(axis=-1)
        last = (least[:, 1:] >= 0.0).argmax(axis=-1)  # the last point still wet
        rows = np.arange(len(last))
        low, high = least[rows, last], least[rows, last + 1]
        end = x[rows, last] + (x[rows, last + 1] - x[rows, last]) * low / (low - high)
        nodes, weights = _gauss(_END_NODES)
        wide = 0.5 * (end - start)
        x = (0.5 * (end + start))[:, None] + wide[:, None] * nodes
        y, u, level = above(x)
        return _integrals(x, np.abs(wide)[:, None] * weights, level, tangent, y, u)


def _parts(pose: Pose) -> tuple[Floats, Floats, Floats, Floats]:
    return pose.mean, pose.tau, pose.deflection, pose.tangent


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


def _lay(runs: Sequence[Run]) -> _Laid:
    import numpy as np

    most = max(len(run.side) for run in runs)
    nodes, weights = _gauss(_NODES)
    columns: list[list[Floats]] = [[] for _ in range(7)]
    cells: list[tuple[NDArray[np.intp], ...]] = []
    decks: list[tuple[Floats, Floats, Floats]] = []
    ends = 0
    for r, run in enumerate(runs):
        edge = _edges(run)
        half = 0.5 * np.diff(edge)
        x = (0.5 * (edge[1:] + edge[:-1])[:, None] + half[:, None] * nodes).ravel()
        inner, outer = _padded(run, x, most), _padded(run, edge, most)
        found = (x, *inner, (half[:, None] * weights).ravel(), edge, *outer)
        for column, values in zip(columns, found, strict=True):
            column.append(values)
        count = np.arange(len(half))
        cells.append((np.full(len(half), r), ends + count, ends + count + 1))
        ends += len(edge)
        if not run.closed:
            y, z = run.at(edge)
            decks.append((edge, y[:, [0, -1]], z[:, [0, -1]]))
    x, y, z, weight, edge_x, edge_y, edge_z = (np.concatenate(c) for c in columns)
    run_of, aft, fore = (np.concatenate(c) for c in zip(*cells, strict=True))
    deck_x, deck_y, deck_z = (np.concatenate(c) for c in zip(*decks, strict=True))
    return _Laid(
        x=np.concatenate([x, edge_x]),
        y=np.concatenate([y, edge_y]),
        z=np.concatenate([z, edge_z]),
        weight=weight,
        run=run_of,
        aft=aft,
        fore=fore,
        deck_x=deck_x,
        deck_y=deck_y,
        deck_z=deck_z,
    )


def _edges(run: Run) -> Floats:
    """Ends of the cells of a run."""
    import numpy as np

    cells = _FINE_CELLS if len(run.side) <= _FEW_CORNERS else _CELLS
    steps = np.linspace(0.0, 1.0, cells, endpoint=False)
    starts, gaps = run.stations[:-1], np.diff(run.stations)
    return np.append((starts[:, None] + gaps[:, None] * steps).ravel(), run.stations[-1])


def _padded(run: Run, x: Floats, corners: int) -> tuple[Floats, Floats]:
    """Sections of a run with the last corner repeated: edges of no length add nothing."""
    import numpy as np

    y, z = run.at(x)
    more = [(0, 0), (0, corners - y.shape[1])]
    return np.pad(y, more, mode="edge"), np.pad(z, more, mode="edge")
