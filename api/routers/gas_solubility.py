"""Henry's constants and solubilities of gases."""

from typing import Annotated, Any

from fastapi import APIRouter, Body, Depends
from fastapi.responses import Response

from api import phase_answers
from api.dependencies import SettingsDependency, check_length
from api.documentation import BOILING_PROBLEMS, post_responses
from api.molecules_in import components_at
from api.negotiation import MediaType, accepts
from api.phase_tables import gas_solubility_csv
from api.responses import CSV_ALSO, answer_as
from api.schemas.gas_solubility import GasSolubilityRequest, GasSolubilityResponse
from groups import prediction

router = APIRouter(prefix="/v1/gas-solubility", tags=["phase equilibrium"])
_json_or_csv = Annotated[MediaType, Depends(accepts("application/json", "text/csv"))]
_EXAMPLES: dict[str, Any] = {
    "carbon dioxide in methanol at 10 bar": {
        "value": {
            "gas": {"name": "carbon dioxide"},
            "solvents": ["CO"],
            "temperature_K": [283.15, 298.15, 313.15],
            "pressure_kPa": 1000.0,
        }
    },
    "nitrogen in a solvent mixture": {
        "value": {
            "gas": "N#N",
            "solvents": ["CCCCCC", "c1ccccc1"],
            "solvent_mole_fractions": [0.5, 0.5],
            "temperature_K": 298.15,
            "pressure_kPa": 5000.0,
        }
    },
}


@router.post(
    "",
    operation_id="find_gas_solubility",
    summary="Henry's constant and solubility of a gas",
    response_model=GasSolubilityResponse,
    responses=post_responses(*BOILING_PROBLEMS, also=CSV_ALSO),
)
def find_gas_solubility(
    request: Annotated[GasSolubilityRequest, Body(openapi_examples=_EXAMPLES)],
    media: _json_or_csv,
    settings: SettingsDependency,
) -> Response:
    """By the predictive equation of state; no vapour pressure is needed."""
    check_length("solvents", len(request.solvents), settings.max_components - 1)
    check_length("temperature_K", len(request.temperature_K), settings.max_grid_points)
    fields = [("/gas", request.gas)]
    fields += [(f"/solvents/{k}", value) for k, value in enumerate(request.solvents)]
    gas, *solvents = components_at(fields)
    answer = prediction.gas_solubility(
        gas,
        solvents,
        temperature_K=request.temperature_K,
        pressure_kPa=request.pressure_kPa,
        solvent_mole_fractions=request.solvent_mole_fractions,
    )
    return answer_as(media, phase_answers.gas_solubility(answer), gas_solubility_csv)
