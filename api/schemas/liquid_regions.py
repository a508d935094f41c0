"""Mutual solubilities over temperature and two-liquid regions of ternaries."""

from typing import Literal

from pydantic import Field

from api.schemas.base import Number, StrictModel, WholeNumber
from api.schemas.confidence import Confidence, Interval
from api.schemas.prediction import MixtureRequest, PredictionResponse


class MutualSolubilitiesRequest(MixtureRequest):
    """Two components between two temperatures."""

    lowest_K: Number
    highest_K: Number
    points: WholeNumber = Field(default=21, ge=2)


class ConsolutePoint(StrictModel):
    """Where two liquids become one: "upper" splits below it, "lower" above it."""

    kind: Literal["upper", "lower"]
    temperature_K: float
    x1: float


class SplitChanceAt(StrictModel):
    """How probable a split is at a temperature; 90 % intervals of x1 of both liquids."""

    temperature_K: float
    probability: float
    x1_lower: Interval | None
    x1_upper: Interval | None


class MutualSolubilitiesResponse(PredictionResponse):
    """Arrays over temperature; null where the liquid does not split."""

    temperature_K: list[float]
    splits: list[bool]
    x1_poor: list[float | None] = Field(
        description="Mole fraction of component 1 in the liquid poor in it: its solubility"
    )
    x1_rich: list[float | None] = Field(description="... and in the liquid rich in it")
    consolute_points: list[ConsolutePoint]
    chances: list[SplitChanceAt] = Field(
        description="At the lowest, the middle and the highest temperature"
    )
    confidence: Confidence


class TernaryDiagramRequest(MixtureRequest):
    """Three components at one temperature."""

    temperature_K: Number
    tie_lines: WholeNumber = Field(default=15, ge=2, description="Of each two-liquid region")


class TieLine(StrictModel):
    """Two liquids in equilibrium."""

    first: list[float]
    second: list[float]
    distribution: list[float | None] = Field(
        description="Mole fraction of each component in the second liquid over that in the first"
    )


class TwoLiquidRegion(StrictModel):
    """A region of the triangle where two liquids coexist."""

    tie_lines: list[TieLine]
    plait_points: list[list[float]]
    binodal: list[list[float]] = Field(description="The edge of the region as one line")


class TernaryDiagramResponse(PredictionResponse):
    """Every two-liquid region, and triangles of three liquids; empty where there is one liquid."""

    temperature_K: float
    regions: list[TwoLiquidRegion]
    three_liquids: list[list[list[float]]] = Field(description="The three corners of each triangle")
    confidence: Confidence
