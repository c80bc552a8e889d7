"""The search's findings in terms of lightship KG."""

from __future__ import annotations

import dataclasses
from typing import TYPE_CHECKING

from incline.chain import run
from incline.diagnosis.evidence import EVIDENCE, NOT_EXCLUDED
from incline.result import Diagnosis, Finding, Influence, Unseen

if TYPE_CHECKING:
    from collections.abc import Mapping, Sequence

    from incline.diagnosis import Search
    from incline.model import TrialModel

__all__ = ["diagnosis_of"]


def diagnosis_of(
    search: Search, model: TrialModel, evidence: Mapping[str, str], bend: Sequence[float]
) -> Diagnosis:
    """KG if each finding is the cause, what hidden disturbances are worth, and influences [m].

    ``bend`` are tangents by which the readings that count were straightened before the search.
    """
    import numpy as np

    changes = [
        *(s.slope_change or 0.0 for s in search.signs),
        *(h.slope_change for h in search.hidden),
        *(one.slope_change for one in search.left),
    ]
    given = dataclasses.replace(model.given, slope_shift=np.array([0.0, *changes]))
    heights = run(model.plan, given).light_vcg
    now, then = float(heights[0]), [float(h) for h in heights[1:]]
    signs, rest = then[: len(search.signs)], then[len(search.signs) :]
    hidden, left = rest[: len(search.hidden)], rest[len(search.hidden) :]
    return Diagnosis(
        findings=tuple(
            Finding(
                cause=s.cause,
                where="ship" if s.where == "ship" else "device",
                shift=s.shift,
                device=s.device,
                score=s.score,
                critical=s.critical,
                size=s.size,
                vcg_if_so=None if s.slope_change is None else vcg,
                advice=s.advice,
                rank=s.rank,
                expected=tuple(a + b for a, b in zip(s.expected, bend, strict=False)),
            )
            for s, vcg in zip(search.signs, signs, strict=True)
        ),
        unseen=tuple(
            Unseen(
                cause=h.cause,
                size=h.size,
                vcg=vcg - now,
                excluded_by=evidence.get(EVIDENCE[h.cause], "").replace(NOT_EXCLUDED, ""),
            )
            for h, vcg in zip(search.hidden, hidden, strict=True)
        ),
        influence=tuple(
            Influence(shift=one.shift, device=one.device, change=vcg - now)
            for one, vcg in zip(search.left, left, strict=True)
        ),
        critical=search.critical,
    )
