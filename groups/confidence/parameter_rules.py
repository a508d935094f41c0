"""Reasons that come from the parameter tables: missing, completed, suspect, outside their range."""

from collections.abc import Iterable, Sequence
from itertools import combinations

from groups.confidence.confidence import Reason
from groups.parameters import MethodTable


def pair_name(table: MethodTable, pair: tuple[int, int]) -> str:
    """Readable name of a main-group pair, e.g. "OH / CH2CO"."""
    first, second = (table.main_names[table.main_index(number)] for number in pair)
    return f"{first} / {second}"


def missing_reasons(table: MethodTable, pairs: Iterable[tuple[int, int]]) -> list[Reason]:
    """One reason a pair that has no published parameter in this table."""
    return [
        Reason(
            "missing_parameter",
            f"The table of {table.method} has no parameter for {pair_name(table, pair)}; "
            "it gives no number for this mixture.",
            pair_name(table, pair),
            "none",
        )
        for pair in pairs
    ]


def completed_reasons(table: MethodTable, main_numbers: Sequence[int]) -> list[Reason]:
    """One reason a pair whose parameter was completed without a fitted one behind it."""
    return [
        Reason(
            "parameter_completed",
            f"No fitted parameter is published for {pair_name(table, pair)}; the value was "
            "completed by machine learning from other pairs. Such pairs are right in trend and "
            "often wrong in size.",
            pair_name(table, pair),
            "low",
        )
        for pair in combinations(sorted(main_numbers), 2)
        if table.completed[table.main_index(pair[0]), table.main_index(pair[1])]
    ]


def suspect_reasons(table: MethodTable, main_numbers: Sequence[int]) -> list[Reason]:
    """One reason a pair that the audit of the tables lists as suspect."""
    return [
        Reason(
            "parameter_suspect",
            f"The parameter of {table.method} for {pair_name(table, pair)} failed the audit: "
            f"{table.suspects[pair]}.",
            pair_name(table, pair),
        )
        for pair in combinations(sorted(main_numbers), 2)
        if pair in table.suspects
    ]


def temperature_reasons(table: MethodTable, lowest_K: float, highest_K: float) -> list[Reason]:
    """A reason if the temperatures leave the range the table was fitted for."""
    lower, upper = table.temperature_range_K
    outside = max(lower - lowest_K, highest_K - upper)
    if outside <= 0.0:
        return []
    side = "below" if lower - lowest_K >= highest_K - upper else "above"
    trend = (
        "; one constant parameter a pair carries the temperature dependence only roughly"
        if table.psi == "constant"
        else "; the polynomial in T behind it was fitted inside that range only"
    )
    return [
        Reason(
            "outside_temperature_range",
            f"{outside:.0f} K {side} the range of {table.method} "
            f"({lower:.0f} to {upper:.0f} K){trend}.",
            _range(lowest_K, highest_K),
        )
    ]


def _range(lowest_K: float, highest_K: float) -> str:
    """A range of temperatures, or the one temperature."""
    lower, upper = f"{lowest_K:.1f}", f"{highest_K:.1f}"
    return f"{lower} K" if lower == upper else f"{lower} to {upper} K"
