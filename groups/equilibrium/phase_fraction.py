"""How much of a mixture is in a phase, from distribution coefficients."""

import numpy as np

from groups.arrays import BoolArray, FloatArray

MAX_ITERATIONS = 80


def phase_fraction(
    z: FloatArray, ln_k: FloatArray, tolerance: float = 4e-16
) -> tuple[FloatArray, BoolArray]:
    """Solve sum_i z_i (K_i - 1)/(1 + b (K_i - 1)) = 0 for b between 0 and 1.

    Parameters
    ----------
    z : array of shape (m, n_components)
        Overall mole fractions.
    ln_k : array of shape (m, n_components)
        ln of the ratio of mole fractions, phase sought over the other; at most 300 in size.
    tolerance : float
        Relative change of the fraction at which the search ends.

    Returns
    -------
    fraction : array of shape (m,)
        0 or 1 where the mixture is one phase with these coefficients.
    inside : bool array of shape (m,)
        True where both phases are present.

    Source
    ------
    Rachford & Rice, J. Petrol. Technol. 4 (1952) 19. The function falls with b, so a bracketed
    Newton search cannot fail.
    """
    excess = np.expm1(ln_k)
    at_zero = (z * excess).sum(axis=1)
    # At b = 1 the sum is sum z (1 - 1/K).
    at_one = -(z * np.expm1(-ln_k)).sum(axis=1)
    inside = (at_zero > 0.0) & (at_one < 0.0)
    low, high = np.zeros(len(z)), np.ones(len(z))
    b = np.where(inside, 0.5, np.where(at_zero <= 0.0, 0.0, 1.0))
    rows = np.flatnonzero(inside)
    for _ in range(MAX_ITERATIONS):
        if not len(rows):
            break
        weight = excess[rows] / (1.0 + b[rows, None] * excess[rows])
        value = (z[rows] * weight).sum(axis=1)
        slope = -(z[rows] * weight**2).sum(axis=1)
        low[rows] = np.where(value > 0.0, b[rows], low[rows])
        high[rows] = np.where(value > 0.0, high[rows], b[rows])
        newton = b[rows] - value / slope
        good = (newton >= low[rows]) & (newton <= high[rows])
        new = np.where(good, newton, 0.5 * (low[rows] + high[rows]))
        small = np.abs(new - b[rows]) <= 1e-16 + tolerance * b[rows]
        b[rows] = new
        rows = rows[~(small | (value == 0.0))]
    return b, inside
