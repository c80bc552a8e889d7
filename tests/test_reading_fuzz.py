"""Whatever stands in the files, reading gives a trial or a list of defects, never another error."""

from __future__ import annotations

import dataclasses
from typing import TYPE_CHECKING

from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st
from small_trial import BOTH, write

from incline.errors import FieldDataError
from incline.reading import HullRecord, read_offsets, read_trial
from incline.record import Trial

if TYPE_CHECKING:
    from collections.abc import Mapping
    from pathlib import Path


def attempt(folder: Path, files: Mapping[str, str | bytes | None]) -> None:
    """Either a record or a list of defects; anything else that is raised fails the test."""
    write(folder, files)
    for read, record in ((read_trial, Trial), (read_offsets, HullRecord)):
        try:
            outcome: object = read(folder)
        except FieldDataError as error:
            outcome = error.defects
            assert all(dataclasses.astuple(d)[2] and d.expected for d in error.defects)  # noqa: PT017
        assert isinstance(outcome, record) or outcome


FUZZ = settings(
    max_examples=150,
    deadline=None,  # the machine may be busy
    suppress_health_check=[HealthCheck.function_scoped_fixture],  # every example writes all files
)
CELLS = st.one_of(
    st.text(max_size=12),
    st.sampled_from(
        ["", "0", "-1", "1e9", "1e308", "1e-320", "nan", "slack", "P", "swings", '"', '""', "8'-3\"",
         "#", "a,b", "\r", "\0", "1 P", "-1 P", "50 %", "²", "٣", "9" * 4400]
    ),
)  # fmt: skip


@FUZZ
@given(name=st.sampled_from(sorted(BOTH)), data=st.binary(max_size=200))
def test_any_bytes_in_any_file(tmp_path: Path, name: str, data: bytes) -> None:
    attempt(tmp_path, {**BOTH, name: data})


@FUZZ
@given(name=st.sampled_from(sorted(BOTH)), data=st.data())
def test_any_cell_changed(tmp_path: Path, name: str, data: st.DataObject) -> None:
    lines = [line.split(",") for line in BOTH[name].split("\n")]
    for _ in range(data.draw(st.integers(1, 3))):
        line = lines[data.draw(st.integers(0, len(lines) - 1))]
        line[data.draw(st.integers(0, len(line) - 1))] = data.draw(CELLS)
    changed_text = "\n".join(",".join(line) for line in lines)
    attempt(tmp_path, {**BOTH, name: changed_text.encode("utf-8", "surrogatepass")})


@FUZZ
@given(name=st.sampled_from(sorted(BOTH)), data=st.data())
def test_any_slip_of_a_few_bytes(tmp_path: Path, name: str, data: st.DataObject) -> None:
    whole = bytearray(BOTH[name].encode())
    start = data.draw(st.integers(0, len(whole)))
    end = data.draw(st.integers(start, min(len(whole), start + 5)))
    whole[start:end] = data.draw(st.binary(max_size=5))
    attempt(tmp_path, {**BOTH, name: bytes(whole)})
