"""Is a flash's answer the lowest Gibbs energy? By sampling, without any of the flash's own means.

Phases with equal fugacities are the answer if, and only if, no composition of a liquid and no
vapour lies below their common tangent plane (Gibbs). So the plane is held against many random
liquids, and the lowest of them are followed downhill by a general minimiser.
"""

import numpy as np
from scipy.optimize import minimize

from groups.arrays import FloatArray
from groups.equilibrium import Flash, System

#: Random liquids, and how many of the lowest are followed.
SAMPLES = 4000
FOLLOWED = 6


def lowest_distance(system: System, found: Flash, feed: FloatArray, seed: int) -> float:
    """Lowest tangent-plane distance over RT that sampling finds; about zero for a right answer."""
    T, P = float(found.temperature_K[0]), float(found.pressure_kPa[0])
    standard = system.ln_saturation(np.array([T]))[0] - np.log(P)
    plane = _plane(system, found, standard)
    present = np.flatnonzero(feed > 0.0)
    vapour = -float(np.log(np.exp(plane[present]).sum()))
    n = len(feed)
    random = np.random.default_rng(seed)
    kinds = [random.dirichlet(np.full(n, a), SAMPLES // 4) for a in (0.1, 0.3, 1.0)]
    # Traces: every mole fraction from 1e-9 to one, evenly in its logarithm.
    traces = 10.0 ** random.uniform(-9.0, 0.0, (SAMPLES // 4, n))
    w = np.concatenate([*kinds, traces / traces.sum(axis=1, keepdims=True)])
    w = np.maximum(w, 1e-200)
    w /= w.sum(axis=1, keepdims=True)

    def distance(u: FloatArray) -> FloatArray:
        w = np.exp(u - u.max(axis=-1, keepdims=True))
        w /= w.sum(axis=-1, keepdims=True)
        ln_gamma = system.activity.ln_gamma(T, w)
        return np.asarray(
            (w * (np.log(np.maximum(w, 1e-300)) + ln_gamma + standard - plane)).sum(-1)
        )

    heights = distance(np.log(w))
    best = [float(heights.min())]
    for k in np.argsort(heights)[:FOLLOWED]:
        end = minimize(lambda u: float(distance(u)), np.log(w[k]), method="BFGS")
        best.append(float(end.fun))
    return min(vapour, *best)


def _plane(system: System, found: Flash, standard: FloatArray) -> FloatArray:
    """ln f_i / P of the answer: from the vapour, else from its first liquid."""
    if np.isfinite(found.vapour[0]).all():
        return np.log(np.maximum(found.vapour[0], 1e-300))
    x = found.liquids[0, 0]
    ln_gamma = system.activity.ln_gamma(float(found.temperature_K[0]), x)
    return np.asarray(np.log(np.maximum(x, 1e-300)) + ln_gamma + standard)
