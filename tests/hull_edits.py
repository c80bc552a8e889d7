"""Changes to the files of a trial on a hull, as a slip or another way of keeping records."""

from __future__ import annotations

from typing import TYPE_CHECKING

from small_trial import map_columns, table_rows, table_text

if TYPE_CHECKING:
    from collections.abc import Callable
    from pathlib import Path

__all__ = ["column", "kept", "misread", "rewritten", "with_keys"]


def rewritten(folder: Path, file: str, change: Callable[[str], str]) -> None:
    path = folder / file
    path.write_text(change(path.read_text(encoding="utf-8")), encoding="utf-8")


def column(folder: Path, file: str, pattern: str, change: Callable[[float], float]) -> None:
    """Every figure of the columns whose headings fit ``pattern`` changed."""
    rewritten(
        folder, file, lambda t: map_columns(t, pattern, lambda c: repr(float(change(float(c)))))
    )


def kept(folder: Path, file: str, keep: Callable[[dict[str, str]], bool]) -> None:
    """Only the rows that ``keep`` says."""

    def some(text: str) -> str:
        head, *rows = table_rows(text)
        return table_text([head, *(r for r in rows if keep(dict(zip(head, r, strict=True))))])

    rewritten(folder, file, some)


def misread(
    folder: Path, shift: int, device: str, change: Callable[[float], float], exclude: str = ""
) -> None:
    """One reading changed, and excluded where a reason is given."""

    def other(text: str) -> str:
        head, *rows = table_rows(text)
        at = head.index("reading [mm]")
        for row in rows:
            here = row[:2] == [str(shift), device]
            row[at] = repr(float(change(float(row[at])))) if here else row[at]
            if exclude:
                row.append(exclude if here else "")
        return table_text([[*head, "exclude"] if exclude else head, *rows])

    rewritten(folder, "readings.csv", other)


def with_keys(folder: Path, text: str) -> None:
    """A section more at the head of trial.toml."""
    rewritten(folder, "trial.toml", lambda t: f"{text}\n\n{t}")
