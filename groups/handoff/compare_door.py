"""The door of comparisons: measured points in, every model beside them out."""

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from groups.activity import IdealModel
from groups.activity.choice import OnMissing
from groups.equilibrium import LiquidModel, VapourModel, binary_split
from groups.equilibrium.binary_split import may_split
from groups.errors import (
    ConvergenceError,
    FitRefusedError,
    PredictionError,
    TooFewPointsError,
    UnknownMethodError,
)
from groups.handoff.comparisons.answers import (
    ComparedModel,
    ComparisonAnswer,
    LeftOut,
    Mark,
)
from groups.handoff.comparisons.consistency import consistency
from groups.handoff.comparisons.deviations import by_region, point_deviations
from groups.handoff.comparisons.marks import swap_mark, unit_mark
from groups.handoff.comparisons.measurements import Measurements
from groups.handoff.comparisons.observations import Observations, observations
from groups.handoff.comparisons.recommendation import recommendation
from groups.handoff.comparisons.regression import automatic_forms, fit_points
from groups.handoff.correlations import CORRELATIONS
from groups.handoff.fits.component_constants import size_parameters
from groups.handoff.fits.formulation import PairConstants
from groups.handoff.sheets import ParameterSet, points_parameter_set
from groups.prediction.checks import check_components
from groups.prediction.choosing import ALL_METHODS
from groups.prediction.component import Component
from groups.prediction.liquid import liquid
from groups.pure import VapourPressure, vapour_pressure
from groups.structure.identify import identified
from groups.structure.molecule import Molecule

#: Fewer points than this say little of any model.
FEW_POINTS = 4


@dataclass(frozen=True, slots=True)
class _Scene:
    """What every model is compared against."""

    molecules: tuple[Molecule, Molecule]
    points: Measurements
    lines: tuple[VapourPressure, VapourPressure] | None
    vapour: VapourModel | None
    seen: Observations


def compare(
    components: Sequence[Component],
    points: Measurements,
    *,
    methods: Sequence[str] = ALL_METHODS,
    models: Sequence[str] = CORRELATIONS,
    form: str = "auto",
    alpha: float | None = 0.3,
    on_missing: OnMissing = "estimate",
    vapour: VapourModel | None = None,
) -> ComparisonAnswer:
    """Test measured points, and compare every method and every fitted equation with them.

    Parameters
    ----------
    components : sequence of two Component
        Component 1 is the one that x1 and y1 belong to.
    points : Measurements
        From `read_records`, `read_csv` or `groups.handoff.thermoml.read_measurements`.
    methods : sequence of str
        Predictions, of `groups.prediction.ALL_METHODS`.
    models : sequence of str
        Equations to fit, of `groups.handoff.correlations.CORRELATIONS`.
    form : str
        Temperature form of the fitted equations; "auto" takes what the points can carry.
    alpha : float or None
        Non-randomness of NRTL; None to fit it.
    on_missing : {"refuse", "estimate"}
    vapour : VapourModel, optional
        A real vapour; ideal where not given.

    Returns
    -------
    ComparisonAnswer
        Models that cannot be had, or not be fitted, stand in `left_out` with the reason.

    Raises
    ------
    UnknownMethodError
        For an identifier that does not exist.
    ShapeError, DuplicateComponentError
        If the components are not two different molecules.
    NoVapourPressureError
        If boiling points are given and a vapour pressure is not to be had.
    """
    check_components([c.molecule for c in components], least=2, most=2)
    _check_names(methods, models)
    first, second = (c.molecule for c in components)
    lines = _lines(components, points)
    reference = _reference((first, second), on_missing)
    seen = observations(points, lines, reference, vapour)
    scene = _Scene((first, second), points, lines, vapour, seen)
    predicted, refused = _predicted(scene, methods, on_missing)
    fitted, unfit = _fitted(scene, models, form, alpha)
    both = (*predicted, *fitted)
    tested = consistency(points.vapour_liquid, seen, lines)
    return ComparisonAnswer(
        (_named(first), _named(second)),
        points,
        seen,
        tested,
        both,
        (*refused, *unfit),
        recommendation(both, points),
        _marks(scene, reference, predicted, fitted),
        lines,
    )


def _check_names(methods: Sequence[str], models: Sequence[str]) -> None:
    for name in methods:
        if name not in ALL_METHODS:
            raise UnknownMethodError(name, ALL_METHODS)
    for name in models:
        if name not in CORRELATIONS:
            raise UnknownMethodError(name, CORRELATIONS)


def _lines(
    components: Sequence[Component], points: Measurements
) -> tuple[VapourPressure, VapourPressure] | None:
    T = points.vapour_liquid.temperature_K
    if not len(T):
        return None
    span = (float(T.min()), float(T.max()))
    first, second = (
        vapour_pressure(c.molecule, c.vapour_pressure, temperature_K=span) for c in components
    )
    return first, second


def _reference(molecules: tuple[Molecule, Molecule], on_missing: OnMissing) -> LiquidModel:
    try:
        return liquid(molecules, "auto", on_missing).model
    except PredictionError:
        return IdealModel(2)


def _predicted(
    scene: _Scene, methods: Sequence[str], on_missing: OnMissing
) -> tuple[list[ComparedModel], list[LeftOut]]:
    found, refused = [], []
    for name in methods:
        try:
            own = liquid(scene.molecules, name, on_missing)
        except PredictionError as error:
            refused.append(LeftOut(name, str(error)))
            continue
        if name not in ("auto", own.method):
            refused.append(LeftOut(name, own.methods_used[0].why))
            continue
        found.append(_compared(scene, name, own.method, own.model))
    return found, refused


def _compared(scene: _Scene, name: str, table: str, model: LiquidModel) -> ComparedModel:
    listed = point_deviations(scene.points, model, scene.lines, scene.vapour)
    regions = by_region(listed, scene.seen, scene.seen.of_model(model))
    return ComparedModel(name, "predicted", table, model, regions, listed, None)


def _fitted(
    scene: _Scene, models: Sequence[str], form: str, alpha: float | None
) -> tuple[list[ComparedModel], list[LeftOut]]:
    found, refused = [], []
    taken = automatic_forms(scene.points) if form == "auto" else (form,)
    for name in models:
        try:
            constants = None
            if name == "uniquac":
                sizes = size_parameters(scene.molecules)
                constants = PairConstants(sizes.volumes, sizes.surfaces)
            fit = fit_points(
                name, taken, scene.points, scene.seen, alpha=alpha, constants=constants
            )
        except (FitRefusedError, TooFewPointsError, ConvergenceError, PredictionError) as error:
            refused.append(LeftOut(name, str(error)))
            continue
        listed = point_deviations(scene.points, fit.model, scene.lines, scene.vapour)
        regions = by_region(listed, scene.seen, fit.residuals)
        found.append(ComparedModel(name, "fitted", name, fit.model, regions, listed, fit))
    return found, refused


def parameters_of_fit(answer: ComparisonAnswer, name: str) -> ParameterSet:
    """The parameter sheet of an equation that a comparison fitted.

    Parameters
    ----------
    answer : ComparisonAnswer
    name : str
        Identifier of a fitted equation of the answer.

    Returns
    -------
    ParameterSet

    Raises
    ------
    UnknownMethodError
        If the answer holds no such fit.
    """
    fits = {m.name: m.fit for m in answer.models if m.fit is not None}
    if name not in fits:
        raise UnknownMethodError(name, tuple(fits))
    T = answer.measurements.temperatures_K
    return points_parameter_set(
        fits[name],
        answer.components,
        answer.vapour_pressures,
        (float(T.min()), float(T.max())),
        answer.measurements.n_points,
        sizes=size_parameters(answer.components) if name == "uniquac" else None,
    )


def _split_marks(scene: _Scene, fitted: list[ComparedModel]) -> list[Mark]:
    """A word where a fitted equation splits a liquid of which no split was measured."""
    if len(scene.points.solubilities.number):
        return []
    T = float(np.median(scene.points.temperatures_K))
    return [
        Mark(
            "fit_splits",
            f"{one.name} fitted to these points splits the liquid in two at {T:.1f} K, and no two "
            "liquids were measured: do not use it before that is settled.",
        )
        for one in fitted
        if _splits(one.model, T)
    ]


def _splits(model: LiquidModel, T: float) -> bool:
    # Fitted to wild points an equation may overflow somewhere; that is no split.
    with np.errstate(invalid="ignore", over="ignore", divide="ignore"):
        return bool(may_split(model, np.array([T]))) and binary_split(model, T) is not None


def _marks(
    scene: _Scene,
    reference: LiquidModel,
    predicted: list[ComparedModel],
    fitted: list[ComparedModel],
) -> tuple[Mark, ...]:
    marks = _split_marks(scene, fitted)
    models = [m.model for m in predicted]
    given = [m.weighted_rms for m in predicted]
    swap = swap_mark(scene.points, scene.lines, models, reference, given)
    unit = unit_mark(scene.points, scene.seen, reference)
    if scene.points.n_points < FEW_POINTS:
        marks.append(
            Mark(
                "few_points",
                f"{scene.points.n_points} point{'s' if scene.points.n_points > 1 else ''} can "
                "narrow a prediction but not choose between models.",
            )
        )
    if not np.isfinite(scene.seen.x1).all() or not scene.seen.n_residuals:
        marks.append(
            Mark("nothing_to_fit", "The points hold no number that a model can be fitted to.")
        )
    return (*(mark for mark in (unit, swap) if mark is not None), *marks)


def _named(molecule: Molecule) -> Molecule:
    return molecule if molecule.name is not None else identified(molecule)
