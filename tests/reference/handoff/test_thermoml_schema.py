"""What is written validates against the published schema."""

import hashlib
import re
import tomllib
from pathlib import Path

import numpy as np
import pytest

from groups.handoff.correlations import correlative_model
from groups.handoff.thermoml import (
    activity_table,
    boiling_table,
    enthalpy_table,
    read_thermoml,
    write_thermoml,
)
from groups.handoff.thermoml.vocabulary import NAMESPACE
from groups.structure.identify import molecule_from_name

HERE = Path(__file__).parent
SCHEMA = HERE / "ThermoML.xsd"


@pytest.fixture(scope="module")
def molecules():
    return tuple(molecule_from_name(name) for name in ("acetone", "methanol", "water"))


def document(molecules, n: int) -> str:
    x = np.random.default_rng(4).dirichlet(np.ones(n), 5)
    y = np.random.default_rng(5).dirichlet(np.ones(n), 5)
    T, P = np.linspace(320.0, 340.0, 5), np.full(5, 101.325)
    model = correlative_model("nrtl", "b/T", [200.0 * (1.0 - np.eye(n))], alpha=0.3)
    gamma = np.exp(model.ln_gamma(T, x))
    tables = [
        boiling_table(T, P, x, y, "modified UNIFAC (Dortmund)", description="at 1 atm"),
        boiling_table(np.full(5, 330.0), P + np.arange(5), x, y, "modified UNIFAC (Dortmund)"),
        boiling_table(T, P + np.arange(5), x, y, "modified UNIFAC (Dortmund)"),
        activity_table(T, x, gamma, "UNIFAC", u_ln_gamma=0.1),
        enthalpy_table(T, x, np.linspace(100.0, 500.0, 5), "UNIFAC"),
    ]
    return write_thermoml(molecules[:n], tables, "A mixture & its <prediction>")


def test_the_schema_is_the_one_recorded():
    record = tomllib.loads((HERE / "ThermoML.toml").read_text(encoding="utf-8"))
    assert hashlib.sha256(SCHEMA.read_bytes()).hexdigest() == record["sha256"]


@pytest.mark.parametrize("n", [2, 3])
def test_documents_are_valid(molecules, n):
    xmlschema = pytest.importorskip("xmlschema", reason="no schema validator is installed")
    schema = xmlschema.XMLSchema(str(SCHEMA))
    errors = [error.reason for error in schema.iter_errors(document(molecules, n))]
    assert errors == []


def test_the_validator_sees_a_wrong_order(molecules):
    xmlschema = pytest.importorskip("xmlschema", reason="no schema validator is installed")
    text = document(molecules, 2)
    wrong = text.replace("<ePresentation>Direct value, X</ePresentation>", "", 1)
    assert not xmlschema.XMLSchema(str(SCHEMA)).is_valid(wrong)


def test_every_property_is_marked_as_predicted(molecules):
    text = document(molecules, 2)
    assert NAMESPACE in text
    properties = text.count("<Property>")
    assert properties > 0
    assert text.count("<ePredictionType>Group contribution</ePredictionType>") == properties


def test_predicted_data_are_not_read_as_measurements_but_measured_ones_are(molecules):
    text = document(molecules, 2)
    with pytest.raises(Exception, match=r"no measured point.*predicted"):
        read_thermoml(text, molecules[:2])
    measured = re.sub(
        r"<Prediction>.*?</Prediction>", "<eMethodName>Other</eMethodName>", text, flags=re.S
    )
    points = read_thermoml(measured, molecules[:2]).measurements
    other_way = read_thermoml(measured, molecules[1::-1]).measurements
    assert points.n_points == 30  # three tables of five, ten activities, five enthalpies
    v, w = points.vapour_liquid, other_way.vapour_liquid
    assert v.temperature_K[:5] == pytest.approx(np.linspace(320.0, 340.0, 5))
    assert w.x1 == pytest.approx(1.0 - v.x1, abs=1e-12)
    assert w.y1 == pytest.approx(1.0 - v.y1, abs=1e-12)
    expected = np.linspace(100.0, 500.0, 5)
    assert points.enthalpies.excess_enthalpy_J_mol == pytest.approx(expected)
    # u(gamma) = 0.1 gamma was written to six digits, and comes back as u(ln gamma).
    assert points.activities.u_ln_gamma == pytest.approx(np.full(10, 0.1), rel=1e-4)
