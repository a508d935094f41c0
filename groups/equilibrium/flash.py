"""Vapour-liquid flash at given temperature and pressure, any number of components and points.

The bubble and dew pressures say how many phases there are. Between them the Gibbs energy is
minimised over the amounts in the vapour: successive substitution first, then Newton's method.
"""

from dataclasses import dataclass
from typing import Literal

import numpy as np
import numpy.typing as npt

from groups.arrays import BoolArray, FloatArray, IntArray
from groups.equilibrium.bubble import bubble_pressure
from groups.equilibrium.conditions import (
    checked_fractions,
    checked_pressure,
    checked_temperature,
    paired,
)
from groups.equilibrium.dew import dew_pressure
from groups.equilibrium.phase_fraction import phase_fraction
from groups.equilibrium.stability import stability
from groups.equilibrium.states import safe_log, verified_states
from groups.equilibrium.system import System

Phase = Literal["liquid", "vapour", "two-phase", "unknown"]
SUBSTITUTIONS = 8
MAX_ITERATIONS = 100
TOLERANCE = 1e-11
#: Phase amounts must add up to the feed this closely: a few roundings.
BALANCE = 1e-10
SMALLEST_CURVATURE = 1e-6
NO_BOUNDS = "the bubble or dew pressure of this mixture was not found"
NOT_CONVERGED = "the amounts of the phases did not settle"


@dataclass(frozen=True, slots=True)
class Flash:
    """States of n mixtures at given temperature and pressure.

    Attributes
    ----------
    temperature_K, pressure_kPa : array of shape (n,)
    vapour_fraction : array of shape (n,)
        Moles of vapour in a mole of mixture.
    liquid, vapour : array of shape (n, n_components)
        Mole fractions; NaN where the phase is absent.
    gamma : array of shape (n, n_components)
        In the liquid; NaN where there is none.
    phase : tuple of n texts
        "liquid", "vapour", "two-phase", or "unknown" where the flash failed.
    liquid_stable : bool array of shape (n,)
        False where the liquid would split in two, so that the state is not the final one.
    converged : bool array of shape (n,)
    residual : array of shape (n,)
        Largest difference of ln fugacity between two phases; zero for one phase.
    failure : tuple of n texts, None where converged
    """

    temperature_K: FloatArray
    pressure_kPa: FloatArray
    vapour_fraction: FloatArray
    liquid: FloatArray
    vapour: FloatArray
    gamma: FloatArray
    phase: tuple[Phase, ...]
    liquid_stable: BoolArray
    converged: BoolArray
    residual: FloatArray
    failure: tuple[str | None, ...]


def flash(
    system: System,
    temperature_K: npt.ArrayLike,
    pressure_kPa: npt.ArrayLike,
    mole_fractions: npt.ArrayLike,
) -> Flash:
    """Phases of mixtures at given temperatures and pressures.

    Parameters
    ----------
    system : System
    temperature_K : float or array of shape (n,)
        In K, 40 to 2000.
    pressure_kPa : float or array of shape (n,)
        In kPa, 1e-9 to 1e6.
    mole_fractions : array of shape (n_components,) or (n, n_components)
        Overall compositions; each row sums to 1. Zeros are allowed.

    Returns
    -------
    Flash

    Raises
    ------
    OutOfRangeError, FractionSumError, ShapeError

    Source
    ------
    Michelsen, Fluid Phase Equilibria 9 (1982) 21-40 (phase split by minimisation).
    """
    z = checked_fractions(mole_fractions, system.n_components)
    T, z = paired(checked_temperature(temperature_K), z)
    P, z = paired(checked_pressure(pressure_kPa), z)
    T, z = paired(T, z)
    bubble, dew = bubble_pressure(system, T, z), dew_pressure(system, T, z)
    bounded = bubble.converged & dew.converged
    above = bounded & (np.where(bounded, bubble.pressure_kPa, 0.0) <= P)
    below = bounded & ~above & (np.where(bounded, dew.pressure_kPa, 0.0) >= P)
    both = np.flatnonzero(bounded & ~above & ~below)
    split = _Split(system, T[both], P[both], z[both])
    split.run(dew.liquid[both], bubble.vapour[both])
    return _assembled(system, T, P, z, (above, below, both), split)


class _Split:
    """Vapour amounts v of mixtures known to be in two phases."""

    def __init__(self, system: System, T: FloatArray, P: FloatArray, z: FloatArray) -> None:
        self.system, self.T, self.P, self.z = system, T, P, z
        # Both amounts are kept: a difference from the feed would lose what little there is of one.
        self.v, self.lean = np.zeros_like(z), z.copy()
        self.settled = np.zeros(len(z), dtype=bool)

    @property
    def fraction(self) -> FloatArray:
        return np.asarray(self.v.sum(axis=1) / (self.v + self.lean).sum(axis=1))

    @property
    def liquid(self) -> FloatArray:
        return np.asarray(self.lean / self.lean.sum(axis=1, keepdims=True))

    @property
    def vapour(self) -> FloatArray:
        return np.asarray(self.v / self.v.sum(axis=1, keepdims=True))

    def run(self, dew_liquid: FloatArray, bubble_vapour: FloatArray) -> None:
        """Settle from between the dew and the bubble point, else from either of them."""
        ln_z, ln_x, ln_y = safe_log(self.z), safe_log(dew_liquid), safe_log(bubble_vapour)
        present = self.z > 0.0
        from_dew, from_bubble = np.zeros_like(self.z), np.zeros_like(self.z)
        np.subtract(ln_z, np.maximum(ln_x, -690.0), out=from_dew, where=present)
        np.subtract(np.maximum(ln_y, -690.0), ln_z, out=from_bubble, where=present)
        for start in (0.5 * (from_dew + from_bubble), from_dew, from_bubble):
            rows = np.flatnonzero(~self.settled)
            if len(rows):
                self._share(rows, np.clip(start[rows], -300.0, 300.0))
                self._settle(rows)

    def _settle(self, rows: IntArray) -> None:
        """Iterate until the fugacities agree or the iterations end."""
        for iteration in range(MAX_ITERATIONS):
            x, y = self.liquid[rows], self.vapour[rows]
            ln_k = self._ln_k(rows, x, y)
            gap = np.zeros_like(x)
            np.subtract(safe_log(y), safe_log(x) + ln_k, out=gap, where=(x > 1e-290) & (y > 1e-290))
            done = np.abs(gap).max(axis=1) <= TOLERANCE
            self.settled[rows[done]] = True
            rows, ln_k, gap = rows[~done], ln_k[~done], gap[~done]
            if not len(rows):
                return
            if iteration < SUBSTITUTIONS or iteration % 8 == 7:
                self._share(rows, ln_k)
            else:
                self._newton(rows, gap)

    def _ln_k(self, rows: IntArray, x: FloatArray, y: FloatArray) -> FloatArray:
        T, P = self.T[rows], self.P[rows]
        ln_k = self.system.ln_volatility(T, x) - np.log(P)[:, None]
        if not self.system.vapour.ideal:
            ln_k = ln_k - self.system.vapour.ln_correction(T, P, y)
        return np.asarray(np.clip(ln_k, -300.0, 300.0))

    def _share(self, rows: IntArray, ln_k: FloatArray) -> None:
        """Share the feed out by distribution coefficients; keep both phases alive."""
        share, _ = phase_fraction(self.z[rows], ln_k)
        share = np.clip(share, 1e-9, 1.0 - 1e-9)[:, None]
        # v_i/z_i = b K/(1 - b + b K), written so that neither end loses figures.
        ratio = np.exp(np.clip(ln_k, -300.0, 300.0))
        whole = 1.0 - share + share * ratio
        self.v[rows] = self.z[rows] * share * ratio / whole
        self.lean[rows] = self.z[rows] * (1.0 - share) / whole

    def _newton(self, rows: IntArray, gap: FloatArray) -> None:
        z, v, lean = self.z[rows], self.v[rows], self.lean[rows]
        scale = np.sqrt(np.maximum(v * lean, 0.0) / np.where(z > 0.0, z, 1.0))
        matrix = self._curvature(rows, v, lean) * scale[:, :, None] * scale[:, None, :]
        matrix += np.eye(z.shape[1]) * (scale <= 0.0)[:, :, None]
        # Where the liquid is unstable the curvature has the wrong sign: keep the step downhill.
        values, vectors = np.linalg.eigh(matrix)
        values = np.maximum(np.abs(values), SMALLEST_CURVATURE)
        rotated = np.einsum("mji,mj->mi", vectors, -scale * gap) / values
        step = scale * np.einsum("mij,mj->mi", vectors, rotated)
        # The longest step that keeps nine tenths of the way to an empty phase.
        limit = np.where(step < 0.0, v, lean) / np.maximum(np.abs(step), 1e-300)
        length = np.minimum(1.0, 0.9 * np.where(scale > 0.0, limit, np.inf).min(axis=1))
        self.v[rows] = v + step * length[:, None]
        self.lean[rows] = lean - step * length[:, None]

    def _curvature(self, rows: IntArray, v: FloatArray, lean: FloatArray) -> FloatArray:
        """Second derivative of the Gibbs energy over RT in the vapour amounts."""
        eye = np.eye(v.shape[1])
        total_v, total_l = v.sum(axis=1), lean.sum(axis=1)
        x = lean / total_l[:, None]
        slope = self.system.activity.ln_gamma_mole_derivatives(self.T[rows], x)
        vapour = eye / np.where(v > 0.0, v, 1.0)[:, None, :] - 1.0 / total_v[:, None, None]
        liquid = eye / np.where(lean > 0.0, lean, 1.0)[:, None, :]
        return np.asarray(vapour + liquid + (slope - 1.0) / total_l[:, None, None])


def _assembled(
    system: System,
    T: FloatArray,
    P: FloatArray,
    z: FloatArray,
    which: tuple[BoolArray, BoolArray, IntArray],
    split: _Split,
) -> Flash:
    above, below, both = which
    fraction = np.full(len(z), np.nan)
    liquid, vapour, gamma = (np.full_like(z, np.nan) for _ in range(3))
    residual = np.where(above | below, 0.0, np.inf)
    failure: list[str | None] = [NO_BOUNDS] * len(z)
    phase: list[Phase] = ["unknown"] * len(z)
    liquid[above], fraction[above] = z[above], 0.0
    vapour[below], fraction[below] = z[below], 1.0
    if len(both):
        texts = tuple(None if ok else NOT_CONVERGED for ok in split.settled)
        states = verified_states(system, T[both], P[both], split.liquid, split.vapour, texts)
        good = states.converged & (_imbalance(split) <= BALANCE)
        liquid[both[good]], vapour[both[good]] = states.liquid[good], states.vapour[good]
        fraction[both[good]], residual[both] = split.fraction[good], states.residual
        for k, place in enumerate(both):
            failure[int(place)] = None if good[k] else states.failure[k] or NOT_CONVERGED
            phase[int(place)] = "two-phase" if good[k] else "unknown"
    for k in range(len(z)):
        if above[k] or below[k]:
            failure[k], phase[k] = None, "liquid" if above[k] else "vapour"
    wet = np.isfinite(liquid).all(axis=1)
    stable = np.ones(len(z), dtype=bool)
    if wet.any():
        gamma[wet] = np.exp(np.minimum(system.activity.ln_gamma(T[wet], liquid[wet]), 700.0))
        stable[wet] = stability(system.activity, T[wet], liquid[wet]).stable
    converged = np.array([text is None for text in failure], dtype=bool)
    return Flash(
        T,
        P,
        fraction,
        liquid,
        vapour,
        gamma,
        tuple(phase),
        stable,
        converged,
        residual,
        tuple(failure),
    )


def _imbalance(split: _Split) -> FloatArray:
    share = split.fraction[:, None]
    gap = share * split.vapour + (1.0 - share) * split.liquid - split.z
    return np.asarray(np.abs(gap).max(axis=1))
