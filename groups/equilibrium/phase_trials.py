"""Trial phases held against the common tangent plane of phases that have been settled.

The vapour below a plane of potentials is explicit where it is ideal; the liquids are searched.

Source: Michelsen, Fluid Phase Equilibria 9 (1982) 1-19.
"""

from dataclasses import dataclass

import numpy as np

from groups.arrays import BoolArray, FloatArray
from groups.equilibrium.liquid_trials import lowest_trials
from groups.equilibrium.phase_problem import PhaseProblem
from groups.equilibrium.stability import FLAT, ZERO_DISTANCE, curvature

#: Passes over the correction of a real vapour.
VAPOUR_PASSES = 40


@dataclass(frozen=True, slots=True)
class Probe:
    """Lowest tangent-plane distance (m,), that phase (m, n_components), whether it is a vapour."""

    distance: FloatArray
    trial: FloatArray
    vapour: BoolArray


def lowest_phases(
    part: PhaseProblem, n: FloatArray, ln_f: FloatArray, n_liquids: int, ideal: BoolArray
) -> Probe:
    """Hold trial phases against settled ones: amounts and ln f of shape (m, phases, n_components).

    `ideal` says where a liquid cannot split and need not be tried.
    """
    z = part.feed
    mean = (n * ln_f).sum(axis=1) / np.where(z > 0.0, z, 1.0)
    plane = np.where(z > 0.0, mean, -np.inf)
    lowest, trial = np.full(len(z), np.inf), z.copy()
    vapour = np.zeros(len(z), dtype=bool)
    if part.vapour is not None and n.shape[1] == n_liquids:
        lowest, trial = _vapour_trials(part, plane)
        vapour = lowest < -ZERO_DISTANCE
    # A liquid of nearly ideal components stays one; a vapour may still condense.
    rows = np.flatnonzero(~vapour & (~ideal if n_liquids else True))
    if len(rows):
        known = n[rows, :n_liquids] / n[rows, :n_liquids].sum(axis=2, keepdims=True)
        distance, liquid = _liquid_trials(part.rows(rows), plane[rows], known)
        lower = distance < lowest[rows]
        lowest[rows[lower]], trial[rows[lower]] = distance[lower], liquid[lower]
    return Probe(lowest, trial, vapour)


def _vapour_trials(part: PhaseProblem, plane: FloatArray) -> tuple[FloatArray, FloatArray]:
    """Distance of the vapour in equilibrium with the potentials; explicit if ideal."""
    correction = np.zeros_like(plane)
    for _ in range(VAPOUR_PASSES):
        terms = plane - correction
        top = terms.max(axis=1, keepdims=True)
        raised = np.exp(terms - top)
        total = raised.sum(axis=1, keepdims=True)
        y, height = raised / total, -(top + np.log(total))[:, 0]
        if part.vapour is None or part.vapour.ideal:
            break
        fresh = part.vapour_coefficients(y)
        change = np.abs(fresh - correction).max()
        correction = fresh
        if change < 1e-11:
            break
    return height, y


def _liquid_trials(
    part: PhaseProblem, plane: FloatArray, known: FloatArray
) -> tuple[FloatArray, FloatArray]:
    """Lowest trial liquids, also beside a known liquid (m, k, n) that is unstable in itself."""
    d = plane - part.standard
    trials = lowest_trials(part.activity, part.temperature_K, d, known=known)
    distance, liquid = trials.distance, trials.liquid
    for k in range(known.shape[1]):
        values, steps = curvature(part.activity, part.temperature_K, known[:, k])
        rows = np.flatnonzero((values < -FLAT) & (distance > -ZERO_DISTANCE))
        if len(rows):
            x, step = known[rows, k], steps[rows]
            beside = [np.maximum(x * (1.0 + f * step), 0.5 * x) for f in (-0.1, 0.1)]
            extra = np.stack([b / b.sum(axis=1, keepdims=True) for b in beside])
            again = lowest_trials(part.activity, part.temperature_K[rows], d[rows], extra)
            distance[rows], liquid[rows] = again.distance, again.liquid
    return distance, liquid
