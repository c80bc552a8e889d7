"""The plan on its page, with the keys to its numbers and the devices' places in words."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from incline.report.canvas_backend import FigureFlowable
from incline.report.document import note, part
from incline.report.figures_plan import numbered_tanks, plan_plot, weight_labels
from incline.report.show import NOT_RECORDED

if TYPE_CHECKING:
    from incline.report.document import Sheet

__all__ = ["plan"]


def plan(sheet: Sheet) -> list[Any]:
    """Plan view of weights and tanks; nothing when neither has a place."""
    trial = sheet.reduction.trial
    tanks, labels = numbered_tanks(trial), weight_labels(trial)
    if not (tanks or labels):
        return []
    picture = FigureFlowable(plan_plot(trial, sheet.show, sheet.width))
    said = []
    if any(label != name for name, label in labels.items()):
        said.append("Test weights: " + "; ".join(f"{v} {k}" for k, v in labels.items()) + ".")
    if tanks:
        said.append("Tanks: " + "; ".join(f"{n} {t.name}" for n, t in tanks) + ".")
    empty = [t.name for t in trial.tanks if t.centre is None]
    if empty:
        said.append(f"Empty: {'; '.join(empty)}.")
    devices = "; ".join(f"{d.id}: {d.place or NOT_RECORDED}" for d in trial.devices)
    said.append(f"Devices, whose places are recorded in words: {devices}.")
    return [
        *part("Plan of test weights and tanks", picture.height + 24.0),
        picture,
        note(" ".join(said)),
    ]
