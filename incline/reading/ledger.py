"""``ledger.csv`` and ``changes.csv``: what is not lightship, and what came or went meanwhile."""

from __future__ import annotations

import re
from typing import TYPE_CHECKING, Literal

from incline.errors import Where
from incline.reading.cells import Column
from incline.reading.collect import Sign, quoted
from incline.reading.uncertainty import of_row
from incline.record import Change, Item, Point
from incline.units import LENGTH, MASS

if TYPE_CHECKING:
    from collections.abc import Iterable, Mapping

    from incline.reading.cells import Row, Sheet
    from incline.reading.settings import Frame
    from incline.record import Weight

__all__ = [
    "CHANGE_COLUMNS",
    "ITEM_COLUMNS",
    "check_names",
    "check_no_test_weights",
    "read_changes",
    "read_items",
]

_CENTRE = (
    Column("mass", MASS, required=True, sign=Sign.POSITIVE, stated=True),
    Column("x", LENGTH, required=True, stated=True),
    Column("y", LENGTH, required=True, transverse=True, stated=True),
    Column("z", LENGTH, required=True, stated=True),
)
ITEM_COLUMNS = (
    Column("action", required=True),
    Column("item", required=True),
    *_CENTRE,
    Column("to x", LENGTH, stated=True),
    Column("to y", LENGTH, transverse=True, stated=True),
    Column("to z", LENGTH, stated=True),
    Column("basis"),
)
CHANGE_COLUMNS = (Column("change", required=True), Column("item", required=True), *_CENTRE)
_TO = ("to x", "to y", "to z")
_TEST_WEIGHTS = re.compile(r"\btest[\s-]*weights?\b", re.IGNORECASE)


def read_items(sheet: Sheet, frame: Frame) -> tuple[Item, ...]:
    """The ledger's own lines; an item stands in it once, whatever is done with it."""
    actions: tuple[Literal["deduct", "add", "relocate"], ...] = ("deduct", "add", "relocate")
    items: list[Item] = []
    seen: dict[str, int] = {}
    for row in sheet.rows:
        action = row.choice("action", actions)
        name = row.text("item", required=True)
        _check_once(row, name, name.casefold(), seen)
        items.append(
            Item(
                action=action or "deduct",
                name=name,
                mass=row.need("mass"),
                centre=_centre(row, ("x", "y", "z"), frame),
                to=_destination(row, action, frame),
                basis=row.text("basis"),
                where=row.where(),
                stated=of_row(row, "mass", "x", "y", "z", *_TO),
            )
        )
    return tuple(items)


def _check_once(row: Row, name: str, key: str, seen: dict[str, int]) -> None:
    before = seen.setdefault(key, row.number)
    if before != row.number and name:
        expected = f"each item once; row {before} has it already"
        row.fault("item", "item-listed-twice", quoted(name), expected)


def _centre(row: Row, columns: tuple[str, str, str], frame: Frame) -> Point:
    x, y, z = (row.need(c) for c in columns)
    centre = Point(x + frame.x_shift, y, z)
    frame.hull.place(row, centre, columns)
    return centre


def _destination(row: Row, action: str | None, frame: Frame) -> Point | None:
    """Where a relocated item goes; for the others the cells must be blank."""
    if action == "relocate":
        return _centre(row, _TO, frame)
    for column in _TO if action else ():
        if row.raw(column):
            expected = f"nothing here for an item to {action}"
            row.fault(column, "value-wrong", quoted(row.raw(column)), expected)
    return None


def read_changes(sheet: Sheet, frame: Frame) -> tuple[Change, ...]:
    """What came aboard or went ashore between the drafts and the shifts."""
    kinds: tuple[Literal["aboard", "ashore"], ...] = ("aboard", "ashore")
    changes: list[Change] = []
    seen: dict[str, int] = {}
    for row in sheet.rows:
        change = row.choice("change", kinds)
        name = row.text("item", required=True)
        _check_once(row, name, f"{change} {name}".casefold(), seen)
        changes.append(
            Change(
                change=change or "aboard",
                name=name,
                mass=row.need("mass"),
                centre=_centre(row, ("x", "y", "z"), frame),
                where=row.where(),
                stated=of_row(row, "mass", "x", "y", "z"),
            )
        )
    return tuple(changes)


def check_no_test_weights(sheet: Sheet, items: Iterable[Item], weights: Iterable[Weight]) -> None:
    """An item to deduct that is the test weights by its name: they would come off twice."""
    ids = [w.id for w in weights if w.id]
    every = [re.compile(rf"(?<!\w){re.escape(name)}(?!\w)", re.IGNORECASE) for name in ids]
    taken = {name.casefold() for name in ids}
    for item in items:
        named = _TEST_WEIGHTS.search(item.name) is not None
        listed = len(every) > 1 and all(e.search(item.name) for e in every)
        if item.action == "deduct" and item.name.casefold() not in taken and (named or listed):
            sheet.collector.add(
                Where(sheet.file, item.where.row, "item"),
                "item-listed-twice",
                quoted(item.name),
                "no test weights among the items",
                "the test weights of weights.csv come off by themselves; another thing needs"
                " another name",
            )


def check_names(sheet: Sheet, items: Iterable[Item], others: Mapping[str, str]) -> None:
    """What comes into the ledger by itself must not be listed again; ``others``: name -> what."""
    taken = {name.casefold(): place for name, place in others.items() if name}
    for item in items:
        place = taken.get(item.name.casefold())
        if place:
            sheet.collector.add(
                Where(sheet.file, item.where.row, "item"),
                "item-listed-twice",
                quoted(item.name),
                f"an item that is not {place}",
                "that comes into the ledger by itself; another thing needs another name",
            )
