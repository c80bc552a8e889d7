"""Test weights and where they stand at each shift, with a sketch of the deck."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING, Any

from incline.sheets.book import section
from incline.sheets.deck import DeckPlan, Spot
from incline.sheets.forms import Column, boxes, form, part, text

if TYPE_CHECKING:
    from collections.abc import Mapping, Sequence

    from incline.record import Weight
    from incline.sheets.book import Book
    from incline.sheets.sequence import Place, ShiftRow

__all__ = ["test_weights"]

_SIDE_BY_SIDE = 6
"""Weights in one table of positions; more go into further tables."""
_SKETCH = 165.0
_STOP_HEEL = 4.0
"""Heel at which the test is stopped [deg]: common practice."""
_UNNAMED = 4
"""Columns for weights of which nothing is known."""
_WEIGHTS = 6
"""Least rows of the list of weights."""


def test_weights(book: Book) -> list[Any]:
    """The weights, the sketch of the deck, and a row for each shift."""
    vessel, at = book.trial.vessel, section("vessel")
    names = _names(book)
    spots = _spots(book)
    rows = [_weight(book, w) for w in book.trial.weights] or [(n, *[""] * 6) for n in names]
    length = book.show.unit("length")
    columns = (
        Column("weight", 0.22), Column("certificate", 0.26),
        Column(f"mass [{book.show.unit('mass')}]", 0.11, "right"),
        Column(f"x at start [{length}]", 0.10, "right"),
        Column(f"z at start [{length}]", 0.10, "right"),
        Column("solid, liquid", 0.10), Column("checked by", 0.11),
    )  # fmt: skip
    along, wide = (
        v if book.partial.knows(at, k) else math.nan
        for k, v in (("lpp", vessel.lpp), ("beam", vessel.beam))
    )
    size = (book.broad, _SKETCH)
    return [
        form(columns, rows, book.broad, spare=max(1, _WEIGHTS - len(rows))),
        *part("Sketch of the deck, with the places of the weights by number", 190.0),
        DeckPlan(size, along, wide, [Spot(str(n), p.x, p.y) for p, n in spots.items()]),
        text(
            "Lengths and breadths are to different scales, and the outline is not the ship's own."
            f" {book.axes()}"
        ),
        *part("Where each weight stands, by shift", 120.0),
        *_positions(book, names, {(p.x, p.y): n for p, n in spots.items()}),
    ]


def _names(book: Book) -> tuple[str, ...]:
    """The weights in the order of the list; those of the usual sequence where none is listed."""
    if book.trial.weights:
        return tuple(w.id for w in book.trial.weights)
    return tuple(book.rows[0].places) or ("",) * _UNNAMED


def _weight(book: Book, weight: Weight) -> tuple[str, ...]:
    where = weight.where
    return (
        weight.id,
        weight.certificate,
        book.number(where, "mass", weight.mass, "mass", 4),
        book.along(where, "x", weight.x),
        book.number(where, "z", weight.z, "length"),
        book.word(where, "kind", weight.kind) if math.isfinite(weight.mass + weight.z) else "",
        "",
    )


def _spots(book: Book) -> dict[Place, int]:
    """Places with known x and y, numbered as they are taken; one number for one spot on deck."""
    found: dict[Place, int] = {}
    seen: set[tuple[float, float]] = set()
    for row in book.rows:
        for place in row.places.values():
            if math.isfinite(place.x + place.y) and (place.x, place.y) not in seen:
                seen.add((place.x, place.y))
                found[place] = len(seen)
    return found


def _positions(
    book: Book, names: Sequence[str], spots: Mapping[tuple[float, float], int]
) -> list[Any]:
    unit = book.show.unit("moment")
    stepped = any(r.steps is not None for r in book.rows)
    title = "moment, in moves of one weight" if stepped else f"moment to starboard [{unit}]"
    ends = (Column(title, 0.11, "right"), Column("expected heel [deg]", 0.09, "right"),
            Column("done, by", 0.10))  # fmt: skip
    flow = _remarks(book, stepped=stepped)
    for i in range(0, len(names), _SIDE_BY_SIDE):
        chunk = names[i : i + _SIDE_BY_SIDE]
        columns = (
            Column("shift", 0.06), Column("time", 0.08),
            *(Column(name, 0.56 / len(chunk)) for name in chunk), *ends,
        )  # fmt: skip
        rows = [
            (
                str(row.number), row.time, *(_standing(book, row, n, spots) for n in chunk),
                book.moment(row), _heel(book, row), "",
            )
            for row in book.rows
        ]  # fmt: skip
        flow.append(form(columns, rows, book.broad, spare=1))
    return flow


def _remarks(book: Book, *, stepped: bool) -> list[Any]:
    said = (
        "An arrow marks what moves at a shift; the number in brackets is that of the place on the"
        " sketch. Moments are about the first shift."
    )
    if stepped:
        said = (
            "The usual sequence with four weights alike; any other will do that gives two moments"
            " and more on each side and comes back to the start. An arrow marks what moves."
        )
    known = book.prediction
    if known is None:
        wanted = (("expected GM", ""), ("displacement", ""), ("heel at the largest moment", ""))
        return [text(said), boxes(wanted, book.broad, abreast=3)]
    show = book.show
    said += (
        f" Expected heel: with GM {show.full(known.gm, 'length')} ({known.gm_from}) and"
        f" displacement {show.full(known.displacement, 'mass', 1)} ({known.displacement_from})."
    )
    heels = [math.atan(abs(known.tangent(r.moment))) for r in book.rows if r.moment is not None]
    if max(heels, default=0.0) > math.radians(_STOP_HEEL):
        said += (
            f" These moments heel her to {show.degrees(max(heels), 1)} degrees, beyond the"
            f" {_STOP_HEEL:.0f} degrees at which the test is stopped: plan smaller ones."
        )
    return [text(said)]


def _heel(book: Book, row: ShiftRow) -> str:
    if book.prediction is None or row.moment is None:
        return ""
    return book.show.degrees(math.atan(book.prediction.tangent(row.moment)))


def _standing(
    book: Book, row: ShiftRow, name: str, spots: Mapping[tuple[float, float], int]
) -> str:
    """Where a weight stands at a shift; along and up only where that has changed."""
    place = row.places.get(name)
    if place is None:
        return ""
    arrow = "→ " if name in row.moved else ""
    if place.side:
        return arrow + place.side
    if math.isnan(place.y):
        return arrow.strip()
    spot = spots.get((place.x, place.y))
    where = section("shifts")  # whether y is known was settled when the rows were made
    lines = [
        f"{arrow}{book.across(where, 'y', place.y)}" + (f" ({spot})" if spot else ""),
    ]
    first = book.rows[0].places.get(name)
    if first is not None and place.x != first.x and math.isfinite(place.x):
        lines.append(f"x {book.along(where, 'x', place.x)}")
    if first is not None and place.z != first.z and math.isfinite(place.z):
        lines.append(f"z {book.number(where, 'z', place.z, 'length')}")
    return "\n".join(lines)
