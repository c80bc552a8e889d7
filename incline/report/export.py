"""The tables of a report as CSV files that a spreadsheet opens without harm."""

from __future__ import annotations

import csv
import io
import re
from typing import TYPE_CHECKING, Any

from reportlab.platypus import Paragraph

from incline.files import slug
from incline.report.headings import Heading
from incline.report.show import MISSING, pretty
from incline.report.tables import Listed
from incline.report.text import clean
from incline.units import SYSTEMS

if TYPE_CHECKING:
    from collections.abc import Iterable

__all__ = ["cell_of", "tables_of"]

_NUMBER = re.compile(r"[−+-]?[0-9]+(?:\.[0-9]+)?(?:e[−+-]?[0-9]+)?")
_UNITS = frozenset(
    {"%", "°C", "°F", "deg"}
    | {
        pretty(getattr(system, kind)).replace("\N{NO-BREAK SPACE}", " ")
        for system in SYSTEMS.values()
        for kind in ("length", "reading", "mass", "moment", "volume", "density")
    }
)
"""Units that may follow a number in its cell."""
_RISKY = ("=", "+", "-", "@", "\t", "\r")
_LONGEST = 60
"""Most characters of a file's name before its ending."""


def tables_of(flow: Iterable[Any]) -> dict[str, bytes]:
    """Every table of a flow: name of a file, made of the headings above it, and its bytes."""
    files: dict[str, bytes] = {}
    section = title = caption = ""
    for flowable in flow:
        if isinstance(flowable, Heading) and flowable.level == 0:
            section, title = flowable.key.removeprefix("section-"), flowable.title
        elif isinstance(flowable, Heading):
            title = f"{section} {flowable.title}"
        elif isinstance(flowable, Listed):
            files[_name(section, caption or title or "report", files)] = _csv(flowable)
            caption = ""
        elif isinstance(flowable, Paragraph) and flowable.style.name == "caption":
            caption = _captioned(section, title, flowable.getPlainText())
    return files


def _captioned(section: str, title: str, caption: str) -> str:
    """What the table under a caption is named by; where a device begins it, by heading too."""
    device, colon, _ = caption.partition(": ")
    return f"{section} {device} {title.removeprefix(section)}" if colon else f"{section} {caption}"


def _name(section: str, title: str, taken: dict[str, bytes]) -> str:
    """``09-density-of-the-water.csv``; a second table under one heading gets a number."""
    words = title.removeprefix("Appendix ").removeprefix(section).strip()
    number = section.zfill(2) if section.isdigit() else section.lower() or "00"
    stem = f"{number}-{slug(words) or 'table'}"[:_LONGEST].rstrip("-")
    name, count = f"{stem}.csv", 1
    while name in taken:
        count += 1
        name = f"{stem}-{count}.csv"
    return name


def _csv(table: Listed) -> bytes:
    out = io.StringIO()
    writer = csv.writer(out, lineterminator="\r\n")  # RFC 4180
    width = len(table.titles)
    writer.writerow([cell_of(t) for t in table.titles])
    for row in table.texts:
        writer.writerow([cell_of(t) for t in (*row, *[""] * (width - len(row)))])
    return out.getvalue().encode("utf-8-sig")


def cell_of(text: str) -> str:
    """A cell as a spreadsheet should take it.

    A number stays one, with a decimal point and a plain minus, a unit after it or not. A text that
    would be taken for a formula, or a number in parentheses for a negative one, begins with an
    apostrophe.
    """
    plain = clean(text).replace("\N{NO-BREAK SPACE}", " ")
    if plain == MISSING:
        return ""
    number, _, unit = plain.partition(" ")
    if _NUMBER.fullmatch(number) and (not unit or unit in _UNITS):
        return plain.replace("−", "-").removeprefix("+")
    if text.startswith(_RISKY) or plain.startswith(_RISKY) or re.match(r"\([0-9]", plain):
        return f"'{plain}"
    return plain
