"""From the answers of `groups.prediction` to the schemas; NaN becomes null."""

import math
from collections.abc import Iterable, Sequence

from api.schemas.activity import (
    ActivityPoint,
    ActivityResponse,
    InfiniteDilutionResponse,
    InfiniteDilutionResult,
)
from api.schemas.confidence import (
    Confidence,
    Evidence,
    Interval,
    LevelInterval,
    MethodUse,
    Reason,
)
from api.schemas.equilibrium import (
    AzeotropeChance,
    AzeotropeResult,
    AzeotropesResponse,
    DiagramResponse,
    LiquidPhase,
    LiquidSplitRange,
    LiquidSplitResponse,
    Phase,
    PhasePointResponse,
    PointFailure,
    SplitChance,
)
from api.schemas.measurement_plan import MeasurementPlanResponse, PlannedMeasurement
from api.schemas.molecule import MoleculeIdentity
from api.schemas.prediction import VapourUsed as VapourUsedResponse
from api.schemas.vapour_pressure import VapourPressureUsed
from groups import prediction
from groups.arrays import FloatArray
from groups.confidence import Confidence as GroupsConfidence
from groups.confidence import Interval as GroupsInterval
from groups.confidence.calibration import TableWeight
from groups.equilibrium import Azeotrope, SplitRange
from groups.prediction import answers
from groups.prediction.bands import Band
from groups.prediction.phases import PhaseAnswer
from groups.prediction.vapours import VapourUsed
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


def interval(given: GroupsInterval | None) -> Interval | None:
    """A range, or null."""
    return None if given is None else Interval(lower=given.lower, upper=given.upper)


def confidence(given: GroupsConfidence) -> Confidence:
    """Grade, reasons, interval and evidence."""
    return Confidence(
        grade=given.grade,
        reasons=[
            Reason(code=r.code, message=r.message, subject=r.subject, best_grade=r.cap)
            for r in given.reasons
        ],
        interval_90=interval(given.interval_90),
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


def vapour_used(used: VapourUsed) -> VapourUsedResponse:
    """The vapour behind an answer."""
    return VapourUsedResponse(kind=used.kind, reason=used.reason)


def phases(found: Sequence[PhaseAnswer]) -> list[Phase]:
    """Liquids and vapour with their amounts."""
    return [
        Phase(
            kind=phase.kind,
            fraction=phase.fraction,
            mole_fractions=phase.mole_fractions.tolist(),
        )
        for phase in found
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
        _rows(answer.ln_gamma_band, len(answer.confidence)),
        _rows(answer.excess_gibbs_band, len(answer.confidence)),
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
            ln_gamma_lower=None if ends is None else ends[0].tolist(),
            ln_gamma_upper=None if ends is None else ends[1].tolist(),
            excess_gibbs_RT=number(gibbs),
            excess_gibbs_RT_lower=None if gibbs_ends is None else float(gibbs_ends[0]),
            excess_gibbs_RT_upper=None if gibbs_ends is None else float(gibbs_ends[1]),
            excess_enthalpy_J_mol=number(enthalpy),
            confidence=trust_of[trust],
        )
        for (
            T,
            x,
            gamma,
            ln_gamma,
            combinatorial,
            residual,
            gibbs,
            enthalpy,
            ends,
            gibbs_ends,
            trust,
        ) in zip(*columns, strict=True)
    ]
    return ActivityResponse(
        components=identities(answer.components),
        method=answer.method,
        methods_used=methods_used(answer.methods_used),
        points=points,
        cautions=cautions(),
    )


def _rows(band: Band | None, n: int) -> list[tuple[FloatArray, FloatArray] | None]:
    """Lower and upper ends of each point, or nothing for each."""
    if band is None:
        return [None] * n
    return list(zip(band.lower, band.upper, strict=True))


def infinite_dilution(
    found: Sequence[answers.InfiniteDilutionAnswer], level: float | None = None
) -> InfiniteDilutionResponse:
    """Limits, one result a pair."""
    results = [infinite_dilution_result(answer, level) for answer in found]
    return InfiniteDilutionResponse(results=results, cautions=cautions())


def infinite_dilution_result(
    answer: answers.InfiniteDilutionAnswer, level: float | None = None
) -> InfiniteDilutionResult:
    """The limit of one pair."""
    return InfiniteDilutionResult(
        solute=identity(answer.solute),
        solvent=identity(answer.solvent),
        temperature_K=answer.temperature_K,
        ln_gamma_inf=number(answer.ln_gamma_inf),
        gamma_inf=number(math.exp(min(answer.ln_gamma_inf, 700.0))),
        method=answer.method,
        methods_used=methods_used(answer.methods_used),
        interval=None
        if answer.interval is None or level is None
        else LevelInterval(level=level, lower=answer.interval.lower, upper=answer.interval.upper),
        confidence=confidence(answer.confidence),
    )


def phase_point(answer: answers.PhasePointAnswer) -> PhasePointResponse:
    """A bubble point, a dew point or a flash."""
    bands = answer.bands
    x_band, y_band, gamma_band, ratio_band = (
        (None, None, None, None)
        if bands is None
        else (bands.liquid, bands.vapour, bands.gamma, bands.relative_volatility)
    )
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
        x_lower=_lower(x_band),
        x_upper=_upper(x_band),
        y_lower=_lower(y_band),
        y_upper=_upper(y_band),
        gamma_lower=_lower(gamma_band),
        gamma_upper=_upper(gamma_band),
        relative_volatility_lower=_lower(ratio_band),
        relative_volatility_upper=_upper(ratio_band),
        liquid_stable=answer.liquid_stable,
        phases=phases(answer.phases),
        failure=answer.failure,
        vapour_pressures=vapour_pressures(answer.vapour_pressures),
        vapour=vapour_used(answer.vapour),
        confidence=confidence(answer.confidence),
        cautions=cautions(),
    )


def _lower(band: Band | None) -> list[float] | None:
    """Lower ends of the components at the one point."""
    return None if band is None else band.lower[0].tolist()


def _upper(band: Band | None) -> list[float] | None:
    """Upper ends of the components at the one point."""
    return None if band is None else band.upper[0].tolist()


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


def azeotrope_chance(found: prediction.AzeotropeChance) -> AzeotropeChance:
    """How probable an azeotrope of two components is."""
    return AzeotropeChance(
        components=list(found.components),
        probability=found.probability,
        x1=interval(found.x1),
        temperature_K=interval(found.temperature_K),
        pressure_kPa=interval(found.pressure_kPa),
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
        chances=[azeotrope_chance(found) for found in answer.chances],
        vapour_pressures=vapour_pressures(answer.vapour_pressures),
        vapour=vapour_used(answer.vapour),
        confidence=confidence(answer.confidence),
        cautions=cautions(),
    )


def liquid_split(answer: answers.LiquidSplitAnswer) -> LiquidSplitResponse:
    """The coexisting liquids."""
    phases = [
        LiquidPhase(
            mole_fractions=x.tolist(),
            ln_gamma=ln_gamma.tolist(),
            fraction=share,
            distribution=numbers(ratio),
        )
        for x, ln_gamma, share, ratio in zip(
            answer.phases,
            answer.ln_gamma,
            answer.fractions or [None] * len(answer.phases),
            answer.distribution,
            strict=True,
        )
    ]
    return LiquidSplitResponse(
        components=identities(answer.components),
        method=answer.method,
        methods_used=methods_used(answer.methods_used),
        temperature_K=answer.temperature_K,
        splits=answer.splits,
        phases=phases,
        chance=None if answer.chance is None else split_chance(answer.chance),
        failure=answer.failure,
        confidence=confidence(answer.confidence),
        cautions=cautions(),
    )


def split_chance(found: prediction.SplitChance) -> SplitChance:
    """How probable a split of a binary is."""
    return SplitChance(
        probability=found.probability,
        x1_lower=interval(found.x1_lower),
        x1_upper=interval(found.x1_upper),
    )


def diagram(answer: answers.DiagramAnswer) -> DiagramResponse:
    """A Txy or Pxy diagram."""
    drawn, bands, chance = answer.diagram, answer.bands, answer.azeotrope_chance
    y1 = None if bands is None else Band(bands.vapour.lower[:, 0], bands.vapour.upper[:, 0])
    ratio = (
        None
        if bands is None
        else Band(bands.relative_volatility.lower[:, 0], bands.relative_volatility.upper[:, 0])
    )
    temperature = None if bands is None else bands.temperature_K
    pressure = None if bands is None else bands.pressure_kPa
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
        y1_lower=None if y1 is None else numbers(y1.lower),
        y1_upper=None if y1 is None else numbers(y1.upper),
        temperature_K_lower=None if temperature is None else numbers(temperature.lower),
        temperature_K_upper=None if temperature is None else numbers(temperature.upper),
        pressure_kPa_lower=None if pressure is None else numbers(pressure.lower),
        pressure_kPa_upper=None if pressure is None else numbers(pressure.upper),
        relative_volatility_lower=None if ratio is None else numbers(ratio.lower),
        relative_volatility_upper=None if ratio is None else numbers(ratio.upper),
        stable=drawn.stable.tolist(),
        failures=[
            PointFailure(index=k, reason=reason)
            for k, reason in enumerate(drawn.failure)
            if reason is not None
        ],
        azeotropes=[azeotrope(found) for found in drawn.azeotropes],
        azeotrope_chance=None if chance is None else azeotrope_chance(chance),
        liquid_split=None if drawn.liquid_split is None else split_range(drawn.liquid_split),
        vapour_pressures=vapour_pressures(answer.vapour_pressures),
        vapour=vapour_used(answer.vapour),
        confidence=confidence(answer.confidence),
        cautions=cautions(),
    )


def measurement_plan(
    answer: prediction.MeasurementPlan, molecules: Iterable[Molecule]
) -> MeasurementPlanResponse:
    """What to measure, the best first."""
    lower, upper = answer.interval
    return MeasurementPlanResponse(
        question=answer.question,
        interval=LevelInterval(level=answer.level, lower=lower, upper=upper),
        components=identities(molecules),
        measurements=[
            PlannedMeasurement(
                kind=one.kind,
                what=one.what,
                components=list(one.components),
                temperature_K=one.temperature_K,
                mole_fractions=None if one.mole_fractions is None else list(one.mole_fractions),
                expected_width=one.expected_width,
            )
            for one in answer.measurements
        ],
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
