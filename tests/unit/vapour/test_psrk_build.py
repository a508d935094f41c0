"""Which molecules the equation of state takes, and what it says about them."""

import numpy as np
import pytest

from groups.errors import IncompleteAssignmentError, MissingParameterError
from groups.pure import vapour_pressure
from groups.structure.molecule import molecule_from_smiles
from groups.vapour.psrk import psrk_bubble_pressure, psrk_model
from groups.vapour.psrk.alpha import attraction, root_alpha


def model(*smiles):
    return psrk_model([molecule_from_smiles(text) for text in smiles])


@pytest.mark.parametrize("smiles", ["CCO", "O", "CCCCCCCCCC", "O=C=O", "C", "CC(C)=O", "N"])
def test_a_pure_component_boils_where_its_curve_says(smiles):
    found, _ = model(smiles)
    molecule = molecule_from_smiles(smiles)
    low, high = found.attractions[0].range_K
    T = np.linspace(low + 1.0, high - 1.0, 15)
    states = psrk_bubble_pressure(found, T, np.ones((15, 1)))
    assert states.converged.all()
    Tc = found.critical_temperature_K[0]
    curve = vapour_pressure(molecule, temperature_K=(0.5 * Tc, 0.98 * Tc))
    # Three coefficients fit ln P within 1 % (the deviation is stated and tested here).
    np.testing.assert_allclose(states.pressure_kPa, curve.kPa(T), rtol=0.015)
    miss = np.log(states.pressure_kPa) - curve.ln_kPa(T)
    assert np.sqrt(np.mean(miss**2)) < 2.0 * found.attractions[0].deviation_ln + 1e-4


def test_without_a_curve_the_attraction_is_generalised():
    found = attraction(507.6, 3025.0, 0.301, None)
    # Soave (1972): 0.480 + 1.574 * 0.301 - 0.176 * 0.301^2 = 0.93783 (by hand).
    assert found.coefficients == pytest.approx((0.93783, 0.0, 0.0), abs=1e-5)
    assert found.range_K is None


def test_alpha_and_its_slope_belong_together_at_any_temperature():
    found, _ = model("CCO", "[H][H]")
    T = np.array([40.0, 150.0, 300.0, 600.0, 1500.0])
    h = 1e-4
    up, down = (root_alpha(found.attractions, T + d)[0] for d in (h, -h))
    np.testing.assert_allclose(
        (up - down) / (2.0 * h), root_alpha(found.attractions, T)[1], atol=1e-8
    )
    assert (root_alpha(found.attractions, T)[0] >= 0.0).all()


def test_a_quantum_gas_is_told():
    _, notes = model("[H][H]", "CCCCCC")
    assert "quantum_gas" in {note.code for note in notes}


def test_what_the_table_lacks_is_refused():
    with pytest.raises(MissingParameterError):
        model("O=O", "CC(C)=O")
    with pytest.raises(IncompleteAssignmentError):
        model("CCO", "CP(C)C")
