"""Feeds at given temperature and pressure, and the Gibbs energy of their amounts in phases.

Fugacities are taken relative to the pressure, so that with mole fractions x of a liquid and y of a
vapour

    ln f_i / P = ln x_i + ln gamma_i + ln(Psat_i / P)   or   ln y_i + correction_i

and the Gibbs energy over RT is, up to a constant, the sum of n_ik ln f_ik over components i and
phases k. Without a vapour the terms ln(Psat_i / P) drop out and only liquids are told apart.
"""

from dataclasses import dataclass

import numpy as np

from groups.arrays import FloatArray, IntArray
from groups.equilibrium.system import LiquidModel, System, VapourModel

#: Relative step for the derivatives of a real vapour's correction: the square root of rounding.
DIFFERENCE = 1e-7


@dataclass(frozen=True, slots=True)
class PhaseProblem:
    """m feeds.

    Attributes
    ----------
    activity : LiquidModel
    vapour : VapourModel or None
        None where only liquids are considered.
    temperature_K, pressure_kPa : array of shape (m,)
    feed : array of shape (m, n_components)
    standard : array of shape (m, n_components)
        ln(Psat_i / P), or zero without a vapour.
    """

    activity: LiquidModel
    vapour: VapourModel | None
    temperature_K: FloatArray
    pressure_kPa: FloatArray
    feed: FloatArray
    standard: FloatArray

    @classmethod
    def of_system(
        cls, system: System, T: FloatArray, P: FloatArray, feed: FloatArray
    ) -> "PhaseProblem":
        """Liquids and a vapour."""
        standard = system.ln_saturation(T) - np.log(P)[:, None]
        return cls(system.activity, system.vapour, T, P, feed, standard)

    @classmethod
    def of_liquid(cls, liquid: LiquidModel, T: FloatArray, feed: FloatArray) -> "PhaseProblem":
        """Liquids alone."""
        return cls(liquid, None, T, np.ones_like(T), feed, np.zeros_like(feed))

    def rows(self, rows: IntArray) -> "PhaseProblem":
        """Some of the feeds."""
        return PhaseProblem(
            self.activity,
            self.vapour,
            self.temperature_K[rows],
            self.pressure_kPa[rows],
            self.feed[rows],
            self.standard[rows],
        )

    def coefficients(self, x: FloatArray, n_liquids: int) -> FloatArray:
        """ln f_i - ln x_i of phases x (m, phases, n_components): liquids first, then a vapour."""
        m, phases, n = x.shape
        T = np.repeat(self.temperature_K, n_liquids)
        answer = np.empty_like(x)
        if n_liquids:
            liquids = x[:, :n_liquids].reshape(-1, n)
            ln_gamma = self.activity.ln_gamma(T, liquids).reshape(m, n_liquids, n)
            answer[:, :n_liquids] = ln_gamma + self.standard[:, None]
        if phases > n_liquids:
            answer[:, n_liquids] = self.vapour_coefficients(x[:, n_liquids])
        return answer

    def vapour_coefficients(self, y: FloatArray) -> FloatArray:
        """ln f_i - ln y_i of vapours (m, n_components)."""
        if self.vapour is None or self.vapour.ideal:
            return np.zeros_like(y)
        return self.vapour.ln_correction(self.temperature_K, self.pressure_kPa, y)

    def derivatives(self, x: FloatArray, n_liquids: int) -> FloatArray:
        """n d(ln f_i - ln x_i)/dn_j, of shape (m, phases, n_components, n_components)."""
        m, phases, n = x.shape
        T = np.repeat(self.temperature_K, n_liquids)
        answer = np.zeros((m, phases, n, n))
        if n_liquids:
            liquids = x[:, :n_liquids].reshape(-1, n)
            slopes = self.activity.ln_gamma_mole_derivatives(T, liquids)
            answer[:, :n_liquids] = slopes.reshape(m, n_liquids, n, n)
        if phases > n_liquids and self.vapour is not None and not self.vapour.ideal:
            answer[:, n_liquids] = self._vapour_derivatives(x[:, n_liquids])
        return answer

    def _vapour_derivatives(self, y: FloatArray) -> FloatArray:
        """By differences, made symmetric as the derivatives of one Gibbs energy are."""
        m, n = y.shape
        moved = (y[:, None, :] + DIFFERENCE * np.eye(n)) / (1.0 + DIFFERENCE)
        T, P = np.repeat(self.temperature_K, n), np.repeat(self.pressure_kPa, n)
        assert self.vapour is not None
        after = self.vapour.ln_correction(T, P, moved.reshape(-1, n)).reshape(m, n, n)
        slope = (after - self.vapour_coefficients(y)[:, None, :]) / DIFFERENCE
        return np.asarray(0.5 * (slope + slope.swapaxes(1, 2)))
