"""A correlative equation with its interactions: a liquid model like any other here."""

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike

from groups.activity.blocks import Kernel, checked_points, evaluate
from groups.arrays import FloatArray
from groups.errors import ShapeError
from groups.handoff.correlations.equation import Equation
from groups.handoff.correlations.temperature_forms import basis, basis_slope, form_terms

#: Step of the five-point difference behind the curvature: its own error is of order step^4, below
#: 1e-12 of the value, and so is the rounding of the slope divided by the step.
CURVATURE_STEP_K = 0.1


@dataclass(frozen=True, slots=True)
class Interactions:
    """u_ij(T) = offset_ij + sum of coefficients times the terms of a temperature form.

    Parameters
    ----------
    form : str
        A key of `temperature_forms.FORMS`.
    coefficients : FloatArray of shape (n_terms, n_components, n_components)
        In the unit of each term, T in K; the diagonals are zero.
    offset : FloatArray of shape (n_components, n_components)
        What is fixed beforehand: ln(V_j/V_i) where Wilson's equation takes molar volumes.
    """

    form: str
    coefficients: FloatArray
    offset: FloatArray

    def __post_init__(self) -> None:
        """Refuse coefficients that do not fit the form."""
        if self.coefficients.shape != (len(form_terms(self.form)), *self.offset.shape):
            raise ShapeError(
                f"The form '{self.form}' with {len(self.offset)} components cannot take "
                f"coefficients of shape {self.coefficients.shape}.",
                field="coefficients",
            )

    def values(self, temperature_K: FloatArray) -> FloatArray:
        """u of shape (t, n, n) at temperatures (t,)."""
        return self.offset + np.tensordot(basis(self.form, temperature_K), self.coefficients, 1)

    def slope(self, temperature_K: FloatArray) -> FloatArray:
        """du/dT of shape (t, n, n), 1/K."""
        return np.tensordot(basis_slope(self.form, temperature_K), self.coefficients, 1)


@dataclass(frozen=True, slots=True)
class CorrelativeModel:
    """NRTL, UNIQUAC, Wilson, van Laar or Margules with given parameters.

    It answers everything that an `ActivityModel` answers, so azeotropes, splits and diagrams work
    on it directly.

    Parameters
    ----------
    equation : Equation
    interactions : Interactions
    """

    equation: Equation
    interactions: Interactions

    @property
    def method(self) -> str:
        """Identifier of the equation."""
        return self.equation.name

    @property
    def n_components(self) -> int:
        """Number of components."""
        return len(self.interactions.offset)

    def ln_gamma(self, temperature_K: ArrayLike, mole_fractions: ArrayLike) -> FloatArray:
        """Return ln gamma, 1; arguments as in `groups.activity.ActivityModel`."""
        return self._evaluate(
            lambda T, x: self.equation.ln_gamma(self.interactions.values(T), x),
            temperature_K,
            mole_fractions,
        )

    def ln_gamma_parts(
        self, temperature_K: ArrayLike, mole_fractions: ArrayLike
    ) -> tuple[FloatArray, FloatArray]:
        """Return the part for size and shape (UNIQUAC; else zero), and the rest of ln gamma, 1."""
        total = self.ln_gamma(temperature_K, mole_fractions)
        x = np.asarray(mole_fractions, dtype=np.float64)
        combinatorial = np.broadcast_to(self.equation.combinatorial(x), total.shape).copy()
        return combinatorial, total - combinatorial

    def ln_gamma_slope(self, temperature_K: ArrayLike, mole_fractions: ArrayLike) -> FloatArray:
        """Return d ln gamma / dT at constant composition, 1/K."""
        return self._evaluate(self._slope, temperature_K, mole_fractions, extra=2)

    def ln_gamma_curvature(self, temperature_K: ArrayLike, mole_fractions: ArrayLike) -> FloatArray:
        """Return d2 ln gamma / dT2, 1/K^2, by a five-point difference of the exact slope."""
        T, h = np.asarray(temperature_K, dtype=np.float64), CURVATURE_STEP_K
        at = {k: self.ln_gamma_slope(T + k * h, mole_fractions) for k in (-2, -1, 1, 2)}
        return (8.0 * (at[1] - at[-1]) - (at[2] - at[-2])) / (12.0 * h)

    def ln_gamma_mole_derivatives(
        self, temperature_K: ArrayLike, mole_fractions: ArrayLike
    ) -> FloatArray:
        """Return n d ln gamma_i / dn_j, 1, of shape (..., n_components, n_components)."""
        return self._evaluate(
            lambda T, x: self.equation.mole_derivatives(self.interactions.values(T), x),
            temperature_K,
            mole_fractions,
            extra=1,
            tail=2,
        )

    def interaction_jacobian(
        self, temperature_K: ArrayLike, mole_fractions: ArrayLike
    ) -> FloatArray:
        """Return d ln gamma_i / d u_jk, of shape (..., n i, n j, n k)."""
        return self._evaluate(
            lambda T, x: self.equation.interaction_jacobian(self.interactions.values(T), x),
            temperature_K,
            mole_fractions,
            extra=2,
            tail=3,
        )

    def _slope(self, T: FloatArray, x: FloatArray) -> FloatArray:
        J = self.equation.interaction_jacobian(self.interactions.values(T), x)
        n = self.n_components
        slope = self.interactions.slope(T).reshape(len(T), 1, n * n, 1)
        return (J.reshape(*J.shape[:3], n * n) @ slope)[..., 0]

    def _evaluate(
        self,
        run: Kernel,
        temperature_K: ArrayLike,
        mole_fractions: ArrayLike,
        *,
        extra: int = 0,
        tail: int = 1,
    ) -> FloatArray:
        """Run a kernel in blocks; `extra` axes of components live in its working arrays."""
        T, x = checked_points(temperature_K, mole_fractions, self.n_components)
        n = self.n_components
        return evaluate(run, T, x, (n,) * tail, (n * n, n ** (1 + extra)))
