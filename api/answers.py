"""From the answers of `groups.prediction` to the schemas; NaN becomes null."""

import math
from collections.abc import Iterable, Sequence

from api.schemas.activity import (
    ActivityPoint,
    ActivityResponse,
    InfiniteDilutionResponse,
    InfiniteDilutionResult,
)
from api.schemas.confidence import Confidence, Evidence, Interval, MethodUse, Reason
from api.schemas.equilibrium import (
    AzeotropeResult,
    AzeotropesResponse,
    DiagramResponse,
    LiquidPhase,
    LiquidSplitRange,
    LiquidSplitResponse,
    PhasePointResponse,
    PointFailure,
)
from api.schemas.molecule import MoleculeIdentity
from api.schemas.vapour_pressure import VapourPressureUsed
from groups import prediction
from groups.arrays import FloatArray
from groups.confidence import Confidence as GroupsConfidence
from groups.confidence.calibration import TableWeight
from groups.equilibrium import Azeotrope, SplitRange
from groups.prediction import answers
from groups.pure import VapourPressure
from groups.structure.molecule import Molecule


def number(value: float) -> float | None:
    """A finite number, or null."""
    value = float(value)
    return value if math.isfinite(value) else None


def numbers(values: FloatArray) -> list[float | None]:
    """Finite numbers, null elsewhere."""
    return [value if math.isfinite(value) else None for value in values.tolist()]


def identity(molecule: Molecule) -> MoleculeIdentity:
    """Which molecule was understood."""
    return MoleculeIdentity(
        canonical_smiles=molecule.canonical_smiles,
        name=molecule.name,
        cas=molecule.cas,
        formula=molecule.formula,
        molar_mass_g_mol=round(molecule.molar_mass_g_mol, 4),
    )


def identities(molecules: Iterable[Molecule]) -> list[MoleculeIdentity]:
    """Which molecules were understood."""
    return [identity(molecule) for molecule in molecules]


def confidence(given: GroupsConfidence) -> Confidence:
    """Grade, reasons, interval and evidence."""
    interval = given.interval_90
    return Confidence(
        grade=given.grade,
        reasons=[
            Reason(code=r.code, message=r.message, subject=r.subject, best_grade=r.cap)
            for r in given.reasons
        ],
        interval_90=None
        if interval is None
        else Interval(lower=interval.lower, upper=interval.upper),
        evidence=[
            Evidence(
                method=e.method,
                pair=list(e.pair),
                measurements=e.measurements,
                systems=e.systems,
                mean_absolute_error_ln_gamma=e.mean_absolute_error_ln_gamma,
                message=e.message,
            )
            for e in given.evidence
        ],
    )


def methods_used(uses: Sequence[TableWeight]) -> list[MethodUse]:
    """The tables behind an answer."""
    return [MethodUse(method=use.method, weight=use.weight, why=use.why) for use in uses]


def vapour_pressures(lines: Sequence[VapourPressure]) -> list[VapourPressureUsed]:
    """The vapour pressures behind an answer."""
    return [
        VapourPressureUsed(
            source=line.source,
            equation=line.equation,
            citation=line.citation,
            temperature_range_K=list(line.range_K),
            uncertainty_ln=line.uncertainty_ln,
            notes=list(line.notes),
        )
        for line in lines
    ]


def cautions() -> list[str]:
    """The cautions of every prediction."""
    return list(prediction.CAUTIONS)


def activity(answer: answers.ActivityAnswer) -> ActivityResponse:
    """Activity coefficients, one entry a point."""
    columns = (
        answer.temperature_K.tolist(),
        answer.mole_fractions.tolist(),
        answer.gamma,
        answer.ln_gamma,
        answer.ln_gamma_combinatorial,
        answer.ln_gamma_residual,
        answer.excess_gibbs_RT,
        answer.excess_enthalpy_J_mol,
        answer.confidence,
    )
    # Most points share their reasons; each distinct set is converted once.
    trust_of = {trust: confidence(trust) for trust in set(answer.confidence)}
    points = [
        ActivityPoint(
            temperature_K=T,
            mole_fractions=x,
            gamma=numbers(gamma),
            ln_gamma=numbers(ln_gamma),
            ln_gamma_combinatorial=numbers(combinatorial),
            ln_gamma_residual=numbers(residual),
            excess_gibbs_RT=number(gibbs),
            excess_enthalpy_J_mol=number(enthalpy),
            confidence=trust_of[trust],
        )
        for T, x, gamma, ln_gamma, combinatorial, residual, gibbs, enthalpy, trust in zip(
            *columns, strict=True
        )
    ]
    return ActivityResponse(
        components=identities(answer.components),
        method=answer.method,
        methods_used=methods_used(answer.methods_used),
        points=points,
        cautions=cautions(),
    )


def infinite_dilution(
    found: Sequence[answers.InfiniteDilutionAnswer],
) -> InfiniteDilutionResponse:
    """Limits, one result a pair."""
    results = [infinite_dilution_result(answer) for answer in found]
    return InfiniteDilutionResponse(results=results, cautions=cautions())


def infinite_dilution_result(answer: answers.InfiniteDilutionAnswer) -> InfiniteDilutionResult:
    """The limit of one pair."""
    return InfiniteDilutionResult(
        solute=identity(answer.solute),
        solvent=identity(answer.solvent),
        temperature_K=answer.temperature_K,
        ln_gamma_inf=number(answer.ln_gamma_inf),
        gamma_inf=number(math.exp(min(answer.ln_gamma_inf, 700.0))),
        method=answer.method,
        methods_used=methods_used(answer.methods_used),
        confidence=confidence(answer.confidence),
    )


def phase_point(answer: answers.PhasePointAnswer) -> PhasePointResponse:
    """A bubble point, a dew point or a flash."""
    return PhasePointResponse(
        components=identities(answer.components),
        method=answer.method,
        methods_used=methods_used(answer.methods_used),
        temperature_K=number(answer.temperature_K),
        pressure_kPa=number(answer.pressure_kPa),
        vapour_fraction=number(answer.vapour_fraction),
        x=numbers(answer.x),
        y=numbers(answer.y),
        gamma=numbers(answer.gamma),
        saturation_kPa=numbers(answer.saturation_kPa),
        relative_volatility=numbers(answer.relative_volatility),
        liquid_stable=answer.liquid_stable,
        failure=answer.failure,
        vapour_pressures=vapour_pressures(answer.vapour_pressures),
        confidence=confidence(answer.confidence),
        cautions=cautions(),
    )


def azeotrope(found: Azeotrope) -> AzeotropeResult:
    """One azeotrope."""
    fractions = [float(x) for x in found.mole_fractions]
    return AzeotropeResult(
        components=[int(k) for k in found.components],
        mole_fractions=fractions,
        x1=fractions[0],
        temperature_K=found.temperature_K,
        pressure_kPa=found.pressure_kPa,
        kind=found.kind,
        stable_liquid=found.stable_liquid,
        liquids=[liquid.tolist() for liquid in found.liquids],
    )


def azeotropes(answer: answers.AzeotropeAnswer) -> AzeotropesResponse:
    """All azeotropes of a mixture."""
    return AzeotropesResponse(
        components=identities(answer.components),
        method=answer.method,
        methods_used=methods_used(answer.methods_used),
        pressure_kPa=answer.pressure_kPa,
        temperature_K=answer.temperature_K,
        azeotropes=[azeotrope(found) for found in answer.azeotropes],
        vapour_pressures=vapour_pressures(answer.vapour_pressures),
        confidence=confidence(answer.confidence),
        cautions=cautions(),
    )


def liquid_split(answer: answers.LiquidSplitAnswer) -> LiquidSplitResponse:
    """The coexisting liquids."""
    phases = [
        LiquidPhase(mole_fractions=x.tolist(), ln_gamma=ln_gamma.tolist())
        for x, ln_gamma in zip(answer.phases, answer.ln_gamma, strict=True)
    ]
    return LiquidSplitResponse(
        components=identities(answer.components),
        method=answer.method,
        methods_used=methods_used(answer.methods_used),
        temperature_K=answer.temperature_K,
        splits=answer.splits,
        phases=phases,
        confidence=confidence(answer.confidence),
        cautions=cautions(),
    )


def diagram(answer: answers.DiagramAnswer) -> DiagramResponse:
    """A Txy or Pxy diagram."""
    drawn = answer.diagram
    return DiagramResponse(
        kind=drawn.kind,
        components=identities(answer.components),
        method=answer.method,
        methods_used=methods_used(answer.methods_used),
        x1=numbers(drawn.x1),
        y1=numbers(drawn.y1),
        temperature_K=numbers(drawn.temperature_K),
        pressure_kPa=numbers(drawn.pressure_kPa),
        gamma1=numbers(drawn.gamma[:, 0]),
        gamma2=numbers(drawn.gamma[:, 1]),
        relative_volatility=numbers(drawn.relative_volatility),
        stable=drawn.stable.tolist(),
        failures=[
            PointFailure(index=k, reason=reason)
            for k, reason in enumerate(drawn.failure)
            if reason is not None
        ],
        azeotropes=[azeotrope(found) for found in drawn.azeotropes],
        liquid_split=None if drawn.liquid_split is None else split_range(drawn.liquid_split),
        vapour_pressures=vapour_pressures(answer.vapour_pressures),
        confidence=confidence(answer.confidence),
        cautions=cautions(),
    )


def split_range(found: SplitRange) -> LiquidSplitRange:
    """Two liquids that boil together."""
    return LiquidSplitRange(
        x1_lower=found.x1_lower,
        x1_upper=found.x1_upper,
        y1=found.y1,
        temperature_K=found.temperature_K,
        pressure_kPa=found.pressure_kPa,
    )
