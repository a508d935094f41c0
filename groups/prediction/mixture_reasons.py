"""Reasons to doubt a mixture that depend on neither temperature nor composition."""

from collections.abc import Mapping, Sequence
from functools import lru_cache
from itertools import combinations

import numpy as np

from groups.activity import activity_model
from groups.confidence import Evidence, Reason
from groups.confidence.calibration import evidence
from groups.confidence.chemistry_rules import chemistry_reasons
from groups.confidence.parameter_rules import completed_reasons, suspect_reasons
from groups.confidence.structure_rules import (
    ambiguity_reasons,
    isomer_reasons,
    polar_reasons,
    polyol_reasons,
    size_reasons,
    water_reasons,
)
from groups.errors import MissingParameterError
from groups.parameters import table
from groups.prediction.choosing import Choice
from groups.structure.molecule import Molecule

REFERENCE_TEMPERATURE_K = 298.15
MOST_COMPLETED_WEIGHT = 0.5
MOST_EVIDENCE = 8


def mixture_reasons(molecules: Sequence[Molecule], choice: Choice) -> tuple[Reason, ...]:
    """Reasons from the tables taken and from the molecules, whatever the conditions.

    Parameters completed without data are told where more than half of the weight rests on them.

    Parameters
    ----------
    molecules : sequence of Molecule
    choice : Choice

    Returns
    -------
    tuple of Reason
    """
    heaviest = choice.heaviest
    return (
        *choice.reasons,
        *_completed(choice),
        *suspect_reasons(table(heaviest.method), heaviest.main_numbers),
        *chemistry_reasons(molecules),
        *polyol_reasons(molecules),
        *water_reasons(molecules),
        *polar_reasons(molecules),
        *size_reasons(molecules),
        *isomer_reasons(molecules, choice.assignments[heaviest.method]),
        *ambiguity_reasons(molecules, _changes_by_alternatives(molecules, choice)),
    )


def choice_evidence(choice: Choice) -> tuple[Evidence, ...]:
    """Open measurements behind the group pairs of the heaviest table, the thinnest first.

    Parameters
    ----------
    choice : Choice

    Returns
    -------
    tuple of Evidence
        At most `MOST_EVIDENCE`.
    """
    method = choice.heaviest.method
    mains = [
        tuple(sorted({group.main_number for group in assignment.groups}))
        for assignment in choice.assignments[method]
    ]
    return _evidence(method, tuple(mains))


@lru_cache(maxsize=8192)
def _evidence(method: str, mains: tuple[tuple[int, ...], ...]) -> tuple[Evidence, ...]:
    found = [
        one for first, second in combinations(mains, 2) for one in evidence(method, first, second)
    ]
    unique = dict.fromkeys(sorted(found, key=lambda one: one.measurements))
    return tuple(unique)[:MOST_EVIDENCE]


def _completed(choice: Choice) -> list[Reason]:
    """Completed pairs of the heaviest table that has any, if such tables carry the answer."""
    holding = [one for one in choice.weights if choice.candidates[one.method].completed]
    if sum(one.weight for one in holding) <= MOST_COMPLETED_WEIGHT:
        return []
    first = choice.candidates[holding[0].method]
    return completed_reasons(table(first.method), first.main_numbers)


def _changes_by_alternatives(molecules: Sequence[Molecule], choice: Choice) -> dict[str, float]:
    """Largest change in ln gamma that another, equally good cover of a molecule brings.

    Taken at equal fractions and at infinite dilution of each component, at 298.15 K.
    """
    method = choice.heaviest.method
    counts = choice.counts(method)
    changes: dict[str, float] = {}
    for index, assignment in enumerate(choice.assignments[method]):
        for alternative in assignment.alternatives:
            other = [*counts[:index], dict(alternative), *counts[index + 1 :]]
            change = _largest_change(method, counts, other)
            smiles = molecules[index].canonical_smiles
            changes[smiles] = max(changes.get(smiles, 0.0), change)
    return changes


def _largest_change(
    method: str, counts: Sequence[Mapping[int, int]], other: Sequence[Mapping[int, int]]
) -> float:
    """Largest |change in ln gamma| between two ways to split; 0 where the other has no number."""
    n = len(counts)
    points = np.vstack([np.full((1, n), 1.0 / n), np.eye(n)])
    try:
        alternative = activity_model(other, method).ln_gamma(REFERENCE_TEMPERATURE_K, points)
    except MissingParameterError:
        return 0.0
    first = activity_model(counts, method).ln_gamma(REFERENCE_TEMPERATURE_K, points)
    return float(np.max(np.abs(alternative - first)))
