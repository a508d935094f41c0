"""A parameter set as a plain text sheet and as CSV."""

import csv
import io

from groups.handoff.sheets.parameter_set import ComponentSheet, PairSheet, ParameterSet

CSV_COLUMNS = (
    "model",
    "interactions",
    "component_i",
    "component_j",
    "smiles_i",
    "smiles_j",
    "parameter",
    "value",
    "unit",
    "standard_error",
    "temperature_low_K",
    "temperature_high_K",
    "source",
)
_DIGITS = ".10g"


def to_text(sheet: ParameterSet) -> str:
    """A parameter set as a plain text sheet.

    Parameters
    ----------
    sheet : ParameterSet

    Returns
    -------
    str
        Lines that end in a newline.
    """
    low, high = sheet.temperature_range_K
    lines = [
        f"Parameters of {sheet.model}, {len(sheet.components)} components",
        f"Origin: {sheet.origin}" + (" (predicted, not measured)" if sheet.predicted else ""),
        f"Fitted range: {low:.2f} to {high:.2f} K",
        "",
        "Equation:",
        f"  {sheet.equation}",
        f"  {sheet.interactions}",
        "",
        *(f"Caution: {caution}" for caution in sheet.cautions),
        "",
    ]
    for component in sheet.components:
        lines += _component_lines(component)
    for pair in sheet.pairs:
        lines += _pair_lines(pair)
    return "\n".join(lines).rstrip("\n") + "\n"


def _component_lines(one: ComponentSheet) -> list[str]:
    name = one.name or one.smiles
    cas = f", CAS {one.cas}" if one.cas else ""
    lines = [
        f"Component {one.index}: {name}{cas}, SMILES {one.smiles}, {one.formula}, "
        f"{one.molar_mass_g_mol:.4f} g/mol"
    ]
    if one.vapour_pressure_equation is not None:
        lines.append(f"  vapour pressure: {one.vapour_pressure_equation}")
        if one.vapour_pressure_coefficients:
            listed = [f"{n} = {v:{_DIGITS}}" for n, v in one.vapour_pressure_coefficients]
            lines.append("    " + ", ".join(listed))
        if one.vapour_pressure_range_K is not None:
            low, high = one.vapour_pressure_range_K
            lines.append(f"    {low:.2f} to {high:.2f} K; {one.vapour_pressure_citation}")
        if one.vapour_pressure_note:
            lines.append(f"    {one.vapour_pressure_note}")
    for constant in one.constants:
        estimated = ", estimated" if constant.estimated else ""
        unit = "" if constant.unit == "1" else f" {constant.unit}"
        lines.append(
            f"  {constant.name}: {constant.value:.7g}{unit} ({constant.source}{estimated})"
        )
    return [*lines, ""]


def _pair_lines(pair: PairSheet) -> list[str]:
    lines = [f"Pair {pair.first}, {pair.second}:"]
    for one in pair.numbers:
        error = "fixed" if one.standard_error is None else f"+/- {one.standard_error:.3g}"
        lines.append(f"  {one.name:<12} {one.value: .10g} [{one.unit}] {error}   {one.meaning}")
    lines.append(f"  residual: {pair.residual}")
    if not pair.accepted:
        lines.append("  NOT TO BE USED WITHOUT A LOOK AT THE NOTES:")
    lines += [f"  note: {note}" for note in pair.notes]
    return [*lines, ""]


def to_csv(sheet: ParameterSet) -> str:
    """A parameter set as CSV: one number a line, with its unit and its equation.

    Parameters
    ----------
    sheet : ParameterSet

    Returns
    -------
    str
        Columns as in `CSV_COLUMNS`; blank where something does not apply.
    """
    out = io.StringIO()
    writer = csv.writer(out, lineterminator="\n")
    writer.writerow(CSV_COLUMNS)
    low, high = (f"{T:{_DIGITS}}" for T in sheet.temperature_range_K)
    smiles = {one.index: one.smiles for one in sheet.components}
    head = (sheet.model, sheet.interactions)
    for pair in sheet.pairs:
        both = (str(pair.first), str(pair.second), smiles[pair.first], smiles[pair.second])
        for one in pair.numbers:
            error = "" if one.standard_error is None else f"{one.standard_error:{_DIGITS}}"
            value = (one.name, f"{one.value:{_DIGITS}}", one.unit, error)
            writer.writerow((*head, *both, *value, low, high, sheet.origin))
    for component in sheet.components:
        writer.writerows(_component_rows(component))
    return out.getvalue()


def _component_rows(one: ComponentSheet) -> list[tuple[str, ...]]:
    place = (str(one.index), "", one.smiles, "")
    rows: list[tuple[str, ...]] = []
    equation = one.vapour_pressure_equation
    if equation is not None and one.vapour_pressure_range_K is not None:
        low, high = (f"{T:{_DIGITS}}" for T in one.vapour_pressure_range_K)
        for name, value in one.vapour_pressure_coefficients:
            number = (name, f"{value:{_DIGITS}}", "", "")
            source = one.vapour_pressure_citation or ""
            rows.append(("vapour pressure", equation, *place, *number, low, high, source))
    for constant in one.constants:
        number = (constant.name, f"{constant.value:{_DIGITS}}", constant.unit, "")
        source = constant.source + (" (estimated)" if constant.estimated else "")
        rows.append(("constant", "", *place, *number, "", "", source))
    return rows
