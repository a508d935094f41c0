"""The real vapour of a mixture: limits, notes, and its place behind the seam of equilibrium."""

import sys
from pathlib import Path

import numpy as np
import pytest

sys.path.insert(0, str(Path(__file__).parent))

from vapour_mixtures import systems, virial

from groups.equilibrium import bubble_pressure, bubble_temperature, dew_temperature, flash
from groups.errors import ShapeError
from groups.structure.molecule import molecule_from_smiles
from groups.vapour import ideality, range_notes, real_vapour

T = np.array([330.0, 390.0])
Y = np.array([[0.3, 0.7], [0.9, 0.1]])


def test_the_correction_of_a_pure_component_at_saturation_is_zero():
    model, _ = virial("CC(=O)O", "CCCCCC")
    saturation = np.exp(np.stack([line.ln_kPa(T) for line in model.saturation], axis=1))
    for i in range(2):
        pure = np.tile(np.eye(2)[i], (2, 1))
        correction = model.ln_correction(T, saturation[:, i], pure)
        # Two evaluations of the same formula: rounding alone.
        np.testing.assert_allclose(correction[:, i], 0.0, atol=1e-12)


def test_no_pressure_no_deviation():
    model, _ = virial("CCO", "CCCCCC")
    nothing = np.full(2, 1e-9)
    np.testing.assert_allclose(model.ln_fugacity_coefficients(T, nothing, Y), 0.0, atol=1e-9)
    np.testing.assert_allclose(model.compressibility(T, nothing, Y), 1.0, atol=1e-9)


def test_the_range_of_the_virial_equation_is_told():
    model, _ = virial("CCO", "CCCCCC")
    assert range_notes(model, T, np.array([100.0, 200.0]), Y) == ()
    (note,) = range_notes(model, T, np.array([100.0, 5000.0]), Y)
    assert note.code == "virial_beyond_range" and note.cap == "low"
    assert "5000 kPa" in note.message
    assert model.within_range(T, np.array([100.0, 5000.0]), Y).tolist() == [True, False]


def test_every_component_tells_where_its_coefficient_comes_from():
    _, notes = virial("CC(=O)O", "CCCCCC")
    assert [n.code for n in notes].count("second_virial_source") == 2
    assert "vapour_dimers_included" in {n.code for n in notes}


def test_hydrogen_fluoride_is_told_to_associate_in_another_way():
    _, notes = virial("F", "O")
    assert "vapour_association_missing" in {n.code for n in notes}


def test_as_many_lines_as_molecules():
    with pytest.raises(ShapeError):
        real_vapour([molecule_from_smiles("CCO")], [])


def test_bubble_dew_and_flash_agree_under_a_real_vapour():
    _, real = systems("CC(=O)O", "O")
    x = np.array([[0.2, 0.8], [0.7, 0.3]])
    bubble = bubble_temperature(real, 101.325, x)
    assert bubble.converged.all()
    dew = dew_temperature(real, 101.325, bubble.vapour)
    # Both solvers stop at 1e-9 in ln fugacity, which is 1e-8 K at most here.
    np.testing.assert_allclose(dew.temperature_K, bubble.temperature_K, atol=1e-6)
    np.testing.assert_allclose(dew.liquid, x, atol=1e-6)
    middle = flash(real, bubble.temperature_K, 101.325, 0.5 * (x + bubble.vapour))
    np.testing.assert_allclose(middle.vapour_fraction, 0.5, atol=1e-5)


def test_the_cost_of_an_ideal_vapour_is_that_of_solving_with_one():
    ideal, real = systems("CCO", "CCCCCC")
    x = np.array([[0.4, 0.6]])
    found, plain = bubble_pressure(real, 370.0, x), bubble_pressure(ideal, 370.0, x)
    cost = ideality(
        real.vapour,
        found.temperature_K,
        found.pressure_kPa,
        found.vapour,  # type: ignore[arg-type]
    )
    assert plain.pressure_kPa[0] / found.pressure_kPa[0] - 1.0 == pytest.approx(
        cost.pressure_error[0], abs=1e-8
    )
    np.testing.assert_allclose(plain.vapour - found.vapour, cost.vapour_error, atol=1e-8)
    assert cost.within_range.all()
