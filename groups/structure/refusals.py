"""What group contribution does not describe, each refused with its own reason and cure."""

import re
from collections.abc import Iterable, Sequence

from rdkit import Chem

from groups.errors import (
    EmptyMoleculeError,
    IonError,
    IsotopeError,
    MetalError,
    MoleculeTooLargeError,
    PolymerError,
    RadicalError,
    SaltError,
    SeveralMoleculesError,
    UnreadableSmilesError,
)
from groups.structure.syntax import atom_positions

MAXIMUM_HEAVY_ATOMS = 200
MAXIMUM_CHARACTERS = 5_000

_NOT_SMILES = re.compile(r"[^A-Za-z0-9@+\-\[\]()=#$:/\\.%*]")
_WHY_NOT = {
    " ": "there is a space; give the SMILES alone, without a name behind it",
    "|": "'|' starts an extension of SMILES; give plain SMILES",
    ">": "'>' writes a reaction or a dative bond; give one molecule with ordinary bonds",
    "<": "'<' writes a dative bond; give ordinary bonds",
    "~": "'~' is a bond of unknown order; give ordinary bonds",
}
# Non-metals and half-metals. One that no table has a group for is told by the assignment.
_NON_METALS = frozenset(
    {1, 2, 5, 6, 7, 8, 9, 10, 14, 15, 16, 17, 18, 32, 33, 34, 35, 36, 52, 53, 54}
)
# Published groups of the PSRK table (Horstmann et al., Fluid Phase Equilib. 227 (2005) 157) that
# the rules on hydrogen, isotopes and radicals would turn away.
_PUBLISHED_GASES = frozenset({"[H][H]", "[2H][2H]", "[N]=O", "[O]N=O"})


def refuse_text(text: str) -> None:
    """Refuse a text that is no SMILES on its face.

    Parameters
    ----------
    text
        The SMILES, without space around it.

    Raises
    ------
    EmptyMoleculeError
        The text is empty.
    MoleculeTooLargeError
        It has more than 5,000 characters.
    UnreadableSmilesError
        It has a character that plain SMILES does not use.

    Source
    ------
    OpenSMILES specification 1.0, section 2 (grammar).
    """
    if not text:
        raise EmptyMoleculeError(
            "The SMILES is empty.", cure="Give the SMILES of one molecule, for instance CCO."
        )
    if len(text) > MAXIMUM_CHARACTERS:
        raise MoleculeTooLargeError(
            f"The SMILES has {len(text):,} characters; at most {MAXIMUM_CHARACTERS:,} are read.",
            smiles=text[:60] + "...",
            cure="Give a smaller molecule, without explicit hydrogen.",
        )
    stranger = _NOT_SMILES.search(text)
    if stranger is not None:
        character = " " if stranger.group().isspace() else stranger.group()
        why = _WHY_NOT.get(character, f"{character!r} means nothing in SMILES")
        raise UnreadableSmilesError(
            f"The SMILES '{text[:60]}' cannot be read at position {stranger.start()}: {why}.",
            smiles=text,
            position=stranger.start(),
        )


def refuse_too_large(mol: Chem.Mol, text: str) -> None:
    """Refuse a molecule of more than 200 heavy atoms.

    Parameters
    ----------
    mol
        The molecule, sanitised or not.
    text
        The SMILES it was read from.

    Raises
    ------
    MoleculeTooLargeError
        It has more heavy atoms than that.

    Source
    ------
    None: a convention of this project.
    """
    n_heavy = mol.GetNumHeavyAtoms()
    if n_heavy > MAXIMUM_HEAVY_ATOMS:
        raise MoleculeTooLargeError(
            f"The molecule has {n_heavy} heavy atoms; at most {MAXIMUM_HEAVY_ATOMS} are taken.",
            smiles=text,
            cure="Group contribution was fitted to small molecules; give a smaller one.",
        )


def refuse_unsupported(mol: Chem.Mol, text: str) -> None:
    """Refuse what is valid SMILES but not one neutral molecule of ordinary atoms.

    Parameters
    ----------
    mol
        The sanitised molecule in its one drawing, atoms in the order of the text.
    text
        The SMILES it was read from.

    Raises
    ------
    UnsupportedStructureError
        The leaf that fits first, in this order: polymer, isotope, hydrogen alone, salt, ion or
        several molecules among the parts, ion, metal, radical.

    Source
    ------
    None: a convention of this project.
    """
    if mol.GetNumAtoms() <= 3 and Chem.MolToSmiles(mol) in _PUBLISHED_GASES:
        return
    _refuse_wildcards(mol, text)
    _refuse_isotopes(mol, text)
    _refuse_hydrogen_alone(mol, text)
    _refuse_parts(mol, text)
    _refuse_charges(mol, text)
    _refuse_metals(mol, text)
    _refuse_radicals(mol, text)


def _refuse_wildcards(mol: Chem.Mol, text: str) -> None:
    wild = [atom for atom in mol.GetAtoms() if atom.GetAtomicNum() == 0]
    if wild:
        raise PolymerError(
            f"The structure has an open attachment point, {_places(wild, text)}: "
            "a repeat unit or a substituent, not a whole molecule.",
            smiles=text,
            atoms=_indices(wild),
            cure="Close the ends, for instance give an oligomer with hydrogen at both ends.",
        )


def _refuse_isotopes(mol: Chem.Mol, text: str) -> None:
    marked = [atom for atom in mol.GetAtoms() if atom.GetIsotope()]
    if marked:
        raise IsotopeError(
            f"The structure states an isotope: {_places(marked, text, isotopes=True)}. "
            "Group parameters are those of natural elements.",
            smiles=text,
            atoms=_indices(marked),
            cure="Leave the mass numbers out; deuterium is then taken as hydrogen.",
        )


def _refuse_hydrogen_alone(mol: Chem.Mol, text: str) -> None:
    if mol.GetNumHeavyAtoms() == 0:
        raise EmptyMoleculeError(
            "The structure is hydrogen alone, an atom or an ion, not a molecule.",
            smiles=text,
            atoms=range(mol.GetNumAtoms()),
            cure="Molecular hydrogen is [H][H]; give a molecule.",
        )


def _refuse_parts(mol: Chem.Mol, text: str) -> None:
    parts = Chem.GetMolFrags(mol)
    if len(parts) == 1:
        return
    charges = [sum(mol.GetAtomWithIdx(index).GetFormalCharge() for index in part) for part in parts]
    charged = [atom for atom in mol.GetAtoms() if atom.GetFormalCharge()]
    if min(charges) < 0 < max(charges):
        raise SaltError(
            f"The structure is a salt: parts with charges {_signed(charges)}.",
            smiles=text,
            atoms=_indices(charged),
            cure="Electrolytes are outside group contribution; give the neutral acid or base.",
        )
    if any(charges):
        raise IonError(
            f"One of {len(parts)} parts is an ion: charges {_signed(charges)}.",
            smiles=text,
            atoms=_indices(charged),
            cure="Give one neutral molecule.",
        )
    raise SeveralMoleculesError(
        f"The structure holds {len(parts)} molecules, parted by '.'.",
        smiles=text,
        cure="Give each molecule as a component of its own; a hydrate without its water.",
    )


def _refuse_metals(mol: Chem.Mol, text: str) -> None:
    metals = [atom for atom in mol.GetAtoms() if atom.GetAtomicNum() not in _NON_METALS]
    if metals:
        raise MetalError(
            f"The molecule holds a metal that no table describes: {_places(metals, text)}.",
            smiles=text,
            atoms=_indices(metals),
            cure="Give a molecule without a metal.",
        )


def _refuse_charges(mol: Chem.Mol, text: str) -> None:
    charged = [atom for atom in mol.GetAtoms() if atom.GetFormalCharge()]
    total = sum(atom.GetFormalCharge() for atom in charged)
    if total:
        raise IonError(
            f"The molecule is an ion of charge {total:+d}: {_places(charged, text)}.",
            smiles=text,
            atoms=_indices(charged),
            cure="Add or take away hydrogen ions until it is neutral.",
        )
    alone = _uncompensated(charged)
    if alone:
        raise IonError(
            f"The molecule is an inner salt: {_places(alone, text)} without the opposite charge "
            "on a neighbouring atom.",
            smiles=text,
            atoms=_indices(alone),
            cure="Draw the neutral form, for instance NCC(=O)O for glycine, if there is one.",
        )


def _refuse_radicals(mol: Chem.Mol, text: str) -> None:
    radicals = [atom for atom in mol.GetAtoms() if atom.GetNumRadicalElectrons()]
    if radicals:
        raise RadicalError(
            f"The molecule has an unpaired electron or a free valence: {_places(radicals, text)}.",
            smiles=text,
            atoms=_indices(radicals),
            cure="An atom in brackets carries only the hydrogen written with it: [CH4], not [C].",
        )


def _uncompensated(charged: Sequence[Chem.Atom]) -> list[Chem.Atom]:
    """Charged atoms whose bonded run of charged atoms does not come to zero.

    Nitro, azide, diazo, N-oxide, isocyanide and ylide drawings come to zero; the ammonium and the
    carboxylate of an amino acid do not.
    """
    left = {atom.GetIdx(): atom for atom in charged}
    alone: list[Chem.Atom] = []
    while left:
        run = [left.pop(next(iter(left)))]
        for atom in run:  # grows while it is walked
            neighbours = [other.GetIdx() for other in atom.GetNeighbors()]
            run.extend(left.pop(index) for index in neighbours if index in left)
        if sum(atom.GetFormalCharge() for atom in run):
            alone.extend(run)
    return sorted(alone, key=lambda atom: int(atom.GetIdx()))


def _places(atoms: Iterable[Chem.Atom], text: str, *, isotopes: bool = False) -> str:
    positions = atom_positions(text)
    words = []
    for atom in atoms:
        mass = str(atom.GetIsotope()) if isotopes else ""
        charge = _charge_mark(atom.GetFormalCharge())
        words.append(f"{mass}{atom.GetSymbol()}{charge} at position {positions[atom.GetIdx()]}")
    return ", ".join(words[:5]) + (f" and {len(words) - 5} more" if len(words) > 5 else "")


def _indices(atoms: Iterable[Chem.Atom]) -> tuple[int, ...]:
    return tuple(int(atom.GetIdx()) for atom in atoms)


def _signed(charges: Iterable[int]) -> str:
    return ", ".join(f"{charge:+d}" if charge else "0" for charge in charges)


def _charge_mark(charge: int) -> str:
    """As a chemist writes it: +, 2+, -."""
    if charge == 0:
        return ""
    return ("" if abs(charge) == 1 else str(abs(charge))) + ("+" if charge > 0 else "-")
