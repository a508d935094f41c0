"""Measured points: reading them, testing them, and every model beside them."""

from groups.handoff.comparisons.answers import (
    ComparedModel,
    ComparisonAnswer,
    LeftOut,
    Mark,
    Recommendation,
)
from groups.handoff.comparisons.consistency import (
    Consistency,
    ConsistencyTest,
    Suspect,
    consistency,
)
from groups.handoff.comparisons.deviations import REGIONS, Deviation, PointDeviation
from groups.handoff.comparisons.measurements import Measurements
from groups.handoff.comparisons.observations import Observations, observations
from groups.handoff.comparisons.reading import Units, read_csv, read_records
from groups.handoff.comparisons.regression import PointFit, fit_points

__all__ = [
    "REGIONS",
    "ComparedModel",
    "ComparisonAnswer",
    "Consistency",
    "ConsistencyTest",
    "Deviation",
    "LeftOut",
    "Mark",
    "Measurements",
    "Observations",
    "PointDeviation",
    "PointFit",
    "Recommendation",
    "Suspect",
    "Units",
    "consistency",
    "fit_points",
    "observations",
    "read_csv",
    "read_records",
]
