"""Would this liquid split? The tangent-plane test for any number of components."""

from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from groups.arrays import BoolArray, FloatArray
from groups.equilibrium.conditions import checked_fractions, checked_temperature, paired
from groups.equilibrium.states import safe_log
from groups.equilibrium.system import LiquidModel
from groups.equilibrium.tangent_plane import stationary_points, trial_starts

#: A tangent-plane distance above minus this counts as zero: the trial found the liquid itself,
#: whose distance is zero to the rounding of ln gamma.
ZERO_DISTANCE = 1e-10
#: A scaled curvature above minus this counts as zero (its scale is 1, for an ideal mixture).
FLAT = 1e-9


@dataclass(frozen=True, slots=True)
class Stability:
    """Result of the tangent-plane test of n liquids.

    Attributes
    ----------
    stable : bool array of shape (n,)
    distance : array of shape (n,)
        Lowest tangent-plane distance found, in units of RT; negative where unstable.
    trial : array of shape (n, n_components)
        The trial liquid at that distance: a first guess of a second liquid where unstable.
    """

    stable: BoolArray
    distance: FloatArray
    trial: FloatArray


def stability(
    liquid: LiquidModel, temperature_K: npt.ArrayLike, mole_fractions: npt.ArrayLike
) -> Stability:
    """Tangent-plane test of liquids against splitting into two liquids.

    Parameters
    ----------
    liquid : LiquidModel
    temperature_K : float or array of shape (n,)
        In K, 40 to 2000.
    mole_fractions : array of shape (n_components,) or (n, n_components)
        Each row sums to 1. Zeros are allowed: a component that is absent stays absent.

    Returns
    -------
    Stability

    Raises
    ------
    OutOfRangeError, FractionSumError, ShapeError

    Source
    ------
    Michelsen, Fluid Phase Equilibria 9 (1982) 1-19. Starts: each pure component, pairs of them,
    the mean, the ideal answer, and both sides of the liquid itself (which a spinodal needs).
    """
    x = checked_fractions(mole_fractions, liquid.n_components)
    T, x = paired(checked_temperature(temperature_K), x)
    if not len(x):
        return Stability(np.empty(0, dtype=bool), np.empty(0), x)
    plane = safe_log(x) + liquid.ln_gamma(T, x)
    beside = [_beside(x, factor) for factor in (0.9, 1.1)] if x.shape[1] <= 3 else []
    return tested(liquid, T, x, plane, np.concatenate([trial_starts(plane), *beside]))


def tested(
    liquid: LiquidModel, T: FloatArray, x: FloatArray, plane: FloatArray, starts: FloatArray
) -> Stability:
    """The test of liquids x, of shape (m, n), from trial liquids of shape (n_starts, m, n)."""
    s, m, n = starts.shape
    points = stationary_points(
        liquid, np.tile(T, s), np.tile(plane, (s, 1)), starts.reshape(s * m, n)
    )
    # A trial that has not converged but lies below the plane is proof enough.
    height = np.where(np.isfinite(points.height), points.height, 0.0).reshape(s, m)
    best = height.argmin(axis=0)
    rows = np.arange(m)
    distance = height[best, rows]
    trial = points.liquid.reshape(s, m, n)[best, rows]
    stable = (distance >= -ZERO_DISTANCE) & (curvature(liquid, T, x)[0] >= -FLAT)
    return Stability(stable, distance, trial)


def curvature(liquid: LiquidModel, T: FloatArray, x: FloatArray) -> tuple[FloatArray, FloatArray]:
    """Lowest eigenvalue of the scaled second derivative of the Gibbs energy, (m,), and its step.

    The steps, of shape (m, n_components), are relative changes of the amounts; the largest is one.
    """
    root = np.sqrt(x)
    slope = liquid.ln_gamma_mole_derivatives(T, x)
    matrix = root[:, :, None] * root[:, None, :] * slope + np.eye(x.shape[1])
    values, vectors = np.linalg.eigh(matrix)
    step = vectors[:, :, 0] / np.where(root > 0.0, root, np.inf)
    return values[:, 0], step / np.maximum(np.abs(step).max(axis=1, keepdims=True), 1e-300)


def _beside(x: FloatArray, factor: float) -> FloatArray:
    """The liquids with one component at a time raised or lowered."""
    n = x.shape[1]
    moved = x[None] * (1.0 + (factor - 1.0) * np.eye(n))[:, None, :]
    return np.asarray(moved / moved.sum(axis=2, keepdims=True))
