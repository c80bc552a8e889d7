"""The command that tabulates a hull."""

from __future__ import annotations

import math
from pathlib import Path
from typing import Annotated

import typer

from incline.cli.parts import (
    Folder,
    Force,
    amount,
    app,
)


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
    from incline.screen_hydrostatics import hydrostatics_csv, show_hydrostatics, stated_lines
    from incline.tabulation import drafts_between, drafts_for, tabulate
    from incline.units import DENSITY, LENGTH

    if csv is not None:
        refuse_existing(csv, force=force)
        if heel or deflection is not None:
            raise typer.BadParameter(
                "a trial's table is for the upright ship without deflection: the trial allows for"
                " the measured deflection itself",
                param_hint="--csv",
            )
    water = amount(density, DENSITY, "--density")
    if not (abs(heel) < _MOST_HEEL and water > 0.0):
        raise typer.BadParameter(f"a heel under {_MOST_HEEL:g} degrees and a density above zero")
    ends = [
        None if text is None else amount(text, LENGTH, name)
        for text, name in ((lowest, "--from"), (highest, "--to"), (step, "--step"))
    ]
    trims = sorted({amount(t, LENGTH, "--trim") for t in trim or ["0 m"]})
    bend = 0.0 if deflection is None else amount(deflection, LENGTH, "--deflection")
    hull = read_offsets(trial)
    shape, lpp, lean = hull.offsets, hull.vessel.lpp, math.radians(heel)
    drafts = drafts_for(shape, lpp, trims, heel=lean, deflection=bend)
    if any(e is not None for e in ends):
        try:
            drafts = drafts_between(drafts, *ends)
        except ValueError as error:
            raise typer.BadParameter(str(error), param_hint="--from, --to, --step") from error
    table = tabulate(shape, lpp, drafts, trims, heel=lean, deflection=bend)
    print(show_hydrostatics(hull, table, water))
    if csv is not None:
        write_whole(csv, hydrostatics_csv(hull, table).encode())
        skin = "extreme" if hull.offsets.allowance is None else "moulded"
        print(
            f"\nTable written to {csv}; its volume is {skin}: say so in [hydrostatics] of"
            " trial.toml, with the allowance as in [offsets]. What the spacing of the offsets and"
            " of these drafts leaves open goes there too:"
        )
        print("\n".join(stated_lines(hull, table)))


_MOST_HEEL = 90.0
