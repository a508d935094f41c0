"""Each way a request can fail names what is wrong, where, and the cure; never a 500."""

import json
from typing import Any

import pytest

from api.problem_types import ERROR_TYPES, REQUEST_TYPES, all_problem_types, problem_type_of
from groups import errors
from tests.api.problem_check import assert_problem

MIXTURE: dict[str, Any] = {
    "components": ["CCO", "O"],
    "temperature_K": 330.0,
    "mole_fractions": [[0.5, 0.5]],
    "method": "unifac",
}
ACTIVITY = "/v1/activity-coefficients"


def changed(**fields: Any) -> dict[str, Any]:
    return MIXTURE | fields


@pytest.mark.parametrize("literal", ["NaN", "Infinity", "-Infinity", "1e999", "-1e999"])
@pytest.mark.parametrize(
    ("place", "field"),
    [('"temperature_K": 330.0', "/temperature_K"), ("[0.5, 0.5]", "/mole_fractions/0/0")],
)
def test_numbers_that_are_none_are_refused(service, literal, place, field):
    replacement = place.replace("330.0", literal).replace("[0.5,", f"[{literal},")
    text = json.dumps(MIXTURE).replace(place, replacement)
    assert literal in text
    assert_problem(service.post_text(ACTIVITY, text), "invalid-request", field)


@pytest.mark.parametrize(
    ("body", "slug", "field"),
    [
        ({}, "invalid-request", "/components"),
        (None, "invalid-request", ""),
        ([], "invalid-request", ""),
        ("CCO", "invalid-request", ""),
        (changed(components=[]), "invalid-request", "/components"),
        (changed(components="CCO"), "invalid-request", "/components"),
        (changed(components=["CCO", 7]), "invalid-request", "/components/1"),
        (changed(components=["CCO", None]), "invalid-request", "/components/1"),
        (changed(components=["CCO", {}]), "invalid-request", "/components/1"),
        (changed(components=["CCO", ""]), "empty-molecule", "/components/1"),
        (changed(components=["CCO", "C" * 5001]), "invalid-request", "/components/1"),
        (
            changed(components=["CCO", {"smiles": "O", "name": "water"}]),
            "invalid-request",
            "/components/1",
        ),
        (
            changed(components=["CCO", {"smile": "O"}]),
            "invalid-request",
            "/components/1/smile",
        ),
        (changed(temperature_K="330"), "invalid-request", "/temperature_K"),
        (changed(temperature_K=True), "invalid-request", "/temperature_K"),
        (changed(temperature_K=None), "invalid-request", "/temperature_K"),
        (changed(temperature_K=[330.0, "x"]), "invalid-request", "/temperature_K/1"),
        (changed(temperature_K=[]), "lengths-do-not-fit", "/temperature_K"),
        (changed(temperature_K=[330.0, 340.0]), "lengths-do-not-fit", "/temperature_K"),
        (changed(temperature_K=-1.0), "out-of-range", "/temperature_K"),
        (changed(temperature_K=0), "out-of-range", "/temperature_K"),
        (changed(temperature_K=1e6), "out-of-range", "/temperature_K"),
        (changed(mole_fractions=[]), "invalid-request", "/mole_fractions"),
        (changed(mole_fractions=[[]]), "lengths-do-not-fit", "/mole_fractions"),
        (changed(mole_fractions=[[0.5, 0.25, 0.25]]), "lengths-do-not-fit", "/mole_fractions"),
        (changed(mole_fractions=[[0.5, 0.5], [1.0]]), "lengths-do-not-fit", "/mole_fractions"),
        (changed(mole_fractions=[[0.5, 0.5], [0.5, 0.6]]), "fraction-sum", "/mole_fractions/1"),
        (changed(mole_fractions=[[-0.5, 1.5]]), "out-of-range", "/mole_fractions/0/0"),
        (changed(mole_fractions=[0.5, 0.5]), "invalid-request", "/mole_fractions/0"),
        (changed(method="unifaq"), "unknown-method", "/method"),
        (changed(method=7), "invalid-request", "/method"),
        (changed(on_missing="guess"), "invalid-request", "/on_missing"),
        (changed(temperatur_K=300), "invalid-request", "/temperatur_K"),
        (changed(**{"a/b~c": 1}), "invalid-request", "/a~1b~0c"),
        (changed(components=["CCO", "OCC"]), "duplicate-component", "/components/1"),
        (changed(components=["CCO", "C(C"]), "unreadable-smiles", "/components/1"),
        (changed(components=["CCO", "C1CC"]), "unreadable-smiles", "/components/1"),
        (changed(components=["CCO", "\x00"]), "unreadable-smiles", "/components/1"),
        (changed(components=["CCO", "水"]), "unreadable-smiles", "/components/1"),
        (
            changed(components=["CCO", {"smiles": "C(C"}]),
            "unreadable-smiles",
            "/components/1/smiles",
        ),
        (
            changed(components=["CCO", {"name": "unobtainium ether"}]),
            "unknown-name",
            "/components/1/name",
        ),
        (
            changed(components=["CCO", {"cas": "64-17-6"}]),  # the check digit is wrong
            "unknown-name",
            "/components/1/cas",
        ),
        (changed(components=["CCO", "[Na+].[Cl-]"]), "salt", "/components/1"),
        (changed(components=["CCO", "CC(=O)[O-]"]), "ion", "/components/1"),
        (changed(components=["CCO", "C.O"]), "several-molecules", "/components/1"),
        (changed(components=["CCO", "[CH3]"]), "radical", "/components/1"),
        (changed(components=["CCO", "[Fe]"]), "element-not-described", "/components/1"),
        (changed(components=["CCO", "*CC*"]), "polymer", "/components/1"),
        (changed(components=["CCO", "[13CH4]"]), "isotope", "/components/1"),
        (changed(components=["CCO", "C" * 201]), "molecule-too-large", "/components/1"),
    ],
)
def test_bad_mixtures_are_refused_with_field_and_cure(service, body, slug, field):
    assert_problem(service.post(ACTIVITY, body), slug, field)


def test_fraction_sum_is_said(service):
    problem = assert_problem(
        service.post(ACTIVITY, changed(mole_fractions=[[0.5, 0.6]])), "fraction-sum"
    )
    assert problem["total"] == pytest.approx(1.1, abs=1e-12)  # rounding of one addition
    assert "1.1" in problem["detail"]


def test_place_of_a_mistake_in_smiles_is_said(service):
    problem = assert_problem(
        service.post(ACTIVITY, changed(components=["CCO", "CC(C"])), "unreadable-smiles"
    )
    assert problem["position"] == 2  # the bracket that is never closed, counted by hand


def test_all_bad_molecules_are_named_together(service):
    body = changed(components=["CCO", "C(C", {"name": "unobtainium ether"}, "C1CC"])
    problem = assert_problem(service.post(ACTIVITY, body), "unreadable-smiles")
    assert [error["field"] for error in problem["errors"]] == [
        "/components/1",
        "/components/2/name",
        "/components/3",
    ]
    assert all(error["cure"] for error in problem["errors"])


@pytest.mark.parametrize(
    ("molecule", "slug", "field"),
    [
        ("C(C", "unreadable-smiles", "/molecules/1"),
        ("", "empty-molecule", "/molecules/1"),
        ({"name": "unobtainium ether"}, "unknown-name", "/molecules/1/name"),
        ({"cas": "64-17-6"}, "unknown-name", "/molecules/1/cas"),
    ],
)
def test_a_molecule_that_cannot_be_read_costs_a_batch_only_its_own_place(
    service, molecule, slug, field
):
    body = {"molecules": ["CCO", molecule, "O"], "methods": ["unifac"]}
    response = service.post("/v1/molecules", body)
    assert response.status_code == 200
    first, second, third = response.json()["results"]
    assert (first["canonical_smiles"], third["canonical_smiles"]) == ("CCO", "O")
    assert second["canonical_smiles"] is None
    assert second["problem"]["type"] == f"/problems/{slug}"
    assert second["problem"]["field"] == field
    alone = body | {"molecules": [molecule]}
    assert_problem(service.post("/v1/molecules", alone), slug, field.replace("1", "0"))


def test_a_method_without_groups_is_named_by_its_place(service):
    body = {"molecules": ["CCO"], "methods": ["unifac", "ideal"]}
    problem = assert_problem(service.post("/v1/molecules", body), "unknown-method", "/methods/1")
    assert "ideal" in problem["cure"]


@pytest.mark.parametrize("accept", ["application/json", "text/csv"])
def test_a_molecule_that_no_method_describes_costs_only_its_own_place(service, accept):
    body = {"molecules": ["CCO", "[Na+].[Cl-]", "O"], "methods": ["unifac"]}
    response = service.post("/v1/molecules", body, accept)
    assert response.status_code == 200
    if accept == "application/json":
        first, second, third = response.json()["results"]
        assert (first["canonical_smiles"], third["canonical_smiles"]) == ("CCO", "O")
        assert second["canonical_smiles"] is None
        assert second["problem"]["type"] == "/problems/salt"
        assert second["problem"]["field"] == "/molecules/1"
        assert first["problem"] is None


def test_a_batch_of_which_nothing_is_left_is_refused(service):
    body = {"molecules": ["[Na+].[Cl-]", "[Fe]"]}
    problem = assert_problem(service.post("/v1/molecules", body), "salt", "/molecules/0")
    assert [error["field"] for error in problem["errors"]] == ["/molecules/0", "/molecules/1"]


@pytest.mark.parametrize("accept", ["application/json", "text/csv"])
def test_a_pair_that_no_method_describes_costs_only_its_own_place(service, accept):
    pairs = [
        {"solute": "CCO", "solvent": {"smiles": "[Fe]"}, "temperature_K": 300.0},
        {"solute": "CCO", "solvent": "O", "temperature_K": 300.0},
    ]
    response = service.post("/v1/infinite-dilution", {"pairs": pairs}, accept)
    assert response.status_code == 200
    if accept == "application/json":
        first, second = response.json()["results"]
        assert first["ln_gamma_inf"] is None
        assert first["solute"]["canonical_smiles"] == "CCO"
        assert first["solvent"] is None
        assert first["confidence"]["grade"] == "none"
        assert first["confidence"]["reasons"][0]["subject"] == "solvent"
        assert first["problem"]["type"] == "/problems/element-not-described"
        assert first["problem"]["field"] == "/pairs/0/solvent/smiles"
        assert second["ln_gamma_inf"] is not None


def test_a_pair_that_cannot_be_read_costs_only_its_own_place(service):
    pairs = [
        {"solute": "CCO", "solvent": "C(C", "temperature_K": 300.0},
        {"solute": "CCO", "solvent": "O", "temperature_K": 300.0},
    ]
    first, second = service.post("/v1/infinite-dilution", {"pairs": pairs}).json()["results"]
    assert first["ln_gamma_inf"] is None
    assert first["problem"]["type"] == "/problems/unreadable-smiles"
    assert second["ln_gamma_inf"] is not None


@pytest.mark.parametrize(
    ("change", "field", "hint"),
    [
        ({"temperature_K": 78.0}, "/temperature_K", "78 °C is 351.15 K"),
        ({"temperature_K": None, "pressure_kPa": 101325.0}, "/pressure_kPa", "is 101.325 kPa"),
        ({"mole_fractions": [50.0, 50.0]}, "/mole_fractions/0", "not per cent"),
    ],
)
def test_a_number_in_another_unit_is_told_in_the_right_one(service, change, field, hint):
    body = {"components": ["CCO", "O"], "mole_fractions": [0.5, 0.5], "temperature_K": 300.0}
    problem = assert_problem(service.post("/v1/bubble-point", body | change), "out-of-range", field)
    assert hint in problem["cure"]


def test_a_pair_of_one_molecule_costs_only_its_own_place(service):
    same = {"solute": "CCO", "solvent": {"name": "ethanol"}, "temperature_K": 300.0}
    other = {"solute": "CCO", "solvent": "O", "temperature_K": 300.0}
    answered = service.post("/v1/infinite-dilution", {"pairs": [same, other]}).json()["results"]
    assert answered[0]["ln_gamma_inf"] is None
    assert answered[0]["problem"]["type"] == "/problems/duplicate-component"
    assert answered[1]["ln_gamma_inf"] is not None
    alone = service.post("/v1/infinite-dilution", {"pairs": [same]})
    assert_problem(alone, "duplicate-component", "/pairs/0/solvent")


def test_a_bad_number_keeps_its_place_beside_a_pair_left_out(service):
    pairs = [
        {"solute": "CCO", "solvent": "[Fe]", "temperature_K": 300.0},
        {"solute": "CCO", "solvent": "O", "temperature_K": 1.0},
    ]
    problem = assert_problem(
        service.post("/v1/infinite-dilution", {"pairs": pairs}), "out-of-range"
    )
    assert problem["field"] == "/pairs/1/temperature_K"


def test_all_bad_fields_are_named_together(service):
    problem = assert_problem(
        service.post(ACTIVITY, changed(temperature_K="hot", method=3)), "invalid-request"
    )
    assert {error["field"] for error in problem["errors"]} == {"/temperature_K", "/method"}


@pytest.mark.parametrize(
    "text",
    [
        "{",
        '{"components": ["CCO",]}',
        b"\xff\xfe{}",
        "[" * 100_000,
        '{"temperature_K": 1' + "0" * 5000 + "}",
    ],
)
def test_a_body_that_is_not_json_is_refused(service, text):
    assert_problem(service.post_text(ACTIVITY, text), "unreadable-body")


@pytest.mark.parametrize(
    "text",
    [
        '{"components": ["C\\ud800"]}',
        '{"components": ["CCO"], "\\udfff": 1}',
        '{"components": ["CCO"], "temperature_K": 1' + "0" * 400 + "}",
    ],
)
def test_texts_and_numbers_that_cannot_be_held_are_refused(service, text):
    assert_problem(service.post_text(ACTIVITY, text), "invalid-request")


@pytest.mark.parametrize("content_type", [None, "text/plain", "text/csv", "multipart/form-data"])
def test_a_body_of_another_media_type_is_refused(service, content_type):
    headers = {} if content_type is None else {"Content-Type": content_type}
    response = service.call("POST", ACTIVITY, content=json.dumps(MIXTURE), headers=headers)
    assert_problem(response, "unsupported-media-type")


def test_a_compressed_body_is_refused(service):
    headers = {"Content-Type": "application/json", "Content-Encoding": "gzip"}
    response = service.call("POST", ACTIVITY, content=b"\x1f\x8b", headers=headers)
    assert_problem(response, "unsupported-media-type")


def test_an_unknown_address_is_refused(service):
    assert_problem(service.get("/v1/nothing"), "not-found")
    assert_problem(service.get("/problems/nothing"), "not-found")


def test_another_verb_is_refused_and_the_right_one_told(service):
    response = service.get(ACTIVITY)
    assert_problem(response, "verb-not-allowed")
    assert response.headers["allow"] == "POST"


@pytest.mark.parametrize(
    ("path", "accept"),
    [("/v1/methods", "text/csv"), (ACTIVITY, "image/png"), (ACTIVITY, "application/json;q=0")],
)
def test_an_answer_in_another_media_type_is_refused(service, path, accept):
    response = (
        service.get(path, headers={"Accept": accept})
        if path == "/v1/methods"
        else service.post(path, MIXTURE, accept)
    )
    assert_problem(response, "not-acceptable", "Accept")


@pytest.mark.parametrize(
    ("path", "body", "field"),
    [
        ("/v1/molecules", {"molecules": ["C", "CC", "CCC"]}, "/molecules"),
        (
            "/v1/infinite-dilution",
            {"pairs": [{"solute": "CCO", "solvent": "O", "temperature_K": 300}] * 3},
            "/pairs",
        ),
        (ACTIVITY, changed(mole_fractions=[[0.5, 0.5]] * 4), "/mole_fractions"),
        (ACTIVITY, changed(components=["C", "CC", "CCC", "CCCC"]), "/components"),
        (
            "/v1/diagrams",
            {"kind": "Txy", "components": ["CCO", "O"], "pressure_kPa": 101.3, "points": 12},
            "/points",
        ),
    ],
)
def test_lists_above_their_cap_are_refused(small_service, path, body, field):
    assert_problem(small_service.post(path, body), "too-many-items", field)


def test_a_fault_of_the_service_tells_nothing_of_the_inside(service, monkeypatch):
    secret = "a secret of the inside"

    def fail(*_: object, **__: object) -> None:
        raise RuntimeError(secret)

    monkeypatch.setattr("api.routers.activity.prediction.activity_coefficients", fail)
    response = service.post(ACTIVITY, MIXTURE)
    assert_problem(response, "internal-error")
    assert secret not in response.text
    assert "Traceback" not in response.text


def test_a_damaged_data_file_tells_nothing_of_the_inside(service, monkeypatch):
    def fail(*_: object, **__: object) -> None:
        raise errors.DataError("the inside of the file system")

    monkeypatch.setattr("api.routers.activity.prediction.activity_coefficients", fail)
    response = service.post(ACTIVITY, MIXTURE)
    assert_problem(response, "faulty-data")
    assert "file system" not in response.text


def test_no_convergence_is_a_problem_and_no_number(service, monkeypatch):
    def fail(*_: object, **__: object) -> None:
        raise errors.ConvergenceError("It did not converge.", iterations=50, residual=float("nan"))

    monkeypatch.setattr("api.routers.activity.prediction.activity_coefficients", fail)
    problem = assert_problem(service.post(ACTIVITY, MIXTURE), "not-converged")
    assert problem["iterations"] == 50


def test_a_new_error_class_falls_back_on_its_parent():
    class NewStructureError(errors.IonError):
        pass

    assert problem_type_of(NewStructureError("x")) is ERROR_TYPES[errors.IonError]


@pytest.mark.parametrize("slug", sorted(all_problem_types()))
def test_every_problem_type_is_described_at_its_address(service, slug):
    kind = all_problem_types()[slug]
    page = service.get(kind.uri, headers={"Accept": "text/html"})
    assert page.status_code == 200
    assert kind.title in page.text.replace("&#x27;", "'")
    described = service.get(kind.uri, headers={"Accept": "application/json"}).json()
    assert described["type"] == kind.uri
    assert described["cure"] == kind.cure


def test_no_two_problem_types_share_a_slug():
    slugs = [kind.slug for kind in ERROR_TYPES.values()] + list(REQUEST_TYPES)
    assert len(slugs) == len(set(slugs))
