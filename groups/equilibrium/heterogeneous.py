"""Heterogeneous azeotropes of three and more components: two liquids under a vapour of their sum.

The unknowns are the amounts of every component in either liquid and the temperature or ln P; the
equations are equal activities in both liquids, equal fugacity with a vapour that has the
composition of both together, and a total amount of one.
"""

from dataclasses import dataclass

import numpy as np

from groups.arrays import FloatArray
from groups.equilibrium.azeotrope_newton import LARGEST_STEP
from groups.equilibrium.boiling_curve import Condition
from groups.equilibrium.conditions import HIGHEST_K, LOWEST_K
from groups.equilibrium.stability import stability
from groups.equilibrium.system import System
from groups.equilibrium.two_liquids import two_liquids

TOLERANCE = 1e-10
MAX_ITERATIONS = 40
#: A search whose gap is still this wide after these iterations wanders.
PATIENCE = 15
WANDERING = 0.1
#: Amounts below this mean that the point runs to an edge or a phase vanishes.
EDGE = 1e-13


@dataclass(frozen=True, slots=True)
class TwoLiquidAzeotrope:
    """Amounts of every component in both liquids, of shape (2, n_components), summing to one."""

    amounts: FloatArray
    temperature_K: float
    pressure_kPa: float


def heterogeneous_azeotrope(
    system: System, condition: Condition, x: FloatArray, temperature_K: float, pressure_kPa: float
) -> TwoLiquidAzeotrope | None:
    """Newton's method from one overall composition whose liquid splits; None where it fails.

    Parameters
    ----------
    system : System
    condition : Condition
        What stays.
    x : array of shape (n_components,)
        First guess, every component present.
    temperature_K, pressure_kPa : float
        One stays, the other is a first guess.
    """
    test = stability(system.activity, temperature_K, x)
    if test.stable[0]:
        return None
    liquids = two_liquids(system.activity, temperature_K, x, test.trial[0])
    if liquids is None:
        return None
    share = liquids.first_fraction
    amounts = np.stack([share * liquids.first, (1.0 - share) * liquids.second])
    T, ln_P = temperature_K, float(np.log(pressure_kPa))
    for iteration in range(MAX_ITERATIONS):
        gap = _gap(system, amounts, T, ln_P)
        if np.abs(gap).max() <= TOLERANCE:
            return _checked(system, TwoLiquidAzeotrope(amounts, T, float(np.exp(ln_P))))
        if iteration >= PATIENCE and np.abs(gap).max() > WANDERING:
            return None
        taken = _step(system, amounts, T, gap, condition)
        if taken is None:
            return None
        step, change = taken
        amounts = amounts * np.exp(step)
        amounts /= amounts.sum()
        if amounts.min() < EDGE * 1e-6 or amounts.sum(axis=1).min() < 1e-9:
            return None
        if condition.pressure_kPa is not None:
            T = float(np.clip(T * np.clip(1.0 + change / T, 0.95, 1.05), LOWEST_K, HIGHEST_K))
        else:
            ln_P += float(np.clip(change, -1.0, 1.0))
    return None


def convex_derivatives(system: System, azeotrope: TwoLiquidAzeotrope) -> FloatArray:
    """n d ln gamma_i/dn_j of both liquids taken as one, of shape (n_components, n_components).

    The second derivative of the Gibbs energy of two phases that exchange freely is the parallel
    sum of theirs; less the ideal part, it takes the place of the derivatives of a single liquid.
    """
    first, second = _hessians(system, azeotrope.amounts, azeotrope.temperature_K)
    together = first - first @ np.linalg.pinv(first + second, rcond=1e-13, hermitian=True) @ first
    z = azeotrope.amounts.sum(axis=0)
    return np.asarray(together - np.diag(1.0 / z) + 1.0)


def _gap(system: System, amounts: FloatArray, T: float, ln_P: float) -> FloatArray:
    """Differences of ln activity between the liquids, and of ln fugacity with the vapour."""
    x = amounts / amounts.sum(axis=1, keepdims=True)
    z = amounts.sum(axis=0)
    temperature = np.full(2, T)
    ln_volatility = system.ln_volatility(temperature, x) + np.log(x)
    correction = system.vapour.ln_correction(temperature[:1], np.exp([ln_P]), z[None])[0]
    vapour = np.log(z) + ln_P + correction
    return np.concatenate([ln_volatility[0] - ln_volatility[1], ln_volatility[0] - vapour])


def _hessians(system: System, amounts: FloatArray, T: float) -> FloatArray:
    """d ln activity_i/d amount_j of both liquids, of shape (2, n, n)."""
    total = amounts.sum(axis=1)
    x = amounts / total[:, None]
    derivative = system.activity.ln_gamma_mole_derivatives(np.full(2, T), x)
    ideal = np.eye(x.shape[1]) / x[:, None, :] - 1.0
    return np.asarray((ideal + derivative) / total[:, None, None])


def _step(
    system: System, amounts: FloatArray, T: float, gap: FloatArray, condition: Condition
) -> tuple[FloatArray, float] | None:
    """Relative steps of the amounts and the step of T or ln P; None where singular."""
    n = amounts.shape[1]
    first, second = _hessians(system, amounts, T)
    x = amounts / amounts.sum(axis=1, keepdims=True)
    z = amounts.sum(axis=0)
    slopes = system.ln_volatility_slope(np.full(2, T), x)
    if condition.pressure_kPa is None:
        slopes = np.stack([np.full(n, -1.0), np.full(n, -1.0)])
    matrix = np.zeros((2 * n + 1, 2 * n + 1))
    matrix[:n, :n], matrix[:n, n:-1], matrix[:n, -1] = first, -second, slopes[0] - slopes[1]
    matrix[n:-1, :n] = first - np.diag(1.0 / z)
    matrix[n:-1, n:-1] = -np.diag(1.0 / z)
    matrix[n:-1, -1] = slopes[0]
    matrix[-1, :-1] = 1.0
    # In relative steps of the amounts, so that dilute components weigh as much as the others.
    matrix[:, :-1] *= amounts.ravel()
    try:
        solution = np.linalg.solve(matrix, np.append(-gap, 0.0))
    except np.linalg.LinAlgError:
        return None
    if not np.isfinite(solution).all():
        return None
    shrink = min(1.0, LARGEST_STEP / max(float(np.abs(solution[:-1]).max()), 1e-300))
    return solution[:-1].reshape(2, n) * shrink, float(solution[-1]) * shrink


def _checked(system: System, found: TwoLiquidAzeotrope) -> TwoLiquidAzeotrope | None:
    """The azeotrope, unless both liquids are one or would split further."""
    x = found.amounts / found.amounts.sum(axis=1, keepdims=True)
    if np.abs(x[0] - x[1]).max() < 1e-6 or found.amounts.min() < EDGE:
        return None
    stable = stability(system.activity, found.temperature_K, x).stable.all()
    return found if stable else None
