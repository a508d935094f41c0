"""Activity-coefficient models: one class for the whole UNIFAC family, and the ideal solution."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from typing import Protocol

import numpy as np
from numpy.typing import ArrayLike

from groups.activity import kernel
from groups.activity.blocks import Kernel, checked_points, evaluate
from groups.activity.composition import counts_matrix, mixture_groups
from groups.arrays import FloatArray
from groups.parameters import MethodTable, table


class ActivityModel(Protocol):
    """What every liquid model offers; all arrays are (..., n_components) unless said otherwise.

    `temperature_K` (K, positive) broadcasts against `mole_fractions[..., 0]`, so a column of
    temperatures with a list of compositions makes a grid. Mole fractions may be exactly 0.
    """

    @property
    def method(self) -> str:
        """Identifier of the method."""

    @property
    def n_components(self) -> int:
        """Number of components."""

    def ln_gamma(self, temperature_K: ArrayLike, mole_fractions: ArrayLike) -> FloatArray:
        """Return ln gamma, 1."""

    def ln_gamma_parts(
        self, temperature_K: ArrayLike, mole_fractions: ArrayLike
    ) -> tuple[FloatArray, FloatArray]:
        """Return the combinatorial and the residual part of ln gamma, 1."""

    def ln_gamma_slope(self, temperature_K: ArrayLike, mole_fractions: ArrayLike) -> FloatArray:
        """Return d ln gamma / dT at constant composition, 1/K."""

    def ln_gamma_curvature(self, temperature_K: ArrayLike, mole_fractions: ArrayLike) -> FloatArray:
        """Return d2 ln gamma / dT2 at constant composition, 1/K^2."""

    def ln_gamma_mole_derivatives(
        self, temperature_K: ArrayLike, mole_fractions: ArrayLike
    ) -> FloatArray:
        """Return n d ln gamma_i / dn_j, 1, of shape (..., n_components i, n_components j)."""


@dataclass(frozen=True, slots=True)
class GroupContributionModel:
    """A mixture described by group counts and one published table of the UNIFAC family.

    Parameters
    ----------
    method : str
        Identifier of the table.
    groups : MixtureGroups
        The arrays that the equations need.
    main_numbers : tuple of int
        Numbers of the main groups that carry surface, in the order of `groups.surface`.

    Source
    ------
    The equations and their papers stand in `groups.activity.kernel`.
    """

    method: str
    groups: kernel.MixtureGroups
    main_numbers: tuple[int, ...]

    @classmethod
    def from_table(cls, parameters: MethodTable, nu: ArrayLike) -> "GroupContributionModel":
        """Build the model from a table and the group counts of each component.

        Parameters
        ----------
        parameters : MethodTable
            Published table.
        nu : array_like of shape (n_components, n_subgroups of the table)
            How often each subgroup occurs in each component, 0 or more.

        Returns
        -------
        GroupContributionModel
            The model.

        Raises
        ------
        MissingParameterError
            Where two main groups of the mixture have no published parameter.
        InvalidInputError
            For a component without groups or without surface.
        """
        groups, main_numbers = mixture_groups(parameters, np.asarray(nu, dtype=np.float64))
        return cls(parameters.method, groups, main_numbers)

    @property
    def n_components(self) -> int:
        """Number of components."""
        return self.groups.volume.size

    def ln_gamma(self, temperature_K: ArrayLike, mole_fractions: ArrayLike) -> FloatArray:
        """Return the natural logarithm of the activity coefficients.

        Parameters
        ----------
        temperature_K : array_like
            Temperatures, K, positive; broadcasts against `mole_fractions[..., 0]`.
        mole_fractions : array_like of shape (..., n_components)
            Mole fractions, 0 to 1, 0 included: the value there is the one at infinite dilution.

        Returns
        -------
        FloatArray of shape (..., n_components)
            ln gamma, 1.

        Raises
        ------
        ShapeError, OutOfRangeError, FractionSumError
            For points that are no states of this mixture.
        """
        T, x = checked_points(temperature_K, mole_fractions, self.n_components)
        answer = self._evaluate(self._residual, T, x)
        answer += self._combinatorial(x)
        return answer

    def ln_gamma_parts(
        self, temperature_K: ArrayLike, mole_fractions: ArrayLike
    ) -> tuple[FloatArray, FloatArray]:
        """Return the combinatorial and the residual part of ln gamma; arguments as `ln_gamma`."""
        T, x = checked_points(temperature_K, mole_fractions, self.n_components)
        residual = self._evaluate(self._residual, T, x)
        combinatorial = np.broadcast_to(self._combinatorial(x), residual.shape)
        return combinatorial.copy(), residual

    def ln_gamma_slope(self, temperature_K: ArrayLike, mole_fractions: ArrayLike) -> FloatArray:
        """Return d ln gamma / dT at constant composition, 1/K; arguments as `ln_gamma`."""
        T, x = checked_points(temperature_K, mole_fractions, self.n_components)
        return self._evaluate(self._slope, T, x)

    def ln_gamma_curvature(self, temperature_K: ArrayLike, mole_fractions: ArrayLike) -> FloatArray:
        """Return d2 ln gamma / dT2 at constant composition, 1/K^2; arguments as `ln_gamma`."""
        T, x = checked_points(temperature_K, mole_fractions, self.n_components)
        return self._evaluate(self._curvature, T, x)

    def ln_gamma_mole_derivatives(
        self, temperature_K: ArrayLike, mole_fractions: ArrayLike
    ) -> FloatArray:
        """Return n d ln gamma_i / dn_j at constant T; arguments as `ln_gamma`.

        Returns
        -------
        FloatArray of shape (..., n_components, n_components)
            Element [i, j], 1. Symmetric; its product with the mole fractions is zero
            (Gibbs-Duhem). For a step dx that sums to zero, d ln gamma = J dx.
        """
        T, x = checked_points(temperature_K, mole_fractions, self.n_components)
        n, n_main = self.groups.surface.shape
        answer = evaluate(self._mole_derivatives, T, x, (n, n), (n_main**2, n * n_main))
        answer += kernel.combinatorial_mole_derivatives(self.groups, x)
        return answer

    def _evaluate(self, run: Kernel, T: FloatArray, x: FloatArray) -> FloatArray:
        n, n_main = self.groups.surface.shape
        return evaluate(run, T, x, (n,), (n_main**2, n_main))

    def _combinatorial(self, x: FloatArray) -> FloatArray:
        n = self.n_components
        any_T = np.ones(())
        return evaluate(
            lambda _, block: kernel.combinatorial(self.groups, block), any_T, x, (n,), (1, n)
        )

    def _residual(self, T: FloatArray, x: FloatArray) -> FloatArray:
        return kernel.residual(self.groups, x, *kernel.group_fields(self.groups, T))

    def _slope(self, T: FloatArray, x: FloatArray) -> FloatArray:
        return kernel.residual_slope(self.groups, x, *kernel.group_fields(self.groups, T, 1))

    def _curvature(self, T: FloatArray, x: FloatArray) -> FloatArray:
        return kernel.residual_curvature(self.groups, x, *kernel.group_fields(self.groups, T, 2))

    def _mole_derivatives(self, T: FloatArray, x: FloatArray) -> FloatArray:
        fields = kernel.group_fields(self.groups, T)
        return kernel.residual_mole_derivatives(self.groups, x, *fields)


def activity_model(assignments: Sequence[Mapping[int, int]], method: str) -> GroupContributionModel:
    """Build the model of a mixture from the groups of its molecules.

    Parameters
    ----------
    assignments : sequence of mapping
        One mapping a component: subgroup number to count.
    method : str
        Identifier of a published table.

    Returns
    -------
    GroupContributionModel
        The model, components in the order given.

    Raises
    ------
    UnknownMethodError
        For a method that does not exist.
    InvalidInputError
        For a subgroup that the table lacks, or a component without groups.
    MissingParameterError
        Where two main groups of the mixture have no published parameter; names them all.
    """
    parameters = table(method)
    return GroupContributionModel.from_table(parameters, counts_matrix(parameters, assignments))
