"""Vapour-liquid states, verified against their own equations before anyone sees them."""

from dataclasses import dataclass

import numpy as np

from groups.arrays import BoolArray, FloatArray
from groups.equilibrium.system import System

#: Largest |ln(y_i P exp(correction_i)) - ln(x_i gamma_i Psat_i)| of a state that is returned:
#: two orders above the rounding of ln gamma, far below any error of a prediction.
RESIDUAL_TOLERANCE = 1e-9


@dataclass(frozen=True, slots=True)
class States:
    """Vapour-liquid states of n points; what did not converge is NaN and says why.

    Attributes
    ----------
    temperature_K, pressure_kPa : array of shape (n,)
    liquid, vapour : array of shape (n, n_components), mole fractions
    gamma : array of shape (n, n_components)
    converged : bool array of shape (n,)
    residual : array of shape (n,)
        Largest difference of ln fugacity between the phases, or of a sum of fractions from one.
    failure : tuple of n texts, None where converged
    """

    temperature_K: FloatArray
    pressure_kPa: FloatArray
    liquid: FloatArray
    vapour: FloatArray
    gamma: FloatArray
    converged: BoolArray
    residual: FloatArray
    failure: tuple[str | None, ...]


def safe_log(values: FloatArray) -> FloatArray:
    """ln of non-negative values; minus infinity at zero, without a warning."""
    return np.log(values, out=np.full_like(values, -np.inf), where=values > 0.0)


def log_sum_exp(values: FloatArray) -> FloatArray:
    """ln of the sum over the last axis of exp(values), which may hold minus infinity."""
    total: FloatArray = np.logaddexp.reduce(values, axis=-1)
    return total


def equilibrium_residual(
    system: System,
    temperature_K: FloatArray,
    pressure_kPa: FloatArray,
    liquid: FloatArray,
    vapour: FloatArray,
    ln_volatility: FloatArray,
) -> FloatArray:
    """Largest violation of equal fugacity or of a sum of fractions, of shape (n,)."""
    correction = system.vapour.ln_correction(temperature_K, pressure_kPa, vapour)
    present = (liquid > 0.0) & (vapour > 0.0)
    # A component may vanish from a phase by underflow only where its partial pressure does.
    lost = ((liquid > 0.0) | (vapour > 1e-290)) & ~present
    left = safe_log(vapour) + np.log(pressure_kPa)[:, None] + correction
    right = safe_log(liquid) + ln_volatility
    gap = np.zeros_like(liquid)
    np.subtract(left, right, out=gap, where=present)
    gap[lost & (right > -600.0)] = np.inf
    sums = np.maximum(np.abs(liquid.sum(axis=1) - 1.0), np.abs(vapour.sum(axis=1) - 1.0))
    return np.asarray(np.maximum(np.abs(gap).max(axis=1), sums))


def verified_states(
    system: System,
    temperature_K: FloatArray,
    pressure_kPa: FloatArray,
    liquid: FloatArray,
    vapour: FloatArray,
    failure: tuple[str | None, ...],
    ln_gamma: FloatArray | None = None,
    ln_saturation: FloatArray | None = None,
) -> States:
    """The states that satisfy their equations; the others blanked, with the reason.

    `failure` holds what the solver already knows; where it is None, a residual above the
    tolerance becomes the failure. ln gamma and ln Psat at these very states may be handed over;
    otherwise they are evaluated.
    """
    known = np.array([text is None for text in failure], dtype=bool)
    known &= np.isfinite(temperature_K) & np.isfinite(pressure_kPa) & (pressure_kPa > 0.0)
    known &= np.isfinite(liquid).all(axis=1) & np.isfinite(vapour).all(axis=1)
    T = np.where(known, temperature_K, 300.0)
    x, y = (np.where(known[:, None], part, 1.0 / part.shape[1]) for part in (liquid, vapour))
    if ln_gamma is None:
        ln_gamma = system.activity.ln_gamma(T, x)
    if ln_saturation is None:
        ln_saturation = system.ln_saturation(T)
    P = np.where(known, pressure_kPa, 1.0)
    residual = equilibrium_residual(system, T, P, x, y, ln_gamma + ln_saturation)
    residual = np.where(known & np.isfinite(residual), residual, np.inf)
    good = residual <= RESIDUAL_TOLERANCE
    gamma = np.exp(np.minimum(ln_gamma, 700.0))
    if good.all():
        return States(T, P, x, y, gamma, good, residual, (None,) * len(good))
    texts = tuple(
        None if ok else (text or f"the iteration left a residual of {value:.1e} in ln fugacity")
        for ok, text, value in zip(good.tolist(), failure, residual.tolist(), strict=True)
    )
    blank = ~good
    columns = (temperature_K, pressure_kPa, liquid, vapour, gamma)
    T, P, x, y, gamma = (_blanked(column, blank) for column in columns)
    return States(T, P, x, y, gamma, good, residual, texts)


def _blanked(values: FloatArray, blank: BoolArray) -> FloatArray:
    copy = np.array(values)
    copy[blank] = np.nan
    return copy
