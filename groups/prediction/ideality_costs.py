"""What leaving out the real liquid or the real vapour would cost a mixture, by computation."""

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from groups.activity import ActivityModel
from groups.arrays import BoolArray, FloatArray
from groups.equilibrium import States, System, bubble_pressure, bubble_temperature
from groups.equilibrium.states import safe_log
from groups.vapour import VapourChoice, VirialVapour, choose_vapour

#: Mole fraction that stands for a trace.
TRACE = 1e-6
#: Steps along an edge of a binary or ternary; more components get random compositions beside.
STEPS, MOST_COMPOSITIONS, SEED = 20, 300, 20_260_601
#: Fractions of components in both phases below which a relative volatility is not compared.
SEEN = 1e-5


@dataclass(frozen=True, slots=True)
class Cost:
    """Largest errors that a simplification causes over the states looked at; or what is allowed.

    Attributes
    ----------
    pressure : float
        Relative error of the bubble pressure.
    vapour : float
        Error of a mole fraction of the vapour.
    relative_volatility : float
        Relative error of a relative volatility.
    """

    pressure: float
    vapour: float
    relative_volatility: float

    def within(self, allowed: "Cost") -> bool:
        """Whether no error is larger than what is allowed.

        Parameters
        ----------
        allowed : Cost

        Returns
        -------
        bool
        """
        return (
            self.pressure <= allowed.pressure
            and self.vapour <= allowed.vapour
            and self.relative_volatility <= allowed.relative_volatility
        )


@dataclass(frozen=True, slots=True)
class SolutionJudged:
    """How far the liquid is from an ideal solution.

    Attributes
    ----------
    largest_ln_gamma : float
        Largest |ln gamma| over the compositions, traces included.
    component : int
        Whose it is.
    largest_excess_gibbs_RT : float
        Largest |gE/RT|.
    volatility_ratio : float
        Largest ratio of one relative volatility between two of the compositions.
    cost : Cost
        Of an ideal solution.
    """

    largest_ln_gamma: float
    component: int
    largest_excess_gibbs_RT: float
    volatility_ratio: float
    cost: Cost


def compositions(lower: FloatArray, upper: FloatArray) -> FloatArray:
    """Liquids within bounds on each mole fraction: pure and dilute ends, edges, the inside.

    Parameters
    ----------
    lower, upper : array of shape (n_components,)

    Returns
    -------
    array of shape (n, n_components)
        Empty where the bounds leave no composition.
    """
    n = len(lower)
    rng = np.random.default_rng(SEED)
    parts = [np.eye(n), np.full((1, n), 1.0 / n), 0.5 * (lower + upper)[None]]
    share = np.linspace(0.0, 1.0, STEPS + 1)[1:-1] if n <= 3 else np.array([0.1, 0.5, 0.9])
    if n <= 3:  # a gas dissolves in traces: the liquids that boil with it are dilute ones
        dilute = np.geomspace(TRACE, 0.02, 10)
        share = np.concatenate([dilute, share, 1.0 - dilute])
    for i in range(n):
        for j in range(i + 1, n):
            edge = np.zeros((len(share), n))
            edge[:, i], edge[:, j] = share, 1.0 - share
            parts.append(edge)
    if n > 2:
        parts.append(rng.dirichlet(np.ones(n), 60))
    # Within narrow bounds few of these are left: the others are drawn into them.
    even = np.linspace(0.0, 1.0, 3 * STEPS + 1)
    free = np.stack([even, 1.0 - even], axis=-1) if n == 2 else rng.dirichlet(np.ones(n), 60)
    parts.append(lower + free * (1.0 - lower.sum()))
    every = np.vstack(parts)
    every = np.maximum(every, TRACE * (upper > TRACE))
    every = every / every.sum(axis=1, keepdims=True)
    inside = ((every >= lower - 1e-9) & (every <= upper + n * TRACE)).all(axis=1)
    return np.asarray(every[inside][:MOST_COMPOSITIONS])


def boiling_states(
    system: System,
    liquids: FloatArray,
    temperature_K: tuple[float, float],
    pressure_kPa: tuple[float, float],
) -> tuple[States, BoolArray]:
    """Boiling states of the liquids at temperatures and pressures of the ranges.

    Parameters
    ----------
    system : System
    liquids : array of shape (n, n_components)
    temperature_K, pressure_kPa : tuple of float

    Returns
    -------
    states : States
    within : bool array
        Which of them lie inside both ranges.
    """
    parts = []
    for T in np.unique(np.linspace(*temperature_K, 3)).tolist():
        parts.append(bubble_pressure(system, T, liquids))
    for P in np.unique(np.geomspace(*pressure_kPa, 3)).tolist():
        parts.append(bubble_temperature(system, P, liquids))
    states = _joined(parts)
    within = _between(states.temperature_K, temperature_K)
    return states, np.asarray(within & _between(states.pressure_kPa, pressure_kPa))


def _between(values: FloatArray, ends: tuple[float, float]) -> BoolArray:
    """Within two positive numbers, rounding allowed."""
    low, high = ends[0] * (1.0 - 1e-8), ends[1] * (1.0 + 1e-8)
    return np.asarray((values >= low) & (values <= high))


def _joined(parts: Sequence[States]) -> States:
    good = [part.converged for part in parts]

    def column(name: str) -> FloatArray:
        pieces = [getattr(p, name)[k] for p, k in zip(parts, good, strict=True)]
        return np.concatenate(pieces)

    n = int(sum(k.sum() for k in good))
    return States(
        column("temperature_K"),
        column("pressure_kPa"),
        column("liquid"),
        column("vapour"),
        column("gamma"),
        np.ones(n, dtype=bool),
        column("residual"),
        (None,) * n,
    )


def judge_solution(
    model: ActivityModel, system: System, states: States, rows: BoolArray
) -> SolutionJudged:
    """How far the boiling liquids are from an ideal solution, and what that would cost.

    Parameters
    ----------
    model : ActivityModel
    system : System
        With an ideal vapour.
    states : States
    rows : bool array
        Which of the states count.

    Returns
    -------
    SolutionJudged

    Source
    ------
    Raoult's law beside modified Raoult's law at the same T and x.
    """
    T, x, y = states.temperature_K[rows], states.liquid[rows], states.vapour[rows]
    ln_gamma = np.asarray(model.ln_gamma(T, x))
    saturation = system.ln_saturation(T)
    ideal = np.exp(safe_log(x) + saturation)
    real = np.exp(safe_log(x) + ln_gamma + saturation)
    pressure = ideal.sum(axis=1) / real.sum(axis=1) - 1.0
    vapour = ideal / ideal.sum(axis=1, keepdims=True) - real / real.sum(axis=1, keepdims=True)
    ratio = ln_gamma[:, :, None] - ln_gamma[:, None, :]
    both = (y[:, :, None] > SEEN) & (y[:, None, :] > SEEN)
    ln_alpha = ratio + saturation[:, :, None] - saturation[:, None, :]
    worst = np.abs(ln_gamma).max(axis=0)
    return SolutionJudged(
        float(worst.max()),
        int(worst.argmax()),
        float(np.abs((x * ln_gamma).sum(axis=1)).max()),
        float(np.exp(np.max(ln_alpha.max(axis=0) - ln_alpha.min(axis=0)))),
        Cost(
            float(np.abs(pressure).max()),
            float(np.abs(vapour).max()),
            float(np.expm1(np.abs(np.where(both, ratio, 0.0)).max())),
        ),
    )


def judge_vapour(
    vapour: VirialVapour, states: States, rows: BoolArray
) -> tuple[VapourChoice, float]:
    """Whether the vapours over the boiling liquids are ideal gases, and the largest |ln phi|.

    Parameters
    ----------
    vapour : VirialVapour
    states : States
    rows : bool array

    Returns
    -------
    tuple of VapourChoice and float
    """
    choice = choose_vapour(
        vapour, states.temperature_K[rows], states.pressure_kPa[rows], states.vapour[rows]
    )
    return choice, float(np.abs(choice.judged.ln_fugacity_coefficient).max())


def vapour_cost(choice: VapourChoice) -> Cost:
    """The cost of an ideal vapour as it was judged.

    Parameters
    ----------
    choice : VapourChoice

    Returns
    -------
    Cost
    """
    return Cost(
        choice.largest_pressure_error,
        choice.largest_vapour_error,
        float(np.expm1(choice.largest_ln_volatility_error)),
    )
