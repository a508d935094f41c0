"""What to measure to settle an azeotrope or a relative volatility of one mixture."""

from collections.abc import Sequence
from functools import partial
from itertools import combinations, permutations
from typing import Literal

import numpy as np
from numpy.typing import ArrayLike

from groups.activity.choice import OnMissing
from groups.arrays import FloatArray
from groups.confidence.labels import label
from groups.equilibrium.states import log_sum_exp, safe_log
from groups.errors import InvalidInputError, PredictionError
from groups.prediction.answers import MeasurementPlan, PlannedMeasurement
from groups.prediction.bands import Drawn
from groups.prediction.boiling_mixture import BoilingMixture, boiling_mixture
from groups.prediction.chances import drawn_line, nearest_to_azeotrope
from groups.prediction.checks import (
    check_components,
    check_fractions,
    check_one_of,
    check_pressures,
    check_temperatures,
)
from groups.prediction.component import Component
from groups.prediction.composition_line import GRID
from groups.prediction.greedy_plan import (
    BOILING_NOISE,
    DILUTE_NOISE,
    PRESSURE_NOISE,
    Question,
    Trial,
    greedy_plan,
    linear_question,
)

PlanQuestion = Literal["azeotrope", "relative_volatility"]
TRIED_FRACTIONS = (0.1, 0.25, 0.5, 0.75, 0.9)


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
    mixture, T = _mixture(components, question, on_missing, temperature_K, pressure_kPa)
    drawn = mixture.drawn(T)
    if drawn is None:
        raise PredictionError("No table describes this mixture, so there is no doubt to shrink.")
    trials = _trials(mixture, drawn, T)
    if question == "azeotrope":
        line = drawn_line(drawn, mixture.system, (0, 1), temperature_K, pressure_kPa)
        where = partial(nearest_to_azeotrope, offset=line.offset.mean(axis=0, keepdims=True))
        there = int(np.abs(GRID - np.median(where(line.ln_alpha))).argmin())
        place = Question("x1 of the azeotrope", line.ln_alpha, where, there)
        return greedy_plan(place, trials)
    first, second = (label(component.molecule) for component in components[:2])
    name = f"ln of the relative volatility of {first} over {second}"
    ln_ratio = _ln_alpha_at(mixture, drawn, T, mole_fractions)
    return greedy_plan(linear_question(name, ln_ratio), trials)


def _mixture(
    components: Sequence[Component],
    question: PlanQuestion,
    on_missing: OnMissing,
    temperature_K: float | None,
    pressure_kPa: float | None,
) -> tuple[BoilingMixture, float]:
    """The mixture of checked input, and the temperature at which its doubt is taken."""
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
    if temperature_K is None:
        boiling = [line.boiling_temperature(pressure_kPa or 101.325) for line in mixture.lines]
        temperature_K = float(np.mean(boiling))
    return mixture, temperature_K


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


def _trials(mixture: BoilingMixture, drawn: Drawn, T: float) -> list[Trial]:
    """Every measurement considered: dilute activity, P-x points, pure boiling points."""
    return [
        *_dilute_trials(mixture, drawn, T),
        *_pressure_trials(mixture, drawn, T),
        *_boiling_trials(mixture, drawn, T),
    ]


def _dilute_trials(mixture: BoilingMixture, drawn: Drawn, T: float) -> list[Trial]:
    names = _names(mixture)
    trials = []
    for solute, solvent in permutations(range(len(names)), 2):
        told = PlannedMeasurement(
            "gamma_infinity",
            f"activity coefficient of {names[solute]} at infinite dilution in {names[solvent]}",
            (solute, solvent),
            T,
            None,
        )
        values = drawn.models.ln_gamma(T, np.eye(len(names))[solvent])[:, solute]
        trials.append(Trial(told, values, DILUTE_NOISE))
    return trials


def _pressure_trials(mixture: BoilingMixture, drawn: Drawn, T: float) -> list[Trial]:
    names = _names(mixture)
    trials = []
    for first, second in combinations(range(len(names)), 2):
        for fraction in TRIED_FRACTIONS:
            x = np.zeros(len(names))
            x[first], x[second] = fraction, 1.0 - fraction
            told = PlannedMeasurement(
                "P-x point",
                f"vapour pressure over a liquid of {fraction:g} {names[first]} and "
                f"{1.0 - fraction:g} {names[second]}",
                (first, second),
                T,
                tuple(x.tolist()),
            )
            trials.append(Trial(told, _ln_pressure(mixture, drawn, T, x), PRESSURE_NOISE))
    return trials


def _boiling_trials(mixture: BoilingMixture, drawn: Drawn, T: float) -> list[Trial]:
    return [
        Trial(
            PlannedMeasurement("boiling_point", f"boiling point of pure {name}", (k,), T, None),
            drawn.shift[:, k],
            BOILING_NOISE,
        )
        for k, name in enumerate(_names(mixture))
    ]


def _names(mixture: BoilingMixture) -> list[str]:
    return [label(molecule) for molecule in mixture.liquid.molecules]


def _ln_pressure(mixture: BoilingMixture, drawn: Drawn, T: float, x: FloatArray) -> FloatArray:
    ln_k = drawn.models.ln_gamma(T, x) + mixture.system.ln_saturation(np.array(T)) + drawn.shift
    return log_sum_exp(safe_log(x) + ln_k)
