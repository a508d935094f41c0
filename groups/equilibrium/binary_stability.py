"""Stability of binary liquids against all others at once, from one table of activities.

The distance of every trial liquid of a grid from the tangent plane of every liquid is one product
of matrices. Its local minima, refined by a parabola, decide nearly all liquids; what lies too close
to call is left to the tangent-plane test proper.
"""

import numpy as np

from groups.arrays import BoolArray, FloatArray
from groups.equilibrium.boiling_table import BoilingTable
from groups.equilibrium.stability import stability
from groups.equilibrium.states import safe_log
from groups.equilibrium.system import LiquidModel

#: A minimum must lie above the plane by this many times what the parabola lowers it, and by this.
SURE = 4.0
CLEAR = 1e-6
#: Slope of ln a1 - ln a2 over ln(x1/x2) at the liquid itself below which it is not sure.
SLOPE = 0.05
BLOCK = 500


def stable_binaries(
    liquid: LiquidModel, T: FloatArray, x: FloatArray, table: BoilingTable | None, w: FloatArray
) -> BoolArray:
    """Which liquids (m, 2) at temperatures (m,) do not split.

    Parameters
    ----------
    liquid : LiquidModel
        Of two components.
    T : array of shape (m,)
    x : array of shape (m, 2)
        Both fractions positive.
    table : BoilingTable or None
        Of the trial liquids. Not needed where all temperatures are the same; without it every
        liquid takes the tangent-plane test elsewhere.
    w : array of shape (k, 2)
        Trial liquids of the table, in the order of x1.
    """
    sure = np.zeros(len(x), dtype=bool)
    one = len(T) > 0 and bool((T[0] == T).all())
    if table is not None or one:
        plane = np.log(x) + liquid.ln_gamma(T, x)
        inner = (w > 0.0).all(axis=1)
        same = liquid.ln_gamma(T[:1], w)[None] if table is None else None
        for low in range(0, len(x), BLOCK):
            part = slice(low, low + BLOCK)
            ln_gamma = same if table is None else table.ln_gamma_at(T[part])
            assert ln_gamma is not None
            ln_a = safe_log(w[inner]) + ln_gamma[:, inner]
            ln_a = np.broadcast_to(ln_a, (len(x[part]), *ln_a.shape[1:]))
            sure[part] = _surely(x[part], plane[part], w[inner], ln_a)
    rows = np.flatnonzero(~sure)
    if len(rows):
        sure[rows] = stability(liquid, T[rows], x[rows]).stable
    return sure


def _surely(x: FloatArray, plane: FloatArray, w: FloatArray, ln_a: FloatArray) -> BoolArray:
    """Liquids x (m, 2) clearly below no trial w (k, 2), whose ln activities are ln_a (m, k, 2)."""
    g = (w * ln_a).sum(axis=2) - plane @ w.T
    s = np.log(w[:, 0]) - np.log(w[:, 1])
    before, after = np.diff(s)[:-1], np.diff(s)[1:]
    rise = np.diff(g, axis=1) / np.diff(s)
    left, right = rise[:, :-1], rise[:, 1:]
    bend = (right - left) / (before + after)
    slope = left + bend * before
    drop = np.where(bend > 0.0, slope**2 / (4.0 * np.where(bend > 0.0, bend, 1.0)), 0.0)
    minimum = (left <= 0.0) & (right >= 0.0)
    # The minimum at the liquid itself is the zero that all others are measured from.
    own = np.log(x[:, 0]) - np.log(x[:, 1])
    reach = 1.5 * np.maximum(before, after)
    other = minimum & (np.abs(s[None, 1:-1] - own[:, None]) > reach)
    low = other & (g[:, 1:-1] - drop <= SURE * drop + CLEAR)
    h = ln_a[..., 0] - ln_a[..., 1]
    at = np.clip(np.searchsorted(s, own), 2, len(s) - 2)
    rows = np.arange(len(x))
    steep = (h[rows, at + 1] - h[rows, at - 2]) > SLOPE * (s[at + 1] - s[at - 2])
    return np.asarray(~low.any(axis=1) & steep & (plane <= 0.0).all(axis=1))
