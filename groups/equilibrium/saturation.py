"""Boiling temperatures of the pure components of a system."""

import numpy as np

from groups.arrays import FloatArray
from groups.equilibrium.system import SaturationLine, System
from groups.equilibrium.temperature_root import rising_root


def boiling_temperatures(system: System, pressure_kPa: FloatArray) -> FloatArray:
    """Temperatures at which the pure components boil.

    Parameters
    ----------
    system : System
    pressure_kPa : array of shape (n,)

    Returns
    -------
    array of shape (n, n_components)
        In K; NaN where the saturation line does not reach the pressure within the bounds of a
        temperature search.
    """
    distinct, back = np.unique(pressure_kPa, return_inverse=True)
    columns = [_boiling(line, np.log(distinct)) for line in system.vapour_pressures]
    return np.asarray(np.stack(columns, axis=-1)[back])


def _boiling(line: SaturationLine, ln_pressure: FloatArray) -> FloatArray:
    def evaluate(T: FloatArray, index: np.ndarray) -> tuple[FloatArray, FloatArray]:
        return line.ln_kPa(T) - ln_pressure[index], line.slope(T)

    temperature, found = rising_root(evaluate, np.full_like(ln_pressure, 350.0))
    return np.where(found, temperature, np.nan)
