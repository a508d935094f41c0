"""Parameters for a flowsheet, fitted to the prediction."""

from typing import Annotated, Any

from fastapi import APIRouter, Body, Depends
from fastapi.responses import Response

from api import fit_answers
from api.dependencies import SettingsDependency, check_length
from api.documentation import BOILING_PROBLEMS, post_responses
from api.molecules_in import components_of
from api.negotiation import MediaType, accepts
from api.responses import answer_as, text_as
from api.schemas.fits import FitRequest, FitResponse
from groups import handoff
from groups.errors import FitRefusedError

router = APIRouter(prefix="/v1/fits", tags=["hand-over"])
_media = Annotated[
    MediaType, Depends(accepts("application/json", "text/csv", "text/plain", "application/xml"))
]
_EXAMPLES: dict[str, Any] = {
    "NRTL for isopropanol/methyl acrylate about 1 atm": {
        "value": {
            "components": ["CC(C)O", "C=CC(=O)OC"],
            "model": "nrtl",
            "temperature_range_K": [330.0, 360.0],
            "pressure_kPa": 101.325,
        }
    },
    "UNIQUAC for all pairs of three": {
        "value": {
            "components": ["CC(C)=O", "CO", "O"],
            "model": "uniquac",
            "pressure_kPa": 101.325,
        }
    },
}
_ALSO = {
    "text/csv": "the parameter sheet as CSV with `Accept: text/csv`",
    "text/plain": "or as a text to read with `Accept: text/plain`",
    "application/xml": "the predicted data as ThermoML with `Accept: application/xml`",
}


@router.post(
    "",
    operation_id="fit_prediction",
    summary="NRTL, UNIQUAC, Wilson, van Laar or Margules fitted to the prediction",
    response_model=FitResponse,
    responses=post_responses(*BOILING_PROBLEMS, "fit-refused", also=_ALSO),
)
def fit_prediction(
    request: Annotated[FitRequest, Body(openapi_examples=_EXAMPLES)],
    media: _media,
    settings: SettingsDependency,
) -> Response:
    """Fitted to ln gamma, both infinite dilutions included, for one pair or all pairs at once.

    Each value counts by the prediction's own interval. A fit that invents or loses a split or an
    azeotrope comes back with `accepted` false and a note.
    """
    count = len(request.components)
    check_length("components", count, settings.max_components)
    values = request.temperatures * request.compositions * max(count * (count - 1) // 2, 1)
    check_length("compositions", values, settings.max_fit_values)
    answer = fitted(request)
    if media == "application/xml":
        return text_as(media, handoff.predicted_thermoml(answer))
    if media == "application/json":
        return answer_as(media, fit_answers.fit(answer, request))
    if answer.parameters is None:
        raise FitRefusedError(answer.fit.refused[0].reason, field="model")
    as_text = handoff.to_csv if media == "text/csv" else handoff.to_text
    return text_as(media, as_text(answer.parameters))


def fitted(request: FitRequest) -> handoff.FitAnswer:
    """The fit that a request asks for."""
    span = request.temperature_range_K
    return handoff.fit(
        components_of(request.components),
        model=request.model,
        form=request.form,
        alpha=None if request.alpha == "fit" else request.alpha,
        wilson_volumes=request.wilson_volumes,
        temperature_range_K=None if span is None else (span[0], span[1]),
        pressure_kPa=request.pressure_kPa,
        temperatures=request.temperatures,
        compositions=request.compositions,
        method=request.method,
        on_missing=request.on_missing,
    )
