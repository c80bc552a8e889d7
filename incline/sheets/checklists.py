"""What to see to before the test and at its end, each with where it comes from."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from reportlab.platypus import KeepTogether

from incline.report.closing import BEFORE, STOP
from incline.sheets.forms import ROW, Column, form, line, part, text

if TYPE_CHECKING:
    from incline.sheets.book import Book

__all__ = ["before_test", "end_checks"]

_ROOM = 80.0
"""Points below the heading of a list without which it starts a new page."""
_PRACTICE = "common practice"
_CODE = "2008 IS Code, part B"

_READY: tuple[tuple[str, tuple[tuple[str, str], ...]], ...] = (
    ("Agreed beforehand", (
        ("Procedure sent to the administration in good time, and agreed.",
         "46 CFR 170.085: 14 days"),
        ("Rules and edition that judge the test named; departures from them allowed in writing.",
         _PRACTICE),
        ("Hydrostatics at hand for the drafts, trim and density that are expected.",
         f"{_CODE}, 8.2.2.7"),
        ("GM, greatest heel and least freeboard worked out for the largest moment; GM before the"
         " test at least 0.20 m.", "a class society's checklist for yards"),
    )),
    ("The ship", (
        ("As near complete as can be. What is to come off, to go on or to move is listed with mass"
         " and place: to add at most 2 %, to deduct at most 4 % of lightship.",
         "IACS Recommendation 31"),
        ("Tanks full to the top or empty and dry. The fewest possible slack, one pair or one on"
         " the centreline of each kind; a deep tank 20 to 80 %, a double bottom 40 to 60 % full.",
         f"{_CODE}, annex 1, 2.1"),
        ("Surface in each slack tank clear of its top and bottom at the greatest heel;"
         " cross-connections shut.", f"{_CODE}, 8.2.2.5"),
        ("Bilges, decks and gutters dry, snow and ice off, nothing hanging or loose that could"
         " swing or roll.", _PRACTICE),
        ("List with the test weights in place at most 0.5 degrees; trim at most 1 % of the length,"
         " unless the hydrostatics are for the actual trim.",
         f"{_CODE}, 8.2.2.7; class rules; US practice"),
    )),
    ("The berth", (
        ("Sheltered; depth of water sounded round the ship, enough at the greatest heel; lines"
         " slack; gangway off; hoses and cables off or hanging free; fenders clear.",
         f"{_CODE}, 8.2.2.6"),
        ("Wind and current watched and logged; tide and passing traffic known.",
         f"{_CODE}, 8.2.2.6"),
    )),
    ("Weights and devices", (
        ("Test weights solid, marked, each with its certificate; places marked on deck; moves"
         " athwartships, at one height.", f"A.749(18), 7.2.1; {_CODE}, 8.2.2.8 and annex 1, 4"),
        ("Weights heel the ship 1 to 4 degrees to each side (US practice: 2 to 4).",
         f"{_CODE}, 8.2.2; class rules; US practice"),
        ("Three devices as a rule, two at the least, one of them a pendulum; pendulums 3 m long or"
         " more, on small vessels 2 m; deflection at least 10 cm (US practice 15 cm) to each side.",
         f"{_CODE}, 8.2.2.9 and annex 1; ASTM F1321"),
        ("Pendulums swing free, bobs in a bath, battens level and fixed, out of the wind; lengths"
         " measured from pivot to batten.", _PRACTICE),
        ("Hydrometer covers relative densities 0.999 to 1.030; thermometer and sampler ready.",
         "A.749(18), annex 1, 3.6"),
        ("Eight movements planned, with returns to the start.", f"{_CODE}, 8.4.1.2"),
        ("One person gives the orders; signals between deck, devices and shore tried out; nobody"
         " else moves during readings.", _PRACTICE),
    )),
)  # fmt: skip

_END = (
    ("Zero read again after the last movement; difference from the first explained.",
     f"{_CODE}, 8.4.1.2"),
    ("A reading of each device at each shift, and none struck out without a reason written down.",
     _PRACTICE),
    ("Each running plot a straight line; a point off it read again or explained before the weights"
     " leave the ship.", f"{_CODE}, 8.4.1.2"),
    ("Test weights all aboard through the test; places measured and written down.",
     f"{_CODE}, annex 1, 4"),
    ("Drafts or freeboards at every mark on both sides; marks that do not lie on one line or even"
     " curve read again.", f"{_CODE}, 8.4.1.1 and annex 1, 4.2"),
    ("What came or went between drafts and shifts listed.", _PRACTICE),
    ("Tanks sounded again; differences written down.", _PRACTICE),
    ("Density sampled at several depths, on a large ship at three places.",
     f"{_CODE}, annex 1, 4.2"),
    ("People aboard the same, each at the station listed.", _PRACTICE),
    ("Log of wind, current and lines complete; nothing taut, nothing aground.",
     f"{_CODE}, 8.2.2.6"),
    ("Lists to deduct, add and relocate gone through with the yard, on the spot.", _PRACTICE),
    ("Lines hove tight and gangway back; weights landed only when every check above is done.",
     _PRACTICE),
    ("All sheets counted against the cover, every page initialled; a copy for the witness.",
     _PRACTICE),
)  # fmt: skip

_COLUMNS = (
    Column("done", 0.07),
    Column("check", 0.53),
    Column("from", 0.24),
    Column("initials, time", 0.16),
)


def _list(book: Book, items: tuple[tuple[str, str], ...]) -> Any:  # noqa: ANN401 - untyped library
    return form(_COLUMNS, [("", said, basis, "") for said, basis in items], book.width)


def before_test(book: Book) -> list[Any]:
    """Before a weight is lifted, when to stop, and what the pages do not settle."""
    heading = Column("done", 0.07), Column("caution", 0.77), Column("initials, time", 0.16)
    flow: list[Any] = [
        text(
            "Limits are those of the source named, in this program's words: check them against the"
            " edition that the administration applies, whose written decision prevails."
        )
    ]
    for title, items in _READY:
        flow += [*part(title, _ROOM), _list(book, items)]
    return [
        *flow,
        *part("Safety (common practice, not quoted from a standard)", _ROOM),
        form(heading, [("", said, "") for said in BEFORE], book.width),
        KeepTogether(_reasons_to_stop(book)),
    ]


def _reasons_to_stop(book: Book) -> list[Any]:
    columns = (
        Column("", 0.07, "right"), Column("common practice, with this program's figures", 0.77),
        Column("seen at, by", 0.16),
    )  # fmt: skip
    reasons = [f"{said[0].upper()}{said[1:].rstrip(';.')}." for said in STOP]
    return [
        *part("Stop the test when", 0.0),
        form(columns, [(f"{n}", said, "") for n, said in enumerate(reasons, start=1)], book.width),
        text(
            "The reasons to stop are common practice with figures of this program's choice. The"
            " procedure agreed for the test, and the judgement of the person in charge, go before."
        ),
    ]


def end_checks(book: Book) -> list[Any]:
    """What to see to before anyone goes home, and the lines to sign."""
    sign = (
        Column("", 0.17), Column("name", 0.27), Column("organisation", 0.24),
        Column("date, time", 0.14), Column("signature", 0.18),
    )  # fmt: skip
    rows = [(who, "", "", "", "") for who in ("Tested by", "Recorded by", "Witnessed by")]
    return [
        _list(book, _END),
        line("what was unusual, and what is still to be done", book.width),
        *part("Signatures"),
        form(sign, rows, book.width, high=1.5 * ROW),
        text(
            "The signatures vouch for what is written on the sheets. Acceptance of the test is for"
            " the administration, or the organisation that it recognises, to give."
        ),
    ]
