"""Write a scene as a trial folder: in metric or US units, with points or decimal commas."""

from __future__ import annotations

import math
from collections.abc import Callable, Iterable, Mapping
from dataclasses import dataclass, field
from fractions import Fraction

import numpy as np
from scipy import constants
from simulate import Mass, Scene

FOOT, INCH = constants.foot, constants.inch
LONG_TON = constants.long_ton / 1000.0

UNITS: dict[str, dict[str, tuple[str, float]]] = {
    "metric": {
        "length": ("m", 1.0), "mass": ("t", 1.0), "reading": ("mm", 1e-3), "volume": ("m3", 1.0),
        "area": ("m2", 1.0), "density": ("t/m3", 1.0), "moment": ("t m", 1.0),
    },
    "us": {
        "length": ("ft", FOOT), "mass": ("LT", LONG_TON), "reading": ("in", INCH),
        "volume": ("ft3", FOOT**3), "area": ("ft2", FOOT**2),
        "density": ("lb/ft3", constants.pound / 1000.0 / FOOT**3), "moment": ("LT ft", LONG_TON * FOOT),
    },
}  # fmt: skip


@dataclass(frozen=True, eq=False)
class Style:
    """How a person wrote the trial: units, separator, rounding (decimals by quantity), noise."""

    units: str = "metric"
    semicolon: bool = False
    decimals: Mapping[str, int] = field(default_factory=dict)
    feet_inches: bool = False
    reading_fraction: int = 0  # readings in fractions of an inch
    noise_reading: float = 0.0  # m at the device
    noise_draft: float = 0.0  # m
    noise_density: float = 0.0  # t/m3
    seed: int = 0
    trims: tuple[float, ...] = (0.0,)
    even_keel: bool = True
    sample_depths: tuple[float, float, float] = (1.0, 1.5, 1.0)
    table_step: float = 0.05  # m between rows
    swings: tuple[str, ...] = ()
    repeats: tuple[str, ...] = ()


@dataclass
class Writer:
    """Formats numbers in one style and joins rows into a table."""

    style: Style

    def number(self, value: float, kind: str) -> str:
        plain = value / UNITS[self.style.units][kind][1]
        places = self.style.decimals.get(kind)
        text = repr(float(plain)) if places is None else f"{plain:.{places}f}"
        return text.replace(".", ",") if self.style.semicolon else text

    def feet(self, value: float, parts: int = 4) -> str:
        """Feet and inches to the nearest 1/parts inch."""
        steps = round(value / INCH * parts)
        feet, rest = divmod(steps, 12 * parts)
        whole, part = divmod(rest, parts)
        fraction = f" {Fraction(part, parts)}" if part else ""
        return f"{feet} ft {whole}{fraction} in"

    def inches(self, value: float) -> str:
        steps = round(value / INCH * self.style.reading_fraction)
        sign, steps = ("-" if steps < 0 else ""), abs(steps)
        whole, part = divmod(steps, self.style.reading_fraction)
        fraction = str(Fraction(part, self.style.reading_fraction)) if part else ""
        return sign + (f"{whole} {fraction}".strip() if whole or not fraction else fraction)

    def header(self, name: str, kind: str) -> str:
        return f"{name} [{UNITS[self.style.units][kind][0]}]" if kind else name

    def quantity(self, value: float, kind: str) -> str:
        return f"{self.number(value, kind)} {UNITS[self.style.units][kind][0]}".replace(",", ".")

    def table(self, columns: Iterable[tuple[str, str]], rows: Iterable[Iterable[object]]) -> str:
        mark = ";" if self.style.semicolon else ","
        columns = list(columns)
        lines = [mark.join(self.header(n, k) for n, k in columns)]
        for row in rows:
            cells = []
            for value, (_, kind) in zip(row, columns, strict=True):
                text = self.number(value, kind) if kind and isinstance(value, float) else str(value)
                cells.append(f'"{text}"' if mark in text else text)
            lines.append(mark.join(cells))
        return "\n".join(lines) + "\n"


CENTRE = (("x", "length"), ("y", "length"), ("z", "length"))


def trial_tables(scene: Scene, style: Style, places: tuple[float, ...]) -> dict[str, str]:
    """The CSV files of a scene; ``places`` are the x of the draft marks."""
    w = Writer(style)
    rng = np.random.default_rng(style.seed)
    weights = [(m.name, m.mass, f"CAL {m.name}-26", m.x, m.z) for m in scene.weights]
    ledger: list[tuple[object, ...]] = []
    for action, items in (("deduct", scene.deduct), ("add", scene.add)):
        ledger += [(action, m.name, m.mass, m.x, m.y, m.z, "", "", "") for m in items]
    ledger += [("relocate", m.name, m.mass, m.x, m.y, m.z, *(m.to or ())) for m in scene.relocate]
    to = tuple((f"to {n}", k) for n, k in CENTRE)
    files = {
        "weights.csv": w.table(
            (("id", ""), ("mass", "mass"), ("certificate", ""), ("x", "length"), ("z", "length")),
            weights,
        ),
        "shifts.csv": _shifts(scene, w),
        "readings.csv": _readings(scene, style, w, rng),
        "drafts.csv": _drafts(scene, style, w, rng, places),
        "density.csv": w.table(
            (("place", ""), ("depth", "length"), ("density", "density"), ("temperature [C]", "")),
            [
                (where, depth, scene.density + float(e) * style.noise_density, "11")
                for (where, depth), e in zip(
                    zip(("forward", "amidships", "aft"), style.sample_depths, strict=True),
                    rng.normal(size=3),
                    strict=True,
                )
            ],
        ),
        **_shape(scene, style, w),
    }
    if scene.tanks:
        files["tanks.csv"] = _tanks(scene, w)
    if scene.rolls:
        point = "," if style.semicolon else "."
        runs = [
            (n, rolls, f"{time:.1f}".replace(".", point))
            for n, (rolls, time) in enumerate(scene.rolls, start=1)
        ]
        files["rolls.csv"] = w.table((("run", ""), ("rolls", ""), ("time [s]", "")), runs)
    if ledger:
        files["ledger.csv"] = w.table(
            (("action", ""), ("item", ""), ("mass", "mass"), *CENTRE, *to), ledger
        )
    return files


def _shifts(scene: Scene, w: Writer) -> str:
    rows: list[tuple[object, ...]] = [(0, "09:00", m.name, m.y) for m in scene.weights]
    for n, moves in enumerate(scene.moves, start=1):
        clock = f"{9 + (12 * n) // 60:02d}:{(12 * n) % 60:02d}"
        rows += [(n, clock, name, y) for name, y in moves]
    columns = [("shift", ""), ("time", ""), ("weight", ""), ("y", "length")]
    for axis, places in (("x", scene.lengthwise()), ("z", scene.heights())):
        if places:
            columns.append((axis, "length"))
            rows = [(*row, places.get((row[0], row[2]), "")) for row in rows]  # type: ignore[arg-type]
    return w.table(columns, rows)


def _tanks(scene: Scene, w: Writer) -> str:
    columns = [
        ("tank", ""), ("contents", ""), ("state", ""), ("density", "density"),
        ("volume", "volume"), *CENTRE, ("length", "length"), ("breadth", "length"),
    ]  # fmt: skip
    rows: list[tuple[object, ...]] = [
        (t.name, t.contents, t.state, t.density or "", t.volume or "", *(
            (scene.tank_x(t), t.y, t.z) if t.mass else ("", "", "")
        ), t.length or "", t.breadth or "")
        for t in scene.tanks
    ]  # fmt: skip
    if any(t.depth for t in scene.tanks):
        columns += [("level", "length"), ("depth", "length"), ("shape", "")]
        boxes = [(t.level, t.depth, "box") if t.depth else ("", "", "") for t in scene.tanks]
        rows = [(*row, *box) for row, box in zip(rows, boxes, strict=True)]
    return w.table(columns, rows)


def _readings(scene: Scene, style: Style, w: Writer, rng: np.random.Generator) -> str:
    fraction = style.reading_fraction
    kind = "" if fraction else "reading"
    unit = f" [{UNITS[style.units]['reading'][0]}]" if fraction else ""
    write: Callable[[float], object] = w.inches if fraction else float
    wide = 5 if style.swings else 3 if style.repeats else 1
    rows: list[tuple[object, ...]] = []
    for n, tangent in enumerate(scene.tangents()):
        for device, length in scene.lengths.items():
            value = length * (tangent + scene.zeros[device])
            if device in style.swings:
                how, wave = "swings", [0.020 * (-0.85) ** k for k in range(5)]
            elif device in style.repeats:
                how, wave = "repeats", [0.0] * 3
            else:
                how, wave = "single", [0.0]
            values = [write(value + a + style.noise_reading * float(rng.normal())) for a in wave]
            rows.append((n, device, how, *values, *[""] * (wide - len(values))))
    names = [f"reading{'' if i == 0 else f' {i + 1}'}{unit}" for i in range(wide)]
    return w.table((("shift", ""), ("device", ""), ("kind", ""), *((n, kind) for n in names)), rows)


def _drafts(
    scene: Scene, style: Style, w: Writer, rng: np.random.Generator, places: tuple[float, ...]
) -> str:
    rows: list[tuple[object, ...]] = []
    for x in places:
        half = scene.mark_y(x)
        for side, y in (("P", -half), ("S", half)):
            draft = scene.draft_at(x, y) + style.noise_draft * float(rng.normal())
            rows.append((x, side, w.feet(draft) if style.feet_inches else draft, half))
    return w.table((("x", "length"), ("side", ""), ("draft", "length"), ("y", "length")), rows)


def _shape(scene: Scene, style: Style, w: Writer) -> dict[str, str]:
    """The hull's table: hydrostatics, or offsets where the scene has them."""
    rows = scene.offsets()
    if not rows:
        return {"hydrostatics.csv": _hydrostatics(scene, style, w)}
    columns = [
        ("station", ""), ("x", "length"), ("half breadth", "length"), ("height", "length"),
        ("line", ""), ("body", ""),
    ]  # fmt: skip
    return {"offsets.csv": w.table(columns, rows)}


def _hydrostatics(scene: Scene, style: Style, w: Writer) -> str:
    first = math.floor(scene.equilibrium()[0] / style.table_step) - 5
    drafts = [style.table_step * (first + k) for k in range(14)]
    names = ["draft", "volume", "lcb", "kb", "bm"]
    kinds = {"volume": "volume", "area": "area"}
    if style.even_keel:
        names += ["lcf", "area", "bml"]
    else:
        names.insert(1, "trim")
    rows = [[scene.table_row(d, t)[n] for n in names] for t in style.trims for d in drafts]
    return w.table([(n, kinds.get(n, "length")) for n in names], rows)


def _bodies(scene: Scene, w: Writer) -> str:
    return "".join(
        f'\n[[bodies]]\nname = "{form.name}"\nkind = "{form.kind}"\n'
        f'y = "{w.quantity(form.y, "length")}"\nmirrored = {str(form.mirrored).lower()}\n'
        for form in scene.forms()
    )


def trial_toml(scene: Scene, style: Style, head: Mapping[str, str]) -> str:
    """trial.toml; ``head`` gives the vessel's and the test's own words."""
    w = Writer(style)
    hull = scene.hull
    devices = "".join(
        f'\n[[devices]]\nid = "{d}"\nkind = "{"u-tube" if d.startswith("U") else "pendulum"}"\n'
        f'{"span" if d.startswith("U") else "length"} = "{w.quantity(scene.recorded.get(d, length), "length")}"\n'
        f'place = "{head.get(d, "hold")}"\ncalibration = "tape T-7"\n'
        for d, length in scene.lengths.items()
    )

    def person(m: Mass) -> str:
        name, _, role = m.name.partition(", ")
        at = "".join(f'{c} = "{w.quantity(getattr(m, c), "length")}"\n' for c in "xyz")
        return (
            f'\n[[people]]\nname = "{name}"\nrole = "{role}"\n'
            f'mass = "{w.quantity(m.mass, "mass")}"\n{at}'
        )

    return f"""[vessel]
name = "{head["name"]}"
number = "{head["number"]}"
lpp = "{w.quantity(hull.lpp, "length")}"
beam = "{w.quantity(hull.beam, "length")}"
depth = "{w.quantity(float(head["depth"]), "length")}"

[test]
date = {head["date"]}
place = "{head["place"]}"
berth = "{head["berth"]}"
weather = "{head["weather"]}"
water_depth = "{w.quantity(float(head["water_depth"]), "length")}"

[axes]
x_origin = "after perpendicular"

[output]
units = "{style.units}"

[rules]
set = "{head["rules"]}"

[drafts]
marks_from = "baseline"

[{"offsets" if scene.offsets() else "hydrostatics"}]
volume = "moulded"
allowance = "{scene.allowance * 100:.4g} %"
{_bodies(scene, w)}{head.get("more", "")}{devices}{"".join(person(p) for p in scene.people)}"""
