"""Models made of others: the ideal solution, and a weighted sum of models."""

from collections.abc import Callable
from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike

from groups.activity.blocks import checked_points
from groups.activity.model import ActivityModel
from groups.arrays import FloatArray
from groups.errors import InvalidInputError, ShapeError


@dataclass(frozen=True, slots=True)
class IdealModel:
    """The ideal solution, ln gamma = 0: the yardstick of Raoult's law.

    Parameters
    ----------
    n_components : int
        Number of components.
    """

    n_components: int

    @property
    def method(self) -> str:
        """Identifier of the method."""
        return "ideal"

    def ln_gamma(self, temperature_K: ArrayLike, mole_fractions: ArrayLike) -> FloatArray:
        """Return zeros, 1, of shape (..., n_components)."""
        T, x = checked_points(temperature_K, mole_fractions, self.n_components)
        return np.zeros((*np.broadcast_shapes(T.shape, x.shape[:-1]), self.n_components))

    def ln_gamma_parts(
        self, temperature_K: ArrayLike, mole_fractions: ArrayLike
    ) -> tuple[FloatArray, FloatArray]:
        """Return zeros, 1, for the combinatorial and the residual part."""
        zero = self.ln_gamma(temperature_K, mole_fractions)
        return zero, zero.copy()

    def ln_gamma_slope(self, temperature_K: ArrayLike, mole_fractions: ArrayLike) -> FloatArray:
        """Return zeros, 1/K, of shape (..., n_components)."""
        return self.ln_gamma(temperature_K, mole_fractions)

    def ln_gamma_curvature(self, temperature_K: ArrayLike, mole_fractions: ArrayLike) -> FloatArray:
        """Return zeros, 1/K^2, of shape (..., n_components)."""
        return self.ln_gamma(temperature_K, mole_fractions)

    def ln_gamma_mole_derivatives(
        self, temperature_K: ArrayLike, mole_fractions: ArrayLike
    ) -> FloatArray:
        """Return zeros, 1, of shape (..., n_components, n_components)."""
        zero = self.ln_gamma(temperature_K, mole_fractions)
        return np.zeros((*zero.shape, self.n_components))


@dataclass(frozen=True, slots=True)
class WeightedModel:
    """The weighted sum of the excess Gibbs energies of several models of one mixture.

    ln gamma is the partial molar property of gE, so it is summed with the same weights, and the
    sum obeys Gibbs-Duhem and Gibbs-Helmholtz as each model does.

    Parameters
    ----------
    models : tuple of ActivityModel
        At least one; all for the same components in the same order.
    weights : tuple of float
        One weight a model, 1, not negative, summing to 1.

    Raises
    ------
    ShapeError
        Where the models and weights do not fit together.
    InvalidInputError
        Where the weights are negative or do not sum to 1.
    """

    models: tuple[ActivityModel, ...]
    weights: tuple[float, ...]

    def __post_init__(self) -> None:
        """Refuse models and weights that do not fit together."""
        if not self.models or len(self.models) != len(self.weights):
            raise ShapeError(
                f"{len(self.models)} models cannot take {len(self.weights)} weights.",
                cure="Give one weight for each model.",
                field="weights",
            )
        if len({model.n_components for model in self.models}) != 1:
            raise ShapeError(
                "The models of a weighted sum must describe the same components.",
                field="models",
            )
        # 1e-9: a sum of a few weights is exact to rounding; anything more is a mistake.
        if min(self.weights) < 0.0 or not abs(sum(self.weights) - 1.0) <= 1e-9:
            raise InvalidInputError(
                f"The weights must be positive and sum to 1. Got {self.weights} instead.",
                field="weights",
            )

    @property
    def method(self) -> str:
        """Identifiers of the methods, joined."""
        return "+".join(model.method for model in self.models)

    @property
    def n_components(self) -> int:
        """Number of components."""
        return self.models[0].n_components

    def ln_gamma(self, temperature_K: ArrayLike, mole_fractions: ArrayLike) -> FloatArray:
        """Return the weighted ln gamma, 1."""
        return self._sum(lambda model: model.ln_gamma(temperature_K, mole_fractions))

    def ln_gamma_parts(
        self, temperature_K: ArrayLike, mole_fractions: ArrayLike
    ) -> tuple[FloatArray, FloatArray]:
        """Return the weighted combinatorial and residual parts, 1."""
        parts = [model.ln_gamma_parts(temperature_K, mole_fractions) for model in self.models]
        both = [np.stack(part) for part in zip(*parts, strict=True)]
        combinatorial, residual = (np.tensordot(self.weights, part, axes=1) for part in both)
        return combinatorial, residual

    def ln_gamma_slope(self, temperature_K: ArrayLike, mole_fractions: ArrayLike) -> FloatArray:
        """Return the weighted d ln gamma / dT, 1/K."""
        return self._sum(lambda model: model.ln_gamma_slope(temperature_K, mole_fractions))

    def ln_gamma_curvature(self, temperature_K: ArrayLike, mole_fractions: ArrayLike) -> FloatArray:
        """Return the weighted d2 ln gamma / dT2, 1/K^2."""
        return self._sum(lambda model: model.ln_gamma_curvature(temperature_K, mole_fractions))

    def ln_gamma_mole_derivatives(
        self, temperature_K: ArrayLike, mole_fractions: ArrayLike
    ) -> FloatArray:
        """Return the weighted n d ln gamma_i / dn_j, 1."""
        return self._sum(
            lambda model: model.ln_gamma_mole_derivatives(temperature_K, mole_fractions)
        )

    def _sum(self, part: Callable[[ActivityModel], FloatArray]) -> FloatArray:
        total = self.weights[0] * part(self.models[0])
        for weight, model in zip(self.weights[1:], self.models[1:], strict=True):
            total += weight * part(model)
        return total
