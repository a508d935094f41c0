"""How an interaction parameter depends on temperature: a sum of coefficients times plain terms."""

from collections.abc import Callable
from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from groups.arrays import FloatArray
from groups.errors import InvalidInputError


@dataclass(frozen=True, slots=True)
class Term:
    """One coefficient, what it is multiplied by, and the unit it therefore has (T in K)."""

    letter: str
    text: str
    unit: str
    value: Callable[[FloatArray], FloatArray]
    slope: Callable[[FloatArray], FloatArray]


_A = Term("a", "a", "1", np.ones_like, np.zeros_like)
_B = Term("b", "b/T", "K", lambda T: 1.0 / T, lambda T: -1.0 / T**2)
_C = Term("c", "c ln(T/K)", "1", lambda T: np.log(T), lambda T: 1.0 / T)
_D = Term("d", "d T", "1/K", lambda T: T.copy(), np.ones_like)

FORMS: dict[str, tuple[Term, ...]] = {
    "a": (_A,),
    "b/T": (_B,),
    "a+b/T": (_A, _B),
    "a+b/T+c*ln(T)": (_A, _B, _C),
    "a+b/T+c*ln(T)+d*T": (_A, _B, _C, _D),
}
"""Identifier of each form, and its terms."""


def form_terms(form: str) -> tuple[Term, ...]:
    """Look a temperature form up.

    Parameters
    ----------
    form : str
        A key of `FORMS`.

    Returns
    -------
    tuple of Term

    Raises
    ------
    InvalidInputError
        If there is no such form.
    """
    if form not in FORMS:
        raise InvalidInputError(
            f"There is no temperature form '{form}'. Allowed: {', '.join(FORMS)}.",
            cure="Use one of the forms listed; T is in K.",
            field="form",
        )
    return FORMS[form]


def basis(form: str, temperature_K: npt.ArrayLike) -> FloatArray:
    """Values of the terms of a form.

    Parameters
    ----------
    form : str
    temperature_K : array_like of shape (...)
        K, positive.

    Returns
    -------
    FloatArray of shape (..., n_terms)

    Raises
    ------
    InvalidInputError
        If there is no such form.
    """
    T = np.asarray(temperature_K, dtype=np.float64)
    return np.stack([term.value(T) for term in form_terms(form)], axis=-1)


def basis_slope(form: str, temperature_K: npt.ArrayLike) -> FloatArray:
    """Temperature derivatives of the terms of a form.

    Parameters
    ----------
    form : str
    temperature_K : array_like of shape (...)
        K, positive.

    Returns
    -------
    FloatArray of shape (..., n_terms), in 1/K times the unit of each term

    Raises
    ------
    InvalidInputError
        If there is no such form.
    """
    T = np.asarray(temperature_K, dtype=np.float64)
    return np.stack([term.slope(T) for term in form_terms(form)], axis=-1)


def form_text(form: str) -> str:
    """The right-hand side of a form as it is printed, for instance "a + b/T".

    Parameters
    ----------
    form : str

    Returns
    -------
    str

    Raises
    ------
    InvalidInputError
        If there is no such form.
    """
    return " + ".join(term.text for term in form_terms(form))
