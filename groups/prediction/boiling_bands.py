"""Intervals of bubble points, dew points, flashes and relative volatilities by propagation.

Every drawn mixture is carried through the equations of the state that was found, all at once. At
given pressure the change of the boiling temperature is taken straight in ln P against 1/T
(Clausius-Clapeyron), which is exact to second order in the drawn error.
"""

from dataclasses import dataclass

import numpy as np

from groups.arrays import FloatArray, IntArray
from groups.equilibrium.states import log_sum_exp, safe_log
from groups.equilibrium.system import System
from groups.prediction.bands import Band, Drawn, band

DEW_PASSES = 40
DEW_DAMPING = 0.5


@dataclass(frozen=True, slots=True)
class BoilingBands:
    """Intervals beside states of n points; `ln_k_half_width` of shape (n,) decides the grade."""

    temperature_K: Band  # (n,)
    pressure_kPa: Band  # (n,)
    liquid: Band  # (n, n_components)
    vapour: Band  # (n, n_components)
    gamma: Band  # (n, n_components)
    relative_volatility: Band  # (n, n_components), over the last component
    ln_k_half_width: FloatArray

    def spread(self, places: IntArray, n_points: int) -> "BoilingBands":
        """The same among n points, NaN at the others.

        Parameters
        ----------
        places : array of shape (n,)
            Where each point belongs.
        n_points : int

        Returns
        -------
        BoilingBands
        """
        if len(places) == n_points:
            return self

        def wide(one: Band) -> Band:
            return Band(_spread(one.lower, places, n_points), _spread(one.upper, places, n_points))

        return BoilingBands(
            wide(self.temperature_K),
            wide(self.pressure_kPa),
            wide(self.liquid),
            wide(self.vapour),
            wide(self.gamma),
            wide(self.relative_volatility),
            _spread(self.ln_k_half_width, places, n_points),
        )


def _spread(values: FloatArray, places: IntArray, n_points: int) -> FloatArray:
    wide = np.full((n_points, *values.shape[1:]), np.nan)
    wide[places] = values
    return wide


@dataclass(frozen=True, slots=True)
class KnownStates:
    """The states that bands are drawn around; arrays run over n points."""

    temperature_K: FloatArray
    pressure_kPa: FloatArray
    liquid: FloatArray
    vapour: FloatArray
    gamma: FloatArray
    relative_volatility: FloatArray
    pressure_fixed: bool


def bubble_bands(drawn: Drawn, system: System, known: KnownStates) -> BoilingBands:
    """Intervals around bubble points, the liquid given.

    Parameters
    ----------
    drawn : Drawn
    system : System
        Of the prediction itself.
    known : KnownStates

    Returns
    -------
    BoilingBands
    """
    T, x = known.temperature_K, known.liquid
    ln_gamma = drawn.models.ln_gamma(T, x)
    ln_volatility = ln_gamma + system.ln_saturation(T) + drawn.shift[:, None, :]
    ln_partial = safe_log(x) + ln_volatility
    slopes = system.ln_volatility_slope(T, x)
    ln_P = log_sum_exp(ln_partial)
    if known.pressure_fixed:
        temperatures = _moved(T, ln_P, known, np.sum(known.vapour * slopes, axis=-1))
        step = _straight(T, temperatures)
        ln_partial = ln_partial + slopes * step[..., None]
        ln_volatility = ln_volatility + slopes * step[..., None]
        pressures = np.broadcast_to(known.pressure_kPa, ln_P.shape)
    else:
        temperatures = np.broadcast_to(T, ln_P.shape)
        pressures = np.exp(ln_P)
    vapour = np.exp(ln_partial - log_sum_exp(ln_partial)[..., None])
    liquid = np.broadcast_to(x, vapour.shape)
    return _bands(known, temperatures, pressures, (liquid, vapour), ln_gamma, ln_volatility)


def dew_bands(drawn: Drawn, system: System, known: KnownStates) -> BoilingBands:
    """Intervals around dew points, the vapour given; the liquid is found anew for each draw.

    Parameters
    ----------
    drawn : Drawn
    system : System
    known : KnownStates

    Returns
    -------
    BoilingBands
    """
    T, y = known.temperature_K, known.vapour
    saturation = system.ln_saturation(T) + drawn.shift[:, None, :]
    liquid = np.broadcast_to(known.liquid, (len(drawn.shift), *known.liquid.shape)).copy()
    base = system.activity.ln_gamma(T, known.liquid)
    for _ in range(DEW_PASSES):
        ln_gamma = base + drawn.models.errors_each(liquid)
        ln_share = safe_log(y) - ln_gamma - saturation
        new = np.exp(ln_share - log_sum_exp(ln_share)[..., None])
        liquid = DEW_DAMPING * liquid + (1.0 - DEW_DAMPING) * new
    ln_P = -log_sum_exp(ln_share)
    ln_volatility = ln_gamma + saturation
    slopes = system.ln_volatility_slope(T, known.liquid)
    if known.pressure_fixed:
        temperatures = _moved(T, ln_P, known, np.sum(known.liquid * slopes, axis=-1))
        step = _straight(T, temperatures)
        ln_volatility = ln_volatility + slopes * step[..., None]
        pressures = np.broadcast_to(known.pressure_kPa, ln_P.shape)
    else:
        temperatures = np.broadcast_to(T, ln_P.shape)
        pressures = np.exp(ln_P)
    vapour = np.broadcast_to(y, liquid.shape)
    return _bands(known, temperatures, pressures, (liquid, vapour), ln_gamma, ln_volatility)


def _moved(T: FloatArray, ln_P: FloatArray, known: KnownStates, slope: FloatArray) -> FloatArray:
    """Temperatures at which the drawn pressures meet the given one, straight in 1/T."""
    missing = np.log(known.pressure_kPa) - ln_P
    inverse = 1.0 / T - missing / (slope * T**2)
    return 1.0 / np.clip(inverse, 1.0 / (3.0 * T), 3.0 / T)


def _straight(T: FloatArray, moved: FloatArray) -> FloatArray:
    """The step by which a slope d/dT is multiplied to be straight in 1/T."""
    step: FloatArray = T**2 * (1.0 / T - 1.0 / moved)
    return step


def _bands(
    known: KnownStates,
    temperatures: FloatArray,
    pressures: FloatArray,
    phases: tuple[FloatArray, FloatArray],
    ln_gamma: FloatArray,
    ln_volatility: FloatArray,
) -> BoilingBands:
    ratio = np.exp(ln_volatility - ln_volatility[..., -1:])
    ln_k = ln_volatility - np.log(pressures)[..., None]
    centre = np.median(ln_k, axis=0)
    present = (known.liquid > 1e-290) & (known.vapour > 1e-290)
    np.log(known.vapour / np.where(present, known.liquid, 1.0), out=centre, where=present)
    return BoilingBands(
        band(temperatures, known.temperature_K),
        band(pressures, known.pressure_kPa),
        band(phases[0], known.liquid),
        band(phases[1], known.vapour),
        band(np.exp(ln_gamma), known.gamma),
        band(ratio, known.relative_volatility),
        band(ln_k, centre).half_width.max(axis=-1),
    )
