"""Activity coefficients at given points and at infinite dilution."""

from pydantic import Field

from api.schemas.base import Number, NumberOrList, StrictModel
from api.schemas.confidence import BAND, Confidence, LevelInterval, MethodUse
from api.schemas.molecule import MoleculeIdentity, MoleculeInput
from api.schemas.prediction import MethodChoice, MixtureRequest, PredictionResponse
from api.schemas.problem import Problem


class ActivityRequest(MixtureRequest):
    """A mixture and the points at which to evaluate it."""

    temperature_K: NumberOrList = Field(
        description="One temperature for all points, or one a point."
    )
    mole_fractions: list[list[Number]] = Field(
        min_length=1, description="One list a point, one number a component, summing to 1."
    )


class ActivityPoint(StrictModel):
    """Activity coefficients and excess properties at one point."""

    temperature_K: float
    mole_fractions: list[float]
    gamma: list[float | None]
    ln_gamma: list[float | None]
    ln_gamma_lower: list[float] | None = Field(description=BAND)
    ln_gamma_upper: list[float] | None = Field(description=BAND)
    ln_gamma_combinatorial: list[float | None]
    ln_gamma_residual: list[float | None]
    excess_gibbs_RT: float | None = Field(description="gE / (R T), dimensionless")
    excess_gibbs_RT_lower: float | None = Field(description=BAND)
    excess_gibbs_RT_upper: float | None = Field(description=BAND)
    excess_enthalpy_J_mol: float | None = Field(description="hE, J/mol")
    confidence: Confidence


class ActivityResponse(PredictionResponse):
    """One entry a point, in the order of the request."""

    points: list[ActivityPoint]


class Pair(StrictModel):
    """A solute, infinitely dilute in a solvent."""

    solute: MoleculeInput
    solvent: MoleculeInput
    temperature_K: Number


class InfiniteDilutionRequest(MethodChoice):
    """Any number of pairs."""

    pairs: list[Pair] = Field(min_length=1)
    level: Number | None = Field(
        default=None,
        description="Probability of a second interval beside the one of 90 %, 0.01 to 0.99.",
    )


class InfiniteDilutionResult(StrictModel):
    """The limit of one pair; null with the reason where no number could be had."""

    solute: MoleculeIdentity | None
    solvent: MoleculeIdentity | None
    temperature_K: float
    ln_gamma_inf: float | None
    gamma_inf: float | None
    method: str | None
    methods_used: list[MethodUse]
    interval: LevelInterval | None = Field(
        default=None, description="Of ln gamma, at the level asked for."
    )
    confidence: Confidence
    problem: Problem | None = Field(default=None, description="Set where the pair cannot be taken.")


class InfiniteDilutionResponse(StrictModel):
    """One result a pair, in the order of the request."""

    results: list[InfiniteDilutionResult]
    cautions: list[str]
