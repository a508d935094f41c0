"""Second virial coefficients of all pairs of a mixture, by the usual combining rules.

    Tc_ij = sqrt(Tc_i Tc_j) (1 - k_ij)          Vc_ij = ((Vc_i^(1/3) + Vc_j^(1/3)) / 2)^3
    Zc_ij = (Zc_i + Zc_j) / 2                   omega_ij = (omega_i + omega_j) / 2
    Pc_ij = Zc_ij R Tc_ij / Vc_ij               k_ij = 1 - sqrt(Vc_i Vc_j) / Vc_ij
    a_ij, b_ij: means of two polar partners, zero where one is not polar

Source: J. M. Prausnitz, R. D. Gunn, AIChE J. 4 (1958) 430; P. L. Chueh, J. M. Prausnitz, AIChE J.
13 (1967) 896 (k_ij from the critical volumes); Tsonopoulos (1974) for a_ij and b_ij; collected in
Poling, Prausnitz, O'Connell, The Properties of Gases and Liquids, 5th ed. (2001), section 5-4.
"""

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from groups.arrays import FloatArray
from groups.vapour.gas_constants import GasConstants
from groups.vapour.second_virial import GAS_CONSTANT_KPA_CM3, second_virial


@dataclass(frozen=True, slots=True)
class PairConstants:
    """Constants of every pair, each of shape (n_components, n_components), symmetric.

    Parameters
    ----------
    critical_temperature_K, critical_pressure_kPa, acentric_factor, polar_a, polar_b : array
    """

    critical_temperature_K: FloatArray
    critical_pressure_kPa: FloatArray
    acentric_factor: FloatArray
    polar_a: FloatArray
    polar_b: FloatArray

    def second_virial(self, temperature_K: FloatArray) -> FloatArray:
        """B_ij in cm3/mol, of shape (n, n_components, n_components)."""
        return second_virial(
            temperature_K[:, None, None],
            self.critical_temperature_K,
            self.critical_pressure_kPa,
            self.acentric_factor,
            self.polar_a,
            self.polar_b,
        )


def pair_constants(components: Sequence[GasConstants]) -> PairConstants:
    """Combine the constants of the components.

    Parameters
    ----------
    components : sequence of GasConstants

    Returns
    -------
    PairConstants

    Source
    ------
    See the head of this module.
    """
    Tc = np.array([c.critical_temperature_K for c in components])
    Pc = np.array([c.critical_pressure_kPa for c in components])
    Vc = np.array([c.critical_volume_cm3_mol for c in components])
    omega = np.array([c.acentric_factor for c in components])
    a = np.array([c.polar.a for c in components])
    b = np.array([c.polar.b for c in components])
    volume = _mean(np.cbrt(Vc)) ** 3
    Tc_pair = np.sqrt(np.outer(Tc, Tc)) * np.sqrt(np.outer(Vc, Vc)) / volume
    Zc = Pc * Vc / (GAS_CONSTANT_KPA_CM3 * Tc)
    Pc_pair = _mean(Zc) * GAS_CONSTANT_KPA_CM3 * Tc_pair / volume
    polar = (a != 0.0) | (b != 0.0)
    both = np.outer(polar, polar)
    return PairConstants(
        Tc_pair,
        Pc_pair,
        _mean(omega),
        np.where(both, _mean(a), 0.0),
        np.where(both, _mean(b), 0.0),
    )


def _mean(values: FloatArray) -> FloatArray:
    return np.asarray(0.5 * (values[:, None] + values[None, :]))
