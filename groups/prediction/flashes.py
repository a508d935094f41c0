"""Flash of one mixture at given temperature and pressure."""

from collections.abc import Sequence

import numpy as np
from numpy.typing import ArrayLike

from groups.activity.choice import OnMissing
from groups.arrays import FloatArray
from groups.confidence import Confidence, Interval, Reason, graded
from groups.equilibrium import Flash
from groups.equilibrium import flash as solve_flash
from groups.equilibrium.phase_fraction import phase_fraction
from groups.equilibrium.states import safe_log
from groups.prediction.answers import PhasePointAnswer
from groups.prediction.bands import band
from groups.prediction.boiling_mixture import BoilingMixture, boiling_mixture
from groups.prediction.checks import (
    check_components,
    check_fractions,
    check_pressures,
    check_temperatures,
)
from groups.prediction.component import Component
from groups.prediction.phase_points import liquid_split_reason


def flash(
    components: Sequence[Component],
    mole_fractions: ArrayLike,
    *,
    temperature_K: float,
    pressure_kPa: float,
    method: str = "auto",
    on_missing: OnMissing = "estimate",
) -> PhasePointAnswer:
    """Liquid and vapour of a mixture at one temperature and pressure.

    Parameters
    ----------
    components : sequence of Component, length n_components
    mole_fractions : array_like of shape (n_components,)
        Of the feed.
    temperature_K, pressure_kPa : float
    method : str
        An identifier of `ALL_METHODS`.
    on_missing : {"refuse", "estimate"}

    Returns
    -------
    PhasePointAnswer
        With NaN for the composition of a phase that is absent.

    Raises
    ------
    InvalidInputError
        If a number lies outside its range or the shapes do not fit.
    PredictionError
        If no table, or no vapour pressure, gives the numbers.

    Source
    ------
    See `groups.equilibrium.flash`.
    """
    molecules = [component.molecule for component in components]
    check_components(molecules)
    feed = check_fractions(mole_fractions, len(molecules))[:1]
    temperature, pressure = check_temperatures(temperature_K), check_pressures(pressure_kPa)
    mixture = boiling_mixture(components, method, on_missing, temperature_K=temperature_K)
    found = solve_flash(mixture.system, temperature, pressure, feed)
    return _answer(mixture, found, feed)


def _answer(mixture: BoilingMixture, found: Flash, feed: FloatArray) -> PhasePointAnswer:
    saturation = np.exp(mixture.system.ln_saturation(found.temperature_K))[0]
    k_values = found.gamma[0] * saturation
    two_phase = found.phase[0] == "two-phase"
    probed = found.liquid if np.isfinite(found.liquid).all() else feed
    reasons = mixture.reasons(found.temperature_K, found.pressure_kPa, probed)
    return PhasePointAnswer(
        mixture.liquid.molecules,
        mixture.liquid.method,
        mixture.liquid.methods_used,
        float(found.temperature_K[0]),
        float(found.pressure_kPa[0]),
        float(found.vapour_fraction[0]),
        found.liquid[0],
        found.vapour[0],
        found.gamma[0],
        saturation,
        k_values / k_values[-1] if two_phase else np.full_like(k_values, np.nan),
        bool(found.liquid_stable[0]) if found.phase[0] in ("liquid", "two-phase") else None,
        found.failure[0],
        mixture.lines,
        None,
        _confidence([*reasons, *_flash_reasons(found)], mixture, found, feed),
    )


def _confidence(
    reasons: list[Reason], mixture: BoilingMixture, found: Flash, feed: FloatArray
) -> Confidence:
    """The interval is that of the vapour fraction; the widest ln K grades."""
    drawn = mixture.drawn(float(found.temperature_K[0]))
    if drawn is None or found.phase[0] != "two-phase":
        return graded(reasons, mixture.liquid.evidence)
    T, x = found.temperature_K, found.liquid
    ln_k = drawn.models.ln_gamma(T, x) + mixture.system.ln_saturation(T)
    ln_k = (ln_k + drawn.shift[:, None, :])[:, 0] - np.log(found.pressure_kPa)
    fraction, _ = phase_fraction(np.broadcast_to(feed, ln_k.shape), ln_k)
    ends = band(fraction, found.vapour_fraction[0])
    own = safe_log(found.gamma[0]) + mixture.system.ln_saturation(T)[0] - np.log(found.pressure_kPa)
    return graded(
        reasons,
        mixture.liquid.evidence,
        interval=Interval(float(ends.lower), float(ends.upper)),
        half_width_ln=float(band(ln_k, own).half_width.max()),
    )


def _flash_reasons(found: Flash) -> list[Reason]:
    failure = found.failure[0]
    if failure is not None:
        return [Reason("not_converged", f"No state was found: {failure}.", "state", "none")]
    if found.phase[0] != "vapour" and not found.liquid_stable[0]:
        return [liquid_split_reason()]
    return []
