"""Residue curve maps of ternaries."""

from typing import Annotated, Any

from fastapi import APIRouter, Body, Depends
from fastapi.responses import Response

from api import phase_answers
from api.dependencies import SettingsDependency, check_length
from api.documentation import BOILING_PROBLEMS, post_responses
from api.molecules_in import components_of
from api.negotiation import MediaType, accepts
from api.phase_tables import residue_curves_csv
from api.responses import CSV_ALSO, PICTURE_ALSO, answer_as, picture_as
from api.schemas.residue_curves import ResidueCurvesRequest, ResidueCurvesResponse
from groups import prediction

router = APIRouter(prefix="/v1/residue-curves", tags=["phase equilibrium"])
_media = Annotated[
    MediaType,
    Depends(accepts("application/json", "text/csv", "image/svg+xml", "image/png")),
]
_EXAMPLES: dict[str, Any] = {
    "acetone/chloroform/methanol at 1 atm": {
        "value": {
            "components": ["CC(C)=O", "ClC(Cl)Cl", "CO"],
            "pressure_kPa": 101.325,
            "vapour": "ideal",
        }
    }
}


@router.post(
    "",
    operation_id="draw_residue_curves",
    summary="Residue curves of a ternary, with nodes, saddles and distillation boundaries",
    response_model=ResidueCurvesResponse,
    responses=post_responses(*BOILING_PROBLEMS, also=CSV_ALSO | PICTURE_ALSO),
)
def draw_residue_curves(
    request: Annotated[ResidueCurvesRequest, Body(openapi_examples=_EXAMPLES)],
    media: _media,
    settings: SettingsDependency,
) -> Response:
    """Curves run from their lowest boiling end to their highest."""
    check_length("components", len(request.components), settings.max_components)
    check_length("starts", len(request.starts or ()), settings.max_grid_points)
    answer = prediction.residue_curves(
        components_of(request.components),
        pressure_kPa=request.pressure_kPa,
        starts=request.starts,
        method=request.method,
        on_missing=request.on_missing,
        vapour=request.vapour,
    )
    if media in {"image/svg+xml", "image/png"}:
        from api.ternary_pictures import residue_picture  # matplotlib is slow to import

        return picture_as(media, residue_picture(answer, "svg" if "svg" in media else "png"))
    return answer_as(media, phase_answers.residue_curves(answer), residue_curves_csv)
