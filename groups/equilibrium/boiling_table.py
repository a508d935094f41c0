"""Boiling pressures of many liquids at a few temperatures, and polynomials through them.

ln P of a liquid is a smooth function of 1/T, so a polynomial through Chebyshev places gives its
boiling temperature to some ten figures. The interaction terms of a few temperatures serve all
liquids: the table costs less than one evaluation at as many temperatures as there are liquids. What
is read from it is a start, or a question whether a closer look is needed; states end on their own
equations.
"""

from dataclasses import dataclass

import numpy as np

from groups.arrays import BoolArray, FloatArray
from groups.equilibrium.saturation import rough_boiling_temperatures
from groups.equilibrium.system import System

PLACES = 10
#: Chebyshev places on (-1, 1), and the matrix from values there to coefficients of powers.
NODES = np.cos(np.pi * (np.arange(PLACES) + 0.5) / PLACES)
FIT = np.linalg.inv(np.vander(NODES, increasing=True))
#: Over a wider range of boiling temperatures the polynomial would be too coarse to help.
WIDEST_K = 150.0
#: How far beyond the places the polynomial is still believed as a start.
REACH = 1.3
NEWTON_STEPS = 3


@dataclass(frozen=True, slots=True)
class BoilingTable:
    """Liquids of shape (m, n_components) at PLACES temperatures.

    Attributes
    ----------
    temperature_K : array of shape (PLACES,)
    ln_gamma : array of shape (PLACES, m, n_components)
    coefficients : array of shape (PLACES, m)
        Of ln P (in kPa) by powers of t, where 1/T = centre + half t.
    centre, half : float
        In 1/K.
    """

    temperature_K: FloatArray
    ln_gamma: FloatArray
    coefficients: FloatArray
    centre: float
    half: float

    def boiling(self, ln_pressure: FloatArray) -> tuple[FloatArray, FloatArray, BoolArray]:
        """T in K, d ln P/dT in 1/K, and where these are good starts; each of shape (m,)."""
        a = self.coefficients
        slope = np.where(a[1] < 0.0, a[1], -1.0)
        t = np.clip((ln_pressure - a[0]) / slope, -REACH, REACH)
        for _ in range(NEWTON_STEPS):
            value, slope = _horner(a, t)
            slope = np.where(slope < 0.0, slope, -np.inf)
            t = np.clip(t - (value - ln_pressure) / slope, -REACH, REACH)
        inverse = self.centre + self.half * t
        usable = np.isfinite(slope) & (np.abs(t) < REACH)
        return 1.0 / inverse, -slope * inverse**2 / self.half, usable

    def ln_gamma_at(self, temperature_K: FloatArray) -> FloatArray:
        """ln gamma of all liquids at other temperatures (n,), of shape (n, m, n_components)."""
        t = (1.0 / temperature_K - self.centre) / self.half
        weights = np.vander(t, PLACES, increasing=True) @ FIT
        return np.tensordot(weights, self.ln_gamma, axes=1)

    def of(self, rows: BoolArray) -> "BoilingTable":
        """The table of some of the liquids."""
        return BoilingTable(
            self.temperature_K,
            self.ln_gamma[:, rows],
            self.coefficients[:, rows],
            self.centre,
            self.half,
        )


def boiling_table(system: System, pressure_kPa: FloatArray, x: FloatArray) -> BoilingTable | None:
    """The table over the boiling range at these pressures; None where it would not help.

    Parameters
    ----------
    system : System
    pressure_kPa : array of shape (n,)
    x : array of shape (m, n_components)
    """
    extremes = np.array([pressure_kPa.min(), pressure_kPa.max()])
    pure, immiscible = rough_boiling_temperatures(system, extremes)
    low, high = float(immiscible.min()) - 2.0, float(pure.max()) + 5.0
    if high - low > WIDEST_K:
        return None
    centre, half = 0.5 * (1.0 / low + 1.0 / high), 0.5 * (1.0 / low - 1.0 / high)
    T = 1.0 / (centre + half * NODES)
    ln_gamma = system.activity.ln_gamma(T[:, None], x[None])
    # What overflows here becomes a start that is not usable.
    with np.errstate(over="ignore", invalid="ignore"):
        partial = x * np.exp(ln_gamma)
        pressure = partial @ np.exp(system.ln_saturation(T))[:, :, None]
        coefficients = FIT @ np.log(pressure[..., 0])
    return BoilingTable(T, ln_gamma, coefficients, centre, half)


def _horner(coefficients: FloatArray, t: FloatArray) -> tuple[FloatArray, FloatArray]:
    """A polynomial and its derivative."""
    value, slope = coefficients[-1], np.zeros_like(t)
    for row in coefficients[-2::-1]:
        slope = slope * t + value
        value = value * t + row
    return value, slope
