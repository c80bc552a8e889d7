"""What disturbed a trial: patterns, scores, words."""

from incline.diagnosis.search import Search, search

__all__ = ["Search", "search"]
