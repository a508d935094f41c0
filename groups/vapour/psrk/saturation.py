"""Bubble and dew points by the equation of state.

For a feed z in one phase, trial amounts W_i = z_i phi_i(z) / phi_i(w) of the incipient phase sum to
one at saturation. ln of that sum is scanned over a grid of pressures or temperatures; at the first
change of sign Newton's method solves

    ln W_i + ln phi_i(w) - ln z_i - ln phi_i(z) = 0,    sum W_i = 1

for ln W and ln P (or ln T) together. Solutions in which both phases are the same are not returned.

Source: M. L. Michelsen, J. M. Mollerup, Thermodynamic Models: Fundamentals and Computational
Aspects, 2nd ed. (2007), chapter 12.
"""

from dataclasses import replace

import numpy as np
import numpy.typing as npt

from groups.equilibrium.conditions import (
    checked_fractions,
    checked_pressure,
    checked_temperature,
    paired,
)
from groups.vapour.psrk.dew_by_stability import scanned_by_stability
from groups.vapour.psrk.model import PsrkModel
from groups.vapour.psrk.saturation_search import (
    SaturationProblem,
    newton,
    scanned,
    trial_fractions,
)
from groups.vapour.psrk.states import EosStates, joined, verified_points, with_rows

#: Points taken at a time: the scan holds the whole grid of each.
BATCH = 1000
NOT_FOUND = (
    "no {kind} {sought} was found: the mixture may have none at these conditions (beyond its "
    "critical point)"
)


def psrk_bubble_pressure(
    model: PsrkModel, temperature_K: npt.ArrayLike, mole_fractions: npt.ArrayLike
) -> EosStates:
    """Bubble pressure and first vapour of liquids at given temperatures.

    Parameters
    ----------
    model : PsrkModel
    temperature_K : float or array of shape (n,)
        In K.
    mole_fractions : array of shape (n_components,) or (n, n_components)
        Liquid compositions; each row sums to 1. Zeros are allowed.

    Returns
    -------
    EosStates
        n verified states; the highest pressure where there are several.

    Raises
    ------
    OutOfRangeError, FractionSumError, ShapeError

    Source
    ------
    See the head of this module.
    """
    z = checked_fractions(mole_fractions, model.n_components)
    T, z = paired(checked_temperature(temperature_K), z)
    return _points(SaturationProblem(model, "bubble", "pressure", T, z))


def psrk_dew_pressure(
    model: PsrkModel, temperature_K: npt.ArrayLike, mole_fractions: npt.ArrayLike
) -> EosStates:
    """Dew pressure and first liquid of vapours at given temperatures.

    Parameters
    ----------
    model, temperature_K, mole_fractions
        As for `psrk_bubble_pressure`; the fractions are those of the vapour.

    Returns
    -------
    EosStates
        n verified states; the lowest pressure where there are several (retrograde).

    Raises
    ------
    OutOfRangeError, FractionSumError, ShapeError

    Source
    ------
    See the head of this module.
    """
    z = checked_fractions(mole_fractions, model.n_components)
    T, z = paired(checked_temperature(temperature_K), z)
    return _points(SaturationProblem(model, "dew", "pressure", T, z))


def psrk_bubble_temperature(
    model: PsrkModel, pressure_kPa: npt.ArrayLike, mole_fractions: npt.ArrayLike
) -> EosStates:
    """Bubble temperature and first vapour of liquids at given pressures.

    Parameters
    ----------
    model : PsrkModel
    pressure_kPa : float or array of shape (n,)
        In kPa.
    mole_fractions : array of shape (n_components,) or (n, n_components)
        Liquid compositions; each row sums to 1.

    Returns
    -------
    EosStates
        n verified states; the lowest temperature where there are several.

    Raises
    ------
    OutOfRangeError, FractionSumError, ShapeError

    Source
    ------
    See the head of this module.
    """
    z = checked_fractions(mole_fractions, model.n_components)
    P, z = paired(checked_pressure(pressure_kPa), z)
    return _points(SaturationProblem(model, "bubble", "temperature", P, z))


def psrk_dew_temperature(
    model: PsrkModel, pressure_kPa: npt.ArrayLike, mole_fractions: npt.ArrayLike
) -> EosStates:
    """Dew temperature and first liquid of vapours at given pressures.

    Parameters
    ----------
    model, pressure_kPa, mole_fractions
        As for `psrk_bubble_temperature`; the fractions are those of the vapour.

    Returns
    -------
    EosStates
        n verified states; the highest temperature where there are several.

    Raises
    ------
    OutOfRangeError, FractionSumError, ShapeError

    Source
    ------
    See the head of this module.
    """
    z = checked_fractions(mole_fractions, model.n_components)
    P, z = paired(checked_pressure(pressure_kPa), z)
    return _points(SaturationProblem(model, "dew", "temperature", P, z))


def _points(problem: SaturationProblem) -> EosStates:
    n = len(problem.z)
    if n > BATCH:
        rows = [slice(start, start + BATCH) for start in range(0, n, BATCH)]
        return joined(
            [_points(replace(problem, fixed=problem.fixed[k], z=problem.z[k])) for k in rows]
        )
    s, u, found = np.zeros(n), np.zeros_like(problem.z), np.zeros(n, dtype=bool)
    if n:
        by_plane = problem.patient and problem.kind == "dew"
        s, u, found = scanned_by_stability(problem) if by_plane else scanned(problem)
        newton(problem, np.flatnonzero(found), s, u)
    T, P = problem.conditions(np.arange(n, dtype=np.int64), s)
    w = np.where(problem.z > 0.0, trial_fractions(u), 0.0) if n else problem.z
    w = w / w.sum(axis=1, keepdims=True)
    liquid, vapour = (problem.z, w) if problem.kind == "bubble" else (w, problem.z)
    text = NOT_FOUND.format(kind=problem.kind, sought=problem.sought)
    failure = tuple(None if ok else text for ok in found.tolist())
    states = verified_points(problem.model, T, P, liquid, vapour, failure)
    again = np.flatnonzero(~states.converged)
    if problem.patient or not len(again):
        return states
    # Close to a critical point the vapour itself is as dense as a liquid; a liquid far from ideal
    # needs more substitutions, or the tangent plane.
    part = replace(problem, fixed=problem.fixed[again], z=problem.z[again], patient=True)
    return with_rows(states, again, _points(part), text)
