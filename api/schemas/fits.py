"""Fits for a flowsheet: the request and the answer."""

from typing import Literal

from pydantic import Field

from api.schemas.base import Number, StrictModel, WholeNumber
from api.schemas.confidence import Confidence
from api.schemas.equilibrium import AzeotropeResult
from api.schemas.parameter_sheet import ParameterSheet
from api.schemas.prediction import MixtureRequest, PredictionResponse
from api.schemas.vapour_pressure import VapourPressureUsed

ModelName = Literal["nrtl", "uniquac", "wilson", "van-laar", "margules-2", "margules-3"]
FormName = Literal["a", "b/T", "a+b/T", "a+b/T+c*ln(T)", "a+b/T+c*ln(T)+d*T"]
Alpha = Number | Literal["fit"]
ALPHA = "Non-randomness of NRTL: a number from 0.05 to 0.9, or 'fit'."


class FitRequest(MixtureRequest):
    """A mixture, the equation to fit, and the range it is to hold in."""

    model: ModelName = "nrtl"
    form: FormName = Field(default="a+b/T", description="How the interactions depend on T.")
    alpha: Alpha = Field(default=0.3, description=ALPHA)
    wilson_volumes: bool = Field(
        default=False, description="Wilson's equation with liquid molar volumes."
    )
    temperature_range_K: list[Number] | None = Field(
        default=None,
        min_length=2,
        max_length=2,
        description="Lowest and highest; without it the boiling range at `pressure_kPa`.",
    )
    pressure_kPa: Number | None = Field(
        default=None, description="Where azeotropes of prediction and fit are compared."
    )
    temperatures: WholeNumber = Field(default=5, description="Of the grid, 1 to 51.")
    compositions: WholeNumber = Field(default=41, description="Of each pair, 5 to 401.")


class FittedNumber(StrictModel):
    """One fitted number."""

    name: str
    value: float | None
    unit: str
    standard_error: float | None = Field(description="Null where it was held fixed.")


class Note(StrictModel):
    """Something to know before use."""

    code: str
    message: str
    grave: bool


class Residual(StrictModel):
    """How far the fitted ln gamma lies from the prediction."""

    rms: float | None
    largest: float | None
    rms_infinite_dilution: float | None
    temperature_K: float | None = Field(description="Where the largest one stands.")
    x1: float | None
    component: int
    weighted_rms: float | None = Field(
        description="In units of the prediction's own standard deviation."
    )
    values: int


class SplitBeforeAndAfter(StrictModel):
    """x1 of the two liquids, by prediction and by fit; null where the liquid does not split."""

    temperature_K: float
    predicted: list[float] | None
    fitted: list[float] | None


class Effects(StrictModel):
    """What the fit does to the mixture, compared with the prediction."""

    splits: list[SplitBeforeAndAfter]
    azeotropes_predicted: list[AzeotropeResult] | None
    azeotropes_fitted: list[AzeotropeResult] | None
    pressure_kPa: float | None
    ln_relative_volatility_rms: float | None
    ln_relative_volatility_largest: float | None
    temperature_K: float | None = Field(description="Where the largest change stands.")
    x1: float | None


class FittedPair(StrictModel):
    """One pair of the mixture; `components` are 0-based."""

    components: list[int]
    accepted: bool = Field(
        description="False: the fit invents or loses a split or an azeotrope, or has a pole."
    )
    parameters: list[FittedNumber]
    covariance: list[list[float | None]]
    correlation: list[list[float | None]]
    covariance_basis: str
    residual: Residual
    effects: Effects
    notes: list[Note]
    starts: int
    agreeing_starts: int


class RefusedPair(StrictModel):
    """A pair that the equation cannot describe, and why."""

    components: list[int]
    reason: str


class TripleCheck(StrictModel):
    """ln gamma inside a face of three components, fitted less predicted."""

    components: list[int]
    rms: float | None
    largest: float | None
    temperature_K: float
    mole_fractions: list[float]
    component: int


class FitResponse(PredictionResponse):
    """Parameters, what they rest on, and what they do to the mixture."""

    model: str
    form: str
    temperature_range_K: list[float]
    pressure_kPa: float | None
    weighting: str = Field(description="What the values were weighted by.")
    pairs: list[FittedPair]
    refused: list[RefusedPair]
    triples: list[TripleCheck]
    azeotropes_predicted: list[AzeotropeResult] | None = Field(
        description="Of the whole mixture of three or four; null otherwise."
    )
    azeotropes_fitted: list[AzeotropeResult] | None
    notes: list[Note]
    sheet: ParameterSheet | None = Field(description="Null where every pair was refused.")
    vapour_pressures: list[VapourPressureUsed]
    confidence: Confidence = Field(description="Of the prediction that was fitted.")
