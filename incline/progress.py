"""A line on the terminal while a step takes more than a second."""

from __future__ import annotations

import sys
import threading
from contextlib import contextmanager
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from collections.abc import Iterator

__all__ = ["step"]

_PATIENCE = 1.0  # seconds


@contextmanager
def step(what: str) -> Iterator[None]:
    """Say ``what`` is going on, on standard error, when it lasts and someone is watching."""
    if not sys.stderr.isatty():
        yield
        return
    shown = threading.Event()

    def show() -> None:
        shown.set()
        print(f"{what} ...", end="", file=sys.stderr, flush=True)

    timer = threading.Timer(_PATIENCE, show)
    timer.daemon = True
    timer.start()
    try:
        yield
    finally:
        timer.cancel()
        timer.join()
        if shown.is_set():
            print("\r" + " " * (len(what) + 4) + "\r", end="", file=sys.stderr, flush=True)
