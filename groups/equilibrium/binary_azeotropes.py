"""Every azeotrope of a binary: where the relative volatility passes through one.

Between neighbouring points of the boiling curve a change of sign of ln alpha encloses an azeotrope;
a near miss may enclose two. A few secant steps finish what the curve encloses. An azeotrope of a
liquid that would split is none; where two liquids boil together to a vapour between them, that is
the heterogeneous azeotrope.
"""

import numpy as np
from scipy.optimize import brentq

from groups.equilibrium.activity_curve import fractions
from groups.equilibrium.azeotrope import Azeotrope, Kind, homogeneous_kind
from groups.equilibrium.azeotrope_brackets import Brackets, brackets, near_misses, places
from groups.equilibrium.azeotrope_newton import (
    TOLERANCE,
    AzeotropeRoots,
    azeotrope_roots,
    fugacity_gap,
)
from groups.equilibrium.boiling_curve import BoilingCurve, Condition
from groups.equilibrium.conditions import HIGHEST_K, LOWEST_K
from groups.equilibrium.stability import stability
from groups.equilibrium.states import safe_log
from groups.equilibrium.system import System
from groups.equilibrium.three_phase import ThreePhase

#: |ln alpha| along a whole curve below which the two components cannot be told apart.
IDENTICAL = 1e-10
#: Two azeotropes closer than this in s = ln(x1/x2) are one.
SAME = 1e-5
#: Secant steps before Newton's method takes over.
SECANT_STEPS = 6
#: Lowest d ln P/dT in 1/K that is believed; that of a liquid which boils is a hundred times this.
LEAST_RISE = 1e-4


def binary_azeotropes(
    system: System, condition: Condition, curve: BoilingCurve
) -> tuple[Azeotrope, ...]:
    """All azeotropes of a binary at the condition of its boiling curve, in the order of x1.

    Parameters
    ----------
    system : System
        Of two components.
    condition : Condition
    curve : BoilingCurve

    Returns
    -------
    tuple of Azeotrope
    """
    found = [_heterogeneous(state) for state in curve.lines if state.azeotropic]
    at = places(curve)
    if len(at.s) < 2 or np.abs(at.ln_alpha).max() < IDENTICAL:
        return tuple(found)
    fixed = condition.pressure_kPa is not None
    enclosed = brackets(at)
    if len(enclosed.s):
        roots = _enclosed(system, condition, _polished(system, enclosed, fixed=fixed), enclosed)
        slopes: list[float | None] = enclosed.slope.tolist()
        found += _stable_ones(system, roots, slopes, splits=curve.may_split)
    misses = near_misses(at)
    if len(misses):
        aside = np.concatenate([0.5 * (at.s[misses] + at.s[misses + k]) for k in (-1, 1)])
        T, P = at.temperature_K[misses], np.exp(at.ln_pressure[misses])
        more = azeotrope_roots(
            system, fractions(aside), np.tile(T, 2), np.tile(P, 2), fixed_pressure=fixed
        )
        found += _stable_ones(system, more, [None] * len(aside), splits=curve.may_split)
    return _distinct(found)


def _heterogeneous(state: ThreePhase) -> Azeotrope:
    # Both liquids repel the boiling temperature from below: the plateau is the lowest.
    return Azeotrope(
        (0, 1),
        state.vapour,
        state.temperature_K,
        state.pressure_kPa,
        "minimum-boiling",
        False,
        (state.first, state.second),
    )


def _stable_ones(
    system: System, roots: AzeotropeRoots, slopes: list[float | None], *, splits: bool
) -> list[Azeotrope]:
    """The roots whose liquid does not split; their kind from d ln alpha/ds where it is known."""
    rows = np.flatnonzero(roots.found)
    x, T, P = roots.mole_fractions, roots.temperature_K, roots.pressure_kPa
    if splits and len(rows):
        rows = rows[stability(system.activity, T[rows], x[rows]).stable]
    found = []
    for k in rows:
        slope = slopes[int(k)]
        kind: Kind = "minimum-boiling" if slope is not None and slope < 0.0 else "maximum-boiling"
        if not slope:
            kind = homogeneous_kind(system, float(T[k]), x[k])
        found.append(Azeotrope((0, 1), x[k], float(T[k]), float(P[k]), kind, True, (x[k],)))
    return found


def _polished(system: System, start: Brackets, *, fixed: bool) -> AzeotropeRoots:
    """Secant steps from the slope of the bracket, then Newton's method for what is left."""
    s, T, ln_P = start.s.copy(), start.temperature_K.copy(), start.ln_pressure.copy()
    slope, rise = start.slope, np.ones_like(s)
    if fixed:
        rise = (fractions(s) * system.ln_saturation_slope(T)).sum(axis=1)
    old_s, old_value = s, np.zeros_like(s)
    for step in range(SECANT_STEPS):
        x = fractions(s)
        gap = fugacity_gap(system, x, T, ln_P)
        found = np.abs(gap).max(axis=1) <= TOLERANCE
        if found.all():
            return AzeotropeRoots(x, T, np.exp(ln_P), found)
        excess, value = (x * gap).sum(axis=1), gap[:, 0] - gap[:, 1]
        if step:
            moved, change = s - old_s, value - old_value
            # Where nothing moves any more, or the signs disagree, the slope of before stays.
            better = (moved != 0.0) & (change * moved * slope > 0.0)
            slope = np.where(better, change / np.where(better, moved, 1.0), slope)
        old_s, old_value = s, value
        if fixed:
            T = np.clip(T - excess / np.maximum(rise, LEAST_RISE), LOWEST_K, HIGHEST_K)
        else:
            ln_P = ln_P + excess
        s = np.clip(s - value / np.where(slope == 0.0, np.inf, slope), start.low, start.high)
    return azeotrope_roots(system, fractions(s), T, np.exp(ln_P), fixed_pressure=fixed)


def _enclosed(
    system: System, condition: Condition, roots: AzeotropeRoots, around: Brackets
) -> AzeotropeRoots:
    """The roots, with any that Newton led out of its bracket found again inside it."""
    x, T, P = roots.mole_fractions.copy(), roots.temperature_K.copy(), roots.pressure_kPa.copy()
    found = roots.found.copy()
    ends = safe_log(x)
    where = ends[:, 0] - ends[:, 1]
    within = (around.low - SAME <= where) & (where <= around.high + SAME)
    for k in np.flatnonzero(~(found & within)):
        root = _bracketed(system, condition, float(around.low[k]), float(around.high[k]))
        if root is None:
            found[k] = False
            continue
        state = condition.boil(system, fractions(root)[None])
        again = azeotrope_roots(
            system,
            fractions(root)[None],
            state.temperature_K,
            state.pressure_kPa,
            fixed_pressure=condition.pressure_kPa is not None,
        )
        x[k], T[k], P[k] = again.mole_fractions[0], again.temperature_K[0], again.pressure_kPa[0]
        found[k] = again.found[0]
    return AzeotropeRoots(x, T, P, found)


def _bracketed(system: System, condition: Condition, low: float, high: float) -> float | None:
    """s of a zero of ln alpha; None where some liquid in between has no boiling point."""
    try:
        return float(brentq(lambda at: _ln_alpha(system, condition, at), low, high, xtol=1e-13))
    except ValueError:  # NaN on the way, or ends that changed sides: a curve with a tear in it
        return None


def _ln_alpha(system: System, condition: Condition, s: float) -> float:
    state = condition.boil(system, fractions(s)[None])
    return float(np.log(state.vapour[0, 0] / state.vapour[0, 1]) - s)


def _distinct(found: list[Azeotrope]) -> tuple[Azeotrope, ...]:
    """In the order of x1, each once."""
    kept: list[Azeotrope] = []
    last = -np.inf
    logits = [float(np.log(a.mole_fractions[0] / a.mole_fractions[1])) for a in found]
    for k in np.argsort(logits, kind="stable"):
        if not kept or logits[int(k)] - last > SAME or found[int(k)].heterogeneous:
            kept.append(found[int(k)])
        last = logits[int(k)]
    return tuple(kept)
