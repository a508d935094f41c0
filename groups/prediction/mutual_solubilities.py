"""Mutual solubilities of a binary over temperature, with its consolute points."""

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from groups.activity.choice import OnMissing
from groups.confidence import Confidence, Reason, graded
from groups.confidence.calibration import TableWeight
from groups.equilibrium import MutualSolubility, mutual_solubility
from groups.errors import OutOfRangeError
from groups.prediction.bands import drawn_around
from groups.prediction.chances import SplitChance, split_chance
from groups.prediction.checks import check_components, check_temperatures
from groups.prediction.component import Component
from groups.prediction.split_method import split_reasons, splitting_liquid
from groups.structure.molecule import Molecule

POINTS_RANGE = (2, 501)


@dataclass(frozen=True, slots=True)
class MutualSolubilityAnswer:
    """Two liquids over temperature; NaN where there is one liquid."""

    components: tuple[Molecule, ...]
    method: str
    methods_used: tuple[TableWeight, ...]
    found: MutualSolubility
    chances: tuple[tuple[float, SplitChance], ...]  # at the lowest, middle, highest temperature
    confidence: Confidence


def mutual_solubilities(
    components: Sequence[Component],
    *,
    lowest_K: float,
    highest_K: float,
    points: int = 21,
    method: str = "auto",
    on_missing: OnMissing = "estimate",
) -> MutualSolubilityAnswer:
    """What two liquids dissolve of each other between two temperatures.

    Parameters
    ----------
    components : sequence of two Component
    lowest_K, highest_K : float
    points : int
        Equal steps, both ends included, 2 to 501.
    method : str
        An identifier of `ALL_METHODS`; "auto" takes the table fitted to splits where it holds.
    on_missing : {"refuse", "estimate"}

    Returns
    -------
    MutualSolubilityAnswer

    Raises
    ------
    InvalidInputError
        If a number lies outside its range or the shapes do not fit.
    PredictionError
        If no table gives the numbers.

    Source
    ------
    See `groups.equilibrium.mutual_solubility`.
    """
    molecules = tuple(component.molecule for component in components)
    check_components(molecules, least=2, most=2)
    lower, upper = (
        _checked("lowest_K", lowest_K),
        _checked("highest_K", highest_K),
    )
    if not lower < upper:
        raise OutOfRangeError("highest_K", upper, lower, 1000.0)
    if not POINTS_RANGE[0] <= points <= POINTS_RANGE[1]:
        raise OutOfRangeError("points", points, *POINTS_RANGE)
    mixture, chosen = splitting_liquid(molecules, method, on_missing, lower, upper)
    found = mutual_solubility(mixture.model, np.linspace(lower, upper, points))
    liquids = np.vstack([found.first[found.splits], found.second[found.splits]])
    temperatures = np.tile(found.temperature_K[found.splits], 2)
    if not len(liquids):
        liquids, temperatures = np.full((1, 2), 0.5), np.array([0.5 * (lower + upper)])
    reasons = [*chosen, *mixture.reasons(temperatures, liquids)]
    reasons += split_reasons(mixture.method, bool(found.splits.any()))
    if found.consolute_points:
        reasons.append(_CONSOLUTE)
    places = (lower, 0.5 * (lower + upper), upper)
    return MutualSolubilityAnswer(
        molecules,
        mixture.method,
        mixture.methods_used,
        found,
        _chances(molecules, on_missing, places) if mixture.compared else (),
        graded(reasons, mixture.evidence),
    )


def _checked(name: str, temperature_K: float) -> float:
    try:
        return float(check_temperatures(temperature_K)[0])
    except OutOfRangeError as error:
        raise OutOfRangeError(name, temperature_K, 100.0, 1000.0) from error


def _chances(
    molecules: Sequence[Molecule], on_missing: OnMissing, temperatures: Sequence[float]
) -> tuple[tuple[float, SplitChance], ...]:
    chances = []
    for T in temperatures:
        drawn = drawn_around(molecules, on_missing, T)
        if drawn is not None:
            chances.append((T, split_chance(drawn, T)))
    return tuple(chances)


_CONSOLUTE = Reason(
    "consolute_point_uncertain",
    "Where two liquids become one is what these tables predict worst: measured consolute "
    "temperatures are missed by about 25 K on average, and some are not found at all.",
    "consolute point",
    "low",
)
