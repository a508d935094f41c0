"""All pairs of a mixture, the mixture made of them, and its sheet."""

import csv
import dataclasses
import io
import json

import numpy as np
import pytest

from groups.errors import InvalidInputError, OutOfRangeError, UnknownMethodError
from groups.handoff.correlations import correlative_model
from groups.handoff.fit_door import fit
from groups.handoff.fits import fit_grid, fit_mixture
from groups.handoff.sheets import to_csv, to_text
from groups.prediction.component import Component
from groups.structure.molecule import molecule_from_smiles

T, X1 = fit_grid((310.0, 350.0))


def sure(_pair, _T, _x1):
    return 0.1


def components(*smiles: str) -> list[Component]:
    return [Component(molecule_from_smiles(one)) for one in smiles]


def test_a_mixture_of_the_same_equation_is_recovered_whole():
    b = np.array([[0.0, 250.0, 400.0], [120.0, 0.0, -80.0], [310.0, 150.0, 0.0]])
    true = correlative_model("nrtl", "b/T", b[None], alpha=0.3)
    found = fit_mixture(true, T, X1, sure, "nrtl", "b/T")
    assert found.model is not None
    assert found.model.interactions.coefficients == pytest.approx(b[None], rel=1e-5)
    assert [pair.pair for pair in found.pairs] == [(0, 1), (0, 2), (1, 2)]
    assert len(found.triples) == 1
    assert abs(found.triples[0].largest) < 1e-6


def test_the_ternary_check_says_where_the_mixture_is_worst():
    b = np.array([[0.0, 600.0, 400.0], [500.0, 0.0, -80.0], [310.0, 150.0, 0.0]])
    true = correlative_model("nrtl", "b/T", b[None], alpha=0.45)
    found = fit_mixture(true, T, X1, sure, "wilson", "b/T")
    assert found.model is not None
    (check,) = found.triples
    x = np.array(check.mole_fractions)
    off = found.model.ln_gamma(check.temperature_K, x) - true.ln_gamma(check.temperature_K, x)
    assert off[check.component] == pytest.approx(check.largest, abs=1e-12)


def test_a_refused_pair_is_named_and_the_others_stand():
    b = np.array([[0.0, 1000.0, 200.0], [1000.0, 0.0, 100.0], [150.0, 120.0, 0.0]])
    true = correlative_model("nrtl", "b/T", b[None], alpha=0.2)
    found = fit_mixture(true, T, X1, sure, "wilson", "b/T")
    assert [one.pair for one in found.refused] == [(0, 1)]
    assert "splits" in found.refused[0].reason
    assert [one.pair for one in found.pairs] == [(0, 2), (1, 2)]
    assert found.model is None


def test_the_door_fits_a_real_pair_and_the_sheet_gives_the_model_back():
    answer = fit(components("CCO", "O"), pressure_kPa=101.325, method="unifac-dortmund")
    (pair,) = answer.fit.pairs
    assert pair.accepted
    assert answer.parameters is not None
    numbers = {one.name: one.value for one in answer.parameters.pairs[0].numbers}
    a = [[0.0, numbers["a_1,2"]], [numbers["a_2,1"], 0.0]]
    b = [[0.0, numbers["b_1,2"]], [numbers["b_2,1"], 0.0]]
    again = correlative_model("nrtl", "a+b/T", [a, b], alpha=numbers["alpha_1,2"])
    x = np.array([[0.2, 0.8], [0.0, 1.0], [1.0, 0.0]])
    assert again.ln_gamma(350.0, x) == pytest.approx(pair.model.ln_gamma(350.0, x), abs=1e-12)
    assert answer.parameters.interactions == "tau_ij = a_ij + b_ij/T; T in K"


def test_the_sheet_is_json_csv_and_text_with_units_and_sources():
    answer = fit(
        components("CC(C)=O", "CO", "O"),
        model="uniquac",
        temperature_range_K=(320.0, 360.0),
        pressure_kPa=101.325,
        method="unifac-dortmund",
    )
    sheet = answer.parameters
    assert sheet is not None
    assert json.loads(json.dumps(dataclasses.asdict(sheet)))["temperature_unit"] == "K"
    rows = list(csv.DictReader(io.StringIO(to_csv(sheet))))
    fitted = [row for row in rows if row["model"] == "uniquac"]
    assert len(fitted) == 12
    assert {row["unit"] for row in fitted} == {"1", "K"}
    assert all(row["interactions"] == "tau_ij = exp(a_ij + b_ij/T); T in K" for row in fitted)
    pure = [row for row in rows if row["model"] in ("vapour pressure", "constant")]
    assert all(row["source"] for row in pure)
    text = to_text(sheet)
    assert "predicted, not measured" in text
    assert "critical temperature" in text
    assert "r (UNIQUAC)" in text
    # Bondi volumes of the groups of acetone, CH3 and CH3CO: 0.9011 + 1.6724 (Hansen et al. 1991).
    r = next(c for c in sheet.components[0].constants if c.name == "r (UNIQUAC)")
    assert r.value == pytest.approx(2.5735)


def test_wilson_with_volumes_states_them():
    answer = fit(
        components("CC(C)=O", "CO"),
        model="wilson",
        form="b/T",
        wilson_volumes=True,
        temperature_range_K=(320.0, 340.0),
        method="unifac-dortmund",
    )
    sheet = answer.parameters
    assert sheet is not None
    assert sheet.interactions == "Lambda_ij = (V_j/V_i) exp(b_ij/T); T in K"
    volumes = [c for one in sheet.components for c in one.constants if c.unit == "cm3/mol"]
    # Handbook densities at 298.15 K: acetone 0.7845, methanol 0.7866 g/cm3 (from memory).
    assert volumes[0].value == pytest.approx(58.08 / 0.7845, rel=0.01)
    assert volumes[1].value == pytest.approx(32.04 / 0.7866, rel=0.01)


@pytest.mark.parametrize(
    ("arguments", "error"),
    [
        ({}, InvalidInputError),
        ({"model": "tnrl", "temperature_range_K": (300.0, 350.0)}, UnknownMethodError),
        ({"form": "x", "temperature_range_K": (300.0, 350.0)}, InvalidInputError),
        ({"alpha": 2.0, "temperature_range_K": (300.0, 350.0)}, OutOfRangeError),
        ({"temperature_range_K": (300.0, 300.0)}, InvalidInputError),
        ({"pressure_kPa": -1.0}, OutOfRangeError),
    ],
)
def test_bad_questions_are_refused(arguments, error):
    with pytest.raises(error):
        fit(components("CCO", "O"), method="unifac", **arguments)


def test_azeotropes_of_three_components_are_compared():
    # Acetone / chloroform / methanol has a ternary saddle azeotrope (Horsley 1973, from memory).
    answer = fit(
        components("CC(C)=O", "ClC(Cl)Cl", "CO"),
        temperature_range_K=(320.0, 345.0),
        pressure_kPa=101.325,
        method="unifac-dortmund",
    )
    assert answer.azeotropes_predicted is not None
    assert answer.azeotropes_fitted is not None
    kinds = [
        sorted(one.components for one in found)
        for found in (answer.azeotropes_predicted, answer.azeotropes_fitted)
    ]
    assert (0, 1, 2) in kinds[0]
    assert (kinds[0] == kinds[1]) == (not answer.notes)
