"""Tie lines of a ternary followed from one to the next, however the region bends."""

from dataclasses import dataclass

import numpy as np

from groups.arrays import FloatArray
from groups.equilibrium.phase_amounts import settled_amounts
from groups.equilibrium.phase_problem import PhaseProblem
from groups.equilibrium.system import LiquidModel

#: Step between the middles of neighbouring tie lines while a region is followed, and its least.
STEP = 0.04
SMALLEST_STEP = 2e-4
MOST_STEPS = 300
#: A tie line shorter than this is followed no further: the plait point is near.
SHORT = 0.02
#: A mole fraction below this in the middle of a tie line: the edge of the triangle is reached.
EDGE = 1e-4


@dataclass(slots=True)
class Swept:
    """Tie lines in order, each (2, 3), and whether the region closes in a plait point there."""

    lines: list[FloatArray]
    closed: bool
    closed_at_start: bool = False


def sweep(liquid: LiquidModel, T: float, start: FloatArray, inward: FloatArray) -> Swept:
    """Follow tie lines from one to a plait point or to another edge."""
    lines, step = [start], STEP
    ahead = inward - start.mean(axis=0)
    for _ in range(MOST_STEPS):
        last = lines[-1]
        across = last[1] - last[0]
        length = float(np.abs(across).max())
        ahead = _beside(across, ahead)
        # Not further than a share of the length: the region narrows towards a plait point.
        feed = last.mean(axis=0) + min(step, 0.5 * length) * ahead
        new = _tie_line(liquid, T, last, feed) if (feed > 0.0).all() else None
        if new is None:
            step *= 0.5
            if step < SMALLEST_STEP:
                return Swept(lines, closed=bool((last.mean(axis=0) > 10.0 * EDGE).all()))
            continue
        lines.append(new)
        step = min(STEP, 1.5 * step)
        if np.abs(new[1] - new[0]).max() < SHORT:
            return Swept(lines, closed=True)
        if new.mean(axis=0).min() < EDGE:
            return Swept(lines, closed=False)
    return Swept(lines, closed=False)


def island(liquid: LiquidModel, T: float, start: FloatArray) -> Swept:
    """A region that touches no edge: swept from within to both sides."""
    across = start[1] - start[0]
    side = np.cross(across, np.ones(3))
    one, other = (sweep(liquid, T, start, start.mean(axis=0) + s * side) for s in (1.0, -1.0))
    return Swept(other.lines[:0:-1] + one.lines, one.closed, other.closed)


def _beside(across: FloatArray, ahead: FloatArray) -> FloatArray:
    """Unit direction in the plane of the triangle, at right angles to a tie line, ahead."""
    direction = np.cross(across, np.ones(3))
    direction *= 1.0 if direction @ ahead >= 0.0 else -1.0
    return np.asarray(direction / np.abs(direction).max())


def _tie_line(
    liquid: LiquidModel, T: float, last: FloatArray, feed: FloatArray
) -> FloatArray | None:
    """The tie line (2, 3) through a feed, beginning from a neighbouring one."""
    share = 0.5 * np.maximum(last, 1e-8)
    start = share * (feed / share.sum(axis=0))
    problem = PhaseProblem.of_liquid(liquid, np.array([T]), feed[None])
    found = settled_amounts(problem, start[None], 2)
    if not found.settled[0]:
        return None
    x = found.amounts[0] / found.amounts[0].sum(axis=1, keepdims=True)
    # A jump to another gap is no neighbour.
    return np.asarray(x) if np.abs(x - last).max() < 0.3 else None


def near(line: FloatArray, region: Swept) -> bool:
    """Whether the middle of a tie line lies close to a region that has been swept."""
    middle = line.mean(axis=0)
    for other in region.lines:
        across = other[1] - other[0]
        share = np.clip((middle - other[0]) @ across / max(float(across @ across), 1e-12), 0.0, 1.0)
        if np.abs(other[0] + share * across - middle).max() < 1.5 * STEP:
            return True
    return False


def on_line(line: FloatArray, other: FloatArray) -> bool:
    """Whether two tie lines are the same, whichever end is first."""
    return bool(np.abs(line - other).max() < 0.02 or np.abs(line - other[::-1]).max() < 0.02)
