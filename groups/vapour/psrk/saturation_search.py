"""The search behind bubble and dew points: a scan for the first crossing, then Newton's method.

The equations stand at the head of `groups.vapour.psrk.saturation`.
"""

from dataclasses import dataclass
from typing import Literal

import numpy as np

from groups.arrays import BoolArray, FloatArray, IntArray
from groups.equilibrium.states import safe_log
from groups.vapour.psrk.model import PsrkModel, Root, phase, slopes, temperature_slope
from groups.vapour.psrk.tangent_plane import NOTHING, wilson_ln_k

Kind = Literal["bubble", "dew"]
Sought = Literal["pressure", "temperature"]

#: Grid of the scan.
PRESSURES_KPA = np.exp(np.linspace(np.log(1e-9), np.log(2e5), 52))
N_TEMPERATURES = 42
SCAN_PASSES, PATIENT_PASSES, REFINEMENTS = 8, 40, 14
#: |ln sum W| from which Newton's method takes over, and the value that marks a side only.
CLOSE, SIDE = 1e-3, 0.05
MAX_ITERATIONS = 40
TOLERANCE = 1e-11
#: A trial this close to the feed is the feed itself.
SAME = 1e-3


@dataclass(frozen=True, slots=True)
class SaturationProblem:
    """What is given and what is sought.

    Parameters
    ----------
    model : PsrkModel
    kind : {"bubble", "dew"}
    sought : {"pressure", "temperature"}
    fixed : array of shape (n,)
        The temperature in K or the pressure in kPa, whichever is given.
    z : array of shape (n, n_components)
        Feeds.
    patient : bool
        A second attempt: more substitutions, and at a bubble point a second phase as dense as a
        liquid is no longer passed over.
    """

    model: PsrkModel
    kind: Kind
    sought: Sought
    fixed: FloatArray
    z: FloatArray
    patient: bool = False

    @property
    def roots(self) -> tuple[Root, Root]:
        """Roots of the feed and of the incipient phase."""
        return ("liquid", "vapour") if self.kind == "bubble" else ("vapour", "liquid")

    def conditions(self, rows: IntArray, s: FloatArray) -> tuple[FloatArray, FloatArray]:
        """T and P where the ln of the one sought is s."""
        given = self.fixed[rows]
        sought = np.exp(s)
        return (given, sought) if self.sought == "pressure" else (sought, given)

    def grid(self) -> FloatArray:
        """ln of the values scanned, in the order in which the first crossing counts."""
        if self.sought == "pressure":
            ln_P = np.log(PRESSURES_KPA)
            return ln_P[::-1] if self.kind == "bubble" else ln_P
        Tc = self.model.critical_temperature_K
        low, high = max(41.0, 0.3 * float(Tc.min())), min(1.1 * float(Tc.max()), 1990.0)
        ln_T = -np.log(np.linspace(1.0 / low, 1.0 / high, N_TEMPERATURES))
        return ln_T if self.kind == "bubble" else ln_T[::-1]


def scanned(problem: SaturationProblem) -> tuple[FloatArray, FloatArray, BoolArray]:
    """A start for every point: ln of P or T, ln W, and whether a crossing was seen."""
    grid, (n, nc) = problem.grid(), problem.z.shape
    rows = np.repeat(np.arange(n, dtype=np.int64), len(grid))
    value, u, apart = _sums(problem, rows, np.tile(grid, n), None)
    value, u, apart = value.reshape(n, -1), u.reshape(n, -1, nc), apart.reshape(n, -1)
    rising = (value[:, :-1] < 0.0) & (value[:, 1:] >= 0.0)
    found = rising.any(axis=1)
    first, here = rising.argmax(axis=1), np.arange(n)
    low, high = grid[first], grid[first + 1]
    low_value, high_value = value[here, first], value[here, first + 1]
    nearer = np.where(apart[here, first + 1], first + 1, first)
    best_s, best_u, good = grid[nearer], u[here, nearer], apart[here, nearer]
    active: IntArray = np.flatnonzero(found)
    for _ in range(REFINEMENTS):
        if not len(active):
            break
        gap = high_value[active] - low_value[active]
        share = np.clip(-low_value[active] / np.where(gap > 0.0, gap, 1.0), 0.1, 0.9)
        trial = low[active] + share * (high[active] - low[active])
        start = np.where(good[active, None], best_u[active], np.nan)
        fresh, fresh_u, fresh_apart = _sums(problem, active, trial, start)
        kept = active[fresh_apart]
        best_s[kept], best_u[kept], good[kept] = trial[fresh_apart], fresh_u[fresh_apart], True
        below = fresh < 0.0
        low[active[below]], low_value[active[below]] = trial[below], fresh[below]
        high[active[~below]], high_value[active[~below]] = trial[~below], fresh[~below]
        active = active[~(fresh_apart & (np.abs(fresh) < CLOSE))]
    return best_s, best_u, found & good


def _sums(
    problem: SaturationProblem, rows: IntArray, s: FloatArray, start: FloatArray | None
) -> tuple[FloatArray, FloatArray, BoolArray]:
    """ln sum W after a few substitutions, ln W, and where the trial is another phase than the feed.

    Where the trial is the feed, one phase alone has a root here; its density then tells the side,
    and the value is a small number with the sign of that side.
    """
    T, P = problem.conditions(rows, s)
    z, model = problem.z[rows], problem.model
    feed_root, trial_root = problem.roots
    feed = phase(model, T, P, z, feed_root)
    ln_z = np.maximum(safe_log(z), NOTHING)
    d = ln_z + feed.ln_phi
    u = d.copy()
    if problem.kind == "dew":
        u = ln_z - np.clip(wilson_ln_k(model, T, P), -60.0, 60.0)
    if start is not None:
        u = np.where(np.isfinite(start), start, u)
    for _ in range(PATIENT_PASSES if problem.patient else SCAN_PASSES):
        w = trial_fractions(u)
        trial = phase(model, T, P, w, trial_root)
        u = d - trial.ln_phi
    top = u.max(axis=1)
    value = top + np.log(np.exp(u - top[:, None]).sum(axis=1))
    alike = np.abs(w - z).max(axis=1) < SAME
    alike &= np.abs(np.log(trial.volume_ratio / feed.volume_ratio)) < 30.0 * SAME
    dense = feed.liquid_like if problem.kind == "dew" else ~feed.liquid_like
    if problem.kind == "bubble" and not problem.patient:
        # A liquid that splits meets its second liquid first; the vapour is what is sought.
        value = np.where(trial.liquid_like & ~alike, -SIDE, value)
        alike |= trial.liquid_like
        dense &= ~trial.liquid_like | ~feed.liquid_like
    return np.where(alike, np.where(dense, SIDE, -SIDE), value), u, ~alike


def trial_fractions(u: FloatArray) -> FloatArray:
    """Mole fractions of amounts exp(u), of shape (n, n_components)."""
    w = np.exp(u - u.max(axis=1, keepdims=True))
    return np.asarray(w / w.sum(axis=1, keepdims=True))


def newton(problem: SaturationProblem, rows: IntArray, s: FloatArray, u: FloatArray) -> None:
    """Solve for ln W and ln P or ln T together, in place."""
    feed_root, trial_root = problem.roots
    model, nc = problem.model, problem.z.shape[1]
    for _ in range(MAX_ITERATIONS):
        if not len(rows):
            return
        T, P = problem.conditions(rows, s[rows])
        ln_W = u[rows]
        total = np.exp(np.minimum(ln_W, 300.0)).sum(axis=1)
        w = np.exp(np.minimum(ln_W, 300.0)) / total[:, None]
        feed = phase(model, T, P, problem.z[rows], feed_root)
        trial = phase(model, T, P, w, trial_root)
        gap = ln_W + trial.ln_phi - np.maximum(safe_log(problem.z[rows]), NOTHING) - feed.ln_phi
        change = slopes(model, trial)
        matrix = np.zeros((len(rows), nc + 1, nc + 1))
        matrix[:, :nc, :nc] = np.eye(nc) + change.moles * w[:, None, :]
        if problem.sought == "pressure":
            matrix[:, :nc, nc] = change.ln_pressure - slopes(model, feed).ln_pressure
        else:
            by_T = temperature_slope(model, trial) - temperature_slope(model, feed)
            matrix[:, :nc, nc] = by_T * T[:, None]
        matrix[:, nc, :nc] = w
        right = np.concatenate([gap, np.log(total)[:, None]], axis=1)
        step = -_solved(matrix, right)
        # A step longer than the distance of the phases would end in the trivial solution.
        distance = np.abs(feed.ln_phi - trial.ln_phi).max(axis=1)
        most = np.full((len(rows), nc + 1), 0.4 if problem.sought == "pressure" else 0.05)
        most[:, :nc] = np.clip(0.5 * distance, 0.01, 2.0)[:, None]
        limit = np.minimum(1.0, 1.0 / np.maximum((np.abs(step) / most).max(axis=1), 1e-300))
        u[rows] = ln_W + step[:, :nc] * limit[:, None]
        s[rows] = np.clip(s[rows] + step[:, nc] * limit, -25.0, 20.0)
        if problem.sought == "temperature":
            s[rows] = np.clip(s[rows], np.log(40.0), np.log(2000.0))
        done = (np.abs(right).max(axis=1) <= TOLERANCE) | ~np.isfinite(step).all(axis=1)
        rows = rows[~done]


def _solved(matrix: FloatArray, right: FloatArray) -> FloatArray:
    """Solutions of many small systems; a small diagonal is added where one is singular."""
    try:
        return np.asarray(np.linalg.solve(matrix, right[..., None])[..., 0])
    except np.linalg.LinAlgError:
        shifted = matrix + 1e-10 * np.eye(matrix.shape[1])
        return np.asarray(np.linalg.solve(shifted, right[..., None])[..., 0])
