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
from groups.prediction.checks import check_components, check_fractions, check_temperatures
from groups.prediction.component import Component
from groups.prediction.liquid import Liquid, liquid


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
    return ActivityAnswer(
        tuple(molecules),
        mixture.method,
        mixture.methods_used,
        temperatures,
        fractions,
        combinatorial + residual,
        combinatorial,
        residual,
        excess_gibbs(mixture.model, temperatures, fractions),
        excess_enthalpy(mixture.model, temperatures, fractions),
        _confidences(mixture, temperatures, fractions),
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


def _confidences(
    mixture: Liquid, temperatures: FloatArray, fractions: FloatArray
) -> tuple[Confidence, ...]:
    """One confidence a point."""
    return tuple(graded(reasons) for reasons in mixture.reasons_by_point(temperatures, fractions))
