"""Reading SMILES: one molecule, one form, whichever way it is written."""

import csv
from collections.abc import Iterator
from pathlib import Path

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from rdkit import Chem, rdBase

from groups.errors import MetalError, StructureError, UnsupportedStructureError
from groups.structure import Molecule, molecule_from_smiles

SHARED = Path(__file__).parents[3].parent / "shared" / "data" / "gamma_infinity.csv"


@pytest.fixture(scope="module")
def molecules(listed_smiles: list[str]) -> list[Molecule]:
    """Every fifth supported entry of the short identifier list."""
    found = []
    for smiles in listed_smiles[::5]:
        try:
            found.append(molecule_from_smiles(smiles))
        except StructureError:
            continue
    assert len(found) >= 200
    return found


def spellings(molecule: Molecule) -> Iterator[str]:
    mol = Chem.MolFromSmiles(molecule.canonical_smiles)
    rdBase.SeedRandomNumberGenerator(20_240)
    for _ in range(3):
        yield Chem.MolToSmiles(mol, doRandom=True)
    yield Chem.MolToSmiles(mol, doRandom=True, allHsExplicit=True)
    kekulised = Chem.Mol(mol)
    Chem.Kekulize(kekulised, clearAromaticFlags=True)
    yield Chem.MolToSmiles(kekulised, kekuleSmiles=True)


def flat(smiles: str) -> str:
    mol = Chem.MolFromSmiles(smiles)
    Chem.RemoveStereochemistry(mol)
    return Chem.MolToSmiles(mol)


def test_the_canonical_form_does_not_depend_on_how_the_smiles_is_written(
    molecules: list[Molecule],
) -> None:
    wrong = [
        (molecule.canonical_smiles, text)
        for molecule in molecules
        for text in spellings(molecule)
        if molecule_from_smiles(text) != molecule
    ]
    assert wrong == []


def test_hydrogen_written_as_atoms_changes_nothing(molecules: list[Molecule]) -> None:
    # Without stereo marks: RDKit writes a few stereo double bonds in large rings the wrong way
    # round once hydrogen stands on them as atoms.
    for molecule in molecules:
        text = Chem.MolToSmiles(Chem.AddHs(Chem.MolFromSmiles(flat(molecule.canonical_smiles))))
        assert molecule_from_smiles(text).canonical_smiles == flat(molecule.canonical_smiles)


def test_the_canonical_form_is_its_own_canonical_form(molecules: list[Molecule]) -> None:
    for molecule in molecules:
        assert molecule_from_smiles(molecule.canonical_smiles) == molecule


def test_atom_indices_count_the_atoms_of_the_canonical_smiles(molecules: list[Molecule]) -> None:
    for molecule in molecules:
        symbols = [atom.GetSymbol() for atom in molecule.mol.GetAtoms()]
        parsed = Chem.MolFromSmiles(molecule.canonical_smiles)
        assert symbols == [atom.GetSymbol() for atom in parsed.GetAtoms()]
        assert molecule.mol.GetNumAtoms() == molecule.mol.GetNumHeavyAtoms()


def test_every_molecule_of_the_open_data_is_read_but_the_organotin_ones() -> None:
    if not SHARED.exists():
        pytest.skip("../shared/data/gamma_infinity.csv is not beside this checkout")
    with SHARED.open(encoding="utf-8") as file:
        texts = {
            row[column]
            for row in csv.DictReader(file)
            for column in ("solute_smiles", "solvent_smiles")
        }
    assert len(texts) > 500
    for text in sorted(texts):
        if "[Sn]" in text:
            with pytest.raises(MetalError):
                molecule_from_smiles(text)
        else:
            assert molecule_from_smiles(text).canonical_smiles == Chem.CanonSmiles(text)


@pytest.mark.parametrize(
    ("smiles", "formula", "molar_mass_g_mol"),
    [
        # Standard atomic weights of IUPAC 2021: H 1.008, C 12.011, N 14.007, O 15.999, S 32.06,
        # Cl 35.45; summed by hand.
        ("O", "H2O", 18.015),
        ("CCO", "C2H6O", 46.069),
        ("ClC(Cl)Cl", "CHCl3", 119.369),
        ("C[N+](=O)[O-]", "CH3NO2", 61.040),
        ("CS(C)=O", "C2H6OS", 78.129),
        ("[H][H]", "H2", 2.016),
    ],
)
def test_formula_and_molar_mass_are_those_of_the_elements(
    smiles: str, formula: str, molar_mass_g_mol: float
) -> None:
    molecule = molecule_from_smiles(smiles)
    assert molecule.formula == formula
    # 0.015 g/mol: RDKit rounds the atomic weights, sulfur by 0.007 the most.
    assert molecule.molar_mass_g_mol == pytest.approx(molar_mass_g_mol, abs=0.015)


def test_stereo_marks_are_kept() -> None:
    assert molecule_from_smiles("F/C=C/F") != molecule_from_smiles("F/C=C\\F")
    assert molecule_from_smiles("C[C@H](O)CC") != molecule_from_smiles("C[C@@H](O)CC")


def test_space_around_the_smiles_and_map_numbers_are_ignored() -> None:
    assert molecule_from_smiles("  [CH3:1][CH2:2]O \n") == molecule_from_smiles("CCO")


def test_a_molecule_of_200_heavy_atoms_is_taken() -> None:
    assert molecule_from_smiles("C" * 200).mol.GetNumHeavyAtoms() == 200


def test_random_text_never_raises_anything_but_a_structure_error() -> None:
    pieces = st.sampled_from([*"CNOPSFIcnos()[]123=#-+.@/\\H%*: é|>", "Cl", "Br", "[nH]"])

    @settings(max_examples=1_500, deadline=None, derandomize=True)
    @given(st.lists(pieces, max_size=14))
    def check(parts: list[str]) -> None:
        try:
            molecule = molecule_from_smiles("".join(parts))
        except StructureError as error:
            assert str(error)
            assert error.cure
        else:
            assert molecule_from_smiles(molecule.canonical_smiles) == molecule

    check()


def test_refusals_are_structure_errors_that_name_their_smiles() -> None:
    with pytest.raises(UnsupportedStructureError) as caught:
        molecule_from_smiles("CCO.CCO")
    assert caught.value.smiles == "CCO.CCO"
