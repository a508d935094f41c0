"""Flash at given temperature and pressure: the stable phases of any number of mixtures at once."""

import numpy.typing as npt

from groups.equilibrium.conditions import (
    checked_fractions,
    checked_pressure,
    checked_temperature,
    paired,
)
from groups.equilibrium.flash_result import Flash, Phases, flash_result
from groups.equilibrium.phase_problem import PhaseProblem
from groups.equilibrium.phase_search import find_phases
from groups.equilibrium.system import System


def flash(
    system: System,
    temperature_K: npt.ArrayLike,
    pressure_kPa: npt.ArrayLike,
    mole_fractions: npt.ArrayLike,
) -> Flash:
    """Stable phases of mixtures at given temperatures and pressures: liquids and a vapour.

    Parameters
    ----------
    system : System
        Of up to twenty components or so.
    temperature_K : float or array of shape (n,)
        In K, 40 to 2000.
    pressure_kPa : float or array of shape (n,)
        In kPa, 1e-9 to 1e6.
    mole_fractions : array of shape (n_components,) or (n, n_components)
        Overall compositions; each row sums to 1. Zeros are allowed.

    Returns
    -------
    Flash
        Verified; NaN and a text where no stable set of phases was found.

    Raises
    ------
    OutOfRangeError, FractionSumError, ShapeError

    Source
    ------
    Michelsen, Fluid Phase Equilibria 9 (1982) 1-19 and 21-40 (stability, then phase split).
    """
    z = checked_fractions(mole_fractions, system.n_components)
    T, z = paired(checked_temperature(temperature_K), z)
    P, z = paired(checked_pressure(pressure_kPa), z)
    T, z = paired(T, z)
    return flash_states(PhaseProblem.of_system(system, T, P, z))


def flash_states(problem: PhaseProblem) -> Flash:
    """The stable phases of a problem, verified."""
    found = find_phases(problem)
    phases = Phases.of_amounts(found.amounts, found.liquids, found.vapour)
    return flash_result(problem, phases, found.failure)
