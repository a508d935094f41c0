"""Phase equilibrium of liquid mixtures under a vapour: bubble, dew, flash, diagrams, azeotropes."""

from groups.equilibrium.azeotrope import Azeotrope
from groups.equilibrium.azeotropes import azeotropes
from groups.equilibrium.binary_split import BinarySplit, binary_split, binary_splits
from groups.equilibrium.bubble import bubble_pressure, bubble_temperature
from groups.equilibrium.dew import dew_pressure, dew_temperature
from groups.equilibrium.diagram import Diagram, SplitRange, diagram
from groups.equilibrium.flash import flash
from groups.equilibrium.flash_result import Flash
from groups.equilibrium.stability import Stability, stability
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
from groups.equilibrium.volatility import relative_volatility

__all__ = [
    "Azeotrope",
    "BinarySplit",
    "Diagram",
    "Flash",
    "IdealVapour",
    "LiquidModel",
    "SaturationLine",
    "SplitRange",
    "Stability",
    "States",
    "System",
    "ThreePhase",
    "VapourModel",
    "azeotropes",
    "binary_split",
    "binary_splits",
    "bubble_pressure",
    "bubble_temperature",
    "dew_pressure",
    "dew_temperature",
    "diagram",
    "flash",
    "relative_volatility",
    "stability",
    "three_phase_at_pressure",
    "three_phase_at_temperature",
]
