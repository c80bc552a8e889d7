"""``trial.toml``: the vessel, the occasion, the choices, the devices and the people."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

from incline.errors import Where
from incline.reading.aboard import read_device, read_person
from incline.reading.assumptions import read_assumed, read_correlations
from incline.reading.bodies import HullPlan, read_plan
from incline.reading.collect import BAD, Sign, quoted
from incline.reading.hull_choices import read_layers, read_method, read_use
from incline.reading.occasion import (
    read_condition,
    read_environment,
    read_hydrometer,
    read_occasion,
)
from incline.reading.overrides import read_overrides
from incline.reading.papers import SECTIONS as PAPERS
from incline.reading.papers import read_papers
from incline.reading.plausible import WATER, Hull, check, check_vessel, hull_of
from incline.reading.rolls import read_condition as read_roll_condition
from incline.reading.tomlfile import FILE, Document
from incline.reading.volume import read_allowance, read_stated
from incline.record import (
    Condition,
    Device,
    Environment,
    Occasion,
    Person,
    Settings,
    Vessel,
)
from incline.units import DENSITY, LENGTH

if TYPE_CHECKING:
    from collections.abc import Sequence
    from pathlib import Path
    from typing import Literal

    from incline.papers import Papers
    from incline.reading.collect import Collector
    from incline.reading.hull_choices import HullFiles
    from incline.reading.tomlfile import Section
    from incline.record import Statements

__all__ = [
    "Frame", "Head", "check_ids", "given_density", "read_axes", "read_head", "read_units",
    "read_vessel",
]  # fmt: skip

_BASE, _KEEL = "baseline", "underside of keel"
_SECTIONS = (
    "vessel", "test", "axes", "output", "rules", "method", "drafts", "hydrostatics", "density",
    "devices", "people", "limits", "uncertainty", "correlations", "rolling", "evidence",
    "environment", "instruments", "overrides", "offsets", "bodies", "condition", *PAPERS,
)  # fmt: skip


@dataclass(frozen=True, slots=True, kw_only=True)
class Frame:
    """What the tables need from ``trial.toml``; BAD where it could not be read.

    ``hull`` is what positions are checked against. ``x_shift`` [m] is added to every x.
    ``marks_down`` and ``table_down`` [m] are taken off drafts read at the marks and drafts of the
    hydrostatic table. ``table_density`` and ``relative_to`` [t/m3] are None when not given.
    ``table_stated`` are the table's uncertainties.
    """

    lpp: float
    beam: float
    hull: Hull
    x_shift: float
    marks_down: float
    table_down: float
    table_density: float | None
    relative_to: float | None
    table_stated: Statements


@dataclass(frozen=True, slots=True, kw_only=True)
class Head:
    """All of ``trial.toml``. ``complete`` is False when the devices could not be looked at.

    ``plan`` is what it says of the offsets; ``use_said`` whether it chooses between them and the
    hydrostatic table.
    """

    vessel: Vessel
    occasion: Occasion
    settings: Settings
    devices: tuple[Device, ...]
    people: tuple[Person, ...]
    environment: Environment
    hydrometer: tuple[float, float] | None
    condition: Condition
    papers: Papers
    frame: Frame
    plan: HullPlan
    use_said: bool
    complete: bool


def read_head(data: bytes | None, files: HullFiles, collector: Collector, folder: Path) -> Head:
    """Read ``trial.toml`` in ``folder``; ``None`` when there is none, which the caller tells."""
    document = Document(data, collector)
    vessel, sound = read_vessel(document.section("vessel"))
    settings, frame = _choices(document, vessel, files, sound=sound)
    devices = tuple(read_device(s) for s in document.sections("devices"))
    if document.readable and not document.has("devices"):
        where, expected = Where(FILE, 0, "devices"), "a section [[devices]] for each device"
        collector.add(where, "key-missing", "no devices", expected)
    people = tuple(read_person(s, frame.hull) for s in document.sections("people"))
    check_ids([d.id for d in devices], "devices", "id", collector)
    check_ids([p.name for p in people], "people", "name", collector)
    occasion = read_occasion(document.section("test"))
    head = Head(
        vessel=vessel,
        occasion=occasion,
        environment=read_environment(document.section("environment")),
        hydrometer=read_hydrometer(document.section("instruments")),
        condition=read_condition(document.section("condition")),
        papers=read_papers(document, folder, vessel.lpp, occasion.date),
        settings=settings,
        devices=devices,
        people=people,
        frame=frame,
        plan=_plan(document, frame.hull, files, collector),
        use_said=document.section("hydrostatics").value("use") is not None,
        complete=bool(devices),
    )
    document.close(_SECTIONS)
    return head


def check_ids(names: Sequence[str], section: str, key: str, collector: Collector) -> None:
    """Names of the sections ``[[section]]`` must differ, whatever their case."""
    folded = [name.casefold() for name in names]
    for n, name in enumerate(folded, start=1):
        first = folded.index(name) + 1
        if name and first != n:
            where = Where(FILE, 0, f"{section}[{n}].{key}")
            expected = f"{key} unlike the others; {section}[{first}] has the same"
            collector.add(where, "id-twice", quoted(names[n - 1]), expected)


def _plan(document: Document, hull: Hull, files: HullFiles, collector: Collector) -> HullPlan:
    plan = read_plan(document, hull, needed=files.offsets)
    check_ids([b.name for b in plan.bodies], "bodies", "name", collector)
    return plan


def read_vessel(section: Section) -> tuple[Vessel, bool]:
    """The vessel, and whether a ship can have its dimensions."""
    vessel = Vessel(
        name=section.text("name", required=True),
        number=section.text("number", required=True),
        lpp=section.need("lpp", LENGTH, Sign.POSITIVE),
        beam=section.need("beam", LENGTH, Sign.POSITIVE),
        depth=section.need("depth", LENGTH, Sign.POSITIVE),
        kind=section.text("kind"),
        flag=section.text("flag"),
        builder=section.text("builder"),
        yard_number=section.text("yard_number"),
        port=section.text("port"),
    )
    section.close()
    return vessel, check_vessel(section, vessel)


def read_axes(section: Section) -> Literal["after perpendicular", "amidships"]:
    """Where x is zero in every file."""
    origin: Literal["after perpendicular", "amidships"] = section.choice(
        "x_origin", ("after perpendicular", "amidships")
    )
    section.close()
    return origin


def read_units(section: Section) -> Literal["metric", "us"]:
    """Units of what the program prints."""
    units: Literal["metric", "us"] = section.choice("units", ("metric", "us"))
    section.close()
    return units


def _choices(
    document: Document, vessel: Vessel, files: HullFiles, *, sound: bool
) -> tuple[Settings, Frame]:
    axes, rules, method = (document.section(n) for n in ("axes", "rules", "method"))
    drafts, table = document.section("drafts"), document.section("hydrostatics")
    density, limits = document.section("density"), document.section("limits")
    rolling, evidence = document.section("rolling"), document.section("evidence")
    marks_from = drafts.choice("marks_from", (_BASE, _KEEL))
    table_from = table.choice("drafts_from", (_BASE, _KEEL), _BASE)
    keel = _keel_thickness(drafts, needed=_KEEL in (marks_from, table_from))
    x_origin = read_axes(axes)
    use, from_offsets = read_use(table, files)
    settings = Settings(
        x_origin=x_origin,
        units=read_units(document.section("output")),
        rule_set=rules.text("set"),
        rule_edition=rules.text("edition"),
        method=read_method(method, from_offsets=from_offsets),
        allowance=read_allowance(table, needed=files.table),
        keel_thickness=keel if marks_from == _KEEL else 0.0,
        interpolation=method.choice("interpolation", ("cubic", "linear"), "cubic"),
        use=use,
        layers=read_layers(density, from_offsets=from_offsets),
        kg_limit=limits.maybe("kg", LENGTH, Sign.POSITIVE),
        assumed=read_assumed(document.section("uncertainty")),
        correlations=read_correlations(document.sections("correlations")),
        roll_condition=read_roll_condition(rolling),
        overrides=read_overrides(document.sections("overrides")),
        evidence={key: evidence.text(key) for key in ("liquids", "lines", "weather", "drift")},
    )
    lpp = vessel.lpp if sound else BAD
    x_shift = lpp / 2.0 if x_origin == "amidships" else 0.0
    frame = Frame(
        lpp=lpp,
        beam=vessel.beam,
        hull=hull_of(vessel, BAD if "x_origin" in axes.failed else x_shift, known=sound),
        x_shift=x_shift,
        marks_down=settings.keel_thickness,
        table_down=keel if table_from == _KEEL else 0.0,
        table_density=given_density(table, "density"),
        relative_to=given_density(density, "relative_to"),
        table_stated=read_stated(table),
    )
    for section in (rules, method, drafts, table, density, limits, rolling, evidence):
        section.close()
    return settings, frame


def given_density(section: Section, key: str) -> float | None:
    """A density; BAD also when its section cannot be looked at."""
    value = section.maybe(key, DENSITY, Sign.POSITIVE)
    return value if section.readable and check(section, key, value, WATER) else BAD


def _keel_thickness(section: Section, *, needed: bool) -> float:
    if needed:
        return section.need("keel_thickness", LENGTH, Sign.NOT_NEGATIVE)
    value = section.maybe("keel_thickness", LENGTH, Sign.NOT_NEGATIVE)
    if value is not None and value > 0.0 and "marks_from" not in section.failed:
        expected = f'no keel thickness, since every draft is from the "{_BASE}"'
        section.fault(
            "keel_thickness", "value-wrong", quoted(section.text("keel_thickness")), expected
        )
    return 0.0
