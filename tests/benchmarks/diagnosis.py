"""How often faults are found and rightly named: ``python tests/benchmarks/diagnosis.py``."""

import sys
from pathlib import Path

sys.path.insert(0, str(Path(__file__).resolve().parent.parent))

import simulated_faults as faults
from simulated_faults import LONG, SHORT, layout, rate

TRIALS = 4000
CASES = (
    ("liquid at tank top or bottom", faults.liquid, 0.93, 0.90),
    ("line, fender or ground holding", faults.mooring, 0.95, 0.90),
    ("slow drift", faults.drift, 0.90, 0.75),
    ("test weight misrecorded", faults.weight, 0.88, 0.85),
    ("one disturbed shift", faults.one_shift, 0.97, 0.78),
    ("wrong length or scale", faults.length, 0.85, 0.80),
    ("misread reading", faults.misread, 0.93, 0.90),
)


def main() -> None:
    print(f"Clean trials with any finding, of {TRIALS} (aim: at most 0.05)")
    for name, at in (
        ("9 shifts, 3 devices", layout()),
        ("7 shifts, 2 devices", layout(SHORT, 2, ())),
        ("13 shifts, 3 devices", layout(LONG, 3, ())),
        ("9 shifts, 3 devices, one reading missing", layout(missing=11)),
    ):
        print(f"  {name:<42}{rate(at, faults.clean, trials=TRIALS).found:.4f}")
    unsettled = rate(layout(), faults.unsettled, trials=TRIALS)
    print(
        f"Unsettled ship, a systematic cause named (aim: at most 0.10) {unsettled.systematic:.4f}"
    )
    print(f"{'fault':<34}{'found':>8}{'aim':>6}{'named':>8}{'aim':>6}")
    for cause, fault, found, named in CASES:
        rates = rate(layout(), fault, cause, trials=TRIALS)
        print(f"{cause:<34}{rates.found:>8.3f}{found:>6.2f}{rates.named:>8.3f}{named:>6.2f}")


if __name__ == "__main__":
    main()
