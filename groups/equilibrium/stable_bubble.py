"""Bubble points of the stable liquids: where a liquid splits, both liquids boil together.

The homogeneous bubble point of a liquid that would split lies too low in temperature. Here the
liquid is first split into its stable phases at each temperature; they have the same activities, and
the sum of the partial pressures of either is the bubble pressure.
"""

import numpy as np
import numpy.typing as npt

from groups.arrays import BoolArray, FloatArray, IntArray
from groups.equilibrium.bubble import (
    MAX_VAPOUR_PASSES,
    NO_BUBBLE_TEMPERATURE,
    VAPOUR_TOLERANCE,
    boiling_states,
    bubble_pressure,
)
from groups.equilibrium.conditions import (
    checked_fractions,
    checked_pressure,
    checked_temperature,
    paired,
)
from groups.equilibrium.flash_result import Flash, Phases, flash_result
from groups.equilibrium.liquid_trials import nearly_ideal
from groups.equilibrium.phase_amounts import ln_fugacities, settled_amounts
from groups.equilibrium.phase_problem import PhaseProblem
from groups.equilibrium.phase_search import MOST_LIQUIDS, find_phases
from groups.equilibrium.phase_trials import lowest_phases
from groups.equilibrium.stability import ZERO_DISTANCE
from groups.equilibrium.states import States, log_sum_exp, safe_log
from groups.equilibrium.system import System
from groups.equilibrium.temperature_root import rising_root


def stable_bubble_pressure(
    system: System, temperature_K: npt.ArrayLike, mole_fractions: npt.ArrayLike
) -> Flash:
    """Bubble pressure and first vapour of liquids that may split, at given temperatures.

    Parameters
    ----------
    system : System
    temperature_K : float or array of shape (n,)
        In K, 40 to 2000.
    mole_fractions : array of shape (n_components,) or (n, n_components)
        Overall liquid compositions; each row sums to 1. Zeros are allowed.

    Returns
    -------
    Flash
        With vapour fraction zero.

    Raises
    ------
    OutOfRangeError, FractionSumError, ShapeError

    Source
    ------
    Smith, Van Ness & Abbott (2005), section 14.5 (vapour-liquid-liquid equilibrium).
    """
    x = checked_fractions(mole_fractions, system.n_components)
    T, x = paired(checked_temperature(temperature_K), x)
    states = bubble_pressure(system, T, x)
    return _boiling(system, T, states.pressure_kPa, x, states, _unstable(system, T, x))


def stable_bubble_temperature(
    system: System, pressure_kPa: npt.ArrayLike, mole_fractions: npt.ArrayLike
) -> Flash:
    """Bubble temperature and first vapour of liquids that may split, at given pressures.

    Parameters
    ----------
    system : System
    pressure_kPa : float or array of shape (n,)
        In kPa, 1e-9 to 1e6.
    mole_fractions : array of shape (n_components,) or (n, n_components)
        Overall liquid compositions; each row sums to 1. Zeros are allowed.

    Returns
    -------
    Flash
        With vapour fraction zero; NaN and a text where no temperature was found.

    Raises
    ------
    OutOfRangeError, FractionSumError, ShapeError

    Source
    ------
    As `stable_bubble_pressure`.
    """
    x = checked_fractions(mole_fractions, system.n_components)
    P, x = paired(checked_pressure(pressure_kPa), x)
    return stable_bubble_states(system, P, x)


def stable_bubble_states(system: System, P: FloatArray, x: FloatArray) -> Flash:
    """Bubble temperatures of checked liquids."""
    states = boiling_states(system, P, x)
    T = np.where(states.converged, states.temperature_K, 300.0)
    unstable = _unstable(system, T, x) & states.converged
    rows = np.flatnonzero(unstable)
    if len(rows):
        search = _SplitBoiling(system, np.log(P[rows]), x[rows])
        T[rows], found = rising_root(search, T[rows])
        T[rows] = np.where(found, T[rows], np.nan)
    return _boiling(system, T, P, x, states, unstable)


def _unstable(system: System, T: FloatArray, x: FloatArray) -> BoolArray:
    """Which liquids split at these temperatures."""
    if not len(x):
        return np.zeros(0, dtype=bool)
    problem = PhaseProblem.of_liquid(system.activity, T, x)
    alone = x[:, None]
    ideal = nearly_ideal(system.activity, T)
    probe = lowest_phases(problem, alone, ln_fugacities(problem, alone, 1), 1, ideal)
    return np.asarray(probe.distance < -ZERO_DISTANCE)


class _SplitBoiling:
    """ln of the bubble pressure of the stable liquids less ln P, for `rising_root`.

    The liquids of one temperature are the start at the next; they are looked for from nothing only
    at first and where one of them is lost.
    """

    def __init__(self, system: System, ln_pressure: FloatArray, x: FloatArray) -> None:
        self.system, self.ln_pressure, self.x = system, ln_pressure, x
        m, n = x.shape
        self.amounts = np.zeros((m, MOST_LIQUIDS + 1, n))
        self.liquids = np.zeros(m, dtype=np.int64)

    def __call__(self, T: FloatArray, index: IntArray) -> tuple[FloatArray, FloatArray]:
        problem = PhaseProblem.of_liquid(self.system.activity, T, self.x[index])
        todo = np.ones(len(index), dtype=bool)
        two = np.flatnonzero(self.liquids[index] == 2)
        if len(two):
            start = self.amounts[index[two], :2]
            found = settled_amounts(problem.rows(two), start, 2)
            self.amounts[index[two], :2] = found.amounts
            todo[two] = ~found.settled
        rows = np.flatnonzero(todo)
        if len(rows):
            fresh = find_phases(problem.rows(rows))
            self.amounts[index[rows]], self.liquids[index[rows]] = fresh.amounts, fresh.liquids
        P = np.exp(self.ln_pressure[index])
        y, total = _vapour(self.system, problem, self.amounts[index], P, at_own=False)
        slope = (y * self.system.ln_saturation_slope(T)).sum(axis=1)
        return total - self.ln_pressure[index], slope


def _vapour(
    system: System, problem: PhaseProblem, amounts: FloatArray, P: FloatArray, *, at_own: bool
) -> tuple[FloatArray, FloatArray]:
    """First vapour over the stable liquids, and ln of its pressure in kPa.

    A real vapour is corrected at P, or at the pressure that it is found to have.
    """
    T = problem.temperature_K
    # Activities are the same in all liquids; the one that holds most of a component tells them.
    totals = amounts.sum(axis=2, keepdims=True)
    x = amounts / np.where(totals > 0.0, totals, 1.0)
    m, _, n = x.shape
    place = x[:, :MOST_LIQUIDS].argmax(axis=1)
    filled = np.where(totals[:, :MOST_LIQUIDS] > 0.0, x[:, :MOST_LIQUIDS], x[:, :1])
    ln_gamma = problem.activity.ln_gamma(np.repeat(T, MOST_LIQUIDS), filled.reshape(-1, n)).reshape(
        m, MOST_LIQUIDS, n
    )
    ln_a = np.take_along_axis(safe_log(filled) + ln_gamma, place[:, None], axis=1)[:, 0]
    terms = ln_a + system.ln_saturation(T)
    correction = np.zeros_like(terms)
    for _ in range(MAX_VAPOUR_PASSES):
        total = log_sum_exp(terms - correction)
        y = np.exp(terms - correction - total[:, None])
        if system.vapour.ideal:
            break
        fresh = system.vapour.ln_correction(T, np.exp(total) if at_own else P, y)
        change = np.abs(fresh - correction).max(initial=0.0)
        correction = fresh
        if change <= VAPOUR_TOLERANCE:
            break
    return y, total


def _boiling(
    system: System,
    T: FloatArray,
    P: FloatArray,
    x: FloatArray,
    states: States,
    unstable: BoolArray,
) -> Flash:
    """Homogeneous states where the liquid is stable, split ones elsewhere, all verified."""
    m, n = x.shape
    liquids, shares = np.full((m, MOST_LIQUIDS, n), np.nan), np.zeros((m, MOST_LIQUIDS))
    liquids[:, 0], shares[:, 0] = x, 1.0
    vapour, failure = states.vapour.copy(), list(states.failure)
    pressure = np.where(np.isfinite(P), P, 1.0)
    rows = np.flatnonzero(unstable & np.isfinite(T))
    if len(rows):
        problem = PhaseProblem.of_liquid(system.activity, T[rows], x[rows])
        found = find_phases(problem)
        split = Phases.of_amounts(found.amounts, found.liquids, found.vapour)
        liquids[rows], shares[rows] = split.liquids, split.liquid_fractions
        vapour[rows], ln_total = _vapour(
            system, problem, found.amounts, pressure[rows], at_own=True
        )
        pressure[rows] = np.exp(ln_total)
        for k, row in enumerate(rows.tolist()):
            failure[row] = found.failure[k]
    for row in np.flatnonzero(~np.isfinite(T)).tolist():
        failure[row] = failure[row] or NO_BUBBLE_TEMPERATURE
    temperature = np.where(np.isfinite(T), T, 300.0)
    problem = PhaseProblem.of_system(system, temperature, pressure, x)
    phases = Phases(liquids, shares, vapour, np.zeros(m))
    return flash_result(problem, phases, failure)
