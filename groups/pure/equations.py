"""The published forms of the vapour-pressure curve, with their slopes, for whole arrays.

Every equation answers ln(P / kPa) and its exact derivative with respect to temperature. None of
them guards its range: that is the work of `saturation.VapourPressure`, which never evaluates an
equation outside it.
"""

from dataclasses import dataclass
from typing import Protocol

import numpy as np

from groups.arrays import FloatArray

LN_10 = float(np.log(10.0))
LN_PA_PER_KPA = float(np.log(1000.0))


class SaturationEquation(Protocol):
    """A vapour-pressure curve within its own range."""

    def ln_kPa(self, temperature_K: FloatArray) -> FloatArray:
        """Natural logarithm of the vapour pressure in kPa."""

    def slope(self, temperature_K: FloatArray) -> FloatArray:
        """Temperature derivative of ln P, 1/K."""


@dataclass(frozen=True, slots=True)
class Antoine:
    """ln(P/kPa) = A - B / (T + C).

    Parameters
    ----------
    A : float
        Natural-logarithm form, pressure in kPa.
    B, C : float
        K.

    Source
    ------
    Antoine, C., C. R. Acad. Sci. 107 (1888) 681, 836.
    """

    A: float
    B: float
    C: float

    def ln_kPa(self, temperature_K: FloatArray) -> FloatArray:
        """Natural logarithm of the vapour pressure in kPa."""
        return self.A - self.B / (temperature_K + self.C)

    def slope(self, temperature_K: FloatArray) -> FloatArray:
        """Temperature derivative of ln P, 1/K."""
        return self.B / (temperature_K + self.C) ** 2


@dataclass(frozen=True, slots=True)
class ExtendedAntoine:
    """log10(P/Pa) = A - B/(T+C) + log10(e) x^n + E x^8 + F x^12, x = max(0, (T - t0)/Tc).

    Parameters
    ----------
    A, B, C : float
        Common-logarithm form, pressure in Pa, temperature in K.
    n, E, F : float
        The added terms, which end smoothly at `start_K`.
    start_K : float
        t0 as an absolute temperature, K.
    critical_temperature_K : float
        K.

    Source
    ------
    Poling, Prausnitz, O'Connell, The Properties of Gases and Liquids, 5th ed. (2001), eq. 7-3.4,
    after the Thermodynamics Research Center.
    """

    A: float
    B: float
    C: float
    n: float
    E: float
    F: float
    start_K: float
    critical_temperature_K: float

    def _reach(self, temperature_K: FloatArray) -> FloatArray:
        return np.maximum(temperature_K - self.start_K, 0.0) / self.critical_temperature_K

    def ln_kPa(self, temperature_K: FloatArray) -> FloatArray:
        """Natural logarithm of the vapour pressure in kPa."""
        x = self._reach(temperature_K)
        log10_Pa = self.A - self.B / (temperature_K + self.C) + self.E * x**8 + self.F * x**12
        return LN_10 * log10_Pa + x**self.n - LN_PA_PER_KPA

    def slope(self, temperature_K: FloatArray) -> FloatArray:
        """Temperature derivative of ln P, 1/K."""
        x = self._reach(temperature_K)
        added = self.n * x ** (self.n - 1.0) + LN_10 * (8.0 * self.E * x**7 + 12.0 * self.F * x**11)
        return LN_10 * self.B / (temperature_K + self.C) ** 2 + added / self.critical_temperature_K


@dataclass(frozen=True, slots=True)
class Wagner:
    """ln(P/Pc) = (Tc/T) sum_k c_k tau^e_k with tau = 1 - T/Tc.

    Parameters
    ----------
    coefficients, exponents : tuple of float
        c_k and e_k. The exponents 1, 1.5, 3, 6 are Wagner's original form, 1, 1.5, 2.5, 5 the
        later one; the water equation of IAPWS has six terms.
    critical_temperature_K, critical_pressure_kPa : float
        The pair that belongs to the coefficients.

    Source
    ------
    Wagner, W., Cryogenics 13 (1973) 470; Ambrose, D., J. Chem. Thermodyn. 18 (1986) 45.
    """

    coefficients: tuple[float, ...]
    exponents: tuple[float, ...]
    critical_temperature_K: float
    critical_pressure_kPa: float

    def _sums(self, temperature_K: FloatArray) -> tuple[FloatArray, FloatArray]:
        """The sum and its derivative with respect to tau."""
        tau = np.maximum(1.0 - temperature_K / self.critical_temperature_K, 0.0)
        total, derivative = np.zeros_like(tau), np.zeros_like(tau)
        for c, e in zip(self.coefficients, self.exponents, strict=True):
            total += c * tau**e
            derivative += c * e * tau ** (e - 1.0)
        return total, derivative

    def ln_kPa(self, temperature_K: FloatArray) -> FloatArray:
        """Natural logarithm of the vapour pressure in kPa."""
        total, _ = self._sums(temperature_K)
        reduced = temperature_K / self.critical_temperature_K
        return float(np.log(self.critical_pressure_kPa)) + total / reduced

    def slope(self, temperature_K: FloatArray) -> FloatArray:
        """Temperature derivative of ln P, 1/K."""
        total, derivative = self._sums(temperature_K)
        reduced = temperature_K / self.critical_temperature_K
        return -(derivative + total / reduced) / temperature_K


@dataclass(frozen=True, slots=True)
class Dippr101:
    """ln(P/kPa) = C1 + C2/T + C3 ln T + C4 T^C5.

    Parameters
    ----------
    C1, C2, C3, C4, C5 : float
        Pressure in kPa, temperature in K.

    Source
    ------
    Design Institute for Physical Properties, equation 101, as printed in Perry's Chemical
    Engineers' Handbook, 8th ed. (2007), table 2-8.
    """

    C1: float
    C2: float
    C3: float
    C4: float
    C5: float

    def ln_kPa(self, temperature_K: FloatArray) -> FloatArray:
        """Natural logarithm of the vapour pressure in kPa."""
        T = temperature_K
        return self.C1 + self.C2 / T + self.C3 * np.log(T) + self.C4 * T**self.C5

    def slope(self, temperature_K: FloatArray) -> FloatArray:
        """Temperature derivative of ln P, 1/K."""
        T = temperature_K
        return -self.C2 / T**2 + self.C3 / T + self.C4 * self.C5 * T ** (self.C5 - 1.0)
