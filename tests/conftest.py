"""Shared fixtures: demo trials and folders written from scenes."""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING

import pytest
from demos import demo_files
from hypothesis import settings

if TYPE_CHECKING:
    from collections.abc import Callable

# A slow machine must not fail a property: deadlines time the machine, not the program.
settings.register_profile("incline", deadline=None, max_examples=60, derandomize=True)
settings.load_profile("incline")

ROOT = Path(__file__).resolve().parent.parent
DEMO_TRIALS = ROOT / "demo_trials"


@pytest.fixture
def write_folder(tmp_path: Path) -> Callable[..., Path]:
    """Write files (name -> text) into a fresh folder and give its path."""

    def write(files: dict[str, str], name: str = "trial") -> Path:
        folder = tmp_path / name
        folder.mkdir(exist_ok=True)
        for file, text in files.items():
            (folder / file).write_text(text, encoding="utf-8", newline="\n")
        return folder

    return write


@pytest.fixture
def demo_folder(write_folder: Callable[..., Path]) -> Callable[..., Path]:
    """Write a demo in another style (see `demos.demo_files`)."""

    def write(name: str, label: str = "trial", **style: object) -> Path:
        return write_folder(demo_files(name, **style), label)

    return write
