"""The points that a report should have on record, each with its place in the trial's folder.

What stands here is printed in its section, and listed where it is not recorded.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

from incline.report.show import NOT_RECORDED
from incline.report.text import elide

if TYPE_CHECKING:
    from collections.abc import Iterable, Sequence

    from incline.record import Trial
    from incline.report.document import Sheet

__all__ = [
    "Asked", "about_environment", "about_papers", "about_predicted", "about_rules", "about_ship",
    "about_tables", "about_test", "about_vessel", "pairs_of",
]  # fmt: skip


@dataclass(frozen=True, slots=True)
class Asked:
    """One point: its label, where it is recorded, and the text printed; empty: not recorded."""

    label: str
    where: str
    text: str


def pairs_of(asked: Iterable[Asked]) -> list[tuple[str, str]]:
    """Label and text for a table of facts."""
    return [(a.label, a.text or NOT_RECORDED) for a in asked]


def _in_toml(section: str, *rows: tuple[str, str, str]) -> list[Asked]:
    """Points of one section of ``trial.toml``: label, key, text."""
    return [Asked(label, f"trial.toml, {section} {key}", text) for label, key, text in rows]


def about_vessel(sheet: Sheet) -> list[Asked]:
    """Who the ship is, and her principal dimensions."""
    vessel, show = sheet.reduction.trial.vessel, sheet.show
    return _in_toml(
        "[vessel]",
        ("Name", "name", vessel.name),
        ("Identity number", "number", vessel.number),
        ("Kind", "kind", vessel.kind),
        ("Flag", "flag", vessel.flag),
        ("Port of registry", "port", vessel.port),
        ("Builder", "builder", vessel.builder),
        ("Yard number", "yard_number", vessel.yard_number),
        ("Length, AP to FP", "lpp", show.full(vessel.lpp, "length")),
        ("Beam", "beam", show.full(vessel.beam, "length")),
        ("Depth", "depth", show.full(vessel.depth, "length")),
    )


def about_test(sheet: Sheet) -> list[Asked]:
    """When and where, and before whom."""
    occasion, show = sheet.reduction.trial.occasion, sheet.show
    depth, sent = occasion.water_depth, occasion.notice_date
    return _in_toml(
        "[test]",
        ("Date", "date", occasion.date.isoformat()),
        ("Begun, ended", "started, ended", _both(occasion.started, occasion.ended)),
        ("Place", "place", occasion.place),
        ("Witness", "witness", occasion.witness),
        ("Procedure sent ahead", "notice_date", "" if sent is None else sent.isoformat()),
        ("Berth and mooring", "berth", occasion.berth),
        ("Depth of water", "water_depth", "" if depth is None else show.full(depth, "length")),
        ("Tide", "tide", occasion.tide),
        ("Weather", "weather", occasion.weather),
        ("Notes", "notes", occasion.notes),
    )


def _both(started: str, ended: str) -> str:
    if not started and not ended:
        return ""
    return f"{started or NOT_RECORDED}, {ended or NOT_RECORDED}"


def about_environment(sheet: Sheet) -> list[Asked]:
    """Berth and surroundings during the test."""
    around = sheet.reduction.trial.environment
    speed = around.wind_speed
    return _in_toml(
        "[environment]",
        ("Shelter of the berth", "shelter", around.shelter),
        ("Mooring lines", "lines", around.lines),
        ("Gangway", "gangway", around.gangway),
        ("Wind", "wind", around.wind),
        ("Wind speed", "wind_speed", "" if speed is None else f"{sheet.show.plain(speed, 1)} m/s"),
        ("Current", "current", around.current),
    )


def about_ship(sheet: Sheet) -> list[Asked]:
    """The ship's own condition."""
    ship = sheet.reduction.trial.condition
    return _in_toml(
        "[condition]",
        ("Completeness, work aboard", "state", ship.state),
        ("Decks: rain, snow, ice", "decks", ship.decks),
        ("Bilges and voids", "bilges", ship.bilges),
        ("Tanks: how shown empty or full", "tanks", ship.tanks),
        ("Gear secured", "secured", ship.secured),
        ("As the drafts were read", "drafts", ship.drafts),
    )


def about_predicted(sheet: Sheet) -> list[Asked]:
    """What was worked out before the test."""
    trial, show = sheet.reduction.trial, sheet.show
    before, known = trial.papers.predicted, trial.occasion.gm_before
    gm = before.gm if before.gm is not None else known
    heel = before.heel
    board = before.freeboard
    return _in_toml(
        "[predicted]",
        ("GM", "gm", "" if gm is None else show.full(gm, "length")),
        ("Heel at the largest moment", "heel", "" if heel is None else f"{show.degrees(heel)}°"),
        ("Least freeboard then", "freeboard", "" if board is None else show.full(board, "length")),
        ("Worked out by", "by", before.by),
    )


def about_rules(sheet: Sheet) -> list[Asked]:
    """By which rules, and for whom."""
    trial = sheet.reduction.trial
    return [
        *_in_toml(
            "[rules]",
            ("Rule set", "set", trial.settings.rule_set),
            ("Edition", "edition", trial.settings.rule_edition),
        ),
        *_in_toml("[report]", ("Submitted to", "submitted_to", trial.papers.submitted_to)),
    ]


def about_papers(sheet: Sheet) -> list[Asked]:
    """Points that need sections of their own, as far as the trial has none."""
    papers = sheet.reduction.trial.papers
    signed = {s.part for s in papers.signatures}
    parts = ("tested", "calculated", "checked", "witnessed", "accepted")
    unsigned = [p for p in parts if p not in signed]
    drawn = "yes" if papers.documents else ""
    loose = [d.title for d in papers.documents if not (d.number and d.revision)]
    allowed = [d.what for d in papers.deviations if not (d.allowed_by or d.is_none)]
    allowed += [f"limit of {o.check}" for o in sheet.reduction.trial.settings.overrides
                if not o.allowed_by]  # fmt: skip
    return [
        *_in_toml("[report]", ("Author of the report", "author", papers.author)),
        Asked("Drawings and documents used", "trial.toml, [[documents]]", drawn),
        Asked("Number and revision" + _of(loose), "trial.toml, [[documents]] number, revision",
              "" if loose else "yes"),
        Asked("Deviations from rules or procedure, or “none”", "trial.toml, [[deviations]] what",
              "yes" if papers.deviations else ""),
        Asked("Who allowed" + _of(allowed), "trial.toml, allowed_by of [[deviations]] or"
              " [[overrides]]", "" if allowed else "yes"),
        Asked("Earlier, predicted or sister's lightship", "trial.toml, [[compare]]",
              "yes" if papers.others else ""),
        Asked("Who signs" + _of(unsigned), "trial.toml, [[signatures]]", "" if unsigned else "yes"),
    ]  # fmt: skip


def about_tables(trial: Trial) -> list[Asked]:
    """Points of the tables, told by the rows that lack them."""
    tanks = [
        t.name for t in trial.tanks if t.state == "slack" and t.level is None and not t.sounding
    ]
    items = [i.name for i in trial.items if not i.basis]
    people = "yes" if trial.people else ""
    shifts = {
        word: [str(s.number) for s in trial.shifts if not getattr(s, word)]
        for word in ("time", "weather", "tide")
    }
    return [
        Asked("People at the test", "trial.toml, [[people]]", people),
        *(
            Asked(label + _of([d.id for d in trial.devices if not getattr(d, key)]),
                  f"trial.toml, [[devices]] {key}",
                  "" if any(not getattr(d, key) for d in trial.devices) else "yes")
            for label, key in (("Place", "place"), ("Calibration", "calibration"),
                               ("Damping", "damping"), ("Who read", "read_by"))
        ),
        Asked("Certificate" + _of([w.id for w in trial.weights if not w.certificate]),
              "weights.csv, column certificate",
              "" if any(not w.certificate for w in trial.weights) else "yes"),
        *(
            Asked(f"{word.capitalize()} of shift{_of(found)}", f"shifts.csv, column {word}",
                  "" if found else "yes")
            for word, found in shifts.items()
        ),
        Asked("Depth of the sample" + _of([s.place for s in trial.samples if s.depth is None]),
              "density.csv, column depth",
              "" if any(s.depth is None for s in trial.samples) else "yes"),
        Asked("Temperature of the sample" + _of([s.place for s in trial.samples
              if s.temperature is None]), "density.csv, column temperature",
              "" if any(s.temperature is None for s in trial.samples) else "yes"),
        Asked("Sounding or level" + _of(tanks), "tanks.csv, column sounding or level",
              "" if tanks else "yes"),
        Asked("Basis of mass and centre" + _of(items), "ledger.csv, column basis",
              "" if items else "yes"),
    ]  # fmt: skip


_NAMED, _SHORT = 6, 32
"""Most names in one line, and most characters of each; of more names, the number is told."""


def _of(names: Sequence[str]) -> str:
    if not names:
        return ""
    shown = ", ".join(elide(name, _SHORT) for name in names[:_NAMED])
    more = len(names) - _NAMED
    return f": {shown} and {more} more" if more > 0 else f": {shown}"
