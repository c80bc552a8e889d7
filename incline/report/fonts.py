"""The typeface of the report: the DejaVu Sans that comes with matplotlib, embedded in the PDF."""

from __future__ import annotations

from functools import cache
from importlib.util import find_spec
from pathlib import Path

from reportlab.pdfbase import pdfmetrics
from reportlab.pdfbase.ttfonts import TTFont

from incline.errors import InclineError

__all__ = ["BOLD", "REGULAR", "covers", "register_fonts"]

REGULAR = "InclineSans"
BOLD = "InclineSans-Bold"
_FILES = {REGULAR: "DejaVuSans.ttf", BOLD: "DejaVuSans-Bold.ttf"}


def _font_folder() -> Path:
    spec = find_spec("matplotlib")
    places = spec.submodule_search_locations if spec else None
    folder = Path(next(iter(places or [""]))) / "mpl-data" / "fonts" / "ttf"
    if not all((folder / name).is_file() for name in _FILES.values()):
        raise InclineError(
            "The DejaVu Sans fonts that belong to matplotlib are missing; reinstall matplotlib."
        )
    return folder


@cache
def register_fonts() -> frozenset[int]:
    """Make the fonts known to the PDF writer; returns the code points that both faces have."""
    folder = _font_folder()
    known: list[frozenset[int]] = []
    for name, file in _FILES.items():
        font = TTFont(name, str(folder / file))
        pdfmetrics.registerFont(font)
        known.append(frozenset(font.face.charToGlyph))
    pdfmetrics.registerFontFamily(
        REGULAR, normal=REGULAR, bold=BOLD, italic=REGULAR, boldItalic=BOLD
    )
    return known[0] & known[1]


def covers(character: str) -> bool:
    """Whether the typeface has a glyph for the character."""
    return ord(character) in register_fonts()
