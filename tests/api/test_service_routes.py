"""Health, readiness, methods and pages."""

import re

import pytest

from api import __version__
from groups.parameters import METHODS
from groups.prediction import ALL_METHODS, CAUTIONS


def test_health(service):
    response = service.get("/v1/health")
    assert (response.status_code, response.json()) == (
        200,
        {"status": "ok", "version": __version__},
    )


def test_ready_names_every_method(service):
    response = service.get("/v1/ready")
    assert response.json() == {"status": "ready", "methods": list(ALL_METHODS)}


def test_not_ready_is_a_problem_and_not_a_crash(service, monkeypatch):
    def fail() -> None:
        raise RuntimeError("tables are gone")

    monkeypatch.setattr("api.readiness._try_once", fail)
    response = service.get("/v1/ready")
    assert response.status_code == 503
    assert response.json()["type"] == "/problems/not-ready"
    assert "tables are gone" not in response.text


def test_methods_are_listed(service):
    listed = service.get("/v1/methods").json()
    assert [entry["id"] for entry in listed["methods"]] == list(ALL_METHODS)
    assert listed["default"] == "auto"


@pytest.mark.parametrize("method", ALL_METHODS)
def test_each_method_is_shown_in_full(service, method):
    detail = service.get(f"/v1/methods/{method}").json()
    assert detail["id"] == method
    assert detail["description"]
    if method in METHODS:
        assert detail["sources"] and detail["sources"][0]["citation"]
        assert len(detail["subgroups"]) == detail["subgroup_count"] > 40
        pairs = detail["pairs_with_parameters"] + detail["pairs_without_parameters"]
        assert pairs == detail["main_group_count"] * (detail["main_group_count"] - 1) // 2
        assert detail["temperature_range_K"][0] < detail["temperature_range_K"][1]


def test_subgroups_carry_the_published_volume_and_surface(service):
    # R and Q of CH3 and OH: Hansen et al. 1991, table I (the same since Fredenslund et al. 1977).
    groups = {g["name"]: g for g in service.get("/v1/methods/unifac").json()["subgroups"]}
    assert (groups["CH3"]["R"], groups["CH3"]["Q"]) == (0.9011, 0.848)
    assert (groups["OH"]["R"], groups["OH"]["Q"]) == (1.0, 1.2)


def test_an_unknown_method_is_a_problem_of_status_404(service):
    response = service.get("/v1/methods/unifaq")
    assert response.status_code == 404
    assert response.json()["type"] == "/problems/method-not-found"
    assert "unifac-dortmund" in response.json()["detail"]


@pytest.mark.parametrize("path", ["/", "/reference", "/problems"])
def test_pages_load_nothing_from_other_hosts(service, path):
    response = service.get(path)
    assert response.status_code == 200
    assert response.headers["content-type"].startswith("text/html")
    loaded = re.findall(r'(?:src|href)="([^"]+)"', response.text)
    assert loaded and all(link.startswith(("/", "#")) for link in loaded)
    assert "{{" not in response.text


def test_the_start_page_shows_every_caution(service):
    page = service.get("/").text
    assert all(caution in page for caution in CAUTIONS)


def test_the_reference_shows_every_address_and_field(service):
    page = service.get("/reference").text
    described = service.get("/openapi.json").json()
    for path in described["paths"]:
        assert f"{path}</code>" in page
    for field in (
        "mole_fractions",
        "on_missing",
        "components[].canonical_smiles",
        "interval_90",
        "log_base",
    ):
        assert field in page
