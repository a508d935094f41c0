"""Answers on liquids, residue curves and gases as CSV."""

from api.schemas.gas_solubility import GasSolubilityResponse
from api.schemas.liquid_regions import MutualSolubilitiesResponse, TernaryDiagramResponse
from api.schemas.residue_curves import ResidueCurvesResponse
from api.tables import TRUST, Cell, csv_text, numbered, trust_cells


def mutual_solubilities_csv(answer: MutualSolubilitiesResponse) -> str:
    """One row a temperature, then one a consolute point."""
    trust = [answer.method, *trust_cells(answer.confidence)]
    rows: list[list[Cell]] = [
        ["two liquids" if splits else "one liquid", T, poor, rich, *trust]
        for T, splits, poor, rich in zip(
            answer.temperature_K, answer.splits, answer.x1_poor, answer.x1_rich, strict=True
        )
    ]
    rows += [
        [f"{point.kind} consolute point", point.temperature_K, point.x1, point.x1, *trust]
        for point in answer.consolute_points
    ]
    return csv_text(["kind", "temperature_K", "x1_poor", "x1_rich", "method", *TRUST], rows)


def ternary_diagram_csv(answer: TernaryDiagramResponse) -> str:
    """One row a tie line, then the plait points of its region, then the corners of triangles."""
    trust = [answer.method, *trust_cells(answer.confidence)]
    nothing: list[Cell] = [None] * 3
    rows: list[list[Cell]] = []
    for number, region in enumerate(answer.regions, start=1):
        rows += [
            [number, "tie line", *line.first, *line.second, *line.distribution, *trust]
            for line in region.tie_lines
        ]
        rows += [
            [number, "plait point", *point, *nothing, *nothing, *trust]
            for point in region.plait_points
        ]
    for corners in answer.three_liquids:
        rows += [[None, "three liquids", *x, *nothing, *nothing, *trust] for x in corners]
    header = ["region", "kind", *numbered("first_x", 3), *numbered("second_x", 3)]
    return csv_text([*header, *numbered("distribution", 3), "method", *TRUST], rows)


def residue_curves_csv(answer: ResidueCurvesResponse) -> str:
    """One row a fixed point, then one a point of each curve and boundary."""
    trust = [answer.method, *trust_cells(answer.confidence)]
    rows: list[list[Cell]] = [
        [point.stability, number, *point.mole_fractions, point.temperature_K, *trust]
        for number, point in enumerate(answer.fixed_points)
    ]
    for kind, curves in (("curve", answer.curves), ("boundary", answer.boundaries)):
        for number, curve in enumerate(curves, start=1):
            rows += [
                [kind, number, *x, T, *trust]
                for x, T in zip(curve.mole_fractions, curve.temperature_K, strict=True)
            ]
    return csv_text(["kind", "number", *numbered("x", 3), "temperature_K", "method", *TRUST], rows)


def gas_solubility_csv(answer: GasSolubilityResponse) -> str:
    """One row a temperature."""
    trust = [answer.method, *trust_cells(answer.confidence)]
    rows = (
        [
            point.temperature_K,
            answer.pressure_kPa,
            point.henry_kPa,
            point.solvent_pressure_kPa,
            point.gas_mole_fraction,
            *point.liquid,
            *point.vapour,
            *trust,
        ]
        for point in answer.points
    )
    n = 1 + len(answer.solvents)
    header = ["temperature_K", "pressure_kPa", "henry_kPa", "solvent_pressure_kPa"]
    header += ["gas_mole_fraction", *numbered("x", n), *numbered("y", n)]
    return csv_text([*header, "method", *TRUST], rows)
