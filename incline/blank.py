"""A new trial from a blank one."""

from __future__ import annotations

from typing import TYPE_CHECKING

from incline.errors import InclineError
from incline.files import make_folder, templates_folder, write_whole

if TYPE_CHECKING:
    from pathlib import Path

__all__ = ["start_trial"]


def start_trial(folder: Path, units: str) -> list[str]:
    """Copy the blank trial into ``folder``, which must be new or empty; names of the files made."""
    if folder.exists() and not folder.is_dir():
        raise InclineError(f"{folder} is a file; give the name of a new folder")
    if folder.is_dir() and any(folder.iterdir()):
        raise InclineError(f"{folder} is not empty; give the name of a new folder")
    blank = sorted(templates_folder().joinpath(units).iterdir())
    make_folder(folder)
    for source in blank:
        write_whole(folder / source.name, source.read_bytes())
    return sorted((source.name for source in blank), key=lambda n: (n != "trial.toml", n))
