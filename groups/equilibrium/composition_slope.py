"""How ln gamma answers to the logarithms of the amounts, for Newton steps in a composition."""

from typing import Protocol, runtime_checkable

import numpy as np

from groups.arrays import FloatArray
from groups.equilibrium.system import LiquidModel

#: Step in ln(amount). Forward difference: an error of 1e-6 in a Newton matrix costs one digit in a
#: million per step, and rounding (1e-14 of ln gamma) costs 1e-8.
STEP = 1e-6


@runtime_checkable
class HasCompositionSlope(Protocol):
    """A liquid model that knows the derivative itself."""

    def ln_gamma_composition_slope(
        self, temperature_K: FloatArray, mole_fractions: FloatArray
    ) -> FloatArray:
        """d ln gamma_i / d ln n_j, of shape (..., n_components, n_components)."""


def composition_slope(
    liquid: LiquidModel, temperature_K: FloatArray, x: FloatArray, ln_gamma: FloatArray
) -> FloatArray:
    """d ln gamma_i / d ln n_j at the other amounts constant.

    Parameters
    ----------
    liquid : LiquidModel
    temperature_K : array of shape (m,)
    x : array of shape (m, n_components)
    ln_gamma : array of shape (m, n_components)
        ln gamma at x, known already.

    Returns
    -------
    array of shape (m, n_components, n_components)
        Indexed [point, i, j]; zero in the column of a component that is absent.
    """
    if isinstance(liquid, HasCompositionSlope):
        return liquid.ln_gamma_composition_slope(temperature_K, x)
    n = x.shape[1]
    raised = x[:, None, :] * (1.0 + STEP * np.eye(n))
    raised /= raised.sum(axis=2, keepdims=True)
    shifted = liquid.ln_gamma(temperature_K[:, None], raised)
    return np.asarray(np.swapaxes(shifted - ln_gamma[:, None, :], 1, 2) / np.log1p(STEP))
