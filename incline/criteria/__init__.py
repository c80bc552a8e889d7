"""Published criteria of an inclining test: what they ask, what was found, and whether it is met."""

from incline.criteria.judging import VERIFY, found_text, judge, limit_text
from incline.criteria.table import RULE_SETS, Criterion, Limit, criteria, rule_set_of

__all__ = [
    "RULE_SETS",
    "VERIFY",
    "Criterion",
    "Limit",
    "criteria",
    "found_text",
    "judge",
    "limit_text",
    "rule_set_of",
]
