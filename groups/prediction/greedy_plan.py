"""The few measurements that shrink the doubt about one number most, taken one after the other.

The question and every conceivable measurement, its own scatter included, are read off the same
drawn liquids, so it is known how they vary together. Conditioning on a measurement is linear, as
if all were normal:

    share of the variance left = product of (1 - r^2),  r the correlation with what is left

Each measurement is the best after those before it. Where none alone shrinks the doubt and two
together do (the place of an azeotrope hangs on a difference), the better of the two is taken.

A question that does not vary linearly with the measurements, such as the place of an azeotrope,
is read off numbers that do, such as ln alpha along the composition: those are conditioned, and
the question is asked anew of what is left of them around each of `N_TRUTHS` draws in turn.

Source
------
Linear (Kalman) update: Kalman, J. Basic Eng. 82 (1960) 35. Greedy choice of measurements:
common practice, no source. The scatter of good measurements: common practice, no source.
"""

from collections.abc import Callable, Sequence
from dataclasses import dataclass

import numpy as np

from groups.arrays import FloatArray
from groups.prediction.answers import MeasurementPlan, PlannedMeasurement
from groups.prediction.bands import LEVEL, SEED

DILUTE_NOISE = 0.08  # ln gamma-infinity: repeated measurements scatter by 0.06 to 0.10
PRESSURE_NOISE = 0.01  # ln P of one P-x point, its composition included
BOILING_NOISE = 0.005  # ln P of a pure boiling point, about 0.15 K
MOST_MEASUREMENTS = 4
LEAST_GAIN = 0.02  # a measurement that shrinks the width by a smaller share is not worth naming
WORTH_ALONE = 0.05  # below this share of the width a measurement is looked at with a second one
N_TRUTHS = 40  # draws, evenly spread, that are each taken for the truth once
USED_UP = 1e-24  # product of variances (ln units) below which nothing but rounding is left


@dataclass(frozen=True, slots=True)
class Trial:
    """A conceivable measurement and what each draw says it would give."""

    told: PlannedMeasurement
    values: FloatArray  # (n_samples,), in ln units
    noise: float


@dataclass(frozen=True, slots=True)
class Question:
    """A number whose doubt is to shrink.

    It is `answer` of `drawn`, (n_samples, n) to (n_samples,); `followed` is the column of `drawn`
    that says most of it, which chooses the measurements.
    """

    name: str
    drawn: FloatArray
    answer: Callable[[FloatArray], FloatArray]
    followed: int = 0


def linear_question(name: str, values: FloatArray) -> Question:
    """A question that varies linearly with the measurements.

    Parameters
    ----------
    name : str
    values : FloatArray of shape (n_samples,)
        The number in every draw.

    Returns
    -------
    Question
    """
    return Question(name, values[:, None], lambda drawn: drawn[:, 0])


def greedy_plan(question: Question, trials: Sequence[Trial]) -> MeasurementPlan:
    """Take the best measurement, condition everything on it, and go on.

    Parameters
    ----------
    question : Question
    trials : sequence of Trial
        Read off the same draws.

    Returns
    -------
    MeasurementPlan
        At most `MOST_MEASUREMENTS`; none where nothing shrinks the doubt.

    Source
    ------
    See the module.
    """
    lower, upper = _interval(question.answer(question.drawn))
    rest = question.drawn - question.drawn.mean(axis=0)
    columns = np.stack([_readings(*one) for one in enumerate(trials)], axis=1)
    columns = columns - columns.mean(axis=0)
    steps: list[PlannedMeasurement] = []
    width, worth = upper - lower, 0
    for step in range(min(MOST_MEASUREMENTS, len(trials))):
        followed = rest[:, question.followed]
        best = _best(followed, columns, last=step + 1 == MOST_MEASUREMENTS)
        measured = columns[:, best]
        rest, columns = _conditioned(rest, measured), _conditioned(columns, measured)
        after = _expected_width(question, rest)
        steps.append(trials[best].told.after(after))
        if width - after > LEAST_GAIN * (upper - lower):
            width, worth = after, step + 1
    return MeasurementPlan(question.name, LEVEL, (lower, upper), tuple(steps[:worth]))


def _readings(place: int, trial: Trial) -> FloatArray:
    """What the measurement would read in each draw, its scatter included; the same each time."""
    generator = np.random.default_rng(SEED + place)
    readings: FloatArray = trial.values + trial.noise * generator.standard_normal(len(trial.values))
    return readings


def _best(rest: FloatArray, columns: FloatArray, *, last: bool) -> int:
    """The best measurement alone, or the better of the best two where none is worth it alone."""
    alone = _squared_correlation(rest, columns)
    best = int(alone.argmax())
    if last or 1.0 - np.sqrt(1.0 - alone[best]) >= WORTH_ALONE:
        return best
    seconds = [
        _squared_correlation(_conditioned(rest, measured), _conditioned(columns, measured))
        for measured in columns.T
    ]
    left = [(1.0 - alone[k]) * (1.0 - second.max()) for k, second in enumerate(seconds)]
    first = int(np.argmin(left))
    pair = (first, int(seconds[first].argmax()))
    return max(pair, key=lambda k: float(alone[k]))


def _conditioned(values: FloatArray, measured: FloatArray) -> FloatArray:
    """What is left of values (n_samples, ...) once a measurement is known."""
    power = max(float(measured @ measured), np.finfo(float).tiny)
    left: FloatArray = values - np.multiply.outer(measured, measured @ values) / power
    return left


def _squared_correlation(rest: FloatArray, columns: FloatArray) -> FloatArray:
    """r^2 of what is left of the question with every measurement; 0 where either is used up."""
    power = np.sum(columns**2, axis=0) * np.sum(rest**2)
    used_up = power <= USED_UP * len(rest) ** 2
    squared: FloatArray = np.where(
        used_up, 0.0, (rest @ columns) ** 2 / np.where(used_up, 1.0, power)
    )
    return np.minimum(squared, 1.0)


def _interval(values: FloatArray) -> tuple[float, float]:
    lower, upper = np.quantile(values, [(1.0 - LEVEL) / 2.0, (1.0 + LEVEL) / 2.0])
    return float(lower), float(upper)


def _expected_width(question: Question, rest: FloatArray) -> float:
    """Mean width of the interval around every draw taken for the truth, in the question's unit."""
    known = question.drawn - rest  # what the measurements tell of each draw, were it the truth
    order = np.argsort(known[:, question.followed])
    truths = order[((np.arange(N_TRUTHS) + 0.5) / N_TRUTHS * len(order)).astype(int)]
    ends = [_interval(question.answer(rest + one)) for one in known[truths]]
    return float(np.mean([upper - lower for lower, upper in ends]))
