"""Scores of the dictionary's patterns, and the values that a clean trial passes by chance.

Score of a pattern: twice the log of the likelihood ratio against the undisturbed line, the scatter
unknown, less what its kind must be charged for having many members. The largest over the dictionary
is held against a critical value simulated for the trial's own layout. Random scatter of the ship
("unsettled ship") stands in the same competition: a systematic cause is named only when it beats
that by more than an unsettled ship would let it.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property
from typing import TYPE_CHECKING

from incline.diagnosis.patterns import Cause, Layout, Pattern, dictionary

if TYPE_CHECKING:
    import numpy as np
    from numpy.typing import NDArray

    Floats = NDArray[np.float64]

__all__ = ["Explained", "Scan", "explain"]

_SIMULATED = 12_000
_SHIP_SHARE, _DEVICE_SHARE = 0.038, 0.007
"""False alarms allowed to the ship's patterns and to the devices': 4.5 % together. Devices get
less, their faults being gross when they occur."""
_UNSETTLED_SHARE = 0.09
"""How often an unsettled ship may pass for a systematic cause."""
_MOST = 3  # faults looked for in one trial

_CHARGE: dict[Cause, float] = {
    "one disturbed shift": 3.3,
    "wind or current changed once": 4.5,
    "test weight misrecorded": 0.5,
    "unsettled ship": 4.0,
    "misread reading": 4.0,
    "wrong length or scale": 1.0,
    "device disturbed": 4.0,
    "bob or float touching": 4.0,
}
"""Charge on the score of a kind of disturbance, of the order of 2 ln(number of its members): one
shift of nine fits chance more easily than a drift does. Tuned by simulation on the standard
sequence; critical values are simulated with the charges in."""


@dataclass(frozen=True, slots=True, eq=False)
class Explained:
    """One finding: a pattern, or None for an unsettled ship, with score, critical value and size.

    ``rivals`` are patterns that fit nearly as well, best first.
    """

    pattern: Pattern | None
    score: float
    critical: float
    size: float
    rivals: tuple[Pattern, ...]


class Scan:
    """The dictionary against one layout, ``given`` patterns already taken into the model."""

    def __init__(self, layout: Layout, given: tuple[Pattern, ...] = ()) -> None:
        import numpy as np

        self.layout = layout
        self.simulated = _SIMULATED if not given else _SIMULATED // 3
        model = np.column_stack([layout.fixed(), *(p.shape for p in given)])
        basis = _basis(model)
        self.take_out = np.eye(len(model)) - basis @ basis.T
        self.freedom = len(model) - basis.shape[1]
        patterns = dictionary(layout)
        shapes = self.take_out @ np.stack([p.shape for p in patterns], axis=1)
        norms = np.sqrt((shapes**2).sum(axis=0))
        # A pattern that the model holds already cannot be seen.
        seen = norms > 1e-6 * max(1.0, float(norms.max()))
        self.patterns = [p for p, s in zip(patterns, seen, strict=True) if s]
        self.norms = norms[seen]
        self.shapes = shapes[:, seen] / self.norms
        self.ship = np.array([p.where == "ship" for p in self.patterns])
        self.one_sided = np.array([p.one_sided for p in self.patterns])
        self.charge = np.array([_CHARGE.get(p.cause, 0.0) for p in self.patterns])
        by_shift = (layout.shift[:, None] == np.arange(layout.shifts)).astype(float)
        common = _basis(self.take_out @ by_shift)
        self.common = common
        self.common_freedom = common.shape[1]

    def scores(self, tangents: Floats) -> tuple[Floats, Floats, Floats]:
        """Scores (..., K), that of an unsettled ship (...,), and sizes along shapes (..., K)."""
        import numpy as np

        rest = tangents @ self.take_out
        total = np.maximum((rest**2).sum(axis=-1), 1e-300)
        along = rest @ self.shapes
        explained = np.where(self.one_sided & (along < 0.0), 0.0, along**2)
        left = np.maximum(total[..., None] - explained, 1e-12 * total[..., None])
        scores = self.freedom * np.log(total[..., None] / left) - self.charge
        return scores, self._unsettled(rest, total), along

    def _unsettled(self, rest: Floats, total: Floats) -> Floats:
        """Two variances, of shift means and of the rest, against one."""
        import numpy as np

        own = self.freedom - self.common_freedom
        if own < 1 or self.common_freedom < 1:
            return np.zeros_like(total)
        ship = ((rest @ self.common) ** 2).sum(axis=-1)
        reading = np.maximum(total - ship, 1e-12 * total)
        mean_ship, mean_reading = ship / self.common_freedom, reading / own
        score = (
            self.freedom * np.log(total / self.freedom)
            - self.common_freedom * np.log(np.maximum(mean_ship, 1e-300))
            - own * np.log(mean_reading)
        )
        return np.where(mean_ship > mean_reading, score, 0.0)

    @cached_property
    def critical(self) -> tuple[float, float]:
        """Critical scores of the ship's and of the devices' patterns."""
        import numpy as np

        rng = np.random.default_rng(97)
        clean = rng.normal(size=(self.simulated, len(self.take_out)))
        scores, unsettled, _ = self.scores(clean)
        charged = unsettled - _CHARGE["unsettled ship"]
        ship = np.maximum(scores[:, self.ship].max(axis=1, initial=0.0), charged)
        device = scores[:, ~self.ship].max(axis=1, initial=0.0)
        return (
            float(np.quantile(ship, 1.0 - _SHIP_SHARE)),
            float(np.quantile(device, 1.0 - _DEVICE_SHARE)),
        )

    def _limits(self) -> Floats:
        import numpy as np

        limits: Floats = np.where(self.ship, self.critical[0], self.critical[1])
        return limits

    @cached_property
    def margin(self) -> float:
        """By how much a pattern must beat an unsettled ship to be named."""
        import numpy as np

        rng = np.random.default_rng(98)
        readings = rng.normal(size=(self.simulated, len(self.take_out)))
        ship = rng.normal(size=(self.simulated, self.layout.shifts))
        scores, unsettled, _ = self.scores(readings + ship[:, self.layout.shift])
        over = scores - self._limits()
        top = over.argmax(axis=1)
        rows = np.arange(len(top))
        lead = np.where(over[rows, top] > 0.0, scores[rows, top] - unsettled, -np.inf)
        return float(np.quantile(lead, 1.0 - _UNSETTLED_SHARE, method="lower"))

    def best(self, tangents: Floats) -> Explained | None:
        """The best explanation of tangents (R,) when chance is not enough, else None."""
        import numpy as np

        scores, unsettled, along = self.scores(tangents)
        over = scores - self._limits()
        top = int(np.argmax(over))
        ship = self.critical[0]
        if over[top] <= 0.0:
            shaken = float(unsettled) - _CHARGE["unsettled ship"]
            return Explained(None, shaken, ship, 0.0, ()) if shaken > ship else None
        if scores[top] - float(unsettled) <= self.margin:
            return Explained(None, float(unsettled), ship, 0.0, ())
        fit = scores + self.charge  # how well each fits, whatever its kind is charged
        order = np.argsort(-fit)
        near = [self.patterns[k] for k in order if k != top and fit[top] - fit[k] < _NEARLY]
        return Explained(
            pattern=self.patterns[top],
            score=float(scores[top]),
            critical=float(self._limits()[top]),
            size=float(along[top] / self.norms[top]),
            rivals=tuple(near),
        )


_NEARLY = 2.0
"""Difference of scores below which two explanations fit about equally well (a likelihood ratio
of e)."""


def explain(layout: Layout, tangents: Floats, first: Scan | None = None) -> list[Explained]:
    """Findings one after another: each enters the model before the next is looked for."""
    found: list[Explained] = []
    taken: tuple[Pattern, ...] = ()
    scan = first or Scan(layout)
    while len(found) < _MOST and scan.freedom > scan.common_freedom + 1:
        one = scan.best(tangents)
        if one is None:
            break
        found.append(one)
        if one.pattern is None:
            break
        taken = (*taken, one.pattern)
        scan = Scan(layout, taken)
    return found


def _basis(columns: Floats) -> Floats:
    import numpy as np

    u, s, _ = np.linalg.svd(columns, full_matrices=False)
    kept: Floats = u[:, s > 1e-9 * max(1.0, float(s[0]))]
    return kept
