"""A trial with as much in it as a large ship's, and names that hardly fit: for the paper only."""

from __future__ import annotations

from dataclasses import replace
from typing import TYPE_CHECKING

from demos import KESTREL, KESTREL_HEAD, KESTREL_PLACES, KESTREL_STYLE
from simulate import Mass, SlackTank
from write_trial import trial_tables, trial_toml

if TYPE_CHECKING:
    from pathlib import Path

_WORDS = "Δεξαμενή καυσίμου, Łódź prêt-à-porter Ægir Øresund naïve Straße Çeşme čtyři Ἀχιλλεύς "


def long_name(start: str, length: int = 120) -> str:
    """A name of so many characters, Greek and accented letters among them."""
    return f"{start} {_WORDS * 3}"[:length].strip().ljust(length, "ω")


ITEMS, DEVICES, TANKS = 60, 12, 40
_SPREAD = [(n % 10, n // 10) for n in range(60)]


def _items(kind: str, first: int, last: int) -> tuple[Mass, ...]:
    made = []
    for n in range(first, last):
        across, along = _SPREAD[n]
        to = (14.0, 0.0, 4.0) if kind == "moved" else None
        made.append(
            Mass(
                long_name(f"{kind} {n:02d}"), 0.02, 4.0 + 3.0 * along, -2.0 + 0.4 * across, 4.2, to
            )
        )
    return tuple(made)


def _tanks() -> tuple[SlackTank, ...]:
    made = []
    for n in range(TANKS):
        across, along = _SPREAD[n]
        state = ("slack", "pressed full", "empty")[n % 3]
        volume = 0.0 if state == "empty" else 0.08
        free = (0.5, 0.4) if state == "slack" else (0.0, 0.0)
        made.append(
            SlackTank(long_name(f"Tank {n:02d}"), "μαζούτ & eau", state, 0.9 if volume else 0.0,
                      volume, 5.0 + 4.0 * along, -1.8 + 0.4 * across, 0.8, *free)
        )  # fmt: skip
    return tuple(made)


NAMES = tuple(long_name(f"P{n:02d}") for n in range(DEVICES))
VESSEL = long_name("Ψαρά")
SCENE = replace(
    KESTREL,
    deduct=_items("off", 0, 30),
    add=_items("on", 30, 45),
    relocate=_items("moved", 45, ITEMS),
    tanks=_tanks(),
    lengths={name: 3.0 + 0.05 * n for n, name in enumerate(NAMES)},
    zeros={name: 0.12 + 0.001 * n for n, name in enumerate(NAMES)},
)
_PAPERS = """
[report]
status = "issued"
number = 3
author = "{author}"
submitted_to = "{authority}"

[[revisions]]
number = 2
date = 2026-03-20
description = "{text}"
by = "{author}"

[[revisions]]
number = 3
date = 2026-04-01
description = "{text}"

[[documents]]
title = "{text}"
number = "{text}"
revision = "C"
date = "May 2019"
use = "{text}"

[[deviations]]
what = "{text}"
reason = "{text}"
allowed_by = "{authority}"

[[anomalies]]
what = "{text}"
explanation = "{text}"

[[signatures]]
part = "tested"
name = "{author}"
organisation = "{authority}"

[predicted]
gm = "1.00 m"
heel = "2.5 deg"
freeboard = "1.40 m"
by = "{author}"

[[compare]]
kind = "earlier"
name = "{text}"
situation = "alteration"
displacement = "288.0 t"
kg = "3.20 m"
u_kg = "0.02 m"
lcg = "11.50 m"
x_origin = "after perpendicular"

[condition]
state = "{text}"
bilges = "{text}"

[environment]
lines = "{text}"
wind = "{text}"
"""


def papers() -> str:
    """Sections of ``trial.toml`` that a demo does not have, every text long."""
    return _PAPERS.format(
        author=long_name("Ἀθηνᾶ"), authority=long_name("Αρχή"), text=long_name("Σχέδιο")
    )


def write_large(folder: Path) -> Path:
    """Write the trial into a new folder."""
    style = replace(KESTREL_STYLE, swings=(NAMES[2],), repeats=(NAMES[1],))
    head = {
        **KESTREL_HEAD,
        "name": VESSEL,
        "more": papers(),
        **dict.fromkeys(NAMES, long_name("χώρος")),
    }
    files = {
        "trial.toml": trial_toml(SCENE, style, head),
        **trial_tables(SCENE, style, KESTREL_PLACES),
    }
    shifts = files["shifts.csv"].splitlines()
    rows = [
        f"{shifts[0]},weather,tide",
        *(f"{s},{long_name('ἄνεμος')[:90].replace(',', ' ')},ebb" for s in shifts[1:]),
    ]
    files["shifts.csv"] = "\n".join(rows) + "\n"
    folder.mkdir(parents=True, exist_ok=True)
    for name, text in files.items():
        (folder / name).write_text(text, encoding="utf-8", newline="\n")
    return folder
