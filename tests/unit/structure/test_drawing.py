"""The same molecule drawn with and without charges."""

import pytest

from groups.structure import molecule_from_smiles


@pytest.mark.parametrize(
    "drawings",
    [
        # Pairs of drawings of one compound: IUPAC, Graphical representation standards, Pure Appl.
        # Chem. 80 (2008) 277, and textbook resonance forms.
        ("C[N+](=O)[O-]", "CN(=O)=O", "[O-][N+](C)=O"),
        ("CO[N+](=O)[O-]", "CON(=O)=O"),
        ("CS(C)=O", "C[S+](C)[O-]", "[O-][S+](C)C"),
        ("CS(C)(=O)=O", "C[S+2](C)([O-])[O-]", "CS(C)(=O)=O", "C[S+](C)([O-])=O"),
        ("CP(C)(C)=O", "C[P+](C)(C)[O-]"),
        ("CN=[N+]=[N-]", "CN=N#N", "C[N-][N+]#N"),
        ("C=[N+]=[N-]", "C=N#N", "[CH2-][N+]#N"),
        ("[O-][n+]1ccccc1", "O=n1ccccc1"),
        ("C[N+](C)(C)[O-]", "CN(C)(C)=O"),
        ("C[N+]#[C-]", "[C]=NC"),
        ("[C-]#[O+]", "[C]=O"),
        ("O=S=O", "[O-][S+]=O"),
        ("[N-]=[N+]=O", "N#[N+][O-]"),
        ("O=O", "[O][O]"),
        ("[H][H]", "[HH]"),
        ("CC=N", "[H]/N=C/C", "[H]\\N=C/C"),
    ],
)
def test_all_drawings_give_one_molecule(drawings: tuple[str, ...]) -> None:
    assert len({molecule_from_smiles(text) for text in drawings}) == 1


def test_redrawing_keeps_the_chirality_of_a_neighbour() -> None:
    one = molecule_from_smiles("C[C@H](F)C[S+](C)[O-]")
    other = molecule_from_smiles("C[C@@H](F)C[S+](C)[O-]")
    assert one != other
    assert "@" in one.canonical_smiles
