"""Activity coefficients."""

from typing import Annotated

from fastapi import APIRouter, Body, Depends
from fastapi.responses import Response

from api import answers
from api.dependencies import SettingsDependency, check_length
from api.dilute_pairs import predicted_pairs
from api.documentation import MIXTURE_PROBLEMS, post_responses
from api.molecules_in import components_of
from api.negotiation import MediaType, accepts
from api.responses import CSV_ALSO, answer_as
from api.schemas.activity import (
    ActivityRequest,
    ActivityResponse,
    InfiniteDilutionRequest,
    InfiniteDilutionResponse,
)
from api.tables import activity_csv, infinite_dilution_csv
from groups import prediction

router = APIRouter(prefix="/v1", tags=["activity coefficients"])
_json_or_csv = Annotated[MediaType, Depends(accepts("application/json", "text/csv"))]

_ACTIVITY_EXAMPLES = {
    "two points of acetone/water": {
        "value": {
            "components": ["CC(C)=O", "O"],
            "temperature_K": 330.0,
            "mole_fractions": [[0.2, 0.8], [0.0, 1.0]],
            "method": "unifac-dortmund",
        }
    }
}
_DILUTION_EXAMPLES = {
    "two solvents for butanol": {
        "value": {
            "pairs": [
                {"solute": "CCCCO", "solvent": "O", "temperature_K": 298.15},
                {"solute": "CCCCO", "solvent": {"name": "toluene"}, "temperature_K": 298.15},
            ]
        }
    }
}


@router.post(
    "/activity-coefficients",
    operation_id="predict_activity_coefficients",
    summary="Activity coefficients, gE and hE at given points",
    response_model=ActivityResponse,
    responses=post_responses(*MIXTURE_PROBLEMS, also=CSV_ALSO),
)
def predict_activity_coefficients(
    request: Annotated[ActivityRequest, Body(openapi_examples=_ACTIVITY_EXAMPLES)],
    media: _json_or_csv,
    settings: SettingsDependency,
) -> Response:
    """A mole fraction of exactly 0 gives the limit of infinite dilution."""
    check_length("components", len(request.components), settings.max_components)
    points = max(len(request.mole_fractions), len(request.temperature_K))
    check_length("mole_fractions", points, settings.max_points)
    one = len(request.temperature_K) == 1
    answer = prediction.activity_coefficients(
        components_of(request.components),
        request.temperature_K[0] if one else request.temperature_K,
        request.mole_fractions,
        method=request.method,
        on_missing=request.on_missing,
    )
    return answer_as(media, answers.activity(answer), activity_csv)


@router.post(
    "/infinite-dilution",
    operation_id="predict_infinite_dilution",
    summary="Activity coefficients at infinite dilution of many pairs",
    response_model=InfiniteDilutionResponse,
    responses=post_responses(*MIXTURE_PROBLEMS, also=CSV_ALSO),
)
def predict_infinite_dilution(
    request: Annotated[InfiniteDilutionRequest, Body(openapi_examples=_DILUTION_EXAMPLES)],
    media: _json_or_csv,
    settings: SettingsDependency,
) -> Response:
    """A pair that no table describes comes back null with the reason; the others are computed.

    If no pair of the request can be taken, the request is refused.
    """
    check_length("pairs", len(request.pairs), settings.max_pairs)
    return answer_as(media, predicted_pairs(request), infinite_dilution_csv)
