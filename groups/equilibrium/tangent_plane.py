"""Stationary points of the distance between the liquid surface and a plane of potentials.

For trial liquids w at temperature T the function

    g(w) = sum_i w_i (ln w_i + ln gamma_i(w) - d_i)

is stationary where ln w_i + ln gamma_i - d_i has one value k for every component present; g is
then k. With d = ln x + ln gamma(x) of a liquid x, a negative k proves that liquid unstable. With
d = ln y - ln Psat of a vapour y, the smallest k is ln of its dew pressure. One kernel serves both.

Source: Michelsen, Fluid Phase Equilibria 9 (1982) 1-19 (tangent-plane criterion, scaled Newton).
"""

from dataclasses import dataclass

import numpy as np

from groups.arrays import BoolArray, FloatArray, IntArray
from groups.equilibrium.system import LiquidModel

#: Largest |ln w_i + ln gamma_i - d_i - k|; k itself is then right to the square of this.
TOLERANCE = 1e-11
SUBSTITUTIONS = 6
MAX_ITERATIONS = 80
#: Components below this fraction follow by substitution alone: they do not act on the others.
TRACE = 1e-12
LARGEST_STEP = 4.0
SMALLEST_CURVATURE = 0.05


@dataclass(frozen=True, slots=True)
class Stationary:
    """Stationary points: `liquid` (m, n_components), `height` k (m,), `found` (m,)."""

    liquid: FloatArray
    height: FloatArray
    found: BoolArray


def stationary_points(
    liquid: LiquidModel,
    temperature_K: FloatArray,
    d: FloatArray,
    start: FloatArray,
    substitutions: int = SUBSTITUTIONS,
    plane: IntArray | None = None,
    enough: float = -np.inf,
) -> Stationary:
    """Local minima of the tangent-plane distance, one search for each row.

    Parameters
    ----------
    liquid : LiquidModel
    temperature_K : array of shape (m,)
    d : array of shape (m, n_components)
        Plane; minus infinity where a component is absent.
    start : array of shape (m, n_components)
        First trial liquids; zero where a component is absent.
    substitutions : int
        Steps of successive substitution before Newton's method.
    plane : array of shape (m,), optional
        Which rows are trials of one plane; they all stop as soon as one lies below `enough`.
    enough : float
    """
    search = _Search(liquid, temperature_K, d, start)
    active = np.arange(len(temperature_K), dtype=np.int64)
    for iteration in range(MAX_ITERATIONS):
        active = search.evaluate(active)
        if plane is not None and len(active):
            proven = plane[search.best_height < enough]
            active = active[~np.isin(plane[active], proven)] if len(proven) else active
        if not len(active):
            break
        search.advance(active, newton=iteration >= substitutions)
    return Stationary(search.best_w, search.best_height, search.found)


class _Search:
    def __init__(
        self, liquid: LiquidModel, T: FloatArray, d: FloatArray, start: FloatArray
    ) -> None:
        self.liquid, self.T = liquid, T
        self.present = np.isfinite(d)
        self.d = np.where(self.present, d, 0.0)
        floor = np.where(self.present, np.maximum(start, 1e-300), 1.0)
        self.u = np.where(self.present, np.log(floor), -np.inf)
        self.best_u, self.best_w = self.u.copy(), _softmax(self.u)
        self.best_height = np.full(len(T), np.inf)
        self.best_mismatch = np.zeros_like(d)  # of the best point: ln w + ln gamma - d - k
        self.step = np.zeros_like(d)
        self.retreat = np.zeros(len(T), dtype=bool)
        self.found = np.zeros(len(T), dtype=bool)

    def evaluate(self, rows: IntArray) -> IntArray:
        """Values at the trial points; keeps what is better; returns the rows still to do."""
        present = self.present[rows]
        w = _softmax(self.u[rows])
        ln_gamma = self.liquid.ln_gamma(self.T[rows], w)
        ln_w = np.log(np.where(w > 0.0, w, 1e-300))
        mismatch = np.where(present, ln_w + ln_gamma - self.d[rows], 0.0)
        height = (w * mismatch).sum(axis=1)
        mismatch = np.where(present, mismatch - height[:, None], 0.0)
        self.retreat[rows] = ~(height <= self.best_height[rows] + 1e-12 * (1.0 + np.abs(height)))
        kept = ~self.retreat[rows]
        better = rows[kept]
        self.best_u[better] = np.where(present, ln_w, -np.inf)[kept]
        self.best_w[better], self.best_height[better] = w[kept], height[kept]
        self.best_mismatch[better] = mismatch[kept]
        weight = (w > 1e-290) & present
        done = kept & (np.abs(np.where(weight, mismatch, 0.0)).max(axis=1) <= TOLERANCE)
        self.found[rows[done]] = True
        stuck = self.retreat[rows] & (np.abs(self.step[rows]).max(axis=1) < 1e-13)
        return np.asarray(rows[~(done | stuck)])

    def advance(self, rows: IntArray, *, newton: bool) -> None:
        """The next trial points: half the last step where it did not help, else a new one."""
        back = self.retreat[rows]
        self.step[rows[back]] *= 0.5
        fresh = rows[~back]
        if len(fresh):
            step = -self.best_mismatch[fresh]
            if newton:
                step = self._newton(fresh)
            size = np.abs(np.where(self.best_w[fresh] > TRACE, step, 0.0)).max(axis=1)
            limit = 100.0 if not newton else LARGEST_STEP
            self.step[fresh] = step * np.minimum(1.0, limit / np.maximum(size, 1e-300))[:, None]
        self.u[rows] = np.where(self.present[rows], self.best_u[rows] + self.step[rows], -np.inf)

    def _newton(self, rows: IntArray) -> FloatArray:
        """Newton step in ln w, on the scaled Hessian with its curvature kept positive."""
        w, mismatch = self.best_w[rows], self.best_mismatch[rows]
        slope = self.liquid.ln_gamma_mole_derivatives(self.T[rows], w)
        root = np.sqrt(w)
        matrix = root[:, :, None] * root[:, None, :] * slope
        major = w > TRACE
        pair = major[:, :, None] & major[:, None, :]
        matrix = np.where(pair, matrix, 0.0) + np.eye(w.shape[1])
        values, vectors = np.linalg.eigh(matrix)
        curvature = np.maximum(np.abs(values), SMALLEST_CURVATURE)
        gradient = np.where(major, root * mismatch, 0.0)
        rotated = np.einsum("mji,mj->mi", vectors, gradient) / curvature
        scaled = np.einsum("mij,mj->mi", vectors, rotated)
        return np.where(major, -scaled / np.where(major, root, 1.0), -mismatch)


def _softmax(u: FloatArray) -> FloatArray:
    raised = np.exp(u - u.max(axis=1, keepdims=True))
    return np.asarray(raised / raised.sum(axis=1, keepdims=True))


def trial_starts(d: FloatArray) -> FloatArray:
    """Trial liquids for every row of d: near-pure ones, pairs, the mean, the ideal answer.

    Parameters
    ----------
    d : array of shape (m, n_components)

    Returns
    -------
    array of shape (n_starts, m, n_components)
        Zero where a component is absent from the row.
    """
    n = d.shape[1]
    present = np.isfinite(d)
    shapes = [np.eye(n) + 1e-6, np.full((1, n), 1.0)]
    if n > 2:
        first, second = np.triu_indices(n, 1)
        pairs = np.eye(n)[first] + np.eye(n)[second]
        shapes.append(pairs[:66] + 1e-3)
    fixed = np.concatenate(shapes)[:, None, :] * present
    ideal = np.exp(d - d.max(axis=1, keepdims=True))[None]
    starts = np.concatenate([fixed, ideal])
    return np.asarray(starts / starts.sum(axis=2, keepdims=True))


def lowest_points(liquid: LiquidModel, temperature_K: FloatArray, d: FloatArray) -> Stationary:
    """The lowest stationary point of each row out of many starts."""
    starts = trial_starts(d)
    s, m, n = starts.shape
    flat = stationary_points(
        liquid, np.tile(temperature_K, s), np.tile(d, (s, 1)), starts.reshape(s * m, n)
    )
    height = np.where(flat.found, flat.height, np.inf).reshape(s, m)
    best = height.argmin(axis=0)
    rows = np.arange(m)
    return Stationary(
        flat.liquid.reshape(s, m, n)[best, rows],
        height[best, rows],
        np.asarray(flat.found.reshape(s, m)[best, rows]),
    )
