"""Starts for dew points of liquids far from ideal, by the tangent plane instead of substitution.

Substitution runs away where the first liquid is close to splitting. The tangent-plane search does
not: along the grid the first conditions at which the vapour is unstable bracket the dew point.
"""

import numpy as np

from groups.arrays import BoolArray, FloatArray, IntArray
from groups.equilibrium.states import safe_log
from groups.vapour.psrk.saturation_search import SaturationProblem
from groups.vapour.psrk.tangent_plane import NOTHING, tangent_plane

HALVINGS = 10


def scanned_by_stability(problem: SaturationProblem) -> tuple[FloatArray, FloatArray, BoolArray]:
    """ln of P or T, ln W of the first liquid, and whether a bracket was seen.

    Parameters
    ----------
    problem : SaturationProblem
        Of kind "dew".

    Returns
    -------
    s : array of shape (n,)
    u : array of shape (n, n_components)
    found : bool array of shape (n,)
    """
    grid, n = problem.grid(), len(problem.z)
    rows = np.repeat(np.arange(n, dtype=np.int64), len(grid))
    stable, trial = _judged(problem, rows, np.tile(grid, n))
    ok_at, trial = stable.reshape(n, len(grid)), trial.reshape(n, len(grid), -1)
    turn: BoolArray = ok_at[:, :-1] & ~ok_at[:, 1:]
    found: BoolArray = np.asarray(turn.any(axis=1), dtype=bool)
    first, here = turn.argmax(axis=1), np.arange(n)
    low, high, liquid = grid[first], grid[first + 1], trial[here, first + 1]
    active: IntArray = np.flatnonzero(found)
    for _ in range(HALVINGS):
        if not len(active):
            break
        middle = 0.5 * (low[active] + high[active])
        ok, fresh = _judged(problem, active, middle)
        low[active[ok]], high[active[~ok]] = middle[ok], middle[~ok]
        liquid[active[~ok]] = fresh[~ok]
    return high, np.maximum(safe_log(liquid), NOTHING), found


def _judged(
    problem: SaturationProblem, rows: IntArray, s: FloatArray
) -> tuple[BoolArray, FloatArray]:
    T, P = problem.conditions(rows, s)
    judged = tangent_plane(problem.model, T, P, problem.z[rows])
    return judged.stable, judged.trial
