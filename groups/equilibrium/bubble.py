"""Bubble points: the liquid is given, the first vapour is sought.

P = sum_i x_i gamma_i Psat_i exp(-correction_i) is explicit at a given temperature under an ideal
vapour; at a given pressure one temperature is sought for each point. A real vapour is reached by
repeating either with the correction of the vapour found before.
"""

import numpy as np
import numpy.typing as npt

from groups.arrays import FloatArray, IntArray
from groups.equilibrium.boiling_table import PLACES, BoilingTable, boiling_table
from groups.equilibrium.conditions import (
    checked_fractions,
    checked_pressure,
    checked_temperature,
    paired,
)
from groups.equilibrium.saturation import rough_boiling_temperatures
from groups.equilibrium.states import States, log_sum_exp, safe_log, verified_states
from groups.equilibrium.system import System
from groups.equilibrium.temperature_root import rising_root

#: Passes over the correction of a real vapour; it is a weak function of the composition.
MAX_VAPOUR_PASSES = 60
VAPOUR_TOLERANCE = 1e-12
#: |ln P error| below which Newton's method keeps its slope.
CHORD = 3e-3
NO_BUBBLE_TEMPERATURE = "no temperature was found at which this liquid boils at this pressure"
ABSURD_PRESSURE = "the bubble pressure is beyond what can be represented"


def bubble_pressure(
    system: System, temperature_K: npt.ArrayLike, mole_fractions: npt.ArrayLike
) -> States:
    """Bubble pressure and first vapour of liquids at given temperatures.

    Parameters
    ----------
    system : System
    temperature_K : float or array of shape (n,)
        In K, 40 to 2000.
    mole_fractions : array of shape (n_components,) or (n, n_components)
        Liquid compositions; each row sums to 1. Zeros are allowed.

    Returns
    -------
    States
        n verified states.

    Raises
    ------
    OutOfRangeError, FractionSumError, ShapeError

    Source
    ------
    Smith, Van Ness & Abbott, Introduction to Chemical Engineering Thermodynamics, 7th ed. (2005),
    section 10.5 (modified Raoult's law).
    """
    x = checked_fractions(mole_fractions, system.n_components)
    T, x = paired(checked_temperature(temperature_K), x)
    ln_partial = safe_log(x) + system.ln_volatility(T, x)
    correction = np.zeros_like(x)
    for _ in range(MAX_VAPOUR_PASSES):
        ln_pressure = log_sum_exp(ln_partial - correction)
        y = np.exp(ln_partial - correction - ln_pressure[:, None])
        absurd = ~(np.abs(ln_pressure) < 600.0)
        pressure = np.exp(np.where(absurd, 0.0, ln_pressure))
        change = new_correction(system, T, pressure, y, correction)
        if change <= VAPOUR_TOLERANCE:
            break
    failure = tuple(ABSURD_PRESSURE if a else None for a in absurd)
    return verified_states(system, T, pressure, x, y, failure)


def bubble_temperature(
    system: System, pressure_kPa: npt.ArrayLike, mole_fractions: npt.ArrayLike
) -> States:
    """Bubble temperature and first vapour of liquids at given pressures.

    Parameters
    ----------
    system : System
    pressure_kPa : float or array of shape (n,)
        In kPa, 1e-9 to 1e6.
    mole_fractions : array of shape (n_components,) or (n, n_components)
        Liquid compositions; each row sums to 1. Zeros are allowed.

    Returns
    -------
    States
        n verified states; NaN and a text where no temperature was found.

    Raises
    ------
    OutOfRangeError, FractionSumError, ShapeError

    Source
    ------
    Smith, Van Ness & Abbott (2005), section 10.5. Solved by Newton's method in 1/T.
    """
    x = checked_fractions(mole_fractions, system.n_components)
    P, x = paired(checked_pressure(pressure_kPa), x)
    return boiling_states(system, P, x)


def boiling_states(
    system: System, P: FloatArray, x: FloatArray, table: BoilingTable | None = None
) -> States:
    """Bubble temperatures at pressures (n,) of liquids (n, n_components), from a table if given."""
    if not len(P):
        return verified_states(system, P, P, x, x, ())
    T, slope = _start(system, P, x, table)
    correction = np.zeros_like(x)
    for _ in range(MAX_VAPOUR_PASSES):
        search = _BubbleSearch(system, np.log(P), x, correction, slope)
        T, found = rising_root(search, T)
        y = search.vapour
        change = new_correction(system, T, P, y, correction)
        if change <= VAPOUR_TOLERANCE:
            break
    failure = tuple([None if ok else NO_BUBBLE_TEMPERATURE for ok in found.tolist()])
    return verified_states(system, T, P, x, y, failure, search.ln_gamma, search.ln_saturation)


def start_temperature(system: System, pressure_kPa: FloatArray, x: FloatArray) -> FloatArray:
    """Mole-fraction average of rough pure boiling temperatures, in K, of shape (n,)."""
    pure, _ = rough_boiling_temperatures(system, pressure_kPa)
    return np.asarray((x * pure).sum(axis=1))


def _start(
    system: System, pressure_kPa: FloatArray, x: FloatArray, table: BoilingTable | None
) -> tuple[FloatArray, FloatArray | None]:
    """Starts for the temperatures, and d ln P/dT there where the table gives it."""
    if table is None and len(x) >= PLACES:
        table = boiling_table(system, pressure_kPa, x)
    if table is None:
        return start_temperature(system, pressure_kPa, x), None
    T, slope, usable = table.boiling(np.log(pressure_kPa))
    if usable.all():
        return T, slope
    return np.where(usable, T, start_temperature(system, pressure_kPa, x)), None


class _BubbleSearch:
    """ln of the sum of partial pressures less ln P, and its slope, for `rising_root`."""

    def __init__(
        self,
        system: System,
        ln_pressure: FloatArray,
        x: FloatArray,
        correction: FloatArray,
        slope: FloatArray | None,
    ) -> None:
        self.system, self.ln_pressure, self.x, self.correction = system, ln_pressure, x, correction
        self.ln_x = safe_log(x)
        self.vapour = np.zeros_like(x)
        self.ln_gamma, self.ln_saturation = np.zeros_like(x), np.zeros_like(x)
        self.slope = np.zeros(len(x)) if slope is None else slope.copy()
        self.far = slope is None

    def __call__(self, T: FloatArray, index: IntArray) -> tuple[FloatArray, FloatArray]:
        everything = len(index) == len(self.x)
        x = self.x if everything else self.x[index]
        ln_gamma, ln_saturation = self.system.activity.ln_gamma(T, x), self.system.ln_saturation(T)
        terms = self.ln_x[index] + ln_gamma + ln_saturation - self.correction[index]
        total = log_sum_exp(terms)
        y = np.exp(terms - total[:, None])
        value = total - self.ln_pressure[index]
        self.vapour[index], self.ln_gamma[index], self.ln_saturation[index] = (
            y,
            ln_gamma,
            ln_saturation,
        )
        # Close to the root the slope no longer changes enough to be worth its evaluation.
        if self.far:
            slopes = self.system.ln_volatility_slope(T, x)
            self.slope[index] = (y * slopes).sum(axis=1)
        self.far = bool(np.abs(value).max() > CHORD)
        return value, self.slope[index]


def new_correction(
    system: System, T: FloatArray, P: FloatArray, y: FloatArray, correction: FloatArray
) -> float:
    """Put the correction of this vapour into `correction`; the largest change."""
    if system.vapour.ideal or not len(T):
        return 0.0
    fresh = system.vapour.ln_correction(T, P, y)
    change = float(np.max(np.abs(fresh - correction), initial=0.0))
    correction[...] = fresh
    return change
