"""What each published table can do for a mixture: missing, completed and suspect parameters."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from functools import cache, lru_cache
from itertools import combinations
from typing import Literal

from groups.parameters import table

OnMissing = Literal["refuse", "estimate"]
COMPLETED_METHODS = ("unifac-dortmund-2.0", "unifac-2.0")
Pair = tuple[int, int]


@dataclass(frozen=True, slots=True)
class Candidate:
    """What one table can do for a mixture whose molecules it covers."""

    method: str
    main_numbers: tuple[int, ...]
    missing: tuple[Pair, ...]
    completed: tuple[Pair, ...]
    suspect: tuple[Pair, ...]


def candidate(method: str, counts: Sequence[Mapping[int, int]]) -> Candidate:
    """What the table of a method holds for a mixture.

    Parameters
    ----------
    method : str
    counts : sequence of mapping of int to int
        Subgroup number to count, one mapping a component.

    Returns
    -------
    Candidate
    """
    main_of = _main_of_subgroup(method)
    mains = sorted({main_of[number] for component in counts for number in component})
    return _candidate(method, tuple(mains))


@lru_cache(maxsize=100_000)
def _candidate(method: str, mains: tuple[int, ...]) -> Candidate:
    groups = table(method)
    pairs = list(combinations(mains, 2))
    return Candidate(
        method,
        mains,
        tuple(groups.missing_pairs(mains)),
        tuple(
            pair
            for pair in pairs
            if groups.completed[groups.main_index(pair[0]), groups.main_index(pair[1])]
        ),
        tuple(pair for pair in pairs if pair in groups.suspects),
    )


@cache
def _main_of_subgroup(method: str) -> Mapping[int, int]:
    """Main-group number of each subgroup number."""
    groups = table(method)
    mains = groups.main_numbers[groups.subgroup_main]
    return dict(zip(groups.subgroup_numbers.tolist(), mains.tolist(), strict=True))
