"""Measured points of vapour pressure, and the equation fitted to them."""

from dataclasses import dataclass

import numpy as np

from groups.arrays import FloatArray
from groups.errors import InvalidInputError
from groups.pure.equations import Antoine
from groups.pure.saturation import VapourPressure

SMALLEST_UNCERTAINTY_LN = 0.01
"""Never less for data of a caller, however well they fit; common practice, no source."""

_FIVE_POINTS = 5
_LARGEST_MISS_LN = 0.35
"""A measured point further from the fitted line than this (a factor of 1.4) is taken for a slip."""


@dataclass(frozen=True, slots=True)
class PointsInput:
    """Measured points, fitted.

    Parameters
    ----------
    temperature_K : tuple of float
        K, at least two different ones.
    pressure_kPa : tuple of float
        kPa, one for each temperature.
    """

    temperature_K: tuple[float, ...]
    pressure_kPa: tuple[float, ...]


def fitted_points(given: PointsInput) -> VapourPressure:
    """Fit measured points.

    Parameters
    ----------
    given : PointsInput

    Returns
    -------
    VapourPressure
        ln P = A - B/T through two to four points, the Antoine equation through five or more, by
        least squares in ln P; the scatter is the uncertainty, but at least 0.01.

    Raises
    ------
    InvalidInputError
        Fewer than two temperatures, lists of unequal length, values that are not positive, a
        pressure that falls as the temperature rises, or a point far off the line.
    """
    T, P = _checked_points(given)
    ln_P = np.log(P)
    curve = _least_squares(T, ln_P)
    miss = ln_P - curve.ln_kPa(T)
    worst = int(np.argmax(np.abs(miss)))
    if abs(miss[worst]) > _LARGEST_MISS_LN:
        raise refused(
            f"The point at {T[worst]:g} K, {P[worst]:g} kPa lies a factor of "
            f"{np.exp(abs(miss[worst])):.2f} off the line through all points."
        )
    n_fitted = 3 if T.size >= _FIVE_POINTS else 2
    scatter = float(np.sqrt(np.sum(miss**2) / max(T.size - n_fitted, 1)))
    name = "Antoine" if n_fitted == 3 else "ln P = A - B/T"
    return VapourPressure(
        source="user",
        equation=f"{name}, ln, kPa, K, fitted to {T.size} measured points",
        citation="measured points given by the caller",
        coefficients=(("A", curve.A), ("B", curve.B), ("C", curve.C)),
        range_K=(float(T.min()), float(T.max())),
        curve=curve,
        uncertainty_ln=max(scatter, SMALLEST_UNCERTAINTY_LN),
    )


def _checked_points(given: PointsInput) -> tuple[FloatArray, FloatArray]:
    """The points in order of temperature, each with a higher pressure than the one before."""
    T = np.asarray(given.temperature_K, dtype=np.float64)
    P = np.asarray(given.pressure_kPa, dtype=np.float64)
    if T.shape != P.shape or T.ndim != 1:
        raise refused(f"There are {T.size} temperatures for {P.size} pressures.")
    require_finite(*T, *P)
    if np.any(T <= 0.0) or np.any(P <= 0.0):
        raise refused("Temperatures in K and pressures in kPa must be positive.")
    if np.unique(T).size < 2:
        raise refused("At least two points at different temperatures are needed.")
    order = np.lexsort((P, T))
    T, P = T[order], P[order]
    falls = np.flatnonzero((np.diff(P) <= 0.0) & (np.diff(T) > 0.0))
    if falls.size:
        k = int(falls[0])
        raise refused(
            f"The pressure does not rise with temperature: {P[k]:g} kPa at {T[k]:g} K, then "
            f"{P[k + 1]:g} kPa at {T[k + 1]:g} K."
        )
    return T, P


def _least_squares(T: FloatArray, ln_P: FloatArray) -> Antoine:
    """A and B by linear least squares; C by search between 0 and 40 % of the lowest temperature."""
    if T.size < _FIVE_POINTS or np.unique(T).size < _FIVE_POINTS:
        return _line(T, ln_P, 0.0)[1]
    low, high = -0.4 * float(T.min()), 0.0
    for _ in range(6):  # each round narrows C tenfold
        trials = np.linspace(low, high, 21)
        best = min(trials, key=lambda C: _line(T, ln_P, float(C))[0])
        step = trials[1] - trials[0]
        low, high = max(float(best - step), -0.4 * float(T.min())), min(float(best + step), 0.0)
    return _line(T, ln_P, float(best))[1]


def _line(T: FloatArray, ln_P: FloatArray, C: float) -> tuple[float, Antoine]:
    """Sum of squares and the best Antoine equation for one C."""
    x = -1.0 / (T + C)
    centred = x - x.mean()
    B = float(np.sum(centred * ln_P) / np.sum(centred**2))
    A = float(ln_P.mean() - B * x.mean())
    curve = Antoine(A, B, C)
    return float(np.sum((ln_P - curve.ln_kPa(T)) ** 2)), curve


def require_finite(*values: float) -> None:
    """Refuse NaN and infinity.

    Parameters
    ----------
    *values : float

    Raises
    ------
    InvalidInputError
    """
    if not np.all(np.isfinite(values)):
        raise refused("Every number must be finite.")


def refused(message: str) -> InvalidInputError:
    """The error for a caller's own vapour pressure that cannot be taken.

    Parameters
    ----------
    message : str

    Returns
    -------
    InvalidInputError
    """
    cure = "Check the base of the logarithm, the units of pressure and temperature and the order."
    return InvalidInputError(message, cure=cure, field="vapour_pressure")
