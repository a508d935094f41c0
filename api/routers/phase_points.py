"""Bubble points, dew points and flashes."""

from typing import Annotated, Any

from fastapi import APIRouter, Body, Depends
from fastapi.responses import Response

from api import answers
from api.dependencies import SettingsDependency, check_length
from api.documentation import BOILING_PROBLEMS, post_responses
from api.molecules_in import components_of
from api.negotiation import MediaType, accepts
from api.responses import CSV_ALSO, answer_as
from api.schemas.equilibrium import FlashRequest, PhasePointResponse, PointRequest
from api.tables import phase_point_csv
from groups import prediction

router = APIRouter(prefix="/v1", tags=["phase equilibrium"])
_json_or_csv = Annotated[MediaType, Depends(accepts("application/json", "text/csv"))]
_responses = post_responses(*BOILING_PROBLEMS, also=CSV_ALSO)

_EXAMPLES: dict[str, Any] = {
    "at a pressure": {
        "value": {
            "components": ["CCO", "O"],
            "mole_fractions": [0.3, 0.7],
            "pressure_kPa": 101.325,
        }
    },
    "at a temperature, with the user's own vapour pressure": {
        "value": {
            "components": [
                {
                    "smiles": "CCO",
                    "vapour_pressure": {
                        "equation": "points",
                        "temperature_K": [320.0, 335.0, 351.0],
                        "pressure_kPa": [25.2, 51.0, 98.5],
                    },
                },
                {"name": "water"},
            ],
            "mole_fractions": [0.3, 0.7],
            "temperature_K": 343.15,
        }
    },
}
_FLASH_EXAMPLES: dict[str, Any] = {
    "a half-boiled feed": {
        "value": {
            "components": ["CO", "O"],
            "mole_fractions": [0.4, 0.6],
            "temperature_K": 353.15,
            "pressure_kPa": 101.325,
        }
    },
    "two liquids and a vapour, half boiled": {
        "value": {
            "components": ["CCCCO", "O", "CCO"],
            "mole_fractions": [0.2, 0.75, 0.05],
            "pressure_kPa": 101.325,
            "vapour_fraction": 0.2,
        }
    },
    "a gas over a liquid, by the equation of state": {
        "value": {
            "components": ["CO", "O=C=O"],
            "mole_fractions": [0.6, 0.4],
            "temperature_K": 313.15,
            "pressure_kPa": 3000.0,
            "method": "psrk",
        }
    },
}
_Point = Annotated[PointRequest, Body(openapi_examples=_EXAMPLES)]


@router.post(
    "/bubble-point",
    operation_id="predict_bubble_point",
    summary="Where a liquid begins to boil",
    response_model=PhasePointResponse,
    responses=_responses,
)
def predict_bubble_point(
    request: _Point, media: _json_or_csv, settings: SettingsDependency
) -> Response:
    """`mole_fractions` is the liquid. Give `temperature_K` or `pressure_kPa`, not both."""
    check_length("components", len(request.components), settings.max_components)
    answer = prediction.bubble_point(
        components_of(request.components),
        request.mole_fractions,
        temperature_K=request.temperature_K,
        pressure_kPa=request.pressure_kPa,
        method=request.method,
        on_missing=request.on_missing,
        vapour=request.vapour,
    )
    return answer_as(media, answers.phase_point(answer), phase_point_csv)


@router.post(
    "/dew-point",
    operation_id="predict_dew_point",
    summary="Where a vapour begins to condense",
    response_model=PhasePointResponse,
    responses=_responses,
)
def predict_dew_point(
    request: _Point, media: _json_or_csv, settings: SettingsDependency
) -> Response:
    """`mole_fractions` is the vapour. Give `temperature_K` or `pressure_kPa`, not both."""
    check_length("components", len(request.components), settings.max_components)
    answer = prediction.dew_point(
        components_of(request.components),
        request.mole_fractions,
        temperature_K=request.temperature_K,
        pressure_kPa=request.pressure_kPa,
        method=request.method,
        on_missing=request.on_missing,
        vapour=request.vapour,
    )
    return answer_as(media, answers.phase_point(answer), phase_point_csv)


@router.post(
    "/flash",
    operation_id="predict_flash",
    summary="The phases of a feed: liquids and a vapour",
    response_model=PhasePointResponse,
    responses=_responses,
)
def predict_flash(
    request: Annotated[FlashRequest, Body(openapi_examples=_FLASH_EXAMPLES)],
    media: _json_or_csv,
    settings: SettingsDependency,
) -> Response:
    """Give two of `temperature_K`, `pressure_kPa` and `vapour_fraction`; `phases` has them all."""
    check_length("components", len(request.components), settings.max_components)
    answer = prediction.flash(
        components_of(request.components),
        request.mole_fractions,
        temperature_K=request.temperature_K,
        pressure_kPa=request.pressure_kPa,
        vapour_fraction=request.vapour_fraction,
        method=request.method,
        on_missing=request.on_missing,
        vapour=request.vapour,
    )
    return answer_as(media, answers.phase_point(answer), phase_point_csv)
