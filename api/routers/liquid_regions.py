"""Mutual solubilities over temperature and ternary liquid-liquid diagrams."""

from typing import Annotated, Any

from fastapi import APIRouter, Body, Depends
from fastapi.responses import Response

from api import phase_answers
from api.dependencies import SettingsDependency, check_length
from api.documentation import MIXTURE_PROBLEMS, post_responses
from api.molecules_in import components_of
from api.negotiation import MediaType, accepts
from api.phase_tables import mutual_solubilities_csv, ternary_diagram_csv
from api.responses import CSV_ALSO, PICTURE_ALSO, answer_as, picture_as
from api.schemas.liquid_regions import (
    MutualSolubilitiesRequest,
    MutualSolubilitiesResponse,
    TernaryDiagramRequest,
    TernaryDiagramResponse,
)
from groups import prediction

router = APIRouter(prefix="/v1", tags=["phase equilibrium"])
_json_or_csv = Annotated[MediaType, Depends(accepts("application/json", "text/csv"))]
_or_picture = Annotated[
    MediaType,
    Depends(accepts("application/json", "text/csv", "image/svg+xml", "image/png")),
]
_SOLUBILITY_EXAMPLES: dict[str, Any] = {
    "aniline/cyclohexane with its consolute point": {
        "value": {
            "components": ["Nc1ccccc1", "C1CCCCC1"],
            "lowest_K": 280.0,
            "highest_K": 340.0,
            "points": 13,
        }
    }
}
_TERNARY_EXAMPLES: dict[str, Any] = {
    "acetic acid/water/diisopropyl ether at 20 °C": {
        "value": {
            "components": ["CC(=O)O", "O", "CC(C)OC(C)C"],
            "temperature_K": 293.15,
            "tie_lines": 10,
        }
    }
}


@router.post(
    "/mutual-solubilities",
    operation_id="find_mutual_solubilities",
    summary="What two liquids dissolve of each other over temperature",
    response_model=MutualSolubilitiesResponse,
    responses=post_responses(*MIXTURE_PROBLEMS, also=CSV_ALSO),
)
def find_mutual_solubilities(
    request: Annotated[MutualSolubilitiesRequest, Body(openapi_examples=_SOLUBILITY_EXAMPLES)],
    media: _json_or_csv,
    settings: SettingsDependency,
) -> Response:
    """A binary between two temperatures, with its upper and lower consolute points."""
    check_length("components", len(request.components), settings.max_components)
    check_length("points", request.points, settings.max_grid_points)
    answer = prediction.mutual_solubilities(
        components_of(request.components),
        lowest_K=request.lowest_K,
        highest_K=request.highest_K,
        points=request.points,
        method=request.method,
        on_missing=request.on_missing,
    )
    return answer_as(media, phase_answers.mutual_solubilities(answer), mutual_solubilities_csv)


@router.post(
    "/ternary-diagrams",
    operation_id="draw_ternary_diagram",
    summary="Binodal, tie lines and plait points of a ternary liquid",
    response_model=TernaryDiagramResponse,
    responses=post_responses(*MIXTURE_PROBLEMS, also=CSV_ALSO | PICTURE_ALSO),
)
def draw_ternary_diagram(
    request: Annotated[TernaryDiagramRequest, Body(openapi_examples=_TERNARY_EXAMPLES)],
    media: _or_picture,
    settings: SettingsDependency,
) -> Response:
    """Every two-liquid region at one temperature, and triangles of three liquids."""
    check_length("components", len(request.components), settings.max_components)
    check_length("tie_lines", request.tie_lines, settings.max_grid_points)
    answer = prediction.ternary_diagram(
        components_of(request.components),
        temperature_K=request.temperature_K,
        tie_lines=request.tie_lines,
        method=request.method,
        on_missing=request.on_missing,
    )
    if media in {"image/svg+xml", "image/png"}:
        from api.ternary_pictures import ternary_picture  # matplotlib is slow to import

        return picture_as(media, ternary_picture(answer, "svg" if "svg" in media else "png"))
    return answer_as(media, phase_answers.ternary_diagram(answer), ternary_diagram_csv)
