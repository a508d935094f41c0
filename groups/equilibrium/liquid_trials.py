"""The lowest trial liquid below a plane of potentials, out of many starts, for many planes at once.

All starts take a few steps of successive substitution. Where one lies clearly below the plane that
is proof enough; elsewhere the starts that have run together are reduced to one, and Newton's method
finishes the few that are left.

Source: Michelsen, Fluid Phase Equilibria 9 (1982) 1-19.
"""

from dataclasses import dataclass

import numpy as np

from groups.arrays import BoolArray, FloatArray
from groups.equilibrium.system import LiquidModel
from groups.equilibrium.tangent_plane import stationary_points, trial_starts

SUBSTITUTIONS = 6
#: A trial this far below the plane ends the search for that plane.
CLEAR = 1e-3
#: Starts whose mole fractions differ by less than this have run together.
TOGETHER = 2e-3
#: Mixtures whose ln gamma at infinite dilution are all smaller than this cannot split: for
#: gE/RT = sum A_ij x_i x_j the scaled second derivative differs from one by at most max |A|.
NEARLY_IDEAL = 0.5
#: A trial whose distance is more than this times its spread is not followed: the lowest point near
#: by is lower by about spread / (2 curvature), and curvatures below a fortieth are rare.
STEEP = 20.0
#: A distance above minus this counts as zero.
ZERO_DISTANCE = 1e-10
#: Numbers in one block of starts.
BLOCK = 200_000


@dataclass(frozen=True, slots=True)
class Trials:
    """Lowest tangent-plane distance (m,) over RT, and its liquid (m, n_components)."""

    distance: FloatArray
    liquid: FloatArray


def lowest_trials(
    liquid: LiquidModel,
    T: FloatArray,
    d: FloatArray,
    extra: FloatArray | None = None,
    known: FloatArray | None = None,
) -> Trials:
    """The lowest trial liquid for each plane.

    Parameters
    ----------
    liquid : LiquidModel
    T : array of shape (m,)
    d : array of shape (m, n_components)
        Potentials less the standard ones; minus infinity where a component is absent.
    extra : array of shape (k, m, n_components), optional
        More starts.
    known : array of shape (m, k, n_components), optional
        Liquids on the plane. A trial that runs into one of them has found nothing new.
    """
    m, n = d.shape
    size = max(1, BLOCK // ((n * (n + 1) // 2 + 2) * n))
    parts = []
    for low in range(0, m, size):
        block = slice(low, low + size)
        starts = trial_starts(d[block])
        if extra is not None:
            starts = np.concatenate([starts, extra[:, block]])
        on_plane = None if known is None else known[block]
        parts.append(_lowest(liquid, T[block], d[block], starts, on_plane))
    if len(parts) == 1:
        return parts[0]
    return Trials(
        np.concatenate([part.distance for part in parts]) if parts else np.empty(0),
        np.concatenate([part.liquid for part in parts]) if parts else d,
    )


def nearly_ideal(liquid: LiquidModel, T: FloatArray) -> BoolArray:
    """Where no liquid of these components can split: every activity coefficient is close to one."""
    different, inverse = np.unique(T, return_inverse=True)
    ends = liquid.ln_gamma(different[:, None], np.eye(liquid.n_components)[None])
    return np.asarray((np.abs(ends).max(axis=(1, 2)) < NEARLY_IDEAL)[inverse])


def _lowest(
    liquid: LiquidModel,
    T: FloatArray,
    d: FloatArray,
    starts: FloatArray,
    known: FloatArray | None,
) -> Trials:
    w, height, spread = _substituted(liquid, T, d, starts)
    rows = np.arange(len(d))
    best = height.argmin(axis=0)
    distance, trial = height[best, rows], w[best, rows]
    # Newton's method could lower these by about their spread over the curvature: not to the plane.
    worth = height < STEEP * spread + ZERO_DISTANCE
    if known is not None and known.shape[1]:
        apart = np.abs(w[:, :, None] - known[None]).max(axis=3).min(axis=2)
        worth &= ~((apart < TOGETHER) & (height > -ZERO_DISTANCE))
    open_ = np.flatnonzero((distance > -CLEAR) & worth.any(axis=0))
    if len(open_):
        keep = _distinct(w[:, open_], height[:, open_]) & worth[:, open_]
        start, plane = np.nonzero(keep)
        which = open_[plane]
        found = stationary_points(
            liquid, T[which], d[which], w[start, which], 0, plane=which, enough=-CLEAR
        )
        value = np.where(np.isfinite(found.height), found.height, np.inf)
        order = np.lexsort((-value, which))  # the lowest of each plane is written last
        chosen = order[value[order] < distance[which[order]]]
        distance[which[chosen]], trial[which[chosen]] = value[chosen], found.liquid[chosen]
    return Trials(distance, trial)


def _substituted(
    liquid: LiquidModel, T: FloatArray, d: FloatArray, starts: FloatArray
) -> tuple[FloatArray, FloatArray, FloatArray]:
    """Trial liquids (s, m, n) after some substitutions, their distances (s, m), and the spread.

    The spread is the mean square by which ln w + ln gamma - d differs among the components: zero
    at a stationary point.
    """
    s, m, n = starts.shape
    present = np.isfinite(d)
    plane = np.where(present, d, 0.0)
    w, every_T = starts, np.broadcast_to(T, (s, m)).reshape(-1)
    for _ in range(SUBSTITUTIONS):
        ln_gamma = liquid.ln_gamma(every_T, w.reshape(-1, n)).reshape(s, m, n)
        u = np.where(present, plane - ln_gamma, -np.inf)
        raised = np.exp(u - u.max(axis=2, keepdims=True))
        w = raised / raised.sum(axis=2, keepdims=True)
    ln_gamma = liquid.ln_gamma(every_T, w.reshape(-1, n)).reshape(s, m, n)
    ln_w = np.log(np.maximum(w, 1e-300))
    mismatch = ln_w + ln_gamma - plane
    height = (w * mismatch).sum(axis=2)
    spread = (w * (mismatch - height[:, :, None]) ** 2).sum(axis=2)
    return w, np.asarray(height), np.asarray(spread)


def _distinct(w: FloatArray, height: FloatArray) -> BoolArray:
    """Of the starts that have run together, the lowest; of shape (s, m)."""
    s = len(w)
    order = height.argsort(axis=0)
    columns = np.arange(w.shape[1])
    keep = np.zeros(height.shape, dtype=bool)
    sorted_w = w[order, columns]
    apart = np.abs(sorted_w[:, None] - sorted_w[None]).max(axis=3) > TOGETHER
    kept = np.ones_like(keep)
    for k in range(1, s):
        kept[k] = (apart[k, :k] | ~kept[:k]).all(axis=0)
    keep[order, columns] = kept
    return keep
