"""How far a vapour is from ideal, and what leaving that out would cost."""

from dataclasses import dataclass

import numpy as np

from groups.arrays import BoolArray, FloatArray
from groups.vapour.virial_vapour import VirialVapour


@dataclass(frozen=True, slots=True)
class Ideality:
    """Deviations of n vapours from an ideal gas, and the cost of neglecting them.

    Attributes
    ----------
    compressibility : array of shape (n,)
        Z on apparent moles.
    ln_fugacity_coefficient : array of shape (n, n_components)
    ln_correction : array of shape (n, n_components)
        ln(phi_i / (phi_i,sat Poynting_i)): what modified Raoult's law leaves out.
    pressure_error : array of shape (n,)
        Relative error of the bubble pressure with an ideal vapour, for this liquid and vapour:
        sum_i y_i exp(correction_i) - 1; positive where the ideal vapour gives too much.
    vapour_error : array of shape (n, n_components)
        Error of the mole fractions of the vapour with an ideal vapour.
    ln_volatility_error : array of shape (n, n_components, n_components)
        Error of ln of the relative volatility of i to j with an ideal vapour.
    within_range : bool array of shape (n,)
        False where the virial equation itself is used beyond its range.
    """

    compressibility: FloatArray
    ln_fugacity_coefficient: FloatArray
    ln_correction: FloatArray
    pressure_error: FloatArray
    vapour_error: FloatArray
    ln_volatility_error: FloatArray
    within_range: BoolArray


def ideality(
    model: VirialVapour, temperature_K: FloatArray, pressure_kPa: FloatArray, vapour: FloatArray
) -> Ideality:
    """Judge vapours at given temperature, pressure and composition.

    Parameters
    ----------
    model : VirialVapour
    temperature_K, pressure_kPa : array of shape (n,)
        K, kPa.
    vapour : array of shape (n, n_components)
        Mole fractions; each row sums to 1.

    Returns
    -------
    Ideality

    Source
    ------
    With y_i P exp(c_i) = x_i gamma_i Psat_i the ideal vapour over the same liquid has partial
    pressures y_i P exp(c_i), so its pressure is P sum y_i exp(c_i) and its ln alpha_ij is larger
    by c_i - c_j.
    """
    correction = model.ln_correction(temperature_K, pressure_kPa, vapour)
    partial = vapour * np.exp(correction)
    ratio = partial.sum(axis=1)
    return Ideality(
        model.compressibility(temperature_K, pressure_kPa, vapour),
        model.ln_fugacity_coefficients(temperature_K, pressure_kPa, vapour),
        correction,
        ratio - 1.0,
        partial / ratio[:, None] - vapour,
        correction[:, :, None] - correction[:, None, :],
        model.within_range(temperature_K, pressure_kPa, vapour),
    )
