"""Steps from the readings to tangents, sums by device, slope and GM."""

from __future__ import annotations

import math
from dataclasses import dataclass, replace
from typing import TYPE_CHECKING

from incline.observations import observe
from incline.report.arithmetic import Power, Relation, Sum, Tangent, Term, Value, natural
from incline.report.steps import Board, Cell, Chapter, Head, Lay
from incline.report.steps_units import Units

if TYPE_CHECKING:
    from incline.record import Device, Reading
    from incline.report.document import Sheet
    from incline.result import HeelPoint

__all__ = ["sums_chapter", "tangents_chapter"]

_WRITTEN = 40
"""Most repeats of one reading that are written out."""


def _moment(u: Units, sheet: Sheet, point: HeelPoint) -> Value:
    """The moment of a reading, printed as in the table of moments."""
    rising = any(s.vertical for s in sheet.reduction.outcome.heel.shifts)
    return u.bare("moment", point.moment, "M_f" if rising else "M", "M")


def tangents_chapter(sheet: Sheet) -> Chapter:
    """Every reading's tangent, device by device."""
    boards = [_tangent_board(sheet, d) for d in _devices(sheet)]
    return Chapter(
        "Tangents of heel",
        (
            "Rest values as in “Devices and readings”; a pendulum or U-tube gives its tangent by "
            "its length or span l, an inclinometer by the angle from the mean of its angles.",
            *boards,
        ),
    )


def _devices(sheet: Sheet) -> list[Device]:
    """Devices with readings that count, in the order of the fit."""
    known = {d.id: d for d in sheet.reduction.trial.devices}
    return [known[d.id] for d in sheet.reduction.outcome.heel.devices]


def _tangent_board(sheet: Sheet, device: Device) -> Board:
    """Rest values as sums of what was written down, and their tangents."""
    u, trial = Units(sheet.show), sheet.reduction.trial
    points = [p for p in sheet.reduction.outcome.heel.points if p.device == device.id]
    readings = {r.shift: r for r in trial.readings if r.device == device.id}
    quantity = readings[points[0].shift].quantity
    rest = [_rest(sheet, readings[p.shift], p, list(readings.values())) for p in points]
    title, mean = device.id, None
    relations: list[Relation] = []
    if quantity == "length" and device.length is not None:
        size = u.recorded("length", device.length, f"l {device.id}", "l")
        title += f": t = r / ({u.readings_in_length} l), l = {size.text({size.place: size.least})}"
    elif quantity == "angle":
        middle = math.degrees(math.fsum(p.reading.value for p in points)) / len(points)
        mean = Value(middle, f"r mean {device.id}", "r<sub>m</sub>", "°", 4)
        relations.append(Relation(mean, Sum(tuple(rest), "Σ r") / len(rest)))
        title += ": t = tan(r − r<sub>m</sub>)"
    else:
        title += ": t as read"
    rows: list[tuple[Cell, ...]] = []
    for p, r in zip(points, rest, strict=True):
        tangent = u.ratio(p.tangent, "t", "t")
        relations.append(Relation(tangent, _as_tangent(u, device, r, mean)))
        rows.append((str(p.shift), r, tangent, "excluded" if p.excluded else ""))
    if mean is not None:
        rows.append(("mean r<sub>m</sub>", mean, "", ""))
    heads = (
        Head("shift", 0.12, left=True),
        Head(f"rest value r [{sheet.show.raw_unit(quantity)}]", 0.50, left=True),
        Head("t", 0.20),
        Head("", 0.18, left=True),
    )
    return Board(title, heads, tuple(rows), tuple(relations))


def _rest(sheet: Sheet, reading: Reading, point: HeelPoint, others: list[Reading]) -> Term:
    """The rest value from what was written down; a fitted swing is a value by itself."""
    values = reading.values
    if reading.kind == "swings" and len(values) >= 5:
        return _raw(sheet, reading, point.reading.value, "r fitted", [])
    every = [v for r in others for v in r.values]
    written = [_raw(sheet, reading, v, "r", every) for v in values]
    if reading.kind == "swings":
        threes = zip(written, written[1:], written[2:], strict=False)
        rests = [(a + 2 * b + c) / 4 for a, b, c in threes]
        return rests[0] if len(rests) == 1 else Sum(tuple(rests), "Σ", listed=_WRITTEN) / len(rests)
    if len(written) > 1:
        return Sum(tuple(written), "Σ", listed=_WRITTEN) / len(written)
    return written[0]


def _raw(sheet: Sheet, reading: Reading, value: float, place: str, every: list[float]) -> Value:
    """A reading in its printed unit, which stands in the heading."""
    if reading.quantity == "length":
        found = Units(sheet.show).recorded("reading", value, f"{place} {reading.device}", "r", every)
        return replace(found, unit="")
    if reading.quantity == "angle":
        least = max(natural(math.degrees(v), 3, 6) for v in (value, *every))
        return Value(math.degrees(value), f"{place} {reading.device}", "r", "°", least)
    least = max(natural(v, 5, 8) for v in (value, *every))
    return Value(value, f"{place} {reading.device}", "r", "", least)


def _as_tangent(u: Units, device: Device, rest: Term, mean: Value | None) -> Term:
    """The formula of a tangent for one kind of device."""
    if mean is not None:
        return Tangent(rest - mean)
    if device.length is not None:
        return rest / (u.readings_in_length * u.recorded("length", device.length, f"l {device.id}", "l"))
    return rest


@dataclass(frozen=True, slots=True)
class _Sums:
    """A device's part in the slope."""

    xx: Value
    xy: Value
    weight: float


def sums_chapter(sheet: Sheet) -> Chapter:
    """Centred products by device, their sums, the slope and GM."""
    heel, u = sheet.reduction.outcome.heel, Units(sheet.show)
    weights = _weights(sheet)
    boards, sums = [], []
    for device in _devices(sheet):
        board, parts = _centred(sheet, device, weights.get(device.id))
        boards.append(board)
        sums.append(parts)
    slope = u.slope(heel.slope, "b", "b")
    state = sheet.reduction.outcome.as_inclined
    weight = u.of("mass", state.displacement, "Δ", "Δ")
    gm = u.of("length", heel.gm_fluid, "GM", "GM")
    unit = sheet.show.unit("moment")
    total_xy = Value(_total(sums, "xy"), "ΣSxy", "S<sub>Mt</sub>", unit, 3)
    total_xx = Value(_total(sums, "xx"), "ΣSxx", "S<sub>MM</sub>", f"({unit})²", 1)
    said = (
        "Readings that count, less the means of their device. S<sub>Mt</sub> and S<sub>MM</sub> "
        "are the sums of products and squares."
    )
    if weights:
        said += " Each device's sums are weighted by g, from the resolution of its readings."
    return Chapter(
        "Slope and GM",
        (
            said,
            *boards,
            Lay("Sum of products, all devices", total_xy, _joined(u, sums, "xy", weights)),
            Lay("Sum of squares, all devices", total_xx, _joined(u, sums, "xx", weights)),
            Lay("Slope common to all devices", slope, total_xy / total_xx),
            Lay("GM, liquids free to move", gm, 1 / (slope * weight)),
        ),
    )


def _total(sums: list[_Sums], key: str) -> float:
    return math.fsum(s.weight * getattr(s, key).amount for s in sums)


def _joined(u: Units, sums: list[_Sums], key: str, weights: dict[str, float]) -> Sum:
    label = "S<sub>Mt,j</sub>" if key == "xy" else "S<sub>MM,j</sub>"
    told = "sum over the devices"
    if not weights:
        return Sum(tuple(getattr(s, key) for s in sums), f"Σ {label}", told)
    terms = tuple(u.ratio(s.weight, "g", "g", 4) * getattr(s, key) for s in sums)
    return Sum(terms, f"Σ g\N{NO-BREAK SPACE}{label}", told)


def _weights(sheet: Sheet) -> dict[str, float]:
    """Weight of each device's readings; empty when all weigh alike."""
    seen = observe(sheet.reduction.trial)
    if seen.weight is None:
        return {}
    return {
        d.id: float(seen.weight[seen.device == j][0]) for j, d in enumerate(seen.devices)
    }


def _centred(sheet: Sheet, device: Device, weight: float | None) -> tuple[Board, _Sums]:
    u, unit = Units(sheet.show), sheet.show.unit("moment")
    points = [
        p
        for p in sheet.reduction.outcome.heel.points
        if p.device == device.id and not p.excluded
    ]
    moments = [_moment(u, sheet, p) for p in points]
    tangents = [u.ratio(p.tangent, "t", "t") for p in points]
    mean_m = Value(math.fsum(m.amount for m in moments) / len(points), "M mean", "", "", 4)
    mean_t = Value(math.fsum(t.amount for t in tangents) / len(points), "t mean", "", "", 7)
    relations = [
        Relation(mean_m, Sum(tuple(moments), "Σ M") / len(points)),
        Relation(mean_t, Sum(tuple(tangents), "Σ t") / len(points)),
    ]
    rows: list[tuple[Cell, ...]] = []
    products, squares = [], []
    for p, m, t in zip(points, moments, tangents, strict=True):
        off, lean = m.amount - mean_m.amount, t.amount - mean_t.amount
        product = Value(off * lean, "product", "", "", 4)
        square = Value(off**2, "square", "", "", 2)
        relations += [
            Relation(product, (m - mean_m) * (t - mean_t)),
            Relation(square, Power(m - mean_m)),
        ]
        products.append(product)
        squares.append(square)
        rows.append((str(p.shift), m, t, product, square))
    xy = Value(math.fsum(v.amount for v in products), "Sxy", "S<sub>Mt</sub>", unit, 3)
    xx = Value(math.fsum(v.amount for v in squares), "Sxx", "S<sub>MM</sub>", f"({unit})²", 1)
    relations += [Relation(xy, Sum(tuple(products), "Σ")), Relation(xx, Sum(tuple(squares), "Σ"))]
    rows.append(("means M<sub>0</sub>, t<sub>0</sub>; sums", mean_m, mean_t, _plain(xy), _plain(xx)))
    heads = (
        Head("shift", 0.22, left=True),
        Head(f"M [{unit}]", 0.17),
        Head("t", 0.18),
        Head("(M − M<sub>0</sub>) (t − t<sub>0</sub>)", 0.21),
        Head("(M − M<sub>0</sub>)²", 0.22),
    )
    title = f"{device.id}: {len(points)} readings"
    if weight is not None:
        title += f", g = {u.ratio(weight, 'g', 'g', 4).bare({'g': 4})}"
    board = Board(title, heads, tuple(rows), tuple(relations), frozenset({len(rows) - 1}))
    return board, _Sums(xx, xy, 1.0 if weight is None else weight)


def _plain(value: Value) -> Value:
    return replace(value, unit="")
