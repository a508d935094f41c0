"""The table from error class to problem type is complete, and openapi/ names every type."""

import json
from pathlib import Path

import pytest

from api.problem_types import ERROR_TYPES, all_problem_types
from groups import errors

ROOT = Path(__file__).parents[2]


def leaves(base: type[errors.MixwrightError]) -> set[type[errors.MixwrightError]]:
    """Classes of groups/errors.py below `base` that have no class below them."""
    below = {c for c in base.__subclasses__() if c.__module__ == errors.__name__}
    return set().union(*map(leaves, below)) if below else {base}


LEAVES = leaves(errors.MixwrightError)


def described_types() -> set[str]:
    """The values that `type` may take, as the committed description has them."""
    text = (ROOT / "openapi" / "openapi.json").read_text(encoding="utf-8")
    problem = json.loads(text)["components"]["schemas"]["Problem"]
    return set(problem["properties"]["type"]["enum"])


def test_there_are_errors_to_map():
    assert len(LEAVES) >= 19  # the leaves drawn in the tree at the top of groups/errors.py


@pytest.mark.parametrize(
    "error", sorted(LEAVES, key=lambda e: e.__name__), ids=lambda e: e.__name__
)
def test_every_error_has_a_problem_type_of_its_own(error):
    assert error in ERROR_TYPES


def test_every_problem_type_stands_in_openapi():
    assert described_types() == {kind.uri for kind in all_problem_types().values()}


@pytest.mark.parametrize("kind", all_problem_types().values(), ids=lambda kind: kind.slug)
def test_every_problem_type_has_title_and_cure(kind):
    assert kind.title and not kind.title.endswith(".")
    assert kind.cure.endswith(".")
    assert 400 <= kind.status < 600


def test_only_faults_of_the_service_have_a_status_of_500():
    faults = {kind.slug for kind in all_problem_types().values() if kind.status == 500}
    assert faults == {"faulty-data", "internal-error"}


def test_the_tree_at_the_top_of_errors_is_current():
    drawn = errors.__doc__ or ""
    every = {c for c in vars(errors).values() if isinstance(c, type)}
    names = {c.__name__ for c in every if issubclass(c, errors.MixwrightError)}
    assert names == {name for name in names if name in drawn}
