"""How probable azeotropes and liquid splits of binaries are, and where they lie.

Every drawn liquid is looked at on one grid of compositions, evenly spaced in ln(x1/x2) so that
nothing hides at the dilute ends. An azeotrope lies where the relative volatility crosses one; a
liquid splits where ln(a1/a2) falls.
"""

from dataclasses import dataclass

import numpy as np

from groups.arrays import BoolArray, FloatArray
from groups.confidence import Interval
from groups.equilibrium import bubble_pressure, bubble_temperature
from groups.equilibrium.states import log_sum_exp, safe_log
from groups.equilibrium.system import System
from groups.prediction.bands import LEVEL, Drawn

GRID = 1.0 / (1.0 + np.exp(-np.linspace(-9.0, 9.0, 361)))  # x1 from 1.2e-4 to 1 - 1.2e-4
# Fewer draws than this with an azeotrope or a split tell nothing of where it lies.
LEAST_DRAWS = 20


@dataclass(frozen=True, slots=True)
class AzeotropeChance:
    """Whether two components form an azeotrope, of any kind; intervals among draws that do."""

    components: tuple[int, int]
    probability: float
    x1: Interval | None
    temperature_K: Interval | None
    pressure_kPa: Interval | None


@dataclass(frozen=True, slots=True)
class SplitChance:
    """Whether a binary liquid splits in two; intervals among draws that do."""

    probability: float
    x1_lower: Interval | None
    x1_upper: Interval | None


def azeotrope_chance(
    drawn: Drawn,
    system: System,
    components: tuple[int, int],
    *,
    temperature_K: float | None = None,
    pressure_kPa: float | None = None,
) -> AzeotropeChance:
    """Probability and place of an azeotrope of two components.

    Parameters
    ----------
    drawn : Drawn
        Around the whole mixture.
    system : System
        Of the whole mixture.
    components : tuple of int
        The two.
    temperature_K, pressure_kPa : float
        Exactly one of them.

    Returns
    -------
    AzeotropeChance
    """
    ln_alpha, level = drawn_ln_alpha(drawn, system, components, temperature_K, pressure_kPa)
    return _found(components, ln_alpha, level, temperature_K, pressure_kPa)


def drawn_ln_alpha(
    drawn: Drawn,
    system: System,
    components: tuple[int, int],
    temperature_K: float | None,
    pressure_kPa: float | None,
) -> tuple[FloatArray, FloatArray]:
    """ln of the relative volatility along `GRID`, and ln P (kPa) or 1/T (1/K), for every draw.

    Parameters
    ----------
    drawn : Drawn
    system : System
    components : tuple of int
    temperature_K, pressure_kPa : float or None
        Exactly one of them.

    Returns
    -------
    tuple of FloatArray of shape (n_samples, n_grid)
    """
    first, second = components
    liquid = np.zeros((len(GRID), system.n_components))
    liquid[:, first], liquid[:, second] = GRID, 1.0 - GRID
    if temperature_K is not None and system.vapour.ideal:
        temperatures, saturation = np.full(len(GRID), temperature_K), None
    else:
        temperatures, saturation = _boiling(system, liquid, temperature_K, pressure_kPa)
        if not np.isfinite(temperatures).all():
            unknown = np.full((len(drawn.shift), len(GRID)), np.nan)
            return unknown, unknown
    if saturation is None:
        saturation = system.ln_saturation(temperatures)
    ln_volatility = drawn.models.ln_gamma(temperatures, liquid)
    ln_volatility = ln_volatility + saturation + drawn.shift[:, None, :]
    slopes = system.ln_volatility_slope(temperatures, liquid)
    ln_P = log_sum_exp(safe_log(liquid) + ln_volatility)
    inverse = np.broadcast_to(1.0 / temperatures, ln_P.shape)
    if pressure_kPa is not None:
        weight = np.exp(safe_log(liquid) + ln_volatility - ln_P[..., None])
        inverse = inverse - (np.log(pressure_kPa) - ln_P) / (
            np.sum(weight * slopes, axis=-1) * temperatures**2
        )
    step = temperatures**2 * (1.0 / temperatures - inverse)
    ln_alpha = ln_volatility[..., first] - ln_volatility[..., second]
    ln_alpha = ln_alpha + (slopes[:, first] - slopes[:, second]) * step
    return ln_alpha, ln_P if temperature_K is not None else inverse


def nearest_to_azeotrope(ln_alpha: FloatArray) -> FloatArray:
    """x1 where each draw has its azeotrope, or comes nearest to one.

    Parameters
    ----------
    ln_alpha : FloatArray of shape (n_samples, n_grid)
        Along `GRID`.

    Returns
    -------
    FloatArray of shape (n_samples,)
    """
    crossing: BoolArray = np.signbit(ln_alpha[:, 1:]) != np.signbit(ln_alpha[:, :-1])
    nearest: FloatArray = GRID[np.abs(ln_alpha).argmin(axis=1)]
    rows = np.flatnonzero(crossing.any(axis=1))
    k = crossing.argmax(axis=1)[rows]
    left, right = ln_alpha[rows, k], ln_alpha[rows, k + 1]
    nearest[rows] = GRID[k] + left / (left - right) * (GRID[k + 1] - GRID[k])
    return nearest


def _boiling(
    system: System, liquid: FloatArray, temperature_K: float | None, pressure_kPa: float | None
) -> tuple[FloatArray, FloatArray | None]:
    """Boiling temperatures of the prediction itself, gaps filled from their neighbours.

    NaN where no liquid between the two boils at the condition: then no draw has an azeotrope.
    Under a real vapour also ln Psat less the correction of the vapour found there.
    """
    if temperature_K is not None:
        states = bubble_pressure(system, np.array([temperature_K]), liquid)
    else:
        states = bubble_temperature(system, pressure_kPa or np.nan, liquid)
    found, known = states.temperature_K, np.flatnonzero(states.converged)
    if not known.size:
        return found, None
    places = np.arange(len(found))
    temperatures: FloatArray = np.interp(places, known, found[known])
    if system.vapour.ideal:
        return temperatures, None
    correction = system.vapour.ln_correction(
        found[known], states.pressure_kPa[known], states.vapour[known]
    )
    filled = [np.interp(places, known, column) for column in correction.T]
    return temperatures, system.ln_saturation(temperatures) - np.stack(filled, axis=-1)


def _found(
    components: tuple[int, int],
    ln_alpha: FloatArray,
    level: FloatArray,
    temperature_K: float | None,
    pressure_kPa: float | None,
) -> AzeotropeChance:
    """First crossing of each draw; `level` is ln P (kPa) or 1/T (1/K) along the grid."""
    crossing: BoolArray = np.signbit(ln_alpha[:, 1:]) != np.signbit(ln_alpha[:, :-1])
    has = crossing.any(axis=1)
    probability = float(has.mean())
    if has.sum() < LEAST_DRAWS:
        return AzeotropeChance(components, probability, None, None, None)
    rows, k = np.flatnonzero(has), crossing.argmax(axis=1)[has]
    left, right = ln_alpha[rows, k], ln_alpha[rows, k + 1]
    share = left / (left - right)
    x1 = GRID[k] + share * (GRID[k + 1] - GRID[k])
    at = level[rows, k] + share * (level[rows, k + 1] - level[rows, k])
    temperature = None if temperature_K is not None else _interval(1.0 / at)
    pressure = None if pressure_kPa is not None else _interval(np.exp(at))
    return AzeotropeChance(components, probability, _interval(x1), temperature, pressure)


def split_chance(drawn: Drawn, temperature_K: float) -> SplitChance:
    """Probability of a liquid split of a binary and the ends of its unstable range.

    The ends told are those of the coexisting liquids, by the rule of equal areas under ln(a1/a2).

    Parameters
    ----------
    drawn : Drawn
        Around a binary.
    temperature_K : float

    Returns
    -------
    SplitChance
    """
    liquid = np.column_stack([GRID, 1.0 - GRID])
    ln_gamma = drawn.models.ln_gamma(temperature_K, liquid)
    ln_activity = ln_gamma + np.log(liquid)
    difference = ln_activity[..., 0] - ln_activity[..., 1]
    splits = (np.diff(difference, axis=1) < 0.0).any(axis=1)
    probability = float(splits.mean())
    if splits.sum() < LEAST_DRAWS:
        return SplitChance(probability, None, None)
    ends = np.array([_equal_areas(row) for row in difference[splits]])
    return SplitChance(probability, _interval(ends[:, 0]), _interval(ends[:, 1]))


def _equal_areas(difference: FloatArray) -> tuple[float, float]:
    """x1 of the coexisting liquids: the lower convex hull of the energy of mixing.

    The energy is the integral of ln(a1/a2) over x1; its hull touches at both liquids.
    """
    steps = (difference[1:] + difference[:-1]) / 2.0 * np.diff(GRID)
    energy = np.concatenate([[0.0], np.cumsum(steps)])
    hull: list[int] = []
    for k in range(len(GRID)):
        while len(hull) > 1 and _above(energy, hull[-2], hull[-1], k):
            hull.pop()
        hull.append(k)
    gaps = np.diff(hull)
    widest = int(gaps.argmax())
    return float(GRID[hull[widest]]), float(GRID[hull[widest + 1]])


def _above(energy: FloatArray, a: int, b: int, c: int) -> bool:
    """Whether point b lies on or above the line from a to c."""
    rise = (energy[c] - energy[a]) * (GRID[b] - GRID[a])
    return bool((energy[b] - energy[a]) * (GRID[c] - GRID[a]) >= rise)


def _interval(values: FloatArray) -> Interval:
    tail = (1.0 - LEVEL) / 2.0
    lower, upper = np.quantile(values, [tail, 1.0 - tail])
    return Interval(float(lower), float(upper))
