"""The command line: arguments in, one call, words and files out."""

from __future__ import annotations

import gc
import os
import sys
from typing import Annotated

import typer

from incline.cli import hulls, lightships, papers, trials
from incline.cli.parts import app, complain
from incline.errors import FieldDataError, InclineError

_ORDER = ("start", "sheets", "check", "reduce", "report", "compare", "hydrostatics")
app.registered_commands.sort(key=lambda c: _ORDER.index(getattr(c.callback, "__name__", "")))

__all__ = ["app", "hulls", "lightships", "main", "papers", "trials"]


def main() -> None:
    """Run the command line; user errors become lines on standard error and exit status 1."""
    # The sums are small: threads of the linear algebra wait for one another longer than they work.
    os.environ.setdefault("OPENBLAS_NUM_THREADS", "1")
    # A command makes many small objects, keeps most and ends: looking for rings of them is wasted.
    gc.disable()
    for stream in (sys.stdout, sys.stderr):
        if hasattr(stream, "reconfigure"):
            stream.reconfigure(errors="backslashreplace")
    try:
        app()
    except FieldDataError as error:
        complain(list(map(str, error.defects)))
    except InclineError as error:
        complain([str(error)])
    finally:
        gc.enable()


@app.callback(invoke_without_command=True)
def _options(
    version: Annotated[bool, typer.Option("--version", help="Show the version.")] = False,
) -> None:
    if version:
        from incline import __version__

        print(f"incline {__version__}")
        raise typer.Exit
