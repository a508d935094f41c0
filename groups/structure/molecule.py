"""A molecule as every calculation here takes it: one neutral molecule, drawn in one way."""

import re
from dataclasses import dataclass, field

from rdkit import Chem, rdBase
from rdkit.Chem import rdMolDescriptors

from groups.errors import UnreadableSmilesError
from groups.structure.drawing import in_one_drawing, without_annotations
from groups.structure.refusals import (
    MAXIMUM_HEAVY_ATOMS,
    refuse_text,
    refuse_too_large,
    refuse_unsupported,
)
from groups.structure.syntax import Mistake, atom_positions, first_mistake

_UNUSUAL = re.compile(r"[\[*.]")  # brackets, wildcards, several parts


@dataclass(frozen=True, slots=True)
class Molecule:
    """One neutral molecule.

    Attributes
    ----------
    canonical_smiles
        RDKit's canonical SMILES of the one drawing that stands for the molecule; stereo is kept.
        Two texts of one molecule give the same one.
    formula
        In Hill's order, carbon and hydrogen first.
    molar_mass_g_mol
        With the standard atomic weights of the elements, g/mol.
    name, cas
        The name an engineer uses and the CAS number, where they were looked up and are known.
    mol
        The heavy atoms in the order of `canonical_smiles`, so that an atom index of any answer
        counts the atoms of `canonical_smiles` from 0. Molecular hydrogen alone keeps its atoms.
    """

    canonical_smiles: str
    formula: str
    molar_mass_g_mol: float
    name: str | None
    cas: str | None
    mol: Chem.Mol = field(compare=False, repr=False)


def molecule_from_smiles(smiles: str) -> Molecule:
    """Read one neutral molecule from SMILES.

    Parameters
    ----------
    smiles
        At most 5,000 characters and 200 heavy atoms; space around it is ignored, and so are atom
        map numbers. Explicit hydrogen, kekulised rings, pentavalent or charge-separated nitro
        groups and the like may be written either way.

    Returns
    -------
    Molecule
        With `name` and `cas` left open; `groups.structure.identify.identified` fills them.

    Raises
    ------
    UnreadableSmilesError
        The text is not SMILES, or an atom has an impossible valence; `position` says where.
    UnsupportedStructureError
        One of its leaves: nothing or hydrogen alone, a salt, an ion, several molecules, a
        radical, a metal, a polymer, an isotope, or more than 200 heavy atoms.
    """
    text = smiles.strip()
    refuse_text(text)
    with rdBase.BlockLogs():
        mol = _parsed(text)
        if _UNUSUAL.search(text):  # nothing else can hold what has to be redrawn or refused
            mol = in_one_drawing(mol)
            refuse_unsupported(mol, text)
            mol = without_annotations(mol)
        return _described(mol)


def _parsed(text: str) -> Chem.Mol:
    if len(text) > MAXIMUM_HEAVY_ATOMS:  # sanitisation of a huge ring system takes too long
        unsanitised = Chem.MolFromSmiles(text, _parser_parameters(sanitize=False))
        if unsanitised is not None:
            refuse_too_large(unsanitised, text)
    mol = Chem.MolFromSmiles(text, _parser_parameters(sanitize=True))
    if mol is None:
        raise _unreadable(text)
    return mol


def _parser_parameters(*, sanitize: bool) -> Chem.SmilesParserParams:
    parameters = Chem.SmilesParserParams()  # its stubs type the flags as the class itself
    parameters.sanitize = sanitize  # type: ignore[assignment]
    parameters.removeHs = False  # type: ignore[assignment]
    parameters.allowCXSMILES = False  # type: ignore[assignment]
    parameters.parseName = False  # type: ignore[assignment]
    return parameters


def _described(mol: Chem.Mol) -> Molecule:
    canonical = Chem.MolToSmiles(mol)
    ordered = Chem.MolFromSmiles(canonical)  # also fixes the order in which masses are summed
    return Molecule(
        canonical_smiles=canonical,
        formula=rdMolDescriptors.CalcMolFormula(ordered, separateIsotopes=True),
        molar_mass_g_mol=rdMolDescriptors._CalcMolWt(ordered),
        name=None,
        cas=None,
        mol=ordered,
    )


def _unreadable(text: str) -> UnreadableSmilesError:
    mistake = first_mistake(text) or _chemical_mistake(text)
    return UnreadableSmilesError(
        f"The SMILES '{_shortened(text)}' cannot be read: {mistake.message}.",
        smiles=text,
        position=mistake.position,
    )


def _chemical_mistake(text: str) -> Mistake:
    """The first atom whose valence or aromaticity cannot be, found on the unsanitised molecule."""
    mol = Chem.MolFromSmiles(text, _parser_parameters(sanitize=False))
    if mol is None:
        return Mistake(None, "its parser takes the text for no molecule, and gives no place")
    problems = Chem.DetectChemistryProblems(mol)
    positions = atom_positions(text)
    for problem in problems:
        if problem.GetType() in {"AtomValenceException", "AtomKekulizeException"}:
            index = problem.GetAtomIdx()
            return Mistake(
                positions[index], _atom_problem(mol, index, problem.GetType(), positions)
            )
        if problem.GetType() == "KekulizeException":
            atoms = sorted(problem.GetAtomIndices())
            return Mistake(positions[atoms[0]], _ring_problem(mol, atoms))
    return Mistake(None, "its atoms and bonds make no valid structure")


def _atom_problem(mol: Chem.Mol, index: int, kind: str, positions: tuple[int, ...]) -> str:
    atom = mol.GetAtomWithIdx(index)
    place = f"{atom.GetSymbol()} at position {positions[index]} (atom {index})"
    if kind == "AtomKekulizeException":
        return f"{place} is written as aromatic but stands in no ring"
    bonds = sum(round(bond.GetBondTypeAsDouble()) for bond in atom.GetBonds())
    bonds += atom.GetNumExplicitHs()
    cure = "; with four bonds it is written [N+]" if (atom.GetSymbol(), bonds) == ("N", 4) else ""
    count = "1 bond" if bonds == 1 else f"{bonds} bonds"
    return f"{place} has {count}, more than {atom.GetSymbol()} can form{cure}"


def _ring_problem(mol: Chem.Mol, atoms: list[int]) -> str:
    names = ", ".join(f"{mol.GetAtomWithIdx(index).GetSymbol()}{index}" for index in atoms)
    cure = ""
    if any(mol.GetAtomWithIdx(index).GetSymbol() == "N" for index in atoms):
        cure = "; a ring nitrogen that carries hydrogen is written [nH]"
    return f"no single and double bonds fit the aromatic atoms {names}{cure}"


def _shortened(text: str, length: int = 60) -> str:
    return text if len(text) <= length else text[: length - 3] + "..."
