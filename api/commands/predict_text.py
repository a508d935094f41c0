"""Predictions as text: the numbers, where they come from, the doubts, the cautions."""

from api.commands import interval_text
from api.commands.text import aligned, cautions_text, doubts, named, wrapped
from api.schemas.activity import ActivityResponse, InfiniteDilutionResponse
from api.schemas.equilibrium import (
    AzeotropeResult,
    AzeotropesResponse,
    DiagramResponse,
    LiquidSplitResponse,
    PhasePointResponse,
)
from api.schemas.prediction import PredictionResponse, VapourPredictionResponse


def point_text(answer: PhasePointResponse) -> str:
    """A bubble point, dew point or flash."""
    columns = (answer.x, answer.y, answer.gamma, answer.saturation_kPa, answer.relative_volatility)
    rows = [
        [named(component), *values]
        for component, *values in zip(answer.components, *columns, strict=True)
    ]
    header = ["component", "x", "y", "gamma", "Psat / kPa", "rel. volatility"]
    if answer.relative_volatility_lower is not None:
        header.append("90 % interval")
        widths = interval_text.column(
            answer.relative_volatility_lower, answer.relative_volatility_upper, len(rows)
        )
        rows = [[*row, width] for row, width in zip(rows, widths, strict=True)]
    state = f"T = {_shown(answer.temperature_K)} K, P = {_shown(answer.pressure_kPa)} kPa"
    if answer.vapour_fraction not in (None, 0.0, 1.0):
        state += f", vapour fraction {answer.vapour_fraction:.4f}"
    lines = [state, aligned(header, rows)]
    if answer.confidence.interval_90 is not None:
        lines.insert(1, _sought(answer))
    if answer.failure:
        lines.append(wrapped(answer.failure, "Not converged: "))
    if len(answer.phases) > 1 and answer.liquid_stable is False:
        lines += ["", "The phases:", _phases_table(answer)]
    elif answer.liquid_stable is False:
        lines.append("This liquid would split in two: the state shown is not stable.")
    return _with_doubts("\n".join(lines), answer, doubts(answer.confidence))


def _sought(answer: PhasePointResponse) -> str:
    """The interval, of the temperature or of the pressure: that in the middle of which it lies."""
    found = answer.confidence.interval_90
    assert found is not None
    middle = (found.lower + found.upper) / 2.0
    values = {"K": answer.temperature_K, "kPa": answer.pressure_kPa}
    away = {unit: abs(value - middle) for unit, value in values.items() if value is not None}
    return interval_text.sought(answer.confidence, min(away, key=lambda unit: away[unit]))


def _phases_table(answer: PhasePointResponse) -> str:
    rows: list[list[object]] = [["moles in a mole", *(phase.fraction for phase in answer.phases)]]
    columns = [phase.mole_fractions for phase in answer.phases]
    names = [named(component) for component in answer.components]
    rows += [[name, *values] for name, *values in zip(names, *columns, strict=True)]
    return aligned(["", *(phase.kind for phase in answer.phases)], rows)


def diagram_text(answer: DiagramResponse) -> str:
    """A diagram as a table of at most 21 rows."""
    step = max(1, (len(answer.x1) - 1) // 20)
    symbol, levels = _level_intervals(answer)
    kept = sorted({*range(0, len(answer.x1), step), len(answer.x1) - 1})
    rows = [
        [
            answer.x1[k],
            answer.y1[k],
            answer.temperature_K[k],
            answer.pressure_kPa[k],
            answer.relative_volatility[k],
            levels[k],
            "" if answer.stable[k] else "two liquids",
        ]
        for k in kept
    ]
    header = ["x1", "y1", "T / K", "P / kPa", "rel. volatility", f"90 % interval of {symbol}", ""]
    lines = [f"1 = {named(answer.components[0])}, 2 = {named(answer.components[1])}"]
    lines += [aligned(header, rows), *map(_azeotrope_line, answer.azeotropes)]
    if not answer.azeotropes:
        lines.append("No azeotrope.")
    if answer.azeotrope_chance is not None:
        names = [component.name or component.canonical_smiles for component in answer.components]
        lines.append(interval_text.azeotrope_line(answer.azeotrope_chance, names))
    if answer.liquid_split is not None:
        split = answer.liquid_split
        lines.append(
            f"The boiling liquid splits in two between x1 = {split.x1_lower:.4f} and "
            f"{split.x1_upper:.4f}."
        )
    return _with_doubts("\n".join(lines), answer, doubts(answer.confidence))


def _level_intervals(answer: DiagramResponse) -> tuple[str, list[str]]:
    """T or P, whichever varies, and its intervals."""
    count = len(answer.x1)
    known = [value for value in answer.pressure_kPa if value is not None]
    if known and min(known) == max(known):
        return "T", interval_text.column(
            answer.temperature_K_lower, answer.temperature_K_upper, count
        )
    return "P", interval_text.column(answer.pressure_kPa_lower, answer.pressure_kPa_upper, count)


def azeotropes_text(answer: AzeotropesResponse) -> str:
    """All azeotropes."""
    order = ", ".join(f"{k} = {named(c)}" for k, c in enumerate(answer.components, start=1))
    lines = [order, *map(_azeotrope_line, answer.azeotropes)]
    if not answer.azeotropes:
        lines.append("No azeotrope.")
    names = [component.name or component.canonical_smiles for component in answer.components]
    lines += [interval_text.azeotrope_line(chance, names) for chance in answer.chances]
    return _with_doubts("\n".join(lines), answer, doubts(answer.confidence))


def split_text(answer: LiquidSplitResponse) -> str:
    """The coexisting liquids."""
    if not answer.splits:
        body = f"One liquid at {answer.temperature_K:g} K."
    else:
        names = [named(component) for component in answer.components]
        columns = [phase.mole_fractions for phase in answer.phases]
        rows = [[name, *values] for name, *values in zip(names, *columns, strict=True)]
        shares = [phase.fraction for phase in answer.phases]
        if None not in shares:
            rows.insert(0, ["moles in a mole", *shares])
        header = ["component", *(f"liquid {k}" for k in range(1, len(columns) + 1))]
        count = "Two" if len(columns) == 2 else "Three"
        body = f"{count} liquids at {answer.temperature_K:g} K.\n" + aligned(header, rows)
    chance = interval_text.split_line(answer.chance)
    body = "\n".join(part for part in (body, chance) if part)
    return _with_doubts(body, answer, doubts(answer.confidence))


def activity_text(answer: ActivityResponse) -> str:
    """Activity coefficients at one point."""
    [point] = answer.points
    rows = [
        [named(component), x, gamma, ln_gamma]
        for component, x, gamma, ln_gamma in zip(
            answer.components, point.mole_fractions, point.gamma, point.ln_gamma, strict=True
        )
    ]
    widths = interval_text.column(point.ln_gamma_lower, point.ln_gamma_upper, len(rows))
    rows = [[*row, width] for row, width in zip(rows, widths, strict=True)]
    body = aligned(["component", "x", "gamma", "ln gamma", "90 % interval"], rows)
    excess = f"gE/RT = {_shown(point.excess_gibbs_RT)}, hE = "
    body += f"\n{excess}{_shown(point.excess_enthalpy_J_mol)} J/mol at {point.temperature_K:g} K"
    return _with_doubts(body, answer, doubts(point.confidence))


def dilution_text(answer: InfiniteDilutionResponse) -> str:
    """Limits of every component in every other."""
    level = next((r.interval.level for r in answer.results if r.interval is not None), None)
    rows = [
        [
            named(result.solute),
            named(result.solvent),
            result.ln_gamma_inf,
            interval_text.interval(result.confidence.interval_90),
            *([] if level is None else [interval_text.interval(result.interval)]),
            result.gamma_inf,
            result.method or "none",
            result.confidence.grade,
        ]
        for result in answer.results
    ]
    asked = [] if level is None else [f"{100.0 * level:g} % interval"]
    header = ["solute", "in solvent", "ln gamma inf", "90 % interval", *asked]
    header += ["gamma inf", "method", "confidence"]
    worst = [
        f"{named(result.solute)} in {named(result.solvent)}\n{doubts(result.confidence)}"
        for result in answer.results
    ]
    return "\n\n".join([aligned(header, rows), *worst, cautions_text(answer.cautions)])


def _with_doubts(body: str, answer: PredictionResponse, doubt: str) -> str:
    uses = [wrapped(f"{use.method}: {use.why}", "Method ") for use in answer.methods_used]
    sources = (
        [
            wrapped(f"{named(component)}: {line.source}, {line.equation}", "Vapour pressure of ")
            # The equation of state has no lines of its own.
            for component, line in zip(answer.components, answer.vapour_pressures, strict=False)
        ]
        + [wrapped(f"{answer.vapour.kind}: {answer.vapour.reason}", "Vapour ")]
        if isinstance(answer, VapourPredictionResponse)
        else []
    )
    return "\n\n".join([body, "\n".join([*uses, *sources]), doubt, cautions_text(answer.cautions)])


def _azeotrope_line(found: AzeotropeResult) -> str:
    place = ", ".join(f"{x:.4f}" for x in found.mole_fractions)
    kind = found.kind if found.stable_liquid else f"heterogeneous, {found.kind}"
    return (
        f"Azeotrope ({kind}): x = ({place}), {found.temperature_K:.2f} K, "
        f"{found.pressure_kPa:.3f} kPa"
    )


def _shown(value: float | None) -> str:
    return "-" if value is None else f"{value:.4g}" if abs(value) < 1.0 else f"{value:.3f}"
