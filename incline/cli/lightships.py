"""The command that compares two lightships."""

from __future__ import annotations

import math
import sys
from pathlib import Path
from typing import TYPE_CHECKING, Annotated

import typer

from incline.cli.parts import (
    Force,
    Units,
    amount,
    app,
    complain,
)
from incline.errors import InclineError

if TYPE_CHECKING:
    from incline.comparison import Situation


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
    units: Annotated[Units | None, typer.Option(case_sensitive=False, help="Units shown.")] = None,
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
        complain(["not every limit could be judged"])


def _situation(name: str) -> Situation:
    from incline.comparison import situation_named

    try:
        return situation_named(name)
    except InclineError as error:
        raise typer.BadParameter(str(error), param_hint="--situation") from error


def _masses(texts: list[str] | None, situation: Situation | None) -> list[float] | None:
    """Weights added and removed [t]; wrong usage where no limit is set on their sum."""
    from incline.units import MASS

    if not texts:
        return None
    if situation is None or all(x.quantity != "weight changes" for x in situation.limits):
        raise typer.BadParameter(
            "only for a situation that limits their sum", param_hint="--weight-change"
        )
    return [amount(text, MASS, "--weight-change") for text in texts]
