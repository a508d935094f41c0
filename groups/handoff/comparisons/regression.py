"""Correlative equations fitted to measured points, with covariance, AICc and cross-validation."""

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from groups.activity.excess import GAS_CONSTANT_J_MOL_K
from groups.arrays import FloatArray, IntArray
from groups.errors import ConvergenceError, FitRefusedError, TooFewPointsError
from groups.handoff.comparisons.measurements import SAME_TEMPERATURE_K, Measurements
from groups.handoff.comparisons.observations import Observations
from groups.handoff.correlations import CorrelativeModel
from groups.handoff.fits.answers import FittedParameter
from groups.handoff.fits.formulation import Formulation, PairConstants, formulation
from groups.handoff.fits.least_squares import Solution, solve
from groups.handoff.fits.pair import correlation_of, pair_covariance, parameters_of
from groups.handoff.fits.starts import lattice_ln_gamma, starts

MOST_FOLDS = 10
FOLD_EVALUATIONS = 25  # from the solution of all points it is never far
#: Central differences of hE over the parameters, which are of order one: error of order 1e-10.
_STEP = 1e-5
#: A span of temperature below which two coefficients for each interaction mean nothing.
NARROW_K = 5.0


@dataclass(frozen=True, slots=True)
class PointFit:
    """A correlative equation fitted to measured points.

    Attributes
    ----------
    name, form : str
    model : CorrelativeModel
    parameters : tuple of FittedParameter
    covariance, correlation : FloatArray of shape (P, P)
        From independent points with the stated uncertainties; widened where they scatter more.
    weighted_rms : float
        Root mean square of the residuals in units of their standard deviation.
    aicc : float
        Akaike's information criterion for small samples; lower is better, differences count.
    cross_validated_rms : float
        The same for points left out of the fit; NaN where too few are left to fit.
    folds : int
    residuals : FloatArray of shape (N,)
    """

    name: str
    form: str
    model: CorrelativeModel
    parameters: tuple[FittedParameter, ...]
    covariance: FloatArray
    correlation: FloatArray
    weighted_rms: float
    aicc: float
    cross_validated_rms: float
    folds: int
    residuals: FloatArray


def automatic_forms(points: Measurements) -> tuple[str, ...]:
    """The temperature forms that the points may carry; the information criterion chooses.

    Parameters
    ----------
    points : Measurements

    Returns
    -------
    tuple of str
        "a" at one temperature, "b/T" over a narrow span or for enthalpies alone, "a+b/T" for
        enthalpies beside other points, else both.
    """
    span = float(np.ptp(points.temperatures_K))
    enthalpies = len(points.enthalpies.number)
    if enthalpies:
        return ("a+b/T",) if points.n_points > enthalpies else ("b/T",)
    if span <= SAME_TEMPERATURE_K:
        return ("a",)
    return ("b/T",) if span < NARROW_K else ("b/T", "a+b/T")


def fit_points(
    name: str,
    forms: Sequence[str],
    points: Measurements,
    seen: Observations,
    *,
    alpha: float | None = 0.3,
    constants: PairConstants | None = None,
    most_folds: int = MOST_FOLDS,
) -> PointFit:
    """Fit one correlative equation to measured points.

    Parameters
    ----------
    name : str
        One of `groups.handoff.correlations.CORRELATIONS`.
    forms : sequence of str
        Temperature forms to try, the one with the fewest terms first; the lowest AICc is kept.
    points : Measurements
    seen : Observations
        Of the same points.
    alpha : float or None
        Non-randomness of NRTL; None to fit it.
    constants : PairConstants, optional
    most_folds : int
        Of the cross-validation; 0 to go without.

    Returns
    -------
    PointFit

    Raises
    ------
    TooFewPointsError
        If there are not more residuals than parameters.
    FitRefusedError
        Wilson's equation for a liquid seen to split; terms that the temperatures do not tell
        apart.
    ConvergenceError
        If no start arrived anywhere.

    Source
    ------
    AICc: Hurvich & Tsai, Biometrika 76 (1989) 297.
    """
    if name == "wilson" and len(points.solubilities.number):
        raise FitRefusedError(
            "Two liquids were measured, and Wilson's equation never splits a liquid.",
            cure="Take 'nrtl' or 'uniquac'.",
        )
    how, found = _best_form(name, forms, points, seen, alpha, constants)
    N, P = seen.n_residuals, how.n_parameters
    covariance = pair_covariance(how, found, independent=True)
    rms, folds = _cross_validated(how, seen, found, most_folds)
    return PointFit(
        name,
        how.form,
        how.model(found.parameters),
        parameters_of(how, found.parameters, covariance),
        covariance,
        correlation_of(covariance),
        float(np.sqrt(2.0 * found.cost / N)),
        akaike(2.0 * found.cost, N, P),
        rms,
        folds,
        found.residuals,
    )


def _best_form(
    name: str,
    forms: Sequence[str],
    points: Measurements,
    seen: Observations,
    alpha: float | None,
    constants: PairConstants | None,
) -> tuple[Formulation, Solution]:
    N = seen.n_residuals
    best: tuple[float, Formulation, Solution] | None = None
    for form in forms:
        how = formulation(name, form, _span(points), alpha=alpha, constants=constants)
        if how.n_parameters >= N:
            break
        found = solve(_PointResiduals(how, seen, np.arange(N)), _starts(how, points, seen))
        if how.ran_away(found.parameters, points.temperatures_K):
            continue
        score = akaike(2.0 * found.cost, N, how.n_parameters)
        if best is None or score < best[0]:
            best = score, how, found
    if best is None and how.n_parameters < N:
        raise FitRefusedError(
            f"The parameters of {name} run away without end: these points do not fix them.",
            cure="Give more points or better ones, or take another equation.",
        )
    if best is None:
        raise TooFewPointsError(
            f"{name} in the form '{how.form}' has {how.n_parameters} parameters, and the points "
            f"give {N} residual{'' if N == 1 else 's'}.",
            given=N,
            needed=how.n_parameters + 1,
        )
    return best[1], best[2]


def akaike(sum_of_squares: float, n: int, parameters: int) -> float:
    """AICc of a least-squares fit whose error variance is estimated too.

    Parameters
    ----------
    sum_of_squares : float
    n, parameters : int

    Returns
    -------
    float
        Infinite where the points are too few for the correction.
    """
    k = parameters + 1
    if n - k - 1 <= 0:
        return float("inf")
    fit = n * np.log(max(sum_of_squares, 1e-300) / n)
    return float(fit + 2.0 * k + 2.0 * k * (k + 1) / (n - k - 1))


def _span(points: Measurements) -> FloatArray:
    """Temperatures that tell terms apart; enthalpies at one temperature tell two."""
    T = points.temperatures_K
    if len(points.enthalpies.number) and np.ptp(T) < NARROW_K:
        middle = float(T.mean())
        return np.array([middle - NARROW_K, middle, middle + NARROW_K])
    return T


class _PointResiduals:
    """Weighted residuals of some rows, and their derivatives."""

    def __init__(self, how: Formulation, seen: Observations, rows: IntArray) -> None:
        self.how, self.seen, self.rows = how, seen, rows

    def __call__(self, p: FloatArray) -> tuple[FloatArray, FloatArray]:
        seen = self.seen
        x = seen.fractions[:, None, :]
        values, slopes = self.how.ln_gamma(p, seen.temperature_K, x)
        ln_gamma, slopes = values[:, 0], slopes[:, 0]
        enthalpy, enthalpy_slopes = self._enthalpy(p)
        r = seen.residuals(ln_gamma, enthalpy)
        J = seen.derivatives(ln_gamma, slopes, enthalpy_slopes)
        return r[self.rows], J[self.rows]

    def _enthalpy(self, p: FloatArray) -> tuple[FloatArray, FloatArray]:
        n = len(self.seen.enthalpy_J_mol)
        if not n:
            return np.empty(0), np.empty((0, len(p)))
        columns = []
        for k in range(len(p)):
            step = np.zeros(len(p))
            step[k] = _STEP
            up, down = self._enthalpy_at(p + step), self._enthalpy_at(p - step)
            columns.append((up - down) / (2.0 * _STEP))
        return self._enthalpy_at(p), np.stack(columns, axis=-1)

    def _enthalpy_at(self, p: FloatArray) -> FloatArray:
        T, x = self.seen.enthalpy_temperature_K, self.seen.enthalpy_fractions
        slope = (x * self.how.model(p).ln_gamma_slope(T, x)).sum(axis=1)
        return np.asarray(-GAS_CONSTANT_J_MOL_K * T**2 * slope)


def _starts(how: Formulation, points: Measurements, seen: Observations) -> list[FloatArray]:
    T = float(np.median(points.temperatures_K))
    no_enthalpy = seen.enthalpy_J_mol  # as measured: residual zero, as constant u says nothing

    def cost(u: FloatArray, alpha: float | None) -> FloatArray:
        values = lattice_ln_gamma(how, u, alpha, seen.fractions)
        return np.array([float((seen.residuals(v, no_enthalpy) ** 2).sum()) for v in values])

    size = _margules_size(seen)
    ranked = starts(how, cost, (size, size), _span(points))
    if not len(seen.temperature_K):  # enthalpies alone: any gentle start
        ranked = [how.start(0.3, 0.3, 0.3, np.array([T]).repeat(how.n_terms))]
    return ranked


def _margules_size(seen: Observations) -> float:
    """About ln gamma at infinite dilution, out of gE at the boiling points, else of the ends."""
    if seen.boiling:
        x = seen.fractions[: seen.boiling]
        weight = x[:, 0] * x[:, 1]
        ideal = np.log(np.maximum((x * np.exp(seen.ln_saturation)).sum(axis=1), 1e-300))
        excess = seen.ln_pressure - ideal
        total = float((weight**2).sum())
        return float((weight * excess).sum() / total) if total > 0.0 else 0.5
    if seen.activities:
        return float(seen.ln_gamma_measured.mean())
    return 2.5 if seen.liquids else 0.5


def _cross_validated(
    how: Formulation, seen: Observations, found: Solution, most: int
) -> tuple[float, int]:
    """Root mean square of the residuals of points left out, over folds in the order of x1."""
    numbers = np.unique(seen.number)
    folds = min(most, len(numbers))
    if folds < 2:
        return float("nan"), 0
    first = np.array([seen.x1[seen.number == n][0] for n in numbers])
    order = numbers[np.argsort(first, kind="stable")]
    size = int(seen.number.max()) + 1
    total, count = 0.0, 0
    for fold in range(folds):
        out = np.zeros(size, dtype=bool)
        out[order[fold::folds]] = True
        kept, left = seen.rows(~out), seen.rows(out)
        if len(kept) <= how.n_parameters:
            return float("nan"), 0
        try:
            again = solve(_PointResiduals(how, seen, kept), [found.parameters], FOLD_EVALUATIONS)
        except ConvergenceError:
            return float("nan"), 0
        if how.ran_away(again.parameters, seen.temperature_K):
            return float("nan"), 0
        values, _ = _PointResiduals(how, seen, left)(again.parameters)
        total, count = total + float((values**2).sum()), count + len(left)
    return float(np.sqrt(total / count)), folds
