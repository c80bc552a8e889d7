"""Numbers that a decimal comma has split in two where commas stand between columns too."""

from __future__ import annotations

import re
import statistics
from typing import TYPE_CHECKING

from incline.errors import Where
from incline.reading.collect import quoted

if TYPE_CHECKING:
    from collections.abc import Sequence

    from incline.reading.cells import Row, Sheet
    from incline.record import Reading

__all__ = ["check_apart", "check_split", "check_words", "is_split", "split_hint"]

_BARE = re.compile(r"[+-]?[0-9]+([.,][0-9]+)?")
_APART = 0.20
"""Readings repeated at one shift lie nearer together than this share of all of the device's."""
_UNLIKE = 10.0
"""They spread less than so many times as far as those of its other shifts."""
_FEW = 3
"""Readings of a device below which its range says nothing."""
_ALIKE = 0.2
"""Whole parts of one row differ by less than this share of the smallest."""
_STAND_OUT = 20
"""What is below this does not stand out from single digits."""


def is_split(whole: str, decimals: str) -> bool:
    """Whether two cells side by side could be one number with a decimal comma."""
    return bool(re.fullmatch(r"[+-]?[0-9]+", whole) and re.fullmatch(r"[0-9]+", decimals))


def split_hint(pairs: Sequence[str]) -> str:
    """The hint for numbers that were split, each written with its decimal point."""
    which = "the" if len(pairs) == 1 else "a"
    such = "write" if len(pairs) == 1 else "write, for example,"
    return f"a decimal comma splits {which} number: {such} {pairs[0]}; decimals have a point"


def check_words(row: Row) -> None:
    """Columns for words hold no bare number: that is one pushed out of its own column."""
    if row.sheet.decimal_comma:
        return
    for column in ("note", "exclude"):
        found = row.text(column)
        if _BARE.fullmatch(found):
            hint = "where commas stand between columns, decimals have a point"
            row.fault(column, "value-wrong", quoted(found), "words, or nothing", hint)


def check_split(sheet: Sheet, readings: Sequence[Reading]) -> None:
    """Every second value of most rows of a device being small beside the others, or large."""
    if sheet.decimal_comma:
        return
    rows = {row.number: row for row in sheet.rows}
    for device in dict.fromkeys(r.device for r in readings):
        mine = [r for r in readings if r.device == device and r.kind != "single"]
        split = {r.where.row: pairs for r in mine if (pairs := _pairs(rows[r.where.row], r.kind))}
        if 2 * len(split) <= len(mine) or len(split) < 2:
            continue
        for number, pairs in split.items():
            sheet.collector.add(
                Where(sheet.file, number, "reading"),
                "readings-split",
                f"{2 * len(pairs)} values, every second of them unlike the others",
                "readings that are alike within one row",
                split_hint(pairs),
            )


def _pairs(row: Row, kind: str) -> list[str]:
    """The values of a row joined two by two where they look split; otherwise empty."""
    cells = [row.raw(n) for n in row.sheet.placed if re.fullmatch(r"reading( \d+)?", n)]
    cells = [c for c in cells if c]
    if not cells or len(cells) % 2:
        return []
    both = list(zip(cells[::2], cells[1::2], strict=True))
    if not all(is_split(a, b) for a, b in both):
        return []
    wholes, lengths = [abs(int(a)) for a, _ in both], {len(b) for _, b in both}
    if max(wholes) - min(wholes) > max(1.0, _ALIKE * min(wholes)):
        return []
    digits = lengths == {1} and min(wholes) >= _STAND_OUT
    # a degree and its decimals; swings may truly reach from 5 mm to 30 mm and back
    many = min(lengths) >= (3 if kind == "swings" else 2) and max(wholes) < 10
    if not digits and not (many and all(b[0] == "0" or int(b) >= _STAND_OUT for _, b in both)):
        return []
    return [f"{a}.{b}" for a, b in both]


def check_apart(sheet: Sheet, readings: Sequence[Reading]) -> None:
    """Repeated readings of one row that lie as far apart as those of different shifts."""
    told = {d.where.row for d in sheet.collector.defects if d.where.file == sheet.file}
    for device in dict.fromkeys(r.device for r in readings):
        mine = [r for r in readings if r.device == device and not r.excluded]
        values = [v for r in mine for v in r.values]
        repeats = [r for r in mine if r.kind == "repeats"]
        if len(mine) < _FEW or len({r.quantity for r in mine}) > 1:
            continue
        spreads = [max(r.values) - min(r.values) for r in repeats]
        for n, (reading, spread) in enumerate(zip(repeats, spreads, strict=True)):
            others = spreads[:n] + spreads[n + 1 :]
            usual = statistics.median(others) if others else 0.0
            if (
                spread > _APART * (max(values) - min(values))
                and spread > _UNLIKE * usual
                and reading.where.row not in told
            ):
                share = 100.0 * spread / (max(values) - min(values))
                sheet.collector.add(
                    Where(sheet.file, reading.where.row, "reading"),
                    "readings-apart",
                    f"repeats that spread over {share:.0f} % of all readings of {quoted(device)}",
                    "readings that are alike within one row",
                    "where commas stand between columns, decimals have a point; what was misread"
                    " is left out, or the row set aside with a reason in exclude",
                )
