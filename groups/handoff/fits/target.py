"""What a pair is fitted to: ln gamma over a grid of temperature and composition."""

from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from groups.arrays import BoolArray, FloatArray
from groups.equilibrium import LiquidModel
from groups.errors import OutOfRangeError, ShapeError

TEMPERATURES = 5
COMPOSITIONS = 41
SIGMA_LN_GAMMA = 0.1
"""Standard deviation of ln gamma where none is given: equal weights; the size does not matter to
the parameters, only to the covariance."""


@dataclass(frozen=True, slots=True)
class PairTarget:
    """ln gamma of a binary over a grid.

    Attributes
    ----------
    temperature_K : FloatArray of shape (t,)
    x1 : FloatArray of shape (m,)
        From 0 to 1, both ends included: they hold the values at infinite dilution.
    ln_gamma, sigma : FloatArray of shape (t, m, 2)
    """

    temperature_K: FloatArray
    x1: FloatArray
    ln_gamma: FloatArray
    sigma: FloatArray

    @property
    def fractions(self) -> FloatArray:
        """Mole fractions of shape (m, 2)."""
        return np.stack([self.x1, 1.0 - self.x1], axis=-1)

    @property
    def counted(self) -> BoolArray:
        """Values that say something, of shape (m, 2): a pure component's ln gamma is zero."""
        return self.fractions < 1.0

    @property
    def infinite(self) -> FloatArray:
        """ln gamma at infinite dilution of shape (t, 2)."""
        return np.stack([self.ln_gamma[:, 0, 0], self.ln_gamma[:, -1, 1]], axis=-1)


def fit_grid(
    temperature_range_K: tuple[float, float],
    temperatures: int = TEMPERATURES,
    compositions: int = COMPOSITIONS,
) -> tuple[FloatArray, FloatArray]:
    """Temperatures and mole fractions of a fit.

    Parameters
    ----------
    temperature_range_K : tuple of float
        Lowest and highest, K; equal for one temperature.
    temperatures : int
        1 to 51; equal steps.
    compositions : int
        5 to 401; equal steps of x1 from 0 to 1.

    Returns
    -------
    tuple of FloatArray
        Of shapes (t,) and (m,).

    Raises
    ------
    OutOfRangeError
    """
    low, high = temperature_range_K
    if not 1 <= temperatures <= 51:
        raise OutOfRangeError("temperatures", temperatures, 1, 51)
    if not 5 <= compositions <= 401:
        raise OutOfRangeError("compositions", compositions, 5, 401)
    if not 100.0 <= low <= high <= 1000.0:
        wrong = low if not 100.0 <= low <= 1000.0 else high
        raise OutOfRangeError("temperature_range_K", wrong, 100.0, 1000.0)
    T = np.array([low]) if low == high else np.linspace(low, high, temperatures)
    return T, np.linspace(0.0, 1.0, compositions)


def pair_target(
    liquid: LiquidModel,
    temperature_K: npt.ArrayLike,
    x1: npt.ArrayLike,
    sigma: npt.ArrayLike = SIGMA_LN_GAMMA,
) -> PairTarget:
    """Evaluate a binary over a grid.

    Parameters
    ----------
    liquid : LiquidModel
        Of two components.
    temperature_K : array_like of shape (t,)
        K.
    x1 : array_like of shape (m,)
        Ascending from 0 to 1.
    sigma : array_like that broadcasts to (t, m, 2)
        Standard deviation of the predicted ln gamma, 1, positive.

    Returns
    -------
    PairTarget

    Raises
    ------
    ShapeError
        If the standard deviations do not fit the grid.
    OutOfRangeError
        If one of them is not positive and finite.
    """
    T, x1 = np.asarray(temperature_K, np.float64), np.asarray(x1, np.float64)
    x = np.stack([x1, 1.0 - x1], axis=-1)
    return target_of(T, x1, np.asarray(liquid.ln_gamma(T[:, None], x)), sigma)


def target_of(
    temperature_K: FloatArray, x1: FloatArray, ln_gamma: FloatArray, sigma: npt.ArrayLike
) -> PairTarget:
    """A target of values at hand, with its standard deviations checked."""
    given = np.asarray(sigma, dtype=np.float64)
    try:
        every = np.array(np.broadcast_to(given, ln_gamma.shape))
    except ValueError as error:
        raise ShapeError(
            f"Standard deviations of shape {given.shape} do not fit {ln_gamma.shape}.",
            cure="Give one number, or an array over temperatures, compositions and components.",
            field="sigma",
        ) from error
    wrong = ~((every > 0.0) & (every < np.inf))
    if wrong.any():
        raise OutOfRangeError("sigma", float(every[wrong][0]), 0.0, np.inf)
    return PairTarget(temperature_K, x1, ln_gamma, every)
