"""A lightship to compare: from a trial folder, the JSON of a reduction, or a small TOML file."""

from __future__ import annotations

import json
import math
from dataclasses import dataclass, replace
from pathlib import Path
from typing import TYPE_CHECKING, Literal, TypeGuard

from incline.contract import FORMAT
from incline.errors import Defect, FieldDataError, Where
from incline.reading import read_trial
from incline.reading.collect import BAD, NOTHING, Collector, Sign, quoted
from incline.reading.csvtable import decode
from incline.reading.tomlfile import Document
from incline.reading.uncertainty import of_key
from incline.reduction import reduce
from incline.result import Estimate
from incline.units import LENGTH, MASS

if TYPE_CHECKING:
    from incline.reading.tomlfile import Section
    from incline.units import Quantity

__all__ = ["Figures", "read_pair"]

_FORMS = "a trial folder, a .json file of incline reduce, or a .toml file"


@dataclass(frozen=True, slots=True, kw_only=True)
class Figures:
    """Lightship displacement [t], VCG, LCG from the after perpendicular, TCG to starboard [m].

    ``lpp`` [m] is None when not stated. ``units`` are those of a trial, None for other sources.
    """

    name: str
    path: str
    displacement: Estimate
    vcg: Estimate
    lcg: Estimate
    tcg: Estimate
    lpp: float | None
    units: Literal["metric", "us"] | None = None


def read_pair(old: Path, new: Path) -> tuple[Figures, Figures]:
    """Both lightships; raises FieldDataError with the defects of both."""
    collector = Collector()
    pair = _read(old, collector), _read(new, collector)
    if collector.defects or pair[0] is None or pair[1] is None:
        raise FieldDataError(collector.defects)
    return pair[0], pair[1]


def _read(path: Path, collector: Collector) -> Figures | None:
    """One lightship; its defects name the file as the user did. None after a defect."""
    if path.is_dir():
        return _of_trial(path, collector)
    file, kind = str(path), path.suffix.lower()
    try:
        data = path.read_bytes()
    except FileNotFoundError:
        collector.add(Where(file), "file-missing", "no such file or folder", _FORMS)
        return None
    except OSError as error:
        found = error.strerror or "an error"
        collector.add(Where(file), "file-unreadable", found, "a file that can be read")
        return None
    if path.name.lower() == "trial.toml" or kind not in (".json", ".toml"):
        hint = "give the folder" if path.name.lower() == "trial.toml" else ""
        collector.add(Where(file), "file-unreadable", quoted(path.name), _FORMS, hint)
        return None
    before = len(collector.defects)
    figures = (_of_json if kind == ".json" else _of_toml)(file, data, collector)
    return figures if len(collector.defects) == before else None


def _of_trial(path: Path, collector: Collector) -> Figures | None:
    try:
        trial = read_trial(path)
        light = reduce(trial).outcome.lightship
    except FieldDataError as error:
        for defect in error.defects:
            here = str(path / defect.where.file)
            collector.defects.append(replace(defect, where=replace(defect.where, file=here)))
        return None
    return Figures(
        name=f"{trial.vessel.name}, {trial.occasion.date.isoformat()}",
        path=str(path),
        displacement=light.displacement,
        vcg=light.vcg,
        lcg=light.lcg,
        tcg=light.tcg,
        lpp=trial.vessel.lpp,
        units=trial.settings.units,
    )


def _of_toml(file: str, data: bytes, collector: Collector) -> Figures:
    top = Document(data, collector, file).root()
    name = top.text("name")
    lpp = top.maybe("lpp", LENGTH, Sign.POSITIVE)
    displacement = _stated(top, "displacement", MASS, Sign.POSITIVE)
    if displacement.value is None:
        top.missing("displacement", "a mass with its unit, t, kg, LT or lb")
    heights = _stated(top, "vcg", LENGTH), _stated(top, "kg", LENGTH)
    if heights[0].value is not None and heights[1].value is not None:
        top.fault("kg", "value-wrong", quoted(top.text("kg")), "vcg or kg, not both")
    lcg, shift = _stated(top, "lcg", LENGTH), _x_shift(top, lpp)
    tcg = _stated(top, "tcg", LENGTH, transverse=True)
    top.close()
    return Figures(
        name=name or Path(file).stem,
        path=file,
        displacement=displacement,
        vcg=heights[0] if heights[0].value is not None else heights[1],
        lcg=lcg if lcg.value is None else replace(lcg, value=lcg.value + shift),
        tcg=tcg,
        lpp=lpp,
    )


def _stated(
    top: Section,
    key: str,
    quantity: Quantity,
    sign: str = Sign.ANY,
    *,
    transverse: bool = False,
) -> Estimate:
    """A quantity and its uncertainty; value None when the file does not state it."""
    value = top.maybe(key, quantity, sign, transverse=transverse)
    said = of_key(top, key, quantity, value, sign)
    return Estimate(value=value, u=said.u if said else None)


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


def _of_json(file: str, data: bytes, collector: Collector) -> Figures | None:
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
    return Figures(
        name=", ".join(filter(_printable, (name, date))) or Path(file).stem,
        path=file,
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

    def estimate(self, whole: object, key: str, *, required: bool = False) -> Estimate:
        """One quantity of the lightship."""
        path = f"lightship.{key}"
        found = self.at(self.at(whole, "lightship"), key)
        if not isinstance(found, dict):
            expected = "an object with value and u"
            self.collector.add(Where(self.file, 0, path), *_found(found), expected)
            return Estimate(value=BAD)
        value = self.number(found, path, "value", positive=required)
        if value is None and required:
            where = Where(self.file, 0, f"{path}.value")
            self.collector.add(where, "key-missing", NOTHING, "a number above zero")
        return Estimate(
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
