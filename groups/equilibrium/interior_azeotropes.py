"""Azeotropes with every component of a system present, for three components and more."""

from itertools import combinations

import numpy as np

from groups.arrays import FloatArray
from groups.equilibrium.azeotrope import Azeotrope, homogeneous_kind, kind_of
from groups.equilibrium.azeotrope_index import balanced
from groups.equilibrium.azeotrope_newton import AzeotropeRoots, azeotrope_roots
from groups.equilibrium.boiling_curve import Condition
from groups.equilibrium.heterogeneous import (
    TwoLiquidAzeotrope,
    convex_derivatives,
    heterogeneous_azeotrope,
)
from groups.equilibrium.stability import stability
from groups.equilibrium.states import States
from groups.equilibrium.system import System

#: Parts of the lattice of starts along an edge of the simplex.
LATTICE = {3: 8, 4: 7}
RANDOM_STARTS = 24
#: Starts of each further round, while the topological index does not balance.
MORE_STARTS = (100,)
#: Two azeotropes whose compositions differ by less are one.
SAME = 1e-6
#: A mole fraction below this belongs to the edge.
INSIDE = 1e-9
#: Splitting liquids of a further round from which a heterogeneous azeotrope is sought.
MOST_SPLITTING = 8
STEPS_INWARD = (0.01, 0.1, 0.3)
#: Searches for a heterogeneous azeotrope in one face; each costs some twenty milliseconds.
MOST_ATTEMPTS = 8


def interior_azeotropes(
    system: System, condition: Condition, known: list[Azeotrope]
) -> list[Azeotrope]:
    """Azeotropes of all components together, given those of fewer.

    Parameters
    ----------
    system : System
        Of three components or more.
    condition : Condition
    known : list of Azeotrope
        Every azeotrope of fewer of these components, at the same condition.

    Returns
    -------
    list of Azeotrope
    """
    n = system.n_components
    random = np.random.default_rng(20)  # fixed, so that an answer repeats
    starts = [_lattice(n), random.dirichlet(np.full(n, 0.4), RANDOM_STARTS), _inward(n, known)]
    found = _search(system, condition, np.concatenate(starts), known)
    for more in MORE_STARTS:
        if balanced(system, condition, known + found):
            break
        again = _search(
            system, condition, random.dirichlet(np.full(n, 0.5), more), [], thorough=True
        )
        found.extend(a for a in again if not _listed(a.mole_fractions, found))
    return sorted(found, key=lambda a: float(a.mole_fractions[0]))


def _lattice(n: int) -> FloatArray:
    """Interior lattice points of the simplex."""
    parts = max(LATTICE.get(n, n + 1), n)
    cuts = np.array(list(combinations(range(1, parts), n - 1)))
    edges = np.column_stack([np.zeros(len(cuts)), cuts, np.full(len(cuts), parts)])
    return np.asarray(np.diff(edges, axis=1) / parts)


def _inward(n: int, known: list[Azeotrope]) -> FloatArray:
    """Points a step inside from each lower azeotrope, towards what it lacks."""
    points: list[FloatArray] = []
    for azeotrope in known:
        missing = azeotrope.mole_fractions <= 0.0
        aim = missing / missing.sum()
        points.extend((1.0 - e) * azeotrope.mole_fractions + e * aim for e in STEPS_INWARD)
    return np.array(points).reshape(-1, n)


def _search(
    system: System,
    condition: Condition,
    starts: FloatArray,
    known: list[Azeotrope],
    *,
    thorough: bool = False,
) -> list[Azeotrope]:
    boiling = condition.boil(
        system, np.maximum(starts, 1e-8) / np.maximum(starts, 1e-8).sum(axis=1, keepdims=True)
    )
    good = boiling.converged
    roots = azeotrope_roots(
        system,
        boiling.liquid[good],
        boiling.temperature_K[good],
        boiling.pressure_kPa[good],
        fixed_pressure=condition.pressure_kPa is not None,
    )
    found, splitting = _sorted_out(system, roots)
    starts_inside = _splitting_starts(system, boiling) if thorough else []
    for x, T, P in [*splitting, *_hetero_starts(system, known), *starts_inside][:MOST_ATTEMPTS]:
        if any(old.heterogeneous for old in found):
            break  # two of one face are not known; the index would tell
        two = heterogeneous_azeotrope(system, condition, x, T, P)
        if two is not None:
            found.append(_two_liquid(system, two))
    return found


def _sorted_out(
    system: System, roots: AzeotropeRoots
) -> tuple[list[Azeotrope], list[tuple[FloatArray, float, float]]]:
    """Different azeotropes inside whose liquid is stable, and places where it would split."""
    found: list[Azeotrope] = []
    splitting: list[tuple[FloatArray, float, float]] = []
    everything = tuple(range(system.n_components))
    for k in np.flatnonzero(roots.found & (roots.mole_fractions > INSIDE).all(axis=1)):
        x = roots.mole_fractions[k]
        T, P = float(roots.temperature_K[k]), float(roots.pressure_kPa[k])
        if _listed(x, found) or any(np.abs(x - s[0]).max() < SAME for s in splitting):
            continue
        if stability(system.activity, T, x).stable[0]:
            kind = homogeneous_kind(system, T, x)
            found.append(Azeotrope(everything, x, T, P, kind, True, (x,)))
        else:
            splitting.append((x, T, P))
    return found, splitting


def _hetero_starts(system: System, known: list[Azeotrope]) -> list[tuple[FloatArray, float, float]]:
    """Points inside from the heterogeneous azeotropes of the edges."""
    edges = [a for a in known if a.heterogeneous]
    starts = []
    for azeotrope in edges:
        for x in _inward(system.n_components, [azeotrope]):
            starts.append((x, azeotrope.temperature_K, azeotrope.pressure_kPa))
    return starts


def _splitting_starts(system: System, boiling: States) -> list[tuple[FloatArray, float, float]]:
    """Some boiling points whose liquid would split."""
    good = np.flatnonzero(boiling.converged)
    T, P, x = boiling.temperature_K[good], boiling.pressure_kPa[good], boiling.liquid[good]
    unstable = np.flatnonzero(~stability(system.activity, T, x).stable)[:MOST_SPLITTING]
    return [(x[k], float(T[k]), float(P[k])) for k in unstable]


def _listed(x: FloatArray, found: list[Azeotrope]) -> bool:
    return any(np.abs(x - old.mole_fractions).max() < SAME for old in found)


def _two_liquid(system: System, two: TwoLiquidAzeotrope) -> Azeotrope:
    z = two.amounts.sum(axis=0)
    liquids = two.amounts / two.amounts.sum(axis=1, keepdims=True)
    kind = kind_of(convex_derivatives(system, two), z)
    everything = tuple(range(system.n_components))
    return Azeotrope(
        everything, z, two.temperature_K, two.pressure_kPa, kind, False, (liquids[0], liquids[1])
    )
