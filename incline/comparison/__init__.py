"""Two lightships compared, under the limits that published rules set for a named situation."""

from incline.comparison.figures import Figures, read_pair
from incline.comparison.judging import Comparison, Difference, Judgement, compare
from incline.comparison.words import (
    credit,
    list_situations,
    recommendation,
    show_comparison,
    to_json,
)
from incline.situations import Limit, Situation, situation_named, situations

__all__ = [
    "Comparison", "Difference", "Figures", "Judgement", "Limit", "Situation", "compare",
    "credit", "list_situations", "read_pair", "recommendation", "show_comparison",
    "situation_named", "situations", "to_json",
]  # fmt: skip
