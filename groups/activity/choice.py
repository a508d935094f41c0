"""`auto` in its first form: which table to take for a mixture, and why.

The order of preference: the best-ranked fitted table that has every parameter and no audited
suspect; then, if estimates are allowed, the best-ranked completed table; then a fitted table with
a suspect. Fitted tables come first whatever their rank, because completed ones are as good at
infinite dilution and yet lose azeotropes. The ranking is measured (see `ranking.toml`).
"""

import csv
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from functools import cache
from importlib.resources import files
from itertools import combinations
from typing import Literal

from groups.parameters import MethodTable, table

OnMissing = Literal["refuse", "estimate"]
COMPLETED_METHODS = ("unifac-dortmund-2.0", "unifac-2.0")
NOT_FOR_GENERAL_USE = ("unifac-lle",)  # fitted to liquid-liquid data near 298 K only
Pair = tuple[int, int]


@dataclass(frozen=True, slots=True)
class Candidate:
    """What one table can do for a mixture whose molecules it covers."""

    method: str
    main_numbers: tuple[int, ...]
    missing: tuple[Pair, ...]
    completed: tuple[Pair, ...]
    suspect: tuple[Pair, ...]

    @property
    def published(self) -> bool:
        """Every parameter is published and fitted to measurements."""
        return not self.missing and not self.completed


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
    groups = table(method)
    mains = _main_numbers(groups, counts)
    pairs = list(combinations(mains, 2))
    missing = tuple(groups.missing_pairs(mains))
    return Candidate(
        method,
        mains,
        missing,
        tuple(
            pair
            for pair in pairs
            if groups.completed[groups.main_index(pair[0]), groups.main_index(pair[1])]
        ),
        tuple(pair for pair in pairs if pair in groups.suspects),
    )


def _main_numbers(groups: MethodTable, counts: Sequence[Mapping[int, int]]) -> tuple[int, ...]:
    numbers = {number for component in counts for number in component}
    mains = {int(groups.subgroup_main[groups.subgroup_index(number)]) for number in numbers}
    return tuple(sorted(int(groups.main_numbers[index]) for index in mains))


@cache
def ranking() -> Mapping[str, int]:
    """Rank of each method, 0 the best, by measured error of ln gamma-infinity.

    Source
    ------
    `ranking.csv`, whose origin is told in `ranking.toml`.
    """
    text = files("groups.activity").joinpath("ranking.csv").read_text(encoding="utf-8")
    rows = sorted(
        csv.DictReader(text.splitlines()), key=lambda row: float(row["mean_absolute_error"])
    )
    return {row["method"]: rank for rank, row in enumerate(rows)}


def preference(candidates: Sequence[Candidate], on_missing: OnMissing) -> list[Candidate]:
    """The usable candidates, the one to take first.

    Parameters
    ----------
    candidates : sequence of Candidate
        Tables that cover every molecule of the mixture.
    on_missing : {"refuse", "estimate"}
        Whether a table with completed parameters may be taken.

    Returns
    -------
    list of Candidate
        Empty if no table has all the parameters asked for.
    """
    usable = [
        one
        for one in candidates
        if not one.missing
        and one.method not in NOT_FOR_GENERAL_USE
        and (on_missing == "estimate" or not one.completed)
    ]
    return sorted(usable, key=_order)


def _order(one: Candidate) -> tuple[int, int]:
    fitted = one.method not in COMPLETED_METHODS
    tier = (0 if not one.suspect else 3) if fitted else (1 if one.published else 2)
    return tier, ranking().get(one.method, len(ranking()))


def why_taken(taken: Candidate, passed_over: Sequence[Candidate]) -> str:
    """One sentence on why this table was taken and what ruled the better-ranked ones out."""
    if taken.completed:
        text = "no fitted table has every parameter; this one was completed by machine learning"
    elif taken.suspect:
        text = "the only table with every parameter, though one of them failed the audit"
    else:
        text = "the best-ranked table with every parameter fitted and none suspect"
    rank = ranking()
    better = [c for c in passed_over if rank.get(c.method, 99) < rank.get(taken.method, 99)]
    notes = [_ruled_out(c) for c in better if c.missing or c.suspect]
    return text + ("; passed over: " + ", ".join(notes) if notes else "")


def _ruled_out(one: Candidate) -> str:
    if one.missing:
        return f"{one.method} ({len(one.missing)} group pairs missing)"
    return f"{one.method} ({len(one.suspect)} suspect group pairs)"
