"""What in a trial speaks for or against a disturbance that residuals may hide."""

from __future__ import annotations

from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from collections.abc import Mapping

__all__ = ["EVIDENCE", "NOT_EXCLUDED"]

EVIDENCE: Mapping[str, str] = {
    "liquid at tank top or bottom": "liquids",
    "line, fender or ground holding": "lines",
    "wind or current changed once": "weather",
    "slow drift": "drift",
}
"""Key of ``[evidence]`` in ``trial.toml`` that speaks of each disturbance residuals may hide."""
NOT_EXCLUDED = "not excluded"
"""What the trial writes there when nothing speaks against the disturbance."""
