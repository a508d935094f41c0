"""The homogeneous boiling curve of a binary, from one pure end to the other."""

from dataclasses import dataclass

import numpy as np

from groups.arrays import FloatArray
from groups.equilibrium.binary_split import fractions
from groups.equilibrium.bubble import bubble_pressure, bubble_temperature
from groups.equilibrium.states import States
from groups.equilibrium.system import System

#: s = ln(x1/x2) of the points that azeotropes are looked for between, besides those of a diagram:
#: 0.5 in s is a step of at most 0.12 in x1, and reaches azeotropes at x = 1e-7.
INNER_S = np.arange(-6.0, 6.25, 0.5)
EDGE_S = np.array([-16.0, -13.0, -11.0, -9.0, -7.5])
SEARCH_S = np.concatenate([EDGE_S, INNER_S, -EDGE_S[::-1]])


@dataclass(frozen=True, slots=True)
class Condition:
    """What stays along a diagram: the pressure or the temperature."""

    pressure_kPa: float | None = None
    temperature_K: float | None = None

    def boil(self, system: System, x: FloatArray) -> States:
        """Homogeneous bubble points of the liquids x at this condition."""
        if self.pressure_kPa is not None:
            return bubble_temperature(system, self.pressure_kPa, x)
        assert self.temperature_K is not None
        return bubble_pressure(system, self.temperature_K, x)


@dataclass(frozen=True, slots=True)
class BoilingCurve:
    """Homogeneous bubble points in the order of x1, and ln of the relative volatility."""

    x: FloatArray
    states: States
    ln_alpha: FloatArray


def boiling_curve(system: System, condition: Condition, x1: FloatArray) -> BoilingCurve:
    """Bubble points at the mole fractions x1 and at those that a search for azeotropes needs.

    Parameters
    ----------
    system : System
        Of two components.
    condition : Condition
    x1 : array of shape (k,)
        Mole fractions wanted, each from 0 to 1, ascending.

    Returns
    -------
    BoilingCurve
        Of more points than wanted.
    """
    wanted = np.stack([x1, 1.0 - x1], axis=-1)
    x = np.concatenate([wanted, fractions(SEARCH_S)])
    # Sorted by x1 and then by falling x2: close to x1 = 1 only x2 tells points apart.
    x = x[np.lexsort((-x[:, 1], x[:, 0]))]
    states = condition.boil(system, x)
    ln_alpha = np.full(len(x), np.nan)
    good = states.converged
    saturation = system.ln_saturation(states.temperature_K[good])
    correction = system.vapour.ln_correction(
        states.temperature_K[good], states.pressure_kPa[good], states.vapour[good]
    )
    ln_k = np.log(states.gamma[good]) + saturation - correction
    ln_alpha[good] = ln_k[:, 0] - ln_k[:, 1]
    return BoilingCurve(x, states, ln_alpha)
