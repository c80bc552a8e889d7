"""Remarks, cautions, who decides, and the lines to sign."""

from __future__ import annotations

from typing import Any

from reportlab.platypus import CondPageBreak, Paragraph, Table

from incline.report.document import Sheet, bullet, paragraph, part
from incline.report.fonts import REGULAR
from incline.report.styles import INK, STYLES
from incline.report.text import markup

__all__ = ["BEFORE", "STOP", "cautions", "remarks", "signatures"]

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


def remarks(sheet: Sheet) -> list[Any]:
    """Assumptions and refusals, each once, in the order in which they were made."""
    said = dict.fromkeys((*sheet.reduction.trial.remarks, *sheet.reduction.remarks))
    if not said:
        return [paragraph("None.")]
    return [bullet(text) for text in said]


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


def signatures(sheet: Sheet) -> list[Any]:
    """Three places to sign, kept together."""
    heads = ("", "name", "organisation", "date", "signature")
    rows = ("Tested by", "Calculated by", "Witnessed by")
    cells = [[Paragraph(markup(h), STYLES["head_left"]) for h in heads]]
    cells += [[Paragraph(r, STYLES["head_left"]), "", "", "", ""] for r in rows]
    shares = (0.14, 0.25, 0.25, 0.13, 0.23)
    table = Table(
        cells,
        colWidths=[sheet.width * s for s in shares],
        rowHeights=[14, 34, 34, 34],
        style=[
            ("VALIGN", (0, 0), (-1, -1), "BOTTOM"),
            ("FONT", (0, 0), (-1, -1), REGULAR, 7),
            ("GRID", (0, 0), (-1, -1), 0.4, INK),
            ("VALIGN", (0, 1), (0, -1), "MIDDLE"),
            ("LEFTPADDING", (0, 0), (-1, -1), 2.5),
        ],
        hAlign="LEFT",
    )
    said = paragraph(
        "The signatures vouch for the part named in each line. They do not take the place of the "
        "administration's acceptance."
    )
    return [CondPageBreak(150), said, table]
