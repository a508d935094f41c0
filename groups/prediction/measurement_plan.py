"""What to measure: the few measurements that shrink the doubt about one question most.

The question and every conceivable measurement are read off the same drawn liquids, so it is known
how they vary together. Conditioning on a measurement is done as if both were normal, and the
measurements are taken one after the other, each the best after those before it:

    variance after = variance (1 - cov(q, m)^2 / (var(q) (var(m) + noise^2)))

Source
------
Linear (Kalman) update: Kalman, J. Basic Eng. 82 (1960) 35. Greedy choice of measurements:
common practice, no source. The scatter of good measurements: common practice, no source.
"""

from collections.abc import Sequence
from dataclasses import dataclass
from itertools import combinations, permutations
from typing import Literal

import numpy as np
from numpy.typing import ArrayLike

from groups.activity.choice import OnMissing
from groups.arrays import FloatArray
from groups.confidence.calibration import dilute_answers
from groups.confidence.calibration.model import calibration
from groups.confidence.labels import label
from groups.equilibrium.states import log_sum_exp, safe_log
from groups.errors import InvalidInputError, PredictionError
from groups.prediction.answers import MeasurementPlan, PlannedMeasurement
from groups.prediction.bands import LEVEL, N_SAMPLES, SEED, Drawn, band
from groups.prediction.boiling_mixture import BoilingMixture, boiling_mixture
from groups.prediction.chances import drawn_ln_alpha, nearest_to_azeotrope
from groups.prediction.checks import (
    check_components,
    check_fractions,
    check_one_of,
    check_pressures,
    check_temperatures,
)
from groups.prediction.component import Component
from groups.structure.molecule import Molecule

PlanQuestion = Literal["azeotrope", "relative_volatility"]
DILUTE_NOISE = 0.08  # ln gamma-infinity: repeated measurements scatter by 0.06 to 0.10
PRESSURE_NOISE = 0.01  # ln P of one P-x point, its composition included
BOILING_NOISE = 0.005  # ln P of a pure boiling point, about 0.15 K
TRIED_FRACTIONS = (0.1, 0.25, 0.5, 0.75, 0.9)
MOST_MEASUREMENTS = 4
MOST_SOLVENTS = 200
LEAST_GAIN = 0.02  # a measurement that shrinks the width by less is not worth naming


@dataclass(frozen=True, slots=True)
class _Trial:
    """A conceivable measurement and what each draw says it would give."""

    told: PlannedMeasurement
    values: FloatArray  # (n_samples,), in ln units
    noise: float


def measurement_plan(
    components: Sequence[Component],
    question: PlanQuestion,
    *,
    mole_fractions: ArrayLike | None = None,
    temperature_K: float | None = None,
    pressure_kPa: float | None = None,
    on_missing: OnMissing = "estimate",
) -> MeasurementPlan:
    """The few measurements that shrink the doubt about a question most, in order.

    Parameters
    ----------
    components : sequence of Component
        Two for an azeotrope; two or more for a relative volatility, which is that of the first
        over the second.
    question : {"azeotrope", "relative_volatility"}
    mole_fractions : array_like of shape (n_components,), optional
        Liquid at which the relative volatility is asked for.
    temperature_K, pressure_kPa : float
        Exactly one of them.
    on_missing : {"refuse", "estimate"}

    Returns
    -------
    MeasurementPlan

    Raises
    ------
    InvalidInputError
        If the question lacks what it needs, or a number lies outside its range.
    PredictionError
        If no table, or no vapour pressure, gives the numbers.
    """
    molecules = [component.molecule for component in components]
    check_components(molecules, least=2, most=2 if question == "azeotrope" else 6)
    check_one_of(temperature_K, pressure_kPa)
    if temperature_K is not None:
        check_temperatures(temperature_K)
    if pressure_kPa is not None:
        check_pressures(pressure_kPa)
    mixture = boiling_mixture(
        components, "auto", on_missing, temperature_K=temperature_K, pressure_kPa=pressure_kPa
    )
    T = temperature_K or float(
        np.mean([line.boiling_temperature(pressure_kPa or 101.325) for line in mixture.lines])
    )
    drawn = mixture.drawn(T)
    if drawn is None:
        raise PredictionError("No table describes this mixture, so there is no doubt to shrink.")
    if question == "azeotrope":
        ln_alpha, _ = drawn_ln_alpha(drawn, mixture.system, (0, 1), temperature_K, pressure_kPa)
        asked, name = nearest_to_azeotrope(ln_alpha), "x1 of the azeotrope"
    else:
        asked = _ln_alpha_at(mixture, drawn, T, mole_fractions)
        name = f"ln of the relative volatility of {label(molecules[0])} over {label(molecules[1])}"
    return _planned(name, asked, _trials(mixture, drawn, T))


def ranking_plan(
    keys: Sequence[Molecule],
    solvents: Sequence[Molecule],
    temperature_K: float,
    on_missing: OnMissing = "estimate",
) -> MeasurementPlan:
    """The few measurements that settle which solvent parts two components best.

    The question is by how much the solvent ranked first beats the one ranked second, in ln of the
    selectivity at infinite dilution, gamma of the first key over gamma of the second.

    Parameters
    ----------
    keys : sequence of two Molecule
    solvents : sequence of Molecule, two or more
    temperature_K : float
    on_missing : {"refuse", "estimate"}

    Returns
    -------
    MeasurementPlan

    Raises
    ------
    InvalidInputError
        If a number lies outside its range or a molecule is given twice.
    PredictionError
        If fewer than two solvents can be ranked.
    """
    check_components(keys, least=2, most=2)
    check_components(solvents, least=2, most=MOST_SOLVENTS)
    check_temperatures(temperature_K)
    pairs = [(key, solvent, temperature_K) for solvent in solvents for key in keys]
    found = dilute_answers(pairs, on_missing)
    generator = np.random.default_rng(SEED)
    scaled = calibration().scaled_quantile(generator.random((N_SAMPLES, len(pairs))))
    values = found.ln_gamma + found.scale * scaled
    selectivity = values[:, 0::2] - values[:, 1::2]
    central = found.ln_gamma[0::2] - found.ln_gamma[1::2]
    order = np.argsort(np.where(np.isfinite(central), -central, np.inf))
    if np.isfinite(central).sum() < 2:
        raise PredictionError("Fewer than two of the solvents can be ranked by any table.")
    first, second = int(order[0]), int(order[1])
    name = (
        f"lead of {label(solvents[first])} over {label(solvents[second])} "
        "in ln of the selectivity at infinite dilution"
    )
    trials = [
        _Trial(
            PlannedMeasurement(
                "gamma_infinity",
                f"activity coefficient of {label(keys[k])} at infinite dilution in "
                f"{label(solvents[place])}",
                (k, place),
                temperature_K,
                None,
            ),
            values[:, 2 * place + k],
            DILUTE_NOISE,
        )
        for place in (first, second)
        for k in (0, 1)
    ]
    return _planned(name, selectivity[:, first] - selectivity[:, second], trials)


def _ln_alpha_at(
    mixture: BoilingMixture, drawn: Drawn, T: float, mole_fractions: ArrayLike | None
) -> FloatArray:
    """ln alpha of the first over the second component in every draw."""
    if mole_fractions is None:
        raise InvalidInputError(
            "A relative volatility is asked for at a composition, and none is given.",
            cure="Give 'mole_fractions' of the liquid.",
            field="mole_fractions",
        )
    x = check_fractions(mole_fractions, len(mixture.lines))[:1]
    ln_k = drawn.models.ln_gamma(T, x)[:, 0] + mixture.system.ln_saturation(np.array([T]))
    ln_k = ln_k + drawn.shift
    difference: FloatArray = ln_k[:, 0] - ln_k[:, 1]
    return difference


def _trials(mixture: BoilingMixture, drawn: Drawn, T: float) -> list[_Trial]:
    """Every measurement considered: dilute activity, P-x points, pure boiling points."""
    molecules = mixture.liquid.molecules
    names = [label(molecule) for molecule in molecules]
    n = len(names)
    trials = []
    for solute, solvent in permutations(range(n), 2):
        told = PlannedMeasurement(
            "gamma_infinity",
            f"activity coefficient of {names[solute]} at infinite dilution in {names[solvent]}",
            (solute, solvent),
            T,
            None,
        )
        values = drawn.models.ln_gamma(T, np.eye(n)[solvent])[:, solute]
        trials.append(_Trial(told, values, DILUTE_NOISE))
    for first, second in combinations(range(n), 2):
        for fraction in TRIED_FRACTIONS:
            x = np.zeros(n)
            x[first], x[second] = fraction, 1.0 - fraction
            told = PlannedMeasurement(
                "P-x point",
                f"vapour pressure over a liquid of {fraction:g} {names[first]} and "
                f"{1.0 - fraction:g} {names[second]}",
                (first, second),
                T,
                tuple(x.tolist()),
            )
            trials.append(_Trial(told, _ln_pressure(mixture, drawn, T, x), PRESSURE_NOISE))
    for index, name in enumerate(names):
        told = PlannedMeasurement(
            "boiling_point", f"boiling point of pure {name}", (index,), T, None
        )
        trials.append(_Trial(told, drawn.shift[:, index], BOILING_NOISE))
    return trials


def _ln_pressure(mixture: BoilingMixture, drawn: Drawn, T: float, x: FloatArray) -> FloatArray:
    ln_k = drawn.models.ln_gamma(T, x) + mixture.system.ln_saturation(np.array(T)) + drawn.shift
    return log_sum_exp(safe_log(x) + ln_k)


def _planned(name: str, asked: FloatArray, trials: list[_Trial]) -> MeasurementPlan:
    """Take the best measurement, condition everything on it, and go on."""
    now = band(asked, np.asarray(np.median(asked)))
    width_now = float(now.upper - now.lower)
    rest = asked - asked.mean()
    columns = np.stack([trial.values - trial.values.mean() for trial in trials], axis=1)
    noise = np.array([trial.noise for trial in trials])
    taken: list[PlannedMeasurement] = []
    share = 1.0
    for _ in range(min(MOST_MEASUREMENTS, len(trials))):
        spread = (columns**2).mean(axis=0) + noise**2
        together = (rest[:, None] * columns).mean(axis=0)
        gain = together**2 / spread / max(float((rest**2).mean()), 1e-30)
        best = int(gain.argmax())
        after = share * float(np.sqrt(max(0.0, 1.0 - gain[best])))
        if share - after < LEAST_GAIN:
            break
        share = after
        taken.append(trials[best].told.after(width_now * share))
        measured = columns[:, best] + noise[best] * _scatter(len(rest), best)
        power = float((measured**2).mean())
        rest = rest - measured * float((measured * rest).mean()) / power
        columns = columns - measured[:, None] * (measured[:, None] * columns).mean(axis=0) / power
    return MeasurementPlan(name, LEVEL, (float(now.lower), float(now.upper)), tuple(taken))


def _scatter(n_samples: int, seed: int) -> FloatArray:
    """Drawn errors of one measurement, the same each time."""
    return np.random.default_rng(seed).standard_normal(n_samples)
