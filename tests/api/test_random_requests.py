"""Whatever is thrown at it, the service answers with a number or a problem, never with a 500."""

import json
from typing import Any

import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

ODD_NUMBERS = st.one_of(
    st.floats(allow_nan=True, allow_infinity=True),
    st.sampled_from([0, -1, 1, 10**30, -(10**400), 1e-320, 298.15, 101.325, 0.5]),
)
ODD_TEXTS = st.one_of(
    st.text(max_size=20),
    st.text(alphabet="CNOSFclBr()=#[]+-123%@/\\*.:>", max_size=30),
    st.sampled_from(["CCO", "O", "c1ccccc1", "CC(C)=O", "[2H]O", "", "auto", "Txy", "refuse"]),
)
JSON_VALUES = st.recursive(
    st.one_of(st.none(), st.booleans(), ODD_NUMBERS, ODD_TEXTS),
    lambda inner: st.one_of(
        st.lists(inner, max_size=4), st.dictionaries(ODD_TEXTS, inner, max_size=3)
    ),
    max_leaves=8,
)
SOUND: dict[str, dict[str, Any]] = {
    "/v1/molecules": {"molecules": ["CCO", "O"], "methods": ["unifac"]},
    "/v1/molecules/depictions": {"molecule": "CCO", "method": "unifac"},
    "/v1/activity-coefficients": {
        "components": ["CCO", "O"],
        "temperature_K": 330.0,
        "mole_fractions": [[0.5, 0.5]],
        "method": "unifac",
        "on_missing": "refuse",
    },
    "/v1/infinite-dilution": {
        "pairs": [{"solute": "CCO", "solvent": "O", "temperature_K": 300.0}],
        "method": "auto",
    },
    "/v1/bubble-point": {
        "components": ["CCO", "O"],
        "mole_fractions": [0.5, 0.5],
        "pressure_kPa": 101.3,
    },
    "/v1/dew-point": {
        "components": ["CCO", "O"],
        "mole_fractions": [0.5, 0.5],
        "temperature_K": 350.0,
    },
    "/v1/flash": {
        "components": ["CCO", "O"],
        "mole_fractions": [0.5, 0.5],
        "temperature_K": 350.0,
        "pressure_kPa": 101.3,
    },
    "/v1/diagrams": {
        "kind": "Txy",
        "components": ["CCO", "O"],
        "pressure_kPa": 101.3,
        "points": 11,
    },
    "/v1/azeotropes": {"components": ["CCO", "O"], "pressure_kPa": 101.3},
    "/v1/liquid-splits": {"components": ["CCO", "O"], "temperature_K": 300.0},
    "/v1/fits": {
        "components": ["CCO", "O"],
        "model": "nrtl",
        "form": "b/T",
        "alpha": 0.3,
        "temperature_range_K": [330.0, 350.0],
        "pressure_kPa": 101.3,
        "temperatures": 2,
        "compositions": 9,
        "method": "unifac",
    },
    "/v1/comparisons": {
        "components": ["CCO", "O"],
        "points": [
            {"temperature": 352.0, "pressure": 101.3, "x1": 0.5, "y1": 0.65},
            {"temperature": 330.0, "gamma_inf_1": 5.0},
        ],
        "units": {"temperature": "K"},
        "methods": ["unifac", "auto"],
        "models": ["nrtl", "margules-2"],
        "pressure_kPa": 101.3,
        "diagram_points": 11,
    },
}


@st.composite
def damaged(draw: st.DrawFn, sound: dict[str, Any]) -> dict[str, Any]:
    """A sound request in which one or two values, at any depth, are something else."""
    body = json.loads(json.dumps(sound))
    for _ in range(draw(st.integers(1, 2))):
        container: Any = body
        key = draw(st.sampled_from(sorted(container)))
        while isinstance(container[key], (list, dict)) and container[key] and draw(st.booleans()):
            container = container[key]
            keys = sorted(container) if isinstance(container, dict) else range(len(container))
            key = draw(st.sampled_from(list(keys)))
        container[key] = draw(JSON_VALUES)
    return dict(body)


@pytest.mark.parametrize("path", sorted(SOUND))
@settings(
    max_examples=60, deadline=None, suppress_health_check=[HealthCheck.function_scoped_fixture]
)
@given(data=st.data())
def test_a_damaged_request_is_answered_or_refused(service, path, data):
    body = json.dumps(data.draw(damaged(SOUND[path])))
    accept = "image/svg+xml" if path.endswith("depictions") else "application/json"
    headers = {"Content-Type": "application/json", "Accept": accept}
    response = service.call("POST", path, content=body, headers=headers)
    assert response.status_code in {200, 400, 422}, response.text
    if response.status_code != 200:
        problem = response.json()
        assert problem["cure"]
        assert problem["detail"]
