"""A lightship to compare: from a trial folder, the JSON of a reduction, or a small TOML file."""

from __future__ import annotations

from dataclasses import dataclass, replace
from pathlib import Path
from typing import TYPE_CHECKING, Literal

from incline.errors import FieldDataError
from incline.reading import read_trial
from incline.reading.collect import Collector
from incline.reading.figures import FILES, lightship_of_file
from incline.reduction import reduce
from incline.result import Estimate

if TYPE_CHECKING:
    from incline.papers import Known, OtherLightship
    from incline.result import Reduction

__all__ = ["Figures", "figures_of", "figures_of_other", "read_pair"]


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
    other = lightship_of_file(path, str(path), f"a trial folder, {FILES}", collector)
    return None if other is None else figures_of_other(other)


def _of_trial(path: Path, collector: Collector) -> Figures | None:
    try:
        reduction = reduce(read_trial(path))
    except FieldDataError as error:
        for defect in error.defects:
            here = str(path / defect.where.file)
            collector.defects.append(replace(defect, where=replace(defect.where, file=here)))
        return None
    return figures_of(reduction, str(path))


def figures_of(reduction: Reduction, path: str = "") -> Figures:
    """The lightship that a reduction found."""
    trial, light = reduction.trial, reduction.outcome.lightship
    return Figures(
        name=f"{trial.vessel.name}, {trial.occasion.date.isoformat()}",
        path=path,
        displacement=light.displacement,
        vcg=light.vcg,
        lcg=light.lcg,
        tcg=light.tcg,
        lpp=trial.vessel.lpp,
        units=trial.settings.units,
    )


def figures_of_other(other: OtherLightship) -> Figures:
    """The lightship that a file or the trial's own record states."""
    return Figures(
        name=other.name,
        path=other.source,
        displacement=_estimate(other.displacement),
        vcg=_estimate(other.vcg),
        lcg=_estimate(other.lcg),
        tcg=_estimate(other.tcg),
        lpp=other.lpp,
    )


def _estimate(known: Known) -> Estimate:
    return Estimate(value=known.value, u=known.u, dof=known.dof)
