"""What is wrong with a line of TOML, in words for people who do not write programs."""

from __future__ import annotations

import re
import tomllib

__all__ = ["parse", "syntax_error"]

_CURLY = re.compile("[“”„‟‘’″]")
_LINE = re.compile(r"\s*([A-Za-z0-9_-]+)\s*=\s*(.*?)\s*")
_BRACKETS = "a section in brackets, such as [vessel], or [[devices]] for one of several"
_STATEMENT = 'a line such as name = "value", a section in brackets, or a remark after #'
_ONCE = "each section once; only those in double brackets, such as [[devices]], may come again"
_WORDS = {
    "Invalid date or datetime": "a day of the calendar: there is no such day",
    "Cannot overwrite": "each name once in its section",
    "Unclosed array": "a list closed by ], with commas between its parts",
    "Expected '=' after": 'an equals sign after the name, such as lpp = "28.50 m"',
    "Invalid statement": _STATEMENT,
    "Expected ']": _BRACKETS,
    "Unescaped": "no backslash between quotation marks",
}
"""Start of Python's reason -> what was expected."""
_LONGEST = 2000
"""Lines in a file beyond which the line at fault is not searched for: no trial has as many."""


def parse(text: str) -> dict[str, object]:
    """The tables of a TOML text; raises ValueError or RecursionError."""
    return tomllib.loads(text)


def syntax_error(text: str, error: Exception) -> tuple[int, str, str, str]:
    """Row, line as it stands there, expectation and hint, for an error that `parse` raised."""
    at = re.search(r"\s*\(at (?:line (\d+)|end).*", str(error), re.DOTALL)
    reason = str(error)[: at.start()] if at else ""
    lines = text.split("\n")
    row = int(at[1]) if at and at[1] else _first_row(lines, reason)
    line = lines[row - 1].strip()
    return row, line, *_said(line, reason)


def _first_row(lines: list[str], reason: str) -> int:
    """The first line up to which the file fails for the same reason; the last one as a rule."""
    for row in range(1, min(len(lines), _LONGEST)):
        try:
            tomllib.loads("\n".join(lines[:row]))
        except (ValueError, RecursionError) as error:
            if reason and str(error).startswith(reason):
                return row
    return len(lines)


def _said(line: str, reason: str) -> tuple[str, str]:
    """Expectation and hint for one line."""
    if _CURLY.search(line):
        return 'plain quotation marks, "', "curly marks come from a word processor"
    if line.startswith("[") and reason.startswith("Cannot"):
        return _ONCE, ""
    known = next((words for start, words in _WORDS.items() if reason.startswith(start)), "")
    if known:
        return known, ""
    if line.count('"') % 2 or line.count("'") % 2:
        return "a quotation mark at each end of the text, on the same line", ""
    match = _LINE.fullmatch(line)
    return _said_of_value(match[1], match[2].split("#")[0].strip()) if match else (_STATEMENT, "")


def _said_of_value(name: str, value: str) -> tuple[str, str]:
    if not value:
        return f'a value after the equals sign; "" where there is none: {name} = ""', ""
    if '"' in value or "'" in value:
        return "nothing after the closing quotation mark, except a remark after #", ""
    if re.fullmatch(r"[+-]?[0-9]+,[0-9]+", value):
        return "a decimal point", f"write {name} = {value.replace(',', '.')[:40]}"
    return "quotation marks around the value", f'write {name} = "{value[:40]}"'
