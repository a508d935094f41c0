"""Flashes of one mixture: two of temperature, pressure and vapour fraction are given."""

from collections.abc import Sequence

import numpy as np
from numpy.typing import ArrayLike

from groups.activity.choice import OnMissing
from groups.arrays import FloatArray
from groups.confidence import Confidence, Interval, Reason, graded
from groups.equilibrium import Flash, flash_at_pressure, flash_at_temperature
from groups.equilibrium import flash as solve_flash
from groups.equilibrium.phase_fraction import phase_fraction
from groups.equilibrium.states import safe_log
from groups.errors import InvalidInputError, OutOfRangeError
from groups.prediction.answers import PhasePointAnswer
from groups.prediction.bands import band
from groups.prediction.boiling_bands import KnownStates, real_saturation
from groups.prediction.boiling_mixture import BoilingMixture, boiling_mixture
from groups.prediction.checks import (
    check_components,
    check_fractions,
    check_pressures,
    check_temperatures,
)
from groups.prediction.component import Component
from groups.prediction.phase_points import liquid_split_reason, ln_volatilities
from groups.prediction.phases import phases_of
from groups.prediction.state_equation import EQUATION_OF_STATE, flash_by_state_equation
from groups.prediction.vapours import VapourAsked, check_vapour


def flash(
    components: Sequence[Component],
    mole_fractions: ArrayLike,
    *,
    temperature_K: float | None = None,
    pressure_kPa: float | None = None,
    vapour_fraction: float | None = None,
    method: str = "auto",
    on_missing: OnMissing = "estimate",
    vapour: VapourAsked = "auto",
) -> PhasePointAnswer:
    """The stable phases of a mixture: liquids, and a vapour.

    Parameters
    ----------
    components : sequence of Component, length n_components
    mole_fractions : array_like of shape (n_components,)
        Of the feed.
    temperature_K, pressure_kPa, vapour_fraction : float
        Exactly two of them; the vapour fraction is moles of vapour in a mole of feed, 0 to 1.
    method : str
        An identifier of `ALL_METHODS`. "psrk" is the equation of state, at given temperature and
        pressure.
    on_missing : {"refuse", "estimate"}
    vapour : {"auto", "ideal", "virial"}
        "auto" takes a real vapour where this mixture needs one.

    Returns
    -------
    PhasePointAnswer
        With NaN for the composition of a phase that is absent; `x` is that of all liquids
        together where there are several, which stand in `phases`.

    Raises
    ------
    InvalidInputError
        If a number lies outside its range, the shapes do not fit, or not exactly two conditions
        are given.
    PredictionError
        If no table, or no vapour pressure, gives the numbers.

    Source
    ------
    See `groups.equilibrium.flash` and `groups.equilibrium.vapour_fraction_flash`.
    """
    molecules = [component.molecule for component in components]
    check_components(molecules)
    feed = check_fractions(mole_fractions, len(molecules))[:1]
    conditions = temperature_K, pressure_kPa, vapour_fraction
    _check_conditions(*conditions)
    check_vapour(vapour)
    if method == EQUATION_OF_STATE:
        if temperature_K is None or pressure_kPa is None:
            raise _no_fraction_by_state_equation()
        return flash_by_state_equation(components, feed, temperature_K, pressure_kPa)
    mixture = boiling_mixture(
        components,
        method,
        on_missing,
        temperature_K=temperature_K,
        pressure_kPa=pressure_kPa,
        vapour=vapour,
        fractions=feed,
    )
    found = _solved(mixture, conditions, feed)
    if not found.converged[0] and vapour == "auto" and not mixture.system.vapour.ideal:
        mixture = mixture.under_ideal_vapour()
        found = _solved(mixture, conditions, feed)
    return _answer(mixture, found, feed, conditions)


Conditions = tuple[float | None, float | None, float | None]


def _solved(mixture: BoilingMixture, conditions: Conditions, feed: FloatArray) -> Flash:
    temperature_K, pressure_kPa, vapour_fraction = conditions
    if temperature_K is None:
        return flash_at_pressure(
            mixture.system, pressure_kPa or np.nan, vapour_fraction or 0.0, feed
        )
    if pressure_kPa is None:
        return flash_at_temperature(mixture.system, temperature_K, vapour_fraction or 0.0, feed)
    return solve_flash(mixture.system, temperature_K, pressure_kPa, feed)


def _check_conditions(
    temperature_K: float | None, pressure_kPa: float | None, vapour_fraction: float | None
) -> None:
    given = [value is not None for value in (temperature_K, pressure_kPa, vapour_fraction)]
    if sum(given) != 2:
        raise InvalidInputError(
            "A flash needs exactly two of 'temperature_K', 'pressure_kPa' and 'vapour_fraction'. "
            f"Got {sum(given)} instead.",
            cure="Give two of them; the third is part of the answer.",
            field="temperature_K" if temperature_K is None else "pressure_kPa",
        )
    if temperature_K is not None:
        check_temperatures(temperature_K)
    if pressure_kPa is not None:
        check_pressures(pressure_kPa)
    if vapour_fraction is not None and not 0.0 <= vapour_fraction <= 1.0:
        raise OutOfRangeError("vapour_fraction", vapour_fraction, 0.0, 1.0)


def _no_fraction_by_state_equation() -> InvalidInputError:
    return InvalidInputError(
        "The equation of state flashes at a temperature and a pressure, not at a vapour fraction.",
        cure="Give 'temperature_K' and 'pressure_kPa', ask for a bubble or dew point, or take "
        "another method.",
        field="vapour_fraction",
    )


def _answer(
    mixture: BoilingMixture, found: Flash, feed: FloatArray, conditions: Conditions
) -> PhasePointAnswer:
    ln_k = ln_volatilities(mixture, found)
    both = found.phase[0] in ("two-phase", "three-phase")
    probed = found.liquid if np.isfinite(found.liquid).all() else feed
    vapour = found.vapour if np.isfinite(found.vapour).all() else None
    reasons = mixture.reasons(found.temperature_K, found.pressure_kPa, probed, vapour)
    has_liquid = found.phase[0] not in ("vapour", "unknown")
    T, P, fraction = conditions
    return PhasePointAnswer(
        mixture.liquid.molecules,
        mixture.liquid.method,
        mixture.liquid.methods_used,
        # What was given stands in the answer even where no state was found.
        float(found.temperature_K[0]) if T is None else T,
        float(found.pressure_kPa[0]) if P is None else P,
        float(found.vapour_fraction[0]) if fraction is None else fraction,
        found.liquid[0],
        found.vapour[0],
        found.gamma[0],
        np.exp(mixture.system.ln_saturation(found.temperature_K))[0],
        np.exp(ln_k - ln_k[-1]) if both else np.full_like(ln_k, np.nan),
        bool(found.liquid_stable[0]) if has_liquid else None,
        found.failure[0],
        mixture.lines,
        None,
        phases_of(found) if found.converged[0] else (),
        mixture.vapour,
        _confidence([*reasons, *_flash_reasons(found)], mixture, found, feed, conditions),
    )


def _confidence(
    reasons: list[Reason],
    mixture: BoilingMixture,
    found: Flash,
    feed: FloatArray,
    conditions: Conditions,
) -> Confidence:
    """The interval is that of the vapour fraction at T and P; the widest ln K grades.

    With the vapour fraction given no interval is propagated.
    """
    drawn = mixture.drawn(float(found.temperature_K[0]))
    if drawn is None or found.phase[0] != "two-phase":
        return graded(reasons, mixture.liquid.evidence)
    T, x = found.temperature_K, found.liquid
    known = KnownStates(
        T, found.pressure_kPa, x, found.vapour, found.gamma, found.gamma, pressure_fixed=True
    )
    saturation = real_saturation(mixture.system, known) - np.log(found.pressure_kPa)[:, None]
    ln_k = (drawn.models.ln_gamma(T, x) + saturation + drawn.shift[:, None, :])[:, 0]
    own = safe_log(found.gamma[0]) + saturation[0]
    width = float(band(ln_k, own).half_width.max())
    interval = None
    if conditions[2] is None:
        fraction, _ = phase_fraction(np.broadcast_to(feed, ln_k.shape), ln_k)
        ends = band(fraction, found.vapour_fraction[0])
        interval = Interval(float(ends.lower), float(ends.upper))
    return graded(reasons, mixture.liquid.evidence, interval=interval, half_width_ln=width)


def _flash_reasons(found: Flash) -> list[Reason]:
    failure = found.failure[0]
    if failure is not None:
        return [Reason("not_converged", f"No state was found: {failure}.", "state", "none")]
    if found.phase[0] != "vapour" and not found.liquid_stable[0]:
        return [liquid_split_reason()]
    return []
