"""Dew points: the vapour is given, the first liquid is sought.

At a given temperature the stationary values of the tangent-plane distance of liquids from the
vapour are the logarithms of pressures at which some liquid is in equilibrium with it; the lowest
one is the dew pressure, and its liquid is stable. So the search cannot end in a liquid that would
split, however many false dew points a strongly non-ideal mixture has. The dew temperature is the
root in T of that lowest value; its slope is that of ln(gamma Psat), weighed by the liquid.
"""

import numpy as np
import numpy.typing as npt

from groups.arrays import FloatArray, IntArray
from groups.equilibrium.bubble import (
    MAX_VAPOUR_PASSES,
    VAPOUR_TOLERANCE,
    new_correction,
    start_temperature,
)
from groups.equilibrium.conditions import (
    checked_fractions,
    checked_pressure,
    checked_temperature,
    paired,
)
from groups.equilibrium.states import States, safe_log, verified_states
from groups.equilibrium.system import System
from groups.equilibrium.tangent_plane import lowest_points, stationary_points
from groups.equilibrium.temperature_root import rising_root

NO_DEW_PRESSURE = "no liquid was found in equilibrium with this vapour"
NO_DEW_TEMPERATURE = "no temperature was found at which this vapour condenses at this pressure"
#: A second liquid this much lower in ln P replaces the one found; above the rounding of ln gamma.
LOWER = 1e-9
MAX_REPLACEMENTS = 6


def dew_pressure(
    system: System, temperature_K: npt.ArrayLike, mole_fractions: npt.ArrayLike
) -> States:
    """Dew pressure and first liquid of vapours at given temperatures.

    Parameters
    ----------
    system : System
    temperature_K : float or array of shape (n,)
        In K, 40 to 2000.
    mole_fractions : array of shape (n_components,) or (n, n_components)
        Vapour compositions; each row sums to 1. Zeros are allowed.

    Returns
    -------
    States
        n verified states; NaN and a text where no liquid was found.

    Raises
    ------
    OutOfRangeError, FractionSumError, ShapeError

    Source
    ------
    Michelsen, Fluid Phase Equilibria 9 (1982) 1-19.
    """
    y = checked_fractions(mole_fractions, system.n_components)
    T, y = paired(checked_temperature(temperature_K), y)
    if not len(T):
        return verified_states(system, T, T, y, y, ())
    correction = np.zeros_like(y)
    for _ in range(MAX_VAPOUR_PASSES):
        plane = safe_log(y) + correction - system.ln_saturation(T)
        lowest = lowest_points(system.activity, T, plane)
        usable = lowest.found & (np.abs(lowest.height) < 600.0)
        pressure = np.exp(np.where(usable, lowest.height, 0.0))
        if new_correction(system, T, pressure, y, correction) <= VAPOUR_TOLERANCE:
            break
    failure = tuple(None if ok else NO_DEW_PRESSURE for ok in usable)
    return verified_states(system, T, pressure, lowest.liquid, y, failure)


def dew_temperature(
    system: System, pressure_kPa: npt.ArrayLike, mole_fractions: npt.ArrayLike
) -> States:
    """Dew temperature and first liquid of vapours at given pressures.

    Parameters
    ----------
    system : System
    pressure_kPa : float or array of shape (n,)
        In kPa, 1e-9 to 1e6.
    mole_fractions : array of shape (n_components,) or (n, n_components)
        Vapour compositions; each row sums to 1. Zeros are allowed.

    Returns
    -------
    States
        n verified states; NaN and a text where no temperature was found.

    Raises
    ------
    OutOfRangeError, FractionSumError, ShapeError

    Source
    ------
    Michelsen, Fluid Phase Equilibria 9 (1982) 1-19.
    """
    y = checked_fractions(mole_fractions, system.n_components)
    P, y = paired(checked_pressure(pressure_kPa), y)
    if not len(P):
        return verified_states(system, P, P, y, y, ())
    T = start_temperature(system, P, y)
    correction = np.zeros_like(y)
    for _ in range(MAX_VAPOUR_PASSES):
        search = _DewSearch(system, np.log(P), safe_log(y) + correction)
        T, ok = search.run(T)
        if new_correction(system, T, P, y, correction) <= VAPOUR_TOLERANCE:
            break
    failure = tuple(None if each else NO_DEW_TEMPERATURE for each in ok)
    return verified_states(system, T, P, search.liquid, y, failure)


class _DewSearch:
    """The lowest stationary value less ln P, as a rising function of temperature."""

    def __init__(self, system: System, ln_pressure: FloatArray, ln_vapour: FloatArray) -> None:
        self.system, self.ln_pressure, self.ln_vapour = system, ln_pressure, ln_vapour
        self.liquid = np.zeros_like(ln_vapour)

    def run(self, start: FloatArray) -> tuple[FloatArray, FloatArray]:
        """Follow one liquid to its temperature, and begin again where another lies lower."""
        T, ok = start.copy(), np.zeros(len(start), dtype=bool)
        rows = np.arange(len(start), dtype=np.int64)
        self.liquid = self._lowest(T, rows)[0]
        for _ in range(MAX_REPLACEMENTS):
            found_T, found = rising_root(_Rows(self, rows), T[rows])
            T[rows], ok[rows] = found_T, found
            liquid, height = self._lowest(T[rows], rows)
            lower = height < self.ln_pressure[rows] - LOWER
            self.liquid[rows[lower]] = liquid[lower]
            rows = rows[lower]
            if not len(rows):
                break
        ok[rows] = False  # still sinking after the last replacement
        return T, ok

    def _lowest(self, T: FloatArray, rows: IntArray) -> tuple[FloatArray, FloatArray]:
        plane = self.ln_vapour[rows] - self.system.ln_saturation(T)
        lowest = lowest_points(self.system.activity, T, plane)
        return lowest.liquid, lowest.height

    def evaluate(self, T: FloatArray, rows: IntArray) -> tuple[FloatArray, FloatArray]:
        """Value and slope for the liquids followed."""
        plane = self.ln_vapour[rows] - self.system.ln_saturation(T)
        point = stationary_points(self.system.activity, T, plane, self.liquid[rows])
        self.liquid[rows] = point.liquid
        slope = (point.liquid * self.system.ln_volatility_slope(T, point.liquid)).sum(axis=1)
        return point.height - self.ln_pressure[rows], slope


class _Rows:
    """A search restricted to some rows, for `rising_root`."""

    def __init__(self, search: _DewSearch, rows: IntArray) -> None:
        self.search, self.rows = search, rows

    def __call__(self, T: FloatArray, index: IntArray) -> tuple[FloatArray, FloatArray]:
        return self.search.evaluate(T, self.rows[index])
