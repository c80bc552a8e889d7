"""Reads the calculation off the paper: steps and tables from the text of a report's pages.

What is parsed is the text of the PDF, nothing else. Numbers are exact decimals.
"""

from __future__ import annotations

import ast
import math
import re
from dataclasses import dataclass
from decimal import Decimal, localcontext
from io import BytesIO

import pypdf

_UNITS = re.compile(
    r"(?<=[0-9⁰¹²³⁴⁵⁶⁷⁸⁹]) (?:/\((?:t m|LT ft)\)|/m|/ft|\((?:t m|LT ft)\)²|LT ft|t m|lb/ft³|t/m³|LT|ft[²³⁴]?|m[²³⁴]?|mm|in|t)(?![a-zA-Z0-9])"
)
_RAISED = str.maketrans("⁻⁰¹²³⁴⁵⁶⁷⁸⁹", "-0123456789")
_NUMBER = r"[−-]?\d+(?:\.\d+)?"


@dataclass(frozen=True)
class Printed:
    """A step as it stands on the page; ``put_in`` None where the value is carried."""

    number: int
    said: str
    put_in: str | None
    result: str


def lines_of(data: bytes) -> list[str]:
    """Lines of all pages without header and footer, blanks made one."""
    lines = []
    for page in pypdf.PdfReader(BytesIO(data)).pages:
        text = [" ".join(line.split()) for line in page.extract_text().splitlines()]
        lines += [line for line in text if line]
    return [
        line
        for line in lines
        if not re.fullmatch(r"inclining test of \S+|trial [0-9a-f]{16} · .*|page \d+ of \d+", line)
    ]


def section(lines: list[str], title: str, following: str) -> list[str]:
    """The lines between two section headings."""
    first = next(i for i, line in enumerate(lines) if re.fullmatch(rf"\d+ {title}", line))
    last = next(
        i for i, line in enumerate(lines) if i > first and re.fullmatch(rf"\d+ {following}", line)
    )
    return lines[first + 1 : last]


def steps_of(lines: list[str]) -> list[Printed]:
    """Numbered steps, in order."""
    starts = [i for i, line in enumerate(lines) if re.fullmatch(r"\(\d+\)", line)]
    found = []
    for i, after in zip(starts, [*starts[1:], len(lines)], strict=True):
        block = lines[i + 1 : after]
        first, *more = [n for n, text in enumerate(block) if text.startswith("= ")][:2]
        put_in = " ".join(block[first : more[0]])[2:] if more else None
        result = block[more[0] if more else first][2:]
        found.append(Printed(int(lines[i].strip("()")), " ".join(block[:first]), put_in, result))
    return found


def plain(text: str) -> str:
    """An expression as printed, as arithmetic: units gone, signs and powers as Python has them."""
    text = _UNITS.sub("", text)
    text = re.sub(r"10([⁻⁰¹²³⁴⁵⁶⁷⁸⁹]+)", lambda m: f"10**({m[1].translate(_RAISED)})", text)
    text = re.sub(r"([²³])", lambda m: f"**{m[1].translate(_RAISED)}", text)
    return text.replace("−", "-").replace("×", "*").replace("°", "")


def value_of(text: str) -> Decimal:
    """What an expression comes to, by exact decimals."""
    with localcontext() as context:
        context.prec = 40
        return _evaluate(ast.parse(plain(text).strip(), mode="eval").body, plain(text).strip())


def _evaluate(node: ast.expr, source: str) -> Decimal:
    if isinstance(node, ast.Constant):
        return Decimal(ast.get_source_segment(source, node))
    if isinstance(node, ast.UnaryOp):
        return -_evaluate(node.operand, source)
    if isinstance(node, ast.Call):  # the tangent of an angle in degrees
        return Decimal(math.tan(math.radians(float(_evaluate(node.args[0], source)))))
    left, right = _evaluate(node.left, source), _evaluate(node.right, source)
    return {
        ast.Add: lambda: left + right,
        ast.Sub: lambda: left - right,
        ast.Mult: lambda: left * right,
        ast.Div: lambda: left / right,
        ast.Pow: lambda: left**right,
    }[type(node.op)]()


def follows(exact: Decimal, printed: str) -> bool:
    """Whether a value rounds to the printed number: within half a unit of its last digit."""
    text = plain(printed)
    mantissa = re.match(r"-?\d+(?:\.(\d+))?", text)
    power = re.search(r"10\*\*\((-?\d+)\)", text)
    last = Decimal(1).scaleb(-len(mantissa[1] or "") + (int(power[1]) if power else 0))
    # A thousandth more: the digits are settled in doubles.
    return abs(exact - value_of(printed)) <= Decimal("0.5005") * last


def rows_of(lines: list[str], title: str, columns: int) -> list[list[str]]:
    """Rows of the table under a title: ``columns`` cells each, down to a line that is no cell."""
    at = next(i for i, line in enumerate(lines) if line.startswith(title)) + 1 + columns
    rows = []
    while at + columns <= len(lines):
        row = lines[at : at + columns]
        if not all(is_cell(c) for c in row[1:]):
            break
        rows.append(row)
        at += columns
    return rows


def is_cell(text: str) -> bool:
    """Whether a line is a number or an expression of numbers."""
    return re.fullmatch(rf"[\d().+−×/ °]+|{_NUMBER}|excluded", text) is not None
