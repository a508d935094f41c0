"""The quick look at single atoms never hides a place where a pattern fits."""

import csv
from pathlib import Path

import pytest
from rdkit import Chem

from groups.structure.matching import Matcher, with_amides, with_published_aromaticity
from groups.structure.molecule import molecule_from_smiles
from groups.structure.patterns import ASSIGNED_METHODS, pattern_set

EXAMPLES = Path(__file__).parents[2] / "reference" / "assignments" / "remembered.csv"


def molecules() -> list[Chem.Mol]:
    with EXAMPLES.open(encoding="utf-8") as lines:
        smiles = sorted({row["smiles"] for row in csv.DictReader(lines)})
    return [with_published_aromaticity(molecule_from_smiles(s).mol) for s in smiles]


@pytest.mark.parametrize("method", ASSIGNED_METHODS[:6])
def test_candidates_are_all_matches_of_all_patterns(method: str) -> None:
    matcher = Matcher(pattern_set(method))
    for mol in molecules():
        candidates, universe, size = matcher.candidates(mol, shared=False)
        found = sorted((c.pattern, c.bits) for c in candidates)
        matches = sorted(
            (index, sum(1 << atom for atom in match))
            for index, pattern in enumerate(matcher.patterns.patterns)
            if not pattern.fragment.halves
            for match in mol.GetSubstructMatches(pattern.fragment.query)
        )
        assert found == matches, Chem.MolToSmiles(mol)
        assert universe == (1 << size) - 1


def test_a_shared_atom_has_two_bits_and_each_half_can_be_either() -> None:
    matcher = Matcher(pattern_set("unifac-dortmund"))
    candidates, universe, size = matcher.candidates(molecule_from_smiles("C1COCO1").mol)
    assert universe.bit_count() == size + 1
    halves = [c for c in candidates if matcher.patterns.patterns[c.pattern].number == 83]
    assert len(halves) == 4
    assert all(c.bits.bit_count() == 3 for c in halves)


@pytest.mark.parametrize("smiles", ["c1ccccc1", "c1ccoc1", "c1ccsc1", "Oc1ccccn1", "CCO"])
def test_rings_without_a_double_bond_out_of_them_are_left_as_they_are(smiles: str) -> None:
    mol = molecule_from_smiles(smiles).mol
    assert with_published_aromaticity(mol) is mol


def test_a_ring_with_a_carbonyl_group_is_not_aromatic() -> None:
    mol = with_published_aromaticity(molecule_from_smiles("O=c1ccc2ccccc2o1").mol)
    assert sum(atom.GetIsAromatic() for atom in mol.GetAtoms()) == 6


@pytest.mark.parametrize(
    ("acid", "amide"),
    [
        ("CC(O)=N", "CC(N)=O"),
        ("CC(O)=NC", "CNC(C)=O"),
        ("N=C(O)c1ccccc1", "NC(=O)c1ccccc1"),
        ("OC1=NCCC1", "O=C1CCCN1"),
        ("OC(=N)CCC(O)=N", "NC(=O)CCC(N)=O"),
        ("[H]N=C(C)O[H]", "CC(N)=O"),
    ],
)
def test_an_imidic_acid_is_taken_for_its_amide(acid: str, amide: str) -> None:
    redrawn = with_amides(molecule_from_smiles(acid).mol)
    assert Chem.MolToSmiles(redrawn) == molecule_from_smiles(amide).canonical_smiles


@pytest.mark.parametrize("smiles", ["CC(N)=O", "CC(=N)OC", "CC(C)=NO", "Oc1ccccn1"])
def test_what_is_no_imidic_acid_is_left_as_it_is(smiles: str) -> None:
    mol = molecule_from_smiles(smiles).mol
    assert with_amides(mol) is mol
