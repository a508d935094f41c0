"""Names and CAS numbers to molecules and back, without a network.

The identifiers come with the `chemicals` package (MIT): some 5,000 well-known molecules that load
in a fraction of a second, and some 76,000 in all that load once, in about two seconds, when the
first list does not hold what is asked for.
"""

import difflib
import re
from collections.abc import Iterator
from dataclasses import replace
from functools import lru_cache
from threading import Lock
from typing import Protocol

from rdkit import Chem, rdBase
from rdkit.Chem import rdinchi

from groups.errors import StructureError, UnknownNameError, UnsupportedStructureError
from groups.structure.common_names import (
    ambiguous_names,
    common_name_by_smiles,
    normal_form,
    readable_name,
    smiles_by_common_name,
)
from groups.structure.molecule import Molecule, molecule_from_smiles

_CAS_FORM = re.compile(r"(\d{2,7})-(\d{2})-(\d)")
_MAXIMUM_NAME_LENGTH = 300
_lock = Lock()  # the database grows while it is read for the first time


class _Entry(Protocol):
    """One molecule of the identifier database."""

    smiles: str
    common_name: str
    iupac_name: str

    @property
    def CASs(self) -> str: ...


def molecule_from_name(name: str) -> Molecule:
    """The molecule of a common, systematic or trade name, or of a usual abbreviation.

    Parameters
    ----------
    name
        Case, doubled spaces, kinds of hyphen and Greek letters do not matter.

    Returns
    -------
    Molecule
        With `name` and `cas` filled. `name` is the one an engineer uses, whichever was asked for.

    Raises
    ------
    UnknownNameError
        No molecule is known by it, with the names closest to it; or it stands for several
        molecules or a mixture, with what it may mean.
    UnsupportedStructureError
        It names a salt, a metal or the like; one of the leaves, as for SMILES.

    Source
    ------
    The identifier database of `chemicals` (C. Bell and others, MIT), which draws on PubChem.
    """
    wanted = normal_form(name)
    if not wanted or len(wanted) > _MAXIMUM_NAME_LENGTH:
        raise UnknownNameError(
            f"A name must have 1 to {_MAXIMUM_NAME_LENGTH} characters. Got {len(wanted)} instead."
        )
    if _CAS_FORM.fullmatch(wanted):
        return molecule_from_cas(wanted)
    own = smiles_by_common_name().get(wanted)
    if own is not None:
        return identified(molecule_from_smiles(own))
    _refuse_ambiguous(name, wanted)
    for spelling in _spellings(wanted):
        entry = _by_name(spelling, everything=False)
        if entry is not None:
            return _molecule_of(entry, name)
    _shown_names()  # of the first list, before the rest of the database comes in
    for spelling in _spellings(wanted):
        entry = _by_name(spelling, everything=True)
        if entry is not None:
            return _molecule_of(entry, name)
    raise _unknown(name, wanted)


def molecule_from_cas(cas: str) -> Molecule:
    """The molecule of a CAS registry number.

    Parameters
    ----------
    cas
        Such as 64-17-5.

    Returns
    -------
    Molecule
        With `name` and `cas` filled; an outdated number gives the present one.

    Raises
    ------
    UnknownNameError
        It has not the form of a CAS number, its check digit is wrong, or it is not in the list.
    UnsupportedStructureError
        It belongs to a salt, a metal or the like; one of the leaves, as for SMILES.

    Source
    ------
    Check digit: CAS, Check Digit Verification of CAS Registry Numbers. Structures: the identifier
    database of `chemicals` (C. Bell and others, MIT), which draws on PubChem.
    """
    number = normal_form(cas).replace(" ", "")
    parts = _CAS_FORM.fullmatch(number)
    if parts is None:
        raise UnknownNameError(
            f"'{cas[:40]}' has not the form of a CAS number, for instance 64-17-5.",
            cure="Write 2 to 7 digits, 2 digits and 1 check digit, parted by hyphens.",
        )
    expected = check_digit(parts[1] + parts[2])
    if int(parts[3]) != expected:
        raise UnknownNameError(
            f"The check digit of the CAS number {number} is wrong: it must be {expected}.",
            cure="Look for a digit mistyped or two digits exchanged.",
        )
    entry = _by_cas(number)
    if entry is None:
        raise UnknownNameError(f"The CAS number {number} is valid but not in the offline list.")
    return _molecule_of(entry, number)


def name_and_cas(canonical_smiles: str) -> tuple[str | None, str | None]:
    """The name an engineer uses for a structure, and its CAS number.

    Parameters
    ----------
    canonical_smiles
        As in `Molecule.canonical_smiles`. The exact structure is looked up first, then the one
        without stereo marks.

    Returns
    -------
    tuple of str or None
        Name and CAS number, each None where the list has none. Where it holds a molecule without
        stereo marks only under the number of one isomer, that number is given.

    Raises
    ------
    StructureError
        The text is not a supported SMILES.

    Source
    ------
    The identifier database of `chemicals` (C. Bell and others, MIT), through the InChIKey.
    """
    return _remembered(molecule_from_smiles(canonical_smiles).canonical_smiles)


def identified(molecule: Molecule) -> Molecule:
    """The same molecule with `name` and `cas` filled where the offline list knows them.

    Parameters
    ----------
    molecule
        From `molecule_from_smiles`.

    Returns
    -------
    Molecule
        A copy.

    Source
    ------
    See `name_and_cas`.
    """
    name, cas = _remembered(molecule.canonical_smiles)
    return replace(molecule, name=name, cas=cas)


def load_everything() -> None:
    """Load the whole identifier database now, so that no later look-up has to wait for it.

    Source
    ------
    The identifier database of `chemicals` (C. Bell and others, MIT).
    """
    from chemicals.identifiers import get_pubchem_db

    _shown_names()
    with _lock:
        get_pubchem_db().finish_loading()


def check_digit(digits: str) -> int:
    """The check digit of a CAS number.

    Parameters
    ----------
    digits
        The number without its check digit and hyphens.

    Returns
    -------
    int
        The sum of the digits, each times its place counted from the right, modulo 10.

    Source
    ------
    CAS, Check Digit Verification of CAS Registry Numbers.
    """
    return sum(place * int(digit) for place, digit in enumerate(reversed(digits), start=1)) % 10


def _refuse_ambiguous(name: str, wanted: str) -> None:
    meanings = ambiguous_names().get(wanted)
    if meanings is not None:
        raise UnknownNameError(
            f"'{name}' stands for no single molecule.",
            cure=f"Name the molecule meant, for instance {' or '.join(meanings)}.",
        )


def _spellings(wanted: str) -> Iterator[str]:
    """Ways in which the same name is written with and without spaces and hyphens."""
    spaced_as_hyphen = re.sub(r"(?<=\d) (?=\w)", "-", wanted)
    seen: set[str] = set()
    for spelling in (
        wanted,
        spaced_as_hyphen,
        wanted.replace(" ", ""),
        wanted.replace("-", ""),
        wanted.replace("-", "").replace(" ", ""),
        wanted.replace("-", " "),
    ):
        if spelling not in seen:
            seen.add(spelling)
            yield spelling


def _by_name(name: str, *, everything: bool) -> _Entry | None:
    from chemicals.identifiers import get_pubchem_db  # loads the first list

    with _lock:
        return get_pubchem_db().search_name(name, autoload=everything) or None


def _by_cas(number: str) -> _Entry | None:
    from chemicals.identifiers import get_pubchem_db

    with _lock:
        database = get_pubchem_db()
        for everything in (False, True):
            entry: _Entry | None = (
                database.search_CAS(number, autoload=everything)
                or database.search_name(number, autoload=everything)  # an outdated number
                or None
            )
            if entry is not None:
                return entry
    return None


def _by_inchi_key(mol: Chem.Mol) -> _Entry | None:
    from chemicals.identifiers import get_pubchem_db

    key = rdinchi.MolToInchiKey(mol)
    with _lock:
        return get_pubchem_db().search_InChI_key(key, autoload=True) or None


def _molecule_of(entry: _Entry, asked: str) -> Molecule:
    try:
        molecule = molecule_from_smiles(entry.smiles)
    except UnsupportedStructureError as error:
        raise type(error)(
            f"'{asked}' is {entry.smiles}. {error}",
            smiles=error.smiles,
            atoms=error.atoms,
            cure=error.cure,
        ) from error
    except StructureError as error:
        raise UnknownNameError(
            f"The offline list has no usable structure for '{asked}'.", smiles=entry.smiles
        ) from error
    found = identified(molecule)
    if found.cas is None:
        return replace(found, cas=entry.CASs, name=found.name or _readable_name(entry, molecule))
    return found


def _readable_name(entry: _Entry, molecule: Molecule) -> str:
    stereo = _has_stereo(molecule.canonical_smiles)
    return readable_name(entry.common_name, entry.iupac_name, stereo=stereo)


def _has_stereo(canonical_smiles: str) -> bool:
    return any(mark in canonical_smiles for mark in "@/\\")


@lru_cache(maxsize=20_000)
def _remembered(canonical_smiles: str) -> tuple[str | None, str | None]:
    molecule = molecule_from_smiles(canonical_smiles)
    with rdBase.BlockLogs():
        entry = _by_inchi_key(molecule.mol)
        if entry is None and _has_stereo(canonical_smiles):
            flat = Chem.Mol(molecule.mol)
            Chem.RemoveStereochemistry(flat)
            entry = _by_inchi_key(flat)
    own = common_name_by_smiles().get(canonical_smiles)
    if entry is None:
        return own, None
    return own or _readable_name(entry, molecule), entry.CASs


def _unknown(name: str, wanted: str) -> UnknownNameError:
    message = f"No molecule is known by the name '{name[:60]}'."
    if _reads_as_smiles(name):
        return UnknownNameError(message, cure="It reads as SMILES: give it as such, not as a name.")
    close = difflib.get_close_matches(wanted, _names_like(wanted), n=3, cutoff=0.75)
    cure = f"Did you mean {' or '.join(close)}? " if close else ""
    return UnknownNameError(message, cure=cure + UnknownNameError.cure)


def _reads_as_smiles(name: str) -> bool:
    try:
        molecule_from_smiles(name)
    except StructureError:
        return False
    return True


def _names_like(wanted: str) -> list[str]:
    """Shown names of about the length asked for; a comparison with all of them takes too long."""
    return [name for name in _shown_names() if abs(len(name) - len(wanted)) <= 3]


@lru_cache(maxsize=1)
def _shown_names() -> tuple[str, ...]:
    from chemicals.identifiers import get_pubchem_db

    with _lock:
        entries = list(get_pubchem_db().CAS_index.values())
    names = {entry.common_name.lower() for entry in entries} | set(smiles_by_common_name())
    return tuple(sorted(names))
