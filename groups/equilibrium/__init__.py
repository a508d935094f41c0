"""Phase equilibrium of liquid mixtures under a vapour: bubble, dew, flash, diagrams, azeotropes,
liquid splits, ternary maps.
"""

from groups.equilibrium.azeotrope import Azeotrope
from groups.equilibrium.azeotropes import AzeotropeSet, azeotrope_set, azeotropes
from groups.equilibrium.binary_split import BinarySplit, binary_split, binary_splits
from groups.equilibrium.binodal import TernaryBinodal, TwoLiquidRegion, ternary_binodal
from groups.equilibrium.bubble import bubble_pressure, bubble_temperature
from groups.equilibrium.dew import dew_pressure, dew_temperature
from groups.equilibrium.diagram import Diagram, SplitRange, diagram
from groups.equilibrium.fixed_points import FixedPoint
from groups.equilibrium.flash import flash
from groups.equilibrium.flash_result import Flash
from groups.equilibrium.liquid_liquid import Distribution, distribution_coefficients, liquid_flash
from groups.equilibrium.mutual_solubility import (
    ConsolutePoint,
    MutualSolubility,
    consolute_points,
    mutual_solubility,
)
from groups.equilibrium.residue_curves import ResidueCurve, ResidueMap, residue_curves
from groups.equilibrium.stability import Stability, stability
from groups.equilibrium.stable_bubble import stable_bubble_pressure, stable_bubble_temperature
from groups.equilibrium.states import States
from groups.equilibrium.system import (
    IdealVapour,
    LiquidModel,
    SaturationLine,
    System,
    VapourModel,
)
from groups.equilibrium.three_phase import (
    ThreePhase,
    three_phase_at_pressure,
    three_phase_at_temperature,
)
from groups.equilibrium.vapour_fraction_flash import flash_at_pressure, flash_at_temperature
from groups.equilibrium.volatility import relative_volatility

__all__ = [
    "Azeotrope",
    "AzeotropeSet",
    "BinarySplit",
    "ConsolutePoint",
    "Diagram",
    "Distribution",
    "FixedPoint",
    "Flash",
    "IdealVapour",
    "LiquidModel",
    "MutualSolubility",
    "ResidueCurve",
    "ResidueMap",
    "SaturationLine",
    "SplitRange",
    "Stability",
    "States",
    "System",
    "TernaryBinodal",
    "ThreePhase",
    "TwoLiquidRegion",
    "VapourModel",
    "azeotrope_set",
    "azeotropes",
    "binary_split",
    "binary_splits",
    "bubble_pressure",
    "bubble_temperature",
    "consolute_points",
    "dew_pressure",
    "dew_temperature",
    "diagram",
    "distribution_coefficients",
    "flash",
    "flash_at_pressure",
    "flash_at_temperature",
    "liquid_flash",
    "mutual_solubility",
    "relative_volatility",
    "residue_curves",
    "stability",
    "stable_bubble_pressure",
    "stable_bubble_temperature",
    "ternary_binodal",
    "three_phase_at_pressure",
    "three_phase_at_temperature",
]
