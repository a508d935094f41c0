"""Excess properties of a liquid out of any activity model, and its infinite-dilution limits."""

import numpy as np
from numpy.typing import ArrayLike

from groups.activity.model import ActivityModel
from groups.arrays import FloatArray

GAS_CONSTANT_J_MOL_K = 8.31446261815324  # exact since the 2019 SI


def excess_gibbs(
    model: ActivityModel, temperature_K: ArrayLike, mole_fractions: ArrayLike
) -> FloatArray:
    """Return the molar excess Gibbs energy over RT.

    Parameters
    ----------
    model : ActivityModel
        Any liquid model.
    temperature_K : array_like
        Temperatures, K, positive; broadcasts against `mole_fractions[..., 0]`.
    mole_fractions : array_like of shape (..., n_components)
        Mole fractions, 0 to 1.

    Returns
    -------
    FloatArray of shape (...)
        gE/RT = sum_i x_i ln gamma_i, 1.

    Raises
    ------
    ShapeError, OutOfRangeError, FractionSumError
        For points that are no states of this mixture.

    Source
    ------
    Definition; Smith, Van Ness & Abbott, Introduction to Chemical Engineering Thermodynamics.
    """
    return _mole_sum(model.ln_gamma(temperature_K, mole_fractions), mole_fractions)


def excess_enthalpy(
    model: ActivityModel, temperature_K: ArrayLike, mole_fractions: ArrayLike
) -> FloatArray:
    """Return the molar excess enthalpy, from the analytic temperature slope of ln gamma.

    Parameters
    ----------
    model, temperature_K, mole_fractions
        As for `excess_gibbs`.

    Returns
    -------
    FloatArray of shape (...)
        hE = -R T^2 sum_i x_i d ln gamma_i / dT, J/mol.

    Raises
    ------
    ShapeError, OutOfRangeError, FractionSumError
        For points that are no states of this mixture.

    Source
    ------
    The Gibbs-Helmholtz equation.
    """
    T = np.asarray(temperature_K, dtype=np.float64)
    slope = _mole_sum(model.ln_gamma_slope(T, mole_fractions), mole_fractions)
    enthalpy: FloatArray = -GAS_CONSTANT_J_MOL_K * T**2 * slope
    return enthalpy


def excess_heat_capacity(
    model: ActivityModel, temperature_K: ArrayLike, mole_fractions: ArrayLike
) -> FloatArray:
    """Return the molar excess heat capacity, the analytic temperature derivative of hE.

    Parameters
    ----------
    model, temperature_K, mole_fractions
        As for `excess_gibbs`.

    Returns
    -------
    FloatArray of shape (...)
        cpE = -R sum_i x_i (2 T d ln gamma_i / dT + T^2 d2 ln gamma_i / dT2), J/(mol K).

    Raises
    ------
    ShapeError, OutOfRangeError, FractionSumError
        For points that are no states of this mixture.

    Source
    ------
    The Gibbs-Helmholtz equation, differentiated once more at constant composition.
    """
    T = np.asarray(temperature_K, dtype=np.float64)
    slope = _mole_sum(model.ln_gamma_slope(T, mole_fractions), mole_fractions)
    curvature = _mole_sum(model.ln_gamma_curvature(T, mole_fractions), mole_fractions)
    heat_capacity: FloatArray = -GAS_CONSTANT_J_MOL_K * T * (2.0 * slope + T * curvature)
    return heat_capacity


def ln_gamma_infinite(model: ActivityModel, temperature_K: ArrayLike) -> FloatArray:
    """Return ln gamma of every component at infinite dilution in every other.

    Parameters
    ----------
    model : ActivityModel
        Any liquid model.
    temperature_K : array_like of shape (...)
        Temperatures, K, positive.

    Returns
    -------
    FloatArray of shape (..., n_components, n_components)
        Element [i, j]: solute i at infinite dilution in pure solvent j, 1; 0 where i = j.

    Raises
    ------
    OutOfRangeError
        For a temperature that is not positive.
    """
    T = np.asarray(temperature_K, dtype=np.float64)
    in_solvent = model.ln_gamma(T[..., None], np.eye(model.n_components))
    return in_solvent.swapaxes(-1, -2)


def _mole_sum(values: FloatArray, mole_fractions: ArrayLike) -> FloatArray:
    total: FloatArray = np.einsum("...i,...i->...", np.asarray(mole_fractions, dtype=float), values)
    return total
