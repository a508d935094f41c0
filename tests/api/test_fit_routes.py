"""Fits over HTTP: parameters, sheets, ThermoML, and every refusal."""

import csv
import io
from pathlib import Path

import numpy as np
import pytest
import xmlschema

from api.json_values import json_value
from groups.handoff.correlations import correlative_model
from tests.api.problem_check import assert_problem

FITS = "/v1/fits"
PAIR = {
    "components": ["CC(C)O", "C=CC(=O)OC"],
    "temperature_range_K": [330.0, 360.0],
    "pressure_kPa": 101.325,
}
SCHEMA = Path(__file__).parents[1] / "reference" / "handoff" / "ThermoML.xsd"


def test_the_parameters_give_the_activity_coefficients_of_the_prediction(service):
    answer = service.post(FITS, PAIR).json()
    [pair] = answer["pairs"]
    found = {one["name"]: one["value"] for one in pair["parameters"]}
    zero = np.zeros((2, 2))
    a, b = zero.copy(), zero.copy()
    a[0, 1], a[1, 0], b[0, 1], b[1, 0] = (found[n] for n in ("a_12", "a_21", "b_12", "b_21"))
    own = correlative_model("nrtl", "a+b/T", [a, b], alpha=0.3)
    body = {
        "components": PAIR["components"],
        "temperature_K": 345.0,
        "mole_fractions": [[0.0, 1.0], [0.3, 0.7], [1.0, 0.0]],
    }
    points = service.post("/v1/activity-coefficients", body).json()["points"]
    predicted = np.array([point["ln_gamma"] for point in points])
    fitted = own.ln_gamma(345.0, np.array(body["mole_fractions"]))
    assert np.abs(fitted - predicted).max() <= abs(pair["residual"]["largest"]) * 1.01


def test_the_answer_says_what_the_fit_does_and_how_it_was_weighted(service):
    answer = service.post(FITS, PAIR).json()
    [pair] = answer["pairs"]
    assert pair["accepted"]
    assert "calibrated interval" in answer["weighting"]
    before, after = (pair["effects"][f"azeotropes_{one}"] for one in ("predicted", "fitted"))
    assert len(before) == len(after) == 1
    assert before[0]["x1"] == pytest.approx(after[0]["x1"], abs=0.01)
    assert np.shape(pair["covariance"]) == (4, 4)
    assert answer["sheet"]["interactions"].startswith("tau_ij = a_ij + b_ij/T")
    assert {one["unit"] for one in answer["sheet"]["pairs"][0]["numbers"]} == {"1", "K"}
    assert answer["confidence"]["grade"]


def test_other_methods_count_every_value_alike(service):
    answer = service.post(FITS, PAIR | {"method": "unifac"}).json()
    assert answer["method"] == "unifac"
    assert answer["weighting"].startswith("equal weights")


def test_all_pairs_of_a_mixture_at_once(service):
    body = {"components": ["CC(C)=O", "CO", "O"], "model": "uniquac", "pressure_kPa": 101.325}
    answer = service.post(FITS, body).json()
    assert [one["components"] for one in answer["pairs"]] == [[0, 1], [0, 2], [1, 2]]
    assert len(answer["triples"]) == 1
    assert answer["azeotropes_predicted"] is not None
    titles = {constant["name"] for constant in answer["sheet"]["components"][0]["constants"]}
    assert {"r (UNIQUAC)", "q (UNIQUAC)"} <= titles


def test_the_sheet_as_text_and_as_csv(service):
    text = service.post(FITS, PAIR, "text/plain")
    assert text.headers["content-type"].startswith("text/plain")
    assert "tau_ij = a_ij + b_ij/T; T in K" in text.text
    table = service.post(FITS, PAIR, "text/csv")
    assert table.headers["content-type"].startswith("text/csv")
    rows = list(csv.DictReader(io.StringIO(table.text)))
    [pair] = service.post(FITS, PAIR).json()["pairs"]
    [b_12] = [row for row in rows if row["parameter"] == "b_1,2"]
    expected = next(one["value"] for one in pair["parameters"] if one["name"] == "b_12")
    assert float(b_12["value"]) == pytest.approx(expected, rel=1e-9)  # ten digits are written
    assert b_12["unit"] == "K"


@pytest.mark.parametrize(
    "body", [PAIR, {"components": ["CC(C)=O", "CO", "O"], "temperature_range_K": [320.0, 340.0]}]
)
def test_the_predicted_data_are_valid_thermoml_marked_as_predicted(service, body):
    document = service.post(FITS, body, "application/xml")
    assert document.headers["content-type"].startswith("application/xml")
    xmlschema.XMLSchema(str(SCHEMA)).validate(document.text)
    assert "<Prediction>" in document.text


def test_non_randomness_can_be_fitted(service):
    answer = service.post(FITS, PAIR | {"alpha": "fit", "form": "b/T"}).json()
    [alpha] = [p for p in answer["pairs"][0]["parameters"] if p["name"].startswith("alpha")]
    assert alpha["standard_error"] is not None


@pytest.mark.parametrize(
    ("change", "slug", "field"),
    [
        ({"temperature_range_K": None, "pressure_kPa": None}, "invalid-input", None),
        ({"temperature_range_K": [340.0, 340.0]}, "invalid-input", "/form"),
        ({"temperature_range_K": [360.0, 330.0]}, "out-of-range", "/temperature_range_K"),
        ({"alpha": 2.0}, "out-of-range", "/alpha"),
        ({"alpha": "free"}, "invalid-request", None),
        ({"model": "nrtl-3"}, "invalid-request", "/model"),
        ({"temperatures": 0}, "out-of-range", "/temperatures"),
        ({"temperatures": 51, "compositions": 401}, "too-many-items", "/compositions"),
        ({"compositions": 4}, "out-of-range", "/compositions"),
        ({"method": "nothing"}, "unknown-method", None),
        ({"components": ["CCO", "OCC"]}, "duplicate-component", None),
        ({"components": ["CCO"]}, "lengths-do-not-fit", None),
        ({"components": ["CCO", "O", "CO"], "model": "van-laar"}, "lengths-do-not-fit", None),
        ({"components": ["CCO", "[Na+].[Cl-]"]}, "salt", "/components/1"),
        ({"unknown": 1}, "invalid-request", "/unknown"),
    ],
)
def test_what_cannot_be_fitted_is_refused(service, change, slug, field):
    assert_problem(service.post(FITS, PAIR | change), slug, field)


def test_wilson_is_refused_for_a_liquid_that_splits(service):
    body = {"components": ["CCCCO", "O"], "model": "wilson", "temperature_range_K": [320.0, 350.0]}
    problem = assert_problem(service.post(FITS, body), "fit-refused")
    assert "two liquids" in problem["detail"] or "split" in problem["detail"]


def test_a_mixture_without_any_fitted_pair_has_no_sheet(service):
    # Water with two alcohols that split off: Wilson cannot describe the first two pairs.
    body = {
        "components": ["O", "CCCCO", "CCCCCO"],
        "model": "wilson",
        "temperature_range_K": [320.0, 350.0],
    }
    answer = service.post(FITS, body).json()
    assert len(answer["refused"]) == 2
    assert answer["sheet"] is not None
    assert len(answer["pairs"]) == 1


def test_media_types_that_do_not_exist_are_refused(service):
    assert_problem(service.post(FITS, PAIR, "image/png"), "not-acceptable", "Accept")


def test_models_cannot_slip_into_an_answer():
    with pytest.raises(TypeError):
        json_value(object())
