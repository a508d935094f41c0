"""Activity coefficients of liquid mixtures with the UNIFAC family of methods."""

from groups.activity.batch import ln_gamma_infinite_pairs, missing_parameter_pairs
from groups.activity.excess import (
    excess_enthalpy,
    excess_gibbs,
    excess_heat_capacity,
    ln_gamma_infinite,
)
from groups.activity.model import ActivityModel, GroupContributionModel, activity_model
from groups.activity.simple import IdealModel, WeightedModel

__all__ = [
    "ActivityModel",
    "GroupContributionModel",
    "IdealModel",
    "WeightedModel",
    "activity_model",
    "excess_enthalpy",
    "excess_gibbs",
    "excess_heat_capacity",
    "ln_gamma_infinite",
    "ln_gamma_infinite_pairs",
    "missing_parameter_pairs",
]
