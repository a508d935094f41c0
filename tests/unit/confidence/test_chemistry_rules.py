"""Which mixtures react, and which solutes are gases. Chemistry from memory, as any textbook."""

import pytest

from groups.confidence.chemistry_rules import chemistry_reasons, gas_reasons
from groups.confidence.structure_rules import size_reasons
from groups.structure.identify import identified
from groups.structure.molecule import molecule_from_smiles


def codes(*smiles: str) -> list[str]:
    return [r.code for r in chemistry_reasons([molecule_from_smiles(one) for one in smiles])]


@pytest.mark.parametrize(
    ("first", "second", "expected"),
    [
        ("Cl", "O", ["ionises"]),
        ("O", "OS(=O)(=O)O", ["ionises"]),
        ("CS(=O)(=O)O", "CO", ["ionises"]),
        ("Cl", "CCCCCC", []),
        ("F", "O", []),
        ("CC(=O)O", "O", []),
        ("CC(=O)O", "CCN(CC)CC", ["acid_with_base"]),
        ("N", "OC=O", ["acid_with_base"]),
        ("c1ccncc1", "CC(=O)O", ["acid_with_base"]),
        ("C1COCCN1", "CC(=O)O", ["acid_with_base"]),
        ("CC(=O)O", "CN(C)C=O", []),
        ("CC(=O)O", "Nc1ccccc1", []),
        ("CC(=O)O", "CC#N", []),
        ("CC(=O)O", "c1cc[nH]c1", []),
        ("CC(=O)O", "CC[N+](=O)[O-]", []),
        ("COC(C)=O", "CCN(CC)CC", []),
        ("OCCO", "CCN(CC)CC", []),
    ],
)
def test_acids_meet_bases(first, second, expected):
    assert codes(first, second) == expected
    assert codes(second, first) == expected


@pytest.mark.parametrize(
    ("smiles", "temperature_K", "is_gas"),
    [("O=O", 298.15, True), ("C", 250.0, True), ("C", 150.0, False), ("CCCC", 298.15, False)],
)
def test_a_gas_above_its_critical_temperature_is_told(smiles, temperature_K, is_gas):
    # Critical temperatures, from memory: O2 154.6 K, CH4 190.6 K, butane 425 K.
    found = gas_reasons(identified(molecule_from_smiles(smiles)), temperature_K)
    assert [reason.code for reason in found] == ["supercritical_component"] * is_gas


def test_hydrogen_has_a_size_beside_a_long_chain():
    found = size_reasons([molecule_from_smiles("[H][H]"), molecule_from_smiles("C" * 40)])
    assert [reason.code for reason in found] == ["long_chain", "size_asymmetry"]
