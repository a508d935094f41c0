"""The activities of a binary along s = ln(x1/x2), from one dilute end to the other.

With s the difference h(s) = ln a1 - ln a2 = s + ln gamma1 - ln gamma2 rises with s in a stable
liquid and falls between the spinodal points. In s a solubility of 1e-12 is as easy to see as one of
0.1, which no grid in x1 can say.
"""

from dataclasses import dataclass

import numpy as np

from groups.arrays import FloatArray, IntArray
from groups.equilibrium.system import LiquidModel
from groups.errors import ShapeError

#: point, where the search is refined.
CORE_STEP = 0.125
CORE = 8.0
#: Step of s outside: there only one component changes the liquid, over about two units of s.
TAIL_STEP = 0.5
#: The spinodal of a dilute solute lies near s = -ln gamma_inf; look this much further.
TAIL_MARGIN = 7.0
FURTHEST = 300.0
#: dh/ds below which a local minimum is looked at more closely.
SUSPICIOUS_SLOPE = 0.08
#: Halvings of the range of h for a first guess: finer than the grid is.
BISECTIONS = 20
#: Largest difference of ln activity between the two liquids, and lowest allowed tangent distance.
TOLERANCE = 1e-10


def fractions(s: float | FloatArray) -> FloatArray:
    """(x1, x2) from s = ln(x1/x2), both exact however close to zero, of shape (..., 2)."""
    s = np.clip(np.asarray(s, dtype=np.float64), -690.0, 690.0)
    return np.stack([1.0 / (1.0 + np.exp(-s)), 1.0 / (1.0 + np.exp(s))], axis=-1)


def logit_grid(liquid: LiquidModel, temperature_K: FloatArray) -> FloatArray:
    """Values of s that reach beyond the spinodals of either dilute end."""
    if liquid.n_components != 2:
        raise ShapeError(
            f"A binary split needs two components. Got {liquid.n_components} instead.",
            cure="Use the flash for more components.",
        )
    ends = liquid.ln_gamma(temperature_K[:, None], np.array([[0.0, 1.0], [1.0, 0.0]]))
    low = min(FURTHEST, max(CORE, float(ends[:, 0, 0].max()) + TAIL_MARGIN))
    high = min(FURTHEST, max(CORE, float(ends[:, 1, 1].max()) + TAIL_MARGIN))
    core = np.arange(-CORE, CORE + CORE_STEP / 2, CORE_STEP)
    below = np.arange(-CORE - TAIL_STEP, -low - TAIL_STEP, -TAIL_STEP)[::-1]
    above = np.arange(CORE + TAIL_STEP, high + TAIL_STEP, TAIL_STEP)
    return np.concatenate([below, core, above])


@dataclass(frozen=True, slots=True)
class ActivityCurve:
    """s, h(s), ln a1 and ln a2 along a grid at one temperature."""

    temperature_K: float
    s: FloatArray
    ln_a: FloatArray

    @property
    def h(self) -> FloatArray:
        """ln a1 - ln a2."""
        return np.asarray(self.ln_a[:, 0] - self.ln_a[:, 1])

    @classmethod
    def trace(cls, liquid: LiquidModel, T: float) -> "ActivityCurve":
        """Along the whole range of s, closer where the slope of h nearly vanishes."""
        s = logit_grid(liquid, np.array([T]))
        curve = cls(T, s, ln_activity(liquid, T, s))
        for _ in range(3):  # each pass looks ten times closer at a slope that nearly vanishes
            extra = curve.suspicious()
            if not len(extra):
                break
            s = np.concatenate([curve.s, extra])
            ln_a = np.concatenate([curve.ln_a, ln_activity(liquid, T, extra)])
            order = np.argsort(s)
            curve = cls(T, s[order], ln_a[order])
        return curve

    def suspicious(self) -> FloatArray:
        """More values of s around local minima of dh/ds that are small but not negative."""
        slope = np.diff(self.h) / np.diff(self.s)
        inner = slope[1:-1]
        low = (inner <= slope[:-2]) & (inner <= slope[2:]) & (inner < SUSPICIOUS_SLOPE)
        places = np.flatnonzero(low & (inner > 0.0)) + 1
        return np.concatenate(
            [np.empty(0)] + [np.linspace(self.s[k - 1], self.s[k + 2], 32)[1:-1] for k in places]
        )

    def spinodals(self) -> tuple[IntArray, IntArray]:
        """Grid indices of the local maxima and of the local minima of h."""
        # A fall below the rounding of ln gamma is no fall.
        falls = np.diff(self.h) < -1e-12
        tops = np.flatnonzero(falls & ~np.concatenate([[False], falls[:-1]]))
        bottoms = np.flatnonzero(falls & ~np.concatenate([falls[1:], [False]])) + 1
        return tops, bottoms

    def above_tangent(self, liquid: LiquidModel, s: float) -> bool:
        """True where no liquid of the grid lies below the tangent at s."""
        touched = ln_activity(liquid, self.temperature_K, np.array([s]))
        x = fractions(self.s)
        distance = (x * (self.ln_a - touched)).sum(axis=1)
        return bool((distance > -TOLERANCE * (1.0 + np.abs(self.ln_a).max(axis=1))).all())


def ln_activity(liquid: LiquidModel, T: float, s: FloatArray) -> FloatArray:
    """(ln a1, ln a2) of shape (len(s), 2)."""
    ln_x = np.stack([-np.logaddexp(0.0, -s), -np.logaddexp(0.0, s)], axis=-1)
    return np.asarray(ln_x + liquid.ln_gamma(np.full(len(s), T), fractions(s)))


def activity_difference_slope(liquid: LiquidModel, T: float, s: FloatArray) -> FloatArray:
    """dh/ds of shape (len(s),): negative where the liquid is intrinsically unstable."""
    x = fractions(s)
    d = liquid.ln_gamma_mole_derivatives(np.full(len(s), T), x)
    twisted = d[:, 0, 0] - d[:, 0, 1] - d[:, 1, 0] + d[:, 1, 1]
    return np.asarray(1.0 + x[:, 0] * x[:, 1] * twisted)


def equal_areas(curve: ActivityCurve, top: int, bottom: int) -> tuple[float, float] | None:
    """s of both liquids around a fall of h, as well as the grid can tell."""
    h, s = curve.h, curve.s
    left = slice(_rise_start(h, top), top + 1)
    right = slice(bottom, _rise_end(h, bottom) + 1)
    # ln a runs smoothly with h on each branch; a fall of ln a2 from one to the other is sought.
    low, high = max(h[left][0], h[bottom]), min(h[top], h[right][-1])
    if not low < high:
        return None
    for _ in range(BISECTIONS):
        level = 0.5 * (low + high)
        a2_left = np.interp(level, h[left], curve.ln_a[left, 1])
        a2_right = np.interp(level, h[right], curve.ln_a[right, 1])
        low, high = (level, high) if a2_right > a2_left else (low, level)
    return float(np.interp(level, h[left], s[left])), float(np.interp(level, h[right], s[right]))


def _rise_start(h: FloatArray, top: int) -> int:
    while top > 0 and h[top - 1] < h[top]:
        top -= 1
    return top


def _rise_end(h: FloatArray, bottom: int) -> int:
    while bottom < len(h) - 1 and h[bottom + 1] > h[bottom]:
        bottom += 1
    return bottom
