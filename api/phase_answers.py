"""From the answers on liquids, residue curves and gases to their schemas."""

import numpy as np

from api.answers import (
    cautions,
    confidence,
    identities,
    identity,
    interval,
    methods_used,
    number,
    numbers,
    vapour_pressures,
    vapour_used,
)
from api.schemas.gas_solubility import GasSolubilityPoint, GasSolubilityResponse
from api.schemas.liquid_regions import (
    ConsolutePoint,
    MutualSolubilitiesResponse,
    SplitChanceAt,
    TernaryDiagramResponse,
    TieLine,
    TwoLiquidRegion,
)
from api.schemas.residue_curves import FixedPoint, ResidueCurve, ResidueCurvesResponse
from groups import equilibrium
from groups.arrays import FloatArray
from groups.prediction import (
    GasSolubilityAnswer,
    MutualSolubilityAnswer,
    ResidueMapAnswer,
    TernaryDiagramAnswer,
)
from groups.prediction.ternary_diagrams import binodal_line, tie_lines_shown


def mutual_solubilities(answer: MutualSolubilityAnswer) -> MutualSolubilitiesResponse:
    """Two liquids over temperature."""
    found = answer.found
    return MutualSolubilitiesResponse(
        components=identities(answer.components),
        method=answer.method,
        methods_used=methods_used(answer.methods_used),
        temperature_K=found.temperature_K.tolist(),
        splits=found.splits.tolist(),
        x1_poor=numbers(found.first[:, 0]),
        x1_rich=numbers(found.second[:, 0]),
        consolute_points=[
            ConsolutePoint(
                kind=point.kind,
                temperature_K=point.temperature_K,
                x1=float(point.mole_fractions[0]),
            )
            for point in found.consolute_points
        ],
        chances=[
            SplitChanceAt(
                temperature_K=T,
                probability=chance.probability,
                x1_lower=interval(chance.x1_lower),
                x1_upper=interval(chance.x1_upper),
            )
            for T, chance in answer.chances
        ],
        confidence=confidence(answer.confidence),
        cautions=cautions(),
    )


def ternary_diagram(answer: TernaryDiagramAnswer) -> TernaryDiagramResponse:
    """Two-liquid regions of a ternary."""
    return TernaryDiagramResponse(
        components=identities(answer.components),
        method=answer.method,
        methods_used=methods_used(answer.methods_used),
        temperature_K=answer.found.temperature_K,
        regions=[_region(region, answer.every) for region in answer.found.regions],
        three_liquids=[triangle.tolist() for triangle in answer.found.triangles],
        confidence=confidence(answer.confidence),
        cautions=cautions(),
    )


def _region(region: equilibrium.TwoLiquidRegion, every: int) -> TwoLiquidRegion:
    return TwoLiquidRegion(
        tie_lines=[
            TieLine(first=a.tolist(), second=b.tolist(), distribution=numbers(_ratio(b, a)))
            for a, b in tie_lines_shown(region, every)
        ],
        plait_points=[point.tolist() for point in region.plait_points],
        binodal=binodal_line(region).tolist(),
    )


def _ratio(above: FloatArray, below: FloatArray) -> FloatArray:
    return np.divide(above, below, out=np.full_like(above, np.nan), where=below > 0.0)


def residue_curves(answer: ResidueMapAnswer) -> ResidueCurvesResponse:
    """Fixed points, curves and boundaries."""
    found = answer.found
    return ResidueCurvesResponse(
        components=identities(answer.components),
        method=answer.method,
        methods_used=methods_used(answer.methods_used),
        pressure_kPa=found.pressure_kPa,
        fixed_points=[
            FixedPoint(
                mole_fractions=point.mole_fractions.tolist(),
                temperature_K=point.temperature_K,
                stability=point.stability,
                azeotrope=point.azeotrope is not None,
                stable_liquid=point.azeotrope is None or point.azeotrope.stable_liquid,
            )
            for point in found.fixed_points
        ],
        curves=[_curve(curve) for curve in found.curves],
        boundaries=[_curve(curve) for curve in found.boundaries],
        index_balanced=found.index_balanced,
        vapour_pressures=vapour_pressures(answer.vapour_pressures),
        vapour=vapour_used(answer.vapour),
        confidence=confidence(answer.confidence),
        cautions=cautions(),
    )


def _curve(curve: equilibrium.ResidueCurve) -> ResidueCurve:
    return ResidueCurve(
        mole_fractions=curve.mole_fractions.tolist(),
        temperature_K=numbers(curve.temperature_K),
        begins=curve.begins,
        ends=curve.ends,
    )


def gas_solubility(answer: GasSolubilityAnswer) -> GasSolubilityResponse:
    """Solubility of one gas over temperature."""
    columns = (
        answer.temperature_K.tolist(),
        answer.henry_kPa,
        answer.solvent_pressure_kPa,
        answer.gas_mole_fraction,
        answer.liquid,
        answer.vapour,
        answer.failure,
    )
    return GasSolubilityResponse(
        gas=identity(answer.gas),
        solvents=identities(answer.solvents),
        solvent_mole_fractions=answer.solvent_mole_fractions.tolist(),
        method=answer.method,
        methods_used=methods_used(answer.methods_used),
        pressure_kPa=answer.pressure_kPa,
        points=[
            GasSolubilityPoint(
                temperature_K=T,
                henry_kPa=number(henry),
                solvent_pressure_kPa=number(alone),
                gas_mole_fraction=number(x),
                liquid=numbers(liquid),
                vapour=numbers(vapour),
                failure=failure,
            )
            for T, henry, alone, x, liquid, vapour, failure in zip(*columns, strict=True)
        ],
        confidence=confidence(answer.confidence),
        cautions=cautions(),
    )
