"""Phase behaviour over HTTP: advice, liquids, residue curves, gases; answers and problems."""

import csv
import io
import re
import xml.etree.ElementTree as ElementTree
from typing import Any

import pytest

from groups import prediction
from groups.prediction import Component
from groups.structure.molecule import molecule_from_smiles
from tests.api.problem_check import assert_problem

EXTRACTION = {"components": ["CC(=O)O", "O", "CC(C)OC(C)C"], "temperature_K": 293.15}
STILL = {
    "components": ["CC(C)=O", "ClC(Cl)Cl", "CO"],
    "pressure_kPa": 101.325,
    "vapour": "ideal",
    "starts": [[0.3, 0.3, 0.4]],
}
SOLUBILITIES = {"components": ["CCCCO", "O"], "lowest_K": 285.0, "highest_K": 310.0, "points": 6}
GAS = {
    "gas": "O=C=O",
    "solvents": ["CO"],
    "temperature_K": [283.15, 298.15],
    "pressure_kPa": 1000.0,
}
ADVICE = {
    "components": ["CC(=O)O", "O"],
    "temperature_K": [370.0, 395.0],
    "pressure_kPa": [101.325, 101.325],
}
ROUTES = [
    ("/v1/ternary-diagrams", EXTRACTION),
    ("/v1/residue-curves", STILL),
    ("/v1/mutual-solubilities", SOLUBILITIES),
    ("/v1/gas-solubility", GAS),
    ("/v1/advice", ADVICE),
]


def components(*smiles: str) -> list[Component]:
    return [Component(molecule_from_smiles(text)) for text in smiles]


def rows_of(response) -> list[dict[str, str]]:
    assert response.headers["content-type"] == "text/csv; charset=utf-8"
    return list(csv.DictReader(io.StringIO(response.text)))


@pytest.mark.parametrize(("path", "body"), ROUTES)
def test_every_answer_is_told_how_far_to_trust(service, path, body):
    answer = service.post(path, body).json()
    confidence = answer["confidence"]
    assert confidence["grade"] in {"high", "moderate", "low", "none"} and confidence["reasons"]
    assert answer["cautions"] == list(prediction.CAUTIONS)


@pytest.mark.parametrize(("path", "body"), ROUTES)
def test_every_answer_exists_as_csv(service, path, body):
    rows = rows_of(service.post(path, body, "text/csv"))
    assert rows and all(None not in row and None not in row.values() for row in rows)


@pytest.mark.parametrize(("path", "body"), ROUTES)
def test_unknown_fields_and_molecules_are_refused(service, path, body):
    assert_problem(service.post(path, body | {"extra": 1}), "invalid-request", "/extra")
    key = "solvents" if "solvents" in body else "components"
    broken = body | {key: ["C(C", *body[key][1:]]}
    assert_problem(service.post(path, broken), "unreadable-smiles", f"/{key}/0")


def test_a_ternary_diagram_is_that_of_groups(service):
    answer = service.post("/v1/ternary-diagrams", EXTRACTION | {"tie_lines": 5}).json()
    known = prediction.ternary_diagram(
        components(*EXTRACTION["components"]), temperature_K=293.15, tie_lines=5
    )
    [region] = answer["regions"]
    assert len(region["tie_lines"]) == 5 and len(region["plait_points"]) == 1
    ends = known.found.regions[0].first[:: known.every]
    assert [line["first"] for line in region["tie_lines"]] == ends.tolist()
    line = region["tie_lines"][2]
    ratio = [b / a for a, b in zip(line["first"], line["second"], strict=True)]
    assert line["distribution"] == pytest.approx(ratio)
    kinds = [
        row["kind"] for row in rows_of(service.post("/v1/ternary-diagrams", EXTRACTION, "text/csv"))
    ]
    assert kinds == ["tie line"] * 15 + ["plait point"]


def test_residue_curves_run_between_nodes(service):
    answer = service.post("/v1/residue-curves", STILL).json()
    assert answer["index_balanced"] and answer["vapour"]["kind"] == "ideal"
    [curve] = answer["curves"]
    points = answer["fixed_points"]
    assert points[curve["begins"]]["stability"] == "unstable node"
    assert points[curve["ends"]]["stability"] == "stable node"
    assert sum(point["azeotrope"] for point in points) == 4
    assert len(answer["boundaries"]) == 4  # the four separatrices of the ternary saddle


def test_mutual_solubilities_are_arrays_over_temperature(service):
    answer = service.post("/v1/mutual-solubilities", SOLUBILITIES).json()
    assert answer["temperature_K"] == [285.0, 290.0, 295.0, 300.0, 305.0, 310.0]
    assert all(answer["splits"]) and answer["consolute_points"] == []
    for poor, rich in zip(answer["x1_poor"], answer["x1_rich"], strict=True):
        assert 0.0 < poor < rich < 1.0
    assert [chance["temperature_K"] for chance in answer["chances"]] == [285.0, 297.5, 310.0]


def test_a_gas_dissolves_more_in_the_cold(service):
    answer = service.post("/v1/gas-solubility", GAS).json()
    cold, warm = answer["points"]
    assert cold["gas_mole_fraction"] > warm["gas_mole_fraction"] > 0.0
    assert cold["henry_kPa"] < warm["henry_kPa"]
    assert sum(cold["liquid"]) == pytest.approx(1.0) and answer["method"] == "psrk"
    assert answer["gas"]["name"] == "carbon dioxide"


def test_advice_ends_in_a_recommendation(service):
    answer = service.post("/v1/advice", ADVICE).json()
    assert answer["vapour"]["verdict"] == "real gas"
    assert answer["vapour"]["associating"] == ["acetic acid"]
    assert answer["recommended"]["vapour"] == "virial"
    assert answer["recommended"]["flowsheet_class"] == "activity coefficients, real vapour"
    assert answer["liquid"]["cost_of_ideal_solution"]["pressure_percent"] > 3.0


def test_a_liquid_split_tells_amounts_and_distribution(service):
    body = {
        "components": ["O", "c1ccccc1", "CCO"],
        "mole_fractions": [0.45, 0.35, 0.2],
        "temperature_K": 298.15,
    }
    answer = service.post("/v1/liquid-splits", body).json()
    first, second = answer["phases"]
    assert first["fraction"] + second["fraction"] == pytest.approx(1.0)
    assert first["distribution"] == [1.0, 1.0, 1.0]
    ratio = [b / a for a, b in zip(first["mole_fractions"], second["mole_fractions"], strict=True)]
    assert second["distribution"] == pytest.approx(ratio, rel=1e-6)
    assert answer["method"] == "unifac-lle"


def test_a_flash_tells_three_phases(service):
    body = {
        "components": ["CCCCO", "O"],
        "mole_fractions": [0.2, 0.8],
        "pressure_kPa": 101.325,
        "vapour_fraction": 0.3,
    }
    answer = service.post("/v1/flash", body).json()
    assert [phase["kind"] for phase in answer["phases"]] == ["liquid", "liquid", "vapour"]
    assert sum(phase["fraction"] for phase in answer["phases"]) == pytest.approx(1.0)
    assert answer["vapour_fraction"] == pytest.approx(0.3)


def test_the_equation_of_state_takes_a_gas(service):
    body = {"components": ["CO", "O=C=O"], "mole_fractions": [0.8, 0.2], "temperature_K": 313.15}
    answer = service.post("/v1/bubble-point", body | {"method": "psrk"}).json()
    assert answer["vapour"]["kind"] == "psrk" and answer["vapour_pressures"] == []
    assert answer["gamma"] == [None, None] and answer["y"][1] > 0.9


@pytest.mark.parametrize(
    ("path", "body", "problem", "field"),
    [
        ("/v1/ternary-diagrams", EXTRACTION | {"tie_lines": 1}, "invalid-request", "/tie_lines"),
        ("/v1/ternary-diagrams", EXTRACTION | {"tie_lines": 500}, "out-of-range", "/tie_lines"),
        ("/v1/ternary-diagrams", EXTRACTION | {"temperature_K": 25.0}, "out-of-range", None),
        (
            "/v1/ternary-diagrams",
            EXTRACTION | {"components": ["CCO", "O"]},
            "lengths-do-not-fit",
            "/components",
        ),
        ("/v1/residue-curves", STILL | {"starts": [[0.5, 0.5]]}, "lengths-do-not-fit", "/starts"),
        ("/v1/residue-curves", STILL | {"vapour": "real"}, "invalid-request", "/vapour"),
        ("/v1/mutual-solubilities", SOLUBILITIES | {"highest_K": 200.0}, "out-of-range", None),
        ("/v1/mutual-solubilities", SOLUBILITIES | {"points": 10**9}, "too-many-items", "/points"),
        ("/v1/gas-solubility", GAS | {"solvents": []}, "invalid-request", "/solvents"),
        (
            "/v1/gas-solubility",
            GAS | {"solvents": ["CO", "O"]},
            "lengths-do-not-fit",
            "/solvent_mole_fractions",
        ),
        ("/v1/gas-solubility", GAS | {"solvents": ["O=C=O"]}, "duplicate-component", None),
        ("/v1/gas-solubility", GAS | {"gas": "C(C"}, "unreadable-smiles", "/gas"),
        ("/v1/gas-solubility", GAS | {"pressure_kPa": -1.0}, "out-of-range", "/pressure_kPa"),
        ("/v1/advice", ADVICE | {"temperature_K": [300.0]}, "invalid-request", "/temperature_K"),
        ("/v1/advice", ADVICE | {"pressure_kPa": [200.0, 100.0]}, "out-of-range", None),
        (
            "/v1/advice",
            ADVICE | {"mole_fractions": [[0.0, 0.1], [0.0, 0.1]]},
            "lengths-do-not-fit",
            "/mole_fractions",
        ),
    ],
)
def test_bad_requests_are_refused_with_field_and_cure(service, path, body, problem, field):
    response = service.post(path, body)
    answer = response.json()
    assert answer["type"].endswith(problem) and answer["cure"]
    if field is not None:
        assert_problem(response, problem, field)


def test_caps_hold(small_service):
    many: dict[str, Any] = EXTRACTION | {"components": ["C", "CC", "CCC", "CCCC"]}
    assert_problem(
        small_service.post("/v1/ternary-diagrams", many), "too-many-items", "/components"
    )
    long = GAS | {"temperature_K": [300.0 + k for k in range(12)]}
    assert_problem(
        small_service.post("/v1/gas-solubility", long), "too-many-items", "/temperature_K"
    )


@pytest.mark.parametrize(
    ("path", "body"), [("/v1/ternary-diagrams", EXTRACTION), ("/v1/residue-curves", STILL)]
)
def test_pictures_are_well_formed_and_tell_lines_apart_without_colour(service, path, body):
    first = service.post(path, body, "image/svg+xml")
    assert first.headers["content-type"] == "image/svg+xml"
    ElementTree.fromstring(first.text)
    assert "stroke-dasharray" in first.text
    assert len(set(re.findall(r"stroke-width: ([\d.]+)", first.text))) > 2
    assert service.post(path, body, "image/svg+xml").content == first.content
    png = service.post(path, body, "image/png")
    assert png.content.startswith(b"\x89PNG\r\n\x1a\n")
