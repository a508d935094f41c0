"""The few measurements that shrink the doubt about one number most, taken one after the other.

The question and every conceivable measurement, its own scatter included, are read off the same
drawn liquids, so it is known how they vary together. Conditioning on a measurement is linear, as
if all were normal:

    share of the variance left = product of (1 - r^2),  r the correlation with what is left

Each measurement is the best after those before it. Where none alone shrinks the doubt and two
together do (the place of an azeotrope hangs on a difference), the better of the two is taken.

A question that does not vary linearly with the measurements, such as the place of an azeotrope,
is followed by a number that does, and the width goes back through the ranks of both.

Source
------
Linear (Kalman) update: Kalman, J. Basic Eng. 82 (1960) 35. Greedy choice of measurements:
common practice, no source. The scatter of good measurements: common practice, no source.
"""

from collections.abc import Sequence
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
USED_UP = 1e-24  # product of variances (ln units) below which nothing but rounding is left


@dataclass(frozen=True, slots=True)
class Trial:
    """A conceivable measurement and what each draw says it would give."""

    told: PlannedMeasurement
    values: FloatArray  # (n_samples,), in ln units
    noise: float


def greedy_plan(
    name: str, asked: FloatArray, trials: Sequence[Trial], followed: FloatArray | None = None
) -> MeasurementPlan:
    """Take the best measurement, condition everything on it, and go on.

    Parameters
    ----------
    name : str
        What is asked, for the answer.
    asked : FloatArray of shape (n_samples,)
        The number in question, in every draw.
    trials : sequence of Trial
        Read off the same draws.
    followed : FloatArray of shape (n_samples,), optional
        A number that goes with the question and is more nearly linear in the measurements.

    Returns
    -------
    MeasurementPlan
        At most `MOST_MEASUREMENTS`; none where nothing shrinks the doubt.

    Source
    ------
    See the module.
    """
    followed = asked if followed is None else followed
    width_now = expected_width(asked, followed, 1.0)
    rest = followed - followed.mean()
    columns = np.stack([_readings(*one) for one in enumerate(trials)], axis=1)
    columns = columns - columns.mean(axis=0)
    steps: list[PlannedMeasurement] = []
    left, worth = 1.0, 0
    for step in range(min(MOST_MEASUREMENTS, len(trials))):
        best = _best(rest, columns, last=step + 1 == MOST_MEASUREMENTS)
        left *= 1.0 - float(_squared_correlation(rest, columns)[best])
        before = steps[worth - 1].expected_width if worth else width_now
        steps.append(trials[best].told.after(expected_width(asked, followed, left)))
        if before - steps[-1].expected_width > LEAST_GAIN * width_now:
            worth = step + 1
        rest, columns = _conditioned(rest, columns, best)
    return MeasurementPlan(name, LEVEL, _interval(asked), tuple(steps[:worth]))


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
        _squared_correlation(*_conditioned(rest, columns, first)) for first in range(len(alone))
    ]
    left = [(1.0 - alone[k]) * (1.0 - second.max()) for k, second in enumerate(seconds)]
    first = int(np.argmin(left))
    pair = (first, int(seconds[first].argmax()))
    return max(pair, key=lambda k: float(alone[k]))


def _conditioned(
    rest: FloatArray, columns: FloatArray, known: int
) -> tuple[FloatArray, FloatArray]:
    """Question and measurements once one measurement is known."""
    measured = columns[:, known]
    power = max(float(measured @ measured), np.finfo(float).tiny)
    columns_left: FloatArray = columns - np.outer(measured, measured @ columns) / power
    return rest - measured * (measured @ rest) / power, columns_left


def _squared_correlation(rest: FloatArray, columns: FloatArray) -> FloatArray:
    """r^2 of what is left of the question with every measurement; 0 where either is used up."""
    power = np.sum(columns**2, axis=0) * np.sum(rest**2)
    used_up = power <= USED_UP * len(rest) ** 2
    squared: FloatArray = np.where(
        used_up, 0.0, (rest @ columns) ** 2 / np.where(used_up, 1.0, power)
    )
    return np.minimum(squared, 1.0)


def _interval(asked: FloatArray) -> tuple[float, float]:
    lower, upper = np.quantile(asked, [(1.0 - LEVEL) / 2.0, (1.0 + LEVEL) / 2.0])
    return float(lower), float(upper)


def expected_width(asked: FloatArray, followed: FloatArray, left: float) -> float:
    """Mean width of the interval of the question with a share of the variance left.

    Parameters
    ----------
    asked, followed : FloatArray of shape (n_samples,)
        As in `greedy_plan`.
    left : float
        Share of the variance of `followed`, 0 to 1.

    Returns
    -------
    float
        In the unit of the question. With nothing known it is the width as it stands.
    """
    if np.mean((followed - followed.mean()) * (asked - asked.mean())) < 0.0:
        followed = -followed
    centre = followed.mean()
    centres = centre + np.sqrt(1.0 - left) * (followed - centre)
    reach = np.sqrt(left) * (np.array(_interval(followed)) - centre)
    if followed is asked:
        return float(reach[1] - reach[0])
    ends = np.interp(centres + reach[:, None], np.sort(followed), np.sort(asked))
    return float(np.mean(ends[1] - ends[0]))
