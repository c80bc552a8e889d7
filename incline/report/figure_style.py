"""How plots look: few lines, dark inks, a marker for each device that survives photocopying.

Nothing is told by colour alone: shape, filling and dash tell it too, so that a grey print and a
reader who does not see colours lose nothing.
"""

from __future__ import annotations

from contextlib import contextmanager
from contextvars import ContextVar
from dataclasses import dataclass
from itertools import pairwise
from typing import TYPE_CHECKING, Any

import matplotlib as mpl
from cycler import cycler
from matplotlib.figure import Figure

from incline.report.figure_text import width_of

if TYPE_CHECKING:
    from collections.abc import Callable, Iterator, Sequence

    from matplotlib.axes import Axes

__all__ = [
    "EXCLUDED", "GREY", "INK", "NAMED", "PALE", "Mark", "Plot", "add_panel", "blank_figure", "dots",
    "drawing_style", "key", "legend", "legend_height", "mark", "ring",
]  # fmt: skip

INK, GREY, PALE = "black", "0.55", "0.85"
EXCLUDED, NAMED = "crossed: excluded", "ringed: named by a finding"

_MACHINE = frozenset({"backend", "backend_fallback", "interactive", "toolbar", "timezone"})
"""Settings of the machine rather than of the drawing; they stay as they are."""

_OWN: dict[str, Any] = {
    "font.family": "DejaVu Sans",
    "font.size": 7.0,
    "axes.prop_cycle": cycler(color=["black"]),  # colours are always said
    "axes.titlesize": 7.5,
    "axes.titleweight": "bold",
    "axes.titlelocation": "left",
    "axes.labelsize": 7.0,
    "axes.linewidth": 0.6,
    "axes.grid": True,
    "axes.axisbelow": True,
    "axes.spines.top": False,
    "axes.spines.right": False,
    "axes.titley": 1.0,  # a fixed place: looking for a free one costs as much as drawing
    "axes.formatter.useoffset": False,
    "grid.color": "0.88",
    "grid.linewidth": 0.4,
    "xtick.labelsize": 6.5,
    "ytick.labelsize": 6.5,
    "xtick.major.width": 0.6,
    "ytick.major.width": 0.6,
    "xtick.major.size": 2.5,
    "ytick.major.size": 2.5,
    "legend.frameon": False,
    "legend.fontsize": 6.5,
    "lines.linewidth": 1.0,
    "lines.markersize": 4.5,
    "text.parse_math": False,
    "figure.dpi": 72.0,
}


_STYLED: ContextVar[bool] = ContextVar("styled", default=False)


@contextmanager
def drawing_style() -> Iterator[None]:
    """The report's own style, whatever the user's own settings are; set once, however nested."""
    if _STYLED.get():
        yield
        return
    plain: dict[Any, Any] = {k: v for k, v in mpl.rcParamsDefault.items() if k not in _MACHINE}
    with mpl.rc_context(plain | _OWN):
        token = _STYLED.set(True)
        try:
            yield
        finally:
            _STYLED.reset(token)


@dataclass(frozen=True, slots=True)
class Plot:
    """A figure still to be drawn: its size in points, and what draws it on an empty figure."""

    width: float
    height: float
    paint: Callable[[Figure], None]

    def figure(self) -> Figure:
        """The figure drawn."""
        with drawing_style():
            figure = blank_figure(self.width, self.height)
            self.paint(figure)
        return figure


@dataclass(frozen=True, slots=True)
class Mark:
    """Marker, colour, dash and filling of one device."""

    shape: str
    colour: str
    dash: tuple[int, tuple[float, ...]]
    filling: str = "white"


_SHAPES = ("o", "s", "^", "D", "v", "P", "<", ">")
_COLOURS = ("#0B3C6F", "#8A3300", "#00573F", "#5B2468", "#111111", "#6B5200", "#7A0033")
_DASHES: tuple[tuple[int, tuple[float, ...]], ...] = (
    (0, ()),
    (0, (5.0, 2.0)),
    (0, (1.5, 1.5)),
    (0, (6.0, 1.5, 1.5, 1.5)),
)


def mark(index: int) -> Mark:
    """The look of the device with this index; when the shapes are used up they return filled."""
    colour = _COLOURS[index % len(_COLOURS)]
    fillings = ("white", colour, "0.72")
    return Mark(
        _SHAPES[index % len(_SHAPES)],
        colour,
        _DASHES[index % len(_DASHES)],
        fillings[index // len(_SHAPES) % len(fillings)],
    )


def dots(
    axes: Axes, x: Sequence[float], y: Sequence[float], look: Mark, *, joined: bool = False
) -> None:
    """The points of one device, joined by its dash where asked."""
    axes.plot(
        x, y, linestyle=look.dash if joined else "none", linewidth=0.6, marker=look.shape,
        color=look.colour, markerfacecolor=look.filling, markeredgewidth=0.9,
    )  # fmt: skip


def ring(axes: Axes, x: Sequence[float], y: Sequence[float]) -> None:
    """Circles around points that a finding names or that were flagged."""
    axes.plot(
        x, y, linestyle="none", marker="o", markersize=9.5, color=INK, markerfacecolor="none",
        markeredgewidth=0.7, clip_on=False,
    )  # fmt: skip


def key(axes: Axes, look: Mark, name: str, size: float = 4.5) -> None:
    """An entry of the legend without a point in the plot."""
    axes.plot(
        [], [], linestyle="none", marker=look.shape, color=look.colour, markersize=size,
        markerfacecolor=look.filling, markeredgewidth=0.9, label=name,
    )  # fmt: skip


_KEY_LINE, _KEY_ROOM, _KEY_SIZE = 9.6, 27.0, 6.5
"""Height of a line of a legend, what an entry needs beside its words, their size [pt]."""


def _columns(names: Sequence[str], width: float) -> int:
    """How many columns of entries a legend of a figure this wide has room for."""
    wide = [width_of(n, _KEY_SIZE) + _KEY_ROOM for n in names]
    for many in range(len(wide), 1, -1):
        high, more = divmod(len(wide), many)  # as matplotlib deals them out
        ends = [n * high + min(n, more) for n in range(many + 1)]
        if sum(max(wide[a:b]) for a, b in pairwise(ends)) <= width:
            return many
    return 1


def legend_height(names: Sequence[str], width: float) -> float:
    """Room [pt] that `legend` takes at the top of a figure."""
    return 4.0 + _KEY_LINE * -(-len(names) // _columns(names, width)) if names else 0.0


def legend(figure: Figure, handles: Sequence[Any], names: Sequence[str]) -> None:
    """The legend at the top of a figure, in as many columns as there is room for."""
    width = 72.0 * float(figure.get_size_inches()[0])
    if names:
        figure.legend(
            handles, names, loc="upper left", ncols=_columns(names, width), columnspacing=1.3,
            borderaxespad=0.1, labelspacing=0.35, handlelength=1.9,
        )  # fmt: skip


def blank_figure(width: float, height: float) -> Figure:
    """An empty figure; sizes in points."""
    figure = Figure(figsize=(width / 72.0, height / 72.0), dpi=72)
    figure.patch.set_visible(False)
    return figure


def add_panel(figure: Figure, left: float, bottom: float, width: float, height: float) -> Axes:
    """Axes with the given edges in points from the figure's lower left corner."""
    wide, high = (72.0 * float(s) for s in figure.get_size_inches())
    axes = figure.add_axes((left / wide, bottom / high, width / wide, height / high))
    axes.patch.set_visible(False)
    return axes
