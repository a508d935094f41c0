"""Pages for people: the start page, the reference, and what each problem means."""

from typing import Annotated

from fastapi import APIRouter, Depends, Request
from fastapi.responses import Response

from api.negotiation import MediaType, accepts
from api.pages.problem_page import problem_page
from api.pages.reference import reference_page
from api.pages.start import start_page
from api.problem_types import RequestProblemError, all_problem_types
from api.schemas.problem_description import ProblemDescription

router = APIRouter(include_in_schema=False)


@router.get("/")
def start() -> Response:
    """What this is, and one prediction to try."""
    return _html(start_page())


@router.get("/reference")
def reference(request: Request) -> Response:
    """Every address, from the OpenAPI description; needs nothing from the network."""
    return _html(reference_page(request.app.openapi()))


@router.get("/problems")
def problems() -> Response:
    """All problem types."""
    return _html(problem_page(all_problem_types().values()))


@router.get("/problems/{slug}")
def problem(
    slug: str,
    media: Annotated[MediaType, Depends(accepts("text/html", "application/json"))],
) -> Response:
    """What one problem type means and what to do about it."""
    kind = all_problem_types().get(slug)
    if kind is None:
        raise RequestProblemError(
            "not-found", "There is no such problem type.", cure="See /problems for all of them."
        )
    if media == "text/html":
        return _html(problem_page([kind]))
    described = ProblemDescription(
        type=kind.uri, title=kind.title, status=kind.status, cure=kind.cure
    )
    return Response(described.model_dump_json(), media_type="application/json")


def _html(page: str) -> Response:
    return Response(page, media_type="text/html; charset=utf-8")
