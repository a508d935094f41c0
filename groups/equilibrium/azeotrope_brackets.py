"""Where the boiling curve of a binary encloses azeotropes, and good first guesses of them."""

from dataclasses import dataclass

import numpy as np

from groups.arrays import FloatArray, IntArray
from groups.equilibrium.boiling_curve import BoilingCurve

#: |ln alpha| at a local extremum below which two azeotropes may hide between grid points.
NEAR_MISS = 0.05
#: Points on either side of a crossing through which its place is interpolated.
NEIGHBOURS = 4


@dataclass(frozen=True, slots=True)
class Places:
    """Points of a boiling curve inside, in the order of s = ln(x1/x2), each of shape (m,).

    `branch` counts the three-phase lines to the left: there is no homogeneous boiling liquid
    between points of different branches.
    """

    s: FloatArray
    ln_alpha: FloatArray
    temperature_K: FloatArray
    ln_pressure: FloatArray
    branch: IntArray


@dataclass(frozen=True, slots=True)
class Brackets:
    """Changes of sign of ln alpha, k of them.

    Attributes
    ----------
    low, high : array of shape (k,)
        s on either side.
    s, temperature_K, ln_pressure : array of shape (k,)
        Where the interpolated ln alpha is zero.
    slope : array of shape (k,)
        d ln alpha/ds; negative where the azeotrope is minimum-boiling.
    """

    low: FloatArray
    high: FloatArray
    s: FloatArray
    temperature_K: FloatArray
    ln_pressure: FloatArray
    slope: FloatArray


def places(curve: BoilingCurve) -> Places:
    """The points of a curve that bracket azeotropes, with both liquids of three-phase lines."""
    inner = np.flatnonzero(np.isfinite(curve.ln_alpha) & (curve.x > 0.0).all(axis=1))
    x, states = curve.x[inner], curve.states
    s = np.log(x[:, 0]) - np.log(x[:, 1])
    T, ln_P = states.temperature_K[inner], np.log(states.pressure_kPa[inner])
    columns = [s, curve.ln_alpha[inner], T, ln_P]
    branch = np.zeros(len(s), dtype=np.int64)
    if not curve.lines:
        return Places(s, columns[1], T, ln_P, branch)
    ends = []
    for line in curve.lines:
        branch += s > _logit(line.second)
        for end in (line.first, line.second):
            ln_alpha = _logit(line.vapour) - _logit(end)
            ends.append((_logit(end), ln_alpha, line.temperature_K, np.log(line.pressure_kPa)))
    new = np.array(ends)
    # Lines do not overlap, so the ends alternate: left of a gap, right of it, and so on.
    order = np.argsort(new[:, 0])
    branch = np.concatenate([branch, (np.arange(len(new)) + 1) // 2])
    all_s = np.concatenate([s, new[order, 0]])
    sorting = np.argsort(all_s, kind="stable")
    joined = [np.concatenate([column, new[order, k]])[sorting] for k, column in enumerate(columns)]
    return Places(joined[0], joined[1], joined[2], joined[3], branch[sorting])


def brackets(at: Places) -> Brackets:
    """Changes of sign, each with the azeotrope interpolated between its neighbours."""
    sides = np.sign(at.ln_alpha)
    changes = (sides[:-1] * sides[1:] <= 0.0) & (at.branch[:-1] == at.branch[1:])
    left = np.flatnonzero(changes)
    guesses = np.array([_guess(at, int(k)) for k in left]).reshape(len(left), 3)
    low, high = at.s[left], at.s[left + 1]
    slope = (at.ln_alpha[left + 1] - at.ln_alpha[left]) / (high - low)
    return Brackets(low, high, guesses[:, 0], guesses[:, 1], guesses[:, 2], slope)


def near_misses(at: Places) -> IntArray:
    """Local minima of |ln alpha| that do not cross zero but may hide two crossings."""
    value = at.ln_alpha
    size = np.abs(value)
    low = (size[1:-1] <= size[:-2]) & (size[1:-1] <= size[2:]) & (size[1:-1] < NEAR_MISS)
    same_side = (value[1:-1] * value[:-2] > 0.0) & (value[1:-1] * value[2:] > 0.0)
    one_branch = at.branch[:-2] == at.branch[2:]
    return np.asarray(1 + np.flatnonzero(low & same_side & one_branch), dtype=np.int64)


def _guess(at: Places, left: int) -> tuple[float, float, float]:
    """s, T and ln P where ln alpha is zero: inverse interpolation, over two points if need be."""
    near = slice(max(left + 1 - NEIGHBOURS, 0), left + 1 + NEIGHBOURS)
    steps = np.diff(at.ln_alpha[near])
    one_branch = at.branch[near][0] == at.branch[near][-1]
    if not one_branch or not ((steps > 0.0).all() or (steps < 0.0).all()):
        near = slice(left, left + 2)
    weights = _zero_weights(at.ln_alpha[near])
    s = float(np.clip(weights @ at.s[near], at.s[left], at.s[left + 1]))
    return s, float(weights @ at.temperature_K[near]), float(weights @ at.ln_pressure[near])


def _zero_weights(values: FloatArray) -> FloatArray:
    """Lagrange weights of interpolation to where the values are zero; equal ones if they repeat."""
    gaps = values[:, None] - values[None, :]
    own = np.eye(len(values), dtype=bool)
    if (gaps == 0.0)[~own].any():
        return np.full(len(values), 1.0 / len(values))
    ratio = -values[None, :] / np.where(own, 1.0, gaps)
    return np.asarray(np.where(own, 1.0, ratio).prod(axis=1))


def _logit(x: FloatArray) -> float:
    return float(np.log(x[0]) - np.log(x[1]))
