"""The patterns by which each method's groups are found in a molecule.

`patterns/fragments.csv` describes each fragment once, as SMARTS. `patterns/<method>.csv` says which
fragments make which subgroup of that method, and in which precedence. All of it is data, so a new
group is a new row. The atoms that a fragment lists are the atoms it covers, hydrogens included:
each is written in brackets with its element, number of bonds and number of hydrogens, and
surroundings that must be there, or must not, stand inside `$(...)` and are not covered.
"""

import csv
import re
from collections.abc import Iterator
from dataclasses import dataclass
from functools import cache
from importlib.resources import files

from rdkit import Chem

from groups.errors import DataError, UnknownMethodError

SAME_GROUPS = {"unifac-2.0": "unifac", "unifac-dortmund-2.0": "unifac-dortmund"}
ASSIGNED_METHODS = (
    "unifac",
    "unifac-lle",
    "unifac-dortmund",
    "unifac-lyngby",
    "unifac-nist",
    "psrk",
    *SAME_GROUPS,
)
_COUNT_BITS = 9  # a molecule has at most 200 heavy atoms, so no count reaches 2**9
_ELEMENT = re.compile(r"[A-Z][a-z]?|[cnos]|#1")


@dataclass(frozen=True, slots=True)
class AtomCondition:
    """What a fragment asks of one atom, as far as it can be seen without the neighbours."""

    atomic_number: int
    aromatic: bool
    bonds: int
    hydrogens: int
    in_ring: bool | None
    charge: int
    has_surroundings: bool

    def allows(self, kind: int) -> bool:
        """Whether an atom of this packed kind (see `atom_kind`) can be meant."""
        expected = atom_kind(
            self.atomic_number,
            self.aromatic,
            self.bonds - self.hydrogens,
            self.hydrogens,
            bool(kind & 1) if self.in_ring is None else self.in_ring,
            self.charge,
        )
        return kind == expected


@dataclass(frozen=True, slots=True)
class Fragment:
    """One arrangement of atoms; `halves` are the places of atoms it shares with its twin."""

    key: str
    smarts: str
    query: Chem.Mol
    atoms: tuple[AtomCondition, ...]
    halves: frozenset[int]

    def formula(self) -> dict[str, float]:
        """Atoms of each element, hydrogen included, a shared atom counted as one half."""
        total: dict[str, float] = {}
        table = Chem.GetPeriodicTable()
        for place, atom in enumerate(self.atoms):
            weight = 0.5 if place in self.halves else 1.0
            symbol = table.GetElementSymbol(atom.atomic_number)
            total[symbol] = total.get(symbol, 0.0) + weight
            if atom.hydrogens:
                total["H"] = total.get("H", 0.0) + weight * atom.hydrogens
        return total


@dataclass(frozen=True, slots=True)
class Pattern:
    """A fragment as a subgroup of one method.

    `cost` orders covers (fewest groups, then precedence) and `tally` counts subgroups; both add up
    over the groups of a cover. `simple` patterns are one atom without surroundings, which need no
    matching.
    """

    number: int
    fragment: Fragment
    precedence: int
    cost: int
    tally: int
    simple: bool


@dataclass(frozen=True, slots=True)
class PatternSet:
    """All patterns of one method; `missing_cost` is the price of leaving an atom uncovered."""

    method: str
    patterns: tuple[Pattern, ...]
    conditions: tuple[AtomCondition, ...]
    needed: tuple[int, ...]
    numbers: tuple[int, ...]
    missing_cost: int

    def counts(self, tally: int) -> tuple[tuple[int, int], ...]:
        """The (subgroup number, count) pairs that a sum of tallies stands for."""
        mask = (1 << _COUNT_BITS) - 1
        pairs = ((n, (tally >> (_COUNT_BITS * i)) & mask) for i, n in enumerate(self.numbers))
        return tuple((number, count) for number, count in pairs if count)

    def preference(self, tally: int) -> tuple[tuple[int, ...], tuple[tuple[int, int], ...]]:
        """How equally good covers are sorted: larger groups first, then lower numbers."""
        sizes = {p.number: len(p.fragment.atoms) for p in self.patterns}
        counts = self.counts(tally)
        return tuple(sorted(-sizes[number] for number, n in counts for _ in range(n))), counts


def atom_kind(
    atomic_number: int, aromatic: bool, degree: int, hydrogens: int, in_ring: bool, charge: int
) -> int:
    """Pack what can be asked of an atom by itself into one integer."""
    packed = (atomic_number << 4 | degree) << 4 | hydrogens
    return (packed << 4 | (charge + 8)) << 2 | aromatic << 1 | in_ring


@cache
def fragments() -> dict[str, Fragment]:
    """Every fragment of `patterns/fragments.csv`, by its key.

    Raises
    ------
    DataError
        A fragment cannot be read, or an atom does not state its bonds and hydrogens.
    """
    return {row["fragment"]: _fragment(row) for row in _rows("fragments")}


@cache
def pattern_set(method: str) -> PatternSet:
    """The patterns of one method.

    Parameters
    ----------
    method
        An identifier of a published table; a completed table has the groups of the table it
        completes.

    Raises
    ------
    UnknownMethodError
        There is no such method.
    DataError
        A pattern names a fragment that does not exist.
    """
    if method not in ASSIGNED_METHODS:
        raise UnknownMethodError(method, ASSIGNED_METHODS)
    name = SAME_GROUPS.get(method, method)
    rows = [(int(r["number"]), r["fragment"], int(r["precedence"])) for r in _rows(name)]
    known = fragments()
    unknown = [key for _, key, _ in rows if key not in known]
    if unknown:
        raise DataError(f"patterns/{name}.csv names unknown fragments: {', '.join(unknown)}.")
    return _assembled(name, [(number, known[key], level) for number, key, level in rows])


def _assembled(method: str, rows: list[tuple[int, Fragment, int]]) -> PatternSet:
    levels = sorted({level for _, _, level in rows})
    numbers = tuple(sorted({number for number, _, _ in rows}))
    one_group = 1 << (_COUNT_BITS * len(levels))
    worth = {level: one_group >> (_COUNT_BITS * (i + 1)) for i, level in enumerate(levels)}
    patterns = tuple(
        Pattern(
            number=number,
            fragment=fragment,
            precedence=level,
            cost=one_group - worth[level],
            tally=1 << (_COUNT_BITS * numbers.index(number)),
            simple=len(fragment.atoms) == 1 and not fragment.atoms[0].has_surroundings,
        )
        for number, fragment, level in rows
    )
    conditions = tuple(dict.fromkeys(c for p in patterns for c in p.fragment.atoms))
    place = {condition: 1 << i for i, condition in enumerate(conditions)}
    needed = tuple(_union(place[c] for c in p.fragment.atoms) for p in patterns)
    return PatternSet(method, patterns, conditions, needed, numbers, one_group << _COUNT_BITS + 2)


def _union(bits: Iterator[int]) -> int:
    total = 0
    for bit in bits:
        total |= bit
    return total


def _fragment(row: dict[str, str]) -> Fragment:
    key, smarts = row["fragment"], row["smarts"]
    query = Chem.MolFromSmarts(smarts)
    atoms = tuple(_condition(text, key) for text in _bracketed(smarts))
    if query is None or query.GetNumAtoms() != len(atoms):
        raise DataError(f"Fragment '{key}' is no SMARTS with every atom in brackets: {smarts}")
    halves = frozenset(int(place) for place in row["halves"].split())
    return Fragment(key, smarts, query, atoms, halves)


def _bracketed(smarts: str) -> Iterator[str]:
    """The text of each outermost pair of square brackets."""
    depth, start = 0, 0
    for place, letter in enumerate(smarts):
        if letter == "[":
            depth += 1
            if depth == 1:
                start = place + 1
        elif letter == "]":
            depth -= 1
            if depth == 0:
                yield smarts[start:place]


def _condition(text: str, key: str) -> AtomCondition:
    """Read `C;X4;H2;R;$(...)`: element, bonds, hydrogens, then ring, charge and surroundings."""
    element, *parts = _split(text)
    bonds = [int(p[1:]) for p in parts if re.fullmatch(r"X\d", p)]
    hydrogens = [int(p[1:]) for p in parts if re.fullmatch(r"H\d", p)]
    if not _ELEMENT.fullmatch(element) or len(bonds) != 1 or len(hydrogens) != 1:
        raise DataError(f"Fragment '{key}': [{text}] must state element, bonds and hydrogens.")
    ring = {"R": True, "r5": True, "R0": False}
    is_hydrogen = element == "#1"  # its hydrogen count is its neighbour, an atom of its own
    return AtomCondition(
        atomic_number=Chem.GetPeriodicTable().GetAtomicNumber(
            "H" if is_hydrogen else element.capitalize()
        ),
        aromatic=element.islower(),
        bonds=bonds[0],
        hydrogens=0 if is_hydrogen else hydrogens[0],
        in_ring=next((ring[p] for p in parts if p in ring), None),
        charge=parts.count("+") - parts.count("-"),
        has_surroundings=any("$" in p or p.strip("!").startswith("r") for p in parts),
    )


def _split(text: str) -> list[str]:
    """Split at the semicolons outside parentheses."""
    pieces, depth = [""], 0
    for letter in text:
        depth += (letter == "(") - (letter == ")")
        if letter == ";" and depth == 0:
            pieces.append("")
        else:
            pieces[-1] += letter
    return pieces


def _rows(name: str) -> list[dict[str, str]]:
    text = files("groups.structure").joinpath("patterns", f"{name}.csv").read_text("utf-8")
    return list(csv.DictReader(text.splitlines()))
