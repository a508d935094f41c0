"""Exact cover: choose candidates so that every atom is in exactly one of them.

Atoms are bits of an integer. The search takes the lowest open bit and tries every candidate that
holds it, remembering the best answer for each set of open bits. Along a molecule written as SMILES
few such sets occur, so the work grows about linearly with the number of atoms.
"""

from collections.abc import Sequence
from dataclasses import dataclass

MOST_STATES = 20_000
MOST_TIES = 16


@dataclass(frozen=True, slots=True)
class Candidate:
    """One place where one group fits: its bits, its price and what it adds to the tally."""

    bits: int
    cost: int
    tally: int
    pattern: int


@dataclass(frozen=True, slots=True)
class Cover:
    """The cheapest covers of one block, by tally, each as positions in the candidate list."""

    choices: dict[int, tuple[int, ...]]
    searched_all: bool


_Options = dict[int, tuple[int, int, int]]  # tally -> (candidate or -1, bits left, their tally)


class _TooManyStatesError(Exception):
    """The block is too tangled to search through."""


def blocks(candidates: Sequence[Candidate]) -> list[tuple[int, list[Candidate]]]:
    """Split the candidates into blocks of bits that no candidate crosses.

    Parameters
    ----------
    candidates
        Where each group fits.

    Returns
    -------
    list of (bits of the block, candidates in it)
        Bits that no candidate holds are in no block.
    """
    merged: list[int] = []
    for bits in {c.bits for c in candidates if c.bits & (c.bits - 1)}:
        apart, joined = [], bits
        for block in merged:
            if block & joined:
                joined |= block
            else:
                apart.append(block)
        apart.append(joined)
        merged = apart
    inside: dict[int, list[Candidate]] = {block: [] for block in merged}
    for candidate in candidates:
        for block in merged:
            if candidate.bits & block:
                inside[block].append(candidate)
                break
        else:
            inside.setdefault(candidate.bits, []).append(candidate)
    return list(inside.items())


def cheapest_cover(candidates: Sequence[Candidate], block: int, missing_cost: int) -> Cover:
    """Find the cheapest exact covers of one block, or the cheapest that leave atoms out.

    Parameters
    ----------
    candidates
        Those that lie in the block; the order decides which of two equal places is taken.
    block
        The bits to be covered.
    missing_cost
        The price of an uncovered bit, above that of any cover.

    Returns
    -------
    Cover
        Several tallies only where they cost the same, at most `MOST_TIES`.
    """
    alone = [index for index, c in enumerate(candidates) if c.bits == block]
    if len(alone) == 1:  # one group for the whole block is the fewest there can be
        return Cover({candidates[alone[0]].tally: (alone[0],)}, searched_all=True)
    holding: dict[int, list[int]] = {}
    for index, candidate in enumerate(candidates):
        bits = candidate.bits
        while bits:
            low = bits & -bits
            holding.setdefault(low, []).append(index)
            bits ^= low
    try:
        memo: dict[int, tuple[int, _Options]] = {0: (0, {0: (-1, 0, 0)})}
        if _search(block, candidates, holding, None, memo)[1]:
            return Cover(_traced(block, memo), searched_all=True)
        memo = {0: (0, {0: (-1, 0, 0)})}
        _search(block, candidates, holding, missing_cost, memo)
        return Cover(_traced(block, memo), searched_all=True)
    except _TooManyStatesError:
        chosen = _one_by_one(candidates, block)
        tally = sum(candidates[index].tally for index in chosen)
        return Cover({tally: chosen}, searched_all=False)


def _search(
    left: int,
    candidates: Sequence[Candidate],
    holding: dict[int, list[int]],
    missing_cost: int | None,
    memo: dict[int, tuple[int, _Options]],
) -> tuple[int, _Options]:
    known = memo.get(left)
    if known is not None:
        return known
    if len(memo) > MOST_STATES:
        raise _TooManyStatesError
    low = left & -left
    best = -1
    options: _Options = {}
    steps = [
        (candidates[i].bits, candidates[i].cost, candidates[i].tally, i)
        for i in holding.get(low, ())
    ]
    if missing_cost is not None:
        steps.append((low, missing_cost, 0, -1))
    for bits, cost, tally, index in steps:
        if bits & ~left:
            continue
        rest = left ^ bits
        rest_cost, rest_options = _search(rest, candidates, holding, missing_cost, memo)
        if not rest_options:
            continue
        total = cost + rest_cost
        if best < 0 or total < best:
            best, options = total, {}
        if total == best:
            for rest_tally in rest_options:
                if len(options) < MOST_TIES:
                    options.setdefault(tally + rest_tally, (index, rest, rest_tally))
    memo[left] = (best, options)
    return memo[left]


def _traced(block: int, memo: dict[int, tuple[int, _Options]]) -> dict[int, tuple[int, ...]]:
    found = {}
    for tally in memo[block][1]:
        chosen, left, open_tally = [], block, tally
        while left:
            index, left, open_tally = memo[left][1][open_tally]
            if index >= 0:
                chosen.append(index)
        found[tally] = tuple(chosen)
    return found


def _one_by_one(candidates: Sequence[Candidate], block: int) -> tuple[int, ...]:
    """Largest first without a search, for a block too tangled for one."""
    order = sorted(
        range(len(candidates)), key=lambda i: (-candidates[i].bits.bit_count(), candidates[i].cost)
    )
    chosen, left = [], block
    for index in order:
        if not candidates[index].bits & ~left:
            chosen.append(index)
            left ^= candidates[index].bits
    return tuple(sorted(chosen))
