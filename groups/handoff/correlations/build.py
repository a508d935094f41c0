"""Correlative models from numbers: what a parameter sheet holds, turned back into a liquid."""

from collections.abc import Sequence

import numpy as np
from numpy.typing import ArrayLike

from groups.arrays import FloatArray
from groups.errors import ShapeError, UnknownMethodError
from groups.handoff.correlations.equation import Equation
from groups.handoff.correlations.margules import Margules
from groups.handoff.correlations.model import CorrelativeModel, Interactions
from groups.handoff.correlations.nrtl import Nrtl
from groups.handoff.correlations.uniquac import Uniquac
from groups.handoff.correlations.van_laar import VanLaar
from groups.handoff.correlations.wilson import Wilson

CORRELATIONS = ("nrtl", "uniquac", "wilson", "van-laar", "margules-2", "margules-3")
"""Identifiers of the correlative equations."""

BINARY_ONLY = ("van-laar", "margules-2", "margules-3")


def correlative_model(
    name: str,
    form: str,
    coefficients: ArrayLike,
    *,
    alpha: ArrayLike | None = None,
    volumes: Sequence[float] | None = None,
    surfaces: Sequence[float] | None = None,
    molar_volumes_cm3_mol: Sequence[float] | None = None,
) -> CorrelativeModel:
    """Build a correlative model from its parameters.

    Parameters
    ----------
    name : str
        One of `CORRELATIONS`.
    form : str
        Temperature form of the interactions (tau for NRTL; ln tau for UNIQUAC; ln Lambda for
        Wilson; A for van Laar and Margules), a key of `FORMS`.
    coefficients : array_like of shape (n_terms, n_components, n_components)
        Coefficients a, b, c, d of the form, T in K; diagonals zero.
    alpha : array_like of shape () or (n_components, n_components), optional
        Non-randomness of NRTL, symmetric; needed there.
    volumes, surfaces : sequence of float of length n_components, optional
        r and q of UNIQUAC, dimensionless; needed there.
    molar_volumes_cm3_mol : sequence of float of length n_components, optional
        Liquid molar volumes for Wilson's equation, cm3/mol. With them
        Lambda_ij = (V_j/V_i) exp(form), without them Lambda_ij = exp(form).

    Returns
    -------
    CorrelativeModel

    Raises
    ------
    UnknownMethodError
        If there is no such equation.
    ShapeError
        If the numbers do not fit one another, or something needed is not given.
    InvalidInputError
        If there is no such temperature form.
    """
    values = np.asarray(coefficients, dtype=np.float64)
    if values.ndim != 3 or values.shape[1] != values.shape[2]:
        raise ShapeError(
            f"The coefficients must be of shape (terms, n, n). Got {values.shape} instead.",
            field="coefficients",
        )
    n = values.shape[1]
    offset = np.zeros((n, n))
    if molar_volumes_cm3_mol is not None:
        offset = wilson_offset(np.asarray(molar_volumes_cm3_mol, dtype=np.float64))
    equation = equation_of(name, n, alpha=alpha, volumes=volumes, surfaces=surfaces)
    return CorrelativeModel(equation, Interactions(form, values, offset))


def equation_of(
    name: str,
    n_components: int,
    *,
    alpha: ArrayLike | None = None,
    volumes: ArrayLike | None = None,
    surfaces: ArrayLike | None = None,
) -> Equation:
    """The equation of an identifier with what it needs besides interactions."""
    if name not in CORRELATIONS:
        raise UnknownMethodError(name, CORRELATIONS)
    if name in BINARY_ONLY and n_components != 2:
        raise ShapeError(
            f"The equation '{name}' is for two components. Got {n_components} instead.",
            cure="Take 'nrtl', 'uniquac' or 'wilson' for more components.",
            field="components",
        )
    if name == "nrtl":
        if alpha is None:
            raise ShapeError("NRTL needs its non-randomness 'alpha'.", field="alpha")
        return Nrtl(np.array(np.broadcast_to(np.asarray(alpha, float), (n_components,) * 2)))
    if name == "uniquac":
        if volumes is None or surfaces is None:
            raise ShapeError("UNIQUAC needs r and q of each component.", field="volumes")
        return Uniquac(np.asarray(volumes, float), np.asarray(surfaces, float))
    if name == "wilson":
        return Wilson()
    return VanLaar() if name == "van-laar" else Margules(2 if name == "margules-2" else 3)


def wilson_offset(molar_volumes: FloatArray) -> FloatArray:
    """ln(V_j/V_i) of shape (n, n)."""
    ln_V = np.log(molar_volumes)
    return ln_V[None, :] - ln_V[:, None]
