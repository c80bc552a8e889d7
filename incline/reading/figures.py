"""A lightship's figures: from the JSON of a reduction, a small TOML file, or a section of one."""

from __future__ import annotations

import json
import math
from dataclasses import dataclass, replace
from pathlib import Path
from typing import TYPE_CHECKING, TypeGuard

from incline.errors import Defect, Where
from incline.papers import Known, OtherLightship
from incline.reading.collect import BAD, NOTHING, Collector, Sign, quoted
from incline.reading.csvtable import decode
from incline.reading.tomlfile import Document
from incline.reading.uncertainty import of_key
from incline.result import FORMAT
from incline.units import LENGTH, MASS

if TYPE_CHECKING:
    from incline.reading.tomlfile import Section
    from incline.units import Quantity

__all__ = ["FILES", "lightship_of_file", "lightship_of_section"]

FILES = "a .json file of incline reduce, or a .toml file"


def lightship_of_file(
    path: Path, file: str, expected: str, collector: Collector, named: Where | None = None
) -> OtherLightship | None:
    """The lightship of a .json or .toml file; None after a defect.

    ``file`` is its name as the user knows it, ``expected`` what may stand there, for the defects;
    ``named`` the place where another file names it, which is at fault when it cannot be opened.
    """
    kind, where = path.suffix.lower(), named or Where(file)
    try:
        data = path.read_bytes()
    except FileNotFoundError:
        missing = "no such file" if expected == FILES else "no such file or folder"
        if named:
            missing = f"no file {quoted(file)} there, counted from the trial's folder"
        collector.add(where, "file-missing", missing, expected)
        return None
    except OSError as error:
        found = error.strerror or "an error"
        if named:
            found = f"{quoted(file)}: {found}"
        collector.add(where, "file-unreadable", found, "a file that can be read")
        return None
    if path.name.lower() == "trial.toml" or kind not in (".json", ".toml"):
        hint = "give the folder" if path.name.lower() == "trial.toml" else ""
        collector.add(where, "file-unreadable", quoted(path.name), expected, hint)
        return None
    before = len(collector.defects)
    if kind == ".json":
        found_there = _of_json(file, data, collector)
    else:
        top = Document(data, collector, file).root()
        found_there = lightship_of_section(top)
        top.close()
    return found_there if len(collector.defects) == before else None


def lightship_of_section(top: Section, own: float | None = None) -> OtherLightship:
    """The lightship whose figures stand in one section; other keys are left for the caller.

    ``own`` [m] is its length between perpendiculars where the section states none.
    """
    name = top.text("name")
    stated = top.maybe("lpp", LENGTH, Sign.POSITIVE)
    lpp = own if stated is None else stated
    displacement = _stated(top, "displacement", MASS, Sign.POSITIVE)
    if displacement.value is None:
        top.missing("displacement", "a mass with its unit, t, kg, LT or lb")
    heights = _stated(top, "vcg", LENGTH), _stated(top, "kg", LENGTH)
    if heights[0].value is not None and heights[1].value is not None:
        top.fault("kg", "value-wrong", quoted(top.text("kg")), "vcg or kg, not both")
    lcg, shift = _stated(top, "lcg", LENGTH), _x_shift(top, lpp)
    tcg = _stated(top, "tcg", LENGTH, transverse=True)
    return OtherLightship(
        kind="earlier",
        name=name or ("" if top.path else Path(top.file).stem),
        displacement=displacement,
        vcg=heights[0] if heights[0].value is not None else heights[1],
        lcg=lcg if lcg.value is None else replace(lcg, value=lcg.value + shift),
        tcg=tcg,
        lpp=lpp,
        source="" if top.path else top.file,
        where=top.where(""),
    )


def _stated(
    top: Section,
    key: str,
    quantity: Quantity,
    sign: str = Sign.ANY,
    *,
    transverse: bool = False,
) -> Known:
    """A quantity and its uncertainty; value None when the file does not state it."""
    value = top.maybe(key, quantity, sign, transverse=transverse)
    said = of_key(top, key, quantity, value, sign)
    return Known(value=value, u=said.u if said else None)


def _x_shift(top: Section, lpp: float | None) -> float:
    """What brings an LCG to the after perpendicular [m]; the origin must be told with an LCG."""
    if top.value("lcg") is None and top.value("x_origin") is None:
        return 0.0
    if top.choice("x_origin", ("after perpendicular", "amidships")) == "after perpendicular":
        return 0.0
    if lpp is None:
        top.missing("lpp", "the length between perpendiculars, since x is from amidships")
        return BAD
    return lpp / 2.0


def _of_json(file: str, data: bytes, collector: Collector) -> OtherLightship | None:
    text = decode(file, data, collector)
    if text is None:
        return None
    try:
        whole = json.loads(text)
    except (ValueError, RecursionError) as error:
        row = error.lineno if isinstance(error, json.JSONDecodeError) else 0
        why = error.msg if isinstance(error, json.JSONDecodeError) else "values that can be read"
        collector.add(Where(file, row), "json-syntax", "something else", f"JSON: {why}")
        return None
    tree = _Tree(file, collector)
    version = tree.at(whole, "format")
    if isinstance(version, bool) or version != FORMAT:
        expected = f"{FORMAT}, as this version of incline reduce --json writes"
        collector.add(Where(file, 0, "format"), *_found(version), expected)
        return None
    trial = tree.at(whole, "trial")
    name, date = tree.at(trial, "name"), tree.at(trial, "date")
    return OtherLightship(
        kind="earlier",
        name=", ".join(filter(_printable, (name, date))) or Path(file).stem,
        source=file,
        where=Where(file),
        displacement=tree.estimate(whole, "displacement_t", required=True),
        vcg=tree.estimate(whole, "vcg_m"),
        lcg=tree.estimate(whole, "lcg_m"),
        tcg=tree.estimate(whole, "tcg_m"),
        lpp=tree.number(trial, "trial", "lpp_m", positive=True),
    )


def _printable(text: object) -> TypeGuard[str]:
    return isinstance(text, str) and bool(text) and text.isprintable()


def _found(value: object) -> tuple[str, str]:
    """Code and quotation of a value that is not what it should be."""
    if value is None:
        return "key-missing", NOTHING
    return "value-wrong", quoted(json.dumps(value, ensure_ascii=False))


@dataclass(frozen=True, slots=True)
class _Tree:
    """Looks values up in parsed JSON, whatever its shape, and collects defects."""

    file: str
    collector: Collector

    def at(self, parent: object, key: str) -> object:
        """The value of a key; None when there is none."""
        return parent.get(key) if isinstance(parent, dict) else None

    def estimate(self, whole: object, key: str, *, required: bool = False) -> Known:
        """One quantity of the lightship."""
        path = f"lightship.{key}"
        found = self.at(self.at(whole, "lightship"), key)
        if not isinstance(found, dict):
            expected = "an object with value and u"
            self.collector.add(Where(self.file, 0, path), *_found(found), expected)
            return Known(value=BAD)
        value = self.number(found, path, "value", positive=required)
        if value is None and required:
            where = Where(self.file, 0, f"{path}.value")
            self.collector.add(where, "key-missing", NOTHING, "a number above zero")
        return Known(
            value=value,
            u=self.number(found, path, "u", negative=False),
            dof=self.number(found, path, "degrees_of_freedom", positive=True),
        )

    def number(
        self, parent: object, path: str, key: str, *, positive: bool = False, negative: bool = True
    ) -> float | None:
        """A finite number; None when absent or null, BAD after a defect."""
        found = self.at(parent, key)
        if found is None:
            return None
        expected = "a number above zero" if positive else "a finite number"
        code = "value-wrong"
        if isinstance(found, int | float) and not isinstance(found, bool):
            value = float(found) if abs(found) < 1e12 else math.inf
            if not math.isfinite(value):
                code = "number-not-finite"
            elif positive and value <= 0.0:
                code = "number-not-positive"
            elif not negative and value < 0.0:
                code, expected = "number-negative", "zero or a number above zero"
            else:
                return value
        where = Where(self.file, 0, f"{path}.{key}")
        self.collector.defects.append(Defect(where, code, _found(found)[1], expected))
        return BAD
