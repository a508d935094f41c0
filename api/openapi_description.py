"""What the OpenAPI description says as a whole: cautions, problems, tags."""

from typing import Any

from fastapi import FastAPI
from fastapi.openapi.utils import get_openapi

from api.problem_types import all_problem_types
from api.schemas.problem import Problem
from groups.prediction import CAUTIONS

_INTRODUCTION = """\
Activity coefficients and phase equilibrium of liquid mixtures that nobody has measured, from the
molecules alone, with the reasons to doubt each number.

Units stand in the names of fields (`temperature_K`, `pressure_kPa`). A molecule is SMILES as a
text, or an object with exactly one of `smiles`, `name` and `cas`. Tables come as CSV with
`Accept: text/csv`, diagrams as pictures with `Accept: image/svg+xml`.

## Cautions
{cautions}

## Problems
Every refusal is `application/problem+json` (RFC 9457). `type` is stable, `field` is a JSON pointer
to the offending field, `cure` says what to do.

| type | status | title |
| --- | --- | --- |
{problems}
"""


def describe(app: FastAPI) -> None:
    """Give the application a complete OpenAPI description."""

    def openapi() -> dict[str, Any]:
        if app.openapi_schema is None:
            app.openapi_schema = _description(app)
        return app.openapi_schema

    app.openapi = openapi  # type: ignore[method-assign]


def _description(app: FastAPI) -> dict[str, Any]:
    described = get_openapi(
        title=app.title,
        version=app.version,
        summary="Predicted behaviour of unmeasured liquid mixtures",
        description=_introduction(),
        routes=app.routes,
        license_info={"name": "Apache-2.0", "identifier": "Apache-2.0"},
    )
    schemas = described["components"]["schemas"]
    problem = Problem.model_json_schema(ref_template="#/components/schemas/{model}")
    schemas.update(problem.pop("$defs", {}))
    schemas["Problem"] = problem
    _drop_undocumented_validation_answers(described)
    return described


def _introduction() -> str:
    rows = (f"| `{p.uri}` | {p.status} | {p.title} |" for p in all_problem_types().values())
    return _INTRODUCTION.format(
        cautions="\n".join(f"- {caution}" for caution in CAUTIONS), problems="\n".join(rows)
    )


def _drop_undocumented_validation_answers(described: dict[str, Any]) -> None:
    """FastAPI documents its own validation answer, which this service never sends."""
    for operations in described["paths"].values():
        for operation in operations.values():
            content = operation["responses"].get("422", {}).get("content", {})
            content.pop("application/json", None)
            if operation["responses"].get("422") and not content:
                del operation["responses"]["422"]
    for name in ("HTTPValidationError", "ValidationError"):
        described["components"]["schemas"].pop(name, None)
