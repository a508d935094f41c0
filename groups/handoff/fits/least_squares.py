"""Least squares from several starts, with exact derivatives, and the covariance of the result."""

from collections.abc import Callable, Sequence
from dataclasses import dataclass

import numpy as np
from scipy.optimize import least_squares

from groups.arrays import FloatArray
from groups.errors import ConvergenceError

Residuals = Callable[[FloatArray], tuple[FloatArray, FloatArray]]
"""From the parameters (P,) to the weighted residuals (N,) and their derivatives (N, P)."""

TOLERANCE = 1e-10
MOST_EVALUATIONS = 80
HUGE = 1e6
"""Residuals beyond this, or not finite, are held at it: a step far into nonsense must cost much,
not break the solver."""


@dataclass(frozen=True, slots=True)
class Solution:
    """The best of several minimisations.

    Attributes
    ----------
    parameters : FloatArray of shape (P,)
    cost : float
        Half the sum of squares.
    residuals : FloatArray of shape (N,)
    jacobian : FloatArray of shape (N, P)
    converged : bool
        False where the solver stopped at its limit of evaluations.
    starts : int
        How many starts were tried.
    agreeing : int
        How many of them arrived at the same cost.
    """

    parameters: FloatArray
    cost: float
    residuals: FloatArray
    jacobian: FloatArray
    converged: bool
    starts: int
    agreeing: int

    def inverse_normal(self) -> FloatArray:
        """(J^T J)^-1; infinite for parameters that the data do not determine.

        A parameter without any influence (one that sits at its bound) is left out, and the others
        are given as if it were known.
        """
        size = np.sqrt((self.jacobian**2).sum(axis=0))
        P = len(size)
        inverse = np.diag(np.full(P, np.inf))
        # A billion times weaker than the strongest is rounding.
        alive = np.flatnonzero(size > 1e-9 * size.max(initial=0.0))
        if not len(alive):
            return inverse
        _, values, V = np.linalg.svd(self.jacobian[:, alive], full_matrices=False)
        if (values <= 1e-9 * values[0]).any() or len(values) < len(alive):
            return np.full((P, P), np.inf)
        inverse[np.ix_(alive, alive)] = (V.T / values**2) @ V
        return inverse


def solve(
    residuals: Residuals,
    starts: Sequence[FloatArray],
    most_evaluations: int = MOST_EVALUATIONS,
) -> Solution:
    """Minimise the sum of squares from each start and keep the best.

    Parameters
    ----------
    residuals : callable
        Weighted residuals and their derivatives.
    starts : sequence of FloatArray of shape (P,)
        At least one.
    most_evaluations : int
        From each start.

    Returns
    -------
    Solution

    Raises
    ------
    ConvergenceError
        If no start arrived anywhere.

    Source
    ------
    Levenberg-Marquardt as in MINPACK (More, 1978), through `scipy.optimize.least_squares`.
    """
    memory = _Memory(residuals)
    found: list[tuple[float, FloatArray, bool]] = []
    for start in starts:
        arrived = least_squares(
            memory.values,
            start,
            jac=memory.derivatives,
            method="lm",
            xtol=TOLERANCE,
            ftol=TOLERANCE,
            gtol=TOLERANCE,
            max_nfev=most_evaluations,
        )
        if np.isfinite(arrived.cost) and arrived.status >= 0:
            found.append((float(arrived.cost), np.asarray(arrived.x), arrived.status > 0))
    if not found:
        raise ConvergenceError(
            "No start of the fit arrived at finite residuals.",
            iterations=most_evaluations * len(starts),
            residual=float("nan"),
        )
    cost, best, converged = min(found, key=lambda one: one[0])
    agreeing = sum(c <= cost * (1.0 + 1e-6) + 1e-12 for c, _, _ in found)
    values, jacobian = memory.both(best)
    return Solution(best, cost, values, jacobian, converged, len(starts), agreeing)


class _Memory:
    """Values and derivatives come out of one evaluation; the solver asks for them one by one."""

    def __init__(self, residuals: Residuals) -> None:
        self._residuals = residuals
        self._at: FloatArray | None = None
        self._kept: tuple[FloatArray, FloatArray] = (np.empty(0), np.empty((0, 0)))

    def both(self, p: FloatArray) -> tuple[FloatArray, FloatArray]:
        if self._at is None or not np.array_equal(self._at, p):
            with np.errstate(all="ignore"):  # overflow far out is caught by the bound below
                values, jacobian = self._residuals(p)
            bad = ~np.isfinite(values) | (np.abs(values) > HUGE)
            if bad.any():
                values = np.where(bad, HUGE, values)
                jacobian = np.where(bad[:, None] | ~np.isfinite(jacobian), 0.0, jacobian)
            self._at, self._kept = p.copy(), (values, jacobian)
        return self._kept

    def values(self, p: FloatArray) -> FloatArray:
        return self.both(p)[0]

    def derivatives(self, p: FloatArray) -> FloatArray:
        return self.both(p)[1]
