"""Functional groups in a chemist's words."""

from collections import Counter

import pytest
from rdkit import Chem

from groups.errors import StructureError
from groups.structure import molecule_from_smiles
from groups.structure.functional import (
    associates_in_vapour,
    described,
    donates_hydrogen_bonds,
    functional_groups,
    is_carboxylic_acid,
    is_hydrophobe,
    is_polyol,
    longest_chain,
    neighbouring_polar_groups,
    polar_groups,
)


def mol(smiles: str) -> Chem.Mol:
    return molecule_from_smiles(smiles).mol


@pytest.mark.parametrize(
    ("smiles", "names"),
    [
        # Names of the compound classes as any textbook of organic chemistry gives them.
        ("CC(=O)O", ["carboxylic acid"]),
        ("CC(=O)OC(C)=O", ["acid anhydride"]),
        ("CC(=O)Cl", ["acyl halide"]),
        ("CCOC(C)=O", ["ester"]),
        ("COC=O", ["formate ester"]),
        ("O=C1CCCO1", ["lactone"]),
        ("COC(=O)OC", ["carbonate ester"]),
        ("COC(N)=O", ["carbamate"]),
        ("NC(N)=O", ["urea group"]),
        ("CC(N)=O", ["primary amide"]),
        ("CNC(C)=O", ["secondary amide"]),
        ("CN(C)C=O", ["tertiary amide"]),
        ("CN1CCCC1=O", ["lactam"]),
        ("CC=O", ["aldehyde"]),
        ("C=O", ["aldehyde"]),
        ("CC(C)=O", ["ketone"]),
        ("C1CO1", ["epoxide"]),
        ("C1CCOC1", ["cyclic ether"]),
        ("CCOCC", ["ether"]),
        ("COc1ccccc1", ["aryl ether"]),
        ("COCOC", ["acetal group"]),
        ("COO", ["hydroperoxide"]),
        ("OO", ["hydrogen peroxide"]),
        ("O", ["water"]),
        ("CCO", ["primary alcohol"]),
        ("CC(C)O", ["secondary alcohol"]),
        ("CC(C)(C)O", ["tertiary alcohol"]),
        ("Oc1ccccc1", ["phenol group"]),
        ("OCC(O)CO", ["primary alcohol", "primary alcohol", "secondary alcohol"]),
        ("N", ["ammonia"]),
        ("CCN", ["primary amine"]),
        ("CCNCC", ["secondary amine"]),
        ("CCN(CC)CC", ["tertiary amine"]),
        ("Nc1ccccc1", ["aromatic amine"]),
        ("CN(C)c1ccccc1", ["tertiary aromatic amine"]),
        ("CC#N", ["nitrile"]),
        ("C[N+]#[C-]", ["isocyanide"]),
        ("CN=C=O", ["isocyanate"]),
        ("CC=NO", ["oxime"]),
        ("C[N+](=O)[O-]", ["nitro group"]),
        ("CO[N+](=O)[O-]", ["nitrate ester"]),
        ("CCS", ["thiol"]),
        ("CSC", ["sulfide"]),
        ("CSSC", ["disulfide"]),
        ("CS(C)=O", ["sulfoxide"]),
        ("CS(C)(=O)=O", ["sulfone"]),
        ("COS(=O)(=O)OC", ["sulfate ester"]),
        ("OS(=O)(=O)O", ["sulfuric acid"]),
        ("CS(=O)(=O)O", ["sulfonic acid"]),
        ("O=C=O", ["carbon dioxide"]),
        ("COP(=O)(OC)OC", ["phosphate ester"]),
        ("c1ccncc1", ["pyridine ring"]),
        ("c1ccoc1", ["furan ring"]),
        ("c1ccsc1", ["thiophene ring"]),
        ("C=Cc1ccccc1", ["alkene"]),
        ("C#CC", ["alkyne"]),
        ("C=C=C", ["allene group"]),
        ("Clc1ccccc1", ["chlorine on an aromatic ring"]),
        ("ClC=C", ["chlorine on a double bond", "alkene"]),
        ("CC(F)(F)F", ["trifluoromethyl group"]),
        ("C[Si](C)(C)O[Si](C)(C)C", ["siloxane oxygen", "silicon", "silicon"]),
        ("CCCCCC", []),
        ("c1ccccc1", []),
    ],
)
def test_a_group_has_the_name_that_a_chemist_gives_it(smiles: str, names: list[str]) -> None:
    assert Counter(group.name for group in functional_groups(mol(smiles))) == Counter(names)


def test_every_atom_but_carbon_and_the_noble_gases_has_exactly_one_name(
    listed_smiles: list[str],
) -> None:
    unnamed = {"C", "H", "He", "Ne", "Ar", "Kr", "Xe"}
    checked = 0
    for smiles in listed_smiles[::5]:
        try:
            structure = molecule_from_smiles(smiles).mol
        except StructureError:
            continue
        claimed = [index for group in functional_groups(structure) for index in group.atoms]
        assert len(claimed) == len(set(claimed)), smiles
        others = {a.GetIdx() for a in structure.GetAtoms() if a.GetSymbol() not in unnamed}
        assert others <= set(claimed), smiles
        checked += 1
    assert checked > 500


@pytest.mark.parametrize(
    ("smiles", "words"),
    [
        ("N#Cc1ccccc1", "nitrile attached to an aromatic ring"),
        ("N#CC1CCCCC1", "nitrile attached to a ring"),
        ("N#CC", "nitrile"),
        ("O=C1CCCCC1", "ketone in a ring"),
        ("CN1CCCC1=O", "lactam"),
        ("Oc1ccccc1", "phenol group"),
    ],
)
def test_a_group_is_described_with_its_place(smiles: str, words: str) -> None:
    structure = mol(smiles)
    assert described(structure, functional_groups(structure)[0]) == words


@pytest.mark.parametrize(
    ("smiles", "pairs"),
    [
        ("OCCO", 1),  # two carbon atoms between: intramolecular hydrogen bond
        ("OCCCO", 0),
        ("OCC(O)CO", 2),
        ("COCCOCCOC", 2),
        ("COC(=O)CC#N", 1),
        ("CCO", 0),
        ("CC(=O)O", 0),
    ],
)
def test_polar_groups_are_neighbours_across_two_atoms_at_most(smiles: str, pairs: int) -> None:
    assert len(neighbouring_polar_groups(mol(smiles))) == pairs


def test_polar_groups_leave_hydrocarbon_and_halogen_out() -> None:
    assert [group.name for group in polar_groups(mol("C=CCCl"))] == []
    assert [group.name for group in polar_groups(mol("C=CCO"))] == ["primary alcohol"]


@pytest.mark.parametrize(
    ("smiles", "length"),
    [
        ("CCCCCCCCCCCC", 12),
        ("CC(C)CC(C)(C)C", 5),
        ("CCCCc1ccccc1CC", 4),
        ("CCCCOCCC", 4),
        ("CCCC(CCC)CCCC", 8),
        ("c1ccccc1", 0),
        ("O", 0),
        ("[H][H]", 0),
    ],
)
def test_the_longest_chain_is_open_carbon_only(smiles: str, length: int) -> None:
    assert longest_chain(mol(smiles)) == length


def test_only_acids_and_hydrogen_fluoride_associate_in_the_vapour() -> None:
    assert is_carboxylic_acid(mol("O=CO"))
    assert not is_carboxylic_acid(mol("CCOC(C)=O"))
    assert [associates_in_vapour(mol(s)) for s in ("CC(=O)O", "F", "Cl", "CCO", "C")] == [
        True,
        True,
        False,
        False,
        False,
    ]


def test_polyols_have_two_alcohol_groups_at_least() -> None:
    assert [is_polyol(mol(s)) for s in ("OCCCO", "OCC(O)CO", "CCO", "COCCO")] == [
        True,
        True,
        False,
        False,
    ]


def test_a_donor_carries_hydrogen_on_oxygen_or_nitrogen() -> None:
    assert [donates_hydrogen_bonds(mol(s)) for s in ("CCO", "CCN", "O", "c1cc[nH]c1")] == [True] * 4
    assert [donates_hydrogen_bonds(mol(s)) for s in ("CC(C)=O", "CN1CCCC1=O", "CCS")] == [False] * 3


def test_hydrophobes_are_those_that_water_hardly_dissolves() -> None:
    # Solubility in water at 25 C, common handbook knowledge: the first row is below 1 % by weight,
    # the second above 5 % or miscible.
    assert all(is_hydrophobe(mol(s)) for s in ("CCCCCC", "c1ccccc1", "ClC(Cl)(Cl)Cl", "CCCCCCCCO"))
    assert not any(is_hydrophobe(mol(s)) for s in ("CCO", "CC(C)=O", "C1CCOC1", "OCCO", "CCCCO"))
