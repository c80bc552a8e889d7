"""README.md tells the truth: its commands are those of CI, its Python runs."""

import contextlib
import io
import re

from conftest import ROOT

README = (ROOT / "README.md").read_text(encoding="utf-8")


def test_ci_runs_the_tests_command_of_the_readme():
    command = next(line.strip() for line in README.splitlines() if "-m pytest" in line)
    assert command in (ROOT / ".ci" / "run").read_text(encoding="utf-8").splitlines()


def test_python_example_runs(monkeypatch):
    monkeypatch.chdir(ROOT)
    code = re.search(r"```python\n(.*?)```", README, re.DOTALL)
    assert code is not None
    said = io.StringIO()
    with contextlib.redirect_stdout(said):
        exec(compile(code[1], "README.md", "exec"), {})  # noqa: S102 - the example itself
    assert re.match(r"\d+\.\d\d t, KG \d\.\d{3} m\n", said.getvalue())
