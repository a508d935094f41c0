"""Flash at given temperature and pressure by the equation of state.

The tangent plane says whether a feed is stable in one phase. Where it is not, the trial phase it
found starts a split: successive substitution on the distribution coefficients, then Newton's
method on the Gibbs energy in the amounts of the lighter phase. The tangent plane of the result says
whether a third phase would form, which is not computed here and is told instead.

Source: M. L. Michelsen, Fluid Phase Equilib. 9 (1982) 21-40.
"""

from dataclasses import dataclass
from typing import Literal

import numpy as np
import numpy.typing as npt

from groups.arrays import BoolArray, FloatArray, IntArray
from groups.equilibrium.conditions import (
    checked_fractions,
    checked_pressure,
    checked_temperature,
    paired,
)
from groups.equilibrium.phase_fraction import phase_fraction
from groups.equilibrium.states import safe_log
from groups.vapour.psrk.model import Phase, PsrkModel, phase, slopes
from groups.vapour.psrk.states import (
    RESIDUAL_TOLERANCE,
    fugacity_gap,
    is_near_critical,
    is_trivial,
)
from groups.vapour.psrk.tangent_plane import tangent_plane

EosPhase = Literal["liquid", "vapour", "two-phase", "two liquids", "unknown"]
SUBSTITUTIONS = 12
#: Share of the most that the feed can give to a trial phase, for a start below the plane.
SLIVER = 0.01
#: A rise of G within this is rounding, relative.
ROUNDING = 1e-11
MAX_ITERATIONS = 120
TOLERANCE = 1e-11
#: Phase amounts must add up to the feed this closely: a few roundings.
BALANCE = 1e-10
SMALLEST_CURVATURE = 1e-8
NOT_CONVERGED = "the amounts of the phases did not settle"
TRIVIAL = "both phases became one although the mixture is unstable"
THIRD_PHASE = "a third phase would form; states of three phases are not computed by this method"


@dataclass(frozen=True, slots=True)
class EosFlash:
    """Phases of n mixtures at given temperature and pressure.

    Attributes
    ----------
    temperature_K, pressure_kPa : array of shape (n,)
    vapour_fraction : array of shape (n,)
        Moles of the lighter phase in a mole of mixture; 0 or 1 for one phase.
    liquid, vapour : array of shape (n, n_components)
        Mole fractions of the denser and of the lighter phase; NaN where absent.
    liquid_compressibility, vapour_compressibility : array of shape (n,)
    phase : tuple of n texts
        "liquid", "vapour", "two-phase", "two liquids", or "unknown" where the flash failed. One
        phase is called a liquid where it is denser than a critical fluid.
    near_critical : bool array of shape (n,)
    converged : bool array of shape (n,)
    residual : array of shape (n,)
        Largest difference of ln fugacity between the phases; zero for one phase.
    failure : tuple of n texts, None where converged
    """

    temperature_K: FloatArray
    pressure_kPa: FloatArray
    vapour_fraction: FloatArray
    liquid: FloatArray
    vapour: FloatArray
    liquid_compressibility: FloatArray
    vapour_compressibility: FloatArray
    phase: tuple[EosPhase, ...]
    near_critical: BoolArray
    converged: BoolArray
    residual: FloatArray
    failure: tuple[str | None, ...]


def psrk_flash(
    model: PsrkModel,
    temperature_K: npt.ArrayLike,
    pressure_kPa: npt.ArrayLike,
    mole_fractions: npt.ArrayLike,
) -> EosFlash:
    """Phases of mixtures at given temperatures and pressures.

    Parameters
    ----------
    model : PsrkModel
    temperature_K, pressure_kPa : float or array of shape (n,)
        In K and kPa.
    mole_fractions : array of shape (n_components,) or (n, n_components)
        Overall compositions; each row sums to 1. Zeros are allowed.

    Returns
    -------
    EosFlash

    Raises
    ------
    OutOfRangeError, FractionSumError, ShapeError

    Source
    ------
    See the head of this module.
    """
    z = checked_fractions(mole_fractions, model.n_components)
    T, z = paired(checked_temperature(temperature_K), z)
    P, z = paired(checked_pressure(pressure_kPa), z)
    T, z = paired(T, z)
    judged = tangent_plane(model, T, P, z)
    single = phase(model, T, P, z, "stable")
    both: IntArray = np.flatnonzero(~judged.stable)
    split = _Split(model, T[both], P[both], z[both])
    split.run(judged.trial[both])
    return _assembled(model, single, both, split)


class _Split:
    """Amounts v and l = z - v of two phases for feeds that are unstable in one."""

    def __init__(self, model: PsrkModel, T: FloatArray, P: FloatArray, z: FloatArray) -> None:
        self.model, self.T, self.P, self.z = model, T, P, z
        self.v, self.lean = np.zeros_like(z), z.copy()
        self.settled = np.zeros(len(z), dtype=bool)

    def run(self, trial: FloatArray) -> None:
        """Settle, starting from the trial phase of the stability search; G never rises."""
        n = len(self.z)
        if not n:
            return
        rows: IntArray = np.arange(n, dtype=np.int64)
        ln_k = np.where(self.z > 0.0, safe_log(trial) - safe_log(self.z), 0.0)
        v = self._shared(rows, np.clip(ln_k, -300.0, 300.0))
        # A sliver of the trial phase lowers G for certain; the start above may be too bold.
        ratio = np.where(trial > 0.0, self.z / np.where(trial > 0.0, trial, 1.0), np.inf)
        self.v = SLIVER * ratio.min(axis=1)[:, None] * trial
        self.lean = self.z - self.v
        step, best = v - self.v, self._gibbs(*self.phases(rows), self.v, self.lean)
        for iteration in range(MAX_ITERATIONS):
            old_v, old_lean = self.v[rows], self.lean[rows]
            # A phase of almost nothing must not round to nothing.
            self.v[rows] = np.maximum(old_v + step[rows], 1e-12 * old_v)
            self.lean[rows] = np.maximum(old_lean - step[rows], 1e-12 * old_lean)
            first, second = self.phases(rows)
            value = self._gibbs(first, second, self.v[rows], self.lean[rows])
            up = value > best[rows] + ROUNDING * (1.0 + np.abs(value))
            self.v[rows[up]], self.lean[rows[up]] = old_v[up], old_lean[up]
            step[rows[up]] *= 0.3
            best[rows] = np.where(up, best[rows], value)
            miss = _mismatch(first, second)
            done = ~up & (np.abs(miss).max(axis=1) <= TOLERANCE)
            self.settled[rows[done]] = True
            if iteration < SUBSTITUTIONS or iteration % 10 == 9:
                gap = np.clip(second.ln_phi - first.ln_phi, -300.0, 300.0)
                fresh = self._shared(rows, gap) - self.v[rows]
            else:
                fresh = self._newton(rows, first, second, miss)
            step[rows[~up]] = fresh[~up]
            rows = rows[~done]
            if not len(rows):
                return

    @staticmethod
    def _gibbs(first: Phase, second: Phase, v: FloatArray, lean: FloatArray) -> FloatArray:
        """G/RT of both phases, less terms that do not change, of shape (n,)."""
        one = (v * (np.maximum(safe_log(first.fractions), -700.0) + first.ln_phi)).sum(axis=1)
        other = np.maximum(safe_log(second.fractions), -700.0) + second.ln_phi
        return np.asarray(one + (lean * other).sum(axis=1))

    def phases(self, rows: IntArray) -> tuple[Phase, Phase]:
        """The phases made of v and of l, each at its root of lower Gibbs energy."""
        v, lean = self.v[rows], self.lean[rows]
        y = v / v.sum(axis=1, keepdims=True)
        x = lean / lean.sum(axis=1, keepdims=True)
        T, P = self.T[rows], self.P[rows]
        return phase(self.model, T, P, y, "stable"), phase(self.model, T, P, x, "stable")

    def _shared(self, rows: IntArray, ln_k: FloatArray) -> FloatArray:
        """v for these distribution coefficients; a sliver where one phase would vanish."""
        z = self.z[rows]
        fraction, inside = phase_fraction(z, ln_k)
        fraction = np.where(inside, fraction, np.clip(fraction, 1e-3, 1.0 - 1e-3))[:, None]
        growth = np.exp(ln_k)
        return np.asarray(z * fraction * growth / (1.0 + fraction * (growth - 1.0)))

    def _newton(self, rows: IntArray, first: Phase, second: Phase, miss: FloatArray) -> FloatArray:
        """A Newton step in v that keeps all amounts above zero."""
        z, v, lean = self.z[rows], self.v[rows], self.lean[rows]
        beta, rest = v.sum(axis=1), lean.sum(axis=1)
        nc = z.shape[1]
        # Scaled by s_i = sqrt(x_i y_i / z_i) the ideal part is near the unit matrix.
        scale = np.sqrt(np.where(z > 0.0, v * lean / np.where(z > 0.0, z, 1.0), 0.0))
        matrix = slopes(self.model, first).moles / beta[:, None, None]
        matrix = matrix + slopes(self.model, second).moles / rest[:, None, None]
        matrix = matrix - (1.0 / beta + 1.0 / rest)[:, None, None]
        matrix = matrix * scale[:, :, None] * scale[:, None, :] + np.eye(nc)
        values, vectors = np.linalg.eigh(matrix)
        curvature = np.maximum(np.abs(values), SMALLEST_CURVATURE)
        rotated = np.einsum("mji,mj->mi", vectors, scale * miss) / curvature
        step = -scale * np.einsum("mij,mj->mi", vectors, rotated)
        room = np.where(step < 0.0, v, lean)
        share = np.abs(step) / np.where(room > 0.0, room, 1.0)
        limit = np.minimum(1.0, 0.9 / np.maximum(share.max(axis=1), 1e-300))
        return np.asarray(step * limit[:, None])


def _mismatch(first: Phase, second: Phase) -> FloatArray:
    """ln fugacity of the first phase less that of the second, of components in both."""
    x, y = second.fractions, first.fractions
    present = (x > 1e-280) & (y > 1e-280)
    gap = safe_log(y) + first.ln_phi - safe_log(x) - second.ln_phi
    return np.where(present, gap, 0.0)


def _assembled(model: PsrkModel, single: Phase, both: IntArray, split: _Split) -> EosFlash:
    n = len(single.fractions)
    fraction = np.where(single.liquid_like, 0.0, 1.0)
    liquid = np.where(single.liquid_like[:, None], single.fractions, np.nan)
    vapour = np.where(single.liquid_like[:, None], np.nan, single.fractions)
    Z_liquid = np.where(single.liquid_like, single.compressibility, np.nan)
    Z_vapour = np.where(single.liquid_like, np.nan, single.compressibility)
    names: list[EosPhase] = ["liquid" if dense else "vapour" for dense in single.liquid_like]
    failure: list[str | None] = [None] * n
    residual, near = np.zeros(n), np.zeros(n, dtype=bool)
    if len(both):
        first, second = split.phases(np.arange(len(both), dtype=np.int64))
        light = first.volume_ratio > second.volume_ratio
        x, y = (
            np.where(light[:, None], a.fractions, b.fractions)
            for a, b in ((second, first), (first, second))
        )
        dense, thin = (phase(model, split.T, split.P, part, "stable") for part in (x, y))
        total = split.v.sum(axis=1) + split.lean.sum(axis=1)
        beta = np.where(light, split.v.sum(axis=1), split.lean.sum(axis=1)) / total
        residual[both] = fugacity_gap(dense, thin)
        texts = _faults(model, split, dense, thin, beta, residual[both])
        near[both] = is_near_critical(dense, thin)
        fraction[both], liquid[both], vapour[both] = beta, x, y
        Z_liquid[both], Z_vapour[both] = dense.compressibility, thin.compressibility
        for k, place in enumerate(both.tolist()):
            failure[place] = texts[k]
            names[place] = "two liquids" if thin.liquid_like[k] and not near[place] else "two-phase"
            if texts[k] is not None:
                names[place] = "unknown"
    converged = np.array([text is None for text in failure], dtype=bool)
    for values in (fraction, liquid, vapour, Z_liquid, Z_vapour):
        values[~converged] = np.nan
    return EosFlash(
        single.temperature_K,
        single.pressure_kPa,
        fraction,
        liquid,
        vapour,
        Z_liquid,
        Z_vapour,
        tuple(names),
        near & converged,
        converged,
        residual,
        tuple(failure),
    )


def _faults(
    model: PsrkModel,
    split: _Split,
    dense: Phase,
    thin: Phase,
    beta: FloatArray,
    residual: FloatArray,
) -> list[str | None]:
    """Why a split is not returned; None where it is."""
    share = beta[:, None]
    balance = share * thin.fractions + (1.0 - share) * dense.fractions - split.z
    texts: list[str | None] = [None] * len(beta)
    wrong = (np.abs(balance).max(axis=1) > BALANCE) | ~(residual <= RESIDUAL_TOLERANCE)
    same = is_trivial(dense, thin)
    good = np.flatnonzero(~wrong & ~same)
    third = np.zeros(len(beta), dtype=bool)
    if len(good):
        judged = tangent_plane(model, split.T[good], split.P[good], dense.fractions[good])
        third[good] = ~judged.stable
    for k in range(len(beta)):
        if same[k]:
            texts[k] = TRIVIAL
        elif wrong[k]:
            texts[k] = NOT_CONVERGED
        elif third[k]:
            texts[k] = THIRD_PHASE
    return texts
