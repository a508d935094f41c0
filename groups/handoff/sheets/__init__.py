"""Parameter sets for a flowsheet: exact equations, units and sources, as records, text and CSV."""

from groups.handoff.sheets.build import interactions_text, parameter_set, points_parameter_set
from groups.handoff.sheets.parameter_set import ParameterSet
from groups.handoff.sheets.text import to_csv, to_text

__all__ = [
    "ParameterSet",
    "interactions_text",
    "parameter_set",
    "points_parameter_set",
    "to_csv",
    "to_text",
]
