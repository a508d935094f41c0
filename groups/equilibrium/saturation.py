"""First guesses of boiling temperatures, from a short table of the saturation lines.

Only starts: the searches that use them end on their own equations.
"""

import numpy as np

from groups.arrays import FloatArray
from groups.equilibrium.states import log_sum_exp
from groups.equilibrium.system import ROUGH_K, System


def rough_boiling_temperatures(
    system: System, pressure_kPa: FloatArray
) -> tuple[FloatArray, FloatArray]:
    """Where the pure components boil, and where they would boil together if none dissolved another.

    Parameters
    ----------
    system : System
    pressure_kPa : array of shape (n,)

    Returns
    -------
    pure : array of shape (n, n_components)
        In K, within about a kelvin; the nearest node where the line does not reach the pressure.
    immiscible : array of shape (n,)
        In K: where the sum of the pure vapour pressures is the pressure. No liquid mixture of
        activities below one boils lower.
    """
    table = system.rough_saturation
    columns = [*table.T, log_sum_exp(table)]
    ln_pressure = np.log(pressure_kPa)
    # A saturation line rises everywhere; the running maximum guards a user's line that does not.
    inverse = [
        np.interp(ln_pressure, np.maximum.accumulate(column), 1.0 / ROUGH_K) for column in columns
    ]
    found = 1.0 / np.stack(inverse, axis=-1)
    return found[:, :-1], found[:, -1]
