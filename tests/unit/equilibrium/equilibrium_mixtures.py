"""Small exact models for the tests of phase equilibrium: Margules liquids over Antoine lines."""

from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from groups.arrays import FloatArray
from groups.equilibrium import System


@dataclass(frozen=True)
class Antoine:
    """ln P/kPa = A - B/(T + C), T in K (the natural-logarithm form of the textbooks)."""

    A: float
    B: float
    C: float
    critical_temperature_K: float | None = None

    def ln_kPa(self, temperature_K: npt.ArrayLike) -> FloatArray:
        return np.asarray(self.A - self.B / (np.asarray(temperature_K, dtype=float) + self.C))

    def slope(self, temperature_K: npt.ArrayLike) -> FloatArray:
        return np.asarray(self.B / (np.asarray(temperature_K, dtype=float) + self.C) ** 2)


@dataclass(frozen=True)
class Regular:
    """gE/RT = sum_{i<j} A_ij x_i x_j * (T0/T)^power: symmetric Margules of any number."""

    A: FloatArray
    reference_K: float = 350.0
    power: float = 0.0

    @property
    def n_components(self) -> int:
        return len(self.A)

    def _scale(self, temperature_K: npt.ArrayLike) -> FloatArray:
        return np.asarray((self.reference_K / np.asarray(temperature_K, float)) ** self.power)

    def _plain(self, mole_fractions: npt.ArrayLike) -> FloatArray:
        x = np.asarray(mole_fractions, dtype=float)
        Ax = x @ self.A
        return Ax - 0.5 * (x * Ax).sum(axis=-1, keepdims=True)

    def ln_gamma(self, temperature_K: npt.ArrayLike, mole_fractions: npt.ArrayLike) -> FloatArray:
        return self._plain(mole_fractions) * self._scale(temperature_K)[..., None]

    def ln_gamma_slope(
        self, temperature_K: npt.ArrayLike, mole_fractions: npt.ArrayLike
    ) -> FloatArray:
        T = np.asarray(temperature_K, dtype=float)[..., None]
        return self.ln_gamma(temperature_K, mole_fractions) * (-self.power / T)

    def ln_gamma_mole_derivatives(
        self, temperature_K: npt.ArrayLike, mole_fractions: npt.ArrayLike
    ) -> FloatArray:
        x = np.asarray(mole_fractions, dtype=float)
        Ax = x @ self.A
        total = (x * Ax).sum(axis=-1)[..., None, None]
        plain = self.A - Ax[..., :, None] - Ax[..., None, :] + total
        return plain * self._scale(temperature_K)[..., None, None]


@dataclass(frozen=True)
class Margules:
    """Two-parameter Margules binary: gE/RT = x1 x2 (A21 x1 + A12 x2)."""

    A12: float
    A21: float
    n_components: int = 2

    def ln_gamma(self, temperature_K: npt.ArrayLike, mole_fractions: npt.ArrayLike) -> FloatArray:
        x = np.asarray(mole_fractions, dtype=float)
        x1, x2 = x[..., 0], x[..., 1]
        first = x2**2 * (self.A12 + 2.0 * (self.A21 - self.A12) * x1)
        second = x1**2 * (self.A21 + 2.0 * (self.A12 - self.A21) * x2)
        plain = np.stack([first, second], axis=-1)
        return plain + 0.0 * np.asarray(temperature_K, dtype=float)[..., None]

    def ln_gamma_slope(
        self, temperature_K: npt.ArrayLike, mole_fractions: npt.ArrayLike
    ) -> FloatArray:
        return np.zeros_like(self.ln_gamma(temperature_K, mole_fractions))

    def ln_gamma_mole_derivatives(
        self, temperature_K: npt.ArrayLike, mole_fractions: npt.ArrayLike
    ) -> FloatArray:
        x = np.asarray(mole_fractions, dtype=float)
        x1, x2 = x[..., 0], x[..., 1]
        D = self.A21 - self.A12
        # d2(gE/RT)/dx1^2; then n d ln gamma_i/dn_j is that times (x2, -x1) on both sides.
        second = -2.0 * (self.A12 + 2.0 * D * x1) + 2.0 * D * x2
        ends = np.stack([x2, -x1], axis=-1)
        plain = second[..., None, None] * ends[..., :, None] * ends[..., None, :]
        return plain + 0.0 * np.asarray(temperature_K, dtype=float)[..., None, None]


# Antoine constants, Smith, Van Ness & Abbott (2005), appendix B.2 (log10-free form, P in kPa,
# t in deg C), shifted here to kelvin. From memory; the tests use them as smooth lines only.
ACETONE = Antoine(14.3145, 2756.22, 228.060 - 273.15)
METHANOL = Antoine(16.5785, 3638.27, 239.500 - 273.15)
WATER = Antoine(16.3872, 3885.70, 230.170 - 273.15)
ETHANOL = Antoine(16.8958, 3795.17, 230.918 - 273.15)
BENZENE = Antoine(13.7819, 2726.81, 217.572 - 273.15)
TOLUENE = Antoine(13.9320, 3056.96, 217.625 - 273.15)
LINES = (ACETONE, METHANOL, WATER, ETHANOL, BENZENE, TOLUENE)


def regular_system(*pairs: float, lines: tuple[Antoine, ...] = LINES, power: float = 0.0) -> System:
    """A regular mixture; `pairs` are A_01, A_02, ..., A_12, ... in order."""
    n = next(k for k in range(1, 10) if k * (k - 1) // 2 == len(pairs))
    A = np.zeros((n, n))
    A[np.triu_indices(n, 1)] = pairs
    return System(Regular(A + A.T, power=power), lines[:n])
