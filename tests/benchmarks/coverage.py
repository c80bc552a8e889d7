"""How often the intervals hold the truth: ``python tests/benchmarks/coverage.py`` (a few minutes)."""

import sys
import tempfile
from pathlib import Path

sys.path.insert(0, str(Path(__file__).resolve().parent.parent))

from demos import CLEAN, demo_files
from simulated_slopes import LAYOUTS, MIXES, coverage
from simulated_trials import end_to_end

from incline import read_trial


def main() -> None:
    print(
        "GM: share of 95 % intervals that hold the truth, median half-width in % of GM; 2000 trials"
    )
    print(f"{'layout':<36}{'ship, reading, device [%]':<28}{'lengths unknown':<20}lengths stated")
    for layout, (moments, devices, missing) in LAYOUTS.items():
        for mix in MIXES:
            cells = []
            for known in (False, True):
                found = coverage(moments, devices, mix, missing=missing, lengths_known=known)
                cells.append(f"{found.share:.4f}  {100 * found.half_width:5.2f}")
            print(f"{layout:<36}{mix!s:<28}{cells[0]:<20}{cells[1]}")
    print("\nWhole trials: shares for displacement, KG, LCG, TCG; median U [t, m]; 2000 trials")
    for name in CLEAN:
        with tempfile.TemporaryDirectory() as folder:
            for file, text in demo_files(name, rounded=False, noisy=False).items():
                Path(folder, file).write_text(text, encoding="utf-8")
            exact = read_trial(folder)
        for stated in (False, True):
            shares, widths = end_to_end(name, exact, 2000, lengths_stated=stated)
            print(f"{name}, lengths {'stated' if stated else 'assumed'}: {shares} {widths}")


if __name__ == "__main__":
    main()
