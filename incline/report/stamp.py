"""A PDF canvas whose bytes depend on nothing but what is drawn, its date and its identity."""

from __future__ import annotations

import hashlib
from typing import TYPE_CHECKING

from reportlab import rl_config
from reportlab.pdfgen.canvas import Canvas

if TYPE_CHECKING:
    import datetime
    from collections.abc import Callable

__all__ = ["stamped"]


def stamped(
    date: datetime.date, identity: str, kind: Callable[..., Canvas] = Canvas
) -> Callable[..., Canvas]:
    """Canvas of a kind whose dates and identifier come from the arguments, not from a clock."""
    rl_config.useA85 = 0  # streams as they are: smaller, and quicker to write
    stamp = f"D:{date:%Y%m%d}000000+00'00'"
    whole = f"{identity} {stamp}"

    def make(*args: object, **options: object) -> Canvas:
        canvas = kind(*args, **options)
        canvas.setDateFormatter(lambda *_: stamp)
        canvas._doc.signature = hashlib.md5(whole.encode(), usedforsecurity=False)  # noqa: SLF001
        return canvas

    return make
