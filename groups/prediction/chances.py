"""How probable azeotropes and liquid splits of binaries are, and where they lie.

Every drawn liquid is looked at along `groups.prediction.composition_line`. An azeotrope lies where
the relative volatility crosses one; a liquid splits where ln(a1/a2) falls. Where the crossing lies
in the gap of a draw that splits, the azeotrope is the vapour over both liquids.
"""

from dataclasses import dataclass

import numpy as np
from scipy.special import expit, logit

from groups.arrays import BoolArray, FloatArray, IntArray
from groups.confidence import Interval
from groups.equilibrium import bubble_pressure, bubble_temperature
from groups.equilibrium.states import log_sum_exp, safe_log
from groups.equilibrium.system import System
from groups.prediction.bands import LEVEL, Drawn
from groups.prediction.composition_line import GRID, coexisting

LOGIT = logit(GRID)
GAP_PASSES = 3  # the gap and its temperature, in turn
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


@dataclass(frozen=True, slots=True)
class DrawnLine:
    """Every draw along `GRID`: ln alpha, and ln P (kPa) or 1/T (1/K), (n_samples, n_grid).

    `offset`, (n_samples or 1, n_grid), is ln alpha less ln(gamma1/gamma2) at the temperatures
    where the prediction itself boils. `steepness`, (n_samples, n_grid), is -d ln P / d(1/T) in K
    where the level is 1/T, and 1 where it is ln P.
    """

    ln_alpha: FloatArray
    level: FloatArray
    offset: FloatArray
    steepness: FloatArray


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
    line = drawn_line(drawn, system, components, temperature_K, pressure_kPa)
    return _found(components, line, temperature_K, pressure_kPa)


def drawn_line(
    drawn: Drawn,
    system: System,
    components: tuple[int, int],
    temperature_K: float | None,
    pressure_kPa: float | None,
) -> DrawnLine:
    """Relative volatility and boiling pressure or temperature along `GRID`, for every draw.

    Parameters
    ----------
    drawn : Drawn
    system : System
    components : tuple of int
    temperature_K, pressure_kPa : float or None
        Exactly one of them.

    Returns
    -------
    DrawnLine
        NaN where no liquid of the line boils at the condition.
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
            return DrawnLine(unknown, unknown, unknown, unknown)
    if saturation is None:
        saturation = system.ln_saturation(temperatures)
    ln_gamma = drawn.models.ln_gamma(temperatures, liquid)
    ln_volatility = ln_gamma + saturation + drawn.shift[:, None, :]
    slopes = system.ln_volatility_slope(temperatures, liquid)
    ln_P = log_sum_exp(safe_log(liquid) + ln_volatility)
    inverse = np.broadcast_to(1.0 / temperatures, ln_P.shape)
    steepness = np.ones_like(ln_P)
    if pressure_kPa is not None:
        weight = np.exp(safe_log(liquid) + ln_volatility - ln_P[..., None])
        steepness = np.sum(weight * slopes, axis=-1) * temperatures**2
        inverse = inverse - (np.log(pressure_kPa) - ln_P) / steepness
    step = temperatures**2 * (1.0 / temperatures - inverse)
    ln_alpha = ln_volatility[..., first] - ln_volatility[..., second]
    ln_alpha = ln_alpha + (slopes[:, first] - slopes[:, second]) * step
    level = ln_P if temperature_K is not None else inverse
    offset = ln_alpha - ln_gamma[..., first] + ln_gamma[..., second]
    return DrawnLine(ln_alpha, level, offset, steepness)


def nearest_to_azeotrope(ln_alpha: FloatArray, offset: FloatArray) -> FloatArray:
    """x1 where each draw has its azeotrope, or comes nearest to one.

    Parameters
    ----------
    ln_alpha : FloatArray of shape (n_samples, n_grid)
        Along `GRID`.
    offset : FloatArray of shape (1, n_grid)
        As in `DrawnLine`.

    Returns
    -------
    FloatArray of shape (n_samples,)
    """
    crossing = _crossing(ln_alpha)
    nearest: FloatArray = GRID[np.abs(ln_alpha).argmin(axis=1)]
    rows = np.flatnonzero(crossing.any(axis=1))
    some = DrawnLine(ln_alpha[rows], ln_alpha[rows], offset, np.ones_like(ln_alpha[rows]))
    nearest[rows], _ = _places(some, _steepest(crossing, ln_alpha)[rows])
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
    if temperature_K is None:
        temperatures = _level_gap(system, liquid, temperatures)
    if system.vapour.ideal:
        return temperatures, None
    correction = system.vapour.ln_correction(
        found[known], states.pressure_kPa[known], states.vapour[known]
    )
    filled = [np.interp(places, known, column) for column in correction.T]
    return temperatures, system.ln_saturation(temperatures) - np.stack(filled, axis=-1)


def _level_gap(system: System, liquid: FloatArray, temperatures: FloatArray) -> FloatArray:
    """Temperatures along the line, that of both liquids over the gap where the prediction splits.

    A single liquid there would boil tens of kelvin lower, too far from where anything happens.
    """
    first, second = liquid[-1].argmax(), liquid[0].argmax()
    level = temperatures
    for _ in range(GAP_PASSES):
        ln_gamma = system.activity.ln_gamma(level, liquid)
        ratio = ln_gamma[:, first] - ln_gamma[:, second] + LOGIT
        falls = np.diff(ratio) < 0.0
        if not falls.any():
            return level
        [left], [right] = coexisting(ratio[None], np.array([falls.argmax()]))
        level = temperatures.copy()
        level[left : right + 1] = (temperatures[left] + temperatures[right]) / 2.0
    return level


def _found(
    components: tuple[int, int],
    line: DrawnLine,
    temperature_K: float | None,
    pressure_kPa: float | None,
) -> AzeotropeChance:
    """The crossing of each draw, the steepest where it has several."""
    crossing = _crossing(line.ln_alpha)
    has = crossing.any(axis=1)
    probability = float(has.mean())
    if has.sum() < LEAST_DRAWS:
        return AzeotropeChance(components, probability, None, None, None)
    some = DrawnLine(line.ln_alpha[has], line.level[has], line.offset[has], line.steepness[has])
    x1, at = _places(some, _steepest(crossing, line.ln_alpha)[has])
    temperature = None if temperature_K is not None else _interval(1.0 / at)
    pressure = None if pressure_kPa is not None else _interval(np.exp(at))
    return AzeotropeChance(components, probability, _interval(x1), temperature, pressure)


def _crossing(ln_alpha: FloatArray) -> BoolArray:
    """Between which neighbours on the grid the volatilities change places."""
    crossing: BoolArray = np.signbit(ln_alpha[:, 1:]) != np.signbit(ln_alpha[:, :-1])
    return crossing


def _steepest(crossing: BoolArray, ln_alpha: FloatArray) -> IntArray:
    """Place of the steepest crossing of each draw: it does not depend on which comes first."""
    steepness = np.where(crossing, np.abs(np.diff(ln_alpha, axis=1)), -1.0)
    places: IntArray = steepness.argmax(axis=1)
    return places


def _places(line: DrawnLine, crossing: IntArray) -> tuple[FloatArray, FloatArray]:
    """x1 and level of the azeotrope of every draw, which all have one after place `crossing`."""
    ln_alpha, level = line.ln_alpha, line.level
    rows = np.arange(len(ln_alpha))
    before, after = ln_alpha[rows, crossing], ln_alpha[rows, crossing + 1]
    share = before / (before - after)
    x1 = GRID[crossing] + share * (GRID[crossing + 1] - GRID[crossing])
    at = level[rows, crossing] + share * (level[rows, crossing + 1] - level[rows, crossing])
    ln_activity_ratio = ln_alpha - line.offset + LOGIT
    two = np.flatnonzero((np.diff(ln_activity_ratio, axis=1) < 0.0).any(axis=1))
    if two.size:
        left, right = coexisting(ln_activity_ratio[two], crossing[two])
        wide = right - left > 1
        two, left, right = two[wide], left[wide], right[wide]
        # Either component's partial pressure is that over the liquid rich in it. Both make up the
        # pressure but for the steps of the grid, by which the level is mended.
        first = expit(ln_alpha[two, right] + LOGIT[right])
        second = expit(-ln_alpha[two, left] - LOGIT[left])
        x1[two] = first / (first + second)
        both = x1[two] * level[two, right] + (1.0 - x1[two]) * level[two, left]
        at[two] = both + np.log(first + second) / line.steepness[two, right]
    return x1, at


def split_chance(drawn: Drawn, temperature_K: float) -> SplitChance:
    """Probability of a liquid split of a binary, and the two liquids.

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
    falls = np.diff(difference[splits], axis=1).argmin(axis=1)  # the deepest gap
    left, right = coexisting(difference[splits], falls)
    return SplitChance(probability, _interval(GRID[left]), _interval(GRID[right]))


def _interval(values: FloatArray) -> Interval:
    tail = (1.0 - LEVEL) / 2.0
    lower, upper = np.quantile(values, [tail, 1.0 - tail])
    return Interval(float(lower), float(upper))
