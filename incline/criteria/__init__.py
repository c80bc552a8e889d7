"""Published criteria of an inclining test: what they ask, what was found, and whether it is met."""

from incline.criteria.judging import found_text, judge
from incline.criteria.table import RULE_SETS, Criterion, Limit, criteria, rule_set_of

__all__ = [
    "RULE_SETS",
    "Criterion",
    "Limit",
    "criteria",
    "found_text",
    "judge",
    "rule_set_of",
]
