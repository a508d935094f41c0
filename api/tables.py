"""Answers as CSV: one header row, one row an item, an empty cell for what is missing."""

import csv
import io
from collections.abc import Iterable, Sequence

from api.schemas.activity import ActivityResponse, InfiniteDilutionResponse
from api.schemas.confidence import Confidence
from api.schemas.equilibrium import (
    AzeotropesResponse,
    DiagramResponse,
    LiquidSplitResponse,
    PhasePointResponse,
)
from api.schemas.molecule import MoleculeIdentity, MoleculesResponse

Cell = str | float | int | bool | None
_FORMULA_STARTS = ("=", "+", "-", "@", "\t", "\r")


def csv_text(header: Sequence[str], rows: Iterable[Sequence[Cell]]) -> str:
    """CSV as RFC 4180 has it."""
    target = io.StringIO()
    writer = csv.writer(target, lineterminator="\r\n")
    writer.writerow(header)
    writer.writerows([_cell(value) for value in row] for row in rows)
    return target.getvalue()


def _cell(value: Cell) -> Cell:
    if isinstance(value, bool):
        return "true" if value else "false"
    if isinstance(value, str) and value.startswith(_FORMULA_STARTS):
        return "'" + value  # or a spreadsheet would run it as a formula
    return value


def trust_cells(confidence: Confidence) -> list[Cell]:
    """Grade and codes of the reasons."""
    return [confidence.grade, " ".join(reason.code for reason in confidence.reasons)]


def _ends(confidence: Confidence) -> list[Cell]:
    interval = confidence.interval_90
    return [None, None] if interval is None else [interval.lower, interval.upper]


def _smiles(molecule: MoleculeIdentity | None) -> str | None:
    return None if molecule is None else molecule.canonical_smiles


TRUST = ["grade", "reasons"]


def numbered(name: str, count: int) -> list[str]:
    """Column names from 1 on."""
    return [f"{name}_{k}" for k in range(1, count + 1)]


def molecules_csv(answer: MoleculesResponse) -> str:
    """One row a molecule, method and group; one without groups keeps a row."""
    rows: list[list[Cell]] = []
    for index, result in enumerate(answer.results):
        if result.problem is not None:
            rows.append([index, *[None] * 3, False, *[None] * 4, result.problem.detail])
        for method, assignment in result.assignments.items():
            start: list[Cell] = [
                index,
                result.canonical_smiles,
                result.name,
                method,
                assignment.complete,
            ]
            why = assignment.explanation
            rows += [
                [*start, group.number, group.subgroup, group.main_group, group.count, why]
                for group in assignment.groups
            ] or [[*start, *[None] * 4, why]]
    header = (
        "molecule,canonical_smiles,name,method,complete,number,subgroup,main_group,count,problem"
    )
    return csv_text(header.split(","), rows)


def activity_csv(answer: ActivityResponse) -> str:
    """One row a point."""
    n = len(answer.components)
    header = [
        "temperature_K",
        *numbered("x", n),
        *numbered("gamma", n),
        *numbered("ln_gamma", n),
        *numbered("ln_gamma_lower", n),
        *numbered("ln_gamma_upper", n),
        "excess_gibbs_RT",
        "excess_enthalpy_J_mol",
        *TRUST,
    ]
    nothing: list[Cell] = [None] * n
    rows = (
        [
            point.temperature_K,
            *point.mole_fractions,
            *point.gamma,
            *point.ln_gamma,
            *(point.ln_gamma_lower or nothing),
            *(point.ln_gamma_upper or nothing),
            point.excess_gibbs_RT,
            point.excess_enthalpy_J_mol,
            *trust_cells(point.confidence),
        ]
        for point in answer.points
    )
    return csv_text(header, rows)


def infinite_dilution_csv(answer: InfiniteDilutionResponse) -> str:
    """One row a pair."""
    header = ["solute_smiles", "solvent_smiles", "temperature_K", "ln_gamma_inf", "gamma_inf"]
    rows = (
        [
            _smiles(result.solute),
            _smiles(result.solvent),
            result.temperature_K,
            result.ln_gamma_inf,
            result.gamma_inf,
            result.method,
            *_ends(result.confidence),
            *trust_cells(result.confidence),
        ]
        for result in answer.results
    )
    return csv_text([*header, "method", "lower_90", "upper_90", *TRUST], rows)


def phase_point_csv(answer: PhasePointResponse) -> str:
    """One row a component."""
    header = (
        "component,canonical_smiles,x,y,gamma,saturation_kPa,relative_volatility,"
        "y_lower,y_upper,relative_volatility_lower,relative_volatility_upper,"
        "temperature_K,pressure_kPa,vapour_fraction,method,lower_90,upper_90"
    )
    nothing: list[float | None] = [None] * len(answer.components)
    columns = zip(
        answer.components,
        answer.x,
        answer.y,
        answer.gamma,
        answer.saturation_kPa,
        answer.relative_volatility,
        answer.y_lower or nothing,
        answer.y_upper or nothing,
        answer.relative_volatility_lower or nothing,
        answer.relative_volatility_upper or nothing,
        strict=True,
    )
    rows = (
        [
            component.name,
            component.canonical_smiles,
            *values,
            answer.temperature_K,
            answer.pressure_kPa,
            answer.vapour_fraction,
            answer.method,
            *_ends(answer.confidence),
            *trust_cells(answer.confidence),
        ]
        for component, *values in columns
    )
    return csv_text([*header.split(","), *TRUST], rows)


def diagram_csv(answer: DiagramResponse) -> str:
    """One row a point."""
    header = (
        "x1,y1,temperature_K,pressure_kPa,gamma1,gamma2,relative_volatility,"
        "y1_lower,y1_upper,temperature_K_lower,temperature_K_upper,pressure_kPa_lower,"
        "pressure_kPa_upper,relative_volatility_lower,relative_volatility_upper,stable"
    )
    nothing: list[float | None] = [None] * len(answer.x1)
    rows = zip(
        answer.x1,
        answer.y1,
        answer.temperature_K,
        answer.pressure_kPa,
        answer.gamma1,
        answer.gamma2,
        answer.relative_volatility,
        answer.y1_lower or nothing,
        answer.y1_upper or nothing,
        answer.temperature_K_lower or nothing,
        answer.temperature_K_upper or nothing,
        answer.pressure_kPa_lower or nothing,
        answer.pressure_kPa_upper or nothing,
        answer.relative_volatility_lower or nothing,
        answer.relative_volatility_upper or nothing,
        answer.stable,
        strict=True,
    )
    trust = trust_cells(answer.confidence)
    return csv_text(
        [*header.split(","), "method", *TRUST], ([*row, answer.method, *trust] for row in rows)
    )


def azeotropes_csv(answer: AzeotropesResponse) -> str:
    """One row an azeotrope."""
    header = ["kind", "stable_liquid", "temperature_K", "pressure_kPa"]
    rows = (
        [
            found.kind,
            found.stable_liquid,
            found.temperature_K,
            found.pressure_kPa,
            *found.mole_fractions,
            answer.method,
            *trust_cells(answer.confidence),
        ]
        for found in answer.azeotropes
    )
    return csv_text([*header, *numbered("x", len(answer.components)), "method", *TRUST], rows)


def liquid_split_csv(answer: LiquidSplitResponse) -> str:
    """One row a liquid; none where the liquid does not split."""
    rows = (
        [
            index,
            answer.temperature_K,
            phase.fraction,
            *phase.mole_fractions,
            *phase.distribution,
            answer.method,
            *trust_cells(answer.confidence),
        ]
        for index, phase in enumerate(answer.phases, start=1)
    )
    n = len(answer.components)
    header = ["liquid", "temperature_K", "fraction", *numbered("x", n)]
    header += numbered("distribution", n)
    return csv_text([*header, "method", *TRUST], rows)
