"""Bubble points and dew points of one mixture."""

from collections.abc import Sequence
from typing import Literal

import numpy as np
from numpy.typing import ArrayLike

from groups.activity.choice import OnMissing
from groups.arrays import FloatArray
from groups.confidence import Confidence, Interval, Reason, graded
from groups.equilibrium import (
    Flash,
    States,
    dew_pressure,
    dew_temperature,
    stability,
    stable_bubble_pressure,
    stable_bubble_temperature,
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
from groups.prediction.phases import PhaseAnswer, of_both_liquids, phases_of
from groups.prediction.state_equation import EQUATION_OF_STATE, saturation_by_state_equation
from groups.prediction.vapours import VapourAsked, check_vapour

PointKind = Literal["bubble", "dew"]


def bubble_point(
    components: Sequence[Component],
    mole_fractions: ArrayLike,
    *,
    temperature_K: float | None = None,
    pressure_kPa: float | None = None,
    method: str = "auto",
    on_missing: OnMissing = "estimate",
    vapour: VapourAsked = "auto",
) -> PhasePointAnswer:
    """Where a liquid begins to boil, and the first vapour.

    A liquid that splits boils as its stable liquids do, both together.

    Parameters
    ----------
    components : sequence of Component, length n_components
    mole_fractions : array_like of shape (n_components,)
        Of the liquid.
    temperature_K, pressure_kPa : float
        Exactly one of them; the other is the answer.
    method : str
        An identifier of `ALL_METHODS`. "psrk" is the equation of state: gases and components
        beyond their critical point are allowed.
    on_missing : {"refuse", "estimate"}
    vapour : {"auto", "ideal", "virial"}
        "auto" takes a real vapour where this mixture needs one.

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
    Modified Raoult's law, y_i P = x_i gamma_i Psat_i, with the correction of
    `groups.vapour.virial_vapour`; `groups.vapour.psrk` for the equation of state.
    """
    conditions = temperature_K, pressure_kPa
    return _phase_point(
        "bubble", components, mole_fractions, conditions, method, on_missing, vapour
    )


def dew_point(
    components: Sequence[Component],
    mole_fractions: ArrayLike,
    *,
    temperature_K: float | None = None,
    pressure_kPa: float | None = None,
    method: str = "auto",
    on_missing: OnMissing = "estimate",
    vapour: VapourAsked = "auto",
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
        An identifier of `ALL_METHODS`; "psrk" is the equation of state.
    on_missing : {"refuse", "estimate"}
    vapour : {"auto", "ideal", "virial"}
        "auto" takes a real vapour where this mixture needs one.

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
    As `bubble_point`.
    """
    conditions = temperature_K, pressure_kPa
    return _phase_point("dew", components, mole_fractions, conditions, method, on_missing, vapour)


def _phase_point(
    kind: PointKind,
    components: Sequence[Component],
    mole_fractions: ArrayLike,
    conditions: tuple[float | None, float | None],
    method: str,
    on_missing: OnMissing,
    vapour: VapourAsked,
) -> PhasePointAnswer:
    temperature_K, pressure_kPa = conditions
    molecules = [component.molecule for component in components]
    check_components(molecules)
    fractions = check_fractions(mole_fractions, len(molecules))[:1]
    check_one_of(temperature_K, pressure_kPa)
    check_vapour(vapour)
    if temperature_K is not None:
        check_temperatures(temperature_K)
    else:
        check_pressures(pressure_kPa if pressure_kPa is not None else np.nan)
    if method == EQUATION_OF_STATE:
        return saturation_by_state_equation(
            kind, components, fractions, temperature_K=temperature_K, pressure_kPa=pressure_kPa
        )
    mixture = boiling_mixture(
        components,
        method,
        on_missing,
        temperature_K=temperature_K,
        pressure_kPa=pressure_kPa,
        vapour=vapour,
        fractions=fractions,
    )
    found = _solved(kind, mixture, temperature_K, pressure_kPa, fractions)
    if not found.converged[0] and vapour == "auto" and not mixture.system.vapour.ideal:
        mixture = mixture.under_ideal_vapour()
        found = _solved(kind, mixture, temperature_K, pressure_kPa, fractions)
    return _answer(kind, mixture, found, pressure_fixed=pressure_kPa is not None)


def _solved(
    kind: PointKind,
    mixture: BoilingMixture,
    temperature_K: float | None,
    pressure_kPa: float | None,
    fractions: FloatArray,
) -> States | Flash:
    if kind == "bubble":
        if temperature_K is not None:
            return stable_bubble_pressure(mixture.system, temperature_K, fractions)
        return stable_bubble_temperature(mixture.system, pressure_kPa or np.nan, fractions)
    if temperature_K is not None:
        return dew_pressure(mixture.system, temperature_K, fractions)
    return dew_temperature(mixture.system, pressure_kPa or np.nan, fractions)


def _answer(
    kind: PointKind, mixture: BoilingMixture, found: States | Flash, *, pressure_fixed: bool
) -> PhasePointAnswer:
    """The answer for the first of the states, with its reasons and intervals."""
    T, P, x, y = found.temperature_K, found.pressure_kPa, found.liquid, found.vapour
    stable = _stable(mixture, found) if found.converged[0] else None
    reasons = mixture.reasons(T, P, x, y) + _state_reasons(kind, found.failure[0], stable)
    ln_k = ln_volatilities(mixture, found)
    ratio = np.exp(ln_k - ln_k[-1])
    bands = None
    if found.converged[0]:
        bands = _bands(kind, mixture, found, ratio, pressure_fixed)
    return PhasePointAnswer(
        mixture.liquid.molecules,
        mixture.liquid.method,
        mixture.liquid.methods_used,
        float(T[0]),
        float(P[0]),
        0.0 if kind == "bubble" else 1.0,
        x[0],
        y[0],
        found.gamma[0],
        np.exp(mixture.system.ln_saturation(T))[0],
        ratio,
        stable,
        found.failure[0],
        mixture.lines,
        bands,
        _phases(found),
        mixture.vapour,
        _confidence(reasons, mixture, bands, pressure_fixed),
    )


def ln_volatilities(mixture: BoilingMixture, found: States | Flash) -> FloatArray:
    """ln(gamma_i Psat_i), less the correction of a real vapour, of the first state.

    Parameters
    ----------
    mixture : BoilingMixture
    found : States or Flash

    Returns
    -------
    array of shape (n_components,)
        NaN where there is no state.
    """
    T, P, y = found.temperature_K[:1], found.pressure_kPa[:1], found.vapour[:1]
    ln_volatility = np.log(found.gamma[0]) + mixture.system.ln_saturation(T)[0]
    if mixture.system.vapour.ideal or not np.isfinite(y).all():
        return np.asarray(ln_volatility)
    return np.asarray(ln_volatility - mixture.system.vapour.ln_correction(T, P, y)[0])


def _phases(found: States | Flash) -> tuple[PhaseAnswer, ...]:
    if isinstance(found, Flash):
        return phases_of(found)
    if not found.converged[0]:
        return ()
    liquid = PhaseAnswer("liquid", 0.0, found.liquid[0])
    return (liquid, PhaseAnswer("vapour", 1.0, found.vapour[0]))


def _bands(
    kind: PointKind,
    mixture: BoilingMixture,
    found: States | Flash,
    ratio: FloatArray,
    pressure_fixed: bool,
) -> BoilingBands | None:
    T, P, x, y = found.temperature_K, found.pressure_kPa, found.liquid, found.vapour
    drawn = mixture.drawn(float(T[0]))
    if drawn is None:
        return None
    split = isinstance(found, Flash) and not found.liquid_stable[0]
    if not split:
        known = KnownStates(T, P, x, y, found.gamma, ratio[None], pressure_fixed)
        return (bubble_bands if kind == "bubble" else dew_bands)(drawn, mixture.system, known)
    assert isinstance(found, Flash)
    one = found.liquids[:, 0]
    gamma = np.exp(mixture.system.activity.ln_gamma(T, one))
    share = np.divide(x, one, out=np.ones_like(x), where=one > 0.0)
    known = KnownStates(T, P, one, y, gamma, ratio * share / share[:, -1:], pressure_fixed)
    return of_both_liquids(bubble_bands(drawn, mixture.system, known), x, one)


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


def _stable(mixture: BoilingMixture, found: States | Flash) -> bool:
    if isinstance(found, Flash):
        return bool(found.liquid_stable[0])
    liquid = mixture.system.activity
    return bool(stability(liquid, found.temperature_K, found.liquid).stable[0])


def _state_reasons(kind: PointKind, failure: str | None, stable: bool | None) -> list[Reason]:
    if failure is not None:
        return [Reason("not_converged", f"No state was found: {failure}.", "state", "none")]
    if stable is not False:
        return []
    return [liquid_split_reason() if kind == "bubble" else unstable_liquid_reason()]


def liquid_split_reason() -> Reason:
    """The reason beside a state with two liquids."""
    return Reason(
        "possible_liquid_split",
        "By this method the liquid splits in two, and the state is that of both liquids together; "
        "where the split lies is more uncertain than a bubble point.",
        "liquid",
        "low",
    )


def unstable_liquid_reason() -> Reason:
    """The reason beside a dew point whose liquid would split in two."""
    return Reason(
        "possible_liquid_split",
        "By this method the liquid is not stable and splits in two; the state given is that of "
        "the liquid kept in one phase, which a still does not show.",
        "liquid",
        "low",
    )
