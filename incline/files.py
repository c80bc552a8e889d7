"""Writing files: whole or not at all, and never over something without being asked."""

from __future__ import annotations

import os
import re
import tempfile
import unicodedata
from pathlib import Path

from incline.errors import InclineError

__all__ = [
    "file_stem", "make_folder", "refuse_existing", "refuse_filled", "slug", "templates_folder",
    "write_whole",
]  # fmt: skip


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
    return f"{slug(vessel) or 'trial'}-{date}"[:120]


def slug(text: str) -> str:
    """The words of a text in plain small letters, joined by hyphens; empty when it has none."""
    plain = unicodedata.normalize("NFKD", text).encode("ascii", "ignore").decode().lower()
    return "-".join(re.findall(r"[a-z0-9]+", plain))


def refuse_filled(folder: Path, *, force: bool) -> None:
    """Raise InclineError when ``folder`` holds anything and ``force`` was not given."""
    if folder.exists() and not folder.is_dir():
        raise InclineError(f"{folder} is a file; give the name of a folder")
    if folder.is_dir() and any(folder.iterdir()) and not force:
        raise InclineError(f"{folder} is not empty; give another name, or --force to write there")


def make_folder(folder: Path) -> None:
    """Make a folder and those above it; raises InclineError when the disk refuses it."""
    try:
        folder.mkdir(parents=True, exist_ok=True)
    except OSError as error:
        raise InclineError(f"cannot make {folder}: {error.strerror}") from error


def templates_folder() -> Path:
    """Where the blank trials are: inside the installed package, or beside it in a checkout."""
    here = Path(__file__).resolve().parent
    for folder in (here / "templates", here.parent / "templates"):
        if folder.is_dir():
            return folder
    raise InclineError("the blank trials were not installed with the program")
