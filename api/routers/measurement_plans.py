"""What to measure to settle a question."""

from typing import Annotated, Any

from fastapi import APIRouter, Body

from api import answers
from api.dependencies import SettingsDependency, check_length
from api.documentation import BOILING_PROBLEMS, post_responses
from api.molecules_in import components_of, molecules_of
from api.schemas.measurement_plan import MeasurementPlanRequest, MeasurementPlanResponse
from groups import prediction
from groups.errors import InvalidInputError
from groups.structure.molecule import Molecule

router = APIRouter(prefix="/v1", tags=["measurements"])

_EXAMPLES: dict[str, Any] = {
    "where is the azeotrope": {
        "value": {
            "components": ["CC(C)O", "C=CC(=O)OC"],
            "question": "azeotrope",
            "pressure_kPa": 101.325,
        }
    },
    "which solvent parts hexane from benzene": {
        "value": {
            "components": ["CCCCCC", "c1ccccc1"],
            "question": "ranking",
            "solvents": ["CN1CCCC1=O", "CN(C)C=O", "O=S1(=O)CCCC1"],
            "temperature_K": 330.0,
        }
    },
}


@router.post(
    "/measurement-plan",
    operation_id="plan_measurements",
    summary="The few measurements that shrink the doubt about a question most",
    response_model=MeasurementPlanResponse,
    responses=post_responses(*BOILING_PROBLEMS),
)
def plan_measurements(
    request: Annotated[MeasurementPlanRequest, Body(openapi_examples=_EXAMPLES)],
    settings: SettingsDependency,
) -> MeasurementPlanResponse:
    """Ordered by how much each is expected to shrink the interval, with the width after it."""
    check_length("components", len(request.components), settings.max_components)
    components = components_of(request.components)
    molecules = [component.molecule for component in components]
    if request.question == "ranking":
        return answers.measurement_plan(_ranking(request, molecules), molecules)
    plan = prediction.measurement_plan(
        components,
        request.question,
        mole_fractions=request.mole_fractions,
        temperature_K=request.temperature_K,
        pressure_kPa=request.pressure_kPa,
        on_missing=request.on_missing,
    )
    return answers.measurement_plan(plan, molecules)


def _ranking(request: MeasurementPlanRequest, keys: list[Molecule]) -> prediction.MeasurementPlan:
    if request.solvents is None or request.temperature_K is None:
        field = "solvents" if request.solvents is None else "temperature_K"
        raise InvalidInputError(
            f"A ranking needs '{field}'.",
            cure="Give two or more 'solvents' and the 'temperature_K' of the comparison.",
            field=field,
        )
    solvents = molecules_of([(f"/solvents/{k}", one) for k, one in enumerate(request.solvents)])
    return prediction.ranking_plan(keys, solvents, request.temperature_K, request.on_missing)
