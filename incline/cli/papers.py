"""Commands that write paper: the report and the field sheets."""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING, Annotated, Literal

import typer

from incline.cli.parts import (
    Draws,
    Folder,
    Force,
    Paper,
    Shown,
    Units,
    above_zero,
    app,
    report_date,
    tell,
)

if TYPE_CHECKING:
    from incline.record import Trial, Vessel


@app.command()
def report(
    trial: Folder,
    output: Annotated[
        Path | None, typer.Option("--output", "-o", metavar="FILE", help="Name of the PDF.")
    ] = None,
    units: Annotated[
        Shown | None,
        typer.Option(
            case_sensitive=False,
            help="Units, in place of the trial's; both: metric with US beside it.",
        ),
    ] = None,
    paper: Annotated[
        Paper | None,
        typer.Option(
            case_sensitive=False, help="Paper, in place of the one that goes with the units."
        ),
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
        written = write_pdf(result, target, report_date(), __version__, options, tables)
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
def sheets(
    trial: Annotated[
        Path | None, typer.Argument(help="Folder of one trial, complete or not.")
    ] = None,
    blank: Annotated[bool, typer.Option("--blank", help="Sheets for any ship.")] = False,
    output: Annotated[
        Path | None, typer.Option("--output", "-o", metavar="FILE", help="Name of the PDF.")
    ] = None,
    paper: Annotated[
        Paper | None, typer.Option(case_sensitive=False, help="Paper, if not that of the units.")
    ] = None,
    units: Annotated[
        Units, typer.Option(case_sensitive=False, help="Units, where no trial says.")
    ] = Units.metric,
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
    expected = (
        above_zero(gm, LENGTH, "--gm", _MOST_GM),
        above_zero(displacement, MASS, "--displacement", _MOST_MASS),
    )
    partial = read_partial(trial or templates_folder() / units.value)
    vessel = partial.trial.vessel
    _check_expected(expected, vessel)
    stem = "field"
    if trial is not None:
        day = partial.date.isoformat() if partial.date else "undated"
        stem = file_stem(vessel.name, day)
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
        write_sheets(partial, target, report_date(), __version__, choices)
    print(f"Sheets written to {target}")
    if partial.wrong:
        tell("left blank, because it cannot be used", list(map(str, partial.told)))


_MOST_GM = 60.0, "60 m, more than any ship has"
_MOST_MASS = 1e6, "1 000 000 t, more than any ship has"


def _check_expected(expected: tuple[float | None, float | None], vessel: Vessel) -> None:
    """Wrong usage where no ship of these dimensions has the GM or the displacement [m, t].

    Of hulls of one beam and volume a box has the largest BM, B^2 / (12 T), and drafts at a test are
    above a thirtieth of the beam; salt water in a box as deep as the ship weighs most.
    """
    gm, displacement = expected
    if gm is not None and gm > 2.5 * vessel.beam:
        text = f"expected a GM that a ship of {vessel.beam:.2f} m beam can have"
        raise typer.BadParameter(text, param_hint="--gm")
    most = 1.03 * vessel.lpp * vessel.beam * vessel.depth * 1.2  # a hull is longer than lpp
    if displacement is not None and (displacement > most or displacement < 0.003 * most):
        text = (
            f"expected a displacement that a ship of {vessel.lpp:.2f} m x {vessel.beam:.2f} m x"
            f" {vessel.depth:.2f} m can have"
        )
        raise typer.BadParameter(text, param_hint="--displacement")
