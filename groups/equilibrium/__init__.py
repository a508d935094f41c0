"""Phase equilibrium of liquid mixtures under a vapour: bubble, dew, flash, diagrams, azeotropes."""

from groups.equilibrium.bubble import bubble_pressure, bubble_temperature
from groups.equilibrium.states import States
from groups.equilibrium.system import (
    IdealVapour,
    LiquidModel,
    SaturationLine,
    System,
    VapourModel,
)

__all__ = [
    "IdealVapour",
    "LiquidModel",
    "SaturationLine",
    "States",
    "System",
    "VapourModel",
    "bubble_pressure",
    "bubble_temperature",
]
