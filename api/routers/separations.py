"""Azeotropes and liquid splits: what limits a separation."""

from typing import Annotated, Any

from fastapi import APIRouter, Body, Depends
from fastapi.responses import Response

from api import answers
from api.dependencies import SettingsDependency, check_length
from api.documentation import BOILING_PROBLEMS, MIXTURE_PROBLEMS, post_responses
from api.molecules_in import components_of
from api.negotiation import MediaType, accepts
from api.responses import CSV_ALSO, answer_as
from api.schemas.equilibrium import (
    AzeotropesRequest,
    AzeotropesResponse,
    LiquidSplitRequest,
    LiquidSplitResponse,
)
from api.tables import azeotropes_csv, liquid_split_csv
from groups import prediction

router = APIRouter(prefix="/v1", tags=["phase equilibrium"])
_json_or_csv = Annotated[MediaType, Depends(accepts("application/json", "text/csv"))]

_AZEOTROPE_EXAMPLES: dict[str, Any] = {
    "acetone/chloroform/methanol at 1 atm": {
        "value": {"components": ["CC(C)=O", "ClC(Cl)Cl", "CO"], "pressure_kPa": 101.325}
    }
}
_SPLIT_EXAMPLES: dict[str, Any] = {
    "1-butanol/water at 25 °C": {"value": {"components": ["CCCCO", "O"], "temperature_K": 298.15}},
    "a feed of water, benzene and ethanol at 25 °C": {
        "value": {
            "components": ["O", "c1ccccc1", "CCO"],
            "mole_fractions": [0.45, 0.35, 0.2],
            "temperature_K": 298.15,
        }
    },
}


@router.post(
    "/azeotropes",
    operation_id="find_azeotropes",
    summary="All azeotropes of a mixture",
    response_model=AzeotropesResponse,
    responses=post_responses(*BOILING_PROBLEMS, also=CSV_ALSO),
)
def find_azeotropes(
    request: Annotated[AzeotropesRequest, Body(openapi_examples=_AZEOTROPE_EXAMPLES)],
    media: _json_or_csv,
    settings: SettingsDependency,
) -> Response:
    """Binary and higher, at one pressure or one temperature. An empty list means none."""
    check_length("components", len(request.components), settings.max_components)
    answer = prediction.azeotropes(
        components_of(request.components),
        pressure_kPa=request.pressure_kPa,
        temperature_K=request.temperature_K,
        method=request.method,
        on_missing=request.on_missing,
        vapour=request.vapour,
    )
    return answer_as(media, answers.azeotropes(answer), azeotropes_csv)


@router.post(
    "/liquid-splits",
    operation_id="find_liquid_split",
    summary="Does the liquid split, and into which liquids",
    response_model=LiquidSplitResponse,
    responses=post_responses(*MIXTURE_PROBLEMS, also=CSV_ALSO),
)
def find_liquid_split(
    request: Annotated[LiquidSplitRequest, Body(openapi_examples=_SPLIT_EXAMPLES)],
    media: _json_or_csv,
    settings: SettingsDependency,
) -> Response:
    """The coexisting liquids, their amounts and distribution coefficients, at one temperature."""
    check_length("components", len(request.components), settings.max_components)
    answer = prediction.liquid_splits(
        components_of(request.components),
        temperature_K=request.temperature_K,
        mole_fractions=request.mole_fractions,
        method=request.method,
        on_missing=request.on_missing,
    )
    return answer_as(media, answers.liquid_split(answer), liquid_split_csv)
