"""Surroundings by shift, water samples, and drafts or freeboards at the marks."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from incline.sheets.book import section
from incline.sheets.forms import Column, boxes, form, text

if TYPE_CHECKING:
    from incline.record import DraftReading, Sample
    from incline.sheets.book import Book

__all__ = ["density", "drafts", "surroundings"]

_SAMPLES, _MARKS = 18, 12
"""Least rows for water samples and draft marks."""
_PLACES = ("forward", "amidships", "aft")


def surroundings(book: Book) -> list[Any]:
    """Wind, current, tide, weather and lines, by shift."""
    around, on = book.trial.environment, section("test")
    shifts = [(str(r.number), r.time, *[""] * 7) for r in book.rows]
    depth = book.trial.occasion.water_depth
    known = (
        ("shelter of the berth", around.shelter),
        ("lines: which, how slack, who tends them", around.lines),
        ("gangway, hoses, cables", around.gangway),
        ("depth of water", book.full(on, "water_depth", depth, "length")),
        ("weather expected", book.trial.occasion.weather),
        ("wind", _wind(book)),
        ("current", around.current),
        ("tide: high and low water", ""),
    )
    return [
        boxes(known, book.broad, abreast=4, high=32.0),
        form(
            (
                Column("shift", 0.07), Column("time", 0.08), Column("wind: from, speed", 0.15),
                Column("current: to, speed", 0.13), Column("tide, depth", 0.10),
                Column("weather, sea", 0.15), Column("lines slack", 0.09),
                Column("gangway off", 0.09), Column("what passed or changed", 0.19),
            ),
            [("before", *[""] * 8), *shifts, ("after", *[""] * 8)],
            book.broad,
        ),
    ]  # fmt: skip


def _wind(book: Book) -> str:
    """Wind in words, with its speed in the everyday unit of the trial."""
    from incline.units import SPEED, factor

    around = book.trial.environment
    speed = around.wind_speed
    if speed is None or not book.partial.knows(section("environment"), "wind_speed"):
        return around.wind
    unit = "m/s" if book.show.system.name == "metric" else "kn"
    told = f"{book.show.plain(speed / factor(unit, SPEED), 1)} {unit}"
    return f"{around.wind}, {told}" if around.wind else told


def density(book: Book) -> list[Any]:
    """Water samples by place and depth."""
    show, rows = book.show, [_sample(book, s) for s in book.trial.samples]
    span = book.trial.hydrometer
    warm = "°C" if show.system.name == "metric" else "°F"
    return [
        boxes(
            (
                ("hydrometer: number, certificate", ""),
                ("relative densities it covers",
                 "" if span is None else f"{span[0]:.3f} to {span[1]:.3f}"),
                ("a relative density of 1 means", ""),
                ("thermometer", ""),
            ),
            book.width,
        ),
        text(
            "Take samples at several depths, from the bottom of the hull to the surface; on a large"
            " ship at three places at least. Rinse the sampler, read at the level surface."
        ),
        form(
            (
                Column("place", 0.25), Column(f"depth [{show.unit('length')}]", 0.11, "right"),
                Column(f"density [{show.unit('density')}]", 0.15, "right"),
                Column("or relative density", 0.13), Column(f"temperature [{warm}]", 0.13, "right"),
                Column("time", 0.10), Column("share in the mean", 0.13, "right"),
            ),
            rows,
            book.width,
            spare=max(4, _SAMPLES - len(rows)),
        ),
    ]  # fmt: skip


def _sample(book: Book, sample: Sample) -> tuple[str, ...]:
    where, show = sample.where, book.show
    known = book.partial.knows(where, "density") and book.partial.knows(where, "relative density")
    warm = "" if sample.temperature is None else show.temperature(sample.temperature)
    return (
        sample.place,
        book.number(where, "depth", sample.depth, "length", 2),
        book.number(where, "density", sample.density, "density", 4) if known else "",
        "",
        warm.split(" ")[0] if book.partial.knows(where, "temperature") else "",
        "",
        f"{sample.share:g}" if sample.share != 1.0 and book.partial.knows(where, "share") else "",
    )


def drafts(book: Book) -> list[Any]:
    """Drafts by mark and side, or freeboards with the height of the point they are taken from."""
    length = book.show.unit("length")
    rows = [_mark(book, d) for d in book.trial.drafts]
    if not rows:
        rows = [(place, "", side, *[""] * 6) for place in _PLACES for side in ("P", "S")]
        rows += [("freeboard", "", side, *[""] * 6) for _ in range(2) for side in ("P", "S")]
    return [
        boxes(
            (
                ("marks start from", _marks_from(book)),
                ("sea at the marks, swell", ""),
                ("read from: boat, quay, tube", ""),
                ("first and last reading at", ""),
            ),
            book.broad,
            abreast=4,
            high=28.0,
        ),
        text(
            "At every mark forward, amidships and aft on both sides, or freeboards at five places"
            " and more on each side, with the height above the baseline of the point from which"
            f" each is taken. {book.axes()}"
        ),
        form(
            (
                Column("mark", 0.13), Column(f"x [{length}]", 0.09, "right"), Column("side", 0.06),
                Column(f"off centreline y [{length}]", 0.12, "right"),
                Column(f"draft [{length}]", 0.13, "right"),
                Column(f"freeboard [{length}]", 0.13, "right"),
                Column(f"height of its point [{length}]", 0.12, "right"),
                Column("read again", 0.12), Column("time", 0.10),
            ),
            rows,
            book.broad,
            spare=max(2, _MARKS - len(rows)),
        ),
    ]  # fmt: skip


def _marks_from(book: Book) -> str:
    if not book.partial.knows(section("drafts"), "marks_from"):
        return ""
    thick = book.trial.settings.keel_thickness
    if not thick:
        return "baseline"
    return f"underside of keel, {book.full(section('drafts'), 'keel_thickness', thick, 'length')}"


def _mark(book: Book, mark: DraftReading) -> tuple[str, ...]:
    where = mark.where
    draft = point = None
    if mark.freeboard is None:
        draft = mark.draft + book.trial.settings.keel_thickness
    else:
        point = mark.draft + mark.freeboard
    side = book.word(where, "side", mark.side)
    return (
        "",
        book.along(where, "x", mark.x),
        side,
        book.number(where, "y", abs(mark.y), "length") if side in ("P", "S") else "",
        book.number(where, "draft", draft, "length"),
        book.number(where, "freeboard", mark.freeboard, "length"),
        book.number(where, "point height", point, "length"),
        "",
        "",
    )
