"""The sections of the report and their order."""

from __future__ import annotations

from string import ascii_uppercase
from typing import TYPE_CHECKING, Any

from reportlab.platypus import PageBreak

from incline.report.anomalies import anomalies
from incline.report.closing import cautions, remarks, signatures
from incline.report.compared import compared
from incline.report.contents import Contents
from incline.report.document import Sheet, heading, part
from incline.report.findings import residuals
from incline.report.floating import as_inclined
from incline.report.front import history, result, title_block
from incline.report.gravity import centre_of_gravity
from incline.report.heel import heel_fit
from incline.report.lightship import all_counted, to_lightship
from incline.report.monte_carlo import monte_carlo
from incline.report.particulars import conventions, test, vessel
from incline.report.readings import devices_and_readings
from incline.report.rules import rules
from incline.report.uncertainty import budget_pages, uncertainty
from incline.report.unrecorded import unrecorded
from incline.report.weights import weights_and_moments

if TYPE_CHECKING:
    from collections.abc import Callable

__all__ = ["story"]

_Sections = tuple[tuple[str, "Callable[[Sheet], list[Any]]"], ...]
_SECTIONS: _Sections = (
    ("Result", result),
    ("What was assumed", remarks),
    ("Not recorded by the trial", unrecorded),
    ("Vessel and drawings", vessel),
    ("The test", test),
    ("Rules and criteria", rules),
    ("Comparison with predicted and other values", compared),
    ("Axes, signs, units and method", conventions),
    ("Condition as inclined", as_inclined),
    ("Test weights and moments", weights_and_moments),
    ("Devices and readings", devices_and_readings),
    ("Heel against moment", heel_fit),
    ("What the residuals say", residuals),
    ("Anomalies and explanations", anomalies),
    ("From GM to the centre of gravity", centre_of_gravity),
    ("From as inclined to lightship", to_lightship),
    ("With the excluded readings counted", all_counted),
    ("Uncertainty", uncertainty),
    ("Cautions, and who decides", cautions),
    ("Signatures and acceptance", signatures),
)
_APPENDICES: _Sections = (
    ("Uncertainty budgets", budget_pages),
    ("Monte Carlo run", monte_carlo),
)
"""For those who check the statistics."""


def story(sheet: Sheet) -> list[Any]:
    """All flowables in order, sections numbered; a section without content is left out.

    The result stands on the first page, the contents on the second.
    """
    bodies = [(title, body) for title, section in _SECTIONS if (body := section(sheet))]
    further = [(title, body) for title, section in _APPENDICES if (body := section(sheet))]
    numbered = [(str(n), title, body) for n, (title, body) in enumerate(bodies, start=1)]
    lettered = [
        (f"Appendix {letter}", title, body)
        for letter, (title, body) in zip(ascii_uppercase, further, strict=False)
    ]
    sections = [[*heading(n, title), *body] for n, title, body in (*numbered, *lettered)]
    contents = Contents(f for flow in sections for f in flow)
    first, *rest = sections
    opening = [*title_block(sheet), *first, PageBreak(), *part("Contents"), contents]
    return [*opening, *history(sheet), *(f for flow in rest for f in flow)]
