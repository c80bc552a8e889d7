"""A demo trial with offsets: a hard-chine vessel whose chine dips when she heels."""

from hull_scene import HullScene
from hull_ships import PATROL
from simulate import Mass, SlackTank
from write_trial import Style

AVOCET = HullScene(
    hull=PATROL,  # type: ignore[arg-type]
    light=Mass("lightship", 41.260, 8.105, 0.004, 2.302),
    density=1.0124,
    allowance=0.005,
    deduct=(
        Mass("shore-power cable and fenders", 0.140, 4.10, -1.20, 3.05),
        Mass("painter's staging", 0.210, 11.30, 0.90, 3.60),
    ),
    add=(
        Mass("workboat on its chocks", 0.385, 3.20, 0.00, 3.70),
        Mass("anchor, port", 0.095, 19.20, -0.30, 3.30),
    ),
    relocate=(Mass("towing bitts", 0.120, 6.40, 0.00, 3.10, (2.10, 0.0, 3.25)),),
    people=(
        Mass("M. Tavares, surveyor in charge", 0.080, 8.2, 0.3, 3.9),
        Mass("N. Eriksen, reads P1", 0.075, 4.6, 0.0, 1.6),
        Mass("O. Mbeki, reads P2", 0.085, 12.4, 0.0, 1.9),
    ),
    tanks=(
        SlackTank("Fuel, centre", "gas oil", "slack", 0.845, 0.780, 6.40, 0.00, 0.86, 1.60, 1.30, 0.95),
        SlackTank("Fresh water", "fresh water", "pressed full", 1.000, 0.620, 13.10, 0.40, 1.02),
        SlackTank("Fuel, aft", "gas oil", "empty", 0.0, 0.0, 0.0, 0.0, 0.0),
    ),
    weights=tuple(
        Mass(n, m, x, y, 3.22)
        for n, m, x, y in (
            ("A", 0.336, 7.6, -2.20), ("B", 0.334, 8.8, -2.20),
            ("C", 0.337, 7.6, 2.20), ("D", 0.335, 8.8, 2.20),
        )
    ),
    moves=(
        (("A", 1.95),), (("B", 1.95),), (("B", -2.20),), (("A", -2.20),),
        (("C", -1.95),), (("D", -1.95),), (("D", 2.20),), (("C", 2.20),),
    ),
    lengths={"P1": 2.310, "P2": 2.745, "P3": 2.180},
    zeros={"P1": 0.32 / 2.310, "P2": 0.30 / 2.745, "P3": 0.29 / 2.180},
    deflection=0.006,
    stations=19,
)  # fmt: skip

AVOCET_HEAD = {
    "name": "Avocet Narrows", "number": "INV-1967", "depth": "3.30", "date": "2026-06-18",
    "place": "Slip basin, Port Averil", "berth": "bow to the sluice, slack lines, fenders clear",
    "weather": "overcast, wind 1 m/s from ahead", "water_depth": "4.5", "rules": "IMO",
    "P1": "engine room", "P2": "forward cabin", "P3": "lazarette",
}  # fmt: skip

AVOCET_STYLE = Style(
    decimals={"length": 3, "mass": 3, "reading": 0, "volume": 3, "density": 4},
    noise_reading=0.0009, noise_draft=0.003, noise_density=0.0003, seed=1967,
    sample_depths=(0.4, 0.8, 0.4), swings=("P3",), repeats=("P2",),
)  # fmt: skip
AVOCET_PLACES = (0.9, 5.6, 10.2, 14.8, 18.6)
