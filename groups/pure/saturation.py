"""One molecule's vapour pressure: an equation, where it comes from, and how far to believe it."""

from dataclasses import dataclass, field
from typing import Literal

import numpy as np
import numpy.typing as npt

from groups.arrays import BoolArray, FloatArray
from groups.errors import OutOfRangeError
from groups.pure.equations import SaturationEquation

Source = Literal["user", "published", "published boiling point", "estimated"]

NEAR_CRITICAL = 0.90
"""Reduced temperature from which a component is called near-critical.

Common practice, no source.
"""

CONTINUATION_ERROR = 0.025
"""Relative error of the slope d ln P / d(1/T) with which a curve is continued beyond its range.

Measured by `tests/bench/measure_vapour_pressure_estimate.py`.
"""

_MAX_ITERATIONS = 60
_LN_P_TOLERANCE = 1e-12


@dataclass(frozen=True, slots=True)
class VapourPressure:
    """A vapour-pressure curve, monotone at every temperature above zero.

    Within `range_K` it is the equation itself. Outside it is continued straight in ln P against
    1/T with the slope at the edge (Clausius-Clapeyron with a constant enthalpy of vaporisation).

    Parameters
    ----------
    source : str
        "user", "published", "published boiling point" (a measured boiling point with a
        corresponding-states equation) or "estimated" (from structure alone).
    equation, citation : str
        The form in words, and where its numbers come from.
    coefficients : tuple of (name, value)
        As published or fitted, in the unit of the equation's own text.
    range_K : tuple of float
        Lowest and highest temperature for which the equation is evaluated, K.
    curve : SaturationEquation
        The equation itself.
    uncertainty_ln : float
        About one standard deviation of ln P within the range.
    critical_temperature_K, critical_pressure_kPa : float or None
        K and kPa, where known.
    notes : tuple of str
        What else the user of the number should be told.
    """

    source: Source
    equation: str
    citation: str
    coefficients: tuple[tuple[str, float], ...]
    range_K: tuple[float, float]
    curve: SaturationEquation = field(repr=False)
    uncertainty_ln: float
    critical_temperature_K: float | None = None
    critical_pressure_kPa: float | None = None
    notes: tuple[str, ...] = ()

    def ln_kPa(self, temperature_K: npt.ArrayLike) -> FloatArray:
        """Natural logarithm of the vapour pressure in kPa.

        Parameters
        ----------
        temperature_K : array_like, any shape
            K, above 0.

        Returns
        -------
        ndarray, same shape
        """
        T = np.asarray(temperature_K, dtype=np.float64)
        low, high = self.range_K
        if T.size and low <= T.min() and T.max() <= high:
            return self.curve.ln_kPa(T)
        inside = np.clip(T, low, high)
        edges = np.array(self.range_K)
        steepness = self.curve.slope(edges) * edges**2
        beyond = np.where(inside < T, steepness[1], steepness[0])
        continued: FloatArray = self.curve.ln_kPa(inside) + beyond * (1.0 / inside - 1.0 / T)
        return continued

    def slope(self, temperature_K: npt.ArrayLike) -> FloatArray:
        """Temperature derivative of ln P.

        Parameters
        ----------
        temperature_K : array_like, any shape
            K, above 0.

        Returns
        -------
        ndarray, same shape
            1/K, always positive.
        """
        T = np.asarray(temperature_K, dtype=np.float64)
        low, high = self.range_K
        if T.size and low <= T.min() and T.max() <= high:
            return self.curve.slope(T)
        inside = np.clip(T, low, high)
        return self.curve.slope(inside) * (inside / T) ** 2

    def kPa(self, temperature_K: npt.ArrayLike) -> FloatArray:
        """Vapour pressure.

        Parameters
        ----------
        temperature_K : array_like, any shape
            K, above 0.

        Returns
        -------
        ndarray, same shape
            kPa.
        """
        return np.exp(self.ln_kPa(temperature_K))

    def boiling_temperature(self, pressure_kPa: float) -> float:
        """Temperature at which the vapour pressure equals the pressure given.

        Parameters
        ----------
        pressure_kPa : float
            kPa, above 0.

        Returns
        -------
        float
            K. It may lie outside the range or above the critical temperature: see `extrapolated`
            and `supercritical`.

        Raises
        ------
        OutOfRangeError
            The pressure is not positive, or higher than the continued curve ever reaches.
        """
        temperature = float(self.inverse(pressure_kPa))
        if np.isnan(temperature):
            raise OutOfRangeError("pressure_kPa", pressure_kPa, 0.0, self._highest_kPa())
        return temperature

    def inverse(self, pressure_kPa: npt.ArrayLike) -> FloatArray:
        """Boiling temperatures of many pressures at once.

        Parameters
        ----------
        pressure_kPa : array_like, any shape
            kPa.

        Returns
        -------
        ndarray, same shape
            K; NaN where the pressure is not positive or beyond the reach of the curve.
        """
        pressure = np.asarray(pressure_kPa, dtype=np.float64)
        valid = (pressure > 0.0) & np.isfinite(pressure)
        target = np.log(np.where(valid, pressure, 1.0))
        temperature = self._solve(target)
        return np.where(valid, temperature, np.nan)

    def _solve(self, target: FloatArray) -> FloatArray:
        """Newton in (1/T, ln P), kept within the bracket by bisection; closed form outside."""
        low, high = (1.0 / t for t in reversed(self.range_K))
        edges = np.array([low, high])
        ln_edges = self.ln_kPa(1.0 / edges)
        steep = self.slope(1.0 / edges) / edges**2
        above = edges[0] - (target - ln_edges[0]) / steep[0]
        below = edges[1] - (target - ln_edges[1]) / steep[1]
        lower, upper = np.full(target.shape, low), np.full(target.shape, high)
        share = (ln_edges[0] - target) / (ln_edges[0] - ln_edges[1])
        u = low + np.clip(share, 0.0, 1.0) * (high - low)
        for _ in range(_MAX_ITERATIONS):
            T = np.clip(1.0 / u, *self.range_K)  # 1/(1/T) may round past the edge
            miss = self.curve.ln_kPa(T) - target
            lower, upper = np.where(miss > 0.0, u, lower), np.where(miss > 0.0, upper, u)
            step = u + miss / (self.curve.slope(T) * T**2)
            u = np.where((step >= lower) & (step <= upper), step, 0.5 * (lower + upper))
            if np.all((np.abs(miss) < _LN_P_TOLERANCE) | (upper - lower < 1e-15 * upper)):
                break
        u = np.where(target >= ln_edges[0], above, np.where(target <= ln_edges[1], below, u))
        return np.where(u > 0.0, 1.0 / np.where(u > 0.0, u, 1.0), np.nan)

    def _highest_kPa(self) -> float:
        """Pressure that the continuation approaches at infinite temperature."""
        edge = np.asarray(self.range_K[1])
        with np.errstate(over="ignore"):
            return float(np.exp(self.ln_kPa(edge) + self.slope(edge) * edge))

    def extrapolated(self, temperature_K: npt.ArrayLike) -> BoolArray:
        """Where a temperature lies outside the range of the equation.

        Parameters
        ----------
        temperature_K : array_like, any shape
            K.

        Returns
        -------
        ndarray of bool, same shape
        """
        T = np.asarray(temperature_K, dtype=np.float64)
        return (self.range_K[0] > T) | (self.range_K[1] < T)

    def near_critical(self, temperature_K: npt.ArrayLike) -> BoolArray:
        """Where the component is within a tenth of its critical temperature, but below it.

        Parameters
        ----------
        temperature_K : array_like, any shape
            K.

        Returns
        -------
        ndarray of bool, same shape
            All False where no critical temperature is known.
        """
        reduced = self._reduced(temperature_K)
        return (reduced >= NEAR_CRITICAL) & (reduced < 1.0)

    def supercritical(self, temperature_K: npt.ArrayLike) -> BoolArray:
        """Where the component has no vapour pressure and the curve is only a continuation.

        Parameters
        ----------
        temperature_K : array_like, any shape
            K.

        Returns
        -------
        ndarray of bool, same shape
            All False where no critical temperature is known.
        """
        return self._reduced(temperature_K) >= 1.0

    def _reduced(self, temperature_K: npt.ArrayLike) -> FloatArray:
        T = np.asarray(temperature_K, dtype=np.float64)
        return T / (np.inf if self.critical_temperature_K is None else self.critical_temperature_K)

    def uncertainty(self, temperature_K: npt.ArrayLike) -> FloatArray:
        """One standard deviation of ln P, growing outside the range.

        Within the range it is `uncertainty_ln`. Outside, the error of the continued slope is
        added: sigma^2 = uncertainty_ln^2 + (k ln(P / P_edge))^2, where k joins
        CONTINUATION_ERROR and what a narrow range leaves open, 2 uncertainty_ln / ln(P_hi / P_lo).

        Parameters
        ----------
        temperature_K : array_like, any shape
            K, above 0.

        Returns
        -------
        ndarray, same shape
        """
        T = np.asarray(temperature_K, dtype=np.float64)
        distance = self.ln_kPa(T) - self.ln_kPa(np.clip(T, *self.range_K))
        low, high = self.ln_kPa(self.range_K)
        k = np.hypot(CONTINUATION_ERROR, 2.0 * self.uncertainty_ln / (high - low))
        sigma: FloatArray = np.hypot(self.uncertainty_ln, k * distance)
        return sigma
