"""Free liquids: the heeling moment of each tank's liquid as the ship heels.

While its surface stays clear of bottom and top, liquid acts as a fixed moment. In a box tank the
moment is exact at every heel, also where the surface reaches the bottom or the top.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING, Protocol

if TYPE_CHECKING:
    from collections.abc import Sequence

    import numpy as np
    from numpy.typing import NDArray

    from incline.record import Tank

    Floats = NDArray[np.float64]

__all__ = [
    "BoxTank", "Liquids", "TankLiquids", "box_shift", "pocketing_tanks", "reach", "tank_liquids",
]  # fmt: skip


class Liquids(Protocol):
    """Heeling moment of all liquids."""

    def at(self, tangent: Floats, fsm: Floats) -> tuple[Floats, Floats]:
        """Moment [t m] and its slope (..., n) at tangents (..., n).

        ``fsm`` (..., T) [t m] are the free-surface moments of the tanks.
        """
        ...

    def start(self, tangent: Floats, fsm: Floats) -> Floats:
        """Moment [t m] at the list with the test weights at their start, tangents (...)."""
        ...


@dataclass(frozen=True, slots=True)
class BoxTank:
    """Breadth, level of the liquid and depth of a box tank [m]."""

    breadth: float
    level: float
    depth: float

    @property
    def clear(self) -> float:
        """Tangent of heel at which the surface first reaches the bottom or the top."""
        return 2.0 * min(self.level, self.depth - self.level) / self.breadth


def box_shift(tank: BoxTank, tangent: Floats) -> tuple[Floats, Floats]:
    """How far the centre of the liquid moves across and up [m] from its place upright.

    Exact: the liquid is a trapezium, a triangle where it leaves the bottom bare, or the tank less
    a triangle of air where it reaches the top.
    """
    import numpy as np

    b, h, depth = tank.breadth, tank.level, tank.depth
    t = np.maximum(np.abs(tangent), 1e-12)
    # The nearer of bottom and top is met first; the triangle then grows until it meets the other.
    least = min(h, depth - h)
    met, both = t * b > 2.0 * least, 2.0 * b * least * t > depth * depth
    low = h <= depth - h
    bare, full = (met & ~both, False) if low else (False, met & ~both)
    # Clear of both: a trapezium.
    across, up = b * b * t / (12.0 * h), b * b * t * t / (24.0 * h)
    # Off the bottom: a triangle of liquid with base w.
    w = np.sqrt(2.0 * b * h / t)
    across = np.where(bare, b / 2.0 - w / 3.0, across)
    up = np.where(bare, w * t / 3.0 - h / 2.0, up)
    # At the top: a triangle of air with base v.
    air = b * (depth - h)
    v = np.sqrt(2.0 * air / t)
    across = np.where(full, air * (b / 2.0 - v / 3.0) / (b * h), across)
    top = (b * depth * depth / 2.0 - air * (depth - v * t / 3.0)) / (b * h)
    up = np.where(full, top - h / 2.0, up)
    # Both: width falls from wide at the bottom to narrow at the top.
    wide, narrow = b * h / depth + depth / (2.0 * t), b * h / depth - depth / (2.0 * t)
    square = (wide * wide + wide * narrow + narrow * narrow) / 6.0
    middle = b / 2.0 - square * depth / (b * h)
    height = depth * depth * (wide + 2.0 * narrow) / (6.0 * b * h)
    across = np.where(both, middle, across)
    up = np.where(both, height - h / 2.0, up)
    return np.sign(tangent) * across, up


def reach(tank: BoxTank, tangent: Floats) -> Floats:
    """Heeling lever of the liquid over that of a fixed moment at small heels, times t.

    The liquid moves by y across and z up; its lever is y + z t, and b^2 / (12 h) t at small heels.
    """
    across, up = box_shift(tank, tangent)
    shape: Floats = (across + up * tangent) * 12.0 * tank.level / tank.breadth**2
    return shape


class TankLiquids:
    """Box tanks exactly, the others by their free-surface moment; ``boxes`` by number of tank."""

    def __init__(self, boxes: Sequence[tuple[int, BoxTank]]) -> None:
        self.boxes = tuple(boxes)

    def at(self, tangent: Floats, fsm: Floats) -> tuple[Floats, Floats]:
        """Moments, slopes by central differences."""
        step = 1e-6
        up, down = self._moment(tangent + step, fsm), self._moment(tangent - step, fsm)
        return self._moment(tangent, fsm), (up - down) / (2.0 * step)

    def start(self, tangent: Floats, fsm: Floats) -> Floats:
        """The same at the list."""
        moment: Floats = self._moment(tangent[..., None], fsm)[..., 0]
        return moment

    def _moment(self, tangent: Floats, fsm: Floats) -> Floats:
        moment: Floats = fsm.sum(axis=-1)[..., None] * tangent
        for i, tank in self.boxes:
            moment = moment + fsm[..., i, None] * (reach(tank, tangent) - tangent)
        return moment


def pocketing_tanks(tanks: Sequence[Tank], heels: Sequence[float]) -> tuple[str, ...]:
    """Names of box tanks whose surface reaches the bottom or the top at tangents ``heels``."""
    most = max((abs(t) for t in heels), default=0.0)
    slack = tank_liquids(tanks).boxes
    return tuple(tanks[i].name for i, box in slack if box.clear < most)


def tank_liquids(tanks: Sequence[Tank]) -> TankLiquids:
    """The slack tanks of a trial; those recorded as boxes move exactly."""
    boxes = []
    for i, t in enumerate(tanks):
        if t.box and t.fsm and t.breadth and t.level and t.depth and t.level < t.depth:
            boxes.append((i, BoxTank(t.breadth, t.level, t.depth)))
    return TankLiquids(boxes)
