"""Newton's method for many azeotropes at once: liquids that boil without changing composition.

At an azeotrope ln gamma_i + ln Psat_i - correction_i = ln P for every component present. The
unknowns are the composition and either the temperature or ln P. Steps are taken in amounts and
applied to their logarithms, so no mole fraction changes sign and dilute ones converge.
"""

from dataclasses import dataclass

import numpy as np

from groups.arrays import BoolArray, FloatArray
from groups.equilibrium.conditions import HIGHEST_K, LOWEST_K
from groups.equilibrium.system import System

#: Largest |ln gamma_i Psat_i / P|, two orders above the rounding of ln gamma.
TOLERANCE = 1e-11
MAX_ITERATIONS = 50
LARGEST_STEP = 1.0
#: Added to the diagonal of matrices of order one where rounding made one of them singular.
NUDGE = 1e-9
#: A composition that runs below this runs to the edge, where another face takes over.
EDGE = 1e-14


@dataclass(frozen=True, slots=True)
class AzeotropeRoots:
    """Newton end points: x (m, n_components), T (m,), P (m,), found (m,)."""

    mole_fractions: FloatArray
    temperature_K: FloatArray
    pressure_kPa: FloatArray
    found: BoolArray


def azeotrope_roots(
    system: System,
    start: FloatArray,
    temperature_K: FloatArray,
    pressure_kPa: FloatArray,
    *,
    fixed_pressure: bool,
) -> AzeotropeRoots:
    """Follow every start to an azeotrope with the same components present, or give it up.

    Parameters
    ----------
    system : System
    start : array of shape (m, n_components)
        Zero where a component is absent.
    temperature_K, pressure_kPa : array of shape (m,)
        One of them stays, the other is a first guess.
    fixed_pressure : bool
        Whether it is the pressure that stays.
    """
    x, T, ln_P = start.copy(), temperature_K.copy(), np.log(pressure_kPa)
    found = np.zeros(len(x), dtype=bool)
    rows = np.arange(len(x), dtype=np.int64)
    for _ in range(MAX_ITERATIONS):
        gap = fugacity_gap(system, x[rows], T[rows], ln_P[rows])
        done = np.abs(gap).max(axis=1) <= TOLERANCE
        found[rows[done]] = True
        lost = ((x[rows] < EDGE) & (x[rows] > 0.0)).any(axis=1)
        rows, gap = rows[~(done | lost)], gap[~(done | lost)]
        if not len(rows):
            break
        step, condition = _steps(system, x[rows], T[rows], gap, fixed_pressure=fixed_pressure)
        moved = x[rows] * np.exp(step)
        x[rows] = moved / moved.sum(axis=1, keepdims=True)
        if fixed_pressure:
            factor = np.clip(1.0 + condition / T[rows], 0.9, 1.1)
            T[rows] = np.clip(T[rows] * factor, LOWEST_K, HIGHEST_K)
        else:
            ln_P[rows] = np.clip(ln_P[rows] + np.clip(condition, -2.0, 2.0), -600.0, 600.0)
    return AzeotropeRoots(x, T, np.exp(ln_P), found)


def fugacity_gap(system: System, x: FloatArray, T: FloatArray, ln_P: FloatArray) -> FloatArray:
    """ln(gamma_i Psat_i / P) - correction_i at y = x; zero for an absent component."""
    gap = system.ln_volatility(T, x) - ln_P[:, None]
    if not system.vapour.ideal:
        gap -= system.vapour.ln_correction(T, np.exp(ln_P), x)
    return np.where(x > 0.0, gap, 0.0)


def _steps(
    system: System, x: FloatArray, T: FloatArray, gap: FloatArray, *, fixed_pressure: bool
) -> tuple[FloatArray, FloatArray]:
    """Steps of ln x, of shape (m, n), and of the temperature or ln P, of shape (m,)."""
    m, n = x.shape
    present = x > 0.0
    derivative = system.activity.ln_gamma_mole_derivatives(T, x)
    matrix = np.zeros((m, n + 1, n + 1))
    matrix[:, :n, :n] = np.where(present[:, :, None] & present[:, None, :], derivative, 0.0)
    matrix[:, :n, :n] += np.eye(n) * ~present[:, :, None]
    condition = system.ln_volatility_slope(T, x) if fixed_pressure else np.full_like(x, -1.0)
    matrix[:, :n, n] = np.where(present, condition, 0.0)
    matrix[:, n, :n] = present
    right = np.concatenate([-gap, np.zeros((m, 1))], axis=1)
    # An exactly singular matrix (an ideal mixture) has no azeotrope to step to.
    size = np.abs(matrix).max(axis=2, keepdims=True)
    singular = np.abs(np.linalg.det(matrix / np.where(size > 0.0, size, 1.0))) < 1e-280
    matrix[singular] = np.eye(n + 1)
    try:
        solution = np.linalg.solve(matrix, right[:, :, None])[:, :, 0]
    except np.linalg.LinAlgError:  # one row that rounding made singular must not stop the others
        nudged = matrix + NUDGE * np.eye(n + 1)
        solution = np.linalg.solve(nudged, right[:, :, None])[:, :, 0]
    solution = np.where(np.isfinite(solution), solution, 0.0)
    change = solution[:, :n] / np.where(present, x, 1.0)
    largest = np.abs(change).max(axis=1, keepdims=True)
    shrink = np.minimum(1.0, LARGEST_STEP / np.maximum(largest, 1e-300))
    return np.where(present, change * shrink, 0.0), solution[:, n] * shrink[:, 0]
