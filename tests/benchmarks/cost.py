"""What the program costs, as ratios within one run: ``python tests/benchmarks/cost.py``.

Whole processes are compared by their CPU time, five pairs in turn, medians given.
"""

import os
import resource
import statistics
import subprocess
import sys
import tempfile
import time
from pathlib import Path

ROOT = Path(__file__).resolve().parent.parent.parent
DEMO = str(ROOT / "demo_trials" / "workboat-metric")

# What `incline reduce` needs: the fit, the splines, the distributions, the command line.
IMPORTS = (
    "import numpy, scipy.constants, scipy.special, scipy.interpolate, typer;"
    "from statsmodels.regression.linear_model import WLS"
)
REDUCE = (
    f"import sys; sys.argv = ['incline', 'reduce', {DEMO!r}]; from incline.cli import main; main()"
)

DRAWING = "import matplotlib.figure, reportlab.platypus, reportlab.pdfbase.ttfonts"
REPORT = (
    f"import sys; sys.argv = ['incline', 'report', {DEMO!r}, '-o', sys.argv[1], '--force'];"
    "from incline.cli import main; main()"
)


def draws(trial) -> str:
    """A program that prints CPU seconds of drawing a million times, of the whole run, and MB."""
    return f"""
import time, resource
import numpy as np
from incline import read_trial
from incline.observations import observe
from incline.reduction import work_out
from incline.montecarlo import BLOCK, draw, simulate
trial = read_trial({str(trial)!r})
stage = work_out(trial, observe(trial))
sources, blocks, budgets = stage.model.sources, stage.blocks, stage.outcome.budgets
rng = np.random.default_rng(1)
draw(sources, blocks, BLOCK, rng)
began = time.process_time()
for _ in range(1_000_000 // BLOCK):
    draw(sources, blocks, BLOCK, rng)
drawing = time.process_time() - began
began = time.process_time()
simulate(stage.model, sources, blocks, budgets, seed=1, draws=1_000_000)
whole = time.process_time() - began
peak = resource.getrusage(resource.RUSAGE_SELF).ru_maxrss / 1024
print(drawing, whole, peak)
"""


FIRST_ORDER = f"""
import time
from incline import read_trial, reduce
from incline import reduction
trial = read_trial({DEMO!r})
began = time.process_time()
reduce(trial)
print(time.process_time() - began)
for _ in range(20): reduce(trial)
began = time.process_time()
for _ in range(200): reduce(trial)
print((time.process_time() - began) / 200)
from incline.observations import observe
stage = reduction.work_out(trial, observe(trial))
from incline.budget import budgets_of
from incline.correlation import blocks_of
from incline.model import KEYS
began = time.process_time()
for _ in range(200):
    blocks = blocks_of(stage.model.sources, ())
    budgets_of(stage.model, KEYS, stage.model.sources, blocks)
print((time.process_time() - began) / 200)
"""


def cpu(code: str, *arguments: str) -> float:
    """CPU seconds of a process of its own that runs ``code``."""
    before = resource.getrusage(resource.RUSAGE_CHILDREN)
    command = [sys.executable, "-c", code, *arguments]
    subprocess.run(command, check=True, stdout=subprocess.DEVNULL, cwd=ROOT)
    after = resource.getrusage(resource.RUSAGE_CHILDREN)
    return after.ru_utime + after.ru_stime - before.ru_utime - before.ru_stime


def said(code: str) -> list[float]:
    run = subprocess.run(
        [sys.executable, "-c", code], check=True, capture_output=True, text=True, cwd=ROOT
    )
    return [float(word) for word in run.stdout.split()]


def main() -> None:
    os.environ.setdefault("PYTHONDONTWRITEBYTECODE", "")
    cpu(REDUCE)
    pairs = [(cpu(IMPORTS), cpu(REDUCE)) for _ in range(5)]
    imports, reduce = (statistics.median(p[i] for p in pairs) for i in (0, 1))
    ratio = statistics.median(r / i for i, r in pairs)
    print(f"reduce {reduce:.2f} s, its imports alone {imports:.2f} s: {ratio:.2f} times")
    with tempfile.TemporaryDirectory() as folder:
        name = str(Path(folder) / "report.pdf")
        pairs = [(cpu(f"{IMPORTS};{DRAWING}"), cpu(REPORT, name)) for _ in range(5)]
    imports, report = (statistics.median(p[i] for p in pairs) for i in (0, 1))
    ratio = statistics.median(r / i for i, r in pairs)
    print(f"report {report:.2f} s, its imports alone {imports:.2f} s: {ratio:.2f} times")
    drawing, whole, peak = said(draws(DEMO))
    print(
        f"a million draws {whole:.2f} s, drawing the numbers alone {drawing:.2f} s:"
        f" {whole / drawing:.2f} times, peak memory {peak:.0f} MB"
    )
    first, settled, added = said(FIRST_ORDER)
    print(
        f"first-order uncertainty {1000 * added:.1f} ms of {1000 * settled:.1f} ms a warm reduction,"
        f" {100 * added / reduce:.2f} % of the whole command"
        f" (first reduction in a process {first:.2f} s)"
    )
    print(time.strftime("%Y-%m-%d"))


if __name__ == "__main__":
    main()
