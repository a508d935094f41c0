"""What every problem must look like."""

from typing import Any

import httpx

from api.problem_types import all_problem_types


def assert_problem(response: httpx.Response, slug: str, field: str | None = None) -> dict[str, Any]:
    """A complete RFC 9457 problem of the type given, and of the field given."""
    assert response.headers["content-type"] == "application/problem+json", response.text
    problem: dict[str, Any] = response.json()
    assert problem["type"] == f"/problems/{slug}", problem
    kind = all_problem_types()[slug]
    assert problem["status"] == response.status_code == kind.status
    assert problem["title"] == kind.title
    assert problem["detail"]
    assert problem["cure"]
    if field is not None:
        assert problem.get("field") == field, problem
    return problem
