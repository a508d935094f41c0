"""The strongest warning there is: how far independent published tables lie apart."""

from math import exp, log

from groups.confidence.confidence import Grade, Reason

# Differences in ln gamma between published tables, and the grade they leave. The measured error
# of ln gamma-infinity in each band stands in the README (made by tests/bench).
AGREE = 0.10
DISAGREE = 0.30
DISAGREE_STRONGLY = 0.70


def disagreement_cap(spread_ln_gamma: float) -> Grade:
    """The best grade that a spread between tables leaves."""
    if spread_ln_gamma <= AGREE:
        return "high"
    return "moderate" if spread_ln_gamma <= DISAGREE_STRONGLY else "low"


def agreement_reasons(method: str, spreads: dict[str, float]) -> list[Reason]:
    """What other published tables say of the same number.

    Parameters
    ----------
    method : str
        The table that gave the number.
    spreads : dict of str to float
        Other tables and their largest absolute difference in ln gamma from it.
    """
    if not spreads:
        return [
            Reason(
                "no_second_table",
                f"No other published table describes this mixture, so nothing checks {method}.",
                method,
                "moderate",
            )
        ]
    farthest = max(spreads, key=lambda other: spreads[other])
    spread = spreads[farthest]
    named = ", ".join(f"{other} {value:.2f}" for other, value in sorted(spreads.items()))
    if spread <= DISAGREE:
        return [
            Reason(
                "tables_agree",
                f"Published tables agree with {method} within {spread:.2f} in ln gamma ({named}).",
                method,
                disagreement_cap(spread),
            )
        ]
    return [
        Reason(
            "tables_disagree",
            f"Published tables disagree: {farthest} differs from {method} by {spread:.2f} in "
            f"ln gamma, {_factor(spread)} in gamma ({named}).",
            f"{method} / {farthest}",
            disagreement_cap(spread),
        )
    ]


def _factor(spread_ln_gamma: float) -> str:
    """A ratio in words; beyond a thousand its digits mean nothing."""
    if spread_ln_gamma > log(1000.0):
        return "more than a thousandfold"
    factor = exp(spread_ln_gamma)
    return f"a factor {factor:.1f}" if factor < 10.0 else f"a factor {factor:.0f}"
