"""Splits a molecule into the groups of a method.

An assignment is an exact cover: each heavy atom, with its hydrogens, is in exactly one group. Of
all exact covers the one is taken that has

1. the fewest groups, since the tables intend the larger, more specific group before its parts;
2. among those, most often the group of the highest published precedence (column `precedence` of
   `patterns/<method>.csv`; for instance CH3CO before CH2CO, and CH3O before CH2O), then the next;
3. among those, the larger groups, and at last the lower group numbers.

Covers that differ only by step 3 are equally good; they are listed as alternatives.
"""

from collections.abc import Iterable
from dataclasses import dataclass
from functools import cache, lru_cache

from rdkit import Chem

from groups.parameters import table
from groups.structure.cover import Candidate, blocks, cheapest_cover
from groups.structure.functional import FunctionalGroup, functional_groups
from groups.structure.matching import Matcher, with_amides, with_published_aromaticity
from groups.structure.molecule import Molecule
from groups.structure.patterns import PatternSet, pattern_set

MOST_ALTERNATIVES = 16
_REMEMBERED = 20_000
_GroupCounts = tuple[tuple[int, int], ...]


@dataclass(frozen=True, slots=True)
class GroupCount:
    """How often one subgroup occurs, and where: one tuple of atom indices per occurrence."""

    number: int
    subgroup: str
    main_number: int
    main_group: str
    count: int
    atoms: tuple[tuple[int, ...], ...]


@dataclass(frozen=True, slots=True)
class Assignment:
    """The groups of one molecule by one method.

    Attributes
    ----------
    method
        The identifier asked for.
    complete
        Whether every atom is in a group.
    groups
        In the order of their numbers.
    unassigned_atoms
        Indices, in the order of the canonical SMILES, that no group covers.
    explanation
        In words, which functional group the table lacks; None when complete.
    alternatives
        Equally good covers, each as (subgroup number, count) pairs.
    """

    method: str
    complete: bool
    groups: tuple[GroupCount, ...]
    unassigned_atoms: tuple[int, ...]
    explanation: str | None
    alternatives: tuple[_GroupCounts, ...]

    @property
    def counts(self) -> dict[int, int]:
        """Subgroup number to count."""
        return {group.number: group.count for group in self.groups}


def assign(molecule: Molecule, method: str) -> Assignment:
    """Split a molecule into the groups of a method.

    Parameters
    ----------
    molecule
        As read by `molecule_from_smiles`; stereo is ignored.
    method
        An identifier of a published table. A completed table has the groups of the table it
        completes.

    Returns
    -------
    Assignment
        With `complete` false, and the atoms and reason, where the table lacks a group.

    Raises
    ------
    UnknownMethodError
        There is no such method.

    Source
    ------
    Precedence: the group tables and their examples, see `patterns/<method>.toml`.
    """
    return _remembered(_ByStructure(molecule.canonical_smiles, molecule.mol), method)


def assign_many(molecules: Iterable[Molecule], method: str) -> list[Assignment]:
    """Split many molecules, one after the other; time is linear in their number.

    Parameters
    ----------
    molecules
        As read by `molecule_from_smiles`.
    method
        As for `assign`.

    Returns
    -------
    list of Assignment
        In the order of the molecules.

    Raises
    ------
    UnknownMethodError
        There is no such method.

    Source
    ------
    As for `assign`.
    """
    return [assign(molecule, method) for molecule in molecules]


class _ByStructure:
    """A molecule that counts as equal to another of the same canonical SMILES."""

    __slots__ = ("mol", "smiles")

    def __init__(self, smiles: str, mol: Chem.Mol) -> None:
        self.smiles, self.mol = smiles, mol

    def __hash__(self) -> int:
        return hash(self.smiles)

    def __eq__(self, other: object) -> bool:
        return isinstance(other, _ByStructure) and self.smiles == other.smiles


@lru_cache(maxsize=_REMEMBERED)
def _remembered(structure: _ByStructure, method: str) -> Assignment:
    matcher = _matcher(method)
    mol = with_published_aromaticity(with_amides(structure.mol))
    chosen, alternatives, left = _covered(matcher, mol, shared=True)
    if left and matcher.shares_atoms:
        chosen, _, left = _covered(matcher, mol, shared=False)
        alternatives = ()
    return Assignment(
        method=method,
        complete=not left,
        groups=_grouped(chosen, matcher.patterns, method, mol.GetNumAtoms()),
        unassigned_atoms=left,
        explanation=_explained(structure, left, method) if left else None,
        alternatives=alternatives,
    )


@cache
def _matcher(method: str) -> Matcher:
    return Matcher(pattern_set(method))


def _covered(
    matcher: Matcher, mol: Chem.Mol, *, shared: bool
) -> tuple[list[Candidate], tuple[_GroupCounts, ...], tuple[int, ...]]:
    """The chosen candidates, the counts of equally good covers, and the atoms left out."""
    patterns = matcher.patterns
    candidates, left, size = matcher.candidates(mol, shared=shared)
    chosen: list[Candidate] = []
    ties: list[tuple[int, list[int]]] = []
    for block, inside in blocks(candidates):
        choices = cheapest_cover(inside, block, patterns.missing_cost).choices
        best, *others = sorted(choices, key=patterns.preference) if len(choices) > 1 else choices
        if others:
            ties.append((best, others))
        for index in choices[best]:
            chosen.append(inside[index])
            left ^= inside[index].bits
    atoms = tuple(i for i in range(size) if (left >> i | left >> i + size) & 1) if left else ()
    return chosen, _alternatives(chosen, ties, patterns), atoms


def _alternatives(
    chosen: list[Candidate], ties: list[tuple[int, list[int]]], patterns: PatternSet
) -> tuple[_GroupCounts, ...]:
    """All combinations of the ties of the blocks, without the one chosen."""
    if not ties:
        return ()
    own = sum(candidate.tally for candidate in chosen)
    totals = {own: None}
    for first, others in ties:
        for total in list(totals):
            for other in others:
                if len(totals) <= MOST_ALTERNATIVES:
                    totals[total - first + other] = None
    del totals[own]
    return tuple(sorted(patterns.counts(total) for total in totals))


def _grouped(
    chosen: list[Candidate], patterns: PatternSet, method: str, size: int
) -> tuple[GroupCount, ...]:
    places: dict[int, list[tuple[int, ...]]] = {}
    for candidate in chosen:
        bits = candidate.bits
        atoms = tuple(i for i in range(size) if (bits >> i | bits >> i + size) & 1)
        places.setdefault(patterns.patterns[candidate.pattern].number, []).append(atoms)
    names = _names(method)
    return tuple(
        GroupCount(number, *names[number], len(atoms), tuple(sorted(atoms)))
        for number, atoms in sorted(places.items())
    )


@cache
def _names(method: str) -> dict[int, tuple[str, int, str]]:
    """Subgroup name, main-group number and main-group name by subgroup number."""
    groups = table(method)
    main = groups.subgroup_main.tolist()
    return {
        number: (
            groups.subgroup_names[i],
            int(groups.main_numbers[main[i]]),
            groups.main_names[main[i]],
        )
        for i, number in enumerate(groups.subgroup_numbers.tolist())
    }


def _explained(structure: _ByStructure, left: tuple[int, ...], method: str) -> str:
    """Which functional groups the uncovered atoms belong to, in words."""
    open_atoms = set(left)
    lacking = [g.name for g in _functional_groups(structure) if open_atoms & set(g.atoms)]
    elements = sorted({structure.mol.GetAtomWithIdx(i).GetSymbol() for i in left})
    what = ", ".join(dict.fromkeys(lacking)) or f"this arrangement of {', '.join(elements)}"
    return f"The table of {method} has no group for: {what}."


@lru_cache(maxsize=_REMEMBERED)
def _functional_groups(structure: _ByStructure) -> tuple[FunctionalGroup, ...]:
    """Remembered, since a molecule is often asked for by several methods."""
    return functional_groups(with_amides(structure.mol))
