"""``drafts.csv`` and ``density.csv``: how the ship floated, and in what water."""

from __future__ import annotations

import itertools
from dataclasses import replace
from typing import TYPE_CHECKING

from incline.errors import Where
from incline.reading.cells import Column
from incline.reading.collect import BAD, NOTHING, Sign, quoted
from incline.reading.plausible import WATER, check, temperature_remark
from incline.reading.splits import is_split, split_hint
from incline.reading.uncertainty import combined, of_row, written
from incline.record import DraftReading, Sample
from incline.units import DENSITY, FRACTION, LENGTH, TEMPERATURE

if TYPE_CHECKING:
    from collections.abc import Sequence
    from typing import Literal

    from incline.reading.cells import Row, Sheet
    from incline.reading.settings import Frame
    from incline.record import Stated

    Side = Literal["P", "S", "C"]

__all__ = [
    "DRAFT_COLUMNS", "SAMPLE_COLUMNS", "SIDE_WORDS", "check_drafts", "check_layers", "read_drafts",
    "read_samples",
]  # fmt: skip

DRAFT_COLUMNS = (
    Column("x", LENGTH, required=True),
    Column("side", required=True),
    Column("draft", LENGTH, sign=Sign.POSITIVE, stated=True),
    Column("freeboard", LENGTH, stated=True),
    Column("point height", LENGTH, stated=True),
    Column("y", LENGTH, transverse=True),
)
SAMPLE_COLUMNS = (
    Column("place", required=True),
    Column("depth", LENGTH, sign=Sign.NOT_NEGATIVE),
    Column("density", DENSITY, sign=Sign.POSITIVE, stated=True),
    Column("relative density", FRACTION, sign=Sign.POSITIVE, stated=True),
    Column("temperature", TEMPERATURE),
    Column("share", FRACTION, sign=Sign.POSITIVE, bare=True),
)
_ASSUMED = "{} of {} draft readings have no distance off the centreplane: half the beam was taken."
_HALF_STATED = (
    "{} of {} draft readings state an uncertainty of only one of the freeboard and the height of"
    " its point: the other counts as exact."
)
_NONE_AFT = (
    "x counts from amidships and no draft mark stands abaft it: check x_origin in trial.toml."
)
SIDE_WORDS: dict[str, Literal["P", "S"]] = {"port": "P", "starboard": "S", "stbd": "S"}
"""Words for the sides of a ship, in lower case."""
_SIDES: dict[str, Side] = {**SIDE_WORDS, "centre": "C", "center": "C", "cl": "C"}
_APART = 0.01
"""Marks closer than this share of the length stand at one place."""


def read_drafts(sheet: Sheet, frame: Frame) -> tuple[tuple[DraftReading, ...], list[str]]:
    """Drafts above the baseline, and a remark when marks were taken to be half the beam off."""
    if not sheet.has("draft") and not sheet.has("freeboard"):
        sheet.lack("draft", "a column draft or freeboard")
    readings: list[DraftReading] = []
    assumed = 0
    seen: dict[tuple[str, ...], int] = {}
    sides: tuple[Side, ...] = ("P", "S", "C")
    for row in sheet.rows:
        _check_once(row, seen)
        side = row.choice("side", sides, also=_SIDES)
        x = row.need("x") + frame.x_shift
        frame.hull.x(row, "x", x)
        frame.hull.y(row, "y", row.maybe("y"))
        y = _off_centre(row, side)
        if y is None:
            assumed += 1
            y = frame.beam / 2.0 if side == "S" else -frame.beam / 2.0
        draft, freeboard = _draft(row, frame)
        readings.append(
            DraftReading(
                x=x,
                side=side or "C",
                y=y,
                draft=draft,
                freeboard=freeboard,
                where=row.where(),
                stated=_draft_stated(row, draft),
            )
        )
    remarks = [_ASSUMED.format(assumed, len(readings))] if assumed else []
    half = sum(_is_half_stated(row) for row in sheet.rows)
    if half:
        remarks.append(_HALF_STATED.format(half, len(readings)))
    if frame.x_shift > 0.0 and all(d.x >= frame.x_shift for d in readings):
        remarks.append(_NONE_AFT)
    return tuple(readings), remarks


def _check_once(row: Row, seen: dict[tuple[str, ...], int]) -> None:
    """The same row again is a copy; a mark read again shows another draft, or has a note on it."""
    cells = tuple(" ".join(c.casefold().split()) for c in row.cells)
    before = seen.setdefault(cells, row.number)
    if before != row.number and any(cells) and row.whole:
        found, expected = f"all of row {before} again", "each reading once"
        hint = "for a second reading that agrees with the first, say so in a column note"
        row.fault("", "draft-twice", found, expected, hint)


def _is_half_stated(row: Row) -> bool:
    """Whether a freeboard has an uncertainty and the height of its point none, or the reverse."""
    parts = bool(written(row, "freeboard")), bool(written(row, "point height"))
    return parts[0] != parts[1]


def _draft_stated(row: Row, draft: float) -> dict[str, Stated]:
    """The uncertainty of a draft: its own, or that of its freeboard and the height of its point."""
    said = combined(of_row(row, "draft", "freeboard", "point height").values())
    if said is None:
        return {}
    parts = written(row, "freeboard", "point height")
    if parts and 0.0 < draft <= said.u:
        found, expected = quoted(row.raw(parts[0])), "an uncertainty smaller than the draft itself"
        row.fault(parts[0], "uncertainty-too-large", found, expected)
    return {"draft": said}


def _off_centre(row: Row, side: Side | None) -> float | None:
    """Y of a mark [m], to starboard; None when it must be assumed."""
    y = row.maybe("y")
    if side == "C" or side is None:
        if y:
            expected = "no distance off the centreplane with side C"
            if side == "C" and abs(y) > 0.0:
                row.fault("y", "value-wrong", quoted(row.raw("y")), expected)
        return 0.0
    if y is None:
        return None
    text = row.raw("y").lower()
    says_port = y < 0.0
    says_starboard = y > 0.0 and (text.endswith("s") or text.startswith("+"))
    if (side == "S" and says_port) or (side == "P" and says_starboard):
        row.fault("y", "side-and-sign", quoted(row.raw("y")), f"a distance to side {side}")
    return -abs(y) if side == "P" else abs(y)


def _draft(row: Row, frame: Frame) -> tuple[float, float | None]:
    """Draft above the baseline and the freeboard it came from [m]."""
    if row.raw("draft") and row.raw("freeboard"):
        expected = "a draft or a freeboard, not both"
        pair = row.raw("draft"), row.raw("freeboard")
        split = is_split(*pair) and not row.sheet.decimal_comma
        hint = split_hint([".".join(pair)]) if split else ""
        row.fault("freeboard", "value-wrong", quoted(pair[1]), expected, hint)
        return BAD, None
    freeboard = row.maybe("freeboard")
    if freeboard is None:
        draft = row.maybe("draft")
        if draft is None:
            column = "draft" if row.sheet.has("draft") else "freeboard"
            row.missing(column, "a draft or a freeboard")
            return BAD, None
        frame.hull.draft(row, "draft", draft)
        found = draft - frame.marks_down
        if found <= 0.0:
            expected = "a draft greater than the thickness of the keel"
            row.fault("draft", "number-not-positive", quoted(row.raw("draft")), expected)
        return found, None
    height = row.maybe("point height")
    if height is None:
        row.missing(
            "point height", "height above baseline of the point the freeboard is taken from"
        )
        return BAD, freeboard
    if height - freeboard <= 0.0:
        expected = "a freeboard less than the height of its point"
        row.fault("freeboard", "number-not-positive", quoted(row.raw("freeboard")), expected)
    frame.hull.z(row, "point height", height)
    frame.hull.draft(row, "freeboard", max(0.0, height - freeboard))
    return height - freeboard, freeboard


def check_drafts(sheet: Sheet, drafts: Sequence[DraftReading], frame: Frame) -> None:
    """Trim needs drafts at two places along the length."""
    x = sorted(d.x for d in drafts)
    together = [b - a <= _APART * frame.lpp for a, b in itertools.pairwise(x)]
    if x and all(together):
        found, expected = "drafts at 1 place along the length", "drafts at two places at least"
        sheet.collector.add(Where(sheet.file), "drafts-too-few", found, expected)


def read_samples(sheet: Sheet, frame: Frame) -> tuple[tuple[Sample, ...], list[str]]:
    """Water samples, and remarks on their temperatures.

    A relative density is multiplied by the density it is relative to.
    """
    column = sheet.one_of(("density", "relative density"), required=True)
    relative_to = 1.0
    if column == "relative density":
        relative_to = BAD if frame.relative_to is None else frame.relative_to
        if frame.relative_to is None:
            sheet.collector.add(
                Where("trial.toml", 0, "density.relative_to"),
                "key-missing",
                NOTHING,
                "the density of the water that the hydrometer calls 1, since density.csv gives"
                " relative densities",
            )
    samples: list[Sample] = []
    remarks: list[str] = []
    for row in sheet.rows:
        share = row.maybe("share")
        density = row.need(column) * relative_to if column else BAD
        check(row, column or "density", density, WATER)
        place, temperature = row.text("place", required=True), row.maybe("temperature")
        remarks += temperature_remark(place, temperature)
        samples.append(
            Sample(
                place=place,
                depth=row.maybe("depth"),
                density=density,
                temperature=temperature,
                share=1.0 if share is None else share,
                where=row.where(),
                stated=_density_stated(row, relative_to),
            )
        )
    return tuple(samples), remarks


def _density_stated(row: Row, relative_to: float) -> dict[str, Stated]:
    """The uncertainty of a sample's density [t/m3], from that of its relative density too."""
    said = combined(of_row(row, "density", "relative density").values())
    return {"density": replace(said, u=said.u * relative_to)} if said else {}


def check_layers(sheet: Sheet, samples: Sequence[Sample]) -> None:
    """Water in layers needs the depth of every sample, and two depths at least."""
    why = "since [density] in trial.toml takes the water as layers"
    if not sheet.has("depth"):
        sheet.lack("depth", f"a column depth with its unit, such as depth [m], {why}")
        return
    for row, sample in zip(sheet.rows, samples, strict=True):
        if sample.depth is None:
            row.missing("depth", f"the depth of the sample, {why}")
    depths = [s.depth for s in samples if s.depth is not None]
    if len(depths) == len(samples) > 0 and all(d == depths[0] for d in depths):
        found, expected = "samples at one depth", f"samples at two depths at least, {why}"
        sheet.collector.add(Where(sheet.file, 0, "depth"), "depths-too-few", found, expected)
