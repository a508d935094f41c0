"""Which class of property method a mixture needs."""

from typing import Annotated, Any

from fastapi import APIRouter, Body, Depends
from fastapi.responses import Response

from api import advice_answers
from api.dependencies import SettingsDependency, check_length
from api.documentation import BOILING_PROBLEMS, post_responses
from api.molecules_in import components_of
from api.negotiation import MediaType, accepts
from api.responses import CSV_ALSO, answer_as
from api.schemas.advice import AdviceRequest, AdviceResponse
from groups import prediction

router = APIRouter(prefix="/v1/advice", tags=["phase equilibrium"])
_json_or_csv = Annotated[MediaType, Depends(accepts("application/json", "text/csv"))]
_EXAMPLES: dict[str, Any] = {
    "acetic acid and water in a column at 1 atm": {
        "value": {
            "components": ["CC(=O)O", "O"],
            "temperature_K": [370.0, 395.0],
            "pressure_kPa": [95.0, 120.0],
        }
    },
    "carbon dioxide over methanol": {
        "value": {
            "components": ["CO", {"name": "carbon dioxide"}],
            "temperature_K": [298.15, 333.15],
            "pressure_kPa": [100.0, 5000.0],
        }
    },
}


@router.post(
    "",
    operation_id="advise",
    summary="Ideal or real gas, ideal or real solution, and which class of method",
    response_model=AdviceResponse,
    responses=post_responses(*BOILING_PROBLEMS, also=CSV_ALSO),
)
def advise(
    request: Annotated[AdviceRequest, Body(openapi_examples=_EXAMPLES)],
    media: _json_or_csv,
    settings: SettingsDependency,
) -> Response:
    """Computed for this very mixture, with what each simplification would cost."""
    check_length("components", len(request.components), settings.max_components)
    ranges = request.mole_fractions
    answer = prediction.advice(
        components_of(request.components),
        temperature_K=(request.temperature_K[0], request.temperature_K[1]),
        pressure_kPa=(request.pressure_kPa[0], request.pressure_kPa[1]),
        mole_fractions=ranges,
        on_missing=request.on_missing,
    )
    return answer_as(media, advice_answers.advice(answer), advice_answers.advice_csv)
