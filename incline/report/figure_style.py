"""How plots look: few lines, dark inks, a marker for each device that survives photocopying."""

from __future__ import annotations

from contextlib import contextmanager
from typing import TYPE_CHECKING, Any

import matplotlib as mpl
from matplotlib.figure import Figure

if TYPE_CHECKING:
    from collections.abc import Iterator

    from matplotlib.axes import Axes

__all__ = ["GREY", "Mark", "add_panel", "blank_figure", "drawing_style", "mark"]

GREY = "0.55"

_MACHINE = frozenset({"backend", "backend_fallback", "interactive", "toolbar", "timezone"})
"""Settings of the machine rather than of the drawing; they stay as they are."""

_OWN: dict[str, Any] = {
    "font.family": "DejaVu Sans",
    "font.size": 7.0,
    "axes.titlesize": 7.5,
    "axes.titleweight": "bold",
    "axes.titlelocation": "left",
    "axes.labelsize": 7.0,
    "axes.linewidth": 0.6,
    "axes.grid": True,
    "axes.axisbelow": True,
    "axes.spines.top": False,
    "axes.spines.right": False,
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


@contextmanager
def drawing_style() -> Iterator[None]:
    """The report's own style, whatever the user's own settings are."""
    plain: dict[Any, Any] = {k: v for k, v in mpl.rcParamsDefault.items() if k not in _MACHINE}
    with mpl.rc_context(plain | _OWN):
        yield


class Mark:
    """Marker, colour and dash of one device."""

    __slots__ = ("colour", "dash", "shape")

    def __init__(self, shape: str, colour: str, dash: tuple[int, tuple[float, ...]]) -> None:
        self.shape = shape
        self.colour = colour
        self.dash = dash


_SHAPES = ("o", "s", "^", "D", "v", "P", "h", "<", ">", "p")
_COLOURS = ("#0B3C6F", "#8A3300", "#00573F", "#5B2468", "#111111", "#6B5200", "#7A0033")
_DASHES: tuple[tuple[int, tuple[float, ...]], ...] = (
    (0, ()),
    (0, (5.0, 2.0)),
    (0, (1.5, 1.5)),
    (0, (6.0, 1.5, 1.5, 1.5)),
)


def mark(index: int) -> Mark:
    """The look of the device with this index; shape, colour and dash repeat out of step."""
    return Mark(
        _SHAPES[index % len(_SHAPES)],
        _COLOURS[index % len(_COLOURS)],
        _DASHES[index % len(_DASHES)],
    )


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
