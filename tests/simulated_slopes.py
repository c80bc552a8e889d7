"""Simulated readings with ship, reading and device-scale scatter, and how often the interval of the
slope (that is, of GM) holds the truth."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from scipy.stats import t as student

from incline.variance import slope_design

LARGEST = 0.07  # tangent at the largest moment, about 4 degrees
MIXES = ((0, 1, 0), (1, 1, 0), (2, 0.5, 0), (0, 1, 1), (1, 0.5, 1))  # % of the largest tangent
STANDARD = (0, 1, 2, 1, 0, -1, -2, -1, 0)
SHORT = (0, 1, 2, 0, -1, -2, 0)
LAYOUTS = {
    "9 shifts, 3 devices": (STANDARD, 3, 0.0),
    "7 shifts, 2 devices": (SHORT, 2, 0.0),
    "9 shifts, 3 devices, 15 % missing": (STANDARD, 3, 0.15),
    "7 shifts, 2 devices, 15 % missing": (SHORT, 2, 0.15),
}


@dataclass(frozen=True)
class Coverage:
    share: float  # of intervals that hold the true slope
    half_width: float  # median, relative to the slope


def coverage(
    moments: tuple[int, ...],
    devices: int,
    mix: tuple[float, float, float],
    *,
    missing: float = 0.0,
    lengths_known: bool = False,
    trials: int = 2000,
    seed: int = 20,
) -> Coverage:
    """Share of 95 % intervals that hold the truth; missing readings are drawn anew 40 times."""
    rng = np.random.default_rng(seed)
    m = np.asarray(moments, float) / max(moments)
    n = len(m)
    shift, device = np.tile(np.arange(n), devices), np.repeat(np.arange(devices), n)
    rounds = 40 if missing else 1
    inside: list[np.ndarray] = []
    widths: list[np.ndarray] = []
    for _ in range(rounds):
        keep = _kept(rng, device, missing)
        tangents = _tangents(rng, m[shift], shift, device, mix, trials // rounds)[:, keep]
        x, s, d = m[shift][keep], shift[keep], device[keep]
        found = slope_design(x, s, d, lengths_known=lengths_known).scatter(tangents)
        columns = np.column_stack([x, d[:, None] == np.arange(devices)])
        row = np.linalg.pinv(columns)[0]
        slope = tangents @ row
        variance, dof = found.variance, np.asarray(found.dof)
        if lengths_known:  # the stated length errors, first order
            per_device = np.array([(row * x)[d == j].sum() for j in range(devices)])
            stated = slope**2 * (per_device**2).sum() * (mix[2] / 100.0) ** 2
            dof = dof * (variance + stated) ** 2 / variance**2
            variance = variance + stated
        half = student.ppf(0.975, np.maximum(np.floor(dof), 1.0)) * np.sqrt(variance)
        inside.append(np.abs(slope - LARGEST) < half)
        widths.append(half / LARGEST)
    return Coverage(float(np.concatenate(inside).mean()), float(np.median(np.concatenate(widths))))


def _kept(rng: np.random.Generator, device: np.ndarray, missing: float) -> np.ndarray:
    """Which readings are there: at least three of each device."""
    while True:
        keep = rng.random(len(device)) >= missing
        if min(np.bincount(device[keep], minlength=device.max() + 1)) >= 3:
            return keep


def _tangents(
    rng: np.random.Generator,
    x: np.ndarray,
    shift: np.ndarray,
    device: np.ndarray,
    mix: tuple[float, float, float],
    trials: int,
) -> np.ndarray:
    ship, reading, scale = (share / 100.0 for share in mix)
    scales = 1.0 + scale * rng.normal(size=(trials, device.max() + 1))
    common = ship * LARGEST * rng.normal(size=(trials, shift.max() + 1))
    own = reading * LARGEST * rng.normal(size=(trials, len(x)))
    return LARGEST * x * scales[:, device] + common[:, shift] + own + 0.3 * device
