"""The issue of the report, and what it says besides measurements: sections of ``trial.toml``."""

from __future__ import annotations

import datetime
import itertools
from dataclasses import replace
from typing import TYPE_CHECKING

from incline.errors import InclineError
from incline.papers import (
    Anomaly,
    Deviation,
    Document,
    OtherLightship,
    Papers,
    Predicted,
    Revision,
    Signature,
)
from incline.reading.collect import NOTHING, Sign, nearest, quoted
from incline.reading.figures import FILES, lightship_of_file, lightship_of_section
from incline.reading.occasion import read_date
from incline.situations import situation_named, situations
from incline.units import ANGLE, LENGTH

if TYPE_CHECKING:
    from collections.abc import Sequence
    from pathlib import Path
    from typing import Literal

    from incline.reading.tomlfile import Document as TomlFile
    from incline.reading.tomlfile import Section

__all__ = ["SECTIONS", "read_papers"]

SECTIONS = (
    "report", "revisions", "documents", "deviations", "anomalies", "signatures", "predicted",
    "compare",
)  # fmt: skip
_STATED = ("displacement", "kg", "vcg", "lcg", "tcg", "x_origin", "lpp")
"""Keys that give a lightship's figures in the section itself."""


def read_papers(file: TomlFile, folder: Path, lpp: float, held: datetime.date) -> Papers:
    """All of them; every section may be absent.

    ``lpp`` [m] serves another lightship's LCG; ``held`` is the day of the test, `datetime.date.min`
    where it is not known.
    """
    head = file.section("report")
    status: Literal["draft", "issued"] = head.choice("status", ("draft", "issued"), "draft")
    number = _number(head, "number")
    author, submitted_to = head.text("author"), head.text("submitted_to")
    history = file.sections("revisions")
    revisions = tuple(_revision(s) for s in history)
    if status == "issued":
        _check_issue(head, number, revisions)
        _check_history(history, revisions, held)
    head.close()
    return Papers(
        status=status,
        number=number,
        author=author,
        submitted_to=submitted_to,
        revisions=revisions,
        documents=tuple(_document(s) for s in file.sections("documents")),
        deviations=tuple(_deviation(s) for s in file.sections("deviations")),
        anomalies=tuple(_anomaly(s) for s in file.sections("anomalies")),
        signatures=tuple(_signature(s) for s in file.sections("signatures")),
        predicted=_predicted(file.section("predicted")),
        others=tuple(
            found for s in file.sections("compare") if (found := _other(s, folder, lpp)) is not None
        ),
    )


def _number(section: Section, key: str, *, required: bool = False) -> str:
    """A number of an issue, as text or as a whole number."""
    found = section.value(key)
    if isinstance(found, int) and not isinstance(found, bool) and 0 <= found < 10_000:
        return str(found)
    return section.text(key, required=required)


def _check_issue(head: Section, number: str, revisions: Sequence[Revision]) -> None:
    """An issue has a number, and its history ends with it."""
    if not number:
        if "number" not in head.failed:
            head.missing("number", "the number of the issue")
    elif not revisions:
        expected = f"a section [[revisions]] with number {quoted(number)}"
        head.fault("number", "key-missing", NOTHING, expected)
    elif revisions[-1].number != number and revisions[-1].number:
        expected = f"the number of the last of [[revisions]], {quoted(revisions[-1].number)}"
        head.fault("number", "value-wrong", quoted(number), expected)


def _check_history(
    history: Sequence[Section], revisions: Sequence[Revision], held: datetime.date
) -> None:
    """Issues follow the test and one another, each with a number of its own, from 1 upwards."""
    for section, revision in zip(history, revisions, strict=True):
        if revision.number.isdecimal() and int(revision.number) == 0:
            section.fault(
                "number", "value-wrong", quoted(revision.number), "a number from 1 upwards"
            )
        if datetime.date.min < revision.date < held:
            expected = f"a day not before that of the test, {held.isoformat()}"
            section.fault("date", "value-wrong", quoted(revision.date.isoformat()), expected)
    pairs = zip(history[1:], itertools.pairwise(revisions), strict=False)
    for n, (section, (before, after)) in enumerate(pairs, start=1):
        if datetime.date.min < after.date < before.date:
            expected = f"a day not before that of the revision above, {before.date.isoformat()}"
            section.fault("date", "value-wrong", quoted(after.date.isoformat()), expected)
        if not after.number:
            continue
        earlier = [r.number.casefold() for r in revisions[:n]]
        falls = (
            before.number.isdecimal()
            and after.number.isdecimal()
            and int(after.number) <= int(before.number)
        )
        if after.number.casefold() in earlier or falls:
            expected = f"a number of its own, after {quoted(before.number)} of the revision above"
            section.fault("number", "value-wrong", quoted(after.number), expected)


def _revision(section: Section) -> Revision:
    revision = Revision(
        number=_number(section, "number", required=True),
        date=read_date(section, "date", required=True) or datetime.date.min,
        description=section.text("description", required=True),
        by=section.text("by"),
    )
    section.close()
    return revision


def _document(section: Section) -> Document:
    found = Document(
        title=section.text("title", required=True),
        number=section.text("number"),
        revision=_number(section, "revision"),
        date=_day(section),
        use=section.text("use"),
    )
    section.close()
    return found


def _day(section: Section) -> str:
    """A date of a drawing: a day, or in words such as ``May 2019``."""
    found = section.value("date")
    return found.isoformat() if type(found) is datetime.date else section.text("date")


def _deviation(section: Section) -> Deviation:
    found = Deviation(
        what=section.text("what", required=True),
        reason=section.text("reason"),
        allowed_by=section.text("allowed_by"),
    )
    section.close()
    return found


def _anomaly(section: Section) -> Anomaly:
    found = Anomaly(
        what=section.text("what", required=True),
        explanation=section.text("explanation", required=True),
    )
    section.close()
    return found


def _signature(section: Section) -> Signature:
    part: Literal["tested", "calculated", "checked", "witnessed", "accepted"] = section.choice(
        "part", ("tested", "calculated", "checked", "witnessed", "accepted")
    )
    found = Signature(
        part=part,
        name=section.text("name", required=True),
        organisation=section.text("organisation"),
    )
    section.close()
    return found


def _predicted(section: Section) -> Predicted:
    found = Predicted(
        gm=section.maybe("gm", LENGTH),
        heel=section.maybe("heel", ANGLE, Sign.POSITIVE),
        freeboard=section.maybe("freeboard", LENGTH, Sign.POSITIVE),
        by=section.text("by"),
    )
    section.close()
    return found


def _other(section: Section, folder: Path, lpp: float) -> OtherLightship | None:
    """A section ``[[compare]]``: figures of its own, or the name of a file that has them."""
    kind: Literal["predicted", "earlier", "sister"] = section.choice(
        "kind", ("predicted", "earlier", "sister")
    )
    situation = _situation(section)
    name, file = section.text("name"), section.text("file")
    found: OtherLightship | None
    if file:
        found = _of_file(section, folder, file)
    else:
        found = lightship_of_section(section, None if kind == "sister" else lpp)
    section.close()
    if found is None:
        return None
    return replace(
        found,
        kind=kind,
        name=name or found.name or f"{kind} lightship",
        situation=situation,
        where=section.where("kind"),
    )


def _of_file(section: Section, folder: Path, file: str) -> OtherLightship | None:
    for key in _STATED:
        if section.value(key) is not None:
            section.fault(key, "value-wrong", quoted(file), "figures here or a file, not both")
    place = section.where("file")
    return lightship_of_file(folder / file, file, FILES, section.collector, place)


def _situation(section: Section) -> str:
    """The id of a situation; empty when absent and after a defect."""
    name = section.text("situation")
    if not name:
        return ""
    try:
        return situation_named(name).id
    except InclineError:
        known = [s.id for s in situations()]
        expected = "one of the situations " + ", ".join(known)
        section.fault("situation", "value-wrong", quoted(name), expected, nearest(name, known))
        return ""
