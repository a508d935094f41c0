"""What an assignment says: where the groups are, what is open, and what was as good."""

import pytest

from groups.errors import UnknownMethodError
from groups.structure.assignment import assign, assign_many
from groups.structure.molecule import molecule_from_smiles


def test_each_occurrence_names_its_atoms_in_the_canonical_smiles() -> None:
    found = assign(molecule_from_smiles("CCO"), "unifac-dortmund")
    assert [(g.number, g.main_number, g.count, g.atoms) for g in found.groups] == [
        (1, 1, 1, ((0,),)),
        (2, 1, 1, ((1,),)),
        (14, 5, 1, ((2,),)),
    ]
    assert found.complete
    assert found.explanation is None
    assert found.unassigned_atoms == ()


def test_names_are_those_of_the_table() -> None:
    (group,) = assign(molecule_from_smiles("O"), "unifac").groups
    assert (group.subgroup, group.main_group) == ("H2O", "H2O")


def test_a_carbon_shared_by_two_ring_groups_is_named_in_both() -> None:
    (group,) = assign(molecule_from_smiles("C1COCO1"), "unifac-dortmund").groups
    first, second = (set(atoms) for atoms in group.atoms)
    assert (group.number, group.count) == (83, 2)
    assert len(first & second) == 1
    assert first | second == set(range(5))


def test_an_uncovered_molecule_names_atoms_and_functional_group() -> None:
    molecule = molecule_from_smiles("CC(C)C#N")
    found = assign(molecule, "unifac")
    symbols = {molecule.mol.GetAtomWithIdx(i).GetSymbol() for i in found.unassigned_atoms}
    assert not found.complete
    assert symbols == {"C", "N"}
    assert found.explanation is not None
    assert "nitrile" in found.explanation
    assert "unifac" in found.explanation


def test_as_many_atoms_as_possible_are_covered() -> None:
    found = assign(molecule_from_smiles("CCOP(=O)(OCC)OCC"), "unifac")
    assert not found.complete
    assert len(found.unassigned_atoms) == 5  # P and its four oxygens


def test_no_half_of_a_group_is_left_over_in_a_partial_cover() -> None:
    found = assign(molecule_from_smiles("C1OC(P)CO1"), "unifac-dortmund")
    assert not found.complete
    held = [atom for group in found.groups for atoms in group.atoms for atom in atoms]
    assert len(held) == len(set(held))
    assert 83 not in found.counts


def test_equally_good_covers_are_listed() -> None:
    found = assign(molecule_from_smiles("COC(=O)Cc1ccccc1"), "unifac")
    assert found.counts == {1: 1, 9: 5, 10: 1, 22: 1}
    assert found.alternatives == (((1, 1), (9, 5), (12, 1), (77, 1)),)


def test_two_doubtful_places_give_all_combinations() -> None:
    found = assign(molecule_from_smiles("COC(=O)Cc1ccc(cc1)CC(=O)OC"), "unifac")
    assert found.counts == {1: 2, 9: 4, 10: 2, 22: 2}
    assert found.alternatives == (
        ((1, 2), (9, 4), (10, 1), (12, 1), (22, 1), (77, 1)),
        ((1, 2), (9, 4), (12, 2), (77, 2)),
    )


def test_a_cover_of_the_same_groups_elsewhere_is_no_alternative() -> None:
    assert assign(molecule_from_smiles("CCOCC"), "unifac").alternatives == ()


def test_published_precedence_leaves_no_alternative() -> None:
    assert assign(molecule_from_smiles("CCC(C)=O"), "unifac").alternatives == ()
    assert assign(molecule_from_smiles("CCOC"), "unifac").alternatives == ()


@pytest.mark.parametrize(
    ("smiles", "method", "ester"),
    [("O=c1ccc2ccccc2o1", "unifac", 77), ("O=c1ccc2ccccc2o1", "unifac-nist", 126)],
)
def test_the_lactone_of_coumarin_is_an_ester_and_no_arene(
    smiles: str, method: str, ester: int
) -> None:
    found = assign(molecule_from_smiles(smiles), method)
    assert found.complete
    assert found.counts[ester] == 1
    assert found.counts[9] == 4


@pytest.mark.parametrize(
    ("completed", "published"),
    [("unifac-2.0", "unifac"), ("unifac-dortmund-2.0", "unifac-dortmund")],
)
def test_a_completed_table_splits_like_the_one_it_completes(completed: str, published: str) -> None:
    molecule = molecule_from_smiles("CC(O)COC1CCCCC1")
    found = assign(molecule, completed)
    assert found.method == completed
    assert found.counts == assign(molecule, published).counts


def test_stereo_makes_no_difference() -> None:
    left, right = (molecule_from_smiles(s) for s in ("C[C@H](O)CC=CC", r"C[C@@H](O)C/C=C\C"))
    assert left.canonical_smiles != right.canonical_smiles
    assert assign(left, "unifac").counts == assign(right, "unifac").counts


def test_many_are_answered_in_order() -> None:
    molecules = [molecule_from_smiles(s) for s in ("CCO", "O", "CCO")]
    assert assign_many(molecules, "unifac") == [assign(m, "unifac") for m in molecules]


def test_an_unknown_method_is_refused() -> None:
    with pytest.raises(UnknownMethodError):
        assign(molecule_from_smiles("O"), "unifac-3.0")


@pytest.mark.parametrize(
    ("smiles", "counts"),
    [
        ("CCN1CCCCC1", {1: 1, 35: 1, 78: 5}),
        ("CC(C)NC1CCCCC1", {1: 2, 33: 1, 78: 5, 79: 1}),
        ("CC(C)OC1CCCCC1", {1: 2, 26: 1, 78: 5, 79: 1}),
    ],
)
def test_a_chain_carbon_joins_the_heteroatom_before_a_ring_carbon(
    smiles: str, counts: dict[int, int]
) -> None:
    """The rule that the record of unifac-dortmund states; common practice, no source."""
    found = assign(molecule_from_smiles(smiles), "unifac-dortmund")
    assert found.counts == counts
    assert found.alternatives == ()


@pytest.mark.parametrize("method", ["unifac", "unifac-dortmund", "psrk"])
def test_either_tautomer_of_an_amide_has_the_groups_of_the_amide(method: str) -> None:
    amide = assign(molecule_from_smiles("CC(N)=O"), method)
    acid = assign(molecule_from_smiles("CC(O)=N"), method)
    assert amide.complete
    assert acid.counts == amide.counts


def test_an_uncovered_imidic_acid_is_named_as_its_amide() -> None:
    found = assign(molecule_from_smiles("CC(O)=Nc1ccccc1"), "unifac")
    assert not found.complete
    assert found.explanation == "The table of unifac has no group for: secondary amide."
