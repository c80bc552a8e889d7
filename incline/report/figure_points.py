"""What the plots of the heel fit share: legend, excluded readings, points that a finding names."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from incline.report.figure_style import EXCLUDED, INK, NAMED, Mark, key, mark
from incline.report.text import elide

if TYPE_CHECKING:
    from collections.abc import Sequence

    from matplotlib.axes import Axes

    from incline.result import Diagnosis, HeelFit

__all__ = ["crossed", "entries_of", "keys", "named_by"]

_LABEL = 110
"""Most characters of a device's name in a legend."""


def named_by(heel: HeelFit, found: Diagnosis | None) -> frozenset[int]:
    """Indices of the points that the leading findings name.

    A finding names the points of its shift, of its device there if it has one; without a shift,
    those that its pattern moves by more than half of what it moves any.
    """
    named: set[int] = set()
    kept = [i for i, p in enumerate(heel.points) if not p.excluded]
    base = [heel.points[i].fitted for i in kept]
    for finding in () if found is None else found.findings:
        if finding.rank:
            continue
        if finding.shift is not None:
            at = finding.shift
            some = [i for i in kept if heel.points[i].shift == at]
            named |= {i for i in some if finding.device in (None, heel.points[i].device)}
        elif finding.expected:
            moved = [abs(e - b) for e, b in zip(finding.expected, base, strict=True)]
            named |= {i for i, m in zip(kept, moved, strict=True) if m > 0.5 * max(moved)}
        base = list(finding.expected) or base
    return frozenset(named)


def entries_of(heel: HeelFit, named: frozenset[int]) -> list[str]:
    """What the legend names, after the line: devices, exclusions, findings."""
    more = [EXCLUDED] if any(p.excluded for p in heel.points) else []
    return [*(elide(d.id, _LABEL) for d in heel.devices), *more, *([NAMED] if named else [])]


def keys(axes: Axes, entries: Sequence[str]) -> None:
    """The legend's entries without points in the plot."""
    for index, name in enumerate(entries):
        if name == EXCLUDED:
            key(axes, Mark("x", INK, (0, ()), INK), name)
        elif name == NAMED:
            key(axes, Mark("o", INK, (0, ()), "none"), name, 8.0)
        else:
            key(axes, mark(index), name)


def crossed(axes: Axes, x: Sequence[float], y: Sequence[float], look: Mark) -> None:
    """Points of readings that do not count."""
    style: dict[str, Any] = {"linestyle": "none", "color": look.colour, "markeredgewidth": 0.8}
    axes.plot(x, y, marker=look.shape, markerfacecolor="none", **style)
    axes.plot(x, y, marker="x", markersize=7.5, **style)
