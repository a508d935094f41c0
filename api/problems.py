"""Problem details (RFC 9457): every refusal of the service is made here and nowhere else."""

import math
import re
from collections.abc import Mapping, Sequence

from fastapi import FastAPI, Request
from fastapi.exceptions import RequestValidationError, ResponseValidationError
from fastapi.responses import Response
from starlette.exceptions import HTTPException

from api.molecules_in import MoleculesRefusedError
from api.problem_types import (
    REQUEST_TYPES,
    ProblemType,
    RequestProblemError,
    problem_type_of,
)
from api.schemas.problem import FieldProblem, Problem
from api.validation_messages import field_problems
from groups.errors import MixwrightError

PROBLEM_JSON = "application/problem+json"

_SLUG_OF_STATUS = {
    400: "unreadable-body",
    404: "not-found",
    405: "verb-not-allowed",
    406: "not-acceptable",
    413: "body-too-large",
    415: "unsupported-media-type",
    503: "time-limit",
}
_MAX_FIELD_PROBLEMS = 20


class ProblemResponse(Response):
    """A problem as a response."""

    media_type = PROBLEM_JSON

    def __init__(self, problem: Problem, headers: dict[str, str] | None = None) -> None:
        super().__init__(encode(problem), status_code=problem.status, headers=headers)


def encode(problem: Problem) -> bytes:
    """JSON of a problem; a lone surrogate in a text becomes a question mark."""
    return (
        problem.model_copy(update={"detail": printable(problem.detail)})
        .model_dump_json(exclude_none=True)
        .encode()
    )


def printable(text: str) -> str:
    """Text that can be encoded whatever the request held."""
    return text.encode("utf-8", "replace").decode()


def pointer(field: str | None) -> str | None:
    """JSON pointer of a field named as in `components[2].smiles`; pointers pass unchanged."""
    if field is None or field.startswith("/"):
        return field
    parts = re.split(r"[.\[\]]+", field.strip(".[]"))
    return "/" + "/".join(parts)


def problem_of(
    kind: ProblemType,
    detail: str,
    *,
    cure: str = "",
    field: str | None = None,
    errors: Sequence[FieldProblem] = (),
    members: dict[str, object] | None = None,
) -> Problem:
    """A problem of one kind."""
    problem = Problem(
        type=kind.uri,
        title=kind.title,
        status=kind.status,
        detail=printable(detail),
        field=None if field is None else printable(field),
        cure=cure or kind.cure,
        errors=list(errors),
    )
    return problem.model_copy(update=members or {})


def problem_of_error(error: MixwrightError, field: str | None = None) -> Problem:
    """The problem that an error of `groups` becomes; `field` where the request knows it better."""
    kind = problem_type_of(error)
    members = {name: _wire(getattr(error, name)) for name in kind.members if hasattr(error, name)}
    detail = str(error) if kind.status < 500 else kind.title + "."
    return problem_of(
        kind, detail, cure=error.cure, field=field or pointer(error.field), members=members
    )


def problem_of_validation(errors: Sequence[Mapping[str, object]], body: object = None) -> Problem:
    """The problem that the errors of a schema become, with the path and cure of each."""
    if errors and errors[0].get("type") == "json_invalid":
        return _syntax_problem(errors[0])
    found = field_problems(errors[:_MAX_FIELD_PROBLEMS], body)
    more = len(errors) - len(found)
    detail = found[0].detail if found else "The request does not have the documented shape."
    if len(errors) > 1:
        detail += f" ({len(errors)} fields are wrong" + (
            f"; the first {len(found)} are listed.)" if more else ".)"
        )
    return problem_of(
        REQUEST_TYPES["invalid-request"],
        detail,
        cure=found[0].cure if found else "",
        field=found[0].field if found else None,
        errors=found if len(found) > 1 else (),
    )


def _syntax_problem(error: Mapping[str, object]) -> Problem:
    location = error.get("loc")
    place = location[-1] if isinstance(location, tuple) and location else "an unknown place"
    context = error.get("ctx")
    reason = context.get("error") if isinstance(context, dict) else "not JSON"
    return problem_of(
        REQUEST_TYPES["unreadable-body"],
        f"The body is not valid JSON: {reason}, at character {place}.",
        cure="Correct the JSON at the character named (counted from 0).",
    )


def _wire(value: object) -> object:
    """A typed field of an error as JSON can hold it."""
    if isinstance(value, float) and not math.isfinite(value):
        return None
    if isinstance(value, str):
        return printable(value)
    if isinstance(value, (tuple, list)):
        return [_wire(item) for item in value]
    return value if isinstance(value, (int, float)) else None


async def _refused_by_groups(_request: Request, error: Exception) -> Response:
    assert isinstance(error, MixwrightError)
    return ProblemResponse(problem_of_error(error))


async def _molecules_refused(_request: Request, error: Exception) -> Response:
    assert isinstance(error, MoleculesRefusedError)
    field, fault = error.faults[0]
    first = problem_of_error(fault, field)
    if len(error.faults) > 1:
        detail = f"{first.detail} ({len(error.faults)} molecules are refused.)"
        listed = [
            FieldProblem(field=place, detail=problem.detail, cure=problem.cure)
            for place, problem in (
                (place, problem_of_error(one)) for place, one in error.faults[:_MAX_FIELD_PROBLEMS]
            )
        ]
        first = first.model_copy(update={"detail": detail, "errors": listed})
    return ProblemResponse(first)


async def _refused_by_api(_request: Request, error: Exception) -> Response:
    assert isinstance(error, RequestProblemError)
    kind = REQUEST_TYPES[error.slug]
    return ProblemResponse(problem_of(kind, str(error), cure=error.cure, field=error.field))


async def _invalid(_request: Request, error: Exception) -> Response:
    assert isinstance(error, RequestValidationError)
    return ProblemResponse(problem_of_validation(error.errors(), error.body))


async def _http(request: Request, error: Exception) -> Response:
    assert isinstance(error, HTTPException)
    slug = _SLUG_OF_STATUS.get(error.status_code)
    if slug is None:
        slug = "bad-request" if error.status_code < 500 else "internal-error"
    details = {
        "not-found": f"There is nothing at {request.url.path}.",
        "verb-not-allowed": f"{request.url.path} does not take {request.method}.",
        "unreadable-body": "The body cannot be read as JSON in UTF-8: wrong encoding, a number "
        "with too many digits, or nested too deeply.",
        "body-too-large": str(error.detail),
    }
    detail = details.get(slug, REQUEST_TYPES[slug].title + ".")
    headers = {k: v for k, v in (error.headers or {}).items() if k.lower() in {"allow"}}
    return ProblemResponse(problem_of(REQUEST_TYPES[slug], detail), headers)


async def _failed(_request: Request, _error: Exception) -> Response:
    # The server's log has the traceback; the caller learns nothing of the inside.
    kind = REQUEST_TYPES["internal-error"]
    return ProblemResponse(problem_of(kind, "The service failed on this request."))


def add_problem_handlers(app: FastAPI) -> None:
    """Make every error of the application a problem."""
    app.add_exception_handler(MixwrightError, _refused_by_groups)
    app.add_exception_handler(MoleculesRefusedError, _molecules_refused)
    app.add_exception_handler(RequestProblemError, _refused_by_api)
    app.add_exception_handler(RequestValidationError, _invalid)
    app.add_exception_handler(ResponseValidationError, _failed)
    app.add_exception_handler(HTTPException, _http)
    app.add_exception_handler(Exception, _failed)
