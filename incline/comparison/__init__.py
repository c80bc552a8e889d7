"""Two lightships compared, under the limits that published rules set for a named situation."""

from incline.comparison.figures import Figures, read_pair
from incline.comparison.judging import Comparison, Difference, Judgement, compare
from incline.comparison.situations import Limit, Situation, situation_named, situations
from incline.comparison.words import list_situations, show_comparison, to_json

__all__ = [
    "Comparison", "Difference", "Figures", "Judgement", "Limit", "Situation", "compare",
    "list_situations", "read_pair", "show_comparison", "situation_named", "situations", "to_json",
]  # fmt: skip
