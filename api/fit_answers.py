"""From a fit to its schema."""

from api import answers
from api.json_values import json_value
from api.schemas.equilibrium import AzeotropeResult
from api.schemas.fits import (
    Effects,
    FitRequest,
    FitResponse,
    FittedNumber,
    FittedPair,
    Note,
    RefusedPair,
    Residual,
    SplitBeforeAndAfter,
    TripleCheck,
)
from api.schemas.parameter_sheet import ParameterSheet
from groups.equilibrium import Azeotrope
from groups.handoff import FitAnswer
from groups.handoff.fits import FitEffects, PairFit


def fit(answer: FitAnswer, request: FitRequest) -> FitResponse:
    """A fit as the service answers it."""
    lines = answer.vapour_pressures
    return FitResponse(
        components=answers.identities(answer.components),
        method=answer.method,
        methods_used=answers.methods_used(answer.methods_used),
        model=request.model,
        form=request.form,
        temperature_range_K=list(answer.temperature_range_K),
        pressure_kPa=answer.pressure_kPa,
        weighting=answer.weighting,
        pairs=[_pair(one) for one in answer.fit.pairs],
        refused=[
            RefusedPair(components=list(one.pair), reason=one.reason) for one in answer.fit.refused
        ],
        triples=[TripleCheck.model_validate(json_value(one)) for one in answer.fit.triples],
        azeotropes_predicted=azeotropes(answer.azeotropes_predicted),
        azeotropes_fitted=azeotropes(answer.azeotropes_fitted),
        notes=[Note.model_validate(json_value(one)) for one in answer.notes],
        sheet=None
        if answer.parameters is None
        else ParameterSheet.model_validate(json_value(answer.parameters)),
        vapour_pressures=[] if lines is None else answers.vapour_pressures(lines),
        confidence=answers.confidence(answer.confidence),
        cautions=answers.cautions(),
    )


def azeotropes(found: tuple[Azeotrope, ...] | None) -> list[AzeotropeResult] | None:
    """Azeotropes, or null where they were not looked for."""
    return None if found is None else [answers.azeotrope(one) for one in found]


def _pair(one: PairFit) -> FittedPair:
    return FittedPair(
        components=list(one.pair),
        accepted=one.accepted,
        parameters=[FittedNumber.model_validate(json_value(p)) for p in one.parameters],
        covariance=[answers.numbers(row) for row in one.covariance],
        correlation=[answers.numbers(row) for row in one.correlation],
        covariance_basis=one.covariance_basis,
        residual=Residual.model_validate(json_value(one.residual)),
        effects=_effects(one.effects),
        notes=[Note.model_validate(json_value(note)) for note in one.notes],
        starts=one.starts,
        agreeing_starts=one.agreeing_starts,
    )


def _effects(found: FitEffects) -> Effects:
    return Effects(
        splits=[SplitBeforeAndAfter.model_validate(json_value(one)) for one in found.splits],
        azeotropes_predicted=azeotropes(found.azeotropes_predicted),
        azeotropes_fitted=azeotropes(found.azeotropes_fitted),
        pressure_kPa=found.pressure_kPa,
        ln_relative_volatility_rms=answers.number(found.ln_relative_volatility_rms),
        ln_relative_volatility_largest=answers.number(found.ln_relative_volatility_largest),
        temperature_K=answers.number(found.temperature_K),
        x1=answers.number(found.x1),
    )
