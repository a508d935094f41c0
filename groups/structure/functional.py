"""Functional groups in a chemist's words, and the few questions that the confidence rules ask."""

import csv
from collections.abc import Iterable
from dataclasses import dataclass
from functools import cache
from importlib.resources import files

from rdkit import Chem

_CARBON, _NITROGEN, _OXYGEN, _FLUORINE = 6, 7, 8, 9
_DONORS = frozenset({_NITROGEN, _OXYGEN, _FLUORINE})
_BETWEEN = 2  # carbon atoms between two polar groups that still feel each other
_GREASY_ALONE = 4
_GREASY_PER_POLAR_GROUP = 6


@dataclass(frozen=True, slots=True)
class FunctionalGroup:
    """One occurrence of a functional group; `atoms` index the heavy atoms of the molecule.

    It is a hydrogen-bond donor where nitrogen, oxygen or fluorine in it carries hydrogen.
    """

    name: str
    atoms: tuple[int, ...]
    polar: bool
    hydrogen_bond_donor: bool


@dataclass(frozen=True, slots=True)
class _Definition:
    name: str
    pattern: Chem.Mol
    polar: bool
    place_told: bool


def functional_groups(mol: Chem.Mol) -> tuple[FunctionalGroup, ...]:
    """Every functional group of a molecule, the more specific name first.

    Parameters
    ----------
    mol
        Heavy atoms, as in `Molecule.mol`.

    Returns
    -------
    tuple of FunctionalGroup
        No two share an atom; plain alkyl and arene carbon belongs to none.

    Source
    ------
    functional_groups.csv; see functional_groups.toml.
    """
    claimed: set[int] = set()
    found: list[FunctionalGroup] = []
    for definition in _definitions():
        for atoms in mol.GetSubstructMatches(definition.pattern, uniquify=True):
            if claimed.isdisjoint(atoms):
                claimed.update(atoms)
                found.append(
                    FunctionalGroup(
                        definition.name,
                        tuple(sorted(atoms)),
                        definition.polar,
                        _donates(mol, atoms),
                    )
                )
    return tuple(found)


def described(mol: Chem.Mol, group: FunctionalGroup) -> str:
    """A group together with where it stands, such as "nitrile attached to an aromatic ring".

    Parameters
    ----------
    mol
        The molecule.
    group
        One of its `functional_groups`.

    Returns
    -------
    str
        Without an article.

    Source
    ------
    None: wording of this project.
    """
    own = [mol.GetAtomWithIdx(index) for index in group.atoms]
    outside = [
        neighbour
        for atom in own
        for neighbour in atom.GetNeighbors()
        if neighbour.GetIdx() not in group.atoms
    ]
    if group.name in _names_that_tell_the_place():
        return group.name
    if any(neighbour.GetIsAromatic() for neighbour in outside):
        return f"{group.name} attached to an aromatic ring"
    if any(atom.IsInRing() for atom in own):
        return f"{group.name} in a ring"
    if any(neighbour.IsInRing() for neighbour in outside):
        return f"{group.name} attached to a ring"
    return group.name


def polar_groups(mol: Chem.Mol) -> tuple[FunctionalGroup, ...]:
    """The functional groups that accept or donate hydrogen bonds.

    Parameters
    ----------
    mol
        Heavy atoms, as in `Molecule.mol`.

    Returns
    -------
    tuple of FunctionalGroup
        Those marked polar in functional_groups.csv.

    Source
    ------
    functional_groups.csv; see functional_groups.toml.
    """
    return tuple(group for group in functional_groups(mol) if group.polar)


def neighbouring_polar_groups(
    mol: Chem.Mol,
) -> tuple[tuple[FunctionalGroup, FunctionalGroup], ...]:
    """Pairs of polar groups with at most two atoms between them.

    Group contribution takes each group as it is when alone; so near to each other they bind inside
    the molecule and change each other's strength.

    Parameters
    ----------
    mol
        Heavy atoms, as in `Molecule.mol`.

    Returns
    -------
    tuple of pairs of FunctionalGroup
        Each pair once.

    Source
    ------
    Common practice, no source, for the limit of two atoms.
    """
    polar = polar_groups(mol)
    if len(polar) < 2:
        return ()
    distance = Chem.GetDistanceMatrix(mol)
    return tuple(
        (first, second)
        for place, first in enumerate(polar)
        for second in polar[place + 1 :]
        if min(distance[i, j] for i in first.atoms for j in second.atoms) <= _BETWEEN + 1
    )


def longest_chain(mol: Chem.Mol) -> int:
    """The number of carbon atoms of the longest open chain.

    Parameters
    ----------
    mol
        Heavy atoms, as in `Molecule.mol`.

    Returns
    -------
    int
        Carbon outside rings only, not interrupted by another element; 0 where there is none.

    Source
    ------
    None: a count.
    """
    chain = {
        atom.GetIdx(): [
            other.GetIdx()
            for other in atom.GetNeighbors()
            if other.GetAtomicNum() == _CARBON and not other.IsInRing()
        ]
        for atom in mol.GetAtoms()
        if atom.GetAtomicNum() == _CARBON and not atom.IsInRing()
    }
    longest = 0
    left = set(chain)
    while left:
        reached = _walk(chain, next(iter(left)))
        left -= reached.keys()
        end = max(reached, key=reached.__getitem__)
        longest = max(longest, 1 + max(_walk(chain, end).values()))
    return longest


def is_carboxylic_acid(mol: Chem.Mol) -> bool:
    """Whether the molecule has a carboxylic acid group.

    Parameters
    ----------
    mol
        Heavy atoms, as in `Molecule.mol`.

    Returns
    -------
    bool

    Source
    ------
    functional_groups.csv; see functional_groups.toml.
    """
    return _has(functional_groups(mol), {"carboxylic acid"})


def associates_in_vapour(mol: Chem.Mol) -> bool:
    """Whether the molecule clusters in the vapour at low pressure, far from an ideal gas.

    Parameters
    ----------
    mol
        Heavy atoms, as in `Molecule.mol`.

    Returns
    -------
    bool
        True for carboxylic acids (dimers) and for hydrogen fluoride (hexamers).

    Source
    ------
    J. M. Prausnitz, R. N. Lichtenthaler, E. G. de Azevedo, Molecular Thermodynamics of Fluid-Phase
    Equilibria, 3rd ed. (1999), section 5.8 (section from memory).
    """
    fluoride = mol.GetNumAtoms() == 1 and mol.GetAtomWithIdx(0).GetAtomicNum() == _FLUORINE
    return fluoride or is_carboxylic_acid(mol)


def is_polyol(mol: Chem.Mol) -> bool:
    """Whether the molecule has two or more alcohol groups.

    Parameters
    ----------
    mol
        Heavy atoms, as in `Molecule.mol`.

    Returns
    -------
    bool

    Source
    ------
    functional_groups.csv; see functional_groups.toml.
    """
    names = [group.name for group in functional_groups(mol)]
    return sum(name.endswith(" alcohol") for name in names) >= 2


def donates_hydrogen_bonds(mol: Chem.Mol) -> bool:
    """Whether a functional group of the molecule donates hydrogen bonds.

    Parameters
    ----------
    mol
        Heavy atoms, as in `Molecule.mol`.

    Returns
    -------
    bool
        Only where it does carry hydrogen on nitrogen, oxygen or fluorine.

    Source
    ------
    functional_groups.csv; see functional_groups.toml.
    """
    return any(group.hydrogen_bond_donor for group in functional_groups(mol))


def is_hydrophobe(mol: Chem.Mol) -> bool:
    """Whether water dissolves the molecule only in traces.

    Parameters
    ----------
    mol
        Heavy atoms, as in `Molecule.mol`.

    Returns
    -------
    bool
        Four or more heavy atoms other than nitrogen and oxygen where there is no polar group, else
        six or more for each polar group.

    Source
    ------
    Common practice, no source.
    """
    greasy = sum(atom.GetAtomicNum() not in (_NITROGEN, _OXYGEN) for atom in mol.GetAtoms())
    n_polar = len(polar_groups(mol))
    return greasy >= (_GREASY_PER_POLAR_GROUP * n_polar if n_polar else _GREASY_ALONE)


def _has(groups: Iterable[FunctionalGroup], names: set[str]) -> bool:
    return any(group.name in names for group in groups)


def _donates(mol: Chem.Mol, atoms: Iterable[int]) -> bool:
    carriers = (mol.GetAtomWithIdx(index) for index in atoms)
    return any(atom.GetAtomicNum() in _DONORS and atom.GetTotalNumHs() for atom in carriers)


@cache
def _names_that_tell_the_place() -> frozenset[str]:
    return frozenset(definition.name for definition in _definitions() if definition.place_told)


def _walk(chain: dict[int, list[int]], start: int) -> dict[int, int]:
    """Bonds from one atom to each that is reached from it; the chains have no rings."""
    distance = {start: 0}
    front = [start]
    for atom in front:  # grows while it is walked
        for neighbour in chain[atom]:
            if neighbour not in distance:
                distance[neighbour] = distance[atom] + 1
                front.append(neighbour)
    return distance


@cache
def _definitions() -> tuple[_Definition, ...]:
    text = (files("groups.structure") / "functional_groups.csv").read_text(encoding="utf-8")
    return tuple(
        _Definition(
            row["name"],
            Chem.MolFromSmarts(row["smarts"]),
            row["polar"] == "true",
            row["place_told"] == "true",
        )
        for row in csv.DictReader(text.splitlines())
    )
