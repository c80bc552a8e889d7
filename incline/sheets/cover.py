"""The cover: what is tested, who is present, and which sheets are enclosed; the people aboard."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING, Any

from incline.sheets.book import section
from incline.sheets.forms import Column, boxes, form, part, text

if TYPE_CHECKING:
    from incline.record import Person
    from incline.sheets.book import Book
    from incline.sheets.paper import Spread

__all__ = ["cover", "people_aboard"]

_PRESENT, _ABOARD = 8, 12
"""Least rows on the lists of people."""


def cover(book: Book, spread: Spread) -> list[Any]:
    """Vessel, occasion, people with signatures, and the list of the sheets."""
    people = [(p.name, p.role, "", "") for p in named(book)]
    listed = [
        (str(n), title, str(spread.count(n - 1)) if spread.starts else "", "", "")
        for n, title in enumerate(spread.titles, start=1)
    ]
    return [
        boxes(_facts(book), book.width),
        *_aside(book),
        *part("People present"),
        form(
            (
                Column("name", 0.32), Column("role, and for whom", 0.30),
                Column("initials", 0.12), Column("signature", 0.26),
            ),
            people,
            book.width,
            spare=max(3, _PRESENT - len(people)),
        ),
        *part("Sheets enclosed"),
        form(
            (
                Column("sheet", 0.09, "right"), Column("title", 0.52),
                Column("pages", 0.10, "right"), Column("filled in", 0.13), Column("returned", 0.16),
            ),
            listed,
            book.width,
            spare=2,
            high=22.7,
        ),
    ]  # fmt: skip


def _facts(book: Book) -> list[tuple[str, str]]:
    vessel, occasion = book.trial.vessel, book.trial.occasion
    at, on = section("vessel"), section("test")
    date = book.partial.date
    return [
        ("vessel", vessel.name),
        ("identity number", vessel.number),
        ("kind", vessel.kind),
        ("flag", vessel.flag),
        ("builder", vessel.builder),
        ("length between perpendiculars", book.full(at, "lpp", vessel.lpp, "length")),
        ("beam", book.full(at, "beam", vessel.beam, "length")),
        ("depth", book.full(at, "depth", vessel.depth, "length")),
        ("date of the test", "" if date is None else date.isoformat()),
        ("place", occasion.place),
        ("berth and mooring", occasion.berth),
        ("depth of water", book.full(on, "water_depth", occasion.water_depth, "length")),
        ("rules that judge the test", book.trial.settings.rule_set),
        ("surveyor, or witness for the administration", ""),
    ]


def _aside(book: Book) -> list[Any]:
    """The trial's notes, what could not be read, and how to fill in the sheets."""
    said = [
        "Write with pencil, as read and at once. Strike a wrong figure through so that it can still"
        " be read, and write the right one beside it. Keep every reading, also one that looks"
        f" wrong, and say what was seen. {book.axes()} Moments, heel and readings are positive to"
        " starboard."
    ]
    if book.trial.occasion.notes:
        said.insert(0, f"Notes: {book.trial.occasion.notes}")
    wrong = len(book.partial.wrong)
    if wrong:
        entries = "1 entry" if wrong == 1 else f"{wrong} entries"
        said.append(
            f"{entries} of the trial's files could not be used, and the places are left blank"
            " here: incline check lists them."
        )
    return [text(words) for words in said]


def named(book: Book) -> list[Person]:
    """The people whom the trial names."""
    return [p for p in book.trial.people if p.name]


def people_aboard(book: Book) -> list[Any]:
    """Who is aboard during the readings, with mass and place."""
    show, rows = book.show, [_person(book, p) for p in named(book)]
    length = show.unit("length")
    return [
        text(
            "Everyone aboard while readings are taken, the crew and visitors too. Each keeps to"
            " one station, marked on deck where that helps, and stands there at every reading."
            f" {book.axes()}"
        ),
        form(
            (
                Column("name", 0.25), Column("role", 0.17),
                Column(f"mass [{show.unit('mass')}]", 0.09, "right"),
                Column(f"x [{length}]", 0.09, "right"), Column(f"y [{length}] P/S", 0.10, "right"),
                Column(f"z [{length}]", 0.08, "right"),
                Column("where during the readings", 0.22),
            ),
            rows,
            book.broad,
            spare=max(4, _ABOARD - len(rows)),
        ),
    ]  # fmt: skip


def _person(book: Book, person: Person) -> tuple[str, ...]:
    where, centre = person.where, person.centre
    x, y, z = (math.nan,) * 3 if centre is None else (centre.x, centre.y, centre.z)
    return (
        person.name,
        person.role,
        book.number(where, "mass", person.mass, "mass"),
        book.along(where, "x", x),
        book.across(where, "y", y),
        book.number(where, "z", z, "length"),
        "",
    )
