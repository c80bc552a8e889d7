"""When, where and in what surroundings the test was held: sections of ``trial.toml``."""

from __future__ import annotations

import datetime
import re
from typing import TYPE_CHECKING

from incline.reading.collect import Sign, quoted
from incline.reading.tomlfile import shown
from incline.record import Condition, Environment, Occasion
from incline.units import LENGTH, SPEED

if TYPE_CHECKING:
    from incline.reading.tomlfile import Section

__all__ = [
    "read_condition", "read_date", "read_environment", "read_hydrometer", "read_occasion",
]  # fmt: skip

_RANGE = re.compile(r"([0-9]*\.?[0-9]+)\s*(?:to|-|–)\s*([0-9]*\.?[0-9]+)")


def read_occasion(section: Section) -> Occasion:
    """The section ``[test]``."""
    date = read_date(section, "date", required=True)
    occasion = Occasion(
        date=date or datetime.date.min,
        place=section.text("place", required=True),
        berth=section.text("berth"),
        weather=section.text("weather"),
        water_depth=section.maybe("water_depth", LENGTH, Sign.POSITIVE),
        notes=section.text("notes"),
        notice_date=_notice(section, date),
        gm_before=section.maybe("gm_before", LENGTH),
        started=section.text("started"),
        ended=section.text("ended"),
        tide=section.text("tide"),
        witness=section.text("witness"),
    )
    section.close()
    return occasion


_DATE = "a date written year-month-day, such as 2026-03-14"


def read_date(section: Section, key: str, *, required: bool = False) -> datetime.date | None:
    """A date; None when absent, and after a defect."""
    found = section.value(key)
    if found is None and required:
        section.missing(key, _DATE)
    if found is None or type(found) is datetime.date:  # one with a time of day is a subclass
        return found
    text, expected = found.strip() if isinstance(found, str) else "", _DATE
    try:
        if re.fullmatch(r"[0-9]{4}-[0-9]{2}-[0-9]{2}", text):
            return datetime.date.fromisoformat(text)
    except ValueError:  # such as the 30th of February
        expected = "a day of the calendar: there is no such day"
    section.fault(key, "value-wrong", quoted(shown(found)), expected)
    return None


def _notice(section: Section, held: datetime.date | None) -> datetime.date | None:
    """The day on which the procedure was sent, not after the test."""
    sent = read_date(section, "notice_date")
    if sent is not None and held is not None and sent > held:
        expected = f"a day not after the test of {held.isoformat()}"
        section.fault("notice_date", "value-wrong", quoted(sent.isoformat()), expected)
    return sent


def read_environment(section: Section) -> Environment:
    """The section ``[environment]``; every key is optional."""
    found = Environment(
        shelter=section.text("shelter"),
        lines=section.text("lines"),
        gangway=section.text("gangway"),
        wind=section.text("wind"),
        current=section.text("current"),
        wind_speed=section.maybe("wind_speed", SPEED, Sign.NOT_NEGATIVE),
    )
    section.close()
    return found


def read_condition(section: Section) -> Condition:
    """The section ``[condition]``; every key is optional."""
    keys = ("state", "decks", "bilges", "tanks", "secured", "drafts")
    found = Condition(**{key: section.text(key) for key in keys})
    section.close()
    return found


def read_hydrometer(section: Section) -> tuple[float, float] | None:
    """The range of the hydrometer in ``[instruments]``, such as ``"0.999 to 1.030"``."""
    text = section.text("hydrometer_range")
    section.close()
    if not text:
        return None
    match = _RANGE.fullmatch(text)
    ends = (float(match[1]), float(match[2])) if match else (0.0, 0.0)
    if ends[0] < ends[1]:
        return ends
    expected = "two relative densities, the smaller first, such as 0.999 to 1.030"
    section.fault("hydrometer_range", "value-wrong", quoted(text), expected)
    return None
