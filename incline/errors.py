"""Errors a user can cause, as records: where, what was found, what was expected."""

from __future__ import annotations

from dataclasses import dataclass

__all__ = ["Defect", "FieldDataError", "InclineError", "Where"]


@dataclass(frozen=True, slots=True, order=True)
class Where:
    """A place in the trial's files.

    ``row`` is the number a spreadsheet shows (the first line of the file is 1); ``column`` is a
    column's name in a table, or the key path in ``trial.toml`` (``devices[2].length``).
    """

    file: str
    row: int = 0
    column: str = ""

    def __str__(self) -> str:
        parts = [self.file]
        if self.row:
            parts.append(f"row {self.row}")
        if self.column:
            parts.append(f'column "{self.column}"' if self.row else self.column)
        return ", ".join(parts)


@dataclass(frozen=True, slots=True, order=True)
class Defect:
    """One thing wrong with the trial. ``code`` is stable, the sentences may be reworded."""

    where: Where
    code: str
    found: str
    expected: str
    hint: str = ""

    def __str__(self) -> str:
        line = f"{self.where}: found {self.found}; expected {self.expected}"
        return f"{line} ({self.hint})" if self.hint else line


class InclineError(Exception):
    """Base of every error that the user can mend; its text is one sentence for the user."""


class FieldDataError(InclineError):
    """The trial cannot be reduced. ``defects`` holds every problem found, in file order."""

    def __init__(self, defects: list[Defect]) -> None:
        self.defects: tuple[Defect, ...] = tuple(sorted(set(defects)))
        super().__init__("\n".join(str(d) for d in self.defects))
