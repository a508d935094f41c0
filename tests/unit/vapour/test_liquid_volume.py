"""Liquid volumes against handbook densities."""

import numpy as np
import pytest

from groups.structure.molecule import molecule_from_smiles
from groups.vapour.gas_constants import gas_constants
from groups.vapour.liquid_volume import liquid_volume, rackett


# Densities at 298.15 K, g/cm3, CRC Handbook, from memory.
@pytest.mark.parametrize(
    ("smiles", "density", "molar_mass"),
    [("CCCCCC", 0.6548, 86.18), ("c1ccccc1", 0.8737, 78.11), ("CO", 0.7866, 32.04)],
)
def test_a_published_curve_meets_the_handbook(smiles, density, molar_mass):
    molecule = molecule_from_smiles(smiles)
    gas = gas_constants(molecule)
    assert gas is not None
    volume = liquid_volume(molecule, gas)
    assert not volume.estimated
    # 1 %: the accuracy that the collection states for its curves.
    assert volume.cm3_mol(np.array(298.15)) == pytest.approx(molar_mass / density, rel=0.01)


def test_an_estimate_is_near_enough_for_a_poynting_factor():
    gas = gas_constants(molecule_from_smiles("CCCCCC"))
    assert gas is not None
    curve = rackett(gas, 0.29056 - 0.08775 * gas.acentric_factor)
    # 5 %: the mean error that Yamada and Gunn's equation is known for is 1 to 3 %.
    assert curve(np.array(298.15)) == pytest.approx(86.18 / 0.6548, rel=0.05)


def test_a_volume_is_held_near_the_critical_point():
    molecule = molecule_from_smiles("CCCCCC")
    gas = gas_constants(molecule)
    assert gas is not None
    volume = liquid_volume(molecule, gas)
    assert volume.cm3_mol(np.array(900.0)) == volume.cm3_mol(np.array(volume.range_K[1]))
