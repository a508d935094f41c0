"""Bubble points, dew points, flashes, diagrams, azeotropes and liquid splits."""

from typing import Literal

from pydantic import Field

from api.schemas.base import Number, StrictModel, WholeNumber
from api.schemas.confidence import BAND, Confidence, Interval
from api.schemas.prediction import (
    BoilingRequest,
    MixtureRequest,
    PredictionResponse,
    VapourPredictionResponse,
)


class PointRequest(BoilingRequest):
    """A mixture of stated composition at a temperature or a pressure."""

    mole_fractions: list[Number] = Field(min_length=1)
    temperature_K: Number | None = None
    pressure_kPa: Number | None = None


class FlashRequest(BoilingRequest):
    """A feed with two of temperature, pressure and vapour fraction."""

    mole_fractions: list[Number] = Field(min_length=1)
    temperature_K: Number | None = None
    pressure_kPa: Number | None = None
    vapour_fraction: Number | None = Field(
        default=None, description="Moles of vapour in a mole of feed, 0 to 1"
    )


class Phase(StrictModel):
    """One phase; a phase about to form has fraction 0."""

    kind: Literal["liquid", "vapour"]
    fraction: float = Field(description="Moles of this phase in a mole of mixture")
    mole_fractions: list[float]


class PhasePointResponse(VapourPredictionResponse):
    """One state; numbers are null where it did not converge, and `failure` says why."""

    temperature_K: float | None
    pressure_kPa: float | None
    vapour_fraction: float | None = Field(description="0 at a bubble point, 1 at a dew point")
    x: list[float | None] = Field(
        description="Mole fractions of the liquid, of all liquids together where there are several"
    )
    y: list[float | None] = Field(description="Mole fractions of the vapour")
    gamma: list[float | None]
    saturation_kPa: list[float | None] = Field(
        description="Vapour pressures of the pure components"
    )
    relative_volatility: list[float | None] = Field(
        description="K of each component over the K of the last one"
    )
    x_lower: list[float] | None = Field(description=BAND)
    x_upper: list[float] | None = Field(description=BAND)
    y_lower: list[float] | None = Field(description=BAND)
    y_upper: list[float] | None = Field(description=BAND)
    gamma_lower: list[float] | None = Field(description=BAND)
    gamma_upper: list[float] | None = Field(description=BAND)
    relative_volatility_lower: list[float] | None = Field(description=BAND)
    relative_volatility_upper: list[float] | None = Field(description=BAND)
    liquid_stable: bool | None = Field(description="False where the liquid splits in two")
    phases: list[Phase] = Field(description="Liquids first, then the vapour")
    failure: str | None
    confidence: Confidence


class DiagramRequest(BoilingRequest):
    """A binary diagram at one pressure (Txy) or one temperature (Pxy)."""

    kind: Literal["Txy", "Pxy"]
    pressure_kPa: Number | None = None
    temperature_K: Number | None = None
    points: WholeNumber = Field(default=101, ge=2)


class AzeotropeResult(StrictModel):
    """One azeotrope."""

    components: list[int] = Field(description="Indices into `components` of those present")
    mole_fractions: list[float] = Field(description="Of all components, in their order")
    x1: float = Field(description="Mole fraction of the first component")
    temperature_K: float
    pressure_kPa: float
    kind: str
    stable_liquid: bool = Field(description="False: the liquid splits, a heterogeneous azeotrope")
    liquids: list[list[float]] = Field(description="Mole fractions of the liquid or liquids")


class AzeotropeChance(StrictModel):
    """How probable an azeotrope of two components is, and where it lies if there is one."""

    components: list[int] = Field(description="Indices into `components`")
    probability: float
    x1: Interval | None = Field(
        description="90 % interval of the mole fraction of the first of the two, in the binary"
    )
    temperature_K: Interval | None
    pressure_kPa: Interval | None


class LiquidSplitRange(StrictModel):
    """Two liquids that boil together."""

    x1_lower: float
    x1_upper: float
    y1: float = Field(description="Of their vapour")
    temperature_K: float
    pressure_kPa: float


class PointFailure(StrictModel):
    """A point of a diagram that could not be had."""

    index: int
    reason: str


class DiagramResponse(VapourPredictionResponse):
    """Arrays over the points of a diagram."""

    kind: Literal["Txy", "Pxy"]
    x1: list[float | None]
    y1: list[float | None]
    temperature_K: list[float | None]
    pressure_kPa: list[float | None]
    gamma1: list[float | None]
    gamma2: list[float | None]
    relative_volatility: list[float | None] = Field(description="Of component 1 over component 2")
    y1_lower: list[float | None] | None = Field(description=BAND)
    y1_upper: list[float | None] | None = Field(description=BAND)
    temperature_K_lower: list[float | None] | None = Field(description=BAND)
    temperature_K_upper: list[float | None] | None = Field(description=BAND)
    pressure_kPa_lower: list[float | None] | None = Field(description=BAND)
    pressure_kPa_upper: list[float | None] | None = Field(description=BAND)
    relative_volatility_lower: list[float | None] | None = Field(description=BAND)
    relative_volatility_upper: list[float | None] | None = Field(description=BAND)
    stable: list[bool] = Field(description="False where the liquid drawn would split in two")
    failures: list[PointFailure]
    azeotropes: list[AzeotropeResult]
    azeotrope_chance: AzeotropeChance | None
    liquid_split: LiquidSplitRange | None = Field(
        description="The widest gap of the boiling liquid; null where it does not split"
    )
    confidence: Confidence


class AzeotropesRequest(BoilingRequest):
    """A mixture at one pressure or one temperature."""

    pressure_kPa: Number | None = None
    temperature_K: Number | None = None


class AzeotropesResponse(VapourPredictionResponse):
    """Every azeotrope found; an empty list means that there is none."""

    pressure_kPa: float | None
    temperature_K: float | None
    azeotropes: list[AzeotropeResult]
    chances: list[AzeotropeChance] = Field(description="One for each two components")
    confidence: Confidence


class LiquidSplitRequest(MixtureRequest):
    """A mixture at one temperature, with an overall composition where it has three or more."""

    temperature_K: Number
    mole_fractions: list[Number] | None = None


class LiquidPhase(StrictModel):
    """One of the coexisting liquids."""

    mole_fractions: list[float]
    ln_gamma: list[float]
    fraction: float | None = Field(
        description="Moles of this liquid in a mole of mixture; null where no overall composition "
        "was given"
    )
    distribution: list[float | None] = Field(
        description="Mole fraction of each component here over that in the first liquid"
    )


class SplitChance(StrictModel):
    """How probable a split is; 90 % intervals of x1 of both liquids if there is one."""

    probability: float
    x1_lower: Interval | None
    x1_upper: Interval | None


class LiquidSplitResponse(PredictionResponse):
    """The coexisting liquids; none where the liquid is homogeneous."""

    temperature_K: float
    splits: bool
    phases: list[LiquidPhase] = Field(description="The poorest in the first component first")
    chance: SplitChance | None = Field(description="Of a binary")
    failure: str | None
    confidence: Confidence
