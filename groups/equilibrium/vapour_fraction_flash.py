"""Flash at a given vapour fraction and a pressure or a temperature.

Between the bubble and the dew point the vapour fraction of a flash at temperature and pressure
rises from zero to one. A few such flashes bracket the fraction wanted; the states on both sides
together hold every phase, and Newton's method ends between them, also where the fraction jumps
because three phases of two components meet at one temperature only.
"""

import numpy as np
import numpy.typing as npt

from groups.arrays import FloatArray
from groups.equilibrium.conditions import (
    checked_fractions,
    checked_pressure,
    checked_temperature,
    paired,
)
from groups.equilibrium.dew import dew_pressure, dew_temperature
from groups.equilibrium.flash_result import Flash, Phases, flash_result
from groups.equilibrium.phase_newton import Unknown
from groups.equilibrium.phase_problem import PhaseProblem
from groups.equilibrium.phase_search import MOST_LIQUIDS
from groups.equilibrium.stable_bubble import stable_bubble_pressure, stable_bubble_temperature
from groups.equilibrium.states import States
from groups.equilibrium.system import System
from groups.equilibrium.vapour_fraction_bracket import Bracketing, End
from groups.errors import OutOfRangeError

NOT_FOUND = "no state of this vapour fraction was found between the bubble and the dew point"


def flash_at_pressure(
    system: System,
    pressure_kPa: npt.ArrayLike,
    vapour_fraction: npt.ArrayLike,
    mole_fractions: npt.ArrayLike,
) -> Flash:
    """Temperature and phases of mixtures at given pressures and vapour fractions.

    Parameters
    ----------
    system : System
    pressure_kPa : float or array of shape (n,)
        In kPa, 1e-9 to 1e6.
    vapour_fraction : float or array of shape (n,)
        Moles of vapour in a mole of mixture, 0 (bubble point) to 1 (dew point).
    mole_fractions : array of shape (n_components,) or (n, n_components)
        Overall compositions; each row sums to 1. Zeros are allowed.

    Returns
    -------
    Flash
        Verified; NaN and a text where no stable state was found.

    Raises
    ------
    OutOfRangeError, FractionSumError, ShapeError

    Source
    ------
    Michelsen & Mollerup, Thermodynamic Models: Fundamentals and Computational Aspects, 2nd ed.
    (2007), chapter 12 (flash with other specifications).
    """
    z = checked_fractions(mole_fractions, system.n_components)
    P, z = paired(checked_pressure(pressure_kPa), z)
    vf, z = paired(_checked_fraction(vapour_fraction), z)
    P, z = paired(P, z)
    bubble, dew = stable_bubble_temperature(system, P, z), dew_temperature(system, P, z)
    return _solved(system, "temperature", (bubble.temperature_K, P), bubble, dew, vf, z)


def flash_at_temperature(
    system: System,
    temperature_K: npt.ArrayLike,
    vapour_fraction: npt.ArrayLike,
    mole_fractions: npt.ArrayLike,
) -> Flash:
    """Pressure and phases of mixtures at given temperatures and vapour fractions.

    Parameters
    ----------
    system : System
    temperature_K : float or array of shape (n,)
        In K, 40 to 2000.
    vapour_fraction : float or array of shape (n,)
        Moles of vapour in a mole of mixture, 0 (bubble point) to 1 (dew point).
    mole_fractions : array of shape (n_components,) or (n, n_components)
        Overall compositions; each row sums to 1. Zeros are allowed.

    Returns
    -------
    Flash
        Verified; NaN and a text where no stable state was found.

    Raises
    ------
    OutOfRangeError, FractionSumError, ShapeError

    Source
    ------
    As `flash_at_pressure`.
    """
    z = checked_fractions(mole_fractions, system.n_components)
    T, z = paired(checked_temperature(temperature_K), z)
    vf, z = paired(_checked_fraction(vapour_fraction), z)
    T, z = paired(T, z)
    bubble, dew = stable_bubble_pressure(system, T, z), dew_pressure(system, T, z)
    return _solved(system, "pressure", (T, bubble.pressure_kPa), bubble, dew, vf, z)


def _checked_fraction(vapour_fraction: npt.ArrayLike) -> FloatArray:
    values = np.atleast_1d(np.asarray(vapour_fraction, dtype=np.float64))
    outside = ~((values >= 0.0) & (values <= 1.0))
    if outside.any():
        raise OutOfRangeError("vapour_fraction", float(values[outside][0]), 0.0, 1.0)
    return values


def _solved(
    system: System,
    unknown: Unknown,
    condition: tuple[FloatArray, FloatArray],
    bubble: Flash,
    dew: States,
    vf: FloatArray,
    z: FloatArray,
) -> Flash:
    m, n = z.shape
    T, P = (np.where(np.isfinite(part), part, 300.0) for part in condition)
    liquids, shares = np.full((m, MOST_LIQUIDS, n), np.nan), np.zeros((m, MOST_LIQUIDS))
    phases = Phases(liquids, shares, np.full((m, n), np.nan), np.zeros(m))
    failure: list[str | None] = [None] * m
    for row in range(m):
        if not (bubble.converged[row] and dew.converged[row]):
            failure[row] = bubble.failure[row] or dew.failure[row]
        elif vf[row] == 0.0:
            T[row], P[row] = bubble.temperature_K[row], bubble.pressure_kPa[row]
            liquids[row], shares[row] = bubble.liquids[row], bubble.liquid_fractions[row]
            phases.vapour[row] = bubble.vapour[row]
        elif vf[row] == 1.0:
            T[row], P[row] = dew.temperature_K[row], dew.pressure_kPa[row]
            liquids[row, 0], phases.vapour[row] = dew.liquid[row], z[row]
            phases.vapour_fraction[row] = 1.0
        else:
            search = Bracketing(system, unknown, float(T[row]), float(P[row]), z[row], vf[row])
            found = search.run(_from_bubble(bubble, row, unknown), _from_dew(dew, row, unknown))
            if found is None:
                failure[row] = NOT_FOUND
                continue
            T[row], P[row] = found.temperature_K, found.pressure_kPa
            count = len(found.amounts) - 1
            amounts = np.zeros((1, MOST_LIQUIDS + 1, n))
            amounts[0, : count + 1] = found.amounts
            one = Phases.of_amounts(amounts, np.array([count]), np.array([True]))
            liquids[row], shares[row] = one.liquids[0], one.liquid_fractions[0]
            phases.vapour[row], phases.vapour_fraction[row] = one.vapour[0], one.vapour_fraction[0]
    return flash_result(PhaseProblem.of_system(system, T, P, z), phases, failure)


def _from_bubble(bubble: Flash, row: int, unknown: Unknown) -> End:
    value = bubble.temperature_K[row] if unknown == "temperature" else bubble.pressure_kPa[row]
    parts = bubble.liquids[row] * bubble.liquid_fractions[row][:, None]
    liquids = [part for part in parts if np.isfinite(part).all()]
    return End(float(np.log(value)), 0.0, liquids, None)


def _from_dew(dew: States, row: int, unknown: Unknown) -> End:
    value = dew.temperature_K[row] if unknown == "temperature" else dew.pressure_kPa[row]
    return End(float(np.log(value)), 1.0, [], dew.vapour[row])
