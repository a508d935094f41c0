"""openapi/openapi.json is what the code describes, and describes what a caller needs."""

import json
from typing import Any

import pytest

from api.describe import TARGET, description

DESCRIBED: dict[str, Any] = json.loads(description())
OPERATIONS = {
    f"{verb.upper()} {path}": operation
    for path, operations in DESCRIBED["paths"].items()
    for verb, operation in operations.items()
}

# The addresses of the HTTP contract that exist so far.
CONTRACT = {
    "GET /v1/health",
    "GET /v1/ready",
    "GET /v1/methods",
    "GET /v1/methods/{method}",
    "POST /v1/molecules",
    "POST /v1/activity-coefficients",
    "POST /v1/infinite-dilution",
    "POST /v1/bubble-point",
    "POST /v1/dew-point",
    "POST /v1/flash",
    "POST /v1/diagrams",
    "POST /v1/azeotropes",
    "POST /v1/liquid-splits",
    "POST /v1/fits",
    "POST /v1/comparisons",
}


def test_the_committed_description_is_current():
    assert TARGET.read_text(encoding="utf-8") == description(), "run `python -m api.describe`"


def test_the_contract_is_described():
    assert set(OPERATIONS) >= CONTRACT


def test_operation_ids_are_unique():
    identifiers = [operation["operationId"] for operation in OPERATIONS.values()]
    assert len(set(identifiers)) == len(identifiers)


@pytest.mark.parametrize("name", sorted(OPERATIONS))
def test_every_operation_has_summary_description_and_problems(name):
    operation = OPERATIONS[name]
    assert operation["summary"]
    assert operation["description"]
    for status, answer in operation["responses"].items():
        if int(status) >= 400:
            assert list(answer["content"]) == ["application/problem+json"]


@pytest.mark.parametrize("name", sorted(n for n in OPERATIONS if n.startswith("POST")))
def test_every_request_has_an_example(name):
    content = OPERATIONS[name]["requestBody"]["content"]["application/json"]
    assert content["examples"]


def test_every_reference_points_at_a_schema():
    text = json.dumps(DESCRIBED)
    schemas = DESCRIBED["components"]["schemas"]
    references = {part.split('"')[0] for part in text.split("#/components/schemas/")[1:]}
    assert references <= set(schemas)
    assert "HTTPValidationError" not in schemas  # the service never answers in that shape


def test_the_cautions_stand_in_the_description():
    from groups.prediction import CAUTIONS

    assert all(caution in DESCRIBED["info"]["description"] for caution in CAUTIONS)


def test_request_schemas_refuse_unknown_fields():
    requests = [name for name in DESCRIBED["components"]["schemas"] if name.endswith("Request")]
    assert len(requests) >= 8
    for name in requests:
        assert DESCRIBED["components"]["schemas"][name]["additionalProperties"] is False
