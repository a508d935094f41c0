"""Where each group of a method fits in a molecule, as candidates for the exact cover."""

from collections import OrderedDict
from collections.abc import Iterator
from threading import Lock

from rdkit import Chem

from groups.structure.cover import Candidate
from groups.structure.patterns import PatternSet, atom_kind

_EXOCYCLIC = Chem.MolFromSmarts("a=*")
_IMIDIC = Chem.MolFromSmarts("[N;X1,X2;+0]=[C;X3]-[O;X2;H1]")
_MOST_REMEMBERED = 4_096


class Matcher:
    """Finds the candidates of one method.

    What an atom is by itself (element, bonds, hydrogens, ring, charge) is looked up once and rules
    most patterns out before any of them is matched.
    """

    def __init__(self, patterns: PatternSet) -> None:
        self.patterns = patterns
        self.shares_atoms = any(p.fragment.halves for p in patterns.patterns)
        self._met: dict[int, tuple[int, tuple[int, ...]]] = {}
        self._possible: OrderedDict[int, tuple[int, ...]] = OrderedDict()
        self._lock = Lock()

    def candidates(self, mol: Chem.Mol, *, shared: bool = True) -> tuple[list[Candidate], int, int]:
        """List the candidates, all bits to cover, and the number of atoms.

        Atom i is bit i. An atom that halves can share has a second bit, i plus the number of atoms.
        With `shared` false no halves are offered, so that none is left over in a partial cover.
        """
        kinds = kinds_of_atoms(mol)
        present = 0
        found: list[Candidate] = []
        for kind, atoms in kinds.items():
            conditions, simple = self._met_by(kind)
            present |= conditions
            for index in simple:
                pattern = self.patterns.patterns[index]
                found.extend(
                    Candidate(1 << atom, pattern.cost, pattern.tally, index) for atom in atoms
                )
        halves: list[tuple[int, tuple[int, ...]]] = []
        for index in self._worth_matching(present):
            pattern = self.patterns.patterns[index]
            for match in mol.GetSubstructMatches(pattern.fragment.query):
                if pattern.fragment.halves:
                    halves.append((index, match))
                else:
                    bits = 0
                    for atom in match:
                        bits |= 1 << atom
                    found.append(Candidate(bits, pattern.cost, pattern.tally, index))
        size = mol.GetNumAtoms()
        universe = (1 << size) - 1
        if halves and shared:
            return self._with_halves(found, halves, size, universe)
        return found, universe, size

    def _with_halves(
        self,
        found: list[Candidate],
        halves: list[tuple[int, tuple[int, ...]]],
        size: int,
        universe: int,
    ) -> tuple[list[Candidate], int, int]:
        shared = 0
        for index, match in halves:
            for place in self.patterns.patterns[index].fragment.halves:
                shared |= 1 << match[place]
        whole = [
            Candidate(c.bits | (c.bits & shared) << size, c.cost, c.tally, c.pattern) for c in found
        ]
        for index, match in halves:
            pattern = self.patterns.patterns[index]
            for bits in _either_half(match, pattern.fragment.halves, shared, size):
                whole.append(Candidate(bits, pattern.cost, pattern.tally, index))
        return whole, universe | shared << size, size

    def _met_by(self, kind: int) -> tuple[int, tuple[int, ...]]:
        """The conditions an atom of this kind meets, and the one-atom patterns it is."""
        known = self._met.get(kind)
        if known is None:
            conditions = 0
            for place, condition in enumerate(self.patterns.conditions):
                if condition.allows(kind):
                    conditions |= 1 << place
            simple = tuple(
                index
                for index, pattern in enumerate(self.patterns.patterns)
                if pattern.simple and self.patterns.needed[index] & conditions
            )
            known = self._met[kind] = (conditions, simple)
        return known

    def _worth_matching(self, present: int) -> tuple[int, ...]:
        """The patterns of several atoms, or with surroundings, whose atoms are all there."""
        known = self._possible.get(present)
        if known is None:
            known = tuple(
                index
                for index, needed in enumerate(self.patterns.needed)
                if not needed & ~present and not self.patterns.patterns[index].simple
            )
            with self._lock:
                self._possible[present] = known
                if len(self._possible) > _MOST_REMEMBERED:
                    self._possible.popitem(last=False)
        return known


def kinds_of_atoms(mol: Chem.Mol) -> dict[int, list[int]]:
    """The atoms of each kind, in the order of the molecule."""
    kinds: dict[int, list[int]] = {}
    for index, atom in enumerate(mol.GetAtoms()):
        kind = atom_kind(
            atom.GetAtomicNum(),
            atom.GetIsAromatic(),
            atom.GetDegree(),
            atom.GetTotalNumHs(),
            atom.IsInRing(),
            atom.GetFormalCharge(),
        )
        if kind in kinds:
            kinds[kind].append(index)
        else:
            kinds[kind] = [index]
    return kinds


def with_amides(mol: Chem.Mol) -> Chem.Mol:
    """The molecule with every imidic acid, N=C-OH, drawn as the amide it is; atoms in their order.

    Amides are the stable tautomers by far, but structures generated from identifiers often show the
    acid; the tables have groups for amides only. Aromatic rings, such as that of 2-hydroxypyridine,
    stay as they are.
    """
    matches = mol.GetSubstructMatches(_IMIDIC)
    if not matches:
        return mol
    redrawn = Chem.RWMol(mol)
    met: set[int] = set()
    for nitrogen, carbon, oxygen in matches:
        if met.isdisjoint((nitrogen, carbon)):
            met.update((nitrogen, carbon))
            redrawn.GetBondBetweenAtoms(nitrogen, carbon).SetBondType(Chem.BondType.SINGLE)
            redrawn.GetBondBetweenAtoms(carbon, oxygen).SetBondType(Chem.BondType.DOUBLE)
            for index in (nitrogen, oxygen):
                redrawn.GetAtomWithIdx(index).SetNoImplicit(False)
                redrawn.GetAtomWithIdx(index).SetNumExplicitHs(0)
    Chem.SanitizeMol(redrawn)
    return redrawn.GetMol()


def with_published_aromaticity(mol: Chem.Mol) -> Chem.Mol:
    """The molecule with only such rings aromatic as the published tables mean by AC and ACH.

    RDKit also takes rings such as those of coumarin and 2-pyridone for aromatic, whose carbonyl
    group the tables count as an ester or amide. In a molecule with a double bond out of an aromatic
    ring, the stricter model (MDL) decides instead.
    """
    if not mol.HasSubstructMatch(_EXOCYCLIC):
        return mol
    strict = Chem.Mol(mol)
    Chem.Kekulize(strict, clearAromaticFlags=True)
    Chem.SetAromaticity(strict, Chem.AromaticityModel.AROMATICITY_MDL)
    return strict


def _either_half(
    match: tuple[int, ...], halves: frozenset[int], shared: int, size: int
) -> Iterator[int]:
    """The bits of a match with, for each shared atom, its first or its second half."""
    whole = 0
    for place, atom in enumerate(match):
        if place not in halves:
            bit = 1 << atom
            whole |= bit | (bit & shared) << size
    options = [whole]
    for place in sorted(halves):
        bit = 1 << match[place]
        options = [bits | half for bits in options for half in (bit, bit << size)]
    yield from options
