"""The predictive Soave-Redlich-Kwong equation of state (PSRK)."""

from groups.vapour.psrk.build import psrk_model
from groups.vapour.psrk.flash import EosFlash, psrk_flash
from groups.vapour.psrk.henry import Henry, Solubility, gas_solubility, henry_constants
from groups.vapour.psrk.model import Phase, PsrkModel, phase
from groups.vapour.psrk.point_notes import psrk_notes
from groups.vapour.psrk.saturation import (
    psrk_bubble_pressure,
    psrk_bubble_temperature,
    psrk_dew_pressure,
    psrk_dew_temperature,
)
from groups.vapour.psrk.states import EosStates

__all__ = [
    "EosFlash",
    "EosStates",
    "Henry",
    "Phase",
    "PsrkModel",
    "Solubility",
    "gas_solubility",
    "henry_constants",
    "phase",
    "psrk_bubble_pressure",
    "psrk_bubble_temperature",
    "psrk_dew_pressure",
    "psrk_dew_temperature",
    "psrk_flash",
    "psrk_model",
    "psrk_notes",
]
