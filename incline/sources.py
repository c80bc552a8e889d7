"""Every source of uncertainty of a trial: what it is called, how large it is, where it enters.

A stated uncertainty comes first; without one the default for that kind of thing is taken and
labelled so; the scatter of the test itself gives the slope, and the drafts when they scatter more
than was stated.
"""

from __future__ import annotations

import itertools
import math
from dataclasses import dataclass, replace
from typing import TYPE_CHECKING, Literal

from incline.defaults import DEFAULTS, LABEL, assumed
from incline.diagnosis.evidence import EVIDENCE, NOT_EXCLUDED
from incline.hydrostatics import Curves
from incline.ledger import lines_of
from incline.units import DENSITY, FRACTION, LENGTH, MASS, MOMENT, SYSTEMS

if TYPE_CHECKING:
    from collections.abc import Iterator, Mapping, Sequence

    import numpy as np
    from numpy.typing import NDArray

    from incline.chain import Inputs, Plan, Yield
    from incline.diagnosis.search import Hidden
    from incline.observations import Observations
    from incline.record import Statements, Trial
    from incline.result import HeelFit, HullEntry, SlopeUncertainty, Waterline
    from incline.units import Quantity

    Floats = NDArray[np.float64]

__all__ = ["Source", "list_sources"]

STATED = "stated"
SEEN = "scatter of this test"


@dataclass(frozen=True, slots=True, kw_only=True)
class Source:
    """One input with a standard uncertainty ``u`` in inside units.

    ``field`` and ``item`` say where it enters the chain's inputs (``item`` None for a scalar);
    ``shape`` is normal, rectangular, or scaled-and-shifted t for what the test's own scatter gives,
    with ``dof`` degrees of freedom; sources with one ``pool`` share an estimate of scatter. Sources
    of one ``group`` are correlated by ``shared``. ``quantity`` None: a slope.
    """

    name: str
    field: str
    item: int | None
    u: float
    quantity: Quantity | None
    basis: str
    shape: Literal["normal", "rectangular", "t"] = "normal"
    dof: float = math.inf
    pool: str = ""
    group: str = ""
    shared: float = 0.0


def list_sources(
    trial: Trial,
    plan: Plan,
    given: Inputs,
    found: Yield,
    seen: Observations,
    waterline: Waterline,
    heel: HeelFit,
    slope: SlopeUncertainty,
    entry: HullEntry | None = None,
    hidden: Sequence[Hidden] = (),
) -> tuple[Source, ...]:
    """All sources whose uncertainty is above zero, in the order of the chain.

    ``entry`` is there when the hull was integrated.
    """
    sources = [
        *_drafts(trial, waterline),
        *_density(trial, given),
        *_test_weights(trial, plan),
        *_moments(trial, given),
        *_devices(trial, seen, slope),
        _curvature(heel),
        *_hidden(trial, hidden),
        *(_hydrostatics(trial, given) if entry is None else _hull(trial, given, entry)),
        *_trimmed(trial, plan, found),
        *_tanks(trial),
        *_lines(trial),
        *_changes(trial),
    ]
    return tuple(s for s in sources if s.u > _ROUNDING)


_ROUNDING = 1e-13
"""A smaller uncertainty is rounding of the arithmetic, in any of the inside units."""


@dataclass(frozen=True, slots=True)
class _Maker:
    """Builds sources: the stated uncertainty of a quantity, or the default by name."""

    overrides: Mapping[str, float]

    def make(
        self,
        name: str,
        field: str,
        item: int | None,
        stated: Statements,
        key: str,
        quantity: Quantity,
        default: str,
        value: float = 1.0,
        group: str = "",
        shared: float = 0.0,
    ) -> Source:
        said = stated.get(key)
        if said is not None:
            return Source(
                name=name, field=field, item=item, u=said.u, quantity=quantity, basis=STATED,
                shape=said.shape, group=group, shared=shared,
            )  # fmt: skip
        u = assumed(default, self.overrides)
        basis = "assumed: the trial's own" if default in self.overrides else LABEL
        return Source(
            name=name, field=field, item=item, quantity=quantity, basis=basis,
            u=u * abs(value) if DEFAULTS[default].relative else u, group=group, shared=shared,
        )  # fmt: skip


def _maker(trial: Trial) -> _Maker:
    return _Maker(trial.settings.assumed)


def _drafts(trial: Trial, waterline: Waterline) -> Iterator[Source]:
    make, overrides = _maker(trial).make, trial.settings.assumed
    shared = assumed("draft_shared", overrides)
    sources = [
        make(
            f"draft at {_length_of(trial, d.x)} {d.side}", "drafts", i, d.stated, "draft", LENGTH,
            "draft", group="drafts", shared=shared,
        )
        for i, d in enumerate(trial.drafts)
    ]  # fmt: skip
    if waterline.sd is None:
        yield from sources
        return
    from scipy.special import chdtrc

    # What the residuals should show: the part of each reading that the others do not share.
    own = sum(s.u**2 * (1.0 - shared) for s in sources) / len(sources)
    excess = waterline.sd**2 * waterline.dof / own
    if float(chdtrc(waterline.dof, excess)) >= 0.05:
        yield from sources
        return
    common = shared * min(s.u for s in sources) ** 2
    wide = [math.hypot(math.sqrt(common), max(s.u, waterline.sd)) for s in sources]
    for s, u in zip(sources, wide, strict=True):
        yield replace(
            s, u=u, basis=SEEN, shape="t", dof=waterline.dof, pool="drafts",
            shared=common / max(wide) ** 2,
        )  # fmt: skip


def _density(trial: Trial, given: Inputs) -> Iterator[Source]:
    share = [s.share / sum(t.share for t in trial.samples) for s in trial.samples]
    make = _maker(trial).make
    read = [
        make("", "density", None, s.stated, "density", DENSITY, "density") for s in trial.samples
    ]
    # One hydrometer reads every sample: its error does not average out.
    yield replace(
        read[0], name="density of the water, hydrometer", shape="normal",
        u=sum(w * r.u for w, r in zip(share, read, strict=True)),
        basis=next((r.basis for r in read if r.basis != STATED), STATED),
    )  # fmt: skip
    if trial.settings.layers:
        yield from _within_layers(trial)
        return
    yield from _water_spread(trial, float(given.density), share)


def _within_layers(trial: Trial) -> Iterator[Source]:
    """In layers, samples of one depth may differ, and each boundary may lie between two depths."""
    by_depth: dict[float, list[float]] = {}
    for s in trial.samples:
        by_depth.setdefault(s.depth or 0.0, []).append(s.density)
    reach = max(max(d) - min(d) for d in by_depth.values())
    depths = sorted(by_depth)
    means = [sum(by_depth[d]) / len(by_depth[d]) for d in depths]
    draft = sum(d.draft for d in trial.drafts) / len(trial.drafts)
    # A boundary half-way may be off by half the gap: that share of the draft has another density.
    moved = max(
        abs(b - a) * min(0.5 * (deep - high), draft) / draft
        for (high, deep), (a, b) in zip(
            itertools.pairwise(depths), itertools.pairwise(means), strict=True
        )
    )
    for name, width in (("samples of one depth", reach), ("where the layers meet", 2.0 * moved)):
        yield Source(
            name=f"density of the water, {name}", field="density", item=None,
            u=width / math.sqrt(12.0), quantity=DENSITY, basis=SEEN, shape="rectangular",
        )  # fmt: skip


_MANY_SAMPLES = 4


def _water_spread(trial: Trial, mean: float, share: list[float]) -> Iterator[Source]:
    """How far the mean of the samples may be from the mean of the water round the hull.

    Few samples tell no standard deviation worth the name; the mean is taken to lie anywhere in
    their range (rectangular). From four on it is the standard deviation of the mean (JCGM 100,
    4.2.3).
    """
    found = [s.density for s in trial.samples]
    if len(found) < 2:
        return
    spread = Source(
        name="density of the water, spread of samples", field="density", item=None,
        u=(max(found) - min(found)) / math.sqrt(12.0), quantity=DENSITY, basis=SEEN,
        shape="rectangular",
    )  # fmt: skip
    if len(found) < _MANY_SAMPLES:
        yield spread
        return
    squares = sum(w * (d - mean) ** 2 for w, d in zip(share, found, strict=True))
    free = len(found) - 1
    yield replace(spread, u=math.sqrt(squares / free), shape="t", dof=free, pool="density")


def _test_weights(trial: Trial, plan: Plan) -> Iterator[Source]:
    make, overrides = _maker(trial).make, trial.settings.assumed
    for i, w in enumerate(trial.weights):
        default = "test_weight_mass" if w.certificate else "uncertified_weight_mass"
        yield make(
            f"test weight {w.id}, mass", "weights", i, w.stated, "mass", MASS, default, w.mass,
            group=f"certificate {w.certificate}",  # none: one scale for all of them
            shared=assumed("certificate_shared", overrides),
        )  # fmt: skip
    moves = {(m.weight, s.number): m for s in trial.shifts for m in s.moves}
    arm_shared = assumed("arm_shared", overrides)
    by_weight = {w.id: w for w in trial.weights}
    for k, (weight, shift) in enumerate(plan.placing.names):
        stated = moves[weight, shift].stated
        label = f"test weight {weight} at {_side(trial, float(plan.placing.y[k]))}"
        yield make(
            f"{label}, y", "place_y", k, stated, "y", LENGTH, "test_weight_arm", group="arms",
            shared=arm_shared,
        )  # fmt: skip
        heights = {**by_weight[weight].stated, **stated}
        yield make(
            f"{label}, height", "place_z", k, heights, "z", LENGTH, "test_weight_centre",
            group=f"height of {weight}", shared=1.0,
        )  # fmt: skip
    first = {m.weight: m.stated for s in reversed(trial.shifts) for m in s.moves}
    for i, w in enumerate(trial.weights):
        stated = {**w.stated, **first[w.id]}
        yield make(
            f"test weight {w.id}, x", "weight_x", i, stated, "x", LENGTH, "test_weight_centre"
        )


def _moments(trial: Trial, given: Inputs) -> Iterator[Source]:
    """Moments given directly: each shift's own statement, or one error common to all."""
    if not len(given.moments):
        return
    make = _maker(trial).make
    if not any("moment" in s.stated for s in trial.shifts):
        yield make("inclining moments as given", "moment_factor", None, {}, "", FRACTION, "moment")
        return
    for i, s in enumerate(trial.shifts):
        name = f"inclining moment at shift {s.number}"
        value = s.moment or 0.0
        yield make(name, "moments", i, s.stated, "moment", MOMENT, "moment", value)


def _side(trial: Trial, y: float) -> str:
    return f"{_length_of(trial, abs(y))} {'S' if y > 0.0 else 'P' if y < 0.0 else ''}".strip()


def _length_of(trial: Trial, length: float) -> str:
    """A length in the trial's own unit."""
    system = SYSTEMS[trial.settings.units]
    return f"{system.show(length, LENGTH, system.length, 2)} {system.length}"


_COMMON_TAPE = 0.5
"""Correlation of lengths measured with one tape or by one calibration: engineering judgement."""


def _devices(trial: Trial, seen: Observations, slope: SlopeUncertainty) -> Iterator[Source]:
    make = _maker(trial).make
    for j, device in enumerate(seen.devices):
        if slope.lengths_seen and not device.stated:
            continue  # its error shows as disagreement with the other devices
        scale = float(seen.lengths[j])
        group, shared = f"measured by {device.calibration}", _COMMON_TAPE
        if device.kind == "inclinometer" or device.length is None:
            yield make(
                f"device {device.id}, scale", "lengths", j, device.stated, "scale", FRACTION,
                "inclinometer_scale", scale,
            )  # fmt: skip
        else:
            yield make(
                f"device {device.id}, length", "lengths", j, device.stated, "length", LENGTH,
                "length", group=group if device.calibration else "", shared=shared,
            )  # fmt: skip
    if slope.u is not None:
        yield Source(
            name="slope of heel against moment, scatter of readings", field="slope_shift",
            item=None, u=slope.u, quantity=None, basis=SEEN, shape="t", dof=slope.dof, pool="slope",
        )  # fmt: skip


def _curvature(heel: HeelFit) -> Source:
    """What the method leaves out.

    Its size is known for a wall-sided hull, but near a chine its sign is not, so that it counts as
    an uncertainty and not as a correction. With a hull it is the difference from integrating it.
    """
    gm_low = abs(heel.curvature_kg) / heel.gm_fluid
    known = heel.by_offsets is not None or any(m.method == "heeled-hull" for m in heel.others)
    basis = "difference from the heeled hull" if known else "estimated as for a wall-sided hull"
    return Source(
        name=f"curvature that the {heel.method} method leaves out", field="slope_shift", item=None,
        u=heel.slope * gm_low, quantity=None, basis=basis,
    )  # fmt: skip


def _hidden(trial: Trial, hidden: Sequence[Hidden]) -> Iterator[Source]:
    """Disturbances that residuals may hide, where the trial says that nothing excludes them.

    Anything up to the size that would have shown may be there, either way.
    """
    for one in hidden:
        if trial.settings.evidence.get(EVIDENCE[one.cause], "") == NOT_EXCLUDED:
            yield Source(
                name=f"not seen in the residuals: {one.cause}", field="slope_shift", item=None,
                u=abs(one.slope_change) / math.sqrt(3.0), quantity=None, shape="rectangular",
                basis="the trial does not exclude it",
            )  # fmt: skip


def _hydrostatics(trial: Trial, given: Inputs) -> Iterator[Source]:
    stated = {} if trial.table is None else trial.table.stated
    return _of_shape(trial, given, "hydrostatic table", "table", stated)


def _of_shape(
    trial: Trial, given: Inputs, what: str, default: str, stated: Statements
) -> Iterator[Source]:
    """Volume, KM and LCB of the hull."""
    make = _maker(trial).make
    yield make(
        f"{what}, volume", "volume_factor", None, stated, "volume", FRACTION, f"{default}_volume",
        float(given.volume_factor),
    )  # fmt: skip
    yield make(f"{what}, KM", "km_shift", None, stated, "km", LENGTH, f"{default}_km")
    yield make(f"{what}, LCB", "lcb_shift", None, stated, "lcb", LENGTH, f"{default}_lcb")


_ORDER_TWO = 3.0
"""Halving the spacing takes three quarters of the error away, at least: what is left is a third of
the difference. Smooth lines do better."""


def _hull(trial: Trial, given: Inputs, entry: HullEntry) -> Iterator[Source]:
    """The hull as built against its drawing, and what its offsets leave open."""
    stated = {} if trial.offsets is None else trial.offsets.stated
    yield from _of_shape(trial, given, "hull as built", "hull", stated)
    for name, apart, share in (
        ("spacing of stations", entry.by_stations, 1.0 / _ORDER_TWO),
        ("spacing of points", entry.by_points, 1.0),
    ):
        for what, field, quantity, miss in zip(
            ("volume", "KM", "LCB"), ("volume_factor", "km_shift", "lcb_shift"),
            (FRACTION, LENGTH, LENGTH), apart, strict=True,
        ):  # fmt: skip
            yield Source(
                name=f"{name}, {what}", field=field, item=None, u=abs(miss) * share,
                quantity=quantity, basis="estimated from the offsets",
            )  # fmt: skip


def _trimmed(trial: Trial, plan: Plan, found: Yield) -> Iterator[Source]:
    """What a table for one trim does not say of a ship at another.

    Its waterplane changes with trim where the ends are flared, and with it BM: the default is a
    share of BM times the slope of the keel. Without BM_L the rise of B is missing as well.
    """
    curves, now = plan.afloat, found.condition
    if not isinstance(curves, Curves) or not curves.even:
        return
    lpp = trial.vessel.lpp
    more = abs(float(now.tau) - curves.trims[0] / lpp)
    make, b = _maker(trial).make, now.buoyancy
    yield make(
        "table used at another trim, KM", "km_shift", None, {}, "", LENGTH, "table_trim_km",
        float(b.bmt) * more,
    )  # fmt: skip
    yield make(
        "table used at another trim, LCB", "lcb_shift", None, {}, "", LENGTH, "table_trim_lcb",
        lpp * more**2,
    )  # fmt: skip
    if "bml" not in curves.names:
        yield Source(
            name="rise of B by trim, not in the table", field="km_shift", item=None,
            u=(lpp * more) ** 2 / (24.0 * float(b.entry)), quantity=LENGTH,
            basis="estimated as for a box",
        )  # fmt: skip


def _tanks(trial: Trial) -> Iterator[Source]:
    make = _maker(trial).make
    for i, t in enumerate(trial.tanks):
        yield make(
            f"tank {t.name}, free-surface moment", "fsm", i, t.stated, "fsm", MOMENT,
            "free_surface", t.fsm,
        )  # fmt: skip


_LINE_DEFAULTS = {
    "tanks": ("tank_mass", "tank_centre", "tank"),
    "people": ("person_mass", "person_centre", "person aboard"),
    "ledger": ("item_mass", "item_centre", "item"),
}
_AXES = {"x": "x", "y": "y", "z": "height"}


def _lines(trial: Trial) -> Iterator[Source]:
    make = _maker(trial).make
    came = {c.name.casefold() for c in trial.changes if c.change == "aboard"}
    for i, line in enumerate(lines_of(trial)):
        mass, centre, kind = _LINE_DEFAULTS[line.source]
        label = f"{kind} {line.name}"
        # What came aboard after the drafts and comes off again is one thing, weighed once.
        same = f"the one {line.name.casefold()}" if line.name.casefold() in came else ""
        yield make(
            f"{label}, mass", "mass", i, line.stated, "mass", MASS, mass, line.mass, group=same,
            shared=1.0,
        )  # fmt: skip
        for axis, word in _AXES.items():
            yield make(f"{label}, {word}", axis, i, line.stated, axis, LENGTH, centre)
            if line.to is not None:
                key = f"to_{axis}"
                yield make(f"{label}, new {word}", key, i, line.stated, key, LENGTH, centre)


def _changes(trial: Trial) -> Iterator[Source]:
    make = _maker(trial).make
    for i, c in enumerate(trial.changes):
        label = f"change {c.name}"
        same = f"the one {c.name.casefold()}" if c.change == "aboard" else ""
        yield make(
            f"{label}, mass", "changes", i, c.stated, "mass", MASS, "item_mass", c.mass,
            group=same, shared=1.0,
        )  # fmt: skip
        for axis, word in _AXES.items():
            yield make(
                f"{label}, {word}", f"change_{axis}", i, c.stated, axis, LENGTH, "item_centre"
            )
