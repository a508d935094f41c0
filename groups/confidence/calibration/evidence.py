"""Open measurements behind the group pairs of a mixture, quoted from the built table."""

from collections.abc import Iterable, Mapping
from functools import cache

import numpy as np

from groups.confidence.calibration.model import read_rows
from groups.confidence.confidence import Evidence
from groups.parameters import MethodTable, table

PairStatistics = tuple[int, int, float, float, float]


def evidence(
    method: str, solute_main_numbers: Iterable[int], solvent_main_numbers: Iterable[int]
) -> tuple[Evidence, ...]:
    """What the open set says of each main-group pair between two molecules.

    Parameters
    ----------
    method : str
        Identifier of a published table.
    solute_main_numbers, solvent_main_numbers : iterable of int
        Main groups of the one and the other molecule; the order of the two does not matter.

    Returns
    -------
    tuple of Evidence
        One a pair of different main groups, the least evidence first.

    Raises
    ------
    UnknownMethodError
        For a method that does not exist.

    Source
    ------
    `evidence.csv`, whose origin is told in `evidence.toml`.
    """
    groups = table(method)
    pairs = cross_pairs(solute_main_numbers, solvent_main_numbers)
    found = [_told(groups, pair, _statistics().get((method, *pair))) for pair in sorted(pairs)]
    return tuple(sorted(found, key=lambda one: one.measurements))


def cross_pairs(first: Iterable[int], second: Iterable[int]) -> set[tuple[int, int]]:
    """Pairs of different main groups, one from either molecule, the lower number first.

    Parameters
    ----------
    first, second : iterable of int

    Returns
    -------
    set of tuple of int
    """
    second = tuple(second)
    return {(min(i, j), max(i, j)) for i in first for j in second if i != j}


def _told(groups: MethodTable, pair: tuple[int, int], found: PairStatistics | None) -> Evidence:
    first, second = (groups.main_names[groups.main_index(number)] for number in pair)
    if found is None:
        message = f"no measurement in the open set contains {first} with {second}"
        return Evidence(groups.method, (first, second), 0, 0, None, message)
    measurements, systems, _, _, error = found
    message = (
        f"based on {measurements} measurement{_s(measurements)} in {systems} "
        f"system{_s(systems)} containing {first} with {second}; "
        f"typical error {100.0 * np.expm1(error):.0f} %"
    )
    return Evidence(groups.method, (first, second), measurements, systems, error, message)


def _s(number: int) -> str:
    return "" if number == 1 else "s"


@cache
def _statistics() -> Mapping[tuple[str, int, int], PairStatistics]:
    """Measurements, systems, bias, robust spread and mean absolute error of each pair."""
    return {
        (row["method"], int(row["i"]), int(row["j"])): (
            int(row["measurements"]),
            int(row["systems"]),
            float(row["bias_ln_gamma"]),
            float(row["spread_ln_gamma"]),
            float(row["mean_absolute_error_ln_gamma"]),
        )
        for row in read_rows("evidence.csv")
    }
