"""Simulated trials with one fault each, and how often it is found and rightly named.

Amplitudes are in units of the standard deviation of one tangent reading, moments scaled to 1 at the
largest; the standard sequence of nine shifts and three devices unless said.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

import numpy as np

from incline.diagnosis.patterns import Layout, Stay
from incline.diagnosis.scan import Explained, Scan

STANDARD = (0.0, 0.5, 1.0, 0.5, 0.0, -0.5, -1.0, -0.5, 0.0)
SHORT = (0.0, 0.5, 1.0, 0.0, -0.5, -1.0, 0.0)
LONG = (0.0, 0.25, 0.5, 0.75, 1.0, 0.5, 0.0, -0.25, -0.5, -0.75, -1.0, -0.5, 0.0)
# Four weights, moved and moved back one by one: each stay of a weight at a place it was moved to.
STAYS = (
    Stay("A", 1, 4), Stay("B", 2, 3), Stay("B", 3, 9), Stay("A", 4, 9),
    Stay("C", 5, 8), Stay("D", 6, 7), Stay("D", 7, 9), Stay("C", 8, 9),
)  # fmt: skip


def layout(
    moments: tuple[float, ...] = STANDARD,
    devices: int = 3,
    stays: tuple[Stay, ...] = STAYS,
    missing: int | None = None,
) -> Layout:
    n = len(moments)
    shift, device = np.tile(np.arange(n), devices), np.repeat(np.arange(devices), n)
    keep = np.arange(n * devices) != (-1 if missing is None else missing)
    return Layout(np.array(moments), np.linspace(0.0, 1.0, n), shift[keep], device[keep], stays)


Fault = Callable[[np.random.Generator, Layout], np.ndarray]


def _side(rng: np.random.Generator) -> float:
    return float(rng.choice([-1.0, 1.0]))


def liquid(_: np.random.Generator, at: Layout) -> np.ndarray:
    m = at.moments[at.shift]
    return -8.0 * np.sign(m) * np.maximum(0.0, np.abs(m) - 0.5)


def mooring(rng: np.random.Generator, at: Layout) -> np.ndarray:
    side = _side(rng)
    return -6.0 * side * np.maximum(0.0, side * at.moments[at.shift])


def drift(rng: np.random.Generator, at: Layout) -> np.ndarray:
    return 4.0 * _side(rng) * at.times[at.shift]


def weight(rng: np.random.Generator, at: Layout) -> np.ndarray:
    stay = at.stays[int(rng.integers(len(at.stays)))]
    return 3.0 * _side(rng) * ((at.shift >= stay.first) & (at.shift < stay.last))


def one_shift(rng: np.random.Generator, at: Layout) -> np.ndarray:
    return 4.0 * _side(rng) * (at.shift == rng.integers(at.shifts))


def length(rng: np.random.Generator, at: Layout) -> np.ndarray:
    return 4.0 * _side(rng) * at.moments[at.shift] * (at.device == rng.integers(at.devices))


def misread(rng: np.random.Generator, at: Layout) -> np.ndarray:
    return 8.0 * _side(rng) * (np.arange(len(at.shift)) == rng.integers(len(at.shift)))


def unsettled(rng: np.random.Generator, at: Layout) -> np.ndarray:
    return rng.normal(size=at.shifts)[at.shift]


def clean(_: np.random.Generator, at: Layout) -> np.ndarray:
    return np.zeros(len(at.shift))


@dataclass(frozen=True)
class Rate:
    found: float
    named: float
    systematic: float  # a cause other than an unsettled ship


def rate(at: Layout, fault: Fault, cause: str = "", trials: int = 4000, seed: int = 5) -> Rate:
    scan, rng = Scan(at), np.random.default_rng(seed)
    found = named = systematic = 0
    for _ in range(trials):
        one = scan.best(rng.normal(size=len(at.shift)) + fault(rng, at))
        found += one is not None
        systematic += one is not None and one.pattern is not None
        named += one is not None and names(scan, one, cause)
    return Rate(found / trials, named / trials, systematic / trials)


def names(scan: Scan, one: Explained, cause: str) -> bool:
    """Whether the best explanation is the cause, or cannot be told from it in this layout: the
    shift with one weight's only stay looks the same as a gust at that shift."""
    if one.pattern is None:
        return False
    if one.pattern.cause == cause:
        return True
    shape = scan.take_out @ one.pattern.shape
    for rival in one.rivals:
        other = scan.take_out @ rival.shape
        alike = abs(shape @ other) / np.sqrt((shape @ shape) * (other @ other))
        if rival.cause == cause and alike > 0.999:
            return True
    return False
