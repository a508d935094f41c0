"""An activity model with a small excess Gibbs energy added, which acts most at high dilution.

    d gE/RT = sum_{i != j} a_ij x_i x_j^q

a_ij is what is added to ln gamma of i at infinite dilution in j. Every ln gamma follows by
differentiation, so Gibbs-Duhem holds, and the addition vanishes at every pure component. With
q = 2 a binary has the two-constant Margules form; the larger q, the less of the addition reaches
the middle of the composition range. It does not depend on temperature.

Source
------
Margules form: Prausnitz, Lichtenthaler & Gomes de Azevedo, Molecular Thermodynamics of
Fluid-Phase Equilibria, 3rd ed. (1999), chapter 6 (from memory). The power q is this project's.
"""

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike

from groups.activity import ActivityModel
from groups.arrays import FloatArray


@dataclass(frozen=True, slots=True)
class AddedExcess:
    """An activity model and an addition to it; itself an activity model.

    Parameters
    ----------
    base : ActivityModel
    dilute : FloatArray of shape (n_components, n_components)
        a_ij of this module's formula, 1; the diagonal is zero.
    power : int
        q of the formula, 2 or more.
    """

    base: ActivityModel
    dilute: FloatArray
    power: int

    @property
    def method(self) -> str:
        """Identifier of the method added to."""
        return self.base.method

    @property
    def n_components(self) -> int:
        """Number of components."""
        return self.base.n_components

    def ln_gamma(self, temperature_K: ArrayLike, mole_fractions: ArrayLike) -> FloatArray:
        """Return ln gamma, 1."""
        return self.base.ln_gamma(temperature_K, mole_fractions) + self._added(mole_fractions)

    def ln_gamma_parts(
        self, temperature_K: ArrayLike, mole_fractions: ArrayLike
    ) -> tuple[FloatArray, FloatArray]:
        """Return the combinatorial part and the residual part, which holds the addition, 1."""
        first, second = self.base.ln_gamma_parts(temperature_K, mole_fractions)
        return first, second + self._added(mole_fractions)

    def ln_gamma_slope(self, temperature_K: ArrayLike, mole_fractions: ArrayLike) -> FloatArray:
        """Return d ln gamma / dT, 1/K."""
        return self.base.ln_gamma_slope(temperature_K, mole_fractions)

    def ln_gamma_curvature(self, temperature_K: ArrayLike, mole_fractions: ArrayLike) -> FloatArray:
        """Return d2 ln gamma / dT2, 1/K^2."""
        return self.base.ln_gamma_curvature(temperature_K, mole_fractions)

    def ln_gamma_mole_derivatives(
        self, temperature_K: ArrayLike, mole_fractions: ArrayLike
    ) -> FloatArray:
        """Return n d ln gamma_i / dn_j, 1, (..., n_components, n_components)."""
        own = self.base.ln_gamma_mole_derivatives(temperature_K, mole_fractions)
        x = np.asarray(mole_fractions, dtype=np.float64)
        return own + added_mole_derivatives(self.dilute, self.power, x)

    def _added(self, mole_fractions: ArrayLike) -> FloatArray:
        x = np.asarray(mole_fractions, dtype=np.float64)
        added: FloatArray = added_ln_gamma(self.dilute[None], self.power, x)[0]
        return added


def added_ln_gamma(dilute: FloatArray, power: int, mole_fractions: FloatArray) -> FloatArray:
    """ln gamma of the addition, for many sets of constants at once.

    Parameters
    ----------
    dilute : FloatArray of shape (n_sets, n_components, n_components)
    power : int
    mole_fractions : FloatArray of shape (..., n_components)

    Returns
    -------
    FloatArray of shape (n_sets, ..., n_components)
    """
    x = mole_fractions.reshape(1, -1, mole_fractions.shape[-1])
    return added_ln_gamma_each(dilute, power, x).reshape(len(dilute), *mole_fractions.shape)


def added_ln_gamma_each(dilute: FloatArray, power: int, mole_fractions: FloatArray) -> FloatArray:
    """ln gamma of the addition at points of each set's own.

    Parameters
    ----------
    dilute : FloatArray of shape (n_sets, n_components, n_components)
    power : int
    mole_fractions : FloatArray of shape (n_sets or 1, n_points, n_components)

    Returns
    -------
    FloatArray of shape (n_sets, n_points, n_components)
    """
    x = mole_fractions
    # g = sum a_ij x_i x_j^q is homogeneous of degree q + 1: ln gamma_k = dg/dx_k - q g
    rows, columns = x**power @ dilute.mT, x @ dilute
    g = np.sum(x * rows, axis=-1, keepdims=True)
    answer: FloatArray = rows + power * x ** (power - 1) * columns - power * g
    return answer


def added_mole_derivatives(
    dilute: FloatArray, power: int, mole_fractions: FloatArray
) -> FloatArray:
    """n d ln gamma_i / dn_j of the addition.

    Parameters
    ----------
    dilute : FloatArray of shape (n_components, n_components)
    power : int
    mole_fractions : FloatArray of shape (..., n_components)

    Returns
    -------
    FloatArray of shape (..., n_components, n_components)
    """
    x, q = mole_fractions, power
    steep = q * x ** (q - 1)
    rows, columns = x**q @ dilute.T, x @ dilute
    cross = dilute * steep[..., None, :]
    curve = q * (q - 1) * x ** (q - 2) * columns
    hessian = cross + np.swapaxes(cross, -1, -2) + curve[..., None] * np.eye(x.shape[-1])
    free = hessian - q * (rows + steep * columns)[..., None, :]
    derivative: FloatArray = free - np.sum(free * x[..., None, :], axis=-1, keepdims=True)
    return derivative
