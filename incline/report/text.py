"""Text from the trial made fit to print: exactly as typed, never read as markup."""

from __future__ import annotations

import unicodedata
from xml.sax.saxutils import escape

from incline.report.fonts import covers

__all__ = ["clean", "elide", "markup"]

_NEWLINES = {"\n": "\n", "\r": "\n", "\u2028": "\n", "\u2029": "\n", "\t": " "}


def _printable(character: str) -> str:
    """One character as printed; a glyph that the typeface lacks shows as its code point."""
    if character in _NEWLINES:
        return _NEWLINES[character]
    # Control, invisible formatting (text direction among it) and half characters print nothing.
    if unicodedata.category(character) in ("Cc", "Cf", "Cs"):
        return ""
    return character if covers(character) else f"[U+{ord(character):04X}]"


def clean(text: str) -> str:
    """Composed characters only, no control characters, every line end a newline."""
    whole = unicodedata.normalize("NFC", text.replace("\r\n", "\n"))
    return "".join(_printable(c) for c in whole).strip()


def markup(text: str) -> str:
    """Text for a paragraph: ``&``, ``<`` and ``>`` print as typed, line ends stay line ends."""
    return escape(clean(text)).replace("\n", "<br/>")


def elide(text: str, most: int) -> str:
    """One line of at most ``most`` characters, for headers and plots where text cannot wrap."""
    line = " ".join(clean(text).split())
    return line if len(line) <= most else line[: most - 1].rstrip() + "…"
