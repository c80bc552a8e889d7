"""What the plots of the heel fit share: legend, excluded readings, points that a finding names."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from incline.report.figure_style import EXCLUDED, INK, NAMED, Mark, key, mark
from incline.report.figure_text import place
from incline.report.text import elide

if TYPE_CHECKING:
    from collections.abc import Sequence

    from matplotlib.axes import Axes

    from incline.report.figure_text import Box
    from incline.result import Diagnosis, HeelFit, HeelPoint

__all__ = ["crossed", "entries_of", "keys", "named_by", "tell", "tell_shifts"]

_SIZE, _REACH = 6.0, 4.5
"""Size of a word beside a point, and half the size of the point [pt]."""
_NEAR = 4.0
"""Points as near as this are told together [pt]."""
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


def tell(axes: Axes, points: Sequence[tuple[float, float, str]]) -> None:
    """A word beside each point (x, y, word) so that no two overprint; the limits must be set."""
    inside = (0.0, 0.0, float(axes.bbox.width), float(axes.bbox.height))
    spots = [_spot(axes, x, y) for x, y, _ in points]
    taken: list[Box] = [(x - _REACH, y - _REACH, x + _REACH, y + _REACH) for x, y in spots]
    for spot, (_, _, word) in zip(spots, points, strict=True):
        left, base, covers = place(spot, word, _SIZE, taken, inside)
        axes.annotate(
            word, (0.0, 0.0), xycoords="axes fraction", xytext=(left, base),
            textcoords="offset points", fontsize=_SIZE,
        )  # fmt: skip
        taken.append(covers)


def _spot(axes: Axes, x: float, y: float) -> tuple[float, float]:
    """A point of the data in points from the panel's lower left corner."""
    (left, right), (low, top) = axes.get_xlim(), axes.get_ylim()
    across = (x - left) / (right - left) * float(axes.bbox.width)
    return across, (y - low) / (top - low) * float(axes.bbox.height)


def tell_shifts(axes: Axes, points: Sequence[tuple[float, float, HeelPoint]]) -> None:
    """The shift beside each excluded reading; readings at one place share a label."""
    groups: list[tuple[float, float, set[int]]] = []
    for x, y, point in points:
        if point.excluded:
            here = _spot(axes, x, y)
            for group in groups:
                there = _spot(axes, *group[:2])
                if max(abs(a - b) for a, b in zip(here, there, strict=True)) < _NEAR:
                    group[2].add(point.shift)
                    break
            else:
                groups.append((x, y, {point.shift}))
    tell(axes, [(x, y, _shifts(shifts)) for x, y, shifts in groups])


def _shifts(shifts: set[int]) -> str:
    word = "shift" if len(shifts) == 1 else "shifts"
    return f"{word} {', '.join(map(str, sorted(shifts)))}"
