"""One line of binary compositions, and where a common tangent touches its energy of mixing.

The line is evenly spaced in ln(x1/x2), so that nothing hides at the dilute ends. Many curves are
treated at once.
"""

import numpy as np

from groups.arrays import FloatArray, IntArray

GRID = 1.0 / (1.0 + np.exp(-np.linspace(-16.0, 16.0, 513)))  # x1 from 1.1e-7 to 1 - 1.1e-7
BISECTIONS = 36  # of a slope that spans some 40 ln units: to 1e-9


def coexisting(difference: FloatArray, inside: IntArray) -> tuple[IntArray, IntArray]:
    """Places on `GRID` of the two liquids whose common tangent spans a given place.

    The energy of mixing is the integral of ln(a1/a2) over x1. The line of slope s that touches it
    from below does so at the left liquid while s is too small and at the right one while it is
    too large; bisection finds the slope at which it jumps over the place.

    Parameters
    ----------
    difference : FloatArray of shape (n, n_grid)
        ln(a1/a2) of each curve.
    inside : IntArray of shape (n,)
        The place on each that is to be spanned.

    Returns
    -------
    tuple of IntArray of shape (n,)
        Left and right; neighbours on the grid where the place lies in no gap.

    Source
    ------
    Gibbs' common tangent, for instance Prausnitz, Lichtenthaler & Gomes de Azevedo (1999),
    chapter 6 (from memory).
    """
    pieces = (difference[:, 1:] + difference[:, :-1]) / 2.0 * np.diff(GRID)
    energy = np.concatenate([np.zeros((len(pieces), 1)), np.cumsum(pieces, axis=1)], axis=1)
    low, high = difference.min(axis=1), difference.max(axis=1)
    left = np.zeros(len(energy), dtype=np.int64)
    right = np.full(len(energy), len(GRID) - 1, dtype=np.int64)
    for _ in range(BISECTIONS):
        slope = (low + high) / 2.0
        touches = (energy - slope[:, None] * GRID).argmin(axis=1)
        before = touches <= inside
        low, high = np.where(before, slope, low), np.where(before, high, slope)
        left, right = np.where(before, touches, left), np.where(before, right, touches)
    return left, right
