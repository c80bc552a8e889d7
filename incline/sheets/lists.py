"""Tanks with their soundings, and what is to come off, to go on, to move, or came and went."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from incline.sheets.forms import Column, form, text

if TYPE_CHECKING:
    from incline.errors import Where
    from incline.record import Change, Item, Point, Tank
    from incline.sheets.book import Book

__all__ = ["changes", "items", "relocations", "tanks"]

_TANKS, _ITEMS = 12, 12
"""Least rows of the lists."""


def tanks(book: Book) -> list[Any]:
    """Every tank, with soundings before and after the readings."""
    show, rows = book.show, [_tank(book, t) for t in book.trial.tanks]
    length = show.unit("length")
    return [
        text(
            "Every tank, the empty ones too. State: empty, pressed full or slack. Sound before the"
            " first and after the last reading, at the same pipe; say sounding or ullage. Surface"
            " clear: the liquid of a slack tank touches neither top nor bottom at the greatest"
            " heel, and no connection to another tank is open."
        ),
        form(
            (
                Column("tank", 0.16), Column("contents", 0.11), Column("state", 0.10),
                Column(f"density [{show.unit('density')}]", 0.08, "right"),
                Column(f"sounding before [{length}]", 0.09, "right"), Column("time", 0.06),
                Column(f"sounding after [{length}]", 0.09, "right"), Column("time", 0.06),
                Column(f"volume [{show.unit('volume')}]", 0.08, "right"),
                Column(f"or mass [{show.unit('mass')}]", 0.08, "right"),
                Column("surface clear", 0.09),
            ),
            rows,
            book.broad,
            spare=max(4, _TANKS - len(rows)),
        ),
    ]  # fmt: skip


def _tank(book: Book, tank: Tank) -> tuple[str, ...]:
    where = tank.where
    state = book.word(where, "state", tank.state)
    mass = tank.mass if state and state != "empty" and tank.volume is None else None
    return (
        tank.name,
        tank.contents,
        state,
        book.number(where, "density", tank.density, "density", 4),
        book.number(where, "level", tank.level, "length"),
        "",
        "",
        "",
        book.number(where, "volume", tank.volume, "volume"),
        book.number(where, "mass", mass, "mass"),
        "",
    )


def items(book: Book, action: str) -> list[Any]:
    """The list of one action, with room for what is found on the spot."""
    said = {
        "deduct": "Everything aboard that is no part of the lightship: gear of the yard, stores,"
        " crew and effects, dunnage, liquids outside the tanks listed. Test weights, tank liquids"
        " and the people listed are taken off by themselves and do not belong here.",
        "add": "Everything that belongs to the lightship and is not aboard yet.",
    }[action]
    rows = [_item(book, i) for i in _of(book, action)]
    return [
        text(f"{said} {book.axes()}"),
        form(
            (Column("item", 0.29), *_mass_and_centre(book), Column("known from", 0.19),
             Column("seen by", 0.10)),
            rows,
            book.broad,
            spare=max(5, _ITEMS - len(rows)),
        ),
    ]  # fmt: skip


def relocations(book: Book) -> list[Any]:
    """What stands in another place than in the finished ship, and where it will go."""
    length = book.show.unit("length")
    rows = [_relocation(book, i) for i in _of(book, "relocate")]
    to = tuple(Column(f"to {axis} [{length}]", 0.08, "right") for axis in ("x", "y P/S", "z"))
    return [
        text(
            f"Parts of the lightship that are aboard, but not in their final place. {book.axes()}"
        ),
        form(
            (Column("item", 0.24), *_mass_and_centre(book), *to, Column("known from", 0.14)),
            rows,
            book.broad,
            spare=max(5, _ITEMS - len(rows)),
        ),
    ]


def changes(book: Book) -> list[Any]:
    """What came aboard or went ashore between the drafts and the shifts."""
    rows = [_change(book, c) for c in book.trial.changes]
    return [
        text(
            "What came aboard or went ashore between the drafts and the first shift. Once the"
            " shifts have begun nothing comes or goes, no liquid is moved and no valve opened; what"
            f" happens all the same is written here, with the time. {book.axes()}"
        ),
        form(
            (Column("aboard or ashore", 0.13), Column("item", 0.28), *_mass_and_centre(book),
             Column("time", 0.08), Column("seen by", 0.09)),
            rows,
            book.broad,
            spare=max(4, _ITEMS - len(rows)),
        ),
    ]  # fmt: skip


def _mass_and_centre(book: Book) -> tuple[Column, ...]:
    length = book.show.unit("length")
    return (
        Column(f"mass [{book.show.unit('mass')}]", 0.10, "right"),
        *(Column(f"{axis} [{length}]", 0.09, "right") for axis in ("x", "y P/S", "z")),
    )


def _of(book: Book, action: str) -> list[Item]:
    """Items of an action; one whose action is not known stands among those to deduct."""
    return [i for i in book.trial.items if i.action == action and i.name]


def _centre(
    book: Book, where: Where, centre: Point | None, before: str = ""
) -> tuple[str, str, str]:
    if centre is None:
        return "", "", ""
    return (
        book.along(where, f"{before}x", centre.x),
        book.across(where, f"{before}y", centre.y),
        book.number(where, f"{before}z", centre.z, "length"),
    )


def _item(book: Book, item: Item) -> tuple[str, ...]:
    mass = book.number(item.where, "mass", item.mass, "mass")
    name = item.name
    if not book.partial.knows(item.where, "action"):
        name += " (to deduct, add or relocate?)"
    return (name, mass, *_centre(book, item.where, item.centre), item.basis, "")


def _relocation(book: Book, item: Item) -> tuple[str, ...]:
    mass = book.number(item.where, "mass", item.mass, "mass")
    places = _centre(book, item.where, item.centre), _centre(book, item.where, item.to, "to ")
    return (item.name, mass, *places[0], *places[1], item.basis)


def _change(book: Book, change: Change) -> tuple[str, ...]:
    where = change.where
    mass = book.number(where, "mass", change.mass, "mass")
    centre = _centre(book, where, change.centre)
    return (book.word(where, "change", change.change), change.name, mass, *centre, "", "")
