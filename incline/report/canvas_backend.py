"""Draws a matplotlib figure on a PDF canvas: vectors, and text in the report's own font."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from matplotlib.backend_bases import RendererBase
from matplotlib.path import Path
from reportlab.pdfbase.pdfmetrics import stringWidth
from reportlab.platypus.flowables import Flowable

from incline.report.figure_style import Plot, drawing_style
from incline.report.fonts import BOLD, REGULAR
from incline.report.text import clean

if TYPE_CHECKING:
    from matplotlib.figure import Figure
    from matplotlib.font_manager import FontProperties

__all__ = ["CanvasRenderer", "FigureFlowable"]

_CAPS = {"butt": 0, "round": 1, "projecting": 2}
_JOINS = {"miter": 0, "round": 1, "bevel": 2}
_ASCENT, _DESCENT = 0.76, 0.24
"""Height above and depth below the baseline of a line of text, in font sizes."""


class CanvasRenderer(RendererBase):
    """A matplotlib renderer whose pixels are points of a reportlab canvas, y upwards.

    Draws opaque or not at all: partial transparency and hatching are not supported, nor are images
    or mathematical markup.
    """

    def __init__(self, canvas: Any, width: float, height: float) -> None:  # noqa: ANN401 - untyped library
        super().__init__()
        self.canvas = canvas
        self.width = width
        self.height = height

    def get_canvas_width_height(self) -> tuple[float, float]:
        """Size of the figure in points."""
        return self.width, self.height

    def flipy(self) -> bool:
        """Heights grow upwards, as on the page."""
        return False

    def get_text_width_height_descent(
        self,
        s: str,
        prop: FontProperties,
        ismath: Any,  # noqa: ANN401, ARG002 - as the base class has it
    ) -> tuple[float, float, float]:
        """Width, height and depth below the baseline of one line of text, in points."""
        size = prop.get_size_in_points()
        width = stringWidth(clean(s), _face(prop), size)
        return width, (_ASCENT + _DESCENT) * size, _DESCENT * size

    def draw_text(  # noqa: D102 - as the base class has it
        self,
        gc: Any,  # noqa: ANN401
        x: float,
        y: float,
        s: str,
        prop: FontProperties,
        angle: float,
        ismath: Any = False,  # noqa: ANN401, ARG002
        mtext: Any = None,  # noqa: ANN401, ARG002
    ) -> None:
        canvas = self.canvas
        canvas.saveState()
        self._clip(gc)
        canvas.translate(x, y)
        canvas.rotate(angle)
        canvas.setFillColorRGB(*gc.get_rgb()[:3])
        canvas.setFont(_face(prop), prop.get_size_in_points())
        canvas.drawString(0.0, 0.0, clean(s))
        canvas.restoreState()

    def draw_path(  # noqa: D102 - as the base class has it
        self,
        gc: Any,  # noqa: ANN401
        path: Path,
        transform: Any,  # noqa: ANN401
        rgbFace: Any = None,  # noqa: ANN401, N803
    ) -> None:
        canvas = self.canvas
        seen = gc.get_alpha() > 0.0
        stroke = seen and gc.get_linewidth() > 0.0 and gc.get_rgb()[3] > 0.0
        fill = seen and rgbFace is not None and (len(rgbFace) == 3 or rgbFace[3] > 0.0)
        if not (stroke or fill):
            return
        canvas.saveState()
        self._clip(gc)
        if stroke:
            self._pen(gc)
        if fill:
            canvas.setFillColorRGB(*rgbFace[:3])
        canvas.drawPath(
            self._outline(path, transform), stroke=int(stroke), fill=int(fill), fillMode=1
        )
        canvas.restoreState()

    def _pen(self, gc: Any) -> None:  # noqa: ANN401
        canvas = self.canvas
        canvas.setStrokeColorRGB(*gc.get_rgb()[:3])
        canvas.setLineWidth(gc.get_linewidth())
        canvas.setLineCap(_CAPS[str(gc.get_capstyle())])
        canvas.setLineJoin(_JOINS[str(gc.get_joinstyle())])
        offset, dashes = gc.get_dashes()
        if dashes is not None:
            canvas.setDash([float(d) for d in dashes], float(offset or 0.0))

    def _clip(self, gc: Any) -> None:  # noqa: ANN401
        box = gc.get_clip_rectangle()
        if box is not None:
            frame = self.canvas.beginPath()
            frame.rect(*(float(v) for v in box.bounds))
            self.canvas.clipPath(frame, stroke=0, fill=0, fillMode=1)
        path, transform = gc.get_clip_path()
        if path is not None:
            self.canvas.clipPath(self._outline(path, transform), stroke=0, fill=0, fillMode=1)

    def _outline(self, path: Path, transform: Any) -> Any:  # noqa: ANN401
        """The path in points, quadratic curves raised to cubic ones."""
        outline = self.canvas.beginPath()
        at = (0.0, 0.0)
        for vertices, code in path.iter_segments(transform, simplify=False):
            v = [float(c) for c in vertices]
            if code == Path.MOVETO:
                outline.moveTo(*v)
            elif code == Path.LINETO:
                outline.lineTo(*v)
            elif code == Path.CURVE3:
                outline.curveTo(*_raise(at, (v[0], v[1]), (v[2], v[3])))
            elif code == Path.CURVE4:
                outline.curveTo(*v)
            else:
                outline.close()
                continue
            at = (v[-2], v[-1])
        return outline


def _raise(
    start: tuple[float, float], control: tuple[float, float], end: tuple[float, float]
) -> tuple[float, ...]:
    """Control points and end of the cubic that is the same curve as a quadratic."""
    first = [s + 2.0 / 3.0 * (c - s) for s, c in zip(start, control, strict=True)]
    second = [e + 2.0 / 3.0 * (c - e) for e, c in zip(end, control, strict=True)]
    return (*first, *second, *end)


def _face(prop: FontProperties) -> str:
    weight = prop.get_weight()
    heavy = weight >= 600 if isinstance(weight, int) else weight in ("bold", "semibold", "heavy")
    return BOLD if heavy else REGULAR


class FigureFlowable(Flowable):  # type: ignore[misc]
    """A matplotlib figure (72 dots per inch), or a plot to be drawn, in the flow of the page."""

    def __init__(self, figure: Figure | Plot, space_after: float = 6.0) -> None:
        super().__init__()
        self.figure = figure
        self.width, self.height = _size(figure)
        self.spaceAfter = space_after
        self.hAlign = "LEFT"

    def wrap(self, *_available: float) -> tuple[float, float]:
        """Size on the page in points."""
        return self.width, self.height

    def draw(self) -> None:
        """Draw on the canvas that the page has set."""
        figure = self.figure.figure() if isinstance(self.figure, Plot) else self.figure
        with drawing_style():
            figure.draw(CanvasRenderer(self.canv, self.width, self.height))


def _size(figure: Figure | Plot) -> tuple[float, float]:
    if isinstance(figure, Plot):
        return figure.width, figure.height
    wide, high = (72.0 * float(side) for side in figure.get_size_inches())
    return wide, high
