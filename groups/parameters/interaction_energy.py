"""The interaction energy of two main groups against temperature, as the audit looks at it."""

import numpy as np
from numpy.typing import ArrayLike

from groups.arrays import FloatArray
from groups.parameters.method_table import MethodTable
from groups.parameters.record import PsiForm

REFERENCE_T_K = 298.15  # T0 of Larsen et al. (1987)


def interaction_energy_K(
    psi: PsiForm, a: FloatArray, b: FloatArray, c: FloatArray, temperature_K: ArrayLike
) -> FloatArray:
    """Effective interaction parameter, -T ln(psi), in kelvin.

    Parameters
    ----------
    psi : {"constant", "quadratic", "logarithmic"}
        Form of the temperature function.
    a, b, c : FloatArray of shape (n, n)
        Parameters of one table.
    temperature_K : array_like of shape (n_temperatures,)
        Temperatures, K, positive.

    Returns
    -------
    FloatArray of shape (n_temperatures, n, n)
        a_ij(T), K: the energy of i with j beyond that of j with itself, divided by R. NaN where
        a pair is not published.

    Source
    ------
    Fredenslund et al. (1975), psi = exp(-a/T); Weidlich and Gmehling (1987), psi =
    exp(-(a + bT + cT^2)/T); Larsen et al. (1987), a + b(T - T0) + c(T ln(T0/T) + T - T0).
    """
    T = np.asarray(temperature_K, dtype=np.float64)[:, None, None]
    if psi == "logarithmic":
        from_reference = T - REFERENCE_T_K
        energy = a + b * from_reference + c * (T * np.log(REFERENCE_T_K / T) + from_reference)
    else:
        energy = a + b * T + c * T**2
    return np.asarray(energy, dtype=np.float64)


def dilute_group_ln_gamma(energy_K: FloatArray, temperature_K: ArrayLike) -> FloatArray:
    """ln Gamma of one group alone among groups of another kind, per unit of its surface Q.

    Parameters
    ----------
    energy_K : FloatArray of shape (n_temperatures, n, n)
        Result of `interaction_energy_K`.
    temperature_K : array_like of shape (n_temperatures,)
        The same temperatures, K.

    Returns
    -------
    FloatArray of shape (n_temperatures, n, n)
        Row i, column j: 1 - ln(psi_ji) - psi_ij, for group i infinitely dilute in j. This, not a
        single parameter, is what a pair does: errors of a_ij and a_ji can cancel.

    Source
    ------
    Limit of the residual part of UNIFAC for surface fractions 0 and 1 (Fredenslund et al. 1975,
    equation for ln Gamma_k).
    """
    T = np.asarray(temperature_K, dtype=np.float64)[:, None, None]
    ln_psi = -energy_K / T
    # exp(50) already ends any comparison; the cap only avoids overflow of absurd entries.
    psi = np.exp(np.minimum(ln_psi, 50.0))
    return np.asarray(1.0 - np.swapaxes(ln_psi, 1, 2) - psi, dtype=np.float64)


def table_energy_K(published: MethodTable, temperature_K: ArrayLike) -> FloatArray:
    """`interaction_energy_K` of a whole table.

    Parameters
    ----------
    published : MethodTable
        The table.
    temperature_K : array_like of shape (n_temperatures,)
        Temperatures, K.

    Returns
    -------
    FloatArray of shape (n_temperatures, n_main, n_main)
        a_ij(T), K.
    """
    return interaction_energy_K(published.psi, published.a, published.b, published.c, temperature_K)
