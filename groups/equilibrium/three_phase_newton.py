"""Both liquids and the temperature of a binary three-phase line at once, by Newton's method.

Unknowns: s = ln(x1/x2) of either liquid, and T. Equations: equal activity of both components in
both liquids, and the sum of the partial pressures equal to the pressure.
"""

from dataclasses import dataclass

import numpy as np

from groups.arrays import FloatArray
from groups.equilibrium.activity_curve import TOLERANCE, activity_difference_slope, fractions
from groups.equilibrium.states import log_sum_exp, safe_log
from groups.equilibrium.system import System

MAX_ITERATIONS = 14
#: The matrix is evaluated in these first steps and kept after them while the steps shrink.
FRESH = 2
#: Longest step in s and in ln T.
LONGEST_S = 1.5
LONGEST_LN_T = 0.05


@dataclass(frozen=True, slots=True)
class Line:
    """Both liquids by s (2,), T in K, ln of the partial pressures (2,), and the vapour (2,)."""

    s: FloatArray
    temperature_K: float
    ln_partial: FloatArray
    vapour: FloatArray


def three_phase_line(
    system: System, pressure_kPa: float, s: FloatArray, temperature_K: float
) -> Line | None:
    """Newton's method from a guess; None where it does not arrive.

    Parameters
    ----------
    system : System
        Of two components.
    pressure_kPa : float
    s : array of shape (2,)
        ln(x1/x2) of the liquid poor in component 1 and of the one rich in it.
    temperature_K : float
    """
    T, ln_pressure = temperature_K, float(np.log(pressure_kPa))
    inverse: FloatArray = np.eye(3)
    for step in range(MAX_ITERATIONS):
        x, both = fractions(s), np.full(2, T)
        ln_liquid = safe_log(x) + system.ln_volatility(both, x)
        # The liquid in which a component is plentiful gives its activity with the least rounding.
        terms = np.array([ln_liquid[1, 0], ln_liquid[0, 1]])
        share, total = _vapour(system, terms, both[:1], pressure_kPa)
        gap = np.append(ln_liquid[1] - ln_liquid[0], total - ln_pressure)
        if np.abs(gap).max() <= 0.1 * TOLERANCE:
            return Line(s, T, terms, share) if s[1] - s[0] > 1e-6 else None
        if step < FRESH:
            matrix = _matrix(system, both, x, s, share)
            if not np.isfinite(matrix).all() or abs(np.linalg.det(matrix)) < 1e-200:
                return None
            inverse = np.asarray(np.linalg.inv(matrix))
        change = -inverse @ gap
        largest = max(np.abs(change[:2]).max() / LONGEST_S, abs(change[2]) / LONGEST_LN_T, 1.0)
        s, T = s + change[:2] / largest, float(T * np.exp(change[2] / largest))
    return None


def _vapour(
    system: System, terms: FloatArray, T: FloatArray, pressure_kPa: float
) -> tuple[FloatArray, float]:
    """Mole fractions of the vapour over both liquids, and ln of its pressure."""
    total = float(log_sum_exp(terms))
    share = np.exp(terms - total)
    if system.vapour.ideal:
        return share, total
    pressure = np.array([pressure_kPa])
    for _ in range(3):  # the steps towards the root do the rest
        corrected = terms - system.vapour.ln_correction(T, pressure, share[None])[0]
        total = float(log_sum_exp(corrected))
        share = np.exp(corrected - total)
    return share, total


def _matrix(
    system: System, T: FloatArray, x: FloatArray, s: FloatArray, share: FloatArray
) -> FloatArray:
    """Derivatives of the gaps by s of either liquid and by ln T."""
    slope = activity_difference_slope(system.activity, float(T[0]), s)
    in_T = system.ln_volatility_slope(T, x) * T[0]
    # With Gibbs-Duhem, d ln a1 = x2 dh and d ln a2 = -x1 dh on each branch.
    in_s = slope[:, None] * np.stack([x[:, 1], -x[:, 0]], axis=1)
    return np.array(
        [
            [-in_s[0, 0], in_s[1, 0], in_T[1, 0] - in_T[0, 0]],
            [-in_s[0, 1], in_s[1, 1], in_T[1, 1] - in_T[0, 1]],
            [
                share[1] * in_s[0, 1],
                share[0] * in_s[1, 0],
                share[0] * in_T[1, 0] + share[1] * in_T[0, 1],
            ],
        ]
    )
