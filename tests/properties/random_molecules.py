"""Valid molecules made up at random, the same ones for the same seed."""

import random
from collections.abc import Iterator

from rdkit import Chem, rdBase

from groups.errors import StructureError
from groups.structure.molecule import Molecule, molecule_from_smiles

_ATOMS = ("C", "C", "C", "C", "O", "N", "S", "C(=O)", "C(=O)O", "C=C", "C#C", "C(=O)N", "S(=O)(=O)")
_ODD_ATOMS = ("[Si]", "P", "N=N", "C=N", "S(=O)", "OO", "SS", "P(=O)(O)", "B", "ON", "C(=C)")
_ENDS = ("", "C", "O", "N", "F", "Cl", "Br", "I", "C#N", "[N+](=O)[O-]", "C=O", "C(=O)O", "N=C=O")
_RINGS = (
    "c1ccc({})cc1",
    "c1cccc({})c1",
    "C1CCC({})CC1",
    "C1CC({})C1",
    "C1OC1{}",
    "C1COC({})O1",
    "C1OCC({})O1",
    "c1cc({})ccn1",
    "c1sc({})cc1",
    "c1oc({})cc1",
    "c1[nH]c({})cc1",
    "C1CC(=O)N({})C1",
    "C1OC(=O)C({})C1",
    "c1ccc2c(c1)CC({})CC2",
    "C1=CCC({})CC1",
    "O=c1ccc2c(o1)cc({})cc2",
    "C1CCC2(CC1)CC({})C2",
)


def random_molecules(number: int, seed: int) -> Iterator[Molecule]:
    """Yield so many molecules of one to some fifty heavy atoms, of all sorts."""
    rng = random.Random(seed)
    made = 0
    with rdBase.BlockLogs():
        while made < number:
            try:
                molecule = molecule_from_smiles(_chain(rng, rng.choice((1, 2, 2, 3))))
            except StructureError:  # atoms put together at random may ask for too many bonds
                continue
            made += 1
            yield molecule


def _chain(rng: random.Random, depth: int) -> str:
    pieces = []
    for _ in range(rng.randint(1, 5)):
        if depth and rng.random() < 0.25:
            pieces.append(_renumbered(rng.choice(_RINGS), depth).format(_chain(rng, depth - 1)))
            break
        piece = rng.choice(_ODD_ATOMS if rng.random() < 0.06 else _ATOMS)
        branch = f"({_chain(rng, depth - 1)})" if depth and rng.random() < 0.2 else ""
        pieces.append(piece + branch)
    else:
        pieces.append(rng.choice(_ENDS))
    return "".join(pieces) or "C"


def _renumbered(ring: str, depth: int) -> str:
    """Ring closures of their own for each depth, since an open ring encloses the next chain."""
    return ring.replace("2", f"%{depth}2").replace("1", f"%{depth}1").replace(f"%{depth}%", "%")


def rewritten(molecule: Molecule, rng: random.Random) -> str:
    """The same molecule as SMILES in another order, kekulised or with hydrogens written out."""
    mol = Chem.MolFromSmiles(molecule.canonical_smiles)
    way = rng.randrange(3)
    if way == 0:
        mol = Chem.AddHs(mol)
    order = list(range(mol.GetNumAtoms()))
    rng.shuffle(order)
    mol = Chem.RenumberAtoms(mol, order)
    if way == 1:
        Chem.Kekulize(mol, clearAromaticFlags=True)
    return str(Chem.MolToSmiles(mol, canonical=False, kekuleSmiles=way == 1))
