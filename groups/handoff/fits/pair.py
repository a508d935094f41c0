"""Fit one correlative equation to the predicted ln gamma of one pair."""

import numpy as np

from groups.arrays import FloatArray
from groups.equilibrium import LiquidModel
from groups.errors import FitRefusedError
from groups.handoff.correlations.temperature_forms import form_terms
from groups.handoff.fits.answers import FitNote, FitResidual, FittedParameter, PairFit
from groups.handoff.fits.effects import Boiling, effect_notes, effects, splits_of
from groups.handoff.fits.formulation import (
    ALPHA_BOUNDS,
    Formulation,
    PairConstants,
    formulation,
)
from groups.handoff.fits.least_squares import Solution, solve
from groups.handoff.fits.starts import lattice_ln_gamma, starts
from groups.handoff.fits.target import PairTarget

COVARIANCE_BASIS = (
    "The values of one smooth prediction are not independent: all of them together are counted as "
    "as many independent values as there are parameters. The matrix is (J^T W J)^-1 times values "
    "over parameters, times the mean square of the weighted residuals where that is above one."
)
#: Weighted residuals may lie this many standard deviations off before the fit is called poor.
POOR_WEIGHTED_RMS = 1.0
POOR_RMS = 0.1
NO_SPLIT_EQUATIONS = ("wilson",)


def fit_pair(
    target: PairTarget,
    predicted: LiquidModel,
    name: str = "nrtl",
    form: str = "a+b/T",
    *,
    alpha: float | None = 0.3,
    constants: PairConstants | None = None,
    boiling: Boiling | None = None,
    pair: tuple[int, int] = (0, 1),
) -> PairFit:
    """Fit an equation to the predicted ln gamma of a pair.

    Parameters
    ----------
    target : PairTarget
        ln gamma over a grid, with its standard deviations, which are the weights.
    predicted : LiquidModel
        Of two components: what the grid was evaluated from. Splits and azeotropes of the fit are
        compared with its own.
    name : str
        One of `groups.handoff.correlations.CORRELATIONS`.
    form : str
        Temperature form of the interactions, a key of `groups.handoff.correlations.FORMS`.
    alpha : float or None
        Non-randomness of NRTL, held fixed, 0.05 to 0.9; None to fit it.
    constants : PairConstants, optional
        r and q for UNIQUAC, molar volumes for Wilson.
    boiling : Boiling, optional
        Vapour pressures and a pressure, to compare azeotropes.
    pair : tuple of int
        Indices of the components in their mixture, for the record.

    Returns
    -------
    PairFit

    Raises
    ------
    FitRefusedError
        Wilson's equation for a liquid that splits; van Laar's for ln gamma of both signs; a form
        whose terms the temperatures do not tell apart.
    ConvergenceError
        If no start arrived anywhere.
    """
    refuse_impossible(name, target, predicted)
    how = formulation(name, form, target.temperature_K, alpha=alpha, constants=constants)
    found = solve(_Residuals(how, target), _starts(how, target))
    if how.ran_away(found.parameters, target.temperature_K):
        raise FitRefusedError(
            f"The parameters of {name} run away without end: the equation has no minimum for this "
            "prediction in this form.",
            cure="Take another equation, or a form with fewer parameters.",
            field="model",
        )
    model = how.model(found.parameters)
    change = effects(predicted, model, target, boiling)
    residual = _residual(found, how, target)
    notes = [*effect_notes(change), *_notes(how, found, residual, target)]
    covariance = pair_covariance(how, found, independent=False)
    return PairFit(
        name,
        form,
        pair,
        model,
        parameters_of(how, found.parameters, covariance),
        covariance,
        correlation_of(covariance),
        COVARIANCE_BASIS,
        residual,
        change,
        tuple(notes),
        not any(note.grave for note in notes),
        found.starts,
        found.agreeing,
    )


def refuse_impossible(name: str, target: PairTarget, predicted: LiquidModel) -> None:
    """Refuse an equation that cannot describe the target whatever its parameters.

    Parameters
    ----------
    name : str
    target : PairTarget
    predicted : LiquidModel

    Raises
    ------
    FitRefusedError
    """
    if name in NO_SPLIT_EQUATIONS:
        splits = splits_of(predicted, target.temperature_K)
        at = [T for T, one in zip(target.temperature_K.tolist(), splits, strict=True) if one]
        if at:
            raise FitRefusedError(
                f"The liquid splits in two at {at[0]:.1f} K, and Wilson's equation has no "
                "parameters with which a liquid splits: its Gibbs energy of mixing is convex.",
                cure="Take 'nrtl' or 'uniquac'.",
                field="model",
            )
    if name == "van-laar":
        first, second = target.infinite.T
        if (first * second < 0.0).any():
            raise FitRefusedError(
                "ln gamma at infinite dilution has different signs for the two components, and "
                "van Laar's equation then has a pole at a composition in between.",
                cure="Take 'margules-3', 'nrtl', 'uniquac' or 'wilson'.",
                field="model",
            )


class _Residuals:
    """(ln gamma fitted - target) / sigma, and its derivatives, over the values that count."""

    def __init__(self, how: Formulation, target: PairTarget) -> None:
        self.how, self.T, self.x = how, target.temperature_K, target.fractions[None]
        counted = np.broadcast_to(target.counted, target.ln_gamma.shape)
        self.places = np.flatnonzero(counted)
        self.target = target.ln_gamma.reshape(-1)[self.places]
        self.weight = 1.0 / target.sigma.reshape(-1)[self.places]

    def __call__(self, p: FloatArray) -> tuple[FloatArray, FloatArray]:
        values, J = self.how.ln_gamma(p, self.T, self.x)
        difference = values.reshape(-1)[self.places] - self.target
        derivatives = J.reshape(-1, J.shape[-1])[self.places]
        return difference * self.weight, derivatives * self.weight[:, None]


def _starts(how: Formulation, target: PairTarget) -> list[FloatArray]:
    middle = len(target.temperature_K) // 2
    some = np.unique(np.linspace(0, len(target.x1) - 1, 9).astype(int))
    wanted, sigma = target.ln_gamma[middle, some], target.sigma[middle, some]
    x = target.fractions[some]

    def cost(u: FloatArray, alpha: float | None) -> FloatArray:
        difference = (lattice_ln_gamma(how, u, alpha, x) - wanted) / sigma
        return np.asarray((difference**2).sum(axis=(1, 2)))

    first, second = target.infinite[middle].tolist()
    return starts(how, cost, (first, second), target.temperature_K)


def _residual(found: Solution, how: Formulation, target: PairTarget) -> FitResidual:
    values, _ = how.ln_gamma(found.parameters, target.temperature_K, target.fractions[None])
    difference = np.where(target.counted, values - target.ln_gamma, 0.0)
    n = int(target.counted.sum()) * len(target.temperature_K)
    row, column, component = np.unravel_index(int(np.argmax(np.abs(difference))), difference.shape)
    ends = np.concatenate([difference[:, 0, 0], difference[:, -1, 1]])
    return FitResidual(
        float(np.sqrt((difference**2).sum() / n)),
        float(difference[row, column, component]),
        float(np.sqrt((ends**2).mean())),
        float(target.temperature_K[row]),
        float(target.x1[column]),
        int(component),
        float(np.sqrt(2.0 * found.cost / n)),
        n,
    )


def _notes(
    how: Formulation, found: Solution, residual: FitResidual, target: PairTarget
) -> list[FitNote]:
    notes, p = [], found.parameters
    if not found.converged:
        notes.append(
            FitNote(
                "not_converged",
                "The fit stopped at its limit of steps: other parameters describe the prediction "
                "nearly as well, and these are one choice among them.",
                False,
            )
        )
    if residual.rms > POOR_RMS or residual.weighted_rms > POOR_WEIGHTED_RMS:
        notes.append(
            FitNote(
                "poor_fit",
                f"The fit misses the prediction by {residual.rms:.3f} in ln gamma (rms) and by up "
                f"to {abs(residual.largest):.3f}; an equation with more parameters may do better.",
                False,
            )
        )
    alpha = how.alpha(p)
    if how.fitted_alpha and alpha is not None and not 0.1 < alpha < 0.6:
        low, high = ALPHA_BOUNDS
        notes.append(
            FitNote(
                "alpha_unphysical",
                f"The fitted non-randomness is {alpha:.3f} (bounds {low} to {high}); 0.20 to 0.47 "
                "is the range its authors found. A fixed one is safer outside the range fitted.",
                False,
            )
        )
    if how.equation.name == "van-laar":
        u = how.interactions(p, target.temperature_K)
        if (u[:, 0, 1] * u[:, 1, 0] < 0.0).any():
            notes.append(
                FitNote("pole", "The fitted constants have different signs: there is a pole.", True)
            )
    return notes


def pair_covariance(how: Formulation, found: Solution, *, independent: bool) -> FloatArray:
    """Covariance of the printed parameters.

    Parameters
    ----------
    how : Formulation
    found : Solution
    independent : bool
        True for measured points, each with its own error: then (J^T W J)^-1 times the mean square
        of the weighted residuals where that is above one. False for values of one prediction; see
        `COVARIANCE_BASIS`.

    Returns
    -------
    FloatArray of shape (P, P)
        In the units of the parameters; infinite where the data do not determine them.
    """
    n, P = len(found.residuals), how.n_parameters
    free = max(n - P, 1)
    inflated = max(1.0, 2.0 * found.cost / free)
    scale = inflated if independent else inflated * n / P
    inner = found.inverse_normal()
    known = np.flatnonzero(np.isfinite(np.diag(inner)))
    covariance = np.diag(np.full(P, np.inf))
    if not np.isfinite(inner[np.ix_(known, known)]).all() or not len(known):
        return np.full((P, P), np.inf)
    D = how.to_published(found.parameters)[1][np.ix_(known, known)]
    covariance[np.ix_(known, known)] = scale * D @ inner[np.ix_(known, known)] @ D.T
    return covariance


def correlation_of(covariance: FloatArray) -> FloatArray:
    """Correlation matrix of a covariance; NaN where a parameter is not determined.

    Parameters
    ----------
    covariance : FloatArray of shape (P, P)

    Returns
    -------
    FloatArray of shape (P, P)
    """
    size = np.sqrt(np.diag(covariance))
    known = np.isfinite(size) & (size > 0.0)
    answer = np.full_like(covariance, np.nan)
    both = np.ix_(known, known)
    answer[both] = covariance[both] / np.outer(size[known], size[known])
    return answer


def parameters_of(
    how: Formulation, p: FloatArray, covariance: FloatArray
) -> tuple[FittedParameter, ...]:
    """The parameters as they are printed, with units.

    Parameters
    ----------
    how : Formulation
    p : FloatArray of shape (P,)
    covariance : FloatArray of shape (P, P)

    Returns
    -------
    tuple of FittedParameter
        A fixed non-randomness is the last, without standard error.
    """
    units = {term.letter: term.unit for term in form_terms(how.form)}
    values, _ = how.to_published(p)
    errors = np.sqrt(np.diag(covariance))
    listed = [
        FittedParameter(name, float(value), units.get(name[0], "1"), float(error))
        if not name.startswith("alpha")
        else FittedParameter(name, float(value), "1", float(error))
        for name, value, error in zip(how.names(), values, errors, strict=True)
    ]
    alpha = how.alpha(p)
    if alpha is not None and not how.fitted_alpha:
        listed.append(FittedParameter("alpha_12", alpha, "1", None))
    return tuple(listed)
