"""The strongest warning there is: how far independent published tables lie apart."""

from math import exp, log

from groups.confidence.confidence import Reason

# Difference in ln gamma beyond which tables are said to disagree: three times the scatter of
# repeated measurements.
DISAGREE = 0.30
LEAST_CORRECTION = 0.05


def agreement_reasons(method: str, spreads: dict[str, float]) -> list[Reason]:
    """What other published tables say of the same number.

    The interval already grows with the disagreement, so these reasons cap no grade.

    Parameters
    ----------
    method : str
        The table that gave the number.
    spreads : dict of str to float
        Other tables and their largest absolute difference in ln gamma from it.
    """
    own = "the weighted choice" if method == "auto" else method
    if not spreads:
        return [
            Reason(
                "no_second_table",
                f"No other published table describes this mixture, so nothing checks {own}.",
                method,
            )
        ]
    farthest = max(spreads, key=lambda other: spreads[other])
    spread = spreads[farthest]
    named = ", ".join(f"{other} {value:.2f}" for other, value in sorted(spreads.items()))
    if spread <= DISAGREE:
        return [
            Reason(
                "tables_agree",
                f"Published tables agree with {own} within {spread:.2f} in ln gamma ({named}).",
                method,
            )
        ]
    return [
        Reason(
            "tables_disagree",
            f"Published tables disagree: {farthest} differs from {own} by {spread:.2f} in "
            f"ln gamma, {_factor(spread)} in gamma ({named}).",
            f"{method} / {farthest}",
        )
    ]


def _factor(spread_ln_gamma: float) -> str:
    """A ratio in words; beyond a thousand its digits mean nothing."""
    if spread_ln_gamma > log(1000.0):
        return "more than a thousandfold"
    factor = exp(spread_ln_gamma)
    return f"a factor {factor:.1f}" if factor < 10.0 else f"a factor {factor:.0f}"


def correction_reasons(largest_ln_gamma: float) -> list[Reason]:
    """That the weighted tables were corrected by what alike systems measured.

    Parameters
    ----------
    largest_ln_gamma : float
        Size of the largest correction of ln gamma at infinite dilution in the mixture.
    """
    if largest_ln_gamma < LEAST_CORRECTION:
        return []
    return [
        Reason(
            "learned_correction",
            f"Up to {largest_ln_gamma:.2f} in ln gamma at infinite dilution was added to the "
            "weighted tables, by which they err on alike systems that were measured. It acts "
            "at high dilution and fades towards the middle of the composition range.",
            "auto",
        )
    ]
