"""What the reasons ask of a molecule, found once and remembered."""

from dataclasses import dataclass
from functools import lru_cache

from groups.structure.functional import (
    FunctionalGroup,
    associates_in_vapour,
    is_hydrophobe,
    is_polyol,
    longest_chain,
    neighbouring_polar_groups,
    polar_groups,
)
from groups.structure.molecule import Molecule

_CARBON = 6


@dataclass(frozen=True, slots=True)
class MoleculeFacts:
    """Structural facts that bear on how far a group method can be trusted."""

    polar_groups: tuple[FunctionalGroup, ...]
    has_neighbouring_polar_groups: bool
    is_polyol: bool
    is_hydrophobe: bool
    associates_in_vapour: bool
    longest_chain: int


@lru_cache(maxsize=50_000)
def molecule_facts(molecule: Molecule) -> MoleculeFacts:
    """The structural facts of a molecule.

    Parameters
    ----------
    molecule : Molecule

    Returns
    -------
    MoleculeFacts

    Source
    ------
    `groups.structure.functional`.
    """
    mol = molecule.mol
    # Groups are parts of an organic molecule: oxygen or sulfur dioxide has none to set apart.
    organic = any(atom.GetAtomicNum() == _CARBON for atom in mol.GetAtoms())
    return MoleculeFacts(
        polar_groups(mol) if organic else (),
        organic and bool(neighbouring_polar_groups(mol)),
        is_polyol(mol),
        is_hydrophobe(mol),
        associates_in_vapour(mol),
        longest_chain(mol),
    )
