"""The one saturation line of all Soave-Redlich-Kwong fluids: B at saturation against q.

A pure fluid of this equation is at saturation where B = b P / (R T) has one value for q = a / (b R
T), whatever the substance. The line, computed once, turns a vapour pressure into the attraction
that reproduces it.
"""

from functools import lru_cache

import numpy as np
from scipy.interpolate import CubicSpline

from groups.arrays import FloatArray
from groups.errors import ConvergenceError
from groups.vapour.psrk.cubic import (
    CRITICAL_B,
    CRITICAL_Q,
    CRITICAL_VOLUME,
    compressibility_roots,
    pure_ln_phi,
)

#: q at the cold end: reduced temperatures of about 0.35 for a molecule of acentric factor 0.5.
LARGEST_Q = 24.0
FIRST_STEP, RATIO = 0.02, 1.06
MAX_ITERATIONS = 200
#: d ln B / d q at the critical point: d ln P / d ln T is 1 / (Zc - Bc) there, along the isochore.
CRITICAL_SLOPE = -(1.0 / (1.0 / 3.0 - CRITICAL_B) - 1.0) / CRITICAL_Q


def attraction_at_saturation(ln_B: FloatArray) -> FloatArray:
    """The q whose saturation lies at ln B; NaN outside the line.

    Parameters
    ----------
    ln_B : array
        ln(b P / R T) at saturation.

    Returns
    -------
    array, same shape
    """
    return np.asarray(_inverse()(ln_B))


def saturation_slope(q: FloatArray) -> FloatArray:
    """d q / d ln B along the line at attractions q, in the shape of q.

    Parameters
    ----------
    q : array

    Returns
    -------
    array, same shape
        Negative.
    """
    line, ln_B = saturation_line()
    return np.asarray(1.0 / CubicSpline(line, ln_B)(q, 1))


@lru_cache(maxsize=1)
def _inverse() -> CubicSpline:
    q, ln_B = saturation_line()
    return CubicSpline(ln_B[::-1], q[::-1], extrapolate=False)


@lru_cache(maxsize=1)
def saturation_line() -> tuple[FloatArray, FloatArray]:
    """q and ln B of points of equal fugacity, from the critical point down in temperature.

    Returns
    -------
    q, ln_B : array of shape (n_points,)
    """
    q, ln_B = [CRITICAL_Q], [float(np.log(CRITICAL_B))]
    step, slope, bend = FIRST_STEP, CRITICAL_SLOPE, 0.0
    while q[-1] < LARGEST_Q:
        found = _equal_fugacity(q[-1] + step, ln_B[-1] + (slope + 0.5 * bend * step) * step)
        mean = (found - ln_B[-1]) / step
        bend = 2.0 * (mean - slope) / step
        slope += bend * step  # of the parabola through both points with the slope at the first
        q.append(q[-1] + step)
        ln_B.append(found)
        step *= RATIO
    return np.array(q), np.array(ln_B)


def _equal_fugacity(q: float, ln_B: float) -> float:
    """Newton's method in ln B: d ln phi / d ln P = Z - 1 in each phase."""
    attraction = np.array([q])
    # The pressures with three roots narrow like the 1.5th power of the distance in temperature.
    back, change = 0.02 * (q - CRITICAL_Q) ** 1.5, np.inf
    for _ in range(MAX_ITERATIONS):
        B = np.exp(np.array([ln_B]))
        liquid, vapour = compressibility_roots(attraction, B)
        if vapour[0] - liquid[0] < 1e-7 * vapour[0]:  # one root: outside the spinodals, turn back
            ln_B += back if vapour[0] / B[0] > CRITICAL_VOLUME else -back
            continue
        gap = pure_ln_phi(attraction, B, liquid) - pure_ln_phi(attraction, B, vapour)
        change = float((gap / (vapour - liquid))[0])
        ln_B += change
        if abs(change) < 1e-12:
            return ln_B
    raise ConvergenceError(
        f"The saturation line of the cubic equation was lost at q = {q:.3f}.",
        iterations=MAX_ITERATIONS,
        residual=abs(change),
    )
