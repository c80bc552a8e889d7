"""The invented demo trials: their true ships, and the styles they are written in."""

from __future__ import annotations

from dataclasses import replace

from demo_chine import AVOCET, AVOCET_HEAD, AVOCET_PLACES, AVOCET_STYLE
from simulate import Mass, Scene, SlackTank, WallSided
from write_trial import FOOT, INCH, LONG_TON, Style, trial_tables, trial_toml

KESTREL = Scene(
    hull=WallSided(lpp=28.50, beam=8.40, chine=1.10, power=4, skeg=(2.4, 3.6, 0.25)),
    light=Mass("lightship", 291.40, 11.520, -0.008, 3.214),
    density=1.0185,
    allowance=0.006,
    deduct=(
        Mass("mooring gear on deck", 0.640, 22.10, 0.00, 4.35),
        Mass("yard's scaffolding", 1.250, 9.40, -1.10, 5.10),
        Mass("welding set", 0.310, 6.20, 1.80, 4.20),
    ),
    add=(
        Mass("anchor and chain, starboard", 1.180, 25.60, 1.20, 3.90),
        Mass("rescue boat", 0.920, 8.30, -2.60, 6.40),
    ),
    relocate=(Mass("towing hook", 0.870, 11.20, 0.40, 4.30, (7.50, 0.0, 4.85)),),
    people=(
        Mass("A. Nordgaard, surveyor in charge", 0.085, 10.0, 0.5, 4.9),
        Mass("B. Okoye, reads P1", 0.080, 6.0, 0.0, 2.3),
        Mass("C. Lindqvist, reads P2", 0.075, 14.0, 0.0, 2.3),
        Mass("D. Farrugia, reads P3", 0.080, 19.5, 0.0, 2.4),
    ),
    tanks=(
        SlackTank("DB 2 centre", "fresh water", "pressed full", 1.000, 9.60, 13.40, 0.00, 0.55),
        SlackTank("Wing 3 port", "gas oil", "empty", 0.0, 0.0, 0.0, 0.0, 0.0),
        SlackTank("Day tank", "gas oil", "slack", 0.850, 2.40, 7.80, 1.50, 1.45, 2.0, 2.4),
    ),
    weights=tuple(
        Mass(n, m, x, y, 4.60)
        for n, m, x, y in (
            ("A", 1.152, 12.0, -3.40),
            ("B", 1.148, 14.0, -3.40),
            ("C", 1.155, 12.0, 3.40),
            ("D", 1.146, 14.0, 3.40),
        )
    ),
    moves=(
        (("A", 3.10),), (("B", 3.10),), (("B", -3.40),), (("A", -3.40),),
        (("C", -3.10),), (("D", -3.10),), (("D", 3.40),), (("C", 3.40),),
    ),
    lengths={"P1": 3.215, "P2": 3.640, "P3": 3.050},
    zeros={"P1": 0.4 / 3.215, "P2": 0.35 / 3.640, "P3": 0.38 / 3.050},
)  # fmt: skip

KESTREL_HEAD = {
    "name": "Kestrel Sound", "number": "INV-2841", "depth": "3.90", "date": "2026-03-14",
    "place": "Fitting-out basin, Port Averil", "berth": "inner basin, bow to the west, slack lines",
    "weather": "overcast, wind 2 m/s from ahead", "water_depth": "6.2", "rules": "IMO",
    "P1": "engine room", "P2": "hold", "P3": "forward store",
}  # fmt: skip

KESTREL_STYLE = Style(
    decimals={"length": 3, "mass": 3, "reading": 0, "volume": 3, "area": 2, "density": 4},
    noise_reading=0.0009, noise_draft=0.004, noise_density=0.0003, seed=2841,
    trims=(-0.40, 0.0, 0.40, 0.80), even_keel=False, swings=("P3",), repeats=("P2",),
)  # fmt: skip
KESTREL_PLACES = (1.2, 7.0, 14.25, 21.0, 27.0)


def _us(name: str, tons: float, x: float, y: float, z: float, **to: tuple[float, ...]) -> Mass:
    place = tuple(v * FOOT for v in to["to"]) if "to" in to else None
    return Mass(name, tons * LONG_TON, x * FOOT, y * FOOT, z * FOOT, place)  # type: ignore[arg-type]


PELICAN = Scene(
    hull=WallSided(
        lpp=142.0 * FOOT, beam=36.0 * FOOT, chine=5.0 * FOOT, power=6,
        skeg=(210.0 * FOOT**3, 14.0 * FOOT, 1.2 * FOOT),
    ),
    light=_us("lightship", 742.6, 58.92, 0.30, 14.86),
    density=1.0245,
    allowance=0.008,
    deduct=(_us("staging", 2.35, 80.0, 4.0, 17.5), _us("spare chain", 1.10, 120.0, -3.0, 16.0)),
    add=(_us("liferafts", 0.85, 52.0, 0.0, 27.0), _us("galley stores gear", 1.40, 70.0, 5.0, 18.0)),
    relocate=(_us("cargo gear", 3.20, 40.0, -6.0, 17.0, to=(58.0, 0.0, 19.5)),),
    people=(
        _us("E. Marchetti, in charge", 0.08, 60.0, 2.0, 18.0),
        _us("F. Dube, reads P1", 0.08, 35.0, 0.0, 9.0),
        _us("G. Ito, reads P2 and U1", 0.08, 95.0, 0.0, 9.5),
    ),
    tanks=(
        SlackTank("No. 4 fuel, port", "diesel oil", "slack", 0.845, 900 * FOOT**3,
                  48 * FOOT, -9 * FOOT, 4.2 * FOOT, 14 * FOOT, 11 * FOOT),
        SlackTank("Fore peak", "salt water", "pressed full", 1.025, 640 * FOOT**3,
                  134 * FOOT, 0.0, 8.0 * FOOT),
    ),
    weights=tuple(
        _us(n, m, x, y, 17.4)
        for n, m, x, y in (
            ("1", 3.22, 62.0, -14.0), ("2", 3.18, 66.0, -14.0),
            ("3", 3.21, 62.0, 14.0), ("4", 3.19, 66.0, 14.0),
        )
    ),
    moves=tuple(
        tuple((n, y * FOOT) for n, y in m)
        for m in (
            (("1", 13.0),), (("2", 13.0),), (("2", -14.0),), (("1", -14.0),),
            (("3", -13.0),), (("4", -13.0),), (("4", 14.0),), (("3", 14.0),),
        )
    ),
    lengths={"P1": 12.5 * FOOT, "P2": 14.25 * FOOT, "U1": 26.0 * FOOT},
    zeros={"P1": 18 * INCH / (12.5 * FOOT), "P2": 20 * INCH / (14.25 * FOOT), "U1": 0.0},
)  # fmt: skip

PELICAN_HEAD = {
    "name": "Pelican Reach", "number": "INV-7705", "depth": str(16.5 * FOOT), "date": "2026-05-06",
    "place": "Pier 3, Halloran Creek", "berth": "head to the ebb, all lines slack",
    "weather": "clear, wind 3 knots astern", "water_depth": str(22.0 * FOOT), "rules": "US",
    "P1": "engine room trunk", "P2": "forward hold", "U1": "main deck, athwartships",
    "more": """
[report]
status = "issued"
number = 2
author = "E. Marchetti"
submitted_to = "the flag administration, through the organisation it recognises"

[[revisions]]
number = 1
date = 2026-05-08
description = "first issue"
by = "E. Marchetti"

[[revisions]]
number = 2
date = 2026-05-20
description = "drawing numbers added; figures unchanged"
by = "E. Marchetti"

[[documents]]
title = "Lines plan and hydrostatics"
number = "7705-101"
revision = "B"
date = "March 2024"
use = "hydrostatic table"

[[documents]]
title = "General arrangement"
number = "7705-003"
revision = "D"
use = "centres of the items"

[[deviations]]
what = "none"

[[signatures]]
part = "tested"
name = "E. Marchetti"

[condition]
state = "complete but for rafts and galley gear; nobody working aboard"
decks = "dry, swept"
bilges = "pumped dry, voids opened and looked into"
tanks = "empty ones opened; the fore peak filled until it ran from the air pipe"
secured = "cargo gear lashed, doors shut"
drafts = "read at 08:15 from a boat, the test party aboard"

[predicted]
gm = "5.00 ft"
heel = "2.7 deg"
freeboard = "5.5 ft"
by = "E. Marchetti"

[[compare]]
kind = "earlier"
name = "inclining test of 2019"
situation = "alteration"
displacement = "731.5 LT"
kg = "14.71 ft"
lcg = "58.60 ft"
x_origin = "after perpendicular"
""",
}  # fmt: skip

PELICAN_STYLE = Style(
    units="us",
    decimals={"length": 2, "mass": 2, "volume": 0, "area": 0, "density": 3},
    feet_inches=True, reading_fraction=16, noise_reading=0.0009, noise_draft=0.004,
    noise_density=0.0003, seed=7705, table_step=0.25 * FOOT,
    sample_depths=(3 * FOOT, 5 * FOOT, 3 * FOOT),
)  # fmt: skip
PELICAN_PLACES = tuple(f * FOOT for f in (6.0, 40.0, 71.0, 104.0, 136.0))

# The same hull with another outfit. A line comes taut when she heels to starboard, and P2 was
# measured 3 % too long.
DUNLIN = replace(
    KESTREL,
    light=Mass("lightship", 302.70, 11.740, -0.006, 3.168),
    density=1.0232,
    deduct=(
        Mass("workshop container", 1.860, 8.70, 0.30, 5.00),
        Mass("cable drums", 0.940, 19.80, -1.40, 4.45),
    ),
    add=(
        Mass("deck crane's hook and wire", 0.410, 16.20, 0.00, 6.90),
        Mass("fire monitor", 0.260, 10.10, 0.00, 8.20),
    ),
    relocate=(),
    people=(
        Mass("H. Castellano, surveyor in charge", 0.082, 10.5, -0.4, 4.9),
        Mass("I. Wroblewska, reads P1", 0.070, 6.0, 0.0, 2.3),
        Mass("J. Adeyemi, reads P2", 0.085, 14.0, 0.0, 2.3),
        Mass("K. Lund, reads P3", 0.090, 19.5, 0.0, 2.4),
    ),
    lengths={"P1": 3.180, "P2": 3.520, "P3": 3.240},
    zeros={"P1": 0.41 / 3.180, "P2": 0.38 / 3.520, "P3": 0.36 / 3.240},
    recorded={"P2": 3.626},
    line=(6.0, 0.13),
    rolls=((8, 52.3), (8, 53.4), (7, 46.0)),
)

DUNLIN_HEAD = {
    "name": "Dunlin Bight", "number": "INV-3096", "depth": "3.90", "date": "2026-04-21",
    "place": "Coal quay, Port Averil", "berth": "alongside to starboard, lines slacked by hand",
    "weather": "clear, wind 3 m/s from astern", "water_depth": "5.8", "rules": "IMO",
    "P1": "engine room", "P2": "hold", "P3": "forward store",
    "more": """
[rolling]
condition = "20 %"

[evidence]
lines = "not excluded"
weather = "log of wind and current, every ten minutes"
drift = "the day tank was sounded before and after, the same"
""",
}  # fmt: skip

DUNLIN_STYLE = replace(KESTREL_STYLE, seed=3096)

DEMOS = {
    "workboat-metric": (KESTREL, KESTREL_STYLE, KESTREL_HEAD, KESTREL_PLACES),
    "supply-vessel-us": (PELICAN, PELICAN_STYLE, PELICAN_HEAD, PELICAN_PLACES),
    "disturbed-metric": (DUNLIN, DUNLIN_STYLE, DUNLIN_HEAD, KESTREL_PLACES),
    "chine-metric": (AVOCET, AVOCET_STYLE, AVOCET_HEAD, AVOCET_PLACES),
}
CLEAN = ("workboat-metric", "supply-vessel-us")
"""Those with hydrostatics that nothing disturbed."""


def demo_files(
    name: str,
    *,
    rounded: bool = True,
    noisy: bool = True,
    units: str = "",
    semicolon: bool = False,
) -> dict[str, str]:
    """Files of a demo as shipped, or without the rounding of its figures or the noise in them."""
    scene, style, head, places = DEMOS[name]
    if not rounded:
        style = replace(style, decimals={}, feet_inches=False, reading_fraction=0)
    if not noisy:
        style = replace(style, noise_reading=0.0, noise_draft=0.0, noise_density=0.0)
    style = replace(style, units=units or style.units, semicolon=semicolon)
    return {"trial.toml": trial_toml(scene, style, head), **trial_tables(scene, style, places)}
