"""From text to molecule to functional groups, and back to a picture."""

from groups.structure.molecule import Molecule, molecule_from_smiles

__all__ = ["Molecule", "molecule_from_smiles"]
