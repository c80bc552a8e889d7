"""Writing files: whole or not at all, and never over something without being asked."""

from __future__ import annotations

import os
import re
import tempfile
import unicodedata
from pathlib import Path

from incline.errors import InclineError

__all__ = ["file_stem", "refuse_existing", "templates_folder", "write_whole"]


def refuse_existing(path: Path, *, force: bool) -> None:
    """Raise InclineError when something stands at ``path`` and ``force`` was not given."""
    if path.is_dir():
        raise InclineError(f"{path} is a folder; give the name of a file")
    if path.exists() and not force:
        raise InclineError(f"{path} exists already; give another name, or --force to replace it")


def write_whole(path: Path, data: bytes) -> None:
    """Write beside ``path`` and rename, so that no half-written file is ever seen."""
    try:
        handle, name = tempfile.mkstemp(dir=path.parent or Path(), prefix=f".{path.name[:40]}.")
        beside = Path(name)
        try:
            with os.fdopen(handle, "wb") as file:
                file.write(data)
            beside.chmod(0o666 & ~_umask())
            beside.replace(path)
        except BaseException:
            beside.unlink(missing_ok=True)
            raise
    except OSError as error:
        raise InclineError(f"cannot write {path}: {error.strerror}") from error


def _umask() -> int:
    now = os.umask(0)
    os.umask(now)
    return now


def file_stem(vessel: str, date: str) -> str:
    """A plain file name from vessel and date: ``A&B <i>`` gives ``a-b-i-2026-03-14``."""
    plain = unicodedata.normalize("NFKD", vessel).encode("ascii", "ignore").decode().lower()
    words = re.findall(r"[a-z0-9]+", plain)
    return "-".join([*(words or ["trial"]), date])[:120]


def templates_folder() -> Path:
    """Where the blank trials are: inside the installed package, or beside it in a checkout."""
    here = Path(__file__).resolve().parent
    for folder in (here / "templates", here.parent / "templates"):
        if folder.is_dir():
            return folder
    raise InclineError("the blank trials were not installed with the program")
