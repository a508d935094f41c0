"""The plait point of a ternary: where both liquids of a tie line have become one.

There the lowest eigenvalue of the scaled second derivative of the Gibbs energy is zero, and so is
its change along the step that belongs to it.
"""

from dataclasses import dataclass

import numpy as np
from scipy.optimize import root

from groups.arrays import FloatArray
from groups.equilibrium.stability import curvature
from groups.equilibrium.system import LiquidModel

#: Largest |eigenvalue|, and of its change for a unit step, at a plait point.
TOLERANCE = 1e-7
#: Relative step of the amounts for the change along the step.
STEP = 1e-4


@dataclass(frozen=True, slots=True)
class _Conditions:
    liquid: LiquidModel
    T: FloatArray
    towards: FloatArray  # keeps the sign of the step from one evaluation to the next

    def __call__(self, free: FloatArray) -> FloatArray:
        x = _composition(free)
        if x is None:
            return np.full(2, 1e3)
        value, step = self._lowest(x)
        along = []
        for sign in (-1.0, 1.0):
            moved = x * (1.0 + sign * STEP * step)
            along.append(self._lowest(moved / moved.sum())[0])
        return np.array([value, (along[1] - along[0]) / (2.0 * STEP)])

    def _lowest(self, x: FloatArray) -> tuple[float, FloatArray]:
        values, steps = curvature(self.liquid, self.T, x[None])
        step = steps[0]
        sign = 1.0 if float(step @ self.towards) >= 0.0 else -1.0
        return float(values[0]), sign * step


def plait_point(
    liquid: LiquidModel, temperature_K: float, first: FloatArray, second: FloatArray
) -> FloatArray | None:
    """The plait point beyond a short tie line; None where it is not found near by.

    Parameters
    ----------
    liquid : LiquidModel
        Of three components.
    temperature_K : float
    first, second : array of shape (3,)
        The ends of the tie line.
    """
    middle = 0.5 * (first + second)
    conditions = _Conditions(liquid, np.array([temperature_K]), (second - first) / middle)
    end = root(conditions, middle[:2], method="hybr", options={"xtol": 1e-13})
    x = _composition(end.x)
    length = float(np.abs(second - first).max())
    if x is None or np.abs(end.fun).max() > TOLERANCE:
        return None
    return x if np.abs(x - middle).max() < max(5.0 * length, 0.05) else None


def _composition(free: FloatArray) -> FloatArray | None:
    x = np.append(free, 1.0 - free.sum())
    return x if (x > 1e-9).all() else None
