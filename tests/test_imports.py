"""What each command loads: heavy packages only where they are needed."""

import json
import subprocess
import sys

import pytest
from conftest import DEMO_TRIALS

HEAVY = {"numpy", "scipy", "statsmodels", "pandas", "matplotlib", "reportlab"}


def loaded(*arguments: str) -> set[str]:
    """Heavy packages a command has loaded when it ends, in a process of its own."""
    code = (
        "import json, sys\n"
        "from incline import cli\n"
        f"sys.argv = ['incline', *{list(arguments)!r}]\n"
        "try:\n    cli.main()\nexcept SystemExit as end:\n    assert not end.code, end.code\n"
        "print('\\n' + json.dumps(sorted(sys.modules)))\n"
    )
    run = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=True)
    return HEAVY & {m.split(".")[0] for m in json.loads(run.stdout.splitlines()[-1])}


@pytest.mark.parametrize("arguments", [["--help"], ["--version"], ["reduce", "--help"]])
def test_help_loads_nothing_heavy(arguments):
    assert loaded(*arguments) == set()


def test_reduce_draws_nothing():
    assert not loaded("reduce", str(DEMO_TRIALS / "workboat-metric")) & {"matplotlib", "reportlab"}


def test_package_import_loads_nothing_heavy():
    code = f"import sys, incline; print([m for m in sys.modules if m in {sorted(HEAVY)!r}])"
    run = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=True)
    assert run.stdout.strip() == "[]"
