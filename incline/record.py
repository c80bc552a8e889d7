"""The trial as recorded: frozen records in metres, tonnes, radians, whatever the files used.

x is forward from the after perpendicular, y positive to starboard, z up from the baseline. A
reading or moment is positive when it belongs to heel to starboard.
"""

from __future__ import annotations

import datetime
from collections.abc import Mapping
from dataclasses import dataclass, field
from typing import Literal

from incline.errors import Where
from incline.papers import Papers

__all__ = [
    "Body", "Change", "Condition", "Correlation", "Device", "DraftReading", "Environment",
    "HydrostaticTable", "Item", "Method", "Move", "Occasion", "OffsetPoint", "Offsets",
    "Override", "Person", "Point", "Reading", "RollCondition", "RollingRun", "Sample", "Settings",
    "Shift", "Stated", "Statements",
    "Station", "Tank", "Trial", "Vessel", "Weight",
]  # fmt: skip


@dataclass(frozen=True, slots=True)
class Point:
    """A position: x forward of the after perpendicular, y to starboard, z above baseline [m]."""

    x: float
    y: float
    z: float


@dataclass(frozen=True, slots=True)
class Stated:
    """A standard uncertainty that the trial states, in its quantity's own unit.

    ``shape`` is rectangular for a tolerance or a resolution, normal for a standard uncertainty.
    """

    u: float
    shape: Literal["normal", "rectangular"]


Statements = Mapping[str, Stated]
"""Stated uncertainties by quantity: ``mass``, ``x``, ``to_z``, ``draft``, ``length`` ..."""


@dataclass(frozen=True, slots=True)
class Correlation:
    """A correlation coefficient stated between two inputs, named as the budget prints them."""

    a: str
    b: str
    r: float
    where: Where


@dataclass(frozen=True, slots=True, kw_only=True)
class Vessel:
    """The vessel: name, identity number, length between perpendiculars, beam, depth [m]."""

    name: str
    number: str
    lpp: float
    beam: float
    depth: float
    kind: str = ""
    flag: str = ""
    builder: str = ""
    yard_number: str = ""
    port: str = ""


@dataclass(frozen=True, slots=True, kw_only=True)
class Person:
    """Someone at the test; with ``mass`` [t] and ``centre`` when aboard during the shifts."""

    name: str
    role: str
    mass: float | None = None
    centre: Point | None = None
    where: Where
    stated: Statements = field(default_factory=dict)


@dataclass(frozen=True, slots=True, kw_only=True)
class Occasion:
    """When and where the test was held; ``water_depth`` [m]. Empty text: not recorded.

    ``notice_date`` is the day on which the procedure was sent ahead, ``gm_before`` [m] the GM that
    was expected.
    """

    date: datetime.date
    place: str
    berth: str = ""
    weather: str = ""
    water_depth: float | None = None
    notes: str = ""
    notice_date: datetime.date | None = None
    gm_before: float | None = None
    started: str = ""
    ended: str = ""
    tide: str = ""
    witness: str = ""


@dataclass(frozen=True, slots=True, kw_only=True)
class Environment:
    """Berth and surroundings in words, and ``wind_speed`` [m/s]. Empty text: not recorded."""

    shelter: str = ""
    lines: str = ""
    gangway: str = ""
    wind: str = ""
    current: str = ""
    wind_speed: float | None = None


@dataclass(frozen=True, slots=True, kw_only=True)
class Condition:
    """The ship's own condition in words. Empty text: not recorded.

    ``state``: completeness and what was going on aboard; ``tanks``: how empty and full ones were
    shown to be so; ``drafts``: what was aboard, and when, as the drafts were read.
    """

    state: str = ""
    decks: str = ""
    bilges: str = ""
    tanks: str = ""
    secured: str = ""
    drafts: str = ""


@dataclass(frozen=True, slots=True, kw_only=True)
class Override:
    """A limit that the trial puts in place of a criterion's, and why.

    ``low`` and ``high`` are in the criterion's own unit. With neither, ``limit`` says in words what
    holds, and the program does not judge it.
    """

    check: str
    low: float | None
    high: float | None
    limit: str
    reason: str
    where: Where
    allowed_by: str = ""


@dataclass(frozen=True, slots=True, kw_only=True)
class Device:
    """A device that shows heel. ``length`` [m]: pendulum length or U-tube span; None for angles.

    ``resolution`` is the step of its readings [m] or [rad]; None when not stated.
    """

    id: str
    kind: Literal["pendulum", "u-tube", "inclinometer"]
    length: float | None
    place: str = ""
    calibration: str = ""
    where: Where
    resolution: float | None = None
    stated: Statements = field(default_factory=dict)
    damping: str = ""
    read_by: str = ""


@dataclass(frozen=True, slots=True, kw_only=True)
class Weight:
    """A test weight: mass [t] and the x and z of its centre where it starts [m]."""

    id: str
    mass: float
    certificate: str
    x: float
    z: float
    where: Where
    kind: Literal["solid", "liquid"] = "solid"
    stated: Statements = field(default_factory=dict)


@dataclass(frozen=True, slots=True, kw_only=True)
class Move:
    """New position of one weight at a shift [m]; x and z are None where they did not change."""

    weight: str
    y: float
    x: float | None
    z: float | None
    where: Where
    stated: Statements = field(default_factory=dict)


@dataclass(frozen=True, slots=True, kw_only=True)
class Shift:
    """One state of the test weights; ``moment`` [t m] to starboard when given directly."""

    number: int
    time: str
    moves: tuple[Move, ...]
    moment: float | None
    where: Where
    stated: Statements = field(default_factory=dict)
    weather: str = ""
    tide: str = ""


@dataclass(frozen=True, slots=True, kw_only=True)
class Reading:
    """Readings of one device at one shift: lengths [m], angles [rad] or tangents, as ``quantity``.

    ``kind`` says how several values belong together: repeats, or successive swing extremes.
    ``excluded`` is the surveyor's reason for leaving it out; empty when it counts.
    """

    shift: int
    device: str
    kind: Literal["single", "repeats", "swings"]
    values: tuple[float, ...]
    quantity: Literal["length", "angle", "tangent"]
    note: str
    excluded: str
    where: Where


@dataclass(frozen=True, slots=True, kw_only=True)
class DraftReading:
    """Draft at (x, y) above the moulded baseline [m]: keel and freeboard already allowed for."""

    x: float
    side: Literal["P", "S", "C"]
    y: float
    draft: float
    freeboard: float | None
    where: Where
    stated: Statements = field(default_factory=dict)


@dataclass(frozen=True, slots=True, kw_only=True)
class Sample:
    """A water sample: place, depth [m], density [t/m3], temperature [C], weight in the mean."""

    place: str
    depth: float | None
    density: float
    temperature: float | None
    share: float
    where: Where
    stated: Statements = field(default_factory=dict)


@dataclass(frozen=True, slots=True, kw_only=True)
class Tank:
    """A tank: liquid mass [t], centre, and free-surface moment [t m] (zero unless slack).

    ``level`` of the liquid and ``depth`` of the tank are above its bottom; ``length`` and
    ``breadth`` are those of the free surface [m]. ``type`` is empty when not recorded. ``box`` says
    that the tank is a box of that length, breadth and depth. ``sounding`` is what was read at the
    tank, in words.
    """

    name: str
    contents: str
    state: Literal["empty", "pressed full", "slack"]
    density: float | None
    level: float | None
    volume: float | None
    mass: float
    centre: Point | None
    fsm: float
    fsm_basis: str
    where: Where
    depth: float | None = None
    length: float | None = None
    breadth: float | None = None
    type: Literal["", "deep", "double bottom"] = ""
    box: bool = False
    stated: Statements = field(default_factory=dict)
    sounding: str = ""


@dataclass(frozen=True, slots=True, kw_only=True)
class Item:
    """A ledger item: mass [t] and centre; ``to`` is the new position of a relocated item."""

    action: Literal["deduct", "add", "relocate"]
    name: str
    mass: float
    centre: Point
    to: Point | None
    basis: str
    where: Where
    stated: Statements = field(default_factory=dict)


@dataclass(frozen=True, slots=True, kw_only=True)
class Change:
    """Something that came aboard or went ashore between the draft readings and the shifts."""

    change: Literal["aboard", "ashore"]
    name: str
    mass: float
    centre: Point
    where: Where
    stated: Statements = field(default_factory=dict)


@dataclass(frozen=True, slots=True, kw_only=True)
class RollingRun:
    """One run of the rolling test: ``time`` [s] of ``rolls`` full rolls, side to side and back."""

    run: str
    rolls: int
    time: float
    where: Where


RollCondition = Literal["empty", "20 %", "10 %", "5 %"]
"""Loading at the rolling test: empty or in ballast, or the share of liquids in the total load."""


@dataclass(frozen=True, slots=True, kw_only=True)
class HydrostaticTable:
    """Hydrostatics by draft and, where ``trims`` has more than one value, by trim.

    Arrays are nested tuples [trim][draft]: volume [m3], lcb, kb, bmt [m], lcf [m], area [m2],
    bml [m]. Drafts [m] are above the moulded baseline, amidships between perpendiculars; trims [m]
    are over the length between perpendiculars, positive by the stern. None: not tabulated.
    """

    drafts: tuple[float, ...]
    trims: tuple[float, ...]
    volume: tuple[tuple[float, ...], ...]
    lcb: tuple[tuple[float, ...], ...]
    kb: tuple[tuple[float, ...], ...]
    bmt: tuple[tuple[float, ...], ...]
    lcf: tuple[tuple[float, ...], ...] | None
    area: tuple[tuple[float, ...], ...] | None
    bml: tuple[tuple[float, ...], ...] | None
    bml_basis: str
    where: Where
    stated: Statements = field(default_factory=dict)


@dataclass(frozen=True, slots=True)
class OffsetPoint:
    """A point of a station: half-breadth ``y`` from the body's centreplane, height ``z`` [m].

    Points with the same ``line`` name at all stations of a body lie on one line along the hull,
    such as a chine or the deck edge; empty for others.
    """

    y: float
    z: float
    line: str = ""


@dataclass(frozen=True, slots=True, kw_only=True)
class Station:
    """A transverse section at ``x`` [m]: points of each side from the keel to the deck edge.

    Both sides start at one point of the body's centreplane. The two are the same tuple where they
    are alike. Straight lines join the points.
    """

    name: str
    x: float
    starboard: tuple[OffsetPoint, ...]
    port: tuple[OffsetPoint, ...]
    where: Where


@dataclass(frozen=True, slots=True, kw_only=True)
class Body:
    """One closed body of the hull; stations ascend in x.

    Two stations at one x end one smooth run of lines and begin the next. ``y`` [m] is where the
    body's centreplane lies; ``mirrored`` adds its mirror image on the other side of the ship. An
    ``appendage`` may lie wholly under water, a ``hull`` must keep its deck edge dry.
    """

    name: str
    kind: Literal["hull", "appendage"] = "hull"
    y: float = 0.0
    mirrored: bool = False
    stations: tuple[Station, ...]


@dataclass(frozen=True, slots=True, kw_only=True)
class Offsets:
    """The hull's shape. ``allowance`` as in `Settings`, for the volume integrated from it."""

    bodies: tuple[Body, ...]
    allowance: float | None
    stated: Statements = field(default_factory=dict)


Method = Literal["straight-line", "wall-sided", "heeled-hull"]
"""How the curve of righting levers is taken: a line, with the wall-sided term, or integrated."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Settings:
    """Choices of the trial: axes, output units, rule set, method, and how drafts and tables count.

    ``method`` None leaves the choice to the program: heeled-hull where the hull's offsets are used.
    ``use`` says which hydrostatics count where a trial has both offsets and a table; ``layers``
    whether the water is taken as layers by the depths of the samples instead of mixed.
    ``allowance`` multiplies a table's moulded volume by (1 + allowance) for shell and appendages;
    None means the table is extreme. ``keel_thickness`` [m] is taken off drafts whose marks start
    at the underside of keel. ``kg_limit`` [m] is a KG not to be exceeded; ``evidence`` says what
    speaks against disturbances that residuals may hide; ``assumed`` replaces the program's default
    uncertainties by name (see `incline.defaults`), ``overrides`` limits of published criteria.
    """

    x_origin: Literal["after perpendicular", "amidships"]
    units: Literal["metric", "us"]
    rule_set: str
    method: Method | None
    allowance: float | None
    keel_thickness: float
    interpolation: Literal["cubic", "linear"]
    use: Literal["offsets", "table"] = "offsets"
    layers: bool = False
    kg_limit: float | None = None
    evidence: Mapping[str, str] = field(default_factory=dict)
    assumed: Mapping[str, float] = field(default_factory=dict)
    correlations: tuple[Correlation, ...] = ()
    roll_condition: RollCondition | None = None
    overrides: tuple[Override, ...] = ()
    rule_edition: str = ""


@dataclass(frozen=True, slots=True, kw_only=True)
class Trial:
    """One inclining test as recorded. ``digest`` is the sha256 over its files.

    ``hydrometer`` is the range of relative density that the hydrometer covers. At least one of
    ``table`` and ``offsets`` is there.
    """

    folder: str
    digest: str
    vessel: Vessel
    occasion: Occasion
    settings: Settings
    people: tuple[Person, ...]
    devices: tuple[Device, ...]
    weights: tuple[Weight, ...]
    shifts: tuple[Shift, ...]
    readings: tuple[Reading, ...]
    drafts: tuple[DraftReading, ...]
    samples: tuple[Sample, ...]
    tanks: tuple[Tank, ...]
    items: tuple[Item, ...]
    changes: tuple[Change, ...]
    table: HydrostaticTable | None
    offsets: Offsets | None = None
    rolls: tuple[RollingRun, ...] = ()
    environment: Environment = field(default_factory=Environment)
    hydrometer: tuple[float, float] | None = None
    condition: Condition = field(default_factory=Condition)
    papers: Papers = field(default_factory=Papers)
    remarks: tuple[str, ...] = ()
    """Assumptions made while reading that a reviewer should see, one sentence each."""
