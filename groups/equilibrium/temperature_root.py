"""A safeguarded Newton search for many temperatures at once, in 1/T.

ln of a vapour pressure is nearly linear in 1/T, so Newton's method in that variable takes few
steps; a bracket that shrinks with every evaluation catches the step that would leave it.
"""

from collections.abc import Callable

import numpy as np

from groups.arrays import BoolArray, FloatArray, IntArray
from groups.equilibrium.conditions import HIGHEST_K, LOWEST_K

#: Stop at this |f|; f is a difference of logarithms, whose rounding is near 1e-14.
TOLERANCE = 1e-12
#: Newton needs four to seven steps; bisection alone would need about fifty.
MAX_ITERATIONS = 100

Evaluate = Callable[[FloatArray, IntArray], tuple[FloatArray, FloatArray]]


def rising_root(
    evaluate: Evaluate, start_K: FloatArray, tolerance: float = TOLERANCE
) -> tuple[FloatArray, BoolArray]:
    """Temperatures at which functions that rise through zero are zero.

    Parameters
    ----------
    evaluate : callable
        Takes temperatures of shape (m,) and the indices (m,) of the points they belong to;
        returns the values and their slopes d/dT (a good estimate is enough), each of shape (m,).
    start_K : array of shape (n,)
        First guesses, in K.
    tolerance : float
        Largest |value| that is accepted.

    Returns
    -------
    temperature_K : array of shape (n,)
    found : bool array of shape (n,)
        False where the value does not change sign within the bounds of the search.
    """
    temperature = np.clip(start_K, LOWEST_K * 1.01, HIGHEST_K * 0.99)
    low = np.full_like(temperature, LOWEST_K)
    high = np.full_like(temperature, HIGHEST_K)
    found = np.zeros(len(temperature), dtype=bool)
    active: IntArray = np.arange(len(temperature), dtype=np.int64)
    for _ in range(MAX_ITERATIONS):
        value, slope = evaluate(temperature[active], active)
        T = temperature[active]
        below = value < 0.0
        low[active] = np.where(below, T, low[active])
        high[active] = np.where(below, high[active], T)
        step = _next(T, value, slope, low[active], high[active])
        done = np.abs(value) <= tolerance
        stuck = ~done & ((high[active] - low[active]) <= 4e-16 * T)
        found[active[done]] = True
        temperature[active] = np.where(done | stuck, T, step)
        active = active[~(done | stuck | ~np.isfinite(value))]
        if not len(active):
            break
    return temperature, found


def _next(
    T: FloatArray, value: FloatArray, slope: FloatArray, low: FloatArray, high: FloatArray
) -> FloatArray:
    """The Newton step in 1/T, or the middle of the bracket in 1/T where that leaves it."""
    usable = np.isfinite(value) & (slope > 0.0)
    denominator = np.where(usable, T * slope, 1.0)
    inverse = 1.0 + np.where(usable, value, 0.0) / denominator  # T / T_new
    newton = T / np.clip(inverse, 0.6, 1.6)
    middle = 2.0 * low * high / (low + high)
    inside = usable & (newton > low) & (newton < high)
    return np.where(inside, newton, middle)
