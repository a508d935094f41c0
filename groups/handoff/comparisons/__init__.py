"""Measured points: reading them, testing them, and every model beside them."""

from groups.handoff.comparisons.answers import (
    ComparedModel,
    ComparisonAnswer,
    LeftOut,
    Mark,
    Recommendation,
)
from groups.handoff.comparisons.columns import Units
from groups.handoff.comparisons.consistency import (
    Consistency,
    ConsistencyTest,
    Suspect,
    consistency,
)
from groups.handoff.comparisons.deviations import REGIONS, Deviation, PointDeviation
from groups.handoff.comparisons.measurements import Measurements
from groups.handoff.comparisons.observations import Observations, observations
from groups.handoff.comparisons.reading import read_csv, read_records
from groups.handoff.comparisons.regression import PointFit, fit_points
from groups.handoff.comparisons.table import points_to_csv, regions_to_csv

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
    "points_to_csv",
    "read_csv",
    "read_records",
    "regions_to_csv",
]
