"""Comparisons over HTTP: records, CSV and ThermoML in; answers, tables, pictures, refusals out."""

import csv
import io
import xml.etree.ElementTree as ElementTree

import numpy as np
import pytest

from tests.api.problem_check import assert_problem

COMPARE = "/v1/comparisons"
PAIR = ["CC(C)O", "C=CC(=O)OC"]
X1 = (0.15, 0.35, 0.55, 0.75)


@pytest.fixture(scope="module")
def points(service) -> list[dict[str, float]]:
    """The service's own boiling points by one table: what a flawless laboratory would report."""
    rows = []
    for x1 in X1:
        body = {
            "components": PAIR,
            "mole_fractions": [x1, 1.0 - x1],
            "pressure_kPa": 101.325,
            "method": "unifac-dortmund",
        }
        found = service.post("/v1/bubble-point", body).json()
        rows.append(
            {
                "temperature_C": found["temperature_K"] - 273.15,
                "pressure_mmHg": 760.0,
                "x1": x1,
                "y1": found["y"][0],
            }
        )
    return rows


@pytest.fixture(scope="module")
def answer(service, points):
    response = service.post(COMPARE, {"components": PAIR, "points": points})
    assert response.status_code == 200, response.text
    return response.json()


def model_of(answer, name):
    return next(one for one in answer["models"] if one["name"] == name)


def test_the_table_that_made_the_points_is_recommended(answer):
    own = model_of(answer, "unifac-dortmund")
    assert own["regions"][0]["weighted_rms"] < 0.01  # only the rounding of the units is left
    assert answer["recommendation"]["model"] == "unifac-dortmund"
    assert model_of(answer, "ideal")["regions"][0]["weighted_rms"] > 5.0


def test_fitted_equations_come_with_their_sheet(answer):
    fit = model_of(answer, "nrtl")["fit"]
    assert fit["sheet"]["predicted"] is False
    assert fit["parameters"]
    assert model_of(answer, "auto")["fit"] is None


def test_the_points_narrow_the_diagram(answer):
    found = answer["conditioned"]
    before, after = (
        np.array(found[one]["temperature_K_upper"]) - np.array(found[one]["temperature_K_lower"])
        for one in ("before", "after")
    )
    inside = slice(5, -5)
    assert (after[inside] < 0.6 * before[inside]).all()
    assert found["text"]
    assert found["scatter"] >= 1.0


def test_csv_text_is_the_same_as_records(service, points, answer):
    lines = ["temperature,pressure,x1,y1"]
    lines += [",".join(str(value) for value in row.values()) for row in points]
    body = {
        "components": PAIR,
        "csv": "\n".join(lines),
        "units": {"temperature": "C", "pressure": "mmHg"},
    }
    assert service.post(COMPARE, body).json() == answer


def test_thermoml_is_read(service):
    predicted = service.post(
        "/v1/fits", {"components": PAIR, "pressure_kPa": 101.325}, "application/xml"
    ).text
    # What is marked as predicted is no measurement and must not be taken for one.
    assert_problem(
        service.post(COMPARE, {"components": PAIR, "thermoml": predicted}),
        "measurement",
        "/thermoml",
    )


def test_tables_as_csv(service, points):
    body = {"components": PAIR, "points": points}
    rows = list(csv.DictReader(io.StringIO(service.post(COMPARE, body, "text/csv").text)))
    assert {row["quantity"] for row in rows} >= {"temperature", "y1"}
    body["table"] = "regions"
    rows = list(csv.DictReader(io.StringIO(service.post(COMPARE, body, "text/csv").text)))
    assert {row["region"] for row in rows} >= {"all", "middle"}


def test_pictures(service, points):
    body = {"components": PAIR, "points": points}
    drawn = service.post(COMPARE, body, "image/svg+xml")
    ElementTree.fromstring(drawn.text)
    assert "<pattern" in drawn.text  # the interval before is hatched: readable without colour
    assert "stroke-dasharray" in drawn.text
    assert service.post(COMPARE, body, "image/png").content.startswith(b"\x89PNG\r\n\x1a\n")


@pytest.mark.parametrize(
    "rows",
    [
        [{"temperature": 330.0, "gamma_inf_1": 2.1}],
        [{"temperature": 298.15, "x1": 0.5, "excess_enthalpy": 1200.0}],
        [{"temperature": 330.0, "pressure": 40.0, "x1": 0.3}],
        [{"temperature": 330.0, "x1": 0.3, "gamma_1": 1.5, "gamma_2": 1.1}],
        [{"temperature": 300.0, "x1_poor": 0.1, "x1_rich": 0.7}],
        [{"temperature": 353.7, "pressure": 101.325, "x1": 0.0, "y1": 0.0}],
        [
            {"temperature": 330.0, "pressure": 40.0, "x1": 0.3},
            {"temperature": 300.0, "pressure": 12.0, "x1": 0.6, "y1": None},
        ],
    ],
)
@pytest.mark.parametrize("accept", ["application/json", "image/svg+xml", "text/csv"])
def test_every_kind_of_point_alone_is_answered(service, rows, accept):
    response = service.post(COMPARE, {"components": PAIR, "points": rows}, accept)
    assert response.status_code == 200, response.text


GOOD = {"temperature": 350.0, "pressure": 101.325, "x1": 0.4}


@pytest.mark.parametrize(
    ("change", "slug", "field"),
    [
        ({"points": [GOOD | {"x1": 1.4}]}, "measurement", "/points/0/x1"),
        ({"points": [GOOD | {"temperature": 77.0}]}, "measurement", "/points/0/temperature"),
        ({"points": [GOOD | {"pressure": -1.0}]}, "measurement", "/points/0/pressure"),
        ({"points": [GOOD | {"colour": 1.0}]}, "measurement", "/points/0/colour"),
        ({"points": [GOOD | {"x1": "a lot"}]}, "measurement", "/points/0/x1"),
        ({"points": [GOOD, {"temperature": 350.0}]}, "measurement", "/points/1"),
        ({"points": []}, "invalid-request", "/points"),
        ({"points": None}, "invalid-request", None),
        ({"csv": "temperature\n300"}, "invalid-request", None),
        ({"points": None, "csv": "   "}, "too-few-points", "/csv"),
        ({"points": None, "csv": "temperature,x1\n300"}, "measurement", "/csv"),
        ({"points": None, "csv": "a" * 200_000 + "\n1"}, "measurement", "/csv"),
        ({"points": None, "thermoml": "<no"}, "measurement", "/thermoml"),
        ({"points": None, "thermoml": "<!DOCTYPE a>"}, "measurement", "/thermoml"),
        ({"units": {"temperature": "R"}}, "invalid-request", "/units/temperature"),
        ({"methods": ["nothing"]}, "unknown-method", None),
        ({"components": ["CCO", "O", "CO"]}, "lengths-do-not-fit", None),
        ({"components": ["CCO", "OCC"]}, "duplicate-component", None),
        ({"pressure_kPa": 100.0, "temperature_K": 300.0}, "invalid-input", "/pressure_kPa"),
        ({"pressure_kPa": -5.0}, "out-of-range", "/pressure_kPa"),
        ({"temperature_K": 1.0}, "out-of-range", "/temperature_K"),
        ({"diagram_points": 1}, "out-of-range", "/diagram_points"),
        ({"diagram_points": 5000}, "too-many-items", "/diagram_points"),
        ({"points": [GOOD] * 1001}, "too-many-items", "/points"),
    ],
)
def test_what_cannot_be_compared_is_refused(service, change, slug, field):
    body = {"components": PAIR, "points": [GOOD]} | change
    assert_problem(service.post(COMPARE, body), slug, field)


def test_swapped_components_are_told(service, points):
    swapped = [row | {"x1": 1.0 - row["x1"], "y1": 1.0 - row["y1"]} for row in points]
    answer = service.post(COMPARE, {"components": PAIR, "points": swapped}).json()
    assert "swapped_components" in {mark["code"] for mark in answer["marks"]}


def test_too_many_points_in_a_text_are_refused(service):
    rows = "\n".join(["temperature,gamma_inf_1", *["330,2"] * 1001])
    assert_problem(
        service.post(COMPARE, {"components": PAIR, "csv": rows}), "invalid-input", "/csv"
    )
