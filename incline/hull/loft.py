"""The hull's surface between its stations.

Corresponding points of neighbouring stations are joined by cubic splines along the hull, one spline
from break to break (a break is a repeated station); in a section straight lines join the points.
"""

from __future__ import annotations

import itertools
from dataclasses import dataclass
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from collections.abc import Sequence

    import numpy as np
    from numpy.typing import NDArray

    from incline.record import Body, OffsetPoint, Station

    Floats = NDArray[np.float64]
    Side = tuple[OffsetPoint, ...]

__all__ = ["Run", "runs_of"]


@dataclass(frozen=True, slots=True, eq=False)
class Run:
    """A smooth run of stations of one body.

    ``stations`` (n,) [m]; ``pieces`` (4, n - 1, P, 2) are the cubic's coefficients of half-breadth
    and height, highest power first, for corners from the port deck edge over the keel to the
    starboard deck edge. ``side`` (P,) is -1 to port, 0 at the keel, +1 to starboard; ``centre`` [m]
    is the body's centreplane. ``closed`` says that it may lie wholly under water.
    """

    stations: Floats
    pieces: Floats
    side: Floats
    centre: float
    closed: bool

    def at(self, x: Floats) -> tuple[Floats, Floats]:
        """Corners y, z (..., P) [m] of the sections at x (...)."""
        import numpy as np

        inner = self.stations[1:-1]
        piece = np.searchsorted(inner, x, side="right")
        ahead = (x - self.stations[piece])[..., None, None]
        c = self.pieces
        found = ((c[0, piece] * ahead + c[1, piece]) * ahead + c[2, piece]) * ahead + c[3, piece]
        # A spline that swings below zero near a sharp end must not turn the section inside out.
        breadth = np.maximum(found[..., 0], 0.0)
        return self.centre + self.side * breadth, found[..., 1]


def runs_of(body: Body) -> list[Run]:
    """The smooth runs of a body, those of its mirror image with them."""
    import numpy as np

    runs = []
    for stations in _split(body.stations):
        starboard = _matched([s.starboard for s in stations])
        alike = all(s.port is s.starboard or s.port == s.starboard for s in stations)
        port = starboard if alike else _matched([s.port for s in stations])
        corners = np.concatenate([port[:, ::-1], starboard[:, 1:]], axis=1)
        side = np.concatenate([np.full(port.shape[1], -1.0), np.ones(starboard.shape[1] - 1)])
        side[port.shape[1] - 1] = 0.0
        x = np.array([s.x for s in stations])
        closed = body.kind == "appendage"
        run = Run(x, _pieces(x, corners), side, body.y, closed)
        runs.append(run)
        if body.mirrored:
            flipped = -side[::-1]
            runs.append(Run(x, run.pieces[:, :, ::-1], flipped, -body.y, closed))
    return runs


def _split(stations: Sequence[Station]) -> list[list[Station]]:
    """Stations from break to break."""
    runs: list[list[Station]] = [[]]
    for station in stations:
        if runs[-1] and station.x == runs[-1][-1].x:
            runs.append([])
        runs[-1].append(station)
    return [run for run in runs if len(run) > 1]


def _pieces(x: Floats, corners: Floats) -> Floats:
    """Cubic splines through corners (n, P, 2): a line through two, a parabola through three."""
    from scipy.interpolate import CubicSpline

    pieces: Floats = CubicSpline(x, corners, bc_type="not-a-knot").c
    return pieces


def _matched(sides: Sequence[Side]) -> Floats:
    """Points (n, P, 2) of one side with as many at every station, keel first.

    Where all stations have as many points between the lines they share, points go together by
    their order; otherwise by their share of the girth between those lines.
    """
    import numpy as np

    parts = [_between_lines(side, _shared_lines(sides)) for side in sides]
    columns: list[Floats] = []
    for stretch in zip(*parts, strict=True):
        if len({len(points) for points in stretch}) == 1:
            same = np.array(stretch)
        else:
            shares = [_girth_shares(points) for points in stretch]
            every = _merged(np.concatenate(shares))
            same = np.array(
                [
                    np.stack([np.interp(every, share, points[:, k]) for k in (0, 1)], axis=-1)
                    for share, points in zip(shares, stretch, strict=True)
                ]
            )
        columns.append(same if not columns else same[:, 1:])
    return np.concatenate(columns, axis=1)


def _shared_lines(sides: Sequence[Side]) -> list[str]:
    """Names of lines that every station has, in their order."""
    names = [[p.line for p in side if p.line] for side in sides]
    return [n for n in names[0] if all(n in others for others in names)]


def _between_lines(side: Side, lines: Sequence[str]) -> list[Floats]:
    """Points from keel to deck edge, cut at the lines; a point on a line ends one and starts one.

    A line at the keel or the deck edge cuts nothing off.
    """
    import numpy as np

    points = np.array([(p.y, p.z) for p in side])
    at = [i for i, p in enumerate(side) if p.line in lines and 0 < i < len(side) - 1]
    ends = [0, *at, len(side) - 1]
    return [points[a : b + 1] for a, b in itertools.pairwise(ends)]


def _girth_shares(points: Floats) -> Floats:
    import numpy as np

    along = np.concatenate([[0.0], np.cumsum(np.hypot(*np.diff(points, axis=0).T))])
    if along[-1] <= 0.0:  # all in one point, as at a stem
        return np.linspace(0.0, 1.0, len(points))
    share: Floats = along / along[-1]
    return share


def _merged(shares: Floats) -> Floats:
    """Distinct shares in order; closer than a billionth is one."""
    import numpy as np

    ordered = np.unique(shares)
    kept: Floats = ordered[np.concatenate([[True], np.diff(ordered) > 1e-9])]
    kept[-1] = 1.0
    return kept
