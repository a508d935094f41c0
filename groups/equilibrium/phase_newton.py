"""Newton's method on phases of a given vapour fraction, with the temperature or pressure unknown.

Unknowns: the scaled changes u_ik = dn_ik / sqrt(n_ik) of all amounts, the common potentials of the
components, and ln T or ln P. Equations: ln f_ik equal to the common potential, the balance of each
component, and the amount of vapour. Unlike a search over flashes it has no trouble where a vapour
fraction belongs to a single temperature, as between two liquids and a vapour of two components.
"""

from dataclasses import dataclass
from typing import Literal

import numpy as np

from groups.arrays import FloatArray, IntArray
from groups.equilibrium.conditions import HIGHEST_K, LOWEST_K
from groups.equilibrium.phase_amounts import GONE, ln_fugacities
from groups.equilibrium.phase_problem import PhaseProblem
from groups.equilibrium.system import System

Unknown = Literal["temperature", "pressure"]
TOLERANCE = 1e-11
#: Largest difference of the vapour fraction, and of the balance.
BALANCE = 1e-12
MAX_ITERATIONS = 40
#: The longest step keeps this part of every amount, and moves ln T and ln P by at most these.
KEPT = 0.1
LONGEST = {"temperature": 0.03, "pressure": 0.5}


@dataclass(frozen=True, slots=True)
class Polished:
    """Amounts (phases, n_components) with a vapour last, and T and P; `lost` is a phase or -1."""

    amounts: FloatArray
    temperature_K: float
    pressure_kPa: float
    converged: bool
    lost: int


def polished(
    system: System,
    unknown: Unknown,
    start: FloatArray,
    temperature_K: float,
    pressure_kPa: float,
    vapour_fraction: float,
) -> Polished:
    """Follow one state to the vapour fraction wanted.

    Parameters
    ----------
    system : System
    unknown : {"temperature", "pressure"}
        The other one stays.
    start : array of shape (phases, n_components)
        Liquids, then a vapour; the sum over the phases is the feed.
    temperature_K, pressure_kPa : float
    vapour_fraction : float
    """
    z = start.sum(axis=0)
    kept = np.flatnonzero(z > 0.0)
    n, T, P = start.copy(), temperature_K, pressure_kPa
    for _ in range(MAX_ITERATIONS):
        lost = int(n.sum(axis=1).argmin())
        if n[lost].sum() < GONE:
            return Polished(n, T, P, converged=False, lost=lost)
        problem = PhaseProblem.of_system(system, np.array([T]), np.array([P]), z[None])
        ln_f = ln_fugacities(problem, n[None], len(n) - 1)[0]
        missing = z - n.sum(axis=0)
        lack = vapour_fraction - n[-1].sum()
        mean = (n * ln_f).sum(axis=0) / np.where(z > 0.0, z, 1.0)
        gap = np.where(n > 1e-290, ln_f - mean, 0.0)
        off = max(abs(lack), float(np.abs(missing).max()))
        if np.abs(gap).max() <= TOLERANCE and off <= BALANCE:
            return Polished(n, T, P, converged=True, lost=-1)
        matrix, right = _equations(system, problem, n, ln_f, kept, unknown)
        right = np.concatenate([right, missing[kept], [lack]])
        try:
            solution = np.asarray(np.linalg.solve(matrix, right))
        except np.linalg.LinAlgError:
            break
        if not np.isfinite(solution).all():
            break
        n, change = _stepped(n, kept, solution, unknown)
        if unknown == "temperature":
            T = float(np.clip(T * np.exp(change), LOWEST_K, HIGHEST_K))
        else:
            P = float(P * np.exp(change))
    return Polished(n, T, P, converged=False, lost=-1)


def _equations(
    system: System,
    problem: PhaseProblem,
    n: FloatArray,
    ln_f: FloatArray,
    kept: IntArray,
    unknown: Unknown,
) -> tuple[FloatArray, FloatArray]:
    """Matrix over (u, potentials, ln T or ln P), and the right side of the first equations."""
    phases, nc = len(n), len(kept)
    x = n / n.sum(axis=1, keepdims=True)
    slopes = problem.derivatives(x[None], phases - 1)[0][:, kept][:, :, kept]
    root, amount = np.sqrt(x[:, kept]), np.sqrt(n[:, kept])
    size = phases * nc
    matrix = np.zeros((size + nc + 1, size + nc + 1))
    in_condition = np.zeros((phases, nc))
    if unknown == "temperature":
        T = np.repeat(problem.temperature_K, phases - 1)
        slope = system.ln_volatility_slope(T, x[:-1]) * T[:, None]
        in_condition[:-1] = slope[:, kept]
    else:
        in_condition[:-1] = -1.0
    for k in range(phases):
        rows = slice(k * nc, (k + 1) * nc)
        own = (slopes[k] - 1.0) * root[k][:, None] * root[k][None, :] + np.eye(nc)
        matrix[rows, rows] = own
        matrix[rows, size : size + nc] = -np.diag(amount[k])
        matrix[rows, -1] = amount[k] * in_condition[k]
        matrix[size : size + nc, rows] = np.diag(amount[k])
    matrix[-1, size - nc : size] = amount[-1]
    # The potentials are counted from zero, so the gradient stands in full on the right.
    return matrix, -(amount * ln_f[:, kept]).ravel()


def _stepped(
    n: FloatArray, kept: IntArray, solution: FloatArray, unknown: Unknown
) -> tuple[FloatArray, float]:
    """The next amounts and the change of ln T or ln P, shortened where it is too long."""
    phases, nc = len(n), len(kept)
    u = solution[: phases * nc].reshape(phases, nc)
    step = np.zeros_like(n)
    step[:, kept] = u * np.sqrt(n[:, kept])
    fall = float(np.where(step < 0.0, -step / np.where(n > 0.0, n, 1.0), 0.0).max())
    change = float(solution[-1])
    limit = min(1.0, (1.0 - KEPT) / max(fall, 1e-300), LONGEST[unknown] / max(abs(change), 1e-300))
    return n + limit * step, limit * change
