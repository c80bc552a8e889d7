"""Whole trials with every input off by a draw from its own uncertainty, reduced one by one."""

from __future__ import annotations

from dataclasses import replace
from typing import TYPE_CHECKING

import numpy as np
from demos import DEMOS

from incline.defaults import DEFAULTS
from incline.record import Stated
from incline.reduction import reduce

if TYPE_CHECKING:
    from incline.record import Point, Trial

READING = 0.0009  # m at the device
SPREAD = 0.0003  # t/m3 between water samples


def default(name: str, value: float = 1.0) -> float:
    entry = DEFAULTS[name]
    return entry.value * abs(value) if entry.relative else entry.value


class Misreader:
    """Draws one recorded trial from a trial recorded without errors."""

    def __init__(self, exact: Trial, rng: np.random.Generator, *, lengths_stated: bool) -> None:
        self.exact = exact
        self.rng = rng
        self.lengths_stated = lengths_stated

    def off(self, value: float, u: float) -> float:
        return value + u * float(self.rng.normal())

    def centre(self, at: Point, u: float) -> Point:
        return type(at)(self.off(at.x, u), self.off(at.y, u), self.off(at.z, u))

    def trial(self) -> Trial:
        """The trial as recorded, its errors drawn from the program's table of defaults."""
        exact = self.exact
        shared = np.sqrt(DEFAULTS["draft_shared"].value) * self.rng.normal()
        own = np.sqrt(1.0 - DEFAULTS["draft_shared"].value)
        u_draft = default("draft")
        hydrometer = default("density") * self.rng.normal()
        u_length = default("length")
        stated = {"length": Stated(u_length, "normal")} if self.lengths_stated else {}
        return replace(
            exact,
            drafts=tuple(
                replace(d, draft=d.draft + u_draft * float(shared + own * self.rng.normal()))
                for d in exact.drafts
            ),
            samples=tuple(
                replace(s, density=self.off(s.density, SPREAD) + float(hydrometer))
                for s in exact.samples
            ),
            weights=tuple(
                replace(
                    w, mass=self.off(w.mass, default("test_weight_mass", w.mass)),
                    x=self.off(w.x, 0.02), z=self.off(w.z, default("test_weight_centre")),
                )
                for w in exact.weights
            ),
            shifts=self._shifts(),
            devices=tuple(
                replace(d, length=self.off(d.length or 0.0, u_length), stated=stated)
                for d in exact.devices
            ),
            readings=tuple(
                replace(r, values=tuple(self.off(v, READING) for v in r.values))
                for r in exact.readings
            ),
            tanks=tuple(
                t if t.centre is None else replace(
                    t, mass=self.off(t.mass, default("tank_mass", t.mass)),
                    fsm=self.off(t.fsm, default("free_surface", t.fsm)),
                    centre=self.centre(t.centre, default("tank_centre")),
                )
                for t in exact.tanks
            ),
            people=tuple(
                p if p.mass is None or p.centre is None else replace(
                    p, mass=self.off(p.mass, default("person_mass")),
                    centre=self.centre(p.centre, default("person_centre")),
                )
                for p in exact.people
            ),
            items=tuple(
                replace(
                    i, mass=self.off(i.mass, default("item_mass", i.mass)),
                    centre=self.centre(i.centre, default("item_centre")),
                    to=None if i.to is None else self.centre(i.to, default("item_centre")),
                )
                for i in exact.items
            ),
            table=self._table(),
        )  # fmt: skip

    def _shifts(self):
        """One error for each place of each weight, half of its variance shared by all."""
        u, r = default("test_weight_arm"), DEFAULTS["arm_shared"].value
        datum = np.sqrt(r) * self.rng.normal()
        errors: dict[tuple[str, float], float] = {}
        shifts = []
        for s in self.exact.shifts:
            moves = []
            for m in s.moves:
                if (m.weight, m.y) not in errors:
                    own = np.sqrt(1.0 - r) * self.rng.normal()
                    errors[m.weight, m.y] = u * float(datum + own)
                moves.append(replace(m, y=m.y + errors[m.weight, m.y]))
            shifts.append(replace(s, moves=tuple(moves)))
        return tuple(shifts)

    def _table(self):
        table = self.exact.table
        factor = 1.0 + default("table_volume") * float(self.rng.normal())
        lcb, km = (default(f"table_{n}") * float(self.rng.normal()) for n in ("lcb", "km"))
        if len(table.trims) == 1:  # and what it does not say of the ship's own trim
            tau = abs(self.exact.drafts[0].draft - self.exact.drafts[-1].draft) / abs(
                self.exact.drafts[0].x - self.exact.drafts[-1].x
            )
            middle = table.bmt[0][len(table.drafts) // 2]
            km += default("table_trim_km", middle * tau) * float(self.rng.normal())
            lcb += default("table_trim_lcb", self.exact.vessel.lpp * tau**2) * float(
                self.rng.normal()
            )
        return replace(
            table,
            volume=tuple(tuple(v * factor for v in row) for row in table.volume),
            lcb=tuple(tuple(v + lcb for v in row) for row in table.lcb),
            bmt=tuple(tuple(v + km for v in row) for row in table.bmt),
        )


def end_to_end(name: str, exact: Trial, trials: int, *, lengths_stated: bool, seed: int = 11):
    """Share of 95 % intervals that hold the true displacement, KG, LCG and TCG, and median widths."""
    light = DEMOS[name][0].light
    truth = (light.mass, light.z, light.x, light.y)
    misreader = Misreader(exact, np.random.default_rng(seed), lengths_stated=lengths_stated)
    inside, widths = np.zeros(4), []
    for _ in range(trials):
        found = reduce(misreader.trial()).outcome.lightship
        estimates = (found.displacement, found.vcg, found.lcg, found.tcg)
        inside += [abs(e.value - t) <= e.U for e, t in zip(estimates, truth, strict=True)]
        widths.append([e.U for e in estimates])
    return inside / trials, np.median(widths, axis=0)
