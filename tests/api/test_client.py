"""The Python client against a real server on a real port."""

import socket
import threading
import time
from collections.abc import Iterator

import pytest
import uvicorn
from pydantic import ValidationError

from api.application import create_app
from api.client import MixwrightClient, ServiceProblemError
from api.schemas.comparisons import ComparisonRequest
from api.schemas.fits import FitRequest
from api.schemas.molecule import MoleculeInput, molecule_input
from api.settings import Settings


@pytest.fixture(scope="module")
def address() -> Iterator[str]:
    listener = socket.socket()
    listener.bind(("127.0.0.1", 0))
    config = uvicorn.Config(create_app(Settings()), log_level="warning")
    server = uvicorn.Server(config)
    thread = threading.Thread(target=server.run, kwargs={"sockets": [listener]}, daemon=True)
    thread.start()
    for _ in range(200):
        if server.started:
            break
        time.sleep(0.05)
    assert server.started
    yield f"http://127.0.0.1:{listener.getsockname()[1]}"
    server.should_exit = True
    thread.join(timeout=10.0)
    listener.close()


@pytest.fixture
def client(address: str) -> Iterator[MixwrightClient]:
    with MixwrightClient(address) as opened:
        yield opened


def test_service_questions(client):
    assert client.health().status == "ok"
    assert client.ready().status == "ready"
    assert "unifac" in {entry.id for entry in client.methods().methods}
    assert client.method("unifac").subgroup_count > 100


def test_molecules(client):
    answer = client.molecules(["CCO", {"name": "acetone"}, MoleculeInput(smiles="O")])
    assert [result.formula for result in answer.results] == ["C2H6O", "C3H6O", "H2O"]
    only = client.molecules(["CCO"], methods=["psrk"]).results[0]
    assert set(only.assignments) == {"psrk"}
    assert client.depiction("CCO").lstrip().startswith("<")


def test_every_prediction_comes_back_typed(client):
    pair = ["CCO", "O"]
    point = client.bubble_point(pair, [0.3, 0.7], pressure_kPa=101.325)
    assert point.temperature_K is not None
    dew = client.dew_point(pair, [0.3, 0.7], temperature_K=350.0)
    assert dew.pressure_kPa is not None
    flash = client.flash(["CO", "O"], [0.4, 0.6], temperature_K=350.0, pressure_kPa=101.325)
    assert flash.vapour_fraction is not None
    assert len(client.diagram("Txy", pair, pressure_kPa=101.325, points=11).x1) == 11
    assert len(client.azeotropes(pair, pressure_kPa=101.325).azeotropes) == 1
    assert client.liquid_split(["CCCCO", "O"], temperature_K=298.15).splits
    half = client.flash(["CO", "O"], [0.4, 0.6], pressure_kPa=101.325, vapour_fraction=0.5)
    assert len(half.phases) == 2 and half.vapour.reason
    one = client.activity_coefficients(pair, 300.0, [[0.5, 0.5], [0.0, 1.0]])
    assert [p.temperature_K for p in one.points] == [300.0, 300.0]
    two = client.activity_coefficients(pair, [300.0, 310.0], [[0.5, 0.5], [0.5, 0.5]])
    assert [p.temperature_K for p in two.points] == [300.0, 310.0]
    limits = client.infinite_dilution([("CCO", "O", 300.0), ("O", "CCO", 300.0)])
    assert all(result.ln_gamma_inf is not None for result in limits.results)


def test_phase_behaviour_comes_back_typed(client):
    extraction = ["CC(=O)O", "O", "CC(C)OC(C)C"]
    assert len(client.ternary_diagram(extraction, temperature_K=293.15).regions) == 1
    found = client.mutual_solubilities(["CCCCO", "O"], lowest_K=290.0, highest_K=300.0, points=3)
    assert all(found.splits)
    still = ["CC(C)=O", "ClC(Cl)Cl", "CO"]
    drawn = client.residue_curves(
        still, pressure_kPa=101.325, starts=[[0.3, 0.3, 0.4]], vapour="ideal"
    )
    assert len(drawn.curves) == 1
    one = client.gas_solubility("O=C=O", ["CO"], temperature_K=298.15)
    assert len(one.points) == 1 and one.points[0].henry_kPa is not None
    advice = client.advice(["CCO", "O"], temperature_K=(350.0, 375.0), pressure_kPa=(100.0, 110.0))
    assert advice.liquid.verdict == "real solution"


def test_a_problem_is_an_exception_with_type_field_and_cure(client):
    with pytest.raises(ServiceProblemError) as refused:
        client.bubble_point(["CCO", "C(C"], [0.5, 0.5], pressure_kPa=101.325)
    problem = refused.value.problem
    assert problem.type == "/problems/unreadable-smiles"
    assert problem.field == "/components/1/smiles"
    assert problem.cure in str(refused.value)


def test_a_request_that_cannot_be_right_is_not_sent(client):
    with pytest.raises(ValidationError):
        client.molecules([{"smiles": "CCO", "name": "ethanol"}])
    with pytest.raises(ValidationError):
        client.bubble_point(["CCO"], [float("nan")], pressure_kPa=101.325)


def test_fits_and_comparisons_come_back_typed(client):
    components = [molecule_input("CCO"), molecule_input("O")]
    request = FitRequest(
        components=components, temperature_range_K=[330.0, 370.0], compositions=11, temperatures=2
    )
    assert client.fit(request).pairs[0].components == [0, 1]
    assert client.fit_sheet(request).startswith("Parameters of nrtl")
    assert "<DataReport" in client.predicted_thermoml(request)
    asked = ComparisonRequest(
        components=components,
        points=[{"temperature_C": 80.0, "pressure_bar": 1.013, "x1": 0.5}],
        methods=["auto"],
        models=[],
    )
    assert client.compare(asked).models[0].name == "auto"
    assert client.comparison_picture(asked).startswith(b"\x89PNG")


def test_plans_and_levels(client):
    plan = client.measurement_plan(["CCO", "O"], "azeotrope", pressure_kPa=101.325)
    assert plan.measurements[-1].expected_width < plan.interval.upper - plan.interval.lower
    [limit] = client.infinite_dilution([("CCO", "O", 330.0)], level=0.5).results
    assert limit.interval is not None and limit.interval.level == 0.5
