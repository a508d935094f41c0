"""The methods: groups, sources, ranges, audit."""

from typing import Annotated

from fastapi import APIRouter, Depends

from api.documentation import problem_responses
from api.methods import method_detail, method_entries
from api.negotiation import accepts
from api.schemas.service import MethodDetail, MethodsResponse

router = APIRouter(prefix="/v1/methods", tags=["methods"])
_json_only = Annotated[str, Depends(accepts("application/json"))]


@router.get(
    "",
    operation_id="list_methods",
    summary="All methods",
    responses=problem_responses("not-acceptable"),
)
def list_methods(_: _json_only) -> MethodsResponse:
    """Identifiers that every `method` field takes, with the temperature range of each table."""
    return MethodsResponse(default="auto", methods=method_entries())


@router.get(
    "/{method}",
    operation_id="get_method",
    summary="One method: groups, sources, range, audit",
    responses=problem_responses("method-not-found", "not-acceptable"),
)
def get_method(method: str, _: _json_only) -> MethodDetail:
    """Groups with R and Q, the publications, and the pairs with, without and under suspicion."""
    return method_detail(method)
