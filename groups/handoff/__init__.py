"""Hand-over: fits for flowsheets, ThermoML, and measurements against models."""

from groups.handoff.compare_door import compare, parameters_of_fit
from groups.handoff.comparisons import ComparisonAnswer, Measurements, Units, read_csv, read_records
from groups.handoff.conditioned import Conditioned, UncertainDiagram, condition
from groups.handoff.fit_door import FitAnswer, fit
from groups.handoff.predicted_data import predicted_thermoml
from groups.handoff.sheets import ParameterSet, to_csv, to_text
from groups.handoff.vapour_over import vapour_over

__all__ = [
    "ComparisonAnswer",
    "Conditioned",
    "FitAnswer",
    "Measurements",
    "ParameterSet",
    "UncertainDiagram",
    "Units",
    "compare",
    "condition",
    "fit",
    "parameters_of_fit",
    "predicted_thermoml",
    "read_csv",
    "read_records",
    "to_csv",
    "to_text",
    "vapour_over",
]
