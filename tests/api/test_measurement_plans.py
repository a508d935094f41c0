"""POST /v1/measurement-plan, and the intervals and chances of the other routes."""

import pytest

PAIR = ["CC(C)O", "C=CC(=O)OC"]
KEYS, SOLVENTS = ["CCCCCC", "c1ccccc1"], ["CN1CCCC1=O", "CN(C)C=O", "O=S1(=O)CCCC1"]


@pytest.mark.parametrize(
    "body",
    [
        {"components": PAIR, "question": "azeotrope", "pressure_kPa": 101.325},
        {
            "components": ["CCO", "O"],
            "question": "relative_volatility",
            "mole_fractions": [0.3, 0.7],
            "temperature_K": 330.0,
        },
        {
            "components": KEYS,
            "question": "ranking",
            "solvents": SOLVENTS,
            "temperature_K": 330.0,
        },
    ],
)
def test_a_plan_names_measurements_that_narrow_the_interval(service, body):
    answer = service.post("/v1/measurement-plan", body).json()
    width = answer["interval"]["upper"] - answer["interval"]["lower"]
    assert answer["interval"]["level"] == 0.9
    assert 1 <= len(answer["measurements"]) <= 4
    assert answer["measurements"][-1]["expected_width"] < width
    for one in answer["measurements"]:
        assert one["kind"] in {"gamma_infinity", "P-x point", "boiling_point"}
        assert (one["mole_fractions"] is not None) == (one["kind"] == "P-x point")
    assert [one["canonical_smiles"] for one in answer["components"]]
    assert answer["cautions"]


@pytest.mark.parametrize(
    ("change", "status"),
    [
        ({"pressure_kPa": None}, 422),
        ({"question": "relative_volatility"}, 422),
        ({"question": "ranking", "temperature_K": 330.0}, 422),
        ({"question": "ranking", "solvents": SOLVENTS}, 422),
        ({"components": ["O", "CCB(CC)CC"]}, 422),
        ({"components": ["CCO"]}, 422),
        ({"question": "colour"}, 422),
        ({"unknown": 1}, 422),
    ],
)
def test_a_question_that_lacks_something_is_a_problem(service, change, status):
    body = {"components": PAIR, "question": "azeotrope", "pressure_kPa": 101.325} | change
    response = service.post("/v1/measurement-plan", body)
    assert response.status_code == status
    assert response.headers["content-type"].startswith("application/problem+json")


def test_a_second_interval_of_any_level_stands_beside_the_first(service):
    pairs = [{"solute": "CCO", "solvent": "O", "temperature_K": 330.0}]
    [result] = service.post("/v1/infinite-dilution", {"pairs": pairs, "level": 0.5}).json()[
        "results"
    ]
    inner, outer = result["interval"], result["confidence"]["interval_90"]
    assert inner["level"] == 0.5
    assert outer["lower"] < inner["lower"] <= result["ln_gamma_inf"] <= inner["upper"]
    assert inner["upper"] < outer["upper"]
    [plain] = service.post("/v1/infinite-dilution", {"pairs": pairs}).json()["results"]
    assert plain["interval"] is None and plain["confidence"]["interval_90"] == outer


@pytest.mark.parametrize("level", [0.0, 1.0, -0.5, 90.0])
def test_a_level_outside_its_range_is_a_problem(service, level):
    pairs = [{"solute": "CCO", "solvent": "O", "temperature_K": 330.0}]
    response = service.post("/v1/infinite-dilution", {"pairs": pairs, "level": level})
    assert response.status_code == 422


def test_states_and_diagrams_carry_their_intervals(service):
    body = {"components": ["CCO", "O"], "mole_fractions": [0.3, 0.7], "pressure_kPa": 101.325}
    point = service.post("/v1/bubble-point", body).json()
    assert all(
        low <= y <= high
        for low, y, high in zip(point["y_lower"], point["y"], point["y_upper"], strict=True)
    )
    found = point["confidence"]["interval_90"]
    assert found["lower"] < point["temperature_K"] < found["upper"]
    asked = {"kind": "Txy", "components": ["CCO", "O"], "pressure_kPa": 101.325, "points": 11}
    drawn = service.post("/v1/diagrams", asked).json()
    assert len(drawn["temperature_K_lower"]) == len(drawn["y1_upper"]) == 11
    assert 0.5 < drawn["azeotrope_chance"]["probability"] < 1.0
    ideal = service.post("/v1/diagrams", asked | {"method": "ideal"}).json()
    assert ideal["temperature_K_lower"] is None and ideal["azeotrope_chance"] is None
