"""The choice of a media type follows RFC 9110, section 12.5.1."""

import pytest

from api.negotiation import choose
from api.problem_types import RequestProblemError

OFFERED = ("application/json", "text/csv", "image/svg+xml")


@pytest.mark.parametrize(
    ("accept", "chosen"),
    [
        (None, "application/json"),
        ("", "application/json"),
        ("*/*", "application/json"),
        ("text/csv", "text/csv"),
        ("TEXT/CSV", "text/csv"),
        ("text/*", "text/csv"),
        ("image/*", "image/svg+xml"),
        ("text/csv;q=0.5, application/json;q=0.4", "text/csv"),
        ("text/csv;q=0.5, application/json", "application/json"),
        ("text/csv; charset=utf-8", "text/csv"),
        ("application/json;q=0, */*", "text/csv"),
        ("text/html, */*;q=0.1", "application/json"),
        ("text/csv;q=1, text/*;q=0.2, */*;q=0.9", "text/csv"),
        ("text/csv;q=0.1, */*;q=0.05, application/json;q=nonsense", "text/csv"),
    ],
)
def test_the_best_liked_type_is_chosen(accept, chosen):
    assert choose(accept, OFFERED) == chosen


@pytest.mark.parametrize("accept", ["text/html", "application/json;q=0", "image/png;q=1", "text"])
def test_nothing_acceptable_is_a_problem(accept):
    with pytest.raises(RequestProblemError) as refused:
        choose(accept, OFFERED)
    assert refused.value.slug == "not-acceptable"
    assert "application/json" in refused.value.cure
