"""Where a SMILES text goes wrong."""

import pytest

from groups.errors import UnreadableSmilesError
from groups.structure import molecule_from_smiles
from groups.structure.syntax import atom_positions, first_mistake


@pytest.mark.parametrize(
    ("smiles", "position", "words"),
    [
        # Positions counted by hand from 0.
        ("CCX", 2, "'X'"),
        ("CCO ethanol", 3, "space"),
        ("CC\tO", 2, "space"),
        ("CCO|$a$|", 3, "extension"),
        ("CC>>O", 2, "reaction"),
        ("C~C", 1, "unknown order"),
        ("Cé", 1, "'é'"),
        ("CC(C", 2, "never closed"),
        ("CC)", 2, "closes no branch"),
        ("C()C", 2, "needs an atom"),
        ("C1CC", 1, "never closed"),
        ("CC1CCC2", 2, "never closed"),
        ("C11", 2, "to itself"),
        ("C1C1", 3, "bonded already"),
        ("1CC", 0, "needs an atom"),
        ("C%1", 1, "two digits"),
        ("C[N", 1, "never closed"),
        ("CN]", 2, "closes no bracket"),
        ("C[Foo]", 1, "[Foo]"),
        ("C==C", 2, "leads to no atom"),
        ("CC=", 2, "leads to no atom"),
        ("CC.", 2, "leads to no atom"),
        ("CC(C)(C)(C)C", 1, "5 bonds"),
        ("CO=C", 1, "3 bonds"),
        ("[CH3]F(C)C", 5, "3 bonds"),
        ("CN#C", 1, "[N+]"),
        ("Cc", 1, "in no ring"),
        ("Cc1cccn1", 1, "[nH]"),
    ],
)
def test_the_message_names_the_place_and_the_mistake(
    smiles: str, position: int, words: str
) -> None:
    with pytest.raises(UnreadableSmilesError) as caught:
        molecule_from_smiles(smiles)
    assert caught.value.position == position
    assert f"position {position}" in str(caught.value) or "aromatic atoms" in str(caught.value)
    assert words in str(caught.value)


@pytest.mark.parametrize(
    "smiles", ["CCO", "C[C@@H](O)F", "F/C=C\\F", "c1cc[nH]c1", "C%12CC%12", "C1CC1.C", "[13CH3:7]N"]
)
def test_what_keeps_the_grammar_has_no_mistake(smiles: str) -> None:
    assert first_mistake(smiles) is None


def test_atoms_are_found_in_brackets_and_out_of_them() -> None:
    assert atom_positions("CBr[NH2+](Cl)c") == (0, 1, 3, 10, 13)
