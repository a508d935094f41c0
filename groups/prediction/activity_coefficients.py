"""Activity coefficients and excess properties of one mixture at many points."""

from collections.abc import Sequence

import numpy as np
from numpy.typing import ArrayLike

from groups.activity import excess_enthalpy, excess_gibbs
from groups.activity.choice import OnMissing
from groups.arrays import FloatArray, IntArray
from groups.confidence import Confidence, graded
from groups.errors import ShapeError
from groups.prediction.answers import ActivityAnswer
from groups.prediction.bands import Band, Drawn, band, drawn_around
from groups.prediction.checks import check_components, check_fractions, check_temperatures
from groups.prediction.component import Component
from groups.prediction.liquid import Liquid, liquid

WIDTH_STEP_K = 5.0
BLOCK_POINTS = 512  # keeps the drawn numbers of one block within a few megabytes


def activity_coefficients(
    components: Sequence[Component],
    temperature_K: ArrayLike,
    mole_fractions: ArrayLike,
    method: str = "auto",
    on_missing: OnMissing = "estimate",
) -> ActivityAnswer:
    """Activity coefficients, gE/RT and hE of a liquid mixture.

    Parameters
    ----------
    components : sequence of Component, length n_components
    temperature_K : array_like, scalar or of shape (n_points,), K
        One temperature for all points, or one a point.
    mole_fractions : array_like of shape (n_points, n_components) or (n_components,)
        Each row sums to one; zero is allowed and gives infinite dilution exactly.
    method : str
        An identifier of `ALL_METHODS`.
    on_missing : {"refuse", "estimate"}

    Returns
    -------
    ActivityAnswer

    Raises
    ------
    InvalidInputError
        If a number lies outside its range or the shapes do not fit.
    PredictionError
        If no table gives the number.

    Source
    ------
    The table named by `method` in the answer; see `groups.activity`.
    """
    molecules = [component.molecule for component in components]
    check_components(molecules)
    fractions = check_fractions(mole_fractions, len(molecules))
    temperatures = _one_a_point(check_temperatures(temperature_K), len(fractions))
    mixture = liquid(molecules, method, on_missing)
    combinatorial, residual = mixture.model.ln_gamma_parts(temperatures, fractions)
    ln_gamma = combinatorial + residual
    gibbs = excess_gibbs(mixture.model, temperatures, fractions)
    ln_gamma_band, gibbs_band = _bands(
        mixture, on_missing, temperatures, fractions, ln_gamma, gibbs
    )
    return ActivityAnswer(
        tuple(molecules),
        mixture.method,
        mixture.methods_used,
        temperatures,
        fractions,
        ln_gamma,
        combinatorial,
        residual,
        gibbs,
        excess_enthalpy(mixture.model, temperatures, fractions),
        ln_gamma_band,
        gibbs_band,
        _confidences(mixture, temperatures, fractions, ln_gamma_band),
    )


def _one_a_point(temperatures: FloatArray, n_points: int) -> FloatArray:
    if temperatures.size not in (1, n_points):
        raise ShapeError(
            f"The 'temperature_K' must be one number or one a point ({n_points}). "
            f"Got {temperatures.size} numbers instead.",
            cure="Give one temperature, or as many as there are points.",
            field="temperature_K",
        )
    return np.broadcast_to(temperatures, (n_points,)).copy()


def _bands(
    mixture: Liquid,
    on_missing: OnMissing,
    temperatures: FloatArray,
    fractions: FloatArray,
    ln_gamma: FloatArray,
    gibbs: FloatArray,
) -> tuple[Band, Band] | tuple[None, None]:
    """Intervals of ln gamma and gE/RT; none for an ideal solution that was asked for.

    The widths are taken at the nearest multiple of `WIDTH_STEP_K`, so that the interval of one
    point does not depend on the others.
    """
    if not mixture.compared:
        return None, None
    bands = Band(ln_gamma.copy(), ln_gamma.copy()), Band(gibbs.copy(), gibbs.copy())
    steps = np.round(temperatures / WIDTH_STEP_K) * WIDTH_STEP_K
    for step in np.unique(steps):
        drawn = drawn_around(mixture.molecules, on_missing, float(step))
        if drawn is None:
            return None, None
        places = np.flatnonzero(steps == step)
        for start in range(0, len(places), BLOCK_POINTS):
            block = places[start : start + BLOCK_POINTS]
            _fill(bands, block, drawn, temperatures[block], fractions[block])
    return bands


def _fill(
    bands: tuple[Band, Band],
    places: IntArray,
    drawn: Drawn,
    temperatures: FloatArray,
    fractions: FloatArray,
) -> None:
    """Stretch both intervals at some of the points to hold the drawn values there."""
    samples = drawn.models.ln_gamma(temperatures, fractions)
    for one, values in zip(bands, (samples, np.sum(fractions * samples, axis=-1)), strict=True):
        found = band(values, one.lower[places])
        one.lower[places], one.upper[places] = found.lower, found.upper


def _confidences(
    mixture: Liquid, temperatures: FloatArray, fractions: FloatArray, ln_gamma: Band | None
) -> tuple[Confidence, ...]:
    """One confidence a point; the widest ln gamma decides the grade."""
    reasons = mixture.reasons_by_point(temperatures, fractions)
    widths = (
        [None] * len(reasons)
        if ln_gamma is None
        else [float(width) for width in ln_gamma.half_width.max(axis=-1)]
    )
    return tuple(
        graded(why, mixture.evidence, half_width_ln=width)
        for why, width in zip(reasons, widths, strict=True)
    )
