"""Commands on one trial: start, check, reduce."""

from __future__ import annotations

import sys
from pathlib import Path
from typing import Annotated

import typer

from incline.cli.parts import (
    Draws,
    Folder,
    Force,
    Units,
    app,
)


@app.command()
def start(
    folder: Annotated[Path, typer.Argument(metavar="DIR", help="New folder for the trial.")],
    units: Annotated[
        Units, typer.Option(case_sensitive=False, help="Units of the blank tables.")
    ] = Units.metric,
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
