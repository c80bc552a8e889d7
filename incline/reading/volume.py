"""How a displaced volume counts, in ``[hydrostatics]`` for a table and in ``[offsets]``."""

from __future__ import annotations

from typing import TYPE_CHECKING

from incline.reading.collect import BAD, Sign, quoted
from incline.reading.tomlfile import shown
from incline.reading.uncertainty import of_key, present
from incline.units import FRACTION, LENGTH

if TYPE_CHECKING:
    from incline.reading.tomlfile import Section
    from incline.record import Stated

__all__ = ["read_allowance", "read_stated"]


def read_allowance(section: Section, *, needed: bool) -> float | None:
    """Allowance for shell and appendages on a moulded volume; None when the volume is extreme.

    Unless ``needed`` the section need not say which it is, and then gives None too.
    """
    if not needed and section.value("volume") is None:
        section.maybe("allowance", FRACTION, Sign.NOT_NEGATIVE)
        return None
    moulded = section.choice("volume", ("moulded", "extreme")) == "moulded"
    if "volume" in section.failed:
        return section.maybe("allowance", FRACTION, Sign.NOT_NEGATIVE)
    if moulded:
        return section.need("allowance", FRACTION, Sign.NOT_NEGATIVE)
    if section.value("allowance") is not None:
        found = quoted(shown(section.value("allowance")))
        section.fault("allowance", "value-wrong", found, "no allowance on an extreme volume")
    return None


def read_stated(section: Section) -> dict[str, Stated]:
    """Uncertainties of the hydrostatics: volume as a fraction, KM and LCB [m]."""
    return present(
        volume=of_key(section, "volume", FRACTION, 1.0, Sign.POSITIVE),
        km=of_key(section, "km", LENGTH, BAD, share=False),
        lcb=of_key(section, "lcb", LENGTH, BAD, share=False),
    )
