"""Checks of what a calculation is asked for, before it starts."""

import numpy as np
import numpy.typing as npt

from groups.arrays import FloatArray
from groups.errors import FractionSumError, OutOfRangeError, ShapeError

#: Searches for a temperature stay within these bounds: no liquid mixture of molecules that the
#: group-contribution tables describe exists outside, and exp(-a/T) stays finite inside.
LOWEST_K = 40.0
HIGHEST_K = 2000.0
#: Bounds of a pressure that may be asked for; far wider than any use of these equations.
LOWEST_KPA = 1e-9
HIGHEST_KPA = 1e6
#: How far a sum of mole fractions may lie from one: the rounding of six printed digits.
SUM_TOLERANCE = 1e-6


def checked_temperature(temperature_K: npt.ArrayLike) -> FloatArray:
    """The temperatures as an array of shape (n,); OutOfRangeError where absurd."""
    return _checked("temperature_K", temperature_K, LOWEST_K, HIGHEST_K)


def checked_pressure(pressure_kPa: npt.ArrayLike) -> FloatArray:
    """The pressures as an array of shape (n,); OutOfRangeError where absurd."""
    return _checked("pressure_kPa", pressure_kPa, LOWEST_KPA, HIGHEST_KPA)


def checked_fractions(mole_fractions: npt.ArrayLike, n_components: int) -> FloatArray:
    """The compositions as an array of shape (n, n_components) whose rows sum to one."""
    fractions = np.atleast_2d(np.asarray(mole_fractions, dtype=np.float64))
    if fractions.ndim != 2 or fractions.shape[1] != n_components:
        raise ShapeError(
            f"The mole fractions must have {n_components} columns, one for each component. "
            f"Got an array of shape {fractions.shape} instead.",
            cure="Give one mole fraction for each component.",
            field="mole_fractions",
        )
    outside = ~((fractions >= 0.0) & (fractions <= 1.0 + SUM_TOLERANCE))
    if outside.any():
        raise OutOfRangeError("mole_fractions", float(fractions[outside][0]), 0.0, 1.0)
    total = fractions.sum(axis=1)
    wrong = np.abs(total - 1.0) > SUM_TOLERANCE
    if wrong.any():
        raise FractionSumError(float(total[wrong][0]), field="mole_fractions")
    return np.asarray(fractions / total[:, None])


def paired(values: FloatArray, fractions: FloatArray) -> tuple[FloatArray, FloatArray]:
    """One temperature or pressure for each composition; either may be a single one."""
    if 1 not in (len(values), len(fractions)) and len(values) != len(fractions):
        raise ShapeError(
            f"There are {len(values)} conditions for {len(fractions)} compositions.",
            cure="Give as many conditions as compositions, or one of either.",
        )
    n = max(len(values), len(fractions)) if min(len(values), len(fractions)) else 0
    columns = fractions.shape[1]
    return (
        np.ascontiguousarray(np.broadcast_to(values, (n,))),
        np.ascontiguousarray(np.broadcast_to(fractions, (n, columns))),
    )


def _checked(name: str, values: npt.ArrayLike, lower: float, upper: float) -> FloatArray:
    array = np.atleast_1d(np.asarray(values, dtype=np.float64))
    if array.ndim != 1:
        raise ShapeError(
            f"The '{name}' must be a number or a list. Got an array of shape {array.shape}.",
            cure="Give a flat list.",
            field=name,
        )
    outside = ~((array >= lower) & (array <= upper))
    if outside.any():
        raise OutOfRangeError(name, float(array[outside][0]), lower, upper)
    return array
