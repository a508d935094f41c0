"""Amounts of every component in a given number of phases, by minimisation of the Gibbs energy.

Steps are taken in u_ik = dn_ik / sqrt(n_ik), where the second derivative of an ideal phase is the
unit matrix however little of a component there is. What a component gains in one phase it loses in
the others: with q_ik = sqrt(n_ik / z_i), of length one over the phases, the allowed steps of
component i are those at right angles to q_i, reached by a Householder reflection. The reduced
matrix is kept positive, and a step that does not lower the Gibbs energy is halved.

Source: Michelsen, Fluid Phase Equilibria 9 (1982) 21-40, for the scaling; Nocedal & Wright,
Numerical Optimization (2006), section 3.4, for the modified Newton step.
"""

from dataclasses import dataclass

import numpy as np

from groups.arrays import BoolArray, FloatArray, IntArray
from groups.equilibrium.phase_problem import PhaseProblem
from groups.equilibrium.states import safe_log

#: Largest difference of ln fugacity between phases at the end.
TOLERANCE = 1e-11
MAX_ITERATIONS = 90
SMALLEST_CURVATURE = 1e-10
#: The longest step keeps this part of every amount.
KEPT = 0.1
#: Part of a component in one phase below which it follows by substitution, by at most exp(LARGEST).
TRACE = 1e-9
LARGEST = 2.0
#: A phase with less than this of the feed is gone.
GONE = 1e-12
#: A phase that has shrunk below this, to a hundredth of its start and far from equilibrium, is gone
#: too: it would take many steps to grow again, and the test of stability brings it back faster.
DWINDLED = 1e-7
FAR = 1e-3
#: Liquids whose ln x differ by less than this everywhere are one.
SAME = 1e-5
#: Amounts below this are too small to take part in the test of equal fugacities.
NOTHING = 1e-290
#: Rise of the Gibbs energy that rounding may cause.
ROUNDING = 1e-12
#: Mismatch below which a smaller mismatch counts, whatever the energy seems to do.
HIDDEN = 1e-4


@dataclass(frozen=True, slots=True)
class PhaseAmounts:
    """Amounts (m, phases, n_components) and what became of each feed.

    `settled` where the fugacities agree; `lost` is the index of a phase that vanished or became
    another, else -1; `residual` is the largest difference of ln fugacity.
    """

    amounts: FloatArray
    ln_fugacity: FloatArray
    gibbs: FloatArray
    settled: BoolArray
    lost: IntArray
    residual: FloatArray


def settled_amounts(problem: PhaseProblem, start: FloatArray, n_liquids: int) -> PhaseAmounts:
    """Minimise from amounts (m, phases, n_components), liquids first, then a vapour if any.

    Parameters
    ----------
    problem : PhaseProblem
        Of m feeds.
    start : array of shape (m, phases, n_components)
        Positive wherever the feed is; sums over the phases are the feed.
    n_liquids : int
    """
    search = _Search(problem, start, n_liquids)
    rows = np.arange(len(start), dtype=np.int64)
    for _ in range(MAX_ITERATIONS):
        rows = search.evaluate(rows)
        if not len(rows):
            break
        search.advance(rows)
    return PhaseAmounts(
        search.best, search.best_ln_f, search.gibbs, search.settled, search.lost, search.residual
    )


class _Search:
    def __init__(self, problem: PhaseProblem, start: FloatArray, n_liquids: int) -> None:
        self.problem, self.n_liquids = problem, n_liquids
        m = len(start)
        self.present = problem.feed > 0.0
        self.trial, self.best = start.copy(), start.copy()
        self.start_totals = start.sum(axis=2)
        self.best_ln_f = np.zeros_like(start)
        self.step = np.zeros_like(start)
        self.gibbs, self.residual = np.full(m, np.inf), np.full(m, np.inf)
        self.settled, self.retreat = np.zeros(m, dtype=bool), np.zeros(m, dtype=bool)
        self.lost = np.full(m, -1, dtype=np.int64)

    def evaluate(self, rows: IntArray) -> IntArray:
        """Values at the trial amounts; keeps what is lower; returns the rows still to do."""
        n = self.trial[rows]
        part = self.problem.rows(rows)
        ln_f = ln_fugacities(part, n, self.n_liquids)
        gibbs = (n * ln_f).sum(axis=(1, 2))
        gap = _gap(n, ln_f, part.feed)
        worst = np.abs(gap).max(axis=(1, 2))
        limit = self.gibbs[rows] + ROUNDING * (1.0 + np.abs(gibbs))
        # Near the end rounding hides the fall of the energy: there a smaller mismatch will do.
        better = (gibbs <= limit) | ((worst < HIDDEN) & (worst < self.residual[rows]))
        self.retreat[rows] = ~better
        kept = rows[better]
        self.best[kept], self.best_ln_f[kept] = n[better], ln_f[better]
        self.gibbs[kept], self.residual[kept] = gibbs[better], worst[better]
        lost = _lost(n[better], self.n_liquids, self.present[kept])
        self.lost[kept] = np.where(lost < 0, self._dwindled(kept, worst[better]), lost)
        self.settled[kept] = (worst[better] <= TOLERANCE) & (self.lost[kept] < 0)
        size = np.abs(self.step[rows] / np.where(self.best[rows] > 0.0, self.best[rows], 1.0))
        stuck = self.retreat[rows] & (size.max(axis=(1, 2)) < 1e-13)
        return np.asarray(rows[~(self.settled[rows] | (self.lost[rows] >= 0) | stuck)])

    def _dwindled(self, rows: IntArray, worst: FloatArray) -> IntArray:
        """Index of a phase that has all but vanished while the others have not settled, else -1."""
        totals = self.best[rows].sum(axis=2)
        small = (totals < DWINDLED) & (totals < 0.01 * self.start_totals[rows])
        gone = small.any(axis=1) & (worst > FAR)
        return np.asarray(np.where(gone, totals.argmin(axis=1), -1), dtype=np.int64)

    def advance(self, rows: IntArray) -> None:
        """New trial amounts: half the last step where it did not help, else a fresh one."""
        back = self.retreat[rows]
        self.step[rows[back]] *= 0.5
        fresh = rows[~back]
        if len(fresh):
            self.step[fresh] = self._newton(fresh)
        n = self.best[rows] + self.step[rows]
        z = self.problem.feed[rows][:, None, :]
        total = n.sum(axis=1, keepdims=True)
        self.trial[rows] = n * np.where(z > 0.0, z / np.where(total > 0.0, total, 1.0), 0.0)

    def _newton(self, rows: IntArray) -> FloatArray:
        n, ln_f = self.best[rows], self.best_ln_f[rows]
        part = self.problem.rows(rows)
        m, phases, nc = n.shape
        x = n / n.sum(axis=2, keepdims=True)
        root = np.sqrt(x)
        hessian = (part.derivatives(x, self.n_liquids) - 1.0) * root[..., :, None]
        hessian *= root[..., None, :]
        hessian += np.eye(nc)
        basis = _allowed(n, part.feed)  # (m, nc, phases, phases - 1)
        gradient = np.einsum("mika,mki->mia", basis, np.sqrt(n) * ln_f)
        if phases == 2:
            b = basis[..., 0]
            reduced = b[:, :, None, 0] * hessian[:, 0] * b[:, None, :, 0]
            reduced += b[:, :, None, 1] * hessian[:, 1] * b[:, None, :, 1]
        else:
            size = nc * (phases - 1)
            reduced = np.einsum("mika,mkij,mjkb->miajb", basis, hessian, basis, optimize=True)
            reduced = reduced.reshape(m, size, size)
        values, vectors = np.linalg.eigh(reduced)
        curvature = np.maximum(np.abs(values), SMALLEST_CURVATURE)
        flat = gradient.reshape(m, -1)
        rotated = np.einsum("mji,mj->mi", vectors, flat) / curvature
        u = -np.einsum("mij,mj->mi", vectors, rotated).reshape(m, nc, phases - 1)
        step = np.sqrt(n) * np.einsum("mika,mia->mki", basis, u)
        # What is next to nothing is lost in the rounding of the rest: it follows by substitution.
        trace = n < TRACE * part.feed[:, None]
        follow = n * np.expm1(np.clip(-_gap(n, ln_f, part.feed), -LARGEST, LARGEST))
        step = np.where(trace, follow, step)
        fall = np.where(step < 0.0, -step / np.where(n > 0.0, n, 1.0), 0.0).max(axis=(1, 2))
        limit = np.minimum(1.0, (1.0 - KEPT) / np.maximum(fall, 1e-300))
        return np.asarray(step * limit[:, None, None])


def ln_fugacities(problem: PhaseProblem, n: FloatArray, n_liquids: int) -> FloatArray:
    """ln f_ik / P of amounts (m, phases, n_components); zero where a component is absent."""
    x = n / n.sum(axis=2, keepdims=True)
    ln_x = np.log(np.maximum(x, 1e-300))
    ln_f = ln_x + problem.coefficients(x, n_liquids)
    return np.where(problem.feed[:, None, :] > 0.0, ln_f, 0.0)


def _gap(n: FloatArray, ln_f: FloatArray, feed: FloatArray) -> FloatArray:
    """ln f less its mean over the phases."""
    z = np.where(feed > 0.0, feed, 1.0)[:, None, :]
    mean = (n * ln_f).sum(axis=1, keepdims=True) / z
    return np.where(n > NOTHING, ln_f - mean, 0.0)


def _lost(n: FloatArray, n_liquids: int, present: BoolArray) -> IntArray:
    """Index of a phase that has vanished, or of a liquid that has become another; else -1."""
    totals = n.sum(axis=2)
    lost = np.where(totals.min(axis=1) < GONE, totals.argmin(axis=1), -1)
    ln_x = safe_log(n / totals[:, :, None])
    for k in range(n_liquids):
        for j in range(k):
            apart = np.zeros_like(n[:, 0])
            both = present & (n[:, k] > 0.0) & (n[:, j] > 0.0)
            np.subtract(ln_x[:, k], ln_x[:, j], out=apart, where=both)
            lost = np.where((lost < 0) & (np.abs(apart).max(axis=1) < SAME), k, lost)
    return np.asarray(lost, dtype=np.int64)


def _allowed(n: FloatArray, feed: FloatArray) -> FloatArray:
    """Steps that leave the total of a component, (m, n_components, phases, phases - 1)."""
    phases = n.shape[1]
    q = np.sqrt(n / np.where(feed > 0.0, feed, 1.0)[:, None, :]).swapaxes(1, 2)
    q[..., -1] = np.where(feed > 0.0, q[..., -1], 1.0)
    if phases == 2:
        return np.stack([q[..., 1], -q[..., 0]], axis=-1)[..., None]
    v = q.copy()
    v[..., -1] += np.linalg.norm(q, axis=-1)  # q has no negative part, so this cancels nothing
    scale = 2.0 / (v**2).sum(axis=-1)
    reflection = np.eye(phases) - scale[..., None, None] * v[..., :, None] * v[..., None, :]
    return np.asarray(reflection[..., :-1])
