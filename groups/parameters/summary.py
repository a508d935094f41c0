"""What a table covers, in numbers."""

from collections.abc import Mapping
from dataclasses import dataclass

import numpy as np

from groups.parameters.loader import table
from groups.parameters.record import Source


@dataclass(frozen=True, slots=True)
class MethodSummary:
    """Coverage of one table.

    Pairs are unordered pairs of different main groups that have at least one subgroup; a pair
    counts as parametrised only where both directions are given.
    """

    method: str
    title: str
    temperature_range_K: tuple[float, float]
    n_subgroups: int
    n_main_groups: int
    n_pairs_with_parameters: int
    n_pairs_without_parameters: int
    n_pairs_completed: int
    sources: tuple[Source, ...]
    suspects: Mapping[tuple[int, int], str]


def method_summary(method: str) -> MethodSummary:
    """Groups, pairs with and without parameters, range and suspects of a table.

    Parameters
    ----------
    method : str
        One of `METHODS`.

    Returns
    -------
    MethodSummary
        The counts; `n_pairs_completed` counts pairs of which at least one direction was filled
        by machine learning.

    Raises
    ------
    UnknownMethodError
        If there is no such method.
    """
    published = table(method)
    used = np.unique(published.subgroup_main)
    upper = np.triu_indices(len(used), k=1)
    both = ~np.isnan(published.a) & ~np.isnan(published.a.T)
    filled = published.completed | published.completed.T
    with_parameters = int(np.count_nonzero(both[np.ix_(used, used)][upper]))
    return MethodSummary(
        method=method,
        title=published.title,
        temperature_range_K=published.temperature_range_K,
        n_subgroups=len(published.subgroup_numbers),
        n_main_groups=len(used),
        n_pairs_with_parameters=with_parameters,
        n_pairs_without_parameters=len(upper[0]) - with_parameters,
        n_pairs_completed=int(np.count_nonzero(filled[np.ix_(used, used)][upper])),
        sources=published.sources,
        suspects=published.suspects,
    )
