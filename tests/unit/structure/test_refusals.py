"""What is refused, by which error, and whether the message names the place."""

import pytest

from groups import errors
from groups.structure import molecule_from_smiles


@pytest.mark.parametrize(
    ("smiles", "error", "words"),
    [
        ("", errors.EmptyMoleculeError, "empty"),
        ("   ", errors.EmptyMoleculeError, "empty"),
        ("[H]", errors.EmptyMoleculeError, "hydrogen alone"),
        ("[H+]", errors.EmptyMoleculeError, "hydrogen alone"),
        ("[Na+].[Cl-]", errors.SaltError, "+1, -1"),
        ("CC[NH3+].[Cl-]", errors.SaltError, "+1, -1"),
        ("CC(=O)[O-].[Na+].O", errors.SaltError, "-1, +1, 0"),
        ("CCO.[NH4+]", errors.IonError, "0, +1"),
        ("CC(=O)[O-]", errors.IonError, "charge -1: O- at position 6"),
        ("[Ca+2]", errors.IonError, "Ca2+ at position 0"),
        ("[NH3+]CC(=O)[O-]", errors.IonError, "inner salt"),
        ("C[N+](C)(C)CC(=O)[O-]", errors.IonError, "inner salt"),
        ("CCO.O", errors.SeveralMoleculesError, "2 molecules"),
        ("C[CH2]", errors.RadicalError, "C at position 1"),
        ("CC[O]", errors.RadicalError, "O at position 2"),
        ("[CH2]", errors.RadicalError, "C at position 0"),
        ("[Na]", errors.MetalError, "Na at position 0"),
        ("CC[Hg]CC", errors.MetalError, "Hg at position 2"),
        ("CC(=O)O[Na]", errors.MetalError, "Na at position 7"),
        ("*CC*", errors.PolymerError, "position 0, * at position 3"),
        ("[*]CC", errors.PolymerError, "position 0"),
        ("[2H]OC", errors.IsotopeError, "2H at position 0"),
        ("[13CH4]", errors.IsotopeError, "13C at position 0"),
        ("[2H]O[2H]", errors.IsotopeError, "position 5"),
        ("C" * 201, errors.MoleculeTooLargeError, "201 heavy atoms"),
        ("C" * 5_001, errors.MoleculeTooLargeError, "5,001 characters"),
    ],
)
def test_each_kind_has_its_own_error_and_says_what_is_wrong(
    smiles: str, error: type[errors.StructureError], words: str
) -> None:
    with pytest.raises(error) as caught:
        molecule_from_smiles(smiles)
    assert type(caught.value) is error
    assert words in str(caught.value)
    assert caught.value.cure


@pytest.mark.parametrize("smiles", ["[H][H]", "[HH]", "[2H][2H]", "[N]=O", "[O]N=O", "O=O"])
def test_gases_with_a_published_group_are_taken(smiles: str) -> None:
    # H2, D2, NO, NO2, O2: Horstmann et al., Fluid Phase Equilib. 227 (2005) 157, group list.
    assert molecule_from_smiles(smiles).canonical_smiles


def test_atoms_of_the_refused_part_are_named_by_index() -> None:
    with pytest.raises(errors.IonError) as caught:
        molecule_from_smiles("[NH3+]CC(=O)[O-]")
    assert caught.value.atoms == (0, 4)
