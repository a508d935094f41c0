"""Henry's constants and the solubility of gases by the equation of state."""

from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from groups.arrays import BoolArray, FloatArray
from groups.equilibrium.conditions import (
    checked_fractions,
    checked_pressure,
    checked_temperature,
    paired,
)
from groups.errors import OutOfRangeError
from groups.vapour.psrk.model import PsrkModel, phase
from groups.vapour.psrk.saturation import psrk_bubble_pressure
from groups.vapour.psrk.states import EosStates

MAX_ITERATIONS = 40
#: |ln P| of the bubble pressure from the one asked for.
TOLERANCE = 1e-9
BOILS = "the solvent alone boils below this pressure, so no gas dissolves"
TOO_MUCH = (
    "no liquid with the gas was found at this pressure (beyond its critical point, or miscible)"
)


@dataclass(frozen=True, slots=True)
class Henry:
    """Henry's constants in n solvents.

    Attributes
    ----------
    henry_kPa : array of shape (n, n_components)
        lim f_i / x_i at the bubble pressure of the solvent; for a component of the solvent,
        its fugacity over its mole fraction.
    solvent_pressure_kPa : array of shape (n,)
        Bubble pressure of the solvent.
    converged : bool array of shape (n,)
    failure : tuple of n texts, None where converged
    """

    henry_kPa: FloatArray
    solvent_pressure_kPa: FloatArray
    converged: BoolArray
    failure: tuple[str | None, ...]


def henry_constants(
    model: PsrkModel, temperature_K: npt.ArrayLike, solvent: npt.ArrayLike
) -> Henry:
    """Henry's constants of the components that a solvent lacks.

    Parameters
    ----------
    model : PsrkModel
    temperature_K : float or array of shape (n,)
        In K, below the critical temperature of the solvent.
    solvent : array of shape (n_components,) or (n, n_components)
        Mole fractions of the solvent, zero for the gases.

    Returns
    -------
    Henry

    Raises
    ------
    OutOfRangeError, FractionSumError, ShapeError

    Source
    ------
    H_i = phi_i(x_i -> 0) P at the saturation of the solvent; Prausnitz, Lichtenthaler & de
    Azevedo (1999), section 10.3.
    """
    x = checked_fractions(solvent, model.n_components)
    T, x = paired(checked_temperature(temperature_K), x)
    states = psrk_bubble_pressure(model, T, x)
    good = states.converged
    henry = np.full_like(x, np.nan)
    if good.any():
        P = states.pressure_kPa[good]
        liquid = phase(model, T[good], P, x[good], "liquid")
        henry[good] = np.exp(np.minimum(liquid.ln_phi + np.log(P)[:, None], 690.0))
    return Henry(henry, states.pressure_kPa, good, states.failure)


@dataclass(frozen=True, slots=True)
class Solubility:
    """Saturated solutions of one gas at n conditions.

    Attributes
    ----------
    gas_fraction : array of shape (n,)
        Mole fraction of the gas in the liquid.
    liquid, vapour : array of shape (n, n_components)
    near_critical, converged : bool array of shape (n,)
    residual : array of shape (n,)
        Largest difference of ln fugacity, or of ln P from the one asked for.
    failure : tuple of n texts, None where converged
    """

    gas_fraction: FloatArray
    liquid: FloatArray
    vapour: FloatArray
    near_critical: BoolArray
    converged: BoolArray
    residual: FloatArray
    failure: tuple[str | None, ...]


def gas_solubility(
    model: PsrkModel,
    gas: int,
    temperature_K: npt.ArrayLike,
    pressure_kPa: npt.ArrayLike,
    solvent: npt.ArrayLike,
) -> Solubility:
    """How much of a gas dissolves in a solvent at a total pressure.

    Parameters
    ----------
    model : PsrkModel
    gas : int
        Index of the gas.
    temperature_K, pressure_kPa : float or array of shape (n,)
        K, kPa (total pressure, solvent vapour included).
    solvent : array of shape (n_components,) or (n, n_components)
        Mole fractions of the gas-free solvent, zero for the gas.

    Returns
    -------
    Solubility

    Raises
    ------
    OutOfRangeError
        If the solvent holds the gas, or for conditions that are absurd.
    FractionSumError, ShapeError

    Source
    ------
    The bubble pressure of the solution is the pressure asked for; solved by secants in ln x from
    the answer of Henry's law.
    """
    base = checked_fractions(solvent, model.n_components)
    T, base = paired(checked_temperature(temperature_K), base)
    P, base = paired(checked_pressure(pressure_kPa), base)
    T, base = paired(T, base)
    if base[:, gas].any():
        raise OutOfRangeError("solvent", float(base[:, gas].max()), 0.0, 0.0)
    law = henry_constants(model, T, base)
    over = P - law.solvent_pressure_kPa
    usable = law.converged & (np.where(law.converged, over, -1.0) > 0.0)
    start = np.where(usable, over, 1.0) / np.where(usable, law.henry_kPa[:, gas], 1e3)
    x = np.clip(start, 1e-15, 0.5)
    answer, met = _matched(model, gas, T, P, base, x, usable)
    texts = [
        None if ok else law.failure[k] or (BOILS if over[k] <= 0.0 else TOO_MUCH)
        for k, ok in enumerate(met.tolist())
    ]
    return Solubility(
        np.where(met, answer.liquid[:, gas], np.nan),
        np.where(met[:, None], answer.liquid, np.nan),
        np.where(met[:, None], answer.vapour, np.nan),
        answer.near_critical & met,
        met,
        np.where(met, answer.residual, np.inf),
        tuple(texts),
    )


def _matched(
    model: PsrkModel,
    gas: int,
    T: FloatArray,
    P: FloatArray,
    solvent: FloatArray,
    x: FloatArray,
    usable: BoolArray,
) -> tuple[EosStates, BoolArray]:
    """Bubble points whose pressure is P, by secants in ln x between brackets."""
    low, high = np.zeros(len(x)), np.ones(len(x))
    slope = np.ones(len(x))  # d ln P / d ln x
    last_x = last_gap = np.full(len(x), np.nan)
    for _ in range(MAX_ITERATIONS):
        liquid = solvent * (1.0 - x)[:, None]
        liquid[:, gas] = x
        states = psrk_bubble_pressure(model, T, liquid)
        # Beyond the critical point there is no bubble point: the answer lies at less gas.
        gap = np.where(states.converged, np.log(states.pressure_kPa) - np.log(P), np.inf)
        met = usable & (np.abs(gap) <= TOLERANCE)
        if np.all(met | ~usable | (high - low < 1e-15)):
            break
        low, high = np.where(gap < 0.0, x, low), np.where(gap < 0.0, high, x)
        change = np.log(x) - np.log(last_x)
        fresh = (gap - last_gap) / np.where(change == 0.0, np.nan, change)
        slope = np.where(np.isfinite(fresh) & (fresh > 0.05), fresh, slope)
        last_x, last_gap = x, np.where(np.isfinite(gap), gap, np.nan)
        trial = x * np.exp(np.clip(-np.where(np.isfinite(gap), gap, 50.0) / slope, -3.0, 3.0))
        inside = (trial > low) & (trial < high)
        x = np.where(met, x, np.where(inside, trial, 0.5 * (low + high)))
    return states, met
