"""The key under which the open compilations hold a molecule."""

from groups.structure.molecule import Molecule


def registry_number(molecule: Molecule) -> str | None:
    """The CAS number of a molecule, looked up by its structure where it does not carry one.

    Parameters
    ----------
    molecule : Molecule

    Returns
    -------
    str or None
        None where the offline list does not hold the structure.
    """
    if molecule.cas is not None:
        return molecule.cas
    from groups.structure.identify import name_and_cas  # the list loads only when it is needed

    return name_and_cas(molecule.canonical_smiles)[1]
