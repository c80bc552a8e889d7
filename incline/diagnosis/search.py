"""A trial's residuals searched for disturbances, and what each would do to the slope."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

from incline.diagnosis.patterns import Layout, Stay
from incline.diagnosis.scan import Explained, Scan, explain
from incline.diagnosis.words import ADVICE, size_in_words

if TYPE_CHECKING:
    import numpy as np
    from numpy.typing import NDArray

    from incline.diagnosis.patterns import Cause, Pattern
    from incline.observations import Observations
    from incline.record import Trial

    Floats = NDArray[np.float64]

__all__ = ["Hidden", "Left", "Search", "Sign", "layout_of", "search", "times_of"]


@dataclass(frozen=True, slots=True, kw_only=True)
class Sign:
    """A finding, with the change of the slope [1/(t m)] if it is the cause.

    ``expected`` (R) are the tangents that it and the findings before it make; empty without a
    pattern.
    """

    cause: str
    where: str
    shift: int | None
    device: str | None
    score: float
    critical: float
    size: str
    slope_change: float | None
    advice: str
    rank: int
    expected: tuple[float, ...] = ()


@dataclass(frozen=True, slots=True, kw_only=True)
class Hidden:
    """The smallest disturbance of a kind that would have shown [tangent], and what it does to b."""

    cause: Cause
    size: float
    slope_change: float


@dataclass(frozen=True, slots=True, kw_only=True)
class Left:
    """The slope without one reading, shift or device, less the slope with everything."""

    shift: int | None
    device: str | None
    slope_change: float


@dataclass(frozen=True, slots=True, kw_only=True)
class Search:
    """All that the residuals say."""

    signs: tuple[Sign, ...]
    hidden: tuple[Hidden, ...]
    left: tuple[Left, ...]
    critical: float


def layout_of(trial: Trial, seen: Observations, transverse: Floats) -> Layout:
    """The layout of a trial's readings; without clock times the shifts count as equally spaced."""
    import numpy as np

    return Layout(
        moments=transverse / np.abs(transverse[seen.shift]).max(),
        times=times_of(trial),
        shift=seen.shift,
        device=seen.device,
        stays=_stays(trial),
    )


def search(trial: Trial, seen: Observations, transverse: Floats) -> Search | None:
    """Search a trial; None where too few readings are left over to judge by."""
    import numpy as np

    layout = layout_of(trial, seen, transverse)
    scan = Scan(layout)
    if scan.freedom < 4 or (layout.devices > 1 and scan.freedom < scan.common_freedom + 2):
        return None
    scale = float(np.abs(transverse[seen.shift]).max())
    signs: list[Sign] = []
    taken: tuple[Pattern, ...] = ()
    for one in explain(layout, seen.tangents, scan):
        signs += _signs(trial, seen, layout, one, taken, scale)
        if one.pattern is not None:
            taken = (*taken, one.pattern)
    return Search(
        signs=tuple(signs),
        hidden=tuple(_hidden(scan, seen.tangents, scale)),
        left=tuple(_left(trial, seen, layout, scale)),
        critical=scan.critical[0],
    )


def _signs(
    trial: Trial, seen: Observations, layout: Layout, one: Explained, taken: tuple[Pattern, ...],
    scale: float,
) -> list[Sign]:  # fmt: skip
    numbers = [s.number for s in trial.shifts]
    if one.pattern is None:
        return [
            Sign(
                cause="unsettled ship", where="ship", shift=None, device=None, score=one.score,
                critical=one.critical, size="all devices leave the line together, at random",
                slope_change=None, advice=ADVICE["unsettled ship"], rank=0,
            )
        ]  # fmt: skip
    found: list[Sign] = []
    told: set[tuple[object, ...]] = set()
    plain = _slope(layout, seen.tangents, ())
    for rank, pattern in enumerate((one.pattern, *one.rivals)):
        key = (pattern.cause, pattern.shift, pattern.device, pattern.weight)
        if key in told or len(found) > 4:
            continue
        told.add(key)
        model = (*taken, pattern)
        fit = _fit(layout, seen.tangents, model)
        expected = _columns(layout, model) @ fit
        rest = seen.tangents - expected
        u = float((rest @ rest / max(len(rest) - len(fit), 1)) ** 0.5)
        found.append(
            Sign(
                cause=pattern.cause, where=pattern.where,
                shift=None if pattern.shift is None else numbers[pattern.shift],
                device=None if pattern.device is None else seen.devices[pattern.device].id,
                score=one.score, critical=one.critical,
                size=size_in_words(
                    pattern, float(fit[-1]), trial, seen, float(fit[0]) / scale, scale, u
                ),
                slope_change=(float(fit[0]) - plain) / scale,
                advice=ADVICE[pattern.cause], rank=min(rank, len(found)),
                expected=tuple(float(t) for t in expected),
            )
        )  # fmt: skip
    return found


def _columns(layout: Layout, patterns: tuple[Pattern, ...]) -> Floats:
    import numpy as np

    columns: Floats = np.column_stack([layout.fixed(), *(p.shape for p in patterns)])
    return columns


def _fit(layout: Layout, tangents: Floats, patterns: tuple[Pattern, ...]) -> Floats:
    import numpy as np

    fit: Floats = np.asarray(
        np.linalg.lstsq(_columns(layout, patterns), tangents, rcond=None)[0], dtype=np.float64
    )
    return fit


def _slope(layout: Layout, tangents: Floats, patterns: tuple[Pattern, ...]) -> float:
    return float(_fit(layout, tangents, patterns)[0])


_HIDEABLE: tuple[Cause, ...] = (
    "liquid at tank top or bottom",
    "line, fender or ground holding",
    "wind or current changed once",
    "slow drift",
)


def _hidden(scan: Scan, tangents: Floats, scale: float) -> list[Hidden]:
    """For each kind, the size found in nine cases of ten, by its worst pattern for the slope."""
    import numpy as np

    rest = scan.take_out @ tangents
    sd = float(np.sqrt(rest @ rest / scan.freedom))
    pull = np.linalg.pinv(scan.layout.fixed())[0]
    found = []
    for cause in _HIDEABLE:
        worst = Hidden(cause=cause, size=0.0, slope_change=0.0)
        for k, pattern in enumerate(scan.patterns):
            if pattern.cause != cause:
                continue
            needed = scan.critical[0] + scan.charge[k]
            signal = np.sqrt(scan.freedom * np.expm1(needed / scan.freedom)) + 1.282
            size = float(signal * sd / scan.norms[k])
            change = float(pull @ pattern.shape) * size / scale
            if abs(change) > abs(worst.slope_change):
                reach = float(np.abs(pattern.shape).max()) * size
                worst = Hidden(cause=cause, size=reach, slope_change=change)
        found.append(worst)
    return found


def _left(trial: Trial, seen: Observations, layout: Layout, scale: float) -> list[Left]:
    """Slopes without each reading, each shift and each device."""
    import numpy as np

    whole = _slope(layout, seen.tangents, ())
    numbers = [s.number for s in trial.shifts]
    columns: Floats = layout.fixed()

    def without(away: NDArray[np.bool_]) -> float | None:
        keep = ~away
        rows = columns[keep]
        kept: Floats = rows[:, np.abs(rows).max(axis=0) > 0.0]
        if np.linalg.matrix_rank(kept) < kept.shape[1]:
            return None
        fit = np.linalg.lstsq(kept, seen.tangents[keep], rcond=None)[0]
        return (float(fit[0]) - whole) / scale

    found = []
    for i in np.unique(layout.shift):
        change = without(layout.shift == i)
        if change is not None:
            found.append(Left(shift=numbers[i], device=None, slope_change=change))
    if layout.devices > 1:
        for j, device in enumerate(seen.devices):
            change = without(layout.device == j)
            if change is not None:
                found.append(Left(shift=None, device=device.id, slope_change=change))
    for r in range(len(layout.shift)):
        away = np.zeros(len(layout.shift), dtype=bool)
        away[r] = True
        change = without(away)
        if change is not None:
            name = seen.devices[layout.device[r]].id
            found.append(Left(shift=numbers[layout.shift[r]], device=name, slope_change=change))
    return found


def times_of(trial: Trial) -> Floats:
    """Clock times of the shifts from 0 to 1; equally spaced where not every shift has one."""
    import numpy as np

    count = len(trial.shifts)
    minutes = [_minutes(s.time) for s in trial.shifts]
    if any(m is None for m in minutes):
        return np.linspace(0.0, 1.0, count)
    clock = np.array([m or 0.0 for m in minutes])
    clock += 1440.0 * np.concatenate([[0.0], np.cumsum(np.diff(clock) < -720.0)])  # midnight
    span = clock[-1] - clock[0]
    times: Floats = (clock - clock[0]) / span if span > 0.0 else np.linspace(0.0, 1.0, count)
    return times


def _minutes(text: str) -> float | None:
    hours, _, minutes = text.partition(":")
    if not (hours.strip().isdigit() and minutes.strip()[:2].isdigit()):
        return None
    return 60.0 * int(hours) + int(minutes.strip()[:2])


def _stays(trial: Trial) -> tuple[Stay, ...]:
    """Stays of each weight at places it was moved to, as indices of shifts."""
    last: dict[str, int] = {}
    stays = []
    for i, shift in enumerate(trial.shifts):
        for move in shift.moves:
            if last.get(move.weight, 0) > 0:
                stays.append(Stay(move.weight, last[move.weight], i))
            last[move.weight] = i
    stays += [Stay(w, first, len(trial.shifts)) for w, first in last.items() if first > 0]
    return tuple(sorted(stays, key=lambda s: (s.first, s.weight)))
