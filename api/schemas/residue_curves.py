"""Residue curves of ternaries."""

from typing import Literal

from pydantic import Field

from api.schemas.base import Number, StrictModel
from api.schemas.confidence import Confidence
from api.schemas.prediction import BoilingRequest, VapourPredictionResponse


class ResidueCurvesRequest(BoilingRequest):
    """Three components at one pressure."""

    pressure_kPa: Number
    starts: list[list[Number]] | None = Field(
        default=None,
        min_length=1,
        description="Mole fractions that curves shall pass through; ten of them where left out",
    )


class FixedPoint(StrictModel):
    """A pure component or an azeotrope, and how residue curves meet it."""

    mole_fractions: list[float]
    temperature_K: float
    stability: Literal["stable node", "unstable node", "saddle"] = Field(
        description="Curves begin at unstable nodes and end at stable ones"
    )
    azeotrope: bool
    stable_liquid: bool = Field(description="False: a heterogeneous azeotrope")


class ResidueCurve(StrictModel):
    """One path, from its lowest boiling end to its highest."""

    mole_fractions: list[list[float]]
    temperature_K: list[float | None]
    begins: int | None = Field(description="Index of the fixed point; null: stopped on its way")
    ends: int | None


class ResidueCurvesResponse(VapourPredictionResponse):
    """Fixed points, paths between them and distillation boundaries."""

    pressure_kPa: float
    fixed_points: list[FixedPoint]
    curves: list[ResidueCurve]
    boundaries: list[ResidueCurve]
    index_balanced: bool = Field(
        description="False where the fixed points make no possible map: one is missing"
    )
    confidence: Confidence
