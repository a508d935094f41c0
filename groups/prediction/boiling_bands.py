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
from groups.prediction.bands import Band, Drawn, band, spread

BOILING_PASSES = 3  # of Newton, on a curve that is all but straight
DEW_PASSES = 30
DEW_LEAST_SHARE = 0.2  # of a mole fraction left by one step, so that none turns negative
DEW_CLOSE = 1e-7  # change of a mole fraction that ends the iteration


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
        return BoilingBands(
            self.temperature_K.spread(places, n_points),
            self.pressure_kPa.spread(places, n_points),
            self.liquid.spread(places, n_points),
            self.vapour.spread(places, n_points),
            self.gamma.spread(places, n_points),
            self.relative_volatility.spread(places, n_points),
            spread(self.ln_k_half_width, places, n_points),
        )


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


@dataclass(frozen=True, slots=True)
class DrawnStates:
    """The known states as every draw has them; arrays of shape (n_samples, n, ...)."""

    temperature_K: FloatArray
    pressure_kPa: FloatArray
    liquid: FloatArray
    vapour: FloatArray
    ln_gamma: FloatArray
    ln_volatility: FloatArray  # ln(gamma Psat), Psat in kPa


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
    return bands_of(bubble_draws(drawn, system, known), known)


def bubble_draws(drawn: Drawn, system: System, known: KnownStates) -> DrawnStates:
    """Bubble points of every draw, the liquid given.

    Parameters
    ----------
    drawn : Drawn
    system : System
        Of the prediction itself.
    known : KnownStates

    Returns
    -------
    DrawnStates
    """
    T, x = known.temperature_K, known.liquid
    ln_gamma = drawn.models.ln_gamma(T, x)
    ln_volatility = ln_gamma + real_saturation(system, known) + drawn.shift[:, None, :]
    ln_partial = safe_log(x) + ln_volatility
    gamma_slopes = system.activity.ln_gamma_slope(T, x)
    slopes = gamma_slopes + system.ln_saturation_slope(T)
    ln_P = log_sum_exp(ln_partial)
    if known.pressure_fixed:
        temperatures = _boiling(T, ln_partial, slopes, known)
        step = _straight(T, temperatures)
        ln_partial = ln_partial + slopes * step[..., None]
        ln_volatility = ln_volatility + slopes * step[..., None]
        ln_gamma = ln_gamma + gamma_slopes * step[..., None]
        pressures = np.broadcast_to(known.pressure_kPa, ln_P.shape)
    else:
        temperatures = np.broadcast_to(T, ln_P.shape)
        pressures = np.exp(ln_P)
    vapour = np.exp(ln_partial - log_sum_exp(ln_partial)[..., None])
    liquid = np.broadcast_to(x, vapour.shape)
    return DrawnStates(temperatures, pressures, liquid, vapour, ln_gamma, ln_volatility)


def dew_curve_band(states: DrawnStates, known: KnownStates) -> Band:
    """Interval of the dew curve of a binary at the known vapours, from its drawn bubble points.

    Where a vapour lies outside what a draw reaches, the end of the draw's curve stands in.

    Parameters
    ----------
    states : DrawnStates
        Along a whole diagram.
    known : KnownStates

    Returns
    -------
    Band
        Of the temperature, or of the pressure at given temperature; of shape (n,).
    """
    level, own = (
        (states.temperature_K, known.temperature_K)
        if known.pressure_fixed
        else (states.pressure_kPa, known.pressure_kPa)
    )
    read = _first_drops(states.vapour[..., 0], level, known.vapour[:, 0], known.pressure_fixed)
    return band(read, own)


def _first_drops(
    y1: FloatArray, level: FloatArray, at: FloatArray, pressure_fixed: bool
) -> FloatArray:
    """Each draw's T or P (n_samples, n) where vapours of fraction `at` begin to condense.

    A curve that turns back, over a liquid that would split, has a vapour more than once: cooled,
    it condenses at the highest temperature; compressed, at the lowest pressure.
    """
    sign = 1.0 if pressure_fixed else -1.0
    read = np.empty((len(level), len(at)))
    for k, (y, own) in enumerate(zip(y1, sign * level, strict=True)):
        left, right = y[:-1, None], y[1:, None]
        between = (np.minimum(left, right) <= at) & (at <= np.maximum(left, right))
        gap = np.where(right == left, 1.0, right - left)
        crossed = own[:-1, None] + (at - left) / gap * (own[1:] - own[:-1])[:, None]
        outside = np.where(at < y.min(), own[y.argmin()], own[y.argmax()])
        highest = np.max(np.where(between, crossed, -np.inf), axis=0, initial=-np.inf)
        read[k] = np.where(between.any(axis=0), highest, outside)
    found: FloatArray = sign * read
    return found


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
    saturation = real_saturation(system, known) + drawn.shift[:, None, :]
    liquid, ln_gamma = _condensed(drawn, system, known, safe_log(y) - saturation)
    ln_P = -log_sum_exp(safe_log(y) - ln_gamma - saturation)
    ln_volatility = ln_gamma + saturation
    gamma_slopes = system.activity.ln_gamma_slope(T, known.liquid)
    slopes = gamma_slopes + system.ln_saturation_slope(T)
    if known.pressure_fixed:
        temperatures = _moved(T, ln_P, known, np.sum(known.liquid * slopes, axis=-1))
        step = _straight(T, temperatures)
        ln_volatility = ln_volatility + slopes * step[..., None]
        ln_gamma = ln_gamma + gamma_slopes * step[..., None]
        pressures = np.broadcast_to(known.pressure_kPa, ln_P.shape)
    else:
        temperatures = np.broadcast_to(T, ln_P.shape)
        pressures = np.exp(ln_P)
    vapour = np.broadcast_to(y, liquid.shape)
    states = DrawnStates(temperatures, pressures, liquid, vapour, ln_gamma, ln_volatility)
    return bands_of(states, known)


def real_saturation(system: System, known: KnownStates) -> FloatArray:
    """ln Psat less the correction of a real vapour at the known states, which is held there.

    Parameters
    ----------
    system : System
    known : KnownStates

    Returns
    -------
    array of shape (n, n_components)
    """
    saturation = system.ln_saturation(known.temperature_K)
    if system.vapour.ideal:
        return saturation
    correction = system.vapour.ln_correction(known.temperature_K, known.pressure_kPa, known.vapour)
    held: FloatArray = saturation - correction
    return held


def _condensed(
    drawn: Drawn, system: System, known: KnownStates, ln_ratio: FloatArray
) -> tuple[FloatArray, FloatArray]:
    """The liquid of every draw over the given vapour, and its ln gamma.

    x = G(x), G the normalised y / (gamma Psat), by chord steps: around the known liquid the change
    of G is -x_i n d ln gamma_i / dn_j (Gibbs-Duhem takes the change of the sum away).
    """
    T, x = known.temperature_K, known.liquid
    slope = system.activity.ln_gamma_mole_derivatives(T, x)
    chord = np.eye(x.shape[-1]) + x[..., None] * slope
    liquid = np.broadcast_to(x, ln_ratio.shape).copy()
    for _ in range(DEW_PASSES):
        ln_gamma = system.activity.ln_gamma(T, liquid) + drawn.models.errors_each(liquid)
        ln_share = ln_ratio - ln_gamma
        target = np.exp(ln_share - log_sum_exp(ln_share)[..., None])
        step = np.linalg.solve(chord, (target - liquid)[..., None])[..., 0]
        new = np.maximum(liquid + step, DEW_LEAST_SHARE * liquid)
        new = new / new.sum(axis=-1, keepdims=True)
        change, liquid = float(np.abs(new - liquid).max()), new
        if change < DEW_CLOSE:
            break
    return liquid, ln_gamma


def _boiling(
    T: FloatArray, ln_partial: FloatArray, slopes: FloatArray, known: KnownStates
) -> FloatArray:
    """Temperatures at which the drawn partial pressures, straight in 1/T, make up the pressure."""
    temperatures = T
    for _ in range(BOILING_PASSES):
        moved = ln_partial + slopes * _straight(T, temperatures)[..., None]
        ln_P = log_sum_exp(moved)
        slope = np.sum(np.exp(moved - ln_P[..., None]) * slopes, axis=-1)
        inverse = 1.0 / temperatures - (np.log(known.pressure_kPa) - ln_P) / (slope * T**2)
        temperatures = 1.0 / np.clip(inverse, 1.0 / (3.0 * T), 3.0 / T)
    return temperatures


def _moved(T: FloatArray, ln_P: FloatArray, known: KnownStates, slope: FloatArray) -> FloatArray:
    """Temperatures at which the drawn pressures meet the given one, straight in 1/T."""
    missing = np.log(known.pressure_kPa) - ln_P
    inverse = 1.0 / T - missing / (slope * T**2)
    return 1.0 / np.clip(inverse, 1.0 / (3.0 * T), 3.0 / T)


def _straight(T: FloatArray, moved: FloatArray) -> FloatArray:
    """The step by which a slope d/dT is multiplied to be straight in 1/T."""
    step: FloatArray = T**2 * (1.0 / T - 1.0 / moved)
    return step


def bands_of(states: DrawnStates, known: KnownStates) -> BoilingBands:
    """Intervals of drawn states around the known ones.

    Parameters
    ----------
    states : DrawnStates
    known : KnownStates

    Returns
    -------
    BoilingBands
    """
    ln_volatility = states.ln_volatility
    ratio = np.exp(ln_volatility - ln_volatility[..., -1:])
    ln_k = ln_volatility - np.log(states.pressure_kPa)[..., None]
    centre = np.median(ln_k, axis=0)
    present = (known.liquid > 1e-290) & (known.vapour > 1e-290)
    np.log(known.vapour / np.where(present, known.liquid, 1.0), out=centre, where=present)
    return BoilingBands(
        band(states.temperature_K, known.temperature_K),
        band(states.pressure_kPa, known.pressure_kPa),
        band(states.liquid, known.liquid),
        band(states.vapour, known.vapour),
        band(np.exp(states.ln_gamma), known.gamma),
        band(ratio, known.relative_volatility),
        band(ln_k, centre).half_width.max(axis=-1),
    )
