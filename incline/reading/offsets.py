"""``offsets.csv``: the hull as stations of points, body by body."""

from __future__ import annotations

from collections import Counter
from dataclasses import dataclass, replace
from typing import TYPE_CHECKING

from incline.errors import Where
from incline.reading.bodies import ONE_HULL
from incline.reading.collect import nearest, quoted
from incline.reading.extent import extent_remarks
from incline.reading.fairness import fairness_remarks
from incline.reading.hull_size import check_size
from incline.reading.lengthwise import check_lines, check_order, joined
from incline.reading.stations import OFFSET_COLUMNS, Drawn, read_station
from incline.reading.tomlfile import FILE
from incline.record import Body, Offsets

if TYPE_CHECKING:
    from incline.reading.bodies import HullPlan
    from incline.reading.cells import Row, Sheet
    from incline.reading.plausible import Hull

__all__ = ["OFFSET_COLUMNS", "read_bodies"]


def read_bodies(sheet: Sheet, plan: HullPlan, hull: Hull) -> tuple[Offsets, list[str]]:
    """The hull's shape, and remarks on it; of no use once a defect has been collected."""
    if plan.named and not sheet.has("body"):
        sheet.lack("body", "a column body, which says to which of the [[bodies]] a row belongs")
    stations = _stations(sheet, plan, hull)
    bodies: list[Body] = []
    for n, body in enumerate(plan.bodies, start=1):
        mine = stations.get(body.name.casefold(), [])
        if mine:
            check_order(body, mine)
            check_lines(body, mine)
        elif plan.known and plan.named and sheet.rows and "body" not in sheet.absent:
            where, expected = Where(FILE, 0, f"bodies[{n}]"), f"stations of it in {sheet.file}"
            found = f"no station of {quoted(body.name)}"
            sheet.collector.add(where, "body-without-stations", found, expected)
        bodies.append(replace(body, stations=joined(mine)))
    drawn = [(body, stations.get(body.name.casefold(), [])) for body in plan.bodies]
    check_size(sheet, drawn, hull)
    offsets = Offsets(bodies=tuple(bodies), allowance=plan.allowance, stated=plan.stated)
    remarks = [_alone(body) for body in bodies if abs(body.y) > 0.0 and not body.mirrored]
    if not sheet.collector.defects:
        remarks += extent_remarks(sheet, drawn, hull)
        remarks += [r for body, mine in drawn if mine for r in fairness_remarks(body, mine, hull)]
    return offsets, remarks


def _alone(body: Body) -> str:
    side = "starboard" if body.y > 0.0 else "port"
    return (
        f"The body {body.name} lies to {side} of the centreplane and has no mirror image: check"
        " mirrored in trial.toml."
    )


def _stations(sheet: Sheet, plan: HullPlan, hull: Hull) -> dict[str, list[Drawn]]:
    """Stations of each body; those of a body unknown are only looked at by themselves."""
    clear = plan.known and "body" not in sheet.absent
    blocks = _blocks(sheet, plan)
    times = Counter(block.key for block in blocks)
    found: dict[str, list[Drawn]] = {}
    before: dict[tuple[str, str], int] = {}
    for block in blocks:
        apart = clear and times[block.key] > 1
        drawn = read_station(block.name, block.rows, hull.x_shift, outline=not apart)
        first = before.setdefault(block.key, drawn.rows[0].number)
        if first != drawn.rows[0].number and clear:
            said = f"{drawn.title} again, after row {first}"
            expected = "each station once, its rows together from the keel to the deck edge"
            drawn.rows[0].fault("station", "station-twice", said, expected)
            continue
        found.setdefault(block.key[0], []).append(drawn)
    return found if clear else {}


@dataclass(frozen=True, slots=True)
class _Block:
    """Rows of one station that follow each other; ``key`` is body and station, folded."""

    key: tuple[str, str]
    name: str
    rows: list[Row]


def _blocks(sheet: Sheet, plan: HullPlan) -> list[_Block]:
    """The rows by body and station; one that lacks either belongs to those of the row before."""
    known = {body.name.casefold() for body in plan.bodies}
    blocks: list[_Block] = []
    for row in sheet.rows:
        last = blocks[-1].key if blocks else ("", "")
        name, body = row.text("station", required=True), row.text("body")
        if body and plan.known and body.casefold() not in known:
            expected = "the name of one of the [[bodies]] in trial.toml"
            if not plan.named:
                expected = f"no name but {ONE_HULL}, since trial.toml has no [[bodies]]"
            hint = nearest(body, known)
            row.fault("body", "body-unknown", quoted(body), expected, hint)
        elif not body and plan.named:
            row.missing("body", "the name of one of the [[bodies]] in trial.toml")
        of = body.casefold() or (last[0] if plan.named else ONE_HULL)
        key = (of, name.casefold() or last[1])
        if blocks and key == last:
            blocks[-1].rows.append(row)
        else:
            blocks.append(_Block(key, name, [row]))
    return blocks
