"""What all commands share: the application, kinds of arguments, words to the user."""

from __future__ import annotations

import datetime
import os
import sys
from enum import StrEnum
from pathlib import Path
from typing import TYPE_CHECKING, Annotated, TypeAlias

import typer

if TYPE_CHECKING:
    from incline.units import Quantity

__all__ = [
    "Draws", "Folder", "Force", "Paper", "Shown", "Units", "above_zero", "amount", "app",
    "complain", "report_date", "tell",
]  # fmt: skip

app = typer.Typer(
    name="incline",
    help="Reduce an inclining experiment: from a folder of field records to GM, lightship"
    " displacement, KG, LCG and TCG, and a dated PDF report.",
    no_args_is_help=True,
    rich_markup_mode=None,
    pretty_exceptions_enable=False,
    context_settings={"help_option_names": ["-h", "--help"]},
)

Folder = Annotated[Path, typer.Argument(help="Folder with the records of one trial.")]
Draws: TypeAlias = Annotated[
    int | None,
    typer.Option(
        min=10_000, max=5_000_000, help="Monte Carlo draws; without it, until the figures settle."
    ),
]
Force = Annotated[bool, typer.Option("--force", help="Replace a file that exists.")]


class Units(StrEnum):
    """Unit systems of the blank trials."""

    metric = "metric"
    us = "us"


class Shown(StrEnum):
    """Units of a report."""

    metric = "metric"
    us = "us"
    both = "both"


class Paper(StrEnum):
    """Paper of a report or of field sheets."""

    a4 = "a4"
    letter = "letter"


def complain(lines: list[str]) -> None:
    """Lines on standard error, and exit status 1."""
    if len(lines) > 1:
        tell(f"{len(lines)} problems", lines)
    else:
        print(_folded(f"incline: {lines[0]}"), file=sys.stderr)
    raise SystemExit(1)


def tell(title: str, lines: list[str]) -> None:
    """A list on standard error."""
    print(f"incline: {title}", file=sys.stderr)
    for line in lines:
        print(_folded(f"  {line}"), file=sys.stderr)


def _folded(line: str) -> str:
    """A line broken between words at the width of the terminal; whole when written to a file."""
    if not sys.stderr.isatty():
        return line
    import shutil
    import textwrap

    width = max(40, shutil.get_terminal_size().columns - 1)
    return textwrap.fill(line, width, subsequent_indent="      ", break_on_hyphens=False)


def amount(text: str, quantity: Quantity, option: str) -> float:
    """A quantity with its unit in inside units; wrong usage where it cannot be read."""
    from incline.units import QuantityError, parse_quantity

    try:
        return parse_quantity(text, quantity)
    except QuantityError as error:
        raise typer.BadParameter(f"expected {error.expected}", param_hint=option) from error


def above_zero(
    text: str | None, quantity: Quantity, option: str, most: tuple[float, str]
) -> float | None:
    """What an option gives in inside units; wrong usage when it is not above zero.

    Nor may it be above ``most``, which is given in inside units and in words.
    """
    if text is None:
        return None
    value = amount(text, quantity, option)
    if value <= 0.0:
        raise typer.BadParameter(f"expected a {quantity.name} above zero", param_hint=option)
    if value > most[0]:
        raise typer.BadParameter(f"expected no more than {most[1]}", param_hint=option)
    return value


def report_date() -> datetime.date:
    """Today, or the day that SOURCE_DATE_EPOCH names for a reproducible report."""
    epoch = os.environ.get("SOURCE_DATE_EPOCH", "")
    if epoch.isdigit():
        return datetime.datetime.fromtimestamp(int(epoch), tz=datetime.UTC).date()
    return datetime.datetime.now().astimezone().date()
