"""Every azeotrope of a binary: where the relative volatility passes through one.

Between neighbouring points of the boiling curve a change of sign of ln alpha encloses an azeotrope;
a near miss may enclose two. Newton's method finishes what the curve encloses. An azeotrope of a
liquid that would split is none; where two liquids boil together to a vapour between them, that is
the heterogeneous azeotrope.
"""

from dataclasses import dataclass

import numpy as np
from scipy.optimize import brentq

from groups.arrays import FloatArray, IntArray
from groups.equilibrium.azeotrope import Azeotrope, homogeneous_kind
from groups.equilibrium.azeotrope_newton import AzeotropeRoots, azeotrope_roots
from groups.equilibrium.binary_split import fractions, may_split
from groups.equilibrium.boiling_curve import BoilingCurve, Condition
from groups.equilibrium.saturation import rough_boiling_temperatures
from groups.equilibrium.stability import stability
from groups.equilibrium.states import safe_log
from groups.equilibrium.system import System
from groups.equilibrium.three_phase import (
    ThreePhase,
    three_phase_at_pressure,
    three_phase_at_temperature,
)

#: Temperatures of the quick look for a liquid split.
QUICK_NODES = 5
#: |ln alpha| at a local extremum below which two azeotropes may hide between grid points.
NEAR_MISS = 0.05
#: |ln alpha| along a whole curve below which the two components cannot be told apart.
IDENTICAL = 1e-10
#: Two azeotropes closer than this in s = ln(x1/x2) are one.
SAME = 1e-5


@dataclass(frozen=True, slots=True)
class Splitting:
    """Whether a boiling liquid can split at all, and the three-phase lines if it does."""

    conceivable: bool
    lines: tuple[ThreePhase, ...]


def splitting(system: System, condition: Condition, curve: BoilingCurve) -> Splitting:
    """Liquid splits along a boiling curve, after one quick look that most mixtures pass.

    Parameters
    ----------
    system : System
        Of two components.
    condition : Condition
    curve : BoilingCurve
        At that condition.

    Returns
    -------
    Splitting
    """
    temperatures = curve.states.temperature_K[curve.states.converged]
    if not len(temperatures):
        return Splitting(True, ())
    low, high = float(temperatures.min()), float(temperatures.max())
    if condition.temperature_K is None:
        assert condition.pressure_kPa is not None
        _, immiscible = rough_boiling_temperatures(system, np.array([condition.pressure_kPa]))
        nodes = np.linspace(min(low, float(immiscible[0]) - 2.0), high, QUICK_NODES)
    else:
        nodes = np.array([low])
    if not may_split(system.activity, nodes):
        return Splitting(False, ())
    if condition.temperature_K is not None:
        return Splitting(True, three_phase_at_temperature(system, condition.temperature_K))
    assert condition.pressure_kPa is not None
    return Splitting(True, three_phase_at_pressure(system, condition.pressure_kPa, high + 0.1))


def binary_azeotropes(
    system: System,
    condition: Condition,
    curve: BoilingCurve,
    liquids: Splitting,
) -> tuple[Azeotrope, ...]:
    """All azeotropes of a binary at the condition of its boiling curve, in the order of x1.

    Parameters
    ----------
    system : System
        Of two components.
    condition : Condition
    curve : BoilingCurve
    liquids : Splitting
        At the same condition.

    Returns
    -------
    tuple of Azeotrope
    """
    found = [_heterogeneous(state) for state in liquids.lines if state.azeotropic]
    roots = _roots(system, condition, curve)
    x = roots.mole_fractions[roots.found]
    if len(x):
        T, P = roots.temperature_K[roots.found], roots.pressure_kPa[roots.found]
        stable = np.ones(len(x), dtype=bool)
        if liquids.conceivable:
            stable = stability(system.activity, T, x).stable
        for k in np.flatnonzero(stable):
            kind = homogeneous_kind(system, float(T[k]), x[k])
            found.append(Azeotrope((0, 1), x[k], float(T[k]), float(P[k]), kind, True, (x[k],)))
    return tuple(sorted(found, key=lambda azeotrope: float(azeotrope.mole_fractions[0])))


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


def _roots(system: System, condition: Condition, curve: BoilingCurve) -> AzeotropeRoots:
    inner = np.isfinite(curve.ln_alpha) & (curve.x > 0.0).all(axis=1)
    ln_alpha, x = curve.ln_alpha[inner], curve.x[inner]
    T, P = curve.states.temperature_K[inner], curve.states.pressure_kPa[inner]
    s = np.log(x[:, 0]) - np.log(x[:, 1])
    if len(s) < 2 or np.abs(ln_alpha).max() < IDENTICAL:
        return _none()
    crossings: IntArray = np.flatnonzero(
        np.sign(ln_alpha[:-1]) * np.sign(ln_alpha[1:]) <= 0.0
    ).astype(np.int64)
    at, at_T = _interpolated(s, T, ln_alpha, crossings)
    size = np.abs(ln_alpha)
    low = (size[1:-1] <= size[:-2]) & (size[1:-1] <= size[2:]) & (size[1:-1] < NEAR_MISS)
    same_side = (ln_alpha[1:-1] * ln_alpha[:-2] > 0.0) & (ln_alpha[1:-1] * ln_alpha[2:] > 0.0)
    misses = 1 + np.flatnonzero(low & same_side)
    aside = [0.5 * (s[misses] + s[misses + k]) for k in (-1, 1)]
    if not len(crossings) + len(misses):
        return _none()
    start_P = P[np.concatenate([crossings, misses, misses])]
    roots = azeotrope_roots(
        system,
        fractions(np.concatenate([at, *aside])),
        np.concatenate([at_T, T[misses], T[misses]]),
        start_P,
        fixed_pressure=condition.pressure_kPa is not None,
    )
    return _distinct(_enclosed(system, condition, roots, s, crossings))


def _interpolated(
    s: FloatArray, T: FloatArray, ln_alpha: FloatArray, crossings: IntArray
) -> tuple[FloatArray, FloatArray]:
    """s and T where ln alpha is zero: inverse interpolation through four points, else two."""
    at, at_T = np.empty(len(crossings)), np.empty(len(crossings))
    for k, left in enumerate(crossings.tolist()):
        near = slice(max(left - 1, 0), left + 3)
        steps = np.diff(ln_alpha[near])
        if not ((steps > 0.0).all() or (steps < 0.0).all()):
            near = slice(left, left + 2)
        weights = _zero_weights(ln_alpha[near])
        at[k] = np.clip(weights @ s[near], s[left], s[left + 1])
        at_T[k] = weights @ T[near]
    return at, at_T


def _zero_weights(values: FloatArray) -> FloatArray:
    """Lagrange weights of interpolation to where the values are zero; equal ones if they repeat."""
    gaps = values[:, None] - values[None, :]
    own = np.eye(len(values), dtype=bool)
    if (gaps == 0.0)[~own].any():
        return np.full(len(values), 1.0 / len(values))
    ratio = -values[None, :] / np.where(own, 1.0, gaps)
    return np.asarray(np.where(own, 1.0, ratio).prod(axis=1))


def _enclosed(
    system: System,
    condition: Condition,
    roots: AzeotropeRoots,
    s: FloatArray,
    crossings: IntArray,
) -> AzeotropeRoots:
    """The roots, with any that Newton led out of its bracket found again inside it."""
    x, T, P = roots.mole_fractions.copy(), roots.temperature_K.copy(), roots.pressure_kPa.copy()
    found = roots.found.copy()
    ends = safe_log(x)
    where = ends[:, 0] - ends[:, 1]
    for k, left in enumerate(crossings):
        low, high = s[int(left)], s[int(left) + 1]
        if found[k] and low - SAME <= where[k] <= high + SAME:
            continue
        root = _bracketed(system, condition, low, high)
        if root is None:
            continue
        state = condition.boil(system, fractions(root))
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
    x = fractions(s)
    state = condition.boil(system, x)
    return float(np.log(state.vapour[0, 0] / state.vapour[0, 1]) - s)


def _distinct(roots: AzeotropeRoots) -> AzeotropeRoots:
    keep = np.flatnonzero(roots.found)
    ln_x = safe_log(roots.mole_fractions[keep])
    s = ln_x[:, 0] - ln_x[:, 1]
    order = np.argsort(s)
    new = np.concatenate([[True], np.diff(s[order]) > SAME]) if len(keep) else keep
    keep = keep[order][new]
    return AzeotropeRoots(
        roots.mole_fractions[keep],
        roots.temperature_K[keep],
        roots.pressure_kPa[keep],
        roots.found[keep],
    )


def _none() -> AzeotropeRoots:
    return AzeotropeRoots(np.empty((0, 2)), np.empty(0), np.empty(0), np.empty(0, dtype=bool))
