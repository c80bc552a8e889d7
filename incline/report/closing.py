"""Remarks, cautions, who decides, and the lines to sign."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from reportlab.platypus import Paragraph, Table

from incline.report.document import Sheet, bullet, paragraph, part
from incline.report.fonts import REGULAR
from incline.report.headings import Whole
from incline.report.show import NOT_RECORDED
from incline.report.styles import INK, STYLES
from incline.report.text import markup

if TYPE_CHECKING:
    from incline.papers import Papers
    from incline.result import Reduction

__all__ = ["BEFORE", "STOP", "cautions", "remarks", "remarks_of", "signatures"]

_DECIDES = (
    "This report is a calculation. It is meant to help the person who answers for the test to "
    "judge it, and it does not replace that judgement.",
    "Whether the test and its result are accepted is for the flag administration, or the "
    "organisation it has recognised for the purpose, to say. What they decide in writing stands "
    "above every limit, rule and remark printed here.",
    "A value outside a limit is something to find the cause of and explain; it does not by itself "
    "show that the ship is unsafe. A value inside every limit does not show that she is safe.",
)

BEFORE = (
    "Before any weight is lifted, predict GM, heel and remaining freeboard for the largest "
    "moment, and do not begin with too little stability to carry it.",
    "A weight that hangs from the ship's own crane or derrick acts at the point it hangs "
    "from, high up, and not where the weight is.",
    "Go into a tank only when it is certified gas-free and has been tested. Keep everyone clear of "
    "the gap between ship and quay, and from under a load.",
    "Mooring lines are slack while readings are taken, and someone stands by each of them.",
)

STOP = (
    "the heel passes 4 degrees, or a quarter more than predicted;",
    "the heel goes on growing after the weight has been set down;",
    "the ship lolls from one side to the other, or GM comes out at zero or below. Never try to "
    "cure loll by moving weight to the high side;",
    "the readings do not come back to the zero and no cause is found;",
    "a mooring line comes taut.",
)


def remarks_of(reduction: Reduction) -> list[str]:
    """Assumptions and refusals, each once, in the order in which they were made."""
    return list(dict.fromkeys((*reduction.trial.remarks, *reduction.remarks)))


def remarks(sheet: Sheet) -> list[Any]:
    """What was assumed and what could not be found."""
    said = remarks_of(sheet.reduction)
    return [bullet(text) for text in said] if said else [paragraph("None.")]


def cautions(_sheet: Sheet) -> list[Any]:
    """Who decides, what to mind, and when to stop."""
    return [
        *part("Standing of this report"),
        *(bullet(text) for text in _DECIDES),
        *part("Before and during a test"),
        *(bullet(text) for text in BEFORE),
        *part("Stop the test when"),
        *(bullet(text) for text in STOP),
        paragraph(
            "The reasons to stop are common practice and this program's own choice of figures; "
            "they are not quoted from a standard. Check them against the procedure "
            "agreed for the test."
        ),
    ]


_PARTS = {
    "tested": "Tested by",
    "calculated": "Calculated by",
    "checked": "Checked by",
    "witnessed": "Witnessed by",
}
_SIGN = (0.14, 0.25, 0.25, 0.13, 0.23)
_HEADS = ("", "name", "organisation", "date", "signature")


def signatures(sheet: Sheet) -> list[Any]:
    """Who accepts, and places to sign: for the parts of the test, and for the acceptance."""
    papers = sheet.reduction.trial.papers
    to = papers.submitted_to
    authority = (
        f"This report is submitted to {to}. "
        if to
        else f"To whom this report is submitted is {NOT_RECORDED}. "
    )
    rows = [row for key, title in _PARTS.items() for row in _rows_of(papers, key, title)]
    accepted = _rows_of(papers, "accepted", "Accepted by")
    vouch = paragraph(
        "The signatures vouch for the part named in each line. They do not take the place of the "
        "administration's acceptance."
    )
    decided = paragraph(
        f"{authority}The test and its lightship count as accepted when the flag administration, or "
        "the organisation that it has recognised for the purpose, says so in writing, here or "
        "elsewhere; the program, its author and the signatures above cannot."
    )
    return [
        Whole([vouch, _lines_to_sign(sheet, rows)]),
        *part("Acceptance"),
        Whole([decided, _lines_to_sign(sheet, accepted)]),
    ]


def _rows_of(papers: Papers, part_of: str, title: str) -> list[tuple[str, str, str]]:
    """A row for each one who signs for a part; an empty one where the trial names nobody."""
    named = [(title, s.name, s.organisation) for s in papers.signatures if s.part == part_of]
    return named or [(title, "", "")]


def _lines_to_sign(sheet: Sheet, rows: list[tuple[str, str, str]]) -> Table:
    cells = [[Paragraph(markup(h), STYLES["head_left"]) for h in _HEADS]]
    cells += [
        [
            Paragraph(markup(title), STYLES["head_left"]),
            Paragraph(markup(name), STYLES["cell_left"]),
            Paragraph(markup(organisation), STYLES["cell_left"]),
            "",
            "",
        ]
        for title, name, organisation in rows
    ]
    return Table(
        cells,
        colWidths=[sheet.width * s for s in _SIGN],
        minRowHeights=[14, *[34] * len(rows)],
        repeatRows=1,
        style=[
            ("VALIGN", (0, 0), (-1, -1), "MIDDLE"),
            ("FONT", (0, 0), (-1, -1), REGULAR, 7),
            ("GRID", (0, 0), (-1, -1), 0.4, INK),
            ("LEFTPADDING", (0, 0), (-1, -1), 2.5),
        ],
        hAlign="LEFT",
        spaceBefore=3,
        spaceAfter=7,
    )
