"""A correlative binary as a function of the numbers that a fit may move.

The interactions are linear in their coefficients, u = basis(T) c. A basis such as (1, 1/T) over
forty kelvin is nearly collinear, so the solver moves p with c = transform p, where the transform
makes the basis orthonormal over the temperatures of the data. NRTL's non-randomness, if it is
fitted, is one more number, held between two bounds by a logistic.
"""

from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from groups.arrays import FloatArray
from groups.errors import FitRefusedError
from groups.handoff.correlations.build import equation_of, wilson_offset
from groups.handoff.correlations.equation import Equation
from groups.handoff.correlations.model import CorrelativeModel, Interactions
from groups.handoff.correlations.nrtl import Nrtl
from groups.handoff.correlations.temperature_forms import basis, form_terms

ALPHA_BOUNDS = (0.05, 0.9)
"""Bounds of a fitted non-randomness.

Renon & Prausnitz (1968) found 0.20 to 0.47 physical; the wider bounds let a fit show that the
liquid is not one of theirs, and such a fit is marked.
"""


LARGEST_INTERACTION = 40.0
"""|tau|, |ln tau|, |ln Lambda| or |A| beyond which a fit has run away: exp(40) is 2e17."""


@dataclass(frozen=True, slots=True)
class PairConstants:
    """What an equation needs of the two components besides parameters.

    Parameters
    ----------
    volumes, surfaces : FloatArray of shape (2,) or None
        r and q of UNIQUAC.
    molar_volumes_cm3_mol : FloatArray of shape (2,) or None
        For Wilson's equation with molar volumes; None for the plain Lambda.
    """

    volumes: FloatArray | None = None
    surfaces: FloatArray | None = None
    molar_volumes_cm3_mol: FloatArray | None = None


@dataclass(frozen=True, slots=True)
class Formulation:
    """One equation and temperature form of a binary, ready to be moved by p.

    p holds the coefficients of u_12, then those of u_21 (one block alone for the two-suffix
    Margules equation), then the non-randomness if it is fitted.
    """

    equation: Equation
    form: str
    offset: FloatArray
    transform: FloatArray
    fitted_alpha: bool
    tied: bool

    @property
    def n_terms(self) -> int:
        """Coefficients of one interaction."""
        return len(self.transform)

    @property
    def n_parameters(self) -> int:
        """Numbers moved by the fit."""
        return self.n_terms * (1 if self.tied else 2) + int(self.fitted_alpha)

    def coefficients(self, p: FloatArray) -> FloatArray:
        """Coefficients of shape (n_terms, 2, 2), diagonals zero."""
        c = np.zeros((self.n_terms, 2, 2))
        k = self.n_terms
        c[:, 0, 1] = self.transform @ p[:k]
        c[:, 1, 0] = c[:, 0, 1] if self.tied else self.transform @ p[k : 2 * k]
        return c

    def alpha(self, p: FloatArray) -> float | None:
        """Non-randomness; None for equations without one."""
        if not isinstance(self.equation, Nrtl):
            return None
        if not self.fitted_alpha:
            return float(self.equation.alpha[0, 1])
        low, high = ALPHA_BOUNDS
        return low + (high - low) * _logistic(float(p[-1]))

    def equation_at(self, p: FloatArray) -> Equation:
        """The equation with the non-randomness that p says."""
        alpha = self.alpha(p)
        if self.fitted_alpha and isinstance(self.equation, Nrtl) and alpha is not None:
            return self.equation.with_alpha(alpha)
        return self.equation

    def model(self, p: FloatArray) -> CorrelativeModel:
        """The liquid that p says."""
        return CorrelativeModel(
            self.equation_at(p), Interactions(self.form, self.coefficients(p), self.offset)
        )

    def interactions(self, p: FloatArray, temperature_K: FloatArray) -> FloatArray:
        """u of shape (t, 2, 2)."""
        c = self.coefficients(p)
        return self.offset + np.tensordot(basis(self.form, temperature_K), c, 1)

    def ran_away(self, p: FloatArray, temperature_K: FloatArray) -> bool:
        """True where an interaction has left all bounds of sense at one of the temperatures."""
        with np.errstate(all="ignore"):
            u = self.interactions(p, temperature_K) - self.offset
        return not bool((np.abs(u) < LARGEST_INTERACTION).all())

    def start(self, u12: float, u21: float, alpha: float, temperature_K: FloatArray) -> FloatArray:
        """p of interactions that are, as nearly as the form allows, constant over temperature."""
        values = basis(self.form, temperature_K) @ self.transform
        one = np.linalg.lstsq(values, np.ones(len(values)), rcond=None)[0]
        shift = self.offset
        blocks = [one * (u12 - shift[0, 1])]
        if not self.tied:
            blocks.append(one * (u21 - shift[1, 0]))
        if self.fitted_alpha:
            low, high = ALPHA_BOUNDS
            share = (alpha - low) / (high - low)
            blocks.append(np.array([np.log(share / (1.0 - share))]))
        return np.concatenate(blocks)

    def ln_gamma(
        self, p: FloatArray, temperature_K: FloatArray, x: FloatArray
    ) -> tuple[FloatArray, FloatArray]:
        """ln gamma (t, m, 2) and its derivatives (t, m, 2, P); x of shape (t or 1, m, 2)."""
        equation = self.equation_at(p)
        u = self.interactions(p, temperature_K)
        terms = basis(self.form, temperature_K) @ self.transform
        J = equation.interaction_jacobian(u, x)
        columns = [J[..., 0, 1, None] * terms[:, None, None, :]]
        other = J[..., 1, 0, None] * terms[:, None, None, :]
        columns = [columns[0] + other] if self.tied else [*columns, other]
        if self.fitted_alpha and isinstance(equation, Nrtl):
            low, high = ALPHA_BOUNDS
            share = _logistic(float(p[-1]))
            own = equation.alpha_jacobian(u, x)
            both = own[..., 0, 1] + own[..., 1, 0]
            columns.append(both[..., None] * ((high - low) * share * (1.0 - share)))
        return equation.ln_gamma(u, x), np.concatenate(columns, axis=-1)

    def to_published(self, p: FloatArray) -> tuple[FloatArray, FloatArray]:
        """The numbers as they are printed, and their derivatives with respect to p."""
        k, blocks = self.n_terms, 1 if self.tied else 2
        D = np.zeros((self.n_parameters, self.n_parameters))
        for block in range(blocks):
            place = slice(block * k, (block + 1) * k)
            D[place, place] = self.transform
        values = D @ p
        alpha = self.alpha(p)
        if self.fitted_alpha and alpha is not None:
            low, high = ALPHA_BOUNDS
            share = _logistic(float(p[-1]))
            D[-1, -1] = (high - low) * share * (1.0 - share)
            values[-1] = alpha
        return values, D

    def names(self) -> tuple[str, ...]:
        """Names of the numbers as they are printed: a_12, b_12, a_21, ... alpha_12."""
        letters = [term.letter for term in form_terms(self.form)]
        pairs = ("12",) if self.tied else ("12", "21")
        names = [f"{letter}_{pair}" for pair in pairs for letter in letters]
        return (*names, "alpha_12") if self.fitted_alpha else tuple(names)


def formulation(
    name: str,
    form: str,
    temperature_K: npt.ArrayLike,
    *,
    alpha: float | None = 0.3,
    constants: PairConstants | None = None,
) -> Formulation:
    """Set a binary correlation up for a fit over given temperatures.

    Parameters
    ----------
    name : str
        One of `groups.handoff.correlations.CORRELATIONS`.
    form : str
        Temperature form of the interactions.
    temperature_K : array_like of shape (t,)
        Temperatures of the data, K.
    alpha : float or None
        Non-randomness of NRTL, held fixed; None to fit it.
    constants : PairConstants, optional
        r and q for UNIQUAC, molar volumes for Wilson.

    Returns
    -------
    Formulation

    Raises
    ------
    FitRefusedError
        If the temperatures do not tell the terms of the form apart.
    UnknownMethodError, InvalidInputError, ShapeError
        For what does not exist or is not given.
    """
    constants = constants or PairConstants()
    fitted = name == "nrtl" and alpha is None
    equation = equation_of(
        name,
        2,
        alpha=0.3 if alpha is None else alpha,
        volumes=constants.volumes,
        surfaces=constants.surfaces,
    )
    offset = np.zeros((2, 2))
    if name == "wilson" and constants.molar_volumes_cm3_mol is not None:
        offset = wilson_offset(constants.molar_volumes_cm3_mol)
    transform = _orthogonal(form, np.unique(np.asarray(temperature_K, dtype=np.float64)))
    return Formulation(equation, form, offset, transform, fitted, name == "margules-2")


def _orthogonal(form: str, temperature_K: FloatArray) -> FloatArray:
    """The transform that makes the basis orthonormal over these temperatures."""
    values = basis(form, temperature_K)
    n_terms = values.shape[1]
    if len(temperature_K) < n_terms:
        raise FitRefusedError(
            f"The form '{form}' has {n_terms} coefficients for each interaction, but the data "
            f"hold only {len(temperature_K)} different temperature"
            f"{'' if len(temperature_K) == 1 else 's'}.",
            cure="Take a form with fewer terms, or data at more temperatures.",
            field="form",
        )
    R = np.linalg.qr(values / np.sqrt(len(values)))[1]
    scale = np.abs(np.diag(R))
    # 1e-9 of its own size left of a term, once the others are taken out, is rounding alone.
    if (scale < 1e-9 * np.sqrt((values**2).mean(axis=0))).any():
        raise FitRefusedError(
            f"Temperatures from {temperature_K[0]:.6g} to {temperature_K[-1]:.6g} K do not tell "
            f"the terms of the form '{form}' apart.",
            cure="Take a form with fewer terms, or a wider range of temperature.",
            field="form",
        )
    return np.linalg.inv(R)


def _logistic(value: float) -> float:
    return 1.0 / (1.0 + float(np.exp(-np.clip(value, -40.0, 40.0))))
