"""Steps from the readings to tangents, sums by device, slope and GM."""

from __future__ import annotations

import math
from dataclasses import replace
from typing import TYPE_CHECKING

from incline.observations import observe
from incline.report.arithmetic import Power, Sum, Tangent, Term, Value
from incline.report.digits import Relation, natural
from incline.report.steps import Board, Cell, Chapter, Head, Lay
from incline.report.steps_units import Units
from incline.report.text import markup

if TYPE_CHECKING:
    from incline.record import Device, Reading
    from incline.report.document import Sheet
    from incline.result import HeelPoint

__all__ = ["readings_chapters"]

_WRITTEN = 40
"""Most repeats of one reading that are written out."""
_TOLD = "sum over the devices of what stands in their tables"


def readings_chapters(sheet: Sheet) -> tuple[Chapter, ...]:
    """Every reading's tangent, device by device; for a straight line also slope and GM."""
    heel = sheet.reduction.outcome.heel
    known = {d.id: d for d in sheet.reduction.trial.devices}
    fitted = [_Fitted(sheet, known[d.id]) for d in heel.devices]
    line = heel.method == "straight-line"
    boards = [f.board(sums=line) for f in fitted]
    title = "Tangents of heel, and their products with the moments" if line else "Tangents of heel"
    said = (
        "r is the rest value: a reading, the mean of repeats, of a swing's extremes, or the centre "
        "of a swing as fitted in “Devices and readings”."
    )
    if line:
        said += (
            " M<sub>0</sub> and t<sub>0</sub> are the means of the device's readings that count; "
            "S<sub>Mt,j</sub> and S<sub>MM,j</sub> the sums of its products and of its squares."
        )
    found = Chapter(title, (said, *boards))
    return (found, _slope(sheet, fitted)) if line else (found,)


class _Fitted:
    """One device's readings as values, with the sums that the slope needs."""

    def __init__(self, sheet: Sheet, device: Device) -> None:
        self.sheet, self.device = sheet, device
        self.u, self.unit = Units(sheet.show), sheet.show.unit("moment")
        heel, trial = sheet.reduction.outcome.heel, sheet.reduction.trial
        self.points = [p for p in heel.points if p.device == device.id]
        readings = {r.shift: r for r in trial.readings if r.device == device.id}
        self.quantity = readings[self.points[0].shift].quantity
        every = list(readings.values())
        self.rest = [_rest(sheet, readings[p.shift], p, every) for p in self.points]
        place = "M_f" if any(s.vertical for s in heel.shifts) else "M"  # as in the moments' table
        self.moments = [self.u.bare("moment", p.moment, place, "M") for p in self.points]
        self.tangents = [self.u.ratio(p.tangent, "t", "t", 5) for p in self.points]
        some = [i for i, p in enumerate(self.points) if not p.excluded]
        m, t = [self.moments[i] for i in some], [self.tangents[i] for i in some]
        self.mean_m = Value(_mean(m), "M mean", "M<sub>0</sub>", "", 3)
        self.mean_t = Value(_mean(t), "t mean", "t<sub>0</sub>", "", 6)
        off = [v.amount - self.mean_m.amount for v in m]
        lean = [v.amount - self.mean_t.amount for v in t]
        self.products = {
            i: Value(a * b, "product", "", "", 3) for i, a, b in zip(some, off, lean, strict=True)
        }
        self.squares = {
            i: Value(a * a, "square", "", "", 1) for i, a in zip(some, off, strict=True)
        }
        self.xy = Value(_total(self.products), "Sxy", "S<sub>Mt,j</sub>", self.unit, 3)
        self.xx = Value(_total(self.squares), "Sxx", "S<sub>MM,j</sub>", f"({self.unit})²", 1)
        self.mean = self._middle() if self.quantity == "angle" else None

    def _middle(self) -> Value:
        """The mean angle, from which an inclinometer's angles are counted."""
        angles = math.fsum(p.reading.value for p in self.points) / len(self.points)
        return Value(math.degrees(angles), f"r mean {self.device.id}", "r<sub>m</sub>", "°", 4)

    def board(self, *, sums: bool) -> Board:
        """The device's table, with products and squares where ``sums`` are wanted."""
        rows: list[tuple[Cell, ...]] = []
        for i, p in enumerate(self.points):
            more: tuple[Cell, ...] = ("excluded" if p.excluded else "",)
            if sums:
                more = ("excluded", "")
                if i in self.products:
                    more = (self.products[i], self.squares[i])
            rows.append((str(p.shift), self.rest[i], self.tangents[i], self.moments[i], *more))
        if self.mean is not None:
            rows.append(("r<sub>m</sub>", self.mean, *[""] * (len(rows[0]) - 2)))
        totals = frozenset[int]()
        relations = self._tangents()
        if sums:
            plain = (replace(self.xy, unit=""), replace(self.xx, unit=""))
            rows.append(("", "means; sums", self.mean_t, self.mean_m, *plain))
            totals, relations = frozenset({len(rows) - 1}), [*relations, *self._sums()]
        return Board(self._title(), self._heads(sums=sums), tuple(rows), tuple(relations), totals)

    def _title(self) -> str:
        name = markup(self.device.id)
        if self.mean is not None:
            return f"{name}: t = tan(r − r<sub>m</sub>), r<sub>m</sub> the mean of all r"
        size = self._length()
        if size is None:
            return f"{name}: t as read"
        said = "span" if self.device.kind == "u-tube" else "length"
        many, length = self.u.readings_in_length, size.text({size.place: size.least})
        return f"{name}: t = r / ({many} l), {said} l = {length}"

    def _length(self) -> Value | None:
        if self.quantity != "length" or self.device.length is None:
            return None
        return self.u.recorded("length", self.device.length, f"l {self.device.id}", "l")

    def _heads(self, *, sums: bool) -> tuple[Head, ...]:
        unit = self.sheet.show.raw_unit(self.quantity)
        first = (
            Head("shift", 0.07, left=True),
            Head(f"r [{unit}]" if unit != "tan" else "r", 0.29, left=True),
            Head("t", 0.14),
            Head(f"M [{self.unit}]", 0.13),
        )
        if not sums:
            return (*first, Head("", 0.37, left=True))
        return (
            *first,
            Head("(M − M<sub>0</sub>) (t − t<sub>0</sub>)", 0.19),
            Head("(M − M<sub>0</sub>)²", 0.18),
        )

    def _tangents(self) -> list[Relation]:
        """What each tangent follows from."""
        found: list[Relation] = []
        if self.mean is not None:
            found.append(Relation(self.mean, Sum(tuple(self.rest), "Σ r") / len(self.rest)))
        size = self._length()
        for tangent, rest in zip(self.tangents, self.rest, strict=True):
            term = rest
            if self.mean is not None:
                term = Tangent(rest - self.mean)
            elif size is not None:
                term = rest / (self.u.readings_in_length * size)
            found.append(Relation(tangent, term))
        return found

    def _sums(self) -> list[Relation]:
        """Means, products, squares, and their sums."""
        m, t = ([c[i] for i in self.products] for c in (self.moments, self.tangents))
        found = [
            Relation(self.mean_m, Sum(tuple(m), "Σ M") / len(m)),
            Relation(self.mean_t, Sum(tuple(t), "Σ t") / len(t)),
        ]
        for i in self.products:
            off, lean = self.moments[i] - self.mean_m, self.tangents[i] - self.mean_t
            found += [
                Relation(self.products[i], off * lean),
                Relation(self.squares[i], Power(off)),
            ]
        return [
            *found,
            Relation(self.xy, Sum(tuple(self.products.values()), "Σ")),
            Relation(self.xx, Sum(tuple(self.squares.values()), "Σ")),
        ]


def _mean(values: list[Value]) -> float:
    return math.fsum(v.amount for v in values) / len(values)


def _total(values: dict[int, Value]) -> float:
    return math.fsum(v.amount for v in values.values())


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
        found = Units(sheet.show).recorded(
            "reading", value, f"{place} {reading.device}", "r", every
        )
        return replace(found, unit="")
    if reading.quantity == "angle":
        least = max(natural(math.degrees(v), 3, 6) for v in (value, *every))
        return Value(math.degrees(value), f"{place} {reading.device}", "r", "°", least)
    least = max(natural(v, 5, 8) for v in (value, *every))
    return Value(value, f"{place} {reading.device}", "r", "", least)


def _slope(sheet: Sheet, fitted: list[_Fitted]) -> Chapter:
    """The devices' sums put together, the slope and GM."""
    heel, u = sheet.reduction.outcome.heel, Units(sheet.show)
    unit, weights = sheet.show.unit("moment"), _weights(sheet)
    share = {f.device.id: weights.get(f.device.id, 1.0) for f in fitted}
    xy = math.fsum(share[f.device.id] * f.xy.amount for f in fitted)
    xx = math.fsum(share[f.device.id] * f.xx.amount for f in fitted)
    total_xy = Value(xy, "ΣSxy", "S<sub>Mt</sub>", unit, 3)
    total_xx = Value(xx, "ΣSxx", "S<sub>MM</sub>", f"({unit})²", 1)
    slope = u.slope(heel.slope, "b", "b")
    weight = u.of("mass", sheet.reduction.outcome.as_inclined.displacement, "Δ", "Δ")
    gm = u.of("length", heel.gm_fluid, "GM", "GM")
    said = "All devices share one slope, each has a zero of its own."
    if weights:
        said += " The sums of each are weighted by g, from the resolution of its readings."
    return Chapter(
        "Slope and GM",
        (
            said,
            *_joined(u, fitted, weights, (total_xy, total_xx)),
            Lay("Slope of tangent on moment", slope, total_xy / total_xx),
            Lay("GM, liquids free to move", gm, 1 / (slope * weight)),
        ),
    )


def _joined(
    u: Units, fitted: list[_Fitted], weights: dict[str, float], totals: tuple[Value, Value]
) -> list[Lay | Board]:
    """The sums over the devices; from a table where there are many or they are weighted."""
    labels = ("Σ S<sub>Mt,j</sub>", "Σ S<sub>MM,j</sub>")
    names = ("Sum of products, all devices", "Sum of squares, all devices")
    columns = ([f.xy for f in fitted], [f.xx for f in fitted])
    if not weights:
        terms = [Sum(tuple(c), label, _TOLD) for c, label in zip(columns, labels, strict=True)]
        return [Lay(n, v, t) for n, v, t in zip(names, totals, terms, strict=True)]
    shares = [u.ratio(weights[f.device.id], "g", "g", 4) for f in fitted]
    sums = [
        Sum(
            tuple(g * v for g, v in zip(shares, c, strict=True)),
            f"Σ g\N{NO-BREAK SPACE}{label[2:]}",
            _TOLD,
        )
        for c, label in zip(columns, labels, strict=True)
    ]
    rows = tuple((markup(f.device.id), g) for f, g in zip(fitted, shares, strict=True))
    heads = (Head("device", 0.4, left=True), Head("weight g", 0.2), Head("", 0.4))
    board = Board("", heads, tuple((*r, "") for r in rows))
    return [board, *(Lay(n, v, t) for n, v, t in zip(names, totals, sums, strict=True))]


def _weights(sheet: Sheet) -> dict[str, float]:
    """Weight of each device's readings; empty when all weigh alike."""
    seen = observe(sheet.reduction.trial)
    if seen.weight is None:
        return {}
    return {d.id: float(seen.weight[seen.device == j][0]) for j, d in enumerate(seen.devices)}
