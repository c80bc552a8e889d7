"""Standard uncertainties taken where the trial states none: one table, and nothing elsewhere.

The figures are engineering judgement for ordinary care with ordinary tools; none comes from a
standard. Wherever one is used it is printed as such. A trial replaces one by its name in the
``[uncertainty]`` section of ``trial.toml``.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

from incline.units import DENSITY, FRACTION, LENGTH, MASS

if TYPE_CHECKING:
    from collections.abc import Mapping

    from incline.units import Quantity

__all__ = ["DEFAULTS", "LABEL", "Default", "assumed"]

LABEL = "assumed: engineering judgement"


@dataclass(frozen=True, slots=True)
class Default:
    """A default standard uncertainty: inside units, or a fraction of the value."""

    value: float
    quantity: Quantity
    what: str

    @property
    def relative(self) -> bool:
        """Whether it is a fraction of the value it belongs to."""
        return self.quantity is FRACTION


DEFAULTS: Mapping[str, Default] = {
    "draft": Default(0.010, LENGTH, "one draft or freeboard reading in calm water"),
    "draft_shared": Default(0.25, FRACTION, "correlation between draft readings: marks, swell"),
    "density": Default(0.0003, DENSITY, "hydrometer, common to all its samples"),
    "test_weight_mass": Default(0.002, FRACTION, "mass of a certified test weight"),
    "uncertified_weight_mass": Default(0.01, FRACTION, "mass of a test weight without certificate"),
    "certificate_shared": Default(
        1.0, FRACTION, "correlation of weights on one certificate or scale"
    ),
    "test_weight_arm": Default(0.005, LENGTH, "place of a test weight across the deck"),
    "arm_shared": Default(0.5, FRACTION, "correlation of arms measured from one datum"),
    "test_weight_centre": Default(0.020, LENGTH, "height and x of a test weight's centre"),
    "length": Default(0.003, LENGTH, "length of a pendulum, span of a U-tube"),
    "inclinometer_scale": Default(0.002, FRACTION, "scale of an electronic inclinometer"),
    "table_volume": Default(0.002, FRACTION, "volume or displacement from the table"),
    "table_km": Default(0.005, LENGTH, "KM from the table"),
    "table_lcb": Default(0.010, LENGTH, "LCB from the table"),
    "hull_volume": Default(0.002, FRACTION, "volume of the hull as built, against its offsets"),
    "hull_km": Default(0.005, LENGTH, "KM of the hull as built, against its offsets"),
    "hull_lcb": Default(0.010, LENGTH, "LCB of the hull as built, against its offsets"),
    "table_trim_km": Default(0.3, FRACTION, "share of BM times trim over length, one-trim table"),
    "table_trim_lcb": Default(2.0, FRACTION, "times length times (trim over length) squared"),
    "tank_mass": Default(0.01, FRACTION, "mass of a tank's liquid"),
    "tank_centre": Default(0.020, LENGTH, "centre of a tank's liquid"),
    "free_surface": Default(0.05, FRACTION, "free-surface moment of a tank"),
    "person_mass": Default(0.005, MASS, "mass of a person aboard"),
    "person_centre": Default(0.200, LENGTH, "place of a person aboard"),
    "item_mass": Default(0.02, FRACTION, "mass of a ledger item"),
    "item_centre": Default(0.050, LENGTH, "centre of a ledger item"),
    "moment": Default(0.002, FRACTION, "inclining moment given directly, common to all shifts"),
}


def assumed(name: str, overrides: Mapping[str, float]) -> float:
    """The default in force: the trial's own, or the table's."""
    return overrides.get(name, DEFAULTS[name].value)
