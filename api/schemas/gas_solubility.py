"""Henry's constants and solubilities of gases."""

from pydantic import Field

from api.schemas.base import Number, NumberOrList, StrictModel
from api.schemas.confidence import Confidence, MethodUse
from api.schemas.molecule import MoleculeIdentity, MoleculeInput


class GasSolubilityRequest(StrictModel):
    """A gas over a solvent; the method is the equation of state `psrk`."""

    gas: MoleculeInput
    solvents: list[MoleculeInput] = Field(min_length=1)
    solvent_mole_fractions: list[Number] | None = Field(
        default=None, description="Free of gas; a single solvent may leave them out"
    )
    temperature_K: NumberOrList
    pressure_kPa: Number = Field(default=101.325, description="Total, vapour of the solvent too")


class GasSolubilityPoint(StrictModel):
    """One temperature; null where there is no such solution, and `failure` says why."""

    temperature_K: float
    henry_kPa: float | None = Field(description="Limit of fugacity over mole fraction")
    solvent_pressure_kPa: float | None = Field(description="Of the solvent without gas")
    gas_mole_fraction: float | None = Field(description="In the liquid at `pressure_kPa`")
    liquid: list[float | None] = Field(description="The gas first, then the solvents")
    vapour: list[float | None] = Field(description="The gas first, then the solvents")
    failure: str | None


class GasSolubilityResponse(StrictModel):
    """Solubility of one gas over temperature."""

    gas: MoleculeIdentity
    solvents: list[MoleculeIdentity]
    solvent_mole_fractions: list[float]
    method: str
    methods_used: list[MethodUse]
    pressure_kPa: float
    points: list[GasSolubilityPoint]
    confidence: Confidence
    cautions: list[str]
