"""Reduce an inclining experiment to GM, lightship displacement, KG, LCG and TCG.

``read_trial(folder)`` reads the records of a test, ``reduce(trial)`` works them out,
``to_json(reduction)`` and ``write_pdf(...)`` hand the result on. ``read_offsets(folder)`` reads the
hull alone. Names load on first use, so that importing the package costs nothing.
"""

from __future__ import annotations

from importlib import import_module
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from incline.contract import to_json as to_json
    from incline.errors import FieldDataError as FieldDataError
    from incline.errors import InclineError as InclineError
    from incline.reading import read_offsets as read_offsets
    from incline.reading import read_trial as read_trial
    from incline.reduction import reduce as reduce
    from incline.report import write_pdf as write_pdf

__version__ = "0.1.0"

_HOME = {
    "FieldDataError": "incline.errors",
    "InclineError": "incline.errors",
    "read_offsets": "incline.reading",
    "read_trial": "incline.reading",
    "reduce": "incline.reduction",
    "to_json": "incline.contract",
    "write_pdf": "incline.report",
}
__all__ = sorted(_HOME)  # noqa: PLE0605 - the table above is the one list of public names


def __getattr__(name: str) -> object:
    """Load a public name from its module (PEP 562)."""
    if name in _HOME:
        return getattr(import_module(_HOME[name]), name)
    raise AttributeError(f"module 'incline' has no attribute {name!r}")


def __dir__() -> list[str]:
    return __all__
