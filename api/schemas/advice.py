"""Which class of property method a mixture needs."""

from typing import Literal

from pydantic import Field

from api.schemas.base import Number, StrictModel
from api.schemas.confidence import Confidence
from api.schemas.molecule import MoleculeIdentity, MoleculeInput
from api.schemas.prediction import OnMissing


class AdviceRequest(StrictModel):
    """A mixture over ranges of temperature, pressure and composition."""

    components: list[MoleculeInput] = Field(min_length=1)
    temperature_K: list[Number] = Field(
        min_length=2, max_length=2, description="Lowest and highest"
    )
    pressure_kPa: list[Number] = Field(min_length=2, max_length=2, description="Lowest and highest")
    mole_fractions: list[list[Number]] | None = Field(
        default=None,
        description="Lowest and highest mole fraction of each component in the liquid; 0 to 1 "
        "where left out",
    )
    on_missing: OnMissing = "estimate"


class SimplificationCost(StrictModel):
    """The largest errors that a simplification would cause for this mixture."""

    pressure_percent: float
    vapour_mole_fraction: float
    relative_volatility_percent: float


class VapourJudged(StrictModel):
    """How far the vapour is from an ideal gas."""

    verdict: Literal["ideal gas", "real gas"]
    compressibility_lowest: float
    compressibility_highest: float
    largest_ln_fugacity_coefficient: float
    associating: list[str]
    supercritical: list[str]
    cost_of_ideal_gas: SimplificationCost


class LiquidJudged(StrictModel):
    """How far the liquid is from an ideal solution."""

    verdict: Literal["ideal solution", "real solution"]
    largest_ln_gamma: float = Field(description="Largest |ln gamma|, infinite dilution included")
    largest_ln_gamma_component: int = Field(description="Index into `components`")
    largest_excess_gibbs_RT: float
    relative_volatility_ratio: float = Field(
        description="Largest over smallest of one relative volatility in the range"
    )
    azeotropes: int | None = Field(description="Null for more than four components")
    splits: list[list[str]] = Field(description="Pairs of components that form two liquids")
    cost_of_ideal_solution: SimplificationCost


class Recommendation(StrictModel):
    """What to use."""

    method: str = Field(description="The `method` to ask for here")
    vapour: Literal["ideal", "virial", "psrk"] = Field(description="The vapour that goes with it")
    flowsheet_class: Literal[
        "ideal",
        "activity coefficients, ideal vapour",
        "activity coefficients, real vapour",
        "activity coefficients, Henry's law for gases",
        "equation of state",
        "out of scope",
    ] = Field(description="The class of property method for a flowsheet")
    why: str


class Finding(StrictModel):
    """One thing found out, in words."""

    code: str
    message: str


class AdviceResponse(StrictModel):
    """What the mixture needs, why, and what each simplification would cost."""

    components: list[MoleculeIdentity]
    temperature_K: list[float]
    pressure_kPa: list[float]
    boils_within: bool = Field(description="Some liquid boils inside both ranges")
    vapour: VapourJudged
    liquid: LiquidJudged
    out_of_scope: list[Finding] = Field(description="Electrolytes, polymers, strong acids")
    recommended: Recommendation
    findings: list[Finding]
    confidence: Confidence
    cautions: list[str]
