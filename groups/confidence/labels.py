"""What to call a molecule in a message."""

from functools import lru_cache

from groups.structure.identify import name_and_cas
from groups.structure.molecule import Molecule


def label(molecule: Molecule) -> str:
    """The name an engineer uses, where it is known; otherwise the SMILES.

    Parameters
    ----------
    molecule : Molecule

    Returns
    -------
    str
    """
    return molecule.name or _known_name(molecule.canonical_smiles) or molecule.canonical_smiles


@lru_cache(maxsize=20_000)
def _known_name(canonical_smiles: str) -> str | None:
    return name_and_cas(canonical_smiles)[0]
