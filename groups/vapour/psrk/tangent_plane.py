"""Stability of a phase by the tangent plane to the Gibbs energy of the equation of state.

A phase z is stable where no trial phase w has sum W_i > 1 at a stationary point
ln W_i + ln phi_i(w) = ln z_i + ln phi_i(z). Searches start from a vapour, a liquid, every pure
component, their pairs and the mean; substitution first, then Newton's method in 2 sqrt(W).

Source: M. L. Michelsen, Fluid Phase Equilib. 9 (1982) 1-19.
"""

from dataclasses import dataclass

import numpy as np

from groups.arrays import BoolArray, FloatArray, IntArray
from groups.equilibrium.states import safe_log
from groups.vapour.psrk.model import Phase, PsrkModel, phase, slopes

SUBSTITUTIONS = 6
MAX_ITERATIONS = 60
#: A rise of the distance within this is rounding, relative.
ROUNDING = 1e-11
#: Most pairs of components that searches start from.
MAX_PAIRS = 28
TOLERANCE = 1e-9
#: A phase is unstable where a trial lies this far below its plane: above the error of TOLERANCE^2
#: and of the phase itself, below anything that matters.
MARGIN = 1e-7
#: Trials closer than this to the phase itself are the phase itself.
SAME = 1e-5
SMALLEST_CURVATURE, LARGEST_STEP = 0.02, 4.0
#: Phases judged at a time, so that memory stays bounded.
BATCH = 4000
#: ln of what stands for no amount at all.
NOTHING = -690.0


@dataclass(frozen=True, slots=True)
class EosStability:
    """Stability of n phases.

    Attributes
    ----------
    stable : bool array of shape (n,)
    trial : array of shape (n, n_components)
        The trial phase furthest below the plane; the phase itself where it is stable.
    distance : array of shape (n,)
        -ln sum W of that trial; negative where unstable.
    """

    stable: BoolArray
    trial: FloatArray
    distance: FloatArray


def wilson_ln_k(
    model: PsrkModel, temperature_K: FloatArray, pressure_kPa: FloatArray
) -> FloatArray:
    """Rough ln K, of shape (n, n_components).

    Source: G. M. Wilson, 65th AIChE National Meeting, Cleveland (1969):
    ln K = ln(Pc / P) + 5.373 (1 + omega) (1 - Tc / T).
    """
    slope = 5.373 * (1.0 + model.acentric_factor)
    reduced = model.critical_temperature_K / temperature_K[:, None]
    rough = np.log(model.critical_pressure_kPa) + slope * (1.0 - reduced)
    return np.asarray(rough - np.log(pressure_kPa)[:, None])


def tangent_plane(
    model: PsrkModel, temperature_K: FloatArray, pressure_kPa: FloatArray, fractions: FloatArray
) -> EosStability:
    """Judge the stability of phases at given temperature and pressure.

    Parameters
    ----------
    model : PsrkModel
    temperature_K, pressure_kPa : array of shape (n,)
    fractions : array of shape (n, n_components)
        The root of lower Gibbs energy is taken.

    Returns
    -------
    EosStability

    Source
    ------
    See the head of this module.
    """
    n = len(fractions)
    parts = [
        _judged(model, temperature_K[k], pressure_kPa[k], fractions[k])
        for k in (slice(start, start + BATCH) for start in range(0, max(n, 1), BATCH))
    ]
    stable, trial, distance = (np.concatenate(column) for column in zip(*parts, strict=True))
    return EosStability(stable, trial, distance)


def _judged(
    model: PsrkModel, temperature_K: FloatArray, pressure_kPa: FloatArray, z: FloatArray
) -> tuple[BoolArray, FloatArray, FloatArray]:
    itself = phase(model, temperature_K, pressure_kPa, z, "stable")
    d = np.maximum(safe_log(z), NOTHING) + itself.ln_phi
    starts = _starts(model, temperature_K, pressure_kPa, z, itself.ln_phi)
    s, (n, nc) = len(starts), z.shape
    search = _Search(model, np.tile(temperature_K, s), np.tile(pressure_kPa, s), np.tile(d, (s, 1)))
    u = search.run(starts.reshape(s * n, nc))
    total = np.exp(u).sum(axis=1)
    w = np.exp(u) / total[:, None]
    height = np.where(search.found, -np.log(total), np.inf)
    apart = np.abs(w - np.tile(z, (s, 1))).max(axis=1) > SAME
    height = np.where(apart, height, np.inf).reshape(s, n)
    best, rows = height.argmin(axis=0), np.arange(n)
    lowest = height[best, rows]
    unstable = lowest < -MARGIN
    trial = np.where(unstable[:, None], w.reshape(s, n, nc)[best, rows], z)
    return ~unstable, trial, np.where(np.isfinite(lowest), lowest, 0.0)


def _starts(
    model: PsrkModel, T: FloatArray, P: FloatArray, z: FloatArray, ln_phi: FloatArray
) -> FloatArray:
    """ln W of the starts, of shape (n_starts, n, n_components)."""
    ln_z = np.maximum(safe_log(z), NOTHING)
    ln_k = np.clip(wilson_ln_k(model, T, P), -50.0, 50.0)
    nc = z.shape[1]
    pure = np.where(np.eye(nc) > 0.0, 0.0, np.log(1e-3 / max(nc - 1, 1)))
    many = [ln_z + ln_k, ln_z - ln_k, ln_z + ln_phi]
    shapes = [*pure, np.zeros(nc)]
    if nc > 2:  # liquids with strong attractions lie between the pure ones
        first, second = np.triu_indices(nc, 1)
        few = slice(MAX_PAIRS)
        shapes += [*np.maximum(pure[first[few]], pure[second[few]])]
    many += [np.where(z <= 0.0, NOTHING, np.broadcast_to(shape, z.shape)) for shape in shapes]
    stacked = np.stack(many)
    top = stacked.max(axis=2, keepdims=True)
    total = top + np.log(np.exp(stacked - top).sum(axis=2, keepdims=True))
    return np.asarray(np.maximum(stacked - total, NOTHING))


class _Search:
    """Local minima of 1 + sum_i W_i (ln W_i + ln phi_i - d_i - 1), one for each row."""

    def __init__(self, model: PsrkModel, T: FloatArray, P: FloatArray, d: FloatArray) -> None:
        self.model, self.T, self.P, self.d = model, T, P, d
        self.found = np.zeros(len(T), dtype=bool)
        self.step = np.zeros_like(d)
        self.best = np.full(len(T), np.inf)

    def run(self, u: FloatArray) -> FloatArray:
        """ln W after the search; `found` tells where it is a stationary point."""
        u = u.copy()
        rows: IntArray = np.arange(len(u), dtype=np.int64)
        for iteration in range(MAX_ITERATIONS):
            # `u` holds the best point; the step from it is halved where it did not lead down.
            trial = np.clip(u[rows] + self.step[rows], NOTHING - 60.0, 300.0)
            at, total, mismatch = self._evaluate(rows, trial)
            value = 1.0 + (np.exp(trial) * (mismatch - 1.0)).sum(axis=1)
            down = value <= self.best[rows] + ROUNDING * (1.0 + np.abs(value))
            self.step[rows[~down]] *= 0.5
            kept = rows[down]
            u[kept], self.best[kept] = trial[down], value[down]
            major = at.fractions > 1e-12
            size = np.abs(np.where(major, mismatch, 0.0)).max(axis=1)
            fresh = -mismatch
            if iteration >= SUBSTITUTIONS:
                fresh = self._newton(at, total, mismatch, major)
            limit = np.where(major, np.abs(fresh), 0.0).max(axis=1)
            fresh *= np.minimum(1.0, LARGEST_STEP / np.maximum(limit, 1e-300))[:, None]
            self.step[kept] = fresh[down]
            done = down & (size <= TOLERANCE)
            self.found[rows[done]] = True
            stuck = ~down & (np.abs(self.step[rows]).max(axis=1) < 1e-14)
            rows = rows[~(done | stuck)]
            if not len(rows):
                break
        return u

    def _evaluate(self, rows: IntArray, u: FloatArray) -> tuple[Phase, FloatArray, FloatArray]:
        """The trial phase, sum W, and the mismatch of ln fugacity."""
        total = np.exp(u).sum(axis=1)
        w = np.exp(u) / total[:, None]
        at = phase(self.model, self.T[rows], self.P[rows], w, "stable")
        return at, total, u + at.ln_phi - self.d[rows]

    def _newton(
        self, at: Phase, total: FloatArray, mismatch: FloatArray, major: BoolArray
    ) -> FloatArray:
        """Newton's change of ln W, in 2 sqrt(W), with the curvature kept positive."""
        root = np.sqrt(at.fractions * total[:, None])
        matrix = slopes(self.model, at).moles / total[:, None, None]
        matrix = matrix * root[:, :, None] * root[:, None, :]
        matrix = np.where(major[:, :, None] & major[:, None, :], matrix, 0.0)
        values, vectors = np.linalg.eigh(matrix + np.eye(root.shape[1]))
        curvature = np.maximum(np.abs(values), SMALLEST_CURVATURE)
        rotated = np.einsum("mji,mj->mi", vectors, np.where(major, root * mismatch, 0.0))
        scaled = np.einsum("mij,mj->mi", vectors, rotated / curvature)
        return np.where(major, -scaled / np.where(major, root, 1.0), -mismatch)
