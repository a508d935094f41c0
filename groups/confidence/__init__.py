"""How far to trust a number: reasons by rule, evidence from open data, grades."""

from groups.confidence.confidence import (
    GRADES,
    Confidence,
    Evidence,
    Grade,
    Interval,
    Reason,
    graded,
    worst_grade,
)

__all__ = [
    "GRADES",
    "Confidence",
    "Evidence",
    "Grade",
    "Interval",
    "Reason",
    "graded",
    "worst_grade",
]
