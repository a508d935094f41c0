"""Bubble points, dew points and flashes of one mixture."""

from collections.abc import Callable, Sequence

import numpy as np
from numpy.typing import ArrayLike

from groups.activity.choice import OnMissing
from groups.arrays import FloatArray
from groups.confidence import Confidence, Interval, Reason, graded
from groups.equilibrium import (
    States,
    bubble_pressure,
    bubble_temperature,
    dew_pressure,
    dew_temperature,
    stability,
)
from groups.prediction.answers import PhasePointAnswer
from groups.prediction.boiling_bands import (
    BoilingBands,
    KnownStates,
    bubble_bands,
    dew_bands,
)
from groups.prediction.boiling_mixture import BoilingMixture, boiling_mixture
from groups.prediction.checks import (
    check_components,
    check_fractions,
    check_one_of,
    check_pressures,
    check_temperatures,
)
from groups.prediction.component import Component

Solver = Callable[..., States]


def bubble_point(
    components: Sequence[Component],
    mole_fractions: ArrayLike,
    *,
    temperature_K: float | None = None,
    pressure_kPa: float | None = None,
    method: str = "auto",
    on_missing: OnMissing = "estimate",
) -> PhasePointAnswer:
    """Where a liquid begins to boil, and the first vapour.

    Parameters
    ----------
    components : sequence of Component, length n_components
    mole_fractions : array_like of shape (n_components,)
        Of the liquid.
    temperature_K, pressure_kPa : float
        Exactly one of them; the other is the answer.
    method : str
        An identifier of `ALL_METHODS`.
    on_missing : {"refuse", "estimate"}

    Returns
    -------
    PhasePointAnswer

    Raises
    ------
    InvalidInputError
        If a number lies outside its range or the shapes do not fit.
    PredictionError
        If no table, or no vapour pressure, gives the number.

    Source
    ------
    Modified Raoult's law, y_i P = x_i gamma_i Psat_i.
    """
    return _phase_point(
        components,
        mole_fractions,
        (temperature_K, pressure_kPa),
        (bubble_pressure, bubble_temperature),
        0.0,
        method,
        on_missing,
    )


def dew_point(
    components: Sequence[Component],
    mole_fractions: ArrayLike,
    *,
    temperature_K: float | None = None,
    pressure_kPa: float | None = None,
    method: str = "auto",
    on_missing: OnMissing = "estimate",
) -> PhasePointAnswer:
    """Where a vapour begins to condense, and the first liquid.

    Parameters
    ----------
    components : sequence of Component, length n_components
    mole_fractions : array_like of shape (n_components,)
        Of the vapour.
    temperature_K, pressure_kPa : float
        Exactly one of them; the other is the answer.
    method : str
        An identifier of `ALL_METHODS`.
    on_missing : {"refuse", "estimate"}

    Returns
    -------
    PhasePointAnswer

    Raises
    ------
    InvalidInputError
        If a number lies outside its range or the shapes do not fit.
    PredictionError
        If no table, or no vapour pressure, gives the number.

    Source
    ------
    Modified Raoult's law, y_i P = x_i gamma_i Psat_i.
    """
    return _phase_point(
        components,
        mole_fractions,
        (temperature_K, pressure_kPa),
        (dew_pressure, dew_temperature),
        1.0,
        method,
        on_missing,
    )


def _phase_point(
    components: Sequence[Component],
    mole_fractions: ArrayLike,
    fixed: tuple[float | None, float | None],
    solvers: tuple[Solver, Solver],
    vapour_fraction: float,
    method: str,
    on_missing: OnMissing,
) -> PhasePointAnswer:
    temperature_K, pressure_kPa = fixed
    molecules = [component.molecule for component in components]
    check_components(molecules)
    fractions = check_fractions(mole_fractions, len(molecules))[:1]
    check_one_of(temperature_K, pressure_kPa)
    if temperature_K is not None:
        check_temperatures(temperature_K)
    else:
        check_pressures(pressure_kPa if pressure_kPa is not None else np.nan)
    mixture = boiling_mixture(
        components, method, on_missing, temperature_K=temperature_K, pressure_kPa=pressure_kPa
    )
    at_temperature, at_pressure = solvers
    if temperature_K is not None:
        states = at_temperature(mixture.system, np.array([temperature_K]), fractions)
    else:
        states = at_pressure(mixture.system, np.array([pressure_kPa]), fractions)
    return _answer(mixture, states, vapour_fraction, pressure_fixed=pressure_kPa is not None)


def _answer(
    mixture: BoilingMixture, states: States, vapour_fraction: float, *, pressure_fixed: bool
) -> PhasePointAnswer:
    """The answer for the first of the states, with its reasons and intervals."""
    T, P, x = states.temperature_K, states.pressure_kPa, states.liquid
    stable = _stable(mixture, T, x) if states.converged[0] else None
    reasons = mixture.reasons(T, P, x) + _state_reasons(states.failure[0], stable)
    saturation = np.exp(mixture.system.ln_saturation(T))[0]
    k_values = states.gamma[0] * saturation
    ratio = k_values / k_values[-1]
    bands = None
    if states.converged[0]:
        known = KnownStates(T, P, x, states.vapour, states.gamma, ratio[None], pressure_fixed)
        bands = _bands(mixture, known, bubble=vapour_fraction == 0.0)
    return PhasePointAnswer(
        mixture.liquid.molecules,
        mixture.liquid.method,
        mixture.liquid.methods_used,
        float(T[0]),
        float(P[0]),
        vapour_fraction,
        x[0],
        states.vapour[0],
        states.gamma[0],
        saturation,
        ratio,
        stable,
        states.failure[0],
        mixture.lines,
        bands,
        _confidence(reasons, mixture, bands, pressure_fixed),
    )


def _bands(mixture: BoilingMixture, known: KnownStates, *, bubble: bool) -> BoilingBands | None:
    drawn = mixture.drawn(float(known.temperature_K[0]))
    if drawn is None:
        return None
    return (bubble_bands if bubble else dew_bands)(drawn, mixture.system, known)


def _confidence(
    reasons: list[Reason],
    mixture: BoilingMixture,
    bands: BoilingBands | None,
    pressure_fixed: bool,
) -> Confidence:
    """The interval is that of the temperature or pressure sought; the widest ln K grades."""
    if bands is None:
        return graded(reasons, mixture.liquid.evidence)
    sought = bands.temperature_K if pressure_fixed else bands.pressure_kPa
    return graded(
        reasons,
        mixture.liquid.evidence,
        interval=Interval(float(sought.lower[0]), float(sought.upper[0])),
        half_width_ln=float(bands.ln_k_half_width[0]),
    )


def _stable(mixture: BoilingMixture, temperature_K: FloatArray, x: FloatArray) -> bool:
    return bool(stability(mixture.system.activity, temperature_K, x).stable[0])


def _state_reasons(failure: str | None, stable: bool | None) -> list[Reason]:
    if failure is not None:
        return [Reason("not_converged", f"No state was found: {failure}.", "state", "none")]
    if stable is False:
        return [liquid_split_reason()]
    return []


def liquid_split_reason() -> Reason:
    """The reason beside a state whose liquid would split in two."""
    return Reason(
        "possible_liquid_split",
        "By this method the liquid is not stable and splits in two; the state given is that of "
        "the liquid kept in one phase, which a still does not show.",
        "liquid",
        "low",
    )
