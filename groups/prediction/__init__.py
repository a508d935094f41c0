"""The doors: one function for each question, used alike by service, command line and client."""

from groups.prediction.activity_coefficients import activity_coefficients
from groups.prediction.advice import AdviceAnswer, advice
from groups.prediction.answers import (
    ActivityAnswer,
    AzeotropeAnswer,
    DiagramAnswer,
    InfiniteDilutionAnswer,
    LiquidSplitAnswer,
    MeasurementPlan,
    PhasePointAnswer,
    PlannedMeasurement,
)
from groups.prediction.assignments import assign_groups
from groups.prediction.cautions import CAUTIONS
from groups.prediction.chances import AzeotropeChance, SplitChance
from groups.prediction.choosing import ALL_METHODS
from groups.prediction.component import Component
from groups.prediction.diagrams import diagram
from groups.prediction.flashes import flash
from groups.prediction.gas_solubilities import GasSolubilityAnswer, gas_solubility
from groups.prediction.infinite_dilution import infinite_dilution
from groups.prediction.liquid_splits import liquid_splits
from groups.prediction.measurement_plan import measurement_plan
from groups.prediction.mutual_solubilities import MutualSolubilityAnswer, mutual_solubilities
from groups.prediction.phase_points import bubble_point, dew_point
from groups.prediction.ranking_plan import ranking_plan
from groups.prediction.residue_maps import ResidueMapAnswer, residue_curves
from groups.prediction.special_points import azeotropes
from groups.prediction.ternary_diagrams import TernaryDiagramAnswer, ternary_diagram

__all__ = [
    "ALL_METHODS",
    "CAUTIONS",
    "ActivityAnswer",
    "AdviceAnswer",
    "AzeotropeAnswer",
    "AzeotropeChance",
    "Component",
    "DiagramAnswer",
    "GasSolubilityAnswer",
    "InfiniteDilutionAnswer",
    "LiquidSplitAnswer",
    "MeasurementPlan",
    "MutualSolubilityAnswer",
    "PhasePointAnswer",
    "PlannedMeasurement",
    "ResidueMapAnswer",
    "SplitChance",
    "TernaryDiagramAnswer",
    "activity_coefficients",
    "advice",
    "assign_groups",
    "azeotropes",
    "bubble_point",
    "dew_point",
    "diagram",
    "flash",
    "gas_solubility",
    "infinite_dilution",
    "liquid_splits",
    "measurement_plan",
    "mutual_solubilities",
    "ranking_plan",
    "residue_curves",
    "ternary_diagram",
]
