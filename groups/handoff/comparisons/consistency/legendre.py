"""A flexible excess Gibbs energy: Legendre polynomials, fitted to boiling points.

    gE/RT = x1 x2 sum_k a_k L_k(2 x1 - 1)

It has no physics that could force data into a shape; what it cannot follow is scatter or a slip.
At constant pressure the coefficients are taken as constant over the boiling range, so the excess
enthalpy is neglected, as is usual for these tests.

Source: Fredenslund, Gmehling & Rasmussen, Vapor-Liquid Equilibria Using UNIFAC (1977), chapter 2.
"""

from dataclasses import dataclass

import numpy as np
from numpy.polynomial import legendre

from groups.arrays import FloatArray, IntArray
from groups.handoff.comparisons.observations import Observations
from groups.handoff.comparisons.regression import akaike
from groups.handoff.fits.least_squares import solve

MOST_TERMS = 5


@dataclass(frozen=True, slots=True)
class FlexibleFit:
    """A fitted Legendre expansion.

    Attributes
    ----------
    coefficients : FloatArray of shape (k,)
    ln_pressure, y1 : FloatArray of shape (n,)
        Calculated at the measured temperatures.
    standardised : FloatArray of shape (n,)
        (ln P calculated - measured) / sigma.
    """

    coefficients: FloatArray
    ln_pressure: FloatArray
    y1: FloatArray
    standardised: FloatArray


def design(x1: FloatArray, terms: int) -> tuple[FloatArray, FloatArray]:
    """d ln gamma_1 / d a_k and d ln gamma_2 / d a_k, each of shape (n, terms)."""
    z = 2.0 * x1 - 1.0
    g, slope = np.empty((len(x1), terms)), np.empty((len(x1), terms))
    for k in range(terms):
        series = np.eye(terms)[k]
        value, derivative = legendre.legval(z, series), legendre.legval(z, legendre.legder(series))
        g[:, k] = x1 * (1.0 - x1) * value
        slope[:, k] = (1.0 - 2.0 * x1) * value + 2.0 * x1 * (1.0 - x1) * derivative
    return g + (1.0 - x1)[:, None] * slope, g - x1[:, None] * slope


def flexible_fit(seen: Observations, *, with_vapour: bool, most: int = MOST_TERMS) -> FlexibleFit:
    """Fit the expansion to the boiling points; the number of terms by AICc.

    Parameters
    ----------
    seen : Observations
        At least one boiling point.
    with_vapour : bool
        True to fit pressure and vapour together, False for the pressure alone.
    most : int
        Largest number of terms.

    Returns
    -------
    FlexibleFit
    """
    inner = int(((seen.fractions[: seen.boiling] > 0.0).all(axis=1)).sum())
    most = max(1, min(most, inner - 3))
    rows: IntArray = np.flatnonzero(seen.quantity <= (1 if with_vapour else 0)).astype(np.int64)
    best: tuple[float, FloatArray] | None = None
    start = np.zeros(1)
    for terms in range(1, most + 1):
        start = np.concatenate([start[:terms], np.zeros(terms - len(start[:terms]))])
        found = solve(_Residuals(seen, terms, rows), [start])
        start = found.parameters
        score = akaike(2.0 * found.cost, len(rows), terms)
        if best is None or score < best[0]:
            best = score, found.parameters
    assert best is not None
    return _evaluated(seen, best[1])


def _evaluated(seen: Observations, a: FloatArray) -> FlexibleFit:
    first, second = design(seen.fractions[: seen.boiling, 0], len(a))
    ln_P, y1 = seen.boil(np.stack([first @ a, second @ a], axis=-1))
    return FlexibleFit(a, ln_P, y1, (ln_P - seen.ln_pressure) / seen.sigma_ln_pressure)


class _Residuals:
    """Weighted residuals of pressure (and vapour) with their derivatives."""

    def __init__(self, seen: Observations, terms: int, rows: IntArray) -> None:
        self.seen, self.rows = seen, rows
        first, second = design(seen.fractions[: seen.boiling, 0], terms)
        self.slopes = np.stack([first, second], axis=1)

    def __call__(self, a: FloatArray) -> tuple[FloatArray, FloatArray]:
        seen = self.seen
        ln_gamma = self.slopes @ a
        ln_P, y1 = seen.boil(ln_gamma)
        some, y = seen.with_vapour, np.stack([y1, 1.0 - y1], axis=-1)
        pressure = (ln_P - seen.ln_pressure) / seen.sigma_ln_pressure
        vapour = (y1[some] - seen.y1[some]) / seen.sigma_y1[some]
        slope_P = (y[:, :, None] * self.slopes).sum(axis=1) / seen.sigma_ln_pressure[:, None]
        twisted = (self.slopes[:, 0] - self.slopes[:, 1]) * (y[:, 0] * y[:, 1])[:, None]
        slope_y = twisted[some] / seen.sigma_y1[some, None]
        r, J = np.concatenate([pressure, vapour]), np.concatenate([slope_P, slope_y])
        return r[self.rows], J[self.rows]
