"""How far to trust a number: reasons by rule, evidence from open data, grades."""

from groups.confidence.confidence import (
    GRADES,
    THRESHOLDS,
    Confidence,
    Evidence,
    Grade,
    Interval,
    Reason,
    grade_of_half_width,
    graded,
    worst_grade,
)

__all__ = [
    "GRADES",
    "THRESHOLDS",
    "Confidence",
    "Evidence",
    "Grade",
    "Interval",
    "Reason",
    "grade_of_half_width",
    "graded",
    "worst_grade",
]
