"""Reasons that come from the vapour side: vapour pressures, ideal-gas limits, association."""

from collections.abc import Sequence
from math import exp

from groups.confidence.confidence import Grade, Reason
from groups.confidence.labels import label
from groups.pure import VapourPressure
from groups.structure.facts import molecule_facts
from groups.structure.molecule import Molecule

# Common practice, no source: an ideal vapour errs by about 1 to 3 % at 300 kPa and by 5 to 15 %
# at 1 MPa for organic vapours.
MODERATE_PRESSURE_KPA = 300.0
HIGH_PRESSURE_KPA = 1000.0
# One standard deviation of ln P; common practice, no source: 15 % of a K-value changes a design,
# 5 % is below the error of the activity coefficient beside it.
LOW_ERROR_LN = 0.15
MODERATE_ERROR_LN = 0.05


def pressure_reasons(highest_kPa: float) -> list[Reason]:
    """A reason if the pressure is too high for an ideal vapour."""
    if not highest_kPa > MODERATE_PRESSURE_KPA:
        return []
    high = highest_kPa > HIGH_PRESSURE_KPA
    return [
        Reason(
            "pressure_too_high_for_ideal_vapour",
            f"At {highest_kPa:.0f} kPa the vapour is not ideal; the ideal vapour used here tends "
            "to overstate the bubble pressure"
            + (" by 5 to 15 % or more." if high else " by a few per cent."),
            f"{highest_kPa:.0f} kPa",
            "low" if high else "moderate",
        )
    ]


def critical_reasons(
    molecules: Sequence[Molecule], lines: Sequence[VapourPressure], highest_K: float
) -> list[Reason]:
    """A reason a component that is near or above its critical temperature."""
    reasons = []
    for molecule, line in zip(molecules, lines, strict=True):
        critical = line.critical_temperature_K
        if critical is None:
            continue
        name = label(molecule)
        if line.supercritical(highest_K):
            text = (
                f"{name} is above its critical temperature ({critical:.1f} K): it has no vapour "
                "pressure there, and the continued one is only a rough stand-in."
            )
            reasons.append(Reason("supercritical_component", text, name, "low"))
        elif line.near_critical(highest_K):
            text = (
                f"{name} is near its critical temperature ({critical:.1f} K); its vapour is far "
                "from ideal and its liquid compressible."
            )
            reasons.append(Reason("near_critical_component", text, name, "moderate"))
    return reasons


def association_reasons(molecules: Sequence[Molecule]) -> list[Reason]:
    """A reason a carboxylic acid, whose vapour holds dimers."""
    return [
        Reason(
            "vapour_dimers",
            f"{label(molecule)} forms dimers in the vapour even at low pressure. With an ideal "
            "vapour its volatility in mixtures is misjudged; relative volatilities with water or "
            "esters can be off by tens of per cent.",
            label(molecule),
            "low",
        )
        for molecule in molecules
        if molecule_facts(molecule).associates_in_vapour
    ]


def saturation_reasons(
    molecules: Sequence[Molecule],
    lines: Sequence[VapourPressure],
    lowest_K: float,
    highest_K: float,
) -> list[Reason]:
    """Reasons for vapour pressures that are estimated or used outside their range."""
    reasons = []
    for molecule, line in zip(molecules, lines, strict=True):
        name, error = label(molecule), line.uncertainty_ln
        if line.source in ("estimated", "published boiling point"):
            basis = (
                "from structure alone" if line.source == "estimated" else "from its boiling point"
            )
            reasons.append(
                Reason(
                    "vapour_pressure_estimated",
                    f"The vapour pressure of {name} is estimated {basis} ({line.equation}), about "
                    f"{_percent(error)} uncertain; every K-value of it carries that error.",
                    name,
                    "low" if error > LOW_ERROR_LN else "moderate",
                )
            )
        reasons += _extrapolated(name, line, lowest_K, highest_K)
    return reasons


def _extrapolated(
    name: str, line: VapourPressure, lowest_K: float, highest_K: float
) -> list[Reason]:
    """A reason if the equation is continued, graded by the error that costs."""
    lower, upper = line.range_K
    if lowest_K >= lower - 0.5 and highest_K <= upper + 0.5:
        return []
    outside = max(lower - lowest_K, highest_K - upper)
    error = float(line.uncertainty([lowest_K, highest_K]).max())
    return [
        Reason(
            "vapour_pressure_extrapolated",
            f"The vapour pressure of {name} holds from {lower:.0f} to {upper:.0f} K and is "
            f"continued by {outside:.0f} K; there it is about {_percent(error)} uncertain.",
            name,
            _saturation_cap(error),
        )
    ]


def _percent(error_ln: float) -> str:
    """An error of ln P as percent of P; beyond a factor of two, as that."""
    return f"{100.0 * error_ln:.0f} %" if error_ln < 0.7 else f"a factor {exp(error_ln):.0f}"


def _saturation_cap(error_ln: float) -> Grade:
    """The best grade that a vapour pressure so uncertain leaves."""
    if error_ln > LOW_ERROR_LN:
        return "low"
    return "moderate" if error_ln > MODERATE_ERROR_LN else "high"
