"""Binary Txy and Pxy diagrams, as numbers and as pictures."""

from typing import Annotated, Any

from fastapi import APIRouter, Body, Depends
from fastapi.responses import Response

from api import answers
from api.dependencies import SettingsDependency, check_length
from api.documentation import BOILING_PROBLEMS, post_responses
from api.molecules_in import components_of
from api.negotiation import MediaType, accepts
from api.responses import CSV_ALSO, answer_as, picture_as
from api.schemas.equilibrium import DiagramRequest, DiagramResponse
from api.tables import diagram_csv
from groups import prediction

router = APIRouter(prefix="/v1/diagrams", tags=["phase equilibrium"])
_media = Annotated[
    MediaType,
    Depends(accepts("application/json", "text/csv", "image/svg+xml", "image/png")),
]
_EXAMPLES: dict[str, Any] = {
    "acetone/chloroform at 1 atm": {
        "value": {
            "kind": "Txy",
            "components": ["CC(C)=O", "ClC(Cl)Cl"],
            "pressure_kPa": 101.325,
            "points": 51,
        }
    },
    "1-butanol/water at 60 °C": {
        "value": {"kind": "Pxy", "components": ["CCCCO", "O"], "temperature_K": 333.15}
    },
}
_ALSO = CSV_ALSO | {
    "image/svg+xml": "drawn with `Accept: image/svg+xml`",
    "image/png": "or `image/png`",
}


@router.post(
    "",
    operation_id="predict_diagram",
    summary="A Txy or Pxy diagram of a binary",
    response_model=DiagramResponse,
    responses=post_responses(*BOILING_PROBLEMS, also=_ALSO),
)
def predict_diagram(
    request: Annotated[DiagramRequest, Body(openapi_examples=_EXAMPLES)],
    media: _media,
    settings: SettingsDependency,
) -> Response:
    """Points inside a liquid-liquid gap have `stable` false; `x1` there is the overall liquid."""
    check_length("components", len(request.components), settings.max_components)
    check_length("points", request.points, settings.max_grid_points)
    answer = prediction.diagram(
        request.kind,
        components_of(request.components),
        pressure_kPa=request.pressure_kPa,
        temperature_K=request.temperature_K,
        points=request.points,
        method=request.method,
        on_missing=request.on_missing,
        vapour=request.vapour,
    )
    if media in {"image/svg+xml", "image/png"}:
        from api.pictures import diagram_picture  # matplotlib is slow to import

        return picture_as(media, diagram_picture(answer, "svg" if "svg" in media else "png"))
    return answer_as(media, answers.diagram(answer), diagram_csv)
