"""The few facts about a molecule that the width of an interval depends on."""

from dataclasses import dataclass
from functools import lru_cache

from groups.structure.functional import is_polyol, neighbouring_polar_groups, polar_groups
from groups.structure.molecule import Molecule

WATER = "O"


@dataclass(frozen=True, slots=True)
class Traits:
    """Size and polarity of one molecule; counts of heavy atoms and of functional groups."""

    heavy_atoms: int
    polar_groups: int
    donors: int
    crowded: bool
    polyol: bool
    water: bool


@lru_cache(maxsize=20_000)
def traits(molecule: Molecule) -> Traits:
    """The traits of a molecule.

    Parameters
    ----------
    molecule : Molecule

    Returns
    -------
    Traits
        `crowded` where two polar groups stand next to each other.
    """
    polar = polar_groups(molecule.mol)
    return Traits(
        heavy_atoms=max(molecule.mol.GetNumHeavyAtoms(), 1),  # hydrogen, too, has a size
        polar_groups=len(polar),
        donors=sum(group.hydrogen_bond_donor for group in polar),
        crowded=bool(neighbouring_polar_groups(molecule.mol)),
        polyol=is_polyol(molecule.mol),
        water=molecule.canonical_smiles == WATER,
    )
