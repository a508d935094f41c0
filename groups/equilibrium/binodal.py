"""The two-liquid regions of a ternary at one temperature: tie lines, binodal, plait points.

A region is entered from a miscibility gap of one of the three binaries, or from a splitting liquid
inside. From there tie lines are followed: the feed of the next one lies a small step beside the
middle of the last, at right angles to it, so the region is swept however it bends. It ends in a
plait point, or at the gap of another binary. The tie lines asked for are then solved anew, evenly
spaced, and held against trial liquids.
"""

from dataclasses import dataclass

import numpy as np

from groups.arrays import FloatArray
from groups.equilibrium.binary_split import binary_splits
from groups.equilibrium.conditions import checked_temperature
from groups.equilibrium.flash import flash_states
from groups.equilibrium.liquid_trials import lowest_trials
from groups.equilibrium.phase_amounts import settled_amounts
from groups.equilibrium.phase_problem import PhaseProblem
from groups.equilibrium.plait_point import plait_point
from groups.equilibrium.stability import ZERO_DISTANCE
from groups.equilibrium.subset import SubsetLiquid
from groups.equilibrium.system import LiquidModel
from groups.equilibrium.tie_line_sweep import Swept, island, near, on_line, sweep
from groups.errors import OutOfRangeError, ShapeError

#: Tangent-plane distance below which a plait point is no stable one.
FLAT_DISTANCE = 1e-6
MOST_TIE_LINES = 1000
#: Parts along an edge of the lattice on which regions that touch no edge are looked for.
LATTICE = 12


@dataclass(frozen=True, slots=True)
class TwoLiquidRegion:
    """One region of a ternary where two liquids coexist.

    Attributes
    ----------
    first, second : array of shape (k, 3)
        Ends of the tie lines, in order along the region; the binodal runs through them and the
        plait points.
    whole : bool
        False for a part of a region that a triangle of three liquids cuts; it has only its share of
        the tie lines asked for.
    plait_points : tuple of arrays of shape (3,)
        None, one or two.
    """

    first: FloatArray
    second: FloatArray
    whole: bool
    plait_points: tuple[FloatArray, ...]


@dataclass(frozen=True, slots=True)
class TernaryBinodal:
    """All two-liquid regions of a ternary, and triangles of three liquids, each of shape (3, 3)."""

    temperature_K: float
    regions: tuple[TwoLiquidRegion, ...]
    triangles: tuple[FloatArray, ...]


def ternary_binodal(
    liquid: LiquidModel, temperature_K: float, tie_lines: int = 30
) -> TernaryBinodal:
    """Tie lines, binodal and plait points of a ternary.

    Parameters
    ----------
    liquid : LiquidModel
        Of three components.
    temperature_K : float
        In K, 40 to 2000.
    tie_lines : int
        Of each region, 2 to 1000, evenly spaced.

    Returns
    -------
    TernaryBinodal
        Without regions where the liquid is stable throughout.

    Raises
    ------
    OutOfRangeError, ShapeError

    Source
    ------
    Prausnitz, Lichtenthaler & de Azevedo (1999), section 6.14; the plait point by the criteria of
    Gibbs as in Heidemann & Khalil, AIChE J. 26 (1980) 769.
    """
    if liquid.n_components != 3:
        raise ShapeError(
            f"A ternary binodal needs three components. Got {liquid.n_components} instead.",
            cure="Use the liquid flash for more components.",
            field="components",
        )
    if not 2 <= tie_lines <= MOST_TIE_LINES:
        raise OutOfRangeError("tie_lines", tie_lines, 2, MOST_TIE_LINES)
    T = float(checked_temperature(temperature_K)[0])
    lattice = _lattice_flash(liquid, T)
    swept: list[Swept] = []
    for start, inward in _edge_gaps(liquid, T):
        if not any(on_line(start, region.lines[-1]) for region in swept):
            region = sweep(liquid, T, start, inward)
            swept.append(region)
    for start in lattice[0]:
        if not any(near(start, region) for region in swept):
            swept.append(island(liquid, T, start))
    regions: list[TwoLiquidRegion] = []
    for region in swept:
        if len(region.lines) > 1:
            regions.extend(_new(_finished(liquid, T, region, tie_lines), regions))
    return TernaryBinodal(T, tuple(regions), tuple(lattice[1]))


def _edge_gaps(liquid: LiquidModel, T: float) -> list[tuple[FloatArray, FloatArray]]:
    """Tie lines (2, 3) on the edges of the triangle, and the corner each region opens towards."""
    found = []
    for i, j, other in ((0, 1, 2), (0, 2, 1), (1, 2, 0)):
        for split in binary_splits(SubsetLiquid(liquid, (i, j)), T):
            line = np.zeros((2, 3))
            line[:, [i, j]] = split.first, split.second
            found.append((line, np.eye(3)[other]))
    return found


def _lattice_flash(liquid: LiquidModel, T: float) -> tuple[list[FloatArray], list[FloatArray]]:
    """Tie lines and triangles of a lattice of feeds inside."""
    cells = [(i, j) for i in range(1, LATTICE) for j in range(1, LATTICE - i)]
    feeds = np.array([[i, j, LATTICE - i - j] for i, j in cells]) / LATTICE
    found = flash_states(PhaseProblem.of_liquid(liquid, np.full(len(feeds), T), feeds))
    count = np.isfinite(found.liquids[:, :, 0]).sum(axis=1)
    lines = [found.liquids[k, :2] for k in np.flatnonzero(found.converged & (count == 2))]
    triangles: list[FloatArray] = []
    for k in np.flatnonzero(found.converged & (count == 3)):
        corners = found.liquids[k]
        if not any(_same_corners(corners, old) for old in triangles):
            triangles.append(corners)
    return lines, triangles


def _same_corners(one: FloatArray, other: FloatArray) -> bool:
    apart = np.abs(one[:, None] - other[None]).max(axis=2)
    return bool(apart.min(axis=1).max() < 1e-6)


def _new(parts: list[TwoLiquidRegion], known: list[TwoLiquidRegion]) -> list[TwoLiquidRegion]:
    """The parts that another sweep has not found before."""
    old = [Swept(list(np.stack([r.first, r.second], axis=1)), closed=False) for r in known]
    return [
        part
        for part in parts
        if not any(
            near(np.stack([part.first[k], part.second[k]]), region)
            for region in old
            for k in (0, len(part.first) // 2)
        )
    ]


def _finished(liquid: LiquidModel, T: float, region: Swept, count: int) -> list[TwoLiquidRegion]:
    """Evenly spaced tie lines, tested for stability, and the plait points."""
    lines = np.array(region.lines)
    middles = lines.mean(axis=1)
    along = np.concatenate([[0.0], np.cumsum(np.abs(np.diff(middles, axis=0)).max(axis=1))])
    wanted = np.linspace(0.0, along[-1], count)
    near = np.abs(along[None] - wanted[:, None]).argmin(axis=1)
    feeds = np.stack([np.interp(wanted, along, middles[:, i]) for i in range(3)], axis=1)
    feeds /= feeds.sum(axis=1, keepdims=True)
    share = 0.5 * np.where(feeds[:, None] > 0.0, np.maximum(lines[near], 1e-8), 0.0)
    start = share * (feeds / np.where(feeds > 0.0, share.sum(axis=1), 1.0))[:, None]
    problem = PhaseProblem.of_liquid(liquid, np.full(count, T), feeds)
    found = settled_amounts(problem, start, 2)
    x = found.amounts / found.amounts.sum(axis=2, keepdims=True)
    good = found.settled
    mean = (found.amounts * found.ln_fugacity).sum(axis=1) / np.where(feeds > 0.0, feeds, 1.0)
    plane = np.where(feeds > 0.0, mean, -np.inf)[good]
    stable = lowest_trials(liquid, problem.temperature_K[good], plane).distance > -ZERO_DISTANCE
    good[good] = stable
    # Where three liquids lie across the region its parts are given one by one.
    cuts = np.flatnonzero(np.diff(np.concatenate([[False], good, [False]]).astype(np.int64)))
    parts = []
    for low, high in zip(cuts[::2].tolist(), cuts[1::2].tolist(), strict=True):
        ends = [lines[-1]] if region.closed and high == count else []
        ends += [lines[0]] if region.closed_at_start and low == 0 else []
        plaits = [plait_point(liquid, T, end[0], end[1]) for end in ends]
        true = tuple(p for p in plaits if p is not None and _lies_lowest(liquid, T, p))
        part = x[low:high]
        parts.append(TwoLiquidRegion(part[:, 0], part[:, 1], high - low == count, true))
    return parts


def _lies_lowest(liquid: LiquidModel, T: float, x: FloatArray) -> bool:
    """Whether no liquid lies below the tangent plane at a plait point."""
    at = np.array([T])
    plane = np.log(x)[None] + liquid.ln_gamma(at, x[None])
    # At a plait point the distance is flat to the fourth order, and its place has an error.
    return bool(lowest_trials(liquid, at, plane).distance[0] > -FLAT_DISTANCE)
