"""Where a SMILES text goes wrong, found from the text alone.

RDKit tells the place only in its log, which is shared by all threads; so the grammar is walked
here once more, only after RDKit has refused the text.

Source: the grammar of D. Weininger, J. Chem. Inf. Comput. Sci. 28 (1988) 31, in the form of the
OpenSMILES specification 1.0, sections 3.1 to 3.9.
"""

import re
from dataclasses import dataclass, field

_BRACKET = re.compile(
    r"\[(?P<isotope>\d*)(?P<symbol>[A-Z][a-z]?|[a-z][a-z]?|\*)(?P<chiral>@{0,2}(?:[A-Z]{2}\d+)?)"
    r"(?P<hydrogens>H\d*)?(?P<charge>\++\d*|-+\d*)?(?P<map>:\d+)?\]"
)
_TOKEN = re.compile(
    r"(?P<bracket>\[[^\[\]]*\])|(?P<atom>Br|Cl|[BCNOPSFI]|[bcnops]|\*)|(?P<ring>\d|%\d\d|%\(\d+\))"
    r"|(?P<bond>->|<-|[-=#$:/\\~])|(?P<open>\()|(?P<close>\))|(?P<dot>\.)"
)


@dataclass(frozen=True, slots=True)
class Mistake:
    """A mistake in words, and its 0-based place in the text where there is one."""

    position: int | None
    message: str


@dataclass(slots=True)
class _Walk:
    """What is still open while the text is read from left to right."""

    branches: list[tuple[int, int]] = field(default_factory=list)  # (position, atom left behind)
    rings: dict[str, tuple[int, int]] = field(default_factory=dict)  # (position, atom)
    bonded: set[tuple[int, int]] = field(default_factory=set)
    atom: int = -1
    n_atoms: int = 0
    previous: str = "start"


def first_mistake(text: str) -> Mistake | None:
    """The first place at which a text stops being SMILES.

    Parameters
    ----------
    text
        The SMILES, without space around it.

    Returns
    -------
    Mistake or None
        None where the grammar is kept; the mistake is then one of chemistry, not of writing.

    Source
    ------
    OpenSMILES specification 1.0, section 2 (grammar).
    """
    walk = _Walk()
    position = 0
    while position < len(text):
        token = _TOKEN.match(text, position)
        if token is None:
            return Mistake(position, _not_a_token(text, position))
        message = _step(walk, str(token.lastgroup), token.group(), position)
        if message is not None:
            return Mistake(position, f"at position {position}, {message}")
        position = token.end()
    return _left_open(walk, text)


def atom_positions(text: str) -> tuple[int, ...]:
    """The 0-based place in the text of each atom, in the order of the atoms.

    Parameters
    ----------
    text
        Grammatical SMILES.

    Returns
    -------
    tuple of int
        One place an atom.

    Source
    ------
    OpenSMILES specification 1.0, section 2 (grammar).
    """
    return tuple(
        token.start() for token in _TOKEN.finditer(text) if token.lastgroup in {"bracket", "atom"}
    )


def _not_a_token(text: str, position: int) -> str:
    character = text[position]
    if character.isspace():
        return f"there is a space at position {position}; give the SMILES alone, without a name"
    if character == "[":
        return f"the bracket '[' opened at position {position} is never closed"
    if character == "]":
        return f"']' at position {position} closes no bracket"
    if character == "%":
        return f"'%' at position {position} must be followed by a ring number of two digits"
    if character == "|":
        return f"'|' at position {position} starts an extension; give plain SMILES"
    if character == ">":
        return f"'>' at position {position} writes a reaction; give one molecule"
    hint = "; elements outside B C N O P S F Cl Br I need brackets" if character.isalpha() else ""
    return f"'{character}' at position {position} means nothing in SMILES{hint}"


def _step(walk: _Walk, kind: str, token: str, position: int) -> str | None:
    """Take one token; the message of the mistake it makes, if it makes one."""
    message = _out_of_place(walk, kind, token)
    if message is not None:
        return message
    if kind in {"bracket", "atom"}:
        if walk.atom >= 0:
            walk.bonded.add((walk.atom, walk.n_atoms))
        walk.atom, walk.n_atoms = walk.n_atoms, walk.n_atoms + 1
    elif kind == "ring":
        message = _ring_bond(walk, token.strip("%()").lstrip("0") or "0", position)
    elif kind == "open":
        walk.branches.append((position, walk.atom))
    elif kind == "close":
        walk.atom = walk.branches.pop()[1]
    elif kind == "dot":
        walk.atom = -1
    walk.previous = kind
    return message


def _out_of_place(walk: _Walk, kind: str, token: str) -> str | None:
    previous = walk.previous
    if kind == "bracket" and _BRACKET.fullmatch(token) is None:
        return f"'{token}' is no atom in brackets"
    if kind in {"ring", "bond", "open", "dot"} and previous == "start":
        return f"'{token}' needs an atom before it"
    if kind in {"bond", "open", "close", "dot"} and previous == "bond":
        return f"'{token}' follows a bond that leads to no atom"
    if kind in {"ring", "open", "close", "dot"} and previous in {"open", "dot"}:
        return f"'{token}' needs an atom before it"
    if kind == "bond" and previous == "dot":
        return f"the bond '{token}' needs an atom before it"
    if kind == "ring" and previous == "close":
        return f"the ring number '{token}' must stand before the branches of its atom"
    if kind == "close" and not walk.branches:
        return "')' closes no branch"
    return None


def _ring_bond(walk: _Walk, number: str, position: int) -> str | None:
    if number not in walk.rings:
        walk.rings[number] = (position, walk.atom)
        return None
    _, other = walk.rings.pop(number)
    if other == walk.atom:
        return f"ring number {number} joins an atom to itself"
    pair = (min(other, walk.atom), max(other, walk.atom))
    if pair in walk.bonded:
        return f"ring number {number} joins two atoms that are bonded already"
    walk.bonded.add(pair)
    return None


def _left_open(walk: _Walk, text: str) -> Mistake | None:
    if walk.branches:
        position = walk.branches[-1][0]
        return Mistake(position, f"the branch '(' opened at position {position} is never closed")
    if walk.rings:
        number, (position, _) = min(walk.rings.items(), key=lambda item: item[1][0])
        return Mistake(position, f"ring number {number} at position {position} is never closed")
    if walk.previous in {"bond", "dot"}:
        position = len(text) - 1
        return Mistake(position, f"'{text[position]}' at position {position} leads to no atom")
    return None
