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
    from incline.units import Quantity

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
    """Paper of a report or of field sheets."""

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
    if len(lines) > 1:
        _tell(f"{len(lines)} problems", lines)
    else:
        print(_folded(f"incline: {lines[0]}"), file=sys.stderr)
    raise SystemExit(1)


def _tell(title: str, lines: list[str]) -> None:
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
def hydrostatics(
    trial: Folder,
    lowest: Annotated[
        str | None, typer.Option("--from", metavar="DRAFT", help='Lowest draft, as "1.20 m".')
    ] = None,
    highest: Annotated[
        str | None, typer.Option("--to", metavar="DRAFT", help="Highest draft.")
    ] = None,
    step: Annotated[str | None, typer.Option(metavar="LENGTH", help="Step between drafts.")] = None,
    trim: Annotated[
        list[str] | None,
        typer.Option(metavar="LENGTH", help="A trim, by the stern positive; once for each."),
    ] = None,
    heel: Annotated[float, typer.Option(metavar="DEG", help="Heel to starboard.")] = 0.0,
    deflection: Annotated[
        str | None, typer.Option(metavar="LENGTH", help="Deflection amidships, sagging positive.")
    ] = None,
    density: Annotated[
        str, typer.Option(metavar="DENSITY", help="Water for displacement, TPC and MCT.")
    ] = "1.025 t/m3",
    csv: Annotated[
        Path | None, typer.Option(metavar="FILE", help="Write the table as hydrostatics.csv.")
    ] = None,
    force: Force = False,
) -> None:
    """Print hydrostatics integrated from the hull's offsets, over drafts and trims.

    Only trial.toml and offsets.csv are read. Example: incline hydrostatics my-vessel --trim "0.1 m"
    """
    from incline.files import refuse_existing, write_whole
    from incline.reading import read_offsets
    from incline.screen_hydrostatics import hydrostatics_csv, show_hydrostatics
    from incline.tabulation import drafts_between, drafts_for, tabulate
    from incline.units import DENSITY, LENGTH

    if csv is not None:
        refuse_existing(csv, force=force)
        if heel:
            raise typer.BadParameter("a trial's table is for the upright ship", param_hint="--csv")
    water = _amount(density, DENSITY, "--density")
    if not (abs(heel) < _MOST_HEEL and water > 0.0):
        raise typer.BadParameter(f"a heel under {_MOST_HEEL:g} degrees and a density above zero")
    ends = [
        None if text is None else _amount(text, LENGTH, name)
        for text, name in ((lowest, "--from"), (highest, "--to"), (step, "--step"))
    ]
    hull = read_offsets(trial)
    drafts = drafts_for(hull.offsets, hull.vessel.lpp)
    if any(e is not None for e in ends):
        try:
            drafts = drafts_between(drafts, *ends)
        except ValueError as error:
            raise typer.BadParameter(str(error), param_hint="--from, --to, --step") from error
    table = tabulate(
        hull.offsets, hull.vessel.lpp, drafts,
        sorted({_amount(t, LENGTH, "--trim") for t in trim or ["0 m"]}),
        heel=math.radians(heel),
        deflection=0.0 if deflection is None else _amount(deflection, LENGTH, "--deflection"),
    )  # fmt: skip
    print(show_hydrostatics(hull, table, water))
    if csv is not None:
        write_whole(csv, hydrostatics_csv(hull, table).encode())
        skin = "extreme" if hull.offsets.allowance is None else "moulded"
        print(f"\nTable written to {csv}; its volume is {skin}, as [offsets] says.")


_MOST_HEEL = 90.0


@app.command()
def sheets(
    trial: Annotated[
        Path | None, typer.Argument(help="Folder of one trial, complete or not.")
    ] = None,
    blank: Annotated[bool, typer.Option("--blank", help="Sheets for any ship.")] = False,
    output: Annotated[
        Path | None, typer.Option("--output", "-o", metavar="FILE", help="Name of the PDF.")
    ] = None,
    paper: Annotated[Paper | None, typer.Option(help="Paper, if not that of the units.")] = None,
    units: Annotated[Units, typer.Option(help="Units, where no trial says.")] = Units.metric,
    devices: Annotated[
        int, typer.Option(min=1, max=24, help="Devices, where no trial lists them.")
    ] = 3,
    shifts: Annotated[
        int, typer.Option(min=3, max=60, help="Shifts, where no trial lists them.")
    ] = 9,
    gm: Annotated[
        str | None, typer.Option(metavar="LENGTH", help='GM expected, such as "0.95 m".')
    ] = None,
    displacement: Annotated[
        str | None, typer.Option(metavar="MASS", help='Displacement expected: "312 t".')
    ] = None,
    force: Force = False,
) -> None:
    """Write sheets to fill in by hand, with what a trial already knows, or blank.

    A trial need not be complete. Readings are predicted for the plots when GM and displacement
    are known: from the options, the trial's gm_before, or the trial's own result.

    Example: incline sheets my-vessel --gm "0.95 m" --displacement "312 t"
    """
    from incline import __version__
    from incline.files import file_stem, refuse_existing, templates_folder
    from incline.progress import Step
    from incline.reading.partial import read_partial
    from incline.units import LENGTH, MASS

    if (trial is None) != blank:
        raise typer.BadParameter("a folder of a trial, or --blank, one of them")
    expected = _above_zero(gm, LENGTH, "--gm"), _above_zero(displacement, MASS, "--displacement")
    partial = read_partial(trial or templates_folder() / units.value)
    stem = "field"
    if trial is not None:
        day = partial.date.isoformat() if partial.date else "undated"
        stem = file_stem(partial.trial.vessel.name, day)
    target = output or Path(f"{stem}-sheets.pdf")
    refuse_existing(target, force=force)
    with Step("Writing the sheets"):
        from incline.sheets import Choices, write_sheets

        choices = Choices(
            paper=None if paper is None else paper.value,
            units=units.value,
            devices=devices,
            shifts=shifts,
            gm=expected[0],
            displacement=expected[1],
        )
        write_sheets(partial, target, _report_date(), __version__, choices)
    print(f"Sheets written to {target}")
    if partial.wrong:
        _tell("left blank, because it cannot be used", list(map(str, partial.told)))


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


def _above_zero(text: str | None, quantity: Quantity, option: str) -> float | None:
    """What an option gives in inside units; wrong usage when it is not above zero."""
    if text is None:
        return None
    value = _amount(text, quantity, option)
    if value <= 0.0:
        raise typer.BadParameter(f"expected a {quantity.name} above zero", param_hint=option)
    return value


def _masses(texts: list[str] | None, situation: Situation | None) -> list[float] | None:
    """Weights added and removed [t]; wrong usage where no limit is set on their sum."""
    from incline.units import MASS

    if not texts:
        return None
    if situation is None or all(x.quantity != "weight changes" for x in situation.limits):
        raise typer.BadParameter(
            "only for a situation that limits their sum", param_hint="--weight-change"
        )
    return [_amount(text, MASS, "--weight-change") for text in texts]


def _amount(text: str, quantity: Quantity, option: str) -> float:
    """A quantity with its unit in inside units; wrong usage where it cannot be read."""
    from incline.units import QuantityError, parse_quantity

    try:
        return parse_quantity(text, quantity)
    except QuantityError as error:
        raise typer.BadParameter(f"expected {error.expected}", param_hint=option) from error


def _report_date() -> datetime.date:
    """Today, or the day that SOURCE_DATE_EPOCH names for a reproducible report."""
    epoch = os.environ.get("SOURCE_DATE_EPOCH", "")
    if epoch.isdigit():
        return datetime.datetime.fromtimestamp(int(epoch), tz=datetime.UTC).date()
    return datetime.datetime.now().astimezone().date()
