"""Measured points against every model here."""

from typing import Annotated, Any

from fastapi import APIRouter, Body, Depends
from fastapi.responses import Response

from api import comparison_answers
from api.dependencies import SettingsDependency, check_length
from api.documentation import BOILING_PROBLEMS, post_responses
from api.negotiation import MediaType, accepts
from api.responses import answer_as, picture_as, text_as
from api.schemas.comparisons import ComparisonRequest, ComparisonResponse
from groups.handoff.comparisons import points_to_csv, regions_to_csv

router = APIRouter(prefix="/v1/comparisons", tags=["hand-over"])
_media = Annotated[
    MediaType, Depends(accepts("application/json", "text/csv", "image/svg+xml", "image/png"))
]
_EXAMPLES: dict[str, Any] = {
    "two boiling points in degrees Celsius and bar": {
        "value": {
            "components": ["CCO", "O"],
            "points": [
                {"temperature_C": 79.8, "pressure_bar": 1.013, "x1": 0.5, "y1": 0.65},
                {"temperature_C": 84.0, "pressure_bar": 1.013, "x1": 0.2, "y1": 0.53},
            ],
        }
    },
    "activity coefficients as CSV": {
        "value": {
            "components": ["CC(C)=O", "CCCCCC"],
            "csv": "temperature,gamma_inf_1,gamma_inf_2\n298.15,6.2,5.1\n318.15,5.3,4.5\n",
        }
    },
}
_ALSO = {
    "text/csv": "`table` (points or regions) as CSV with `Accept: text/csv`",
    "image/svg+xml": "drawn with `Accept: image/svg+xml`",
    "image/png": "or `image/png`",
}


@router.post(
    "",
    operation_id="compare_measurements",
    summary="Measured points tested, compared with every model, and used to narrow the prediction",
    response_model=ComparisonResponse,
    responses=post_responses(
        *BOILING_PROBLEMS, "measurement", "too-few-points", "fit-refused", also=_ALSO
    ),
)
def compare_measurements(
    request: Annotated[ComparisonRequest, Body(openapi_examples=_EXAMPLES)],
    media: _media,
    settings: SettingsDependency,
) -> Response:
    """Published consistency tests first; then predictions and equations fitted to the points.

    Overall and apart for dilute in 1, middle and dilute in 2. No point is ever dropped.
    `conditioned` is the prediction's diagram before and after the points.
    """
    check_length("components", len(request.components), settings.max_components)
    check_length("points", len(request.points or []), settings.max_measurements)
    check_length("diagram_points", request.diagram_points, settings.max_grid_points)
    found = comparison_answers.compared(request, settings.max_measurements)
    if media in {"image/svg+xml", "image/png"}:
        from api.comparison_pictures import comparison_picture  # matplotlib is slow to import

        picture = comparison_picture(
            found.answer, found.conditioned, "svg" if "svg" in media else "png"
        )
        return picture_as(media, picture)
    if media == "text/csv":
        table = points_to_csv if request.table == "points" else regions_to_csv
        return text_as(media, table(found.answer))
    return answer_as(media, comparison_answers.comparison(found))
