"""The report of a reduction as a PDF: the calculation step by step, ready to be signed."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from incline.files import write_whole
from incline.report.closing import cautions, remarks, signatures
from incline.report.criteria import criteria
from incline.report.document import Sheet, heading, render
from incline.report.findings import residuals
from incline.report.floating import as_inclined
from incline.report.front import result, title_block
from incline.report.gravity import centre_of_gravity
from incline.report.heel import heel_fit
from incline.report.lightship import all_counted, to_lightship
from incline.report.particulars import conventions, vessel_and_test
from incline.report.readings import devices_and_readings
from incline.report.show import Show
from incline.report.steps_page import calculation
from incline.report.uncertainty import uncertainty
from incline.report.weights import weights_and_moments

if TYPE_CHECKING:
    import datetime
    from collections.abc import Callable
    from pathlib import Path

    from incline.result import Reduction

__all__ = ["write_pdf"]

_SECTIONS: tuple[tuple[str, Callable[[Sheet], list[Any]]], ...] = (
    ("Result", result),
    ("Vessel and test", vessel_and_test),
    ("Axes, signs, units and method", conventions),
    ("Condition as inclined", as_inclined),
    ("Test weights and moments", weights_and_moments),
    ("Devices and readings", devices_and_readings),
    ("Heel against moment", heel_fit),
    ("What the residuals say", residuals),
    ("From GM to the centre of gravity", centre_of_gravity),
    ("From as inclined to lightship", to_lightship),
    ("Calculation, step by step", calculation),
    ("Uncertainty", uncertainty),
    ("With the excluded readings counted", all_counted),
    ("Criteria", criteria),
    ("Remarks", remarks),
    ("Cautions, and who decides", cautions),
    ("Signatures", signatures),
)


_TEXT_FIRST = (conventions, residuals, calculation, uncertainty, criteria, remarks)
_ROOM, _ROOM_FOR_TEXT = 136.0, 80.0
"""Points below a section's heading without which it starts a new page; less where text follows."""


def write_pdf(reduction: Reduction, path: Path, report_date: datetime.date, version: str) -> None:
    """Write the report to ``path``, replacing what is there; whether to is the caller's question.

    The same arguments give the same bytes. The file appears whole or not at all; raises
    InclineError when the disk refuses it.
    """
    sheet = Sheet(reduction, Show.of(reduction), report_date, version)
    write_whole(path, render(sheet, _story))


def _story(sheet: Sheet) -> list[Any]:
    """All flowables in order, sections numbered; a section without content is left out."""
    flow = title_block(sheet)
    number = 0
    for title, section in _SECTIONS:
        body = section(sheet)
        if body:
            number += 1
            need = _ROOM_FOR_TEXT if section in _TEXT_FIRST else _ROOM
            flow += [*heading(number, title, need), *body]
    return flow
