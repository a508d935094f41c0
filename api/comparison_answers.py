"""From measured points to a comparison, and from it to its schema."""

from dataclasses import dataclass

import numpy as np

from api import answers
from api.json_values import json_value
from api.molecules_in import components_of
from api.schemas.comparisons import (
    BestInRegion,
    ComparedModel,
    ComparisonRequest,
    ComparisonResponse,
    Conditioned,
    Consistency,
    LeftOut,
    Mark,
    PointDeviation,
    PointFit,
    Recommendation,
    RegionDeviations,
    UncertainDiagram,
)
from api.schemas.confidence import Interval
from api.schemas.fits import FittedNumber
from api.schemas.parameter_sheet import ParameterSheet
from groups import handoff
from groups.arrays import FloatArray
from groups.errors import InvalidInputError, MixwrightError
from groups.handoff.comparisons import ComparedModel as GroupsModel
from groups.handoff.correlations import CORRELATIONS
from groups.handoff.thermoml import read_thermoml
from groups.prediction import ALL_METHODS, Component
from groups.prediction.vapours import VapourUsed


@dataclass(frozen=True, slots=True)
class Compared:
    """A comparison with the diagram before and after, as pictures and answers need it."""

    answer: handoff.ComparisonAnswer
    conditioned: handoff.Conditioned | None
    vapour: VapourUsed | None
    notes: tuple[str, ...]


def compared(request: ComparisonRequest, most_points: int) -> Compared:
    """The comparison that a request asks for."""
    components = components_of(request.components)
    points, notes = _points(request, components)
    if points.n_points > most_points:
        raise InvalidInputError(
            f"{points.n_points} points are given; this service takes at most {most_points}.",
            cure="Split the data by temperature or pressure, or by source.",
            field=_given(request),
        )
    vapour = handoff.vapour_over(components, points, request.vapour, request.on_missing)
    answer = handoff.compare(
        components,
        points,
        methods=ALL_METHODS if request.methods is None else list(dict.fromkeys(request.methods)),
        models=CORRELATIONS if request.models is None else list(dict.fromkeys(request.models)),
        form=request.form,
        alpha=None if request.alpha == "fit" else request.alpha,
        on_missing=request.on_missing,
        vapour=None if vapour is None else vapour[0],
    )
    conditioned = handoff.condition(
        components,
        answer,
        pressure_kPa=request.pressure_kPa,
        temperature_K=request.temperature_K,
        points=request.diagram_points,
        on_missing=request.on_missing,
        vapour=request.vapour,
    )
    return Compared(answer, conditioned, None if vapour is None else vapour[1], notes)


def _given(request: ComparisonRequest) -> str:
    return next(n for n in ("points", "csv", "thermoml") if getattr(request, n) is not None)


def _points(
    request: ComparisonRequest, components: list[Component]
) -> tuple[handoff.Measurements, tuple[str, ...]]:
    first, second = components[0].molecule, components[1].molecule
    masses = (first.molar_mass_g_mol, second.molar_mass_g_mol)
    units = handoff.Units(**request.units.model_dump())
    try:
        if request.thermoml is not None:
            read = read_thermoml(request.thermoml, (first, second))
            return read.measurements, read.left_out
        if request.csv is not None:
            return handoff.read_csv(request.csv, masses, units), ()
        return handoff.read_records(request.points or [], masses, units), ()
    except MixwrightError as error:
        if request.points is None and (error.field or "points").startswith("points"):
            error.field = _given(request)  # a text has no field of its own for a point
        raise


def comparison(found: Compared) -> ComparisonResponse:
    """A comparison as the service answers it."""
    answer = found.answer
    lines = answer.vapour_pressures
    advice = answer.recommendation
    return ComparisonResponse(
        components=answers.identities(answer.components),
        points=answer.measurements.n_points,
        marks=[Mark.model_validate(json_value(one)) for one in answer.marks],
        consistency=Consistency.model_validate(json_value(answer.consistency)),
        models=[_model(answer, one) for one in answer.models],
        left_out=[LeftOut(name=one.name, reason=one.reason) for one in answer.left_out],
        recommendation=Recommendation(
            model=advice.model,
            kind=advice.kind,
            by_region=[
                BestInRegion(region=region, model=model, weighted_rms=answers.number(rms))
                for region, model, rms in advice.by_region
            ],
            holds_for=advice.holds_for,
            text=advice.text,
        ),
        conditioned=None if found.conditioned is None else _conditioned(found.conditioned),
        vapour_pressures=[] if lines is None else answers.vapour_pressures(lines),
        vapour=None if found.vapour is None else answers.vapour_used(found.vapour),
        notes=list(found.notes),
        cautions=answers.cautions(),
    )


def _model(answer: handoff.ComparisonAnswer, one: GroupsModel) -> ComparedModel:
    fit = one.fit
    return ComparedModel(
        name=one.name,
        kind=one.kind,
        table=one.table,
        regions=[RegionDeviations.model_validate(json_value(r)) for r in one.regions],
        points=[PointDeviation.model_validate(json_value(p)) for p in one.points],
        fit=None
        if fit is None
        else PointFit(
            form=fit.form,
            parameters=[FittedNumber.model_validate(json_value(p)) for p in fit.parameters],
            covariance=[answers.numbers(row) for row in fit.covariance],
            correlation=[answers.numbers(row) for row in fit.correlation],
            weighted_rms=answers.number(fit.weighted_rms),
            aicc=answers.number(fit.aicc),
            cross_validated_rms=answers.number(fit.cross_validated_rms),
            folds=fit.folds,
            sheet=ParameterSheet.model_validate(
                json_value(handoff.parameters_of_fit(answer, one.name))
            ),
        ),
    )


def _conditioned(found: handoff.Conditioned) -> Conditioned:
    return Conditioned(
        kind=found.kind,
        x1=found.before.diagram.x1.tolist(),
        before=_diagram(found.before, found.ln_gamma_infinite_before),
        after=_diagram(found.after, found.ln_gamma_infinite_after),
        scatter=found.scatter,
        text=conditioned_text(found),
    )


def _diagram(found: handoff.UncertainDiagram, infinite: FloatArray) -> UncertainDiagram:
    drawn, bands = found.diagram, found.bands
    ratio = bands.relative_volatility
    return UncertainDiagram(
        y1=answers.numbers(drawn.y1),
        temperature_K=answers.numbers(drawn.temperature_K),
        pressure_kPa=answers.numbers(drawn.pressure_kPa),
        y1_lower=answers.numbers(bands.vapour.lower[:, 0]),
        y1_upper=answers.numbers(bands.vapour.upper[:, 0]),
        temperature_K_lower=answers.numbers(bands.temperature_K.lower),
        temperature_K_upper=answers.numbers(bands.temperature_K.upper),
        pressure_kPa_lower=answers.numbers(bands.pressure_kPa.lower),
        pressure_kPa_upper=answers.numbers(bands.pressure_kPa.upper),
        relative_volatility_lower=answers.numbers(ratio.lower[:, 0]),
        relative_volatility_upper=answers.numbers(ratio.upper[:, 0]),
        azeotropes=[answers.azeotrope(one) for one in drawn.azeotropes],
        azeotrope_chance=answers.azeotrope_chance(found.azeotrope),
        ln_gamma_infinite=infinite[:, 1].tolist(),
        ln_gamma_infinite_90=[Interval(lower=low, upper=up) for low, _, up in infinite.tolist()],
    )


def conditioned_text(found: handoff.Conditioned) -> str:
    """What the points change, in words."""
    name, unit = ("temperature", "K") if found.kind == "Txy" else ("pressure", "kPa")
    before, after = (_width(one, found.kind) for one in (found.before, found.after))
    words = [
        f"The 90 % interval of the boiling {name} is {before:.2g} {unit} wide on average before "
        f"the points and {after:.2g} {unit} with them.",
        f"Azeotrope: {_azeotrope(found.before)} before; {_azeotrope(found.after)} with them.",
    ]
    if found.scatter > 1.0:
        words.append(
            f"The points scatter {found.scatter:.1f} times as much as their uncertainties say, and "
            "count for that much less."
        )
    return " ".join(words)


def _width(found: handoff.UncertainDiagram, kind: str) -> float:
    band = found.bands.temperature_K if kind == "Txy" else found.bands.pressure_kPa
    return float(np.nanmean(band.upper - band.lower))


def _azeotrope(found: handoff.UncertainDiagram) -> str:
    """Where it lies, the interval of the place, and how probable it is."""
    chance, x1 = found.azeotrope.probability, found.azeotrope.x1
    at = ", ".join(f"{one.mole_fractions[0]:.3f}" for one in found.diagram.azeotropes)
    place = f"x1 {at}" if at else "none"
    if x1 is not None:
        place += f" ({x1.lower:.3f} to {x1.upper:.3f})"
    return f"{place}, probability {100.0 * chance:.0f} %"
