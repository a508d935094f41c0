"""Mixtures for which the index rule cannot be decided are answered all the same."""

import pytest

from groups.prediction import Component, azeotropes
from groups.structure.molecule import molecule_from_smiles

UNDECIDABLE = [
    (("[He]", "O", "c1ccccc1"), "auto", 101.0),  # helium has no boiling point there
    (("[H][H]", "CCN(CC)CC"), "psrk", 101.325),
    (("C" * 40, "O", "C1COCCO1"), "unifac-2.0", 0.0414),  # one liquid is all but gone
]


@pytest.mark.parametrize(("molecules", "method", "pressure_kPa"), UNDECIDABLE)
def test_an_undecidable_index_raises_nothing(molecules, method, pressure_kPa):
    components = [Component(molecule_from_smiles(text)) for text in molecules]
    answer = azeotropes(components, pressure_kPa=pressure_kPa, method=method)
    for found in answer.azeotropes:
        assert found.pressure_kPa == pytest.approx(pressure_kPa)
        assert found.mole_fractions.sum() == pytest.approx(1.0)
