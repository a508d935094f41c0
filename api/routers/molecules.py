"""Molecules: which they are, and which groups they split into."""

from collections.abc import Sequence
from typing import Annotated

from fastapi import APIRouter, Body, Depends
from fastapi.responses import Response

from api.dependencies import SettingsDependency, check_length
from api.documentation import MOLECULE_PROBLEMS, post_responses
from api.groups_out import molecule_result, refused_result
from api.molecules_in import Refused, batch_of, molecules_of, refuse
from api.negotiation import MediaType, accepts
from api.responses import CSV_ALSO, answer_as, picture_as
from api.schemas.molecule import DepictionRequest, MoleculesRequest, MoleculesResponse
from api.tables import molecules_csv
from groups.errors import UnknownMethodError
from groups.prediction import ALL_METHODS, assign_groups
from groups.structure.assignment import Assignment
from groups.structure.depiction import depict
from groups.structure.molecule import Molecule

router = APIRouter(prefix="/v1/molecules", tags=["molecules"])
_json_or_csv = Annotated[MediaType, Depends(accepts("application/json", "text/csv"))]

_EXAMPLES = {
    "ways to name a molecule": {
        "value": {
            "molecules": ["CC(C)=O", {"name": "ethanol"}, {"cas": "7732-18-5"}],
            "methods": ["unifac", "unifac-dortmund"],
        }
    }
}


@router.post(
    "",
    operation_id="describe_molecules",
    summary="Identify molecules and split them into groups",
    response_model=MoleculesResponse,
    responses=post_responses(*MOLECULE_PROBLEMS, also=CSV_ALSO),
)
def describe_molecules(
    request: Annotated[MoleculesRequest, Body(openapi_examples=_EXAMPLES)],
    media: _json_or_csv,
    settings: SettingsDependency,
) -> Response:
    """Every heavy atom and every hydrogen lands in exactly one group, or `complete` is false.

    A molecule that cannot be taken (a salt, a metal, an unknown name, unreadable SMILES) comes back
    null with its `problem`; if that is every molecule of the request, the request is refused.
    """
    check_length("molecules", len(request.molecules), settings.max_molecules)
    batch = batch_of([(f"/molecules/{k}", m) for k, m in enumerate(request.molecules)])
    molecules = [molecule for molecule in batch if isinstance(molecule, Molecule)]
    assignments = iter(_assignments(molecules, request.methods))
    if not molecules:
        refuse([refused for refused in batch if isinstance(refused, Refused)])
    results = [
        refused_result(item)
        if isinstance(item, Refused)
        else molecule_result(item, next(assignments))
        for item in batch
    ]
    return answer_as(media, MoleculesResponse(results=results), molecules_csv)


def _assignments(
    molecules: Sequence[Molecule], methods: Sequence[str]
) -> tuple[dict[str, Assignment], ...]:
    """By each method asked for; one that has no groups is named by its place."""
    try:
        return assign_groups(molecules, list(dict.fromkeys(methods)))
    except UnknownMethodError as error:
        error.field = f"methods[{methods.index(error.method)}]"
        if error.method in ALL_METHODS:
            error.cure = f"Take '{error.method}' out; it has no groups of its own."
        raise


@router.post(
    "/depictions",
    operation_id="depict_molecule",
    summary="Draw a molecule with its groups",
    response_class=Response,
    responses=post_responses(
        *MOLECULE_PROBLEMS, also={"image/svg+xml": "a drawing, readable without colour"}
    ),
)
def depict_molecule(
    request: Annotated[
        DepictionRequest,
        Body(openapi_examples={"aspirin": {"value": {"molecule": "CC(=O)Oc1ccccc1C(=O)O"}}}),
    ],
    media: Annotated[MediaType, Depends(accepts("image/svg+xml"))],
) -> Response:
    """SVG with each group marked and a legend."""
    [molecule] = molecules_of([("/molecule", request.molecule)])
    [assignments] = assign_groups([molecule], [request.method])
    return picture_as(media, depict(molecule, assignments[request.method]))
