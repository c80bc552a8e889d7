"""What the terminal shows while a step takes more than a second: a line, then a bar."""

from __future__ import annotations

import sys
import threading
from typing import TYPE_CHECKING, Self

if TYPE_CHECKING:
    from types import TracebackType

__all__ = ["Step"]

_PATIENCE = 1.0  # seconds
_WIDTH = 30  # of the bar


class Step:
    """Says on standard error what is going on, when it lasts and someone is watching.

    Use as a context; call it with the share done, between 0 and 1, where that is known.
    """

    def __init__(self, what: str) -> None:
        self._what = what
        self._line = f"{what} ..."
        self._drawn = 0
        self._lock = threading.Lock()
        self._timer = threading.Timer(_PATIENCE, self._draw)
        self._timer.daemon = True

    def __enter__(self) -> Self:
        if sys.stderr.isatty():
            self._timer.start()
        return self

    def __call__(self, share: float) -> None:
        """Tell the share done."""
        bar = "=" * round(_WIDTH * share)
        self._line = f"{self._what} [{bar:<{_WIDTH}}] {100.0 * share:3.0f} %"
        if self._drawn:
            self._draw()

    def __exit__(
        self,
        kind: type[BaseException] | None,
        error: BaseException | None,
        trace: TracebackType | None,
    ) -> None:
        self._timer.cancel()
        with self._lock:
            if self._drawn:
                print("\r" + " " * self._drawn + "\r", end="", file=sys.stderr, flush=True)

    def _draw(self) -> None:
        with self._lock:
            self._drawn = len(self._line)
            print(f"\r{self._line}", end="", file=sys.stderr, flush=True)
