"""What to call a molecule in a note."""

from groups.structure.molecule import Molecule


def label(molecule: Molecule) -> str:
    """The name where it is known; otherwise the SMILES.

    Parameters
    ----------
    molecule : Molecule

    Returns
    -------
    str
    """
    from groups.structure.identify import name_and_cas  # the list loads only when it is needed

    known = molecule.name or name_and_cas(molecule.canonical_smiles)[0]
    return known or molecule.canonical_smiles
