"""Seeded random mixtures for which a table has every parameter."""

from dataclasses import dataclass

import numpy as np

from groups.parameters import MethodTable

Counts = dict[int, int]


@dataclass(frozen=True)
class RandomMixture:
    counts: tuple[Counts, ...]
    temperature_K: float
    mole_fractions: tuple[float, ...]


def random_mixture(table: MethodTable, rng: np.random.Generator) -> RandomMixture:
    """Two to four components of up to three subgroups, out of up to five main groups."""
    mains = _complete_main_groups(table, rng)
    subgroups = np.flatnonzero(np.isin(table.subgroup_main, mains))
    counts = tuple(_component(table, subgroups, rng) for _ in range(rng.integers(2, 5)))
    x = rng.dirichlet(np.ones(len(counts)))
    return RandomMixture(counts, float(rng.uniform(250.0, 500.0)), tuple(float(v) for v in x))


def _complete_main_groups(table: MethodTable, rng: np.random.Generator) -> list[int]:
    known = ~np.isnan(table.a) & ~np.isnan(table.a.T)
    mains: list[int] = []
    for main in rng.permutation(np.unique(table.subgroup_main[table.Q > 0.0])):
        if all(known[main, other] for other in mains):
            mains.append(int(main))
        if len(mains) == 5:
            break
    return mains[: rng.integers(1, len(mains) + 1)]


def _component(table: MethodTable, subgroups: np.ndarray, rng: np.random.Generator) -> Counts:
    while True:
        chosen = rng.choice(subgroups, min(len(subgroups), rng.integers(1, 4)), replace=False)
        if table.Q[chosen].any():  # a molecule without surface is none
            return {int(table.subgroup_numbers[k]): int(rng.integers(1, 6)) for k in chosen}
