"""The door of fits: molecules and a range in, parameters of a flowsheet model out."""

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from groups.activity import GroupContributionModel, WeightedModel, activity_model
from groups.activity.choice import OnMissing
from groups.arrays import FloatArray
from groups.confidence import Confidence, graded
from groups.confidence.calibration import TableWeight
from groups.equilibrium import Azeotrope, LiquidModel, System, azeotropes
from groups.equilibrium.subset import SubsetLiquid
from groups.errors import InvalidInputError, OutOfRangeError
from groups.handoff.calibrated_sigma import SCATTER, calibrated_sigma
from groups.handoff.correlations import FORMS
from groups.handoff.correlations.build import equation_of
from groups.handoff.correlations.temperature_forms import form_terms
from groups.handoff.fits import (
    Boiling,
    FitNote,
    MixtureFit,
    PairConstants,
    fit_grid,
    fit_mixture,
)
from groups.handoff.fits.component_constants import (
    MolarVolumes,
    SizeParameters,
    molar_volumes,
    size_parameters,
)
from groups.handoff.fits.formulation import ALPHA_BOUNDS
from groups.handoff.fits.mixture import PairSigma
from groups.handoff.fits.target import COMPOSITIONS, SIGMA_LN_GAMMA, TEMPERATURES
from groups.handoff.sheets import ParameterSet, parameter_set
from groups.prediction.boiling_mixture import BoilingMixture, boiling_mixture
from groups.prediction.checks import check_components, check_pressures
from groups.prediction.component import Component
from groups.prediction.liquid import Liquid, liquid
from groups.pure import VapourPressure
from groups.structure.assignment import assign
from groups.structure.identify import identified
from groups.structure.molecule import Molecule

MOST_COMPONENTS = 12
#: A minimum-boiling azeotrope lies below the pure components; common practice, no source.
BELOW_K = 10.0


@dataclass(frozen=True, slots=True)
class FitAnswer:
    """A fit of one mixture.

    Attributes
    ----------
    components : tuple of Molecule
    method : str
        The table whose prediction was fitted.
    methods_used : tuple of TableWeight
    prediction : LiquidModel
        What was fitted.
    temperatures_K, compositions : FloatArray of shape (t,) and (m,)
        The grid of each pair.
    pressure_kPa : float or None
        At which azeotropes were compared.
    fit : MixtureFit
    parameters : ParameterSet or None
        The sheet; None where every pair was refused.
    vapour_pressures : tuple of VapourPressure or None
    azeotropes_predicted, azeotropes_fitted : tuple of Azeotrope or None
        Of the whole mixture at `pressure_kPa`, of three or four components; None otherwise.
    weighting : str
        What the values were weighted by, in words.
    notes : tuple of FitNote
        Of the mixture as a whole.
    confidence : Confidence
        Of the prediction that was fitted, over the grid.
    """

    components: tuple[Molecule, ...]
    method: str
    methods_used: tuple[TableWeight, ...]
    prediction: LiquidModel
    temperatures_K: FloatArray
    compositions: FloatArray
    pressure_kPa: float | None
    fit: MixtureFit
    parameters: ParameterSet | None
    vapour_pressures: tuple[VapourPressure, ...] | None
    azeotropes_predicted: tuple[Azeotrope, ...] | None
    azeotropes_fitted: tuple[Azeotrope, ...] | None
    weighting: str
    notes: tuple[FitNote, ...]
    confidence: Confidence

    @property
    def temperature_range_K(self) -> tuple[float, float]:
        """Lowest and highest temperature of the fit, K."""
        return float(self.temperatures_K[0]), float(self.temperatures_K[-1])


@dataclass(frozen=True, slots=True)
class _Sizes:
    """What the equation needs of the components, with its sources."""

    constants: PairConstants
    sizes: SizeParameters | None
    volumes: MolarVolumes | None


def fit(
    components: Sequence[Component],
    *,
    model: str = "nrtl",
    form: str = "a+b/T",
    alpha: float | None = 0.3,
    wilson_volumes: bool = False,
    temperature_range_K: tuple[float, float] | None = None,
    pressure_kPa: float | None = None,
    temperatures: int = TEMPERATURES,
    compositions: int = COMPOSITIONS,
    sigma: float | PairSigma | None = None,
    method: str = "auto",
    on_missing: OnMissing = "estimate",
) -> FitAnswer:
    """Fit a correlative equation to the prediction, for a pair or for all pairs of a mixture.

    Parameters
    ----------
    components : sequence of Component
        2 to 12; two for "van-laar", "margules-2" and "margules-3".
    model : str
        One of `groups.handoff.correlations.CORRELATIONS`.
    form : str
        Temperature form, a key of `groups.handoff.correlations.FORMS`.
    alpha : float or None
        Non-randomness of NRTL, held fixed, 0.05 to 0.9; None to fit it.
    wilson_volumes : bool
        True: Wilson's equation with liquid molar volumes.
    temperature_range_K : tuple of float, optional
        Range of the fit, K. Where not given, from the boiling points at `pressure_kPa`.
    pressure_kPa : float, optional
        Where azeotropes of prediction and fit are compared, kPa.
    temperatures, compositions : int
        Points of the grid: 1 to 51 and 5 to 401.
    sigma : float or callable, optional
        Standard deviation of the predicted ln gamma: one number, or a function of the pair (i, j),
        temperatures (t,) and x1 (m,) that answers what broadcasts to (t, m, 2). Where not given,
        that of the calibrated intervals for "auto", and equal weights for other methods.
    method : str
        An identifier of `groups.prediction.ALL_METHODS`.
    on_missing : {"refuse", "estimate"}

    Returns
    -------
    FitAnswer

    Raises
    ------
    InvalidInputError
        If neither range nor pressure is given, or something lies outside its range.
    FitRefusedError
        If the equation cannot describe the pair, or the form not the range.
    PredictionError
        If no table gives the numbers, or no vapour pressure where a pressure is given.

    Source
    ------
    See `groups.handoff.correlations` for the equations.
    """
    check_components([c.molecule for c in components], least=2, most=MOST_COMPONENTS)
    _check(model, form, alpha, len(components), temperature_range_K, pressure_kPa)
    mixture, boiling = _mixture(components, method, on_missing, pressure_kPa)
    span = temperature_range_K or _boiling_range(boiling, pressure_kPa)
    T, x1 = fit_grid(span, temperatures, compositions)
    spread, weighting = _weights(sigma, mixture, method, on_missing, float(np.median(T)))
    own = _sizes(model, mixture.molecules, wilson_volumes=wilson_volumes)
    lines = None if boiling is None else boiling.lines
    found = fit_mixture(
        mixture.model,
        T,
        x1,
        spread,
        model,
        form,
        alpha=alpha,
        constants=own.constants,
        pair_liquid=lambda i, j: _pair_model(mixture.model, mixture.molecules, (i, j)),
        boiling=None
        if lines is None or pressure_kPa is None
        else lambda i, j: Boiling((lines[i], lines[j]), pressure_kPa),
    )
    before, after = _mixture_azeotropes(boiling, found, pressure_kPa)
    named = tuple(_named(molecule) for molecule in mixture.molecules)
    origin = f"ln gamma by {mixture.method}, {len(T)} temperatures x {len(x1)} compositions a pair"
    sheet = None
    if found.pairs:
        sheet = parameter_set(
            found.pairs,
            named,
            lines,
            (float(T[0]), float(T[-1])),
            origin,
            predicted=True,
            sizes=own.sizes,
            volumes=own.volumes,
        )
    return FitAnswer(
        named,
        mixture.method,
        mixture.methods_used,
        mixture.model,
        T,
        x1,
        pressure_kPa,
        found,
        sheet,
        lines,
        before,
        after,
        weighting,
        _mixture_notes(before, after),
        graded(mixture.reasons(*_corners(T, len(components)))),
    )


def _weights(
    sigma: float | PairSigma | None,
    mixture: Liquid,
    method: str,
    on_missing: OnMissing,
    temperature_K: float,
) -> tuple[PairSigma, str]:
    """The standard deviations of ln gamma, and what they stand on."""
    if callable(sigma):
        return sigma, "standard deviations of ln gamma as given"
    own = None
    if sigma is None and method == "auto":
        own = calibrated_sigma(mixture.molecules, on_missing, temperature_K)
    if own is not None:
        return own, (
            "each ln gamma by the standard deviation of its calibrated interval at "
            f"{temperature_K:.2f} K, joined with {SCATTER:g} for the scatter of good measurements"
        )
    each = SIGMA_LN_GAMMA if sigma is None else sigma
    return (
        lambda _pair, _T, _x1: each,
        f"equal weights, standard deviation {each:g} of every ln gamma",
    )


def _check(
    model: str,
    form: str,
    alpha: float | None,
    n: int,
    span: tuple[float, float] | None,
    pressure_kPa: float | None,
) -> None:
    one = np.ones(n)
    equation_of(model, n, alpha=0.3, volumes=one, surfaces=one)  # refuses what does not exist
    form_terms(form)
    if alpha is not None and not ALPHA_BOUNDS[0] <= alpha <= ALPHA_BOUNDS[1]:
        raise OutOfRangeError("alpha", alpha, *ALPHA_BOUNDS)
    if pressure_kPa is not None:
        check_pressures(pressure_kPa)
    if span is None and pressure_kPa is None:
        raise InvalidInputError(
            "A fit needs a range of temperature, or a pressure whose boiling range is taken.",
            cure="Give 'temperature_range_K', 'pressure_kPa' or both.",
            field="temperature_range_K",
        )
    if span is not None and span[0] == span[1] and len(FORMS[form]) > 1:
        raise InvalidInputError(
            f"One temperature cannot fix the form '{form}'.",
            cure="Take the form 'a' or 'b/T', or a range of temperature.",
            field="form",
        )


def _mixture(
    components: Sequence[Component],
    method: str,
    on_missing: OnMissing,
    pressure_kPa: float | None,
) -> tuple[Liquid, BoilingMixture | None]:
    if pressure_kPa is None:
        return liquid([c.molecule for c in components], method, on_missing), None
    boiling = boiling_mixture(components, method, on_missing, pressure_kPa=pressure_kPa)
    return boiling.liquid, boiling


def _boiling_range(
    boiling: BoilingMixture | None, pressure_kPa: float | None
) -> tuple[float, float]:
    assert boiling is not None
    assert pressure_kPa is not None
    at = [line.boiling_temperature(pressure_kPa) for line in boiling.lines]
    return min(at) - BELOW_K, max(at)


def _sizes(model: str, molecules: Sequence[Molecule], *, wilson_volumes: bool) -> _Sizes:
    if model == "uniquac":
        sizes = size_parameters(molecules)
        return _Sizes(PairConstants(sizes.volumes, sizes.surfaces), sizes, None)
    if model == "wilson" and wilson_volumes:
        volumes = molar_volumes(molecules)
        return _Sizes(PairConstants(None, None, volumes.cm3_mol), None, volumes)
    return _Sizes(PairConstants(), None, None)


def _mixture_azeotropes(
    boiling: BoilingMixture | None, found: MixtureFit, pressure_kPa: float | None
) -> tuple[tuple[Azeotrope, ...] | None, tuple[Azeotrope, ...] | None]:
    """Azeotropes of the whole mixture before and after; pairs alone are compared pair by pair."""
    if boiling is None or found.model is None or not 3 <= len(boiling.lines) <= 4:
        return None, None
    system = System(found.model, boiling.lines)
    before = azeotropes(boiling.system, pressure_kPa=pressure_kPa)
    return before, azeotropes(system, pressure_kPa=pressure_kPa)


def _mixture_notes(
    before: tuple[Azeotrope, ...] | None, after: tuple[Azeotrope, ...] | None
) -> tuple[FitNote, ...]:
    if before is None or after is None:
        return ()

    def higher(found: tuple[Azeotrope, ...]) -> list[tuple[int, ...]]:
        return sorted(one.components for one in found if len(one.components) > 2)

    if higher(before) == higher(after):
        return ()
    return (
        FitNote(
            "higher_azeotropes_changed",
            f"The prediction has {len(higher(before))} azeotropes of three or more components, the "
            f"mixture of the fitted pairs {len(higher(after))}.",
            True,
        ),
    )


def _pair_model(
    model: LiquidModel, molecules: Sequence[Molecule], pair: tuple[int, int]
) -> LiquidModel:
    """A pair's own small model by the same tables: the mixture's numbers, sooner."""
    if isinstance(model, WeightedModel):
        parts = [_pair_model(part, molecules, pair) for part in model.models]
        return WeightedModel(tuple(parts), model.weights)  # type: ignore[arg-type]
    if isinstance(model, GroupContributionModel):
        counts = [assign(molecules[k], model.method).counts for k in pair]
        return activity_model(counts, model.method)
    return SubsetLiquid(model, pair)


def _named(molecule: Molecule) -> Molecule:
    return molecule if molecule.name is not None else identified(molecule)


def _corners(T: FloatArray, n: int) -> tuple[FloatArray, FloatArray]:
    """The grid's ends in temperature at each pure component and at the equimolar mixture."""
    x = np.concatenate([np.eye(n), np.full((1, n), 1.0 / n)])
    return np.repeat(T[[0, -1]], len(x)), np.tile(x, (2, 1))
