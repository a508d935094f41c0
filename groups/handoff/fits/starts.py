"""Where a fit starts: the best few of a lattice of constant interactions."""

from collections.abc import Callable

import numpy as np

from groups.arrays import FloatArray
from groups.handoff.correlations.nrtl import Nrtl
from groups.handoff.fits.formulation import Formulation

#: Lattices of (u_12, u_21). They span infinite-dilution ln gamma of about -3 to 12.
_LATTICE = {
    "nrtl": np.array([-1.5, -0.7, -0.2, 0.3, 0.8, 1.5, 2.5, 4.0, 6.0]),
    "wilson": np.array([-6.0, -4.0, -2.5, -1.5, -0.8, -0.3, 0.2, 0.7, 1.3]),
    "uniquac": np.array([-2.5, -1.6, -1.0, -0.6, -0.3, -0.1, 0.2, 0.5, 0.9]),
}
_ALPHAS = (0.2, 0.3, 0.47)  # where Renon & Prausnitz (1968) put most liquids
MOST_STARTS = 3
#: Starts nearer to one another than this (in units of lattice steps) lead to the same minimum.
APART = 2

Cost = Callable[[FloatArray, float | None], FloatArray]
"""From interactions (L, 2, 2) and a non-randomness to the sum of squares (L,)."""


def starts(
    how: Formulation, cost: Cost, infinite: tuple[float, float], temperature_K: FloatArray
) -> list[FloatArray]:
    """Starting parameters of a fit, the most promising first.

    Parameters
    ----------
    how : Formulation
    cost : callable
        Sum of squares of many constant interactions at once, at one representative temperature.
    infinite : tuple of float
        About ln gamma of either component at infinite dilution, for Margules and van Laar.
    temperature_K : FloatArray of shape (t,)
        Temperatures of the data.

    Returns
    -------
    list of FloatArray of shape (P,)
    """
    name = how.equation.name
    if name not in _LATTICE:
        return _from_infinite_dilution(how, infinite, temperature_K)
    values = _LATTICE[name]
    first, second = np.meshgrid(values, values, indexing="ij")
    u = np.zeros((first.size, 2, 2))
    u[:, 0, 1], u[:, 1, 0] = first.ravel(), second.ravel()
    alphas: tuple[float | None, ...] = _ALPHAS if how.fitted_alpha else (None,)
    ranked: list[tuple[float, int, float | None]] = []
    for alpha in alphas:
        with np.errstate(all="ignore"):
            costs = cost(u, alpha)
        places = _separate(costs, len(values))
        ranked.extend((float(costs[k]), k, alpha) for k in places)
    ranked.sort(key=lambda one: one[0])
    return [
        how.start(float(u[k, 0, 1]), float(u[k, 1, 0]), alpha or 0.3, temperature_K)
        for _, k, alpha in ranked[:MOST_STARTS]
    ]


def _separate(costs: FloatArray, side: int) -> list[int]:
    """The cheapest places of a square lattice that are no neighbours of one another."""
    kept: list[int] = []
    for k in np.argsort(np.where(np.isfinite(costs), costs, np.inf)).tolist():
        row, column = divmod(k, side)
        if all(max(abs(row - q // side), abs(column - q % side)) >= APART for q in kept):
            kept.append(k)
        if len(kept) == MOST_STARTS:
            break
    return kept


def _from_infinite_dilution(
    how: Formulation, infinite: tuple[float, float], temperature_K: FloatArray
) -> list[FloatArray]:
    first, second = infinite
    if how.equation.name == "van-laar" and first * second <= 0.0:
        size = max(0.5 * (abs(first) + abs(second)), 0.05)
        pairs = [(size, size), (-size, -size)]
    else:
        pairs = [(first, second)]
        if how.tied:
            pairs = [(0.5 * (first + second),) * 2]
    return [how.start(u12, u21, 0.3, temperature_K) for u12, u21 in pairs]


def lattice_ln_gamma(
    how: Formulation, u: FloatArray, alpha: float | None, x: FloatArray
) -> FloatArray:
    """ln gamma (L, m, 2) of many constant interactions at compositions (m, 2)."""
    equation = how.equation
    if alpha is not None and isinstance(equation, Nrtl):
        equation = equation.with_alpha(alpha)
    return equation.ln_gamma(u, x[None])
