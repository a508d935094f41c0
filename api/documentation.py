"""What the OpenAPI description says of every route beside its schemas."""

from typing import Any

from api.problem_types import ProblemType, all_problem_types

Responses = dict[int | str, dict[str, Any]]

_EVERY_POST = (
    "unreadable-body",
    "not-acceptable",
    "body-too-large",
    "unsupported-media-type",
    "invalid-request",
    "too-many-items",
    "time-limit",
    "internal-error",
)
MOLECULE_PROBLEMS = (
    "unreadable-smiles",
    "unknown-name",
    "unsupported-structure",
    "empty-molecule",
    "ion",
    "salt",
    "several-molecules",
    "radical",
    "element-not-described",
    "polymer",
    "isotope",
    "molecule-too-large",
    "unknown-method",
)
MIXTURE_PROBLEMS = (
    *MOLECULE_PROBLEMS,
    "invalid-input",
    "out-of-range",
    "fraction-sum",
    "lengths-do-not-fit",
    "duplicate-component",
    "incomplete-assignment",
    "missing-parameter",
)
BOILING_PROBLEMS = (*MIXTURE_PROBLEMS, "no-vapour-pressure", "not-converged")


def problem_responses(*slugs: str) -> Responses:
    """The documented problems of a route, grouped by status, each with an example."""
    every = all_problem_types()
    by_status: dict[int | str, list[ProblemType]] = {}
    for slug in slugs:
        by_status.setdefault(every[slug].status, []).append(every[slug])
    return {status: _documented(kinds) for status, kinds in sorted(by_status.items(), key=_status)}


def post_responses(*slugs: str, also: dict[str, str] | None = None) -> Responses:
    """Problems of a route that takes a body, and the other media types of its answer."""
    responses = problem_responses(*_EVERY_POST, *slugs)
    content = {media: {"schema": {"type": "string"}} for media in also or {}}
    words = "The answer" + "".join(f"; {text}" for text in (also or {}).values())
    responses[200] = {"description": words + ".", "content": content}
    return responses


def _status(item: tuple[int | str, list[ProblemType]]) -> int:
    return int(item[0])


def _documented(kinds: list[ProblemType]) -> dict[str, Any]:
    examples = {
        kind.slug: {
            "summary": kind.title,
            "value": {
                "type": kind.uri,
                "title": kind.title,
                "status": kind.status,
                "detail": kind.title + ".",
                "cure": kind.cure,
            },
        }
        for kind in kinds
    }
    return {
        "description": "; ".join(dict.fromkeys(kind.title for kind in kinds)) + ".",
        "content": {
            "application/problem+json": {
                "schema": {"$ref": "#/components/schemas/Problem"},
                "examples": examples,
            }
        },
    }
