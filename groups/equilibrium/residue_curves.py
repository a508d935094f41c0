"""Residue curves of a ternary: what is left in an open still, and the boundaries between regions.

dx/dt = x - y with y the vapour over the boiling liquid x (over both liquids together where it
splits). Curves are followed by their length, so that they neither crawl near a node nor leap past
one, from every start to both ends at once. Distillation boundaries are the curves that leave
saddles into the triangle.
"""

from dataclasses import dataclass

import numpy as np

from groups.arrays import FloatArray, IntArray
from groups.equilibrium.azeotropes import azeotrope_set
from groups.equilibrium.boiling_curve import Condition
from groups.equilibrium.conditions import checked_fractions, checked_pressure
from groups.equilibrium.fixed_points import FixedPoint, fixed_points
from groups.equilibrium.stable_bubble import stable_bubble_states
from groups.equilibrium.system import System
from groups.errors import ShapeError

#: Length of a step in mole fraction, and the most steps of one curve.
STEP = 0.02
MOST_STEPS = 160
#: A curve this close to a node has arrived.
ARRIVED = 0.015
#: How far beside a saddle a boundary begins.
BESIDE = 2e-3
LATTICE = 6
INSIDE = 1e-10


@dataclass(frozen=True, slots=True)
class ResidueCurve:
    """One path, from the lowest boiling end to the highest.

    Attributes
    ----------
    mole_fractions : array of shape (k, 3)
    temperature_K : array of shape (k,)
        NaN at a point whose boiling temperature was not found.
    begins, ends : int or None
        Index of the fixed point at either end; None where the path stopped on its way.
    """

    mole_fractions: FloatArray
    temperature_K: FloatArray
    begins: int | None
    ends: int | None


@dataclass(frozen=True, slots=True)
class ResidueMap:
    """Residue curves of a ternary at one pressure.

    Attributes
    ----------
    fixed_points : tuple of FixedPoint
        Pure components first, then the azeotropes.
    curves, boundaries : tuple of ResidueCurve
    index_balanced : bool
        False where the fixed points make no possible map: an azeotrope was missed.
    """

    pressure_kPa: float
    fixed_points: tuple[FixedPoint, ...]
    curves: tuple[ResidueCurve, ...]
    boundaries: tuple[ResidueCurve, ...]
    index_balanced: bool


def residue_curves(
    system: System, pressure_kPa: float, starts: FloatArray | None = None
) -> ResidueMap:
    """Residue curves, nodes, saddles and distillation boundaries of a ternary.

    Parameters
    ----------
    system : System
        Of three components.
    pressure_kPa : float
        In kPa, 1e-9 to 1e6.
    starts : array of shape (k, 3), optional
        Mole fractions that curves shall pass through; a lattice of ten by default.

    Returns
    -------
    ResidueMap

    Raises
    ------
    OutOfRangeError, FractionSumError, ShapeError

    Source
    ------
    Doherty & Perkins, Chem. Eng. Sci. 33 (1978) 281-301; Doherty & Malone, Conceptual Design of
    Distillation Systems (2001), chapter 5.
    """
    if system.n_components != 3:
        raise ShapeError(
            f"Residue curves need three components. Got {system.n_components} instead.",
            cure="Choose three of the components.",
            field="components",
        )
    P = float(checked_pressure(pressure_kPa)[0])
    condition = Condition(pressure_kPa=P)
    found = azeotrope_set(system, pressure_kPa=P)
    points = fixed_points(system, condition, found.azeotropes)
    through = _lattice() if starts is None else checked_fractions(starts, 3)
    still = _Still(system, P, points)
    saddles, senses = _beside_saddles(points)
    m = len(through)
    every = np.concatenate([through, through, saddles])
    sense = np.concatenate([-np.ones(m), np.ones(m), senses])
    paths, ends = still.follow(every, sense)
    whole = [
        (np.concatenate([paths[k][::-1], paths[m + k][1:]]), ends[k], ends[m + k]) for k in range(m)
    ]
    for k, saddle in enumerate(_saddle_indices(points)):
        path = np.concatenate([points[saddle].mole_fractions[None], paths[2 * m + k]])
        end = ends[2 * m + k]
        whole.append((path[::-1], end, saddle) if senses[k] < 0.0 else (path, saddle, end))
    curves = still.curves(whole)
    return ResidueMap(P, points, curves[:m], curves[m:], found.index_balanced)


def _lattice() -> FloatArray:
    cells = [(i, j) for i in range(1, LATTICE) for j in range(1, LATTICE - i)]
    return np.array([[i, j, LATTICE - i - j] for i, j in cells]) / LATTICE


def _beside_saddles(points: tuple[FixedPoint, ...]) -> tuple[FloatArray, FloatArray]:
    """Points a little way along the separatrices of saddles, and the sense to follow them."""
    beside, senses = [], []
    for point in points:
        for direction, sense in _separatrices(point):
            x = point.mole_fractions + BESIDE * direction / np.abs(direction).max()
            beside.append(x / x.sum())
            senses.append(sense)
    return np.array(beside).reshape(-1, 3), np.array(senses)


def _saddle_indices(points: tuple[FixedPoint, ...]) -> list[int]:
    return [k for k, point in enumerate(points) for _ in _separatrices(point)]


def _separatrices(point: FixedPoint) -> list[tuple[FloatArray, float]]:
    """Directions into the triangle along which curves leave (+1) or reach (-1) a saddle."""
    x = point.mole_fractions
    if point.stability != "saddle" or point.azeotrope is None:
        return []  # the separatrices of a pure component are edges
    missing = np.flatnonzero(x <= 0.0)
    if len(missing):
        return [(np.eye(3)[missing[0]] - x, float(point.outward[missing[0]]))]
    steps = zip(point.inner.tolist(), point.inner_steps, strict=True)
    return [(sign * step, value) for value, step in steps for sign in (-1.0, 1.0)]


class _Still:
    """Vapours over boiling liquids at one pressure, and the paths they give."""

    def __init__(self, system: System, P: float, points: tuple[FixedPoint, ...]) -> None:
        self.system, self.P = system, P
        self.points = points
        self.places = np.array([point.mole_fractions for point in points])

    def boil(self, x: FloatArray) -> tuple[FloatArray, FloatArray]:
        """T and vapour over stable liquids; NaN where not found."""
        found = stable_bubble_states(self.system, np.full(len(x), self.P), x)
        return found.temperature_K, found.vapour

    def follow(
        self, starts: FloatArray, sense: FloatArray
    ) -> tuple[list[FloatArray], list[int | None]]:
        """Paths (k, 3) from the starts, and the node each arrives at."""
        paths = [[x] for x in starts]
        ends: list[int | None] = [None] * len(starts)
        x, rows = starts.copy(), np.arange(len(starts))
        for _ in range(MOST_STEPS):
            if not len(rows):
                break
            first = self._direction(x[rows], sense[rows])
            half = _inside(x[rows] + 0.5 * STEP * first)
            step = self._direction(half, sense[rows])
            new = _inside(x[rows] + STEP * step)
            lost = np.asarray(~np.isfinite(new).all(axis=1))
            x[rows] = np.where(lost[:, None], x[rows], new)
            arrived = self._arrived(x[rows], sense[rows])
            for k, row in enumerate(rows.tolist()):
                if lost[k]:
                    continue
                if arrived[k] >= 0:
                    ends[row] = int(arrived[k])
                    paths[row].append(self.places[arrived[k]])
                else:
                    paths[row].append(x[row].copy())
            rows = rows[~lost & (arrived < 0)]
        return [np.array(path) for path in paths], ends

    def _direction(self, x: FloatArray, sense: FloatArray) -> FloatArray:
        _, y = self.boil(x)
        along = sense[:, None] * (x - y)
        return np.asarray(along / np.maximum(np.abs(along).max(axis=1, keepdims=True), 1e-12))

    def _arrived(self, x: FloatArray, sense: FloatArray) -> IntArray:
        """Index of the node at hand, else -1."""
        ending = np.array([p.stability == "stable node" for p in self.points])
        beginning = np.array([p.stability == "unstable node" for p in self.points])
        apart = np.asarray(np.abs(x[:, None] - self.places[None]).max(axis=2))
        fits = np.where((sense > 0.0)[:, None], ending[None], beginning[None])
        apart = np.asarray(np.where(fits, apart, np.inf))
        near = apart.argmin(axis=1)
        return np.where(apart[np.arange(len(x)), near] < ARRIVED, near, -1)

    def curves(
        self, paths: list[tuple[FloatArray, int | None, int | None]]
    ) -> tuple[ResidueCurve, ...]:
        """The paths with their temperatures, all evaluated at once."""
        T, _ = self.boil(_inside(np.concatenate([path for path, _, _ in paths])))
        parts = np.split(T, np.cumsum([len(path) for path, _, _ in paths])[:-1])
        return tuple(
            ResidueCurve(path, part, begins, ends)
            for (path, begins, ends), part in zip(paths, parts, strict=True)
        )


def _inside(x: FloatArray) -> FloatArray:
    kept = np.maximum(x, INSIDE)
    return np.asarray(kept / kept.sum(axis=1, keepdims=True))
