"""Activity coefficients and excess properties of one mixture at many points."""

from collections.abc import Sequence

import numpy as np
from numpy.typing import ArrayLike

from groups.activity import excess_enthalpy, excess_gibbs
from groups.activity.choice import OnMissing
from groups.arrays import FloatArray
from groups.confidence import Confidence, graded
from groups.errors import ShapeError
from groups.prediction.answers import ActivityAnswer
from groups.prediction.bands import LEVEL, Band, Drawn, drawn_around
from groups.prediction.checks import check_components, check_fractions, check_temperatures
from groups.prediction.component import Component
from groups.prediction.liquid import Liquid, liquid

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
    """Intervals of ln gamma and gE/RT; none for an ideal solution that was asked for."""
    if not mixture.compared:
        return None, None
    drawn = drawn_around(mixture.molecules, on_missing, float(np.median(temperatures)))
    if drawn is None:
        return None, None
    centre = drawn.models.base.ln_gamma(temperatures, fractions)
    lower, upper = _addition_ends(drawn, fractions)
    energy = np.sum(fractions * centre, axis=-1)
    gibbs_lower, gibbs_upper = _addition_ends(drawn, fractions, weigh=True)
    return (
        Band(np.minimum(centre + lower, ln_gamma), np.maximum(centre + upper, ln_gamma)),
        Band(np.minimum(energy + gibbs_lower, gibbs), np.maximum(energy + gibbs_upper, gibbs)),
    )


def _addition_ends(
    drawn: Drawn, fractions: FloatArray, *, weigh: bool = False
) -> tuple[FloatArray, FloatArray]:
    """Quantiles of the drawn errors of ln gamma, or of gE/RT, a block of points at a time."""
    tail = (1.0 - LEVEL) / 2.0
    ends = []
    for start in range(0, len(fractions), BLOCK_POINTS):
        block = fractions[start : start + BLOCK_POINTS]
        errors = drawn.models.errors(block)
        values = np.sum(block * errors, axis=-1) if weigh else errors
        ends.append(np.quantile(values, [tail, 1.0 - tail], axis=0))
    both = np.concatenate(ends, axis=1)
    return both[0], both[1]


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
