"""The command line: arguments in, one call, words and files out."""

from __future__ import annotations

import datetime
import sys
from enum import StrEnum
from pathlib import Path
from typing import Annotated, TypeAlias

import typer

from incline.errors import FieldDataError, InclineError

__all__ = ["app", "main"]

app = typer.Typer(
    name="incline",
    help="Reduce an inclining experiment: from a folder of field records to GM, lightship"
    " displacement, KG, LCG and TCG, and a dated PDF report.",
    no_args_is_help=True,
    rich_markup_mode=None,
    pretty_exceptions_enable=False,
    context_settings={"help_option_names": ["-h", "--help"]},
)

Trial = Annotated[Path, typer.Argument(help="Folder with the records of one trial.")]
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


def main() -> None:
    """Run the command line; user errors become lines on standard error and exit status 1."""
    for stream in (sys.stdout, sys.stderr):
        if hasattr(stream, "reconfigure"):
            stream.reconfigure(errors="backslashreplace")
    try:
        app()
    except FieldDataError as error:
        _complain(list(map(str, error.defects)))
    except InclineError as error:
        _complain([str(error)])


def _complain(lines: list[str]) -> None:
    many = len(lines) > 1
    if many:
        print(f"incline: {len(lines)} problems", file=sys.stderr)
    for line in lines:
        print(_folded(f"  {line}" if many else f"incline: {line}"), file=sys.stderr)
    raise SystemExit(1)


def _folded(line: str) -> str:
    """A line broken between words at the width of the terminal; whole when written to a file."""
    if not sys.stderr.isatty():
        return line
    import shutil
    import textwrap

    width = max(40, shutil.get_terminal_size().columns - 1)
    return textwrap.fill(line, width, subsequent_indent="      ", break_on_hyphens=False)


@app.callback(invoke_without_command=True)
def _options(
    version: Annotated[bool, typer.Option("--version", help="Show the version.")] = False,
) -> None:
    if version:
        from incline import __version__

        print(f"incline {__version__}")
        raise typer.Exit


@app.command()
def start(
    folder: Annotated[Path, typer.Argument(metavar="DIR", help="New folder for the trial.")],
    units: Annotated[Units, typer.Option(help="Units of the blank tables.")] = Units.metric,
) -> None:
    """Make a new trial folder with blank tables to fill in.

    Example: incline start my-vessel --units us
    """
    from incline.blank import start_trial

    made = start_trial(folder, units.value)
    print(f"{folder}: {len(made)} files to fill in, trial.toml first:")
    for name in made:
        print(f"  {name}")


@app.command()
def check(trial: Trial) -> None:
    """Read a trial and say what is wrong with it, all at once.

    Example: incline check my-vessel
    """
    from incline import read_trial
    from incline import reduce as work_out
    from incline.progress import Step
    from incline.screen import summary

    record = read_trial(trial)
    with Step("Checking the trial"):
        result = work_out(record)
    print(summary(result))


@app.command()
def reduce(
    trial: Trial,
    json: Annotated[
        str | None,
        typer.Option(metavar="FILE|-", help="Write the result as JSON (- : to the screen)."),
    ] = None,
    monte_carlo: Annotated[
        bool, typer.Option("--monte-carlo", help="Check the uncertainty by Monte Carlo too.")
    ] = False,
    draws: Draws = None,
    force: Force = False,
) -> None:
    """Work out a trial and print the result.

    Example: incline reduce my-vessel --json result.json
    """
    from incline import read_trial, to_json
    from incline import reduce as work_out
    from incline.files import refuse_existing, write_whole
    from incline.progress import Step

    target = None if json in (None, "-") else Path(str(json))
    if target is not None:
        refuse_existing(target, force=force)
    record = read_trial(trial)
    with Step("Reducing the trial") as step:
        result = work_out(record, monte_carlo=monte_carlo, draws=draws, progress=step)
    if json == "-":
        sys.stdout.buffer.write(to_json(result).encode())
        return
    from incline.screen import show

    print(show(result))
    if target is not None:
        write_whole(target, to_json(result).encode())
        print(f"\nJSON written to {target}")


@app.command()
def report(
    trial: Trial,
    output: Annotated[
        Path | None, typer.Option("--output", "-o", metavar="FILE", help="Name of the PDF.")
    ] = None,
    draws: Draws = None,
    force: Force = False,
) -> None:
    """Work out a trial and write the dated PDF report.

    Example: incline report my-vessel -o my-vessel.pdf
    """
    from incline import __version__, read_trial, write_pdf
    from incline import reduce as work_out
    from incline.files import file_stem, refuse_existing
    from incline.progress import Step

    record = read_trial(trial)
    stem = file_stem(record.vessel.name, record.occasion.date.isoformat())
    target = output or Path(f"{stem}.pdf")
    refuse_existing(target, force=force)
    with Step("Reducing the trial") as step:
        result = work_out(record, monte_carlo=True, draws=draws, progress=step)
    with Step("Writing the report"):
        write_pdf(result, target, _report_date(), __version__)
    print(f"Report written to {target}")


def _report_date() -> datetime.date:
    """Today, or the day that SOURCE_DATE_EPOCH names for a reproducible report."""
    import os

    epoch = os.environ.get("SOURCE_DATE_EPOCH", "")
    if epoch.isdigit():
        return datetime.datetime.fromtimestamp(int(epoch), tz=datetime.UTC).date()
    return datetime.datetime.now().astimezone().date()
