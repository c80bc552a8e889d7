"""Which description of the hull counts, and the choices that need its offsets."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING, Literal, get_args

from incline.reading.collect import quoted
from incline.record import Method

if TYPE_CHECKING:
    from incline.reading.tomlfile import Section

__all__ = ["HullFiles", "read_layers", "read_method", "read_use"]


@dataclass(frozen=True, slots=True)
class HullFiles:
    """Which of ``hydrostatics.csv`` and ``offsets.csv`` a trial has, one of them at least."""

    table: bool
    offsets: bool


def read_use(section: Section, files: HullFiles) -> tuple[Literal["offsets", "table"], bool]:
    """Which of the two counts where both are there, and whether it is the offsets."""
    use: Literal["offsets", "table"] = section.choice("use", ("offsets", "table"), "offsets")
    said = section.value("use") is not None and "use" not in section.failed
    if said and not (files.table and files.offsets):
        absent = "hydrostatics.csv" if files.offsets else "offsets.csv"
        expected = f"no choice, since there is no {absent}"
        section.fault("use", "value-wrong", quoted(section.text("use")), expected)
    return use, files.offsets and (use == "offsets" or not files.table)


def read_method(section: Section, *, from_offsets: bool) -> Method | None:
    """How the righting levers are taken; None when the trial leaves the choice to the program."""
    methods: tuple[Method, ...] = get_args(Method)
    if section.value("heel") is None:
        return None
    method = section.choice("heel", methods)
    if method == "heeled-hull" and not from_offsets:
        _needs_offsets(section, "heel")
    return method


def read_layers(section: Section, *, from_offsets: bool) -> bool:
    """Whether the water counts as layers by the depths of the samples."""
    layers = section.choice("profile", ("mixed", "layers"), "mixed") == "layers"
    if layers and not from_offsets:
        _needs_offsets(section, "profile")
    return layers


def _needs_offsets(section: Section, key: str) -> None:
    expected = "another choice, since this one needs offsets.csv there and in use"
    section.fault(key, "value-wrong", quoted(section.text(key)), expected)
