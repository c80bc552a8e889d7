"""The command line: arguments in, one call, words and files out."""

from __future__ import annotations

import datetime
import math
import os
import sys
from enum import StrEnum
from pathlib import Path
from typing import TYPE_CHECKING, Annotated, Literal, TypeAlias

import typer

from incline.errors import FieldDataError, InclineError

if TYPE_CHECKING:
    from incline.comparison import Situation
    from incline.record import Trial

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
    """Paper of a report."""

    a4 = "a4"
    letter = "letter"


def main() -> None:
    """Run the command line; user errors become lines on standard error and exit status 1."""
    # The sums are small: threads of the linear algebra wait for one another longer than they work.
    os.environ.setdefault("OPENBLAS_NUM_THREADS", "1")
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
def check(trial: Folder) -> None:
    """Read a trial, say all that is wrong with it, and hold it against the published criteria.

    Exit status 3 when a criterion is not met. Example: incline check my-vessel
    """
    from incline import read_trial
    from incline import reduce as work_out
    from incline.progress import Step
    from incline.screen import summary
    from incline.screen_checks import show_checks

    record = read_trial(trial)
    with Step("Checking the trial"):
        result = work_out(record)
    print(summary(result))
    print("\n" + show_checks(result))
    if any(c.status == "fail" for c in result.checks):
        raise typer.Exit(3)


@app.command()
def reduce(
    trial: Folder,
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
    trial: Folder,
    output: Annotated[
        Path | None, typer.Option("--output", "-o", metavar="FILE", help="Name of the PDF.")
    ] = None,
    units: Annotated[
        Shown | None,
        typer.Option(help="Units, in place of the trial's; both: metric with US beside it."),
    ] = None,
    paper: Annotated[
        Paper | None, typer.Option(help="Paper, in place of the one that goes with the units.")
    ] = None,
    tables: Annotated[
        Path | None,
        typer.Option(metavar="DIR", help="Also write every table as CSV, and the JSON, there."),
    ] = None,
    draws: Draws = None,
    force: Force = False,
) -> None:
    """Work out a trial and write the dated PDF report.

    Example: incline report my-vessel -o my-vessel.pdf
    """
    from incline import __version__, read_trial, to_json, write_pdf
    from incline import reduce as work_out
    from incline.files import file_stem, make_folder, refuse_existing, refuse_filled, write_whole
    from incline.progress import Step

    record = _in_units(read_trial(trial), units)
    stem = file_stem(record.vessel.name, record.occasion.date.isoformat())
    target = output or Path(f"{stem}.pdf")
    refuse_existing(target, force=force)
    if tables is not None:
        refuse_filled(tables, force=force)
    with Step("Reducing the trial") as step:
        result = work_out(record, monte_carlo=True, draws=draws, progress=step)
    with Step("Writing the report"):
        from incline.report import Options

        if tables is not None:
            make_folder(tables)
            write_whole(tables / "result.json", to_json(result).encode())
        size: Literal["A4", "Letter"] | None = None
        if paper is not None:
            size = "A4" if paper == Paper.a4 else "Letter"
        options = Options(beside=units == Shown.both, paper=size)
        written = write_pdf(result, target, _report_date(), __version__, options, tables)
    print(f"Report written to {target}")
    if tables is not None:
        print(f"{len(written) - 1} tables and result.json written to {tables}")


def _in_units(record: Trial, units: Shown | None) -> Trial:
    """The trial asked to be shown in other units; with both, metric leads."""
    from dataclasses import replace

    if units is None:
        return record
    name: Literal["metric", "us"] = "us" if units == Shown.us else "metric"
    return replace(record, settings=replace(record.settings, units=name))


@app.command()
def compare(
    old: Annotated[
        Path | None, typer.Argument(help="Earlier, calculated or lead ship's lightship.")
    ] = None,
    new: Annotated[Path | None, typer.Argument(help="Lightship found now.")] = None,
    situation: Annotated[
        str | None, typer.Option(metavar="ID", help="Whose limits count; without it, a list.")
    ] = None,
    length: Annotated[
        float | None, typer.Option(metavar="M", help="L as the rules define it, in metres.")
    ] = None,
    weight_change: Annotated[
        list[str] | None,
        typer.Option(metavar="MASS", help="A weight added, or removed (-0.4 t); once for each."),
    ] = None,
    units: Annotated[Units | None, typer.Option(help="Units shown.")] = None,
    json: Annotated[
        str | None, typer.Option(metavar="FILE|-", help="Write JSON (- : to the screen).")
    ] = None,
    force: Force = False,
) -> None:
    """Compare two lightships under the limits published for a situation.

    OLD and NEW are each a trial folder, a JSON file of incline reduce, or a TOML file with
    displacement, kg, lcg, tcg, lpp. Exit status: 0 within, 3 beyond, 1 not to be judged.

    Example: incline compare last-year this-year.json --situation passenger-survey
    """
    from incline import comparison as c
    from incline.files import refuse_existing, write_whole

    asked = None if situation is None else _situation(situation)
    if old is None or new is None:
        if old or asked or json:
            raise typer.BadParameter("two lightships are needed: OLD and NEW")
        print(c.list_situations())
        return
    changes = _masses(weight_change, asked)
    if length is not None and not 0.0 < length < math.inf:
        raise typer.BadParameter("a length above zero, in metres", param_hint="--length")
    target = None if json in (None, "-") else Path(str(json))
    if target is not None:
        refuse_existing(target, force=force)
    pair = c.read_pair(old, new)
    found = c.compare(*pair, asked, length=length, weight_changes=changes)
    text = c.to_json(found).encode("utf-8", "backslashreplace")
    if json == "-":
        sys.stdout.buffer.write(text)
    else:
        print(c.show_comparison(found, None if units is None else units.value))
    if target is not None:
        write_whole(target, text)
        print(f"\nJSON written to {target}")
    if found.verdict == "beyond":
        raise typer.Exit(3)
    if found.verdict == "not judged":
        _complain(["not every limit could be judged"])


def _situation(name: str) -> Situation:
    from incline.comparison import situation_named

    try:
        return situation_named(name)
    except InclineError as error:
        raise typer.BadParameter(str(error), param_hint="--situation") from error


def _masses(texts: list[str] | None, situation: Situation | None) -> list[float] | None:
    """Weights added and removed [t]; wrong usage where no limit is set on their sum."""
    from incline.units import MASS, QuantityError, parse_quantity

    if not texts:
        return None
    if situation is None or all(x.quantity != "weight changes" for x in situation.limits):
        raise typer.BadParameter(
            "only for a situation that limits their sum", param_hint="--weight-change"
        )
    try:
        return [parse_quantity(text, MASS) for text in texts]
    except QuantityError as error:
        raise typer.BadParameter(
            f"expected {error.expected}", param_hint="--weight-change"
        ) from error


def _report_date() -> datetime.date:
    """Today, or the day that SOURCE_DATE_EPOCH names for a reproducible report."""
    epoch = os.environ.get("SOURCE_DATE_EPOCH", "")
    if epoch.isdigit():
        return datetime.datetime.fromtimestamp(int(epoch), tz=datetime.UTC).date()
    return datetime.datetime.now().astimezone().date()
