"""Whole activity-coefficient curves drawn at random, each consistent in itself.

The error of the prediction is taken as one random excess Gibbs energy that is added to it:

    d gE/RT = sum_{i<j} x_i x_j [B_ij + C_ij (x_i - x_j)]      (two-constant Margules form)

with B_ij = (e_ij + e_ji)/2 and C_ij = (e_ji - e_ij)/2, so that e_ij is the error of ln gamma of i
at infinite dilution in j. Both errors of a binary are drawn from the calibrated distribution with
the measured correlation. The error of every ln gamma follows by differentiation; it vanishes at
the pure component, and every draw obeys Gibbs-Duhem exactly. It does not depend on temperature.

Source
------
Margules form: Prausnitz, Lichtenthaler & Gomes de Azevedo, Molecular Thermodynamics of
Fluid-Phase Equilibria, 3rd ed. (1999), section 6.2 and 6.10 (from memory). The error model is this
project's.
"""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from itertools import permutations

import numpy as np
from numpy.typing import ArrayLike
from scipy.special import ndtr

from groups.activity import ActivityModel
from groups.activity.choice import OnMissing
from groups.arrays import FloatArray
from groups.confidence.calibration.intervals import dilute_answers
from groups.confidence.calibration.model import calibration
from groups.errors import ShapeError
from groups.structure.molecule import Molecule


@dataclass(frozen=True, slots=True)
class PerturbedModel:
    """An activity model with one drawn excess Gibbs energy added; itself an activity model.

    `symmetric` is B and `antisymmetric` C of this module's formula, (n_components, n_components).
    """

    base: ActivityModel
    symmetric: FloatArray
    antisymmetric: FloatArray

    @property
    def method(self) -> str:
        """Identifier of the method drawn around."""
        return self.base.method

    @property
    def n_components(self) -> int:
        """Number of components."""
        return self.base.n_components

    def ln_gamma(self, temperature_K: ArrayLike, mole_fractions: ArrayLike) -> FloatArray:
        """Return ln gamma, 1."""
        return self.base.ln_gamma(temperature_K, mole_fractions) + self._extra(mole_fractions)

    def ln_gamma_parts(
        self, temperature_K: ArrayLike, mole_fractions: ArrayLike
    ) -> tuple[FloatArray, FloatArray]:
        """Return the combinatorial part and the residual part, which holds the addition, 1."""
        first, second = self.base.ln_gamma_parts(temperature_K, mole_fractions)
        return first, second + self._extra(mole_fractions)

    def ln_gamma_slope(self, temperature_K: ArrayLike, mole_fractions: ArrayLike) -> FloatArray:
        """Return d ln gamma / dT, 1/K; the addition does not depend on T."""
        return self.base.ln_gamma_slope(temperature_K, mole_fractions)

    def ln_gamma_curvature(self, temperature_K: ArrayLike, mole_fractions: ArrayLike) -> FloatArray:
        """Return d2 ln gamma / dT2, 1/K^2."""
        return self.base.ln_gamma_curvature(temperature_K, mole_fractions)

    def ln_gamma_mole_derivatives(
        self, temperature_K: ArrayLike, mole_fractions: ArrayLike
    ) -> FloatArray:
        """Return n d ln gamma_i / dn_j, 1, (..., n_components, n_components)."""
        own = self.base.ln_gamma_mole_derivatives(temperature_K, mole_fractions)
        return own + mole_derivatives(
            self.symmetric, self.antisymmetric, np.asarray(mole_fractions, dtype=np.float64)
        )

    def _extra(self, mole_fractions: ArrayLike) -> FloatArray:
        x = np.asarray(mole_fractions, dtype=np.float64)
        extra: FloatArray = addition(self.symmetric[None], self.antisymmetric[None], x)[0]
        return extra


@dataclass(frozen=True, slots=True)
class SampledModels:
    """Many draws around one model; sample s is `list(models)[s]`.

    Parameters
    ----------
    base : ActivityModel
    symmetric, antisymmetric : FloatArray of shape (n_samples, n_components, n_components)
    """

    base: ActivityModel
    symmetric: FloatArray
    antisymmetric: FloatArray

    def __len__(self) -> int:
        """Number of draws."""
        return len(self.symmetric)

    def __iter__(self) -> Iterator[PerturbedModel]:
        """Every draw as an activity model of its own."""
        for B, C in zip(self.symmetric, self.antisymmetric, strict=True):
            yield PerturbedModel(self.base, B, C)

    def ln_gamma(self, temperature_K: ArrayLike, mole_fractions: ArrayLike) -> FloatArray:
        """ln gamma of all draws at once; the underlying model is evaluated only once.

        Parameters
        ----------
        temperature_K : array_like
            K; broadcasts against the points.
        mole_fractions : array_like of shape (..., n_components)

        Returns
        -------
        FloatArray of shape (n_samples, ..., n_components)
        """
        x = np.asarray(mole_fractions, dtype=np.float64)
        own = self.base.ln_gamma(temperature_K, x)
        return own[None] + addition(self.symmetric, self.antisymmetric, x)

    def addition(self, mole_fractions: ArrayLike) -> FloatArray:
        """Drawn errors of ln gamma alone, (n_samples, ..., n_components)."""
        x = np.asarray(mole_fractions, dtype=np.float64)
        return addition(self.symmetric, self.antisymmetric, x)


def sample_models(
    model: ActivityModel,
    molecules: Sequence[Molecule],
    temperature_K: float,
    n_samples: int,
    seed: int,
    on_missing: OnMissing = "estimate",
) -> SampledModels:
    """Draw whole consistent liquids around a prediction.

    Parameters
    ----------
    model : ActivityModel
        The prediction, its components in the order of `molecules`.
    molecules : sequence of Molecule
        Two or more.
    temperature_K : float
        Where the widths are taken, K: the middle of the task's range.
    n_samples : int
    seed : int
        The same seed gives the same draws.
    on_missing : {"refuse", "estimate"}

    Returns
    -------
    SampledModels

    Raises
    ------
    ShapeError
        If model and molecules do not fit together.

    Source
    ------
    The error model of this module; widths as `dilute_answers`.
    """
    if model.n_components != len(molecules):
        raise ShapeError(
            f"A model of {model.n_components} components does not fit {len(molecules)} molecules.",
            field="molecules",
        )
    places = list(permutations(range(len(molecules)), 2))
    pairs = [(molecules[i], molecules[j], temperature_K) for i, j in places]
    scale = np.zeros((len(molecules), len(molecules)))
    scale[tuple(np.array(places).T)] = np.nan_to_num(dilute_answers(pairs, on_missing).scale)
    errors = scale * _scaled_errors(len(molecules), n_samples, seed)
    turned = np.swapaxes(errors, 1, 2)
    return SampledModels(model, (errors + turned) / 2.0, (turned - errors) / 2.0)


def _scaled_errors(n: int, n_samples: int, seed: int) -> FloatArray:
    """Scaled errors e_ij, (n_samples, n, n); e_ij and e_ji correlated (Gaussian copula).

    The share of a common normal deviate in both directions makes the measured rank correlation
    (for a copula, r = 2 sin(pi rho / 6)).
    """
    calibrated = calibration()
    r = max(2.0 * np.sin(np.pi * calibrated.correlation / 6.0), 0.0)
    generator = np.random.default_rng(seed)
    common = generator.standard_normal((n_samples, n, n))
    common = np.triu(common) + np.swapaxes(np.triu(common, 1), 1, 2)
    own = generator.standard_normal((n_samples, n, n))
    deviates = np.sqrt(r) * common + np.sqrt(1.0 - r) * own
    return calibrated.scaled_quantile(ndtr(deviates))


def addition(B: FloatArray, C: FloatArray, x: FloatArray) -> FloatArray:
    """ln gamma of the added excess Gibbs energy.

    Parameters
    ----------
    B, C : FloatArray of shape (n_samples, n_components, n_components)
        Symmetric and antisymmetric constants, diagonals of B zero.
    x : FloatArray of shape (..., n_components)

    Returns
    -------
    FloatArray of shape (n_samples, ..., n_components)
    """
    flat = x.reshape(-1, x.shape[-1])
    # g = g2 + g3 with g2 = x'Bx/2 and g3 = sum C_ij x_i^2 x_j, homogeneous of degree 2 and 3
    Bx, Cx = np.einsum("sij,pj->spi", B, flat), np.einsum("sij,pj->spi", C, flat)
    Cxx = np.einsum("sij,pj->spi", C, flat**2)
    slope = Bx + 2.0 * flat * Cx - Cxx
    total = np.sum(flat * Bx, axis=-1) / 2.0 + 2.0 * np.sum(flat**2 * Cx, axis=-1)
    answer: FloatArray = slope - total[..., None]
    return answer.reshape(len(B), *x.shape)


def mole_derivatives(B: FloatArray, C: FloatArray, x: FloatArray) -> FloatArray:
    """n d ln gamma_i / dn_j of the added excess Gibbs energy.

    Parameters
    ----------
    B, C : FloatArray of shape (n_components, n_components)
    x : FloatArray of shape (..., n_components)

    Returns
    -------
    FloatArray of shape (..., n_components, n_components)
    """
    Bx, Cx, Cxx = x @ B.T, x @ C.T, (x**2) @ C.T
    unit = np.eye(x.shape[-1])
    hessian = B + 2.0 * (Cx[..., :, None] * unit + x[..., :, None] * C - C * x[..., None, :])
    # d/dx_j of (slope_i - g2 - 2 g3), each x taken as free; then n d/dn_j = d/dx_j - sum x_k d/dx_k
    free = hessian - (Bx + 2.0 * (2.0 * x * Cx - Cxx))[..., None, :]
    derivative: FloatArray = free - np.sum(free * x[..., None, :], axis=-1, keepdims=True)
    return derivative
