"""A liquid of given composition and temperature split into two, from the trial that proved it.

Successive substitution on the distribution coefficients with a safeguarded solution for the phase
fraction: slow near a critical point, but it goes downhill in Gibbs energy with every step.
"""

from dataclasses import dataclass

import numpy as np

from groups.arrays import FloatArray
from groups.equilibrium.phase_fraction import phase_fraction
from groups.equilibrium.states import safe_log
from groups.equilibrium.system import LiquidModel

MAX_ITERATIONS = 60
#: Change of ln(distribution coefficient) at which a Newton method may take over.
TOLERANCE = 1e-4


@dataclass(frozen=True, slots=True)
class TwoLiquids:
    """Two liquids (n_components,) and the mole fraction of all that is in the first."""

    first: FloatArray
    second: FloatArray
    first_fraction: float


def two_liquids(
    liquid: LiquidModel, temperature_K: float, x: FloatArray, trial: FloatArray
) -> TwoLiquids | None:
    """Nearly converged liquids, or None where both become the same.

    Parameters
    ----------
    liquid : LiquidModel
    temperature_K : float
    x : array of shape (n_components,)
        Both liquids together.
    trial : array of shape (n_components,)
        A liquid below the tangent plane of `x`.
    """
    T = np.array([temperature_K])
    ln_gamma = liquid.ln_gamma(T, np.stack([trial, x]))
    ln_k = ln_gamma[1] - ln_gamma[0]  # ln(trial / rest) where the activities agree
    for _ in range(MAX_ITERATIONS):
        ln_k = np.clip(ln_k, -300.0, 300.0)
        share, inside = phase_fraction(x[None], ln_k[None])
        if not inside[0]:
            share = np.clip(share, 1e-3, 1.0 - 1e-3)
        second = x / (1.0 + share[0] * np.expm1(np.minimum(ln_k, 600.0)))
        first = second * np.exp(ln_k)
        first, second = first / first.sum(), second / second.sum()
        ln_gamma = liquid.ln_gamma(T, np.stack([first, second]))
        fresh = ln_gamma[1] - ln_gamma[0]
        change = np.abs(fresh - ln_k).max()
        ln_k = fresh
        if change <= TOLERANCE:
            break
    if not inside[0] or np.abs(safe_log(first + 1e-300) - safe_log(second + 1e-300)).max() < 1e-4:
        return None
    return TwoLiquids(first, second, float(share[0]))
