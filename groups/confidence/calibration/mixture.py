"""The weights of `auto` for one mixture of any number of components."""

from collections.abc import Sequence
from dataclasses import dataclass
from functools import lru_cache
from itertools import combinations

import numpy as np

from groups.activity.choice import OnMissing, candidate
from groups.arrays import BoolArray, FloatArray
from groups.confidence.calibration.dilute import REFERENCE_TEMPERATURE_K, TABLES, dilute_tables
from groups.confidence.calibration.intervals import DiluteAnswers
from groups.confidence.calibration.weights import dispute, distances, weights_from
from groups.structure.assignment import assign
from groups.structure.molecule import Molecule


@dataclass(frozen=True, slots=True)
class TableWeight:
    """One table of a weighted sum, its weight, and why it got it."""

    method: str
    weight: float
    why: str


def mixture_weights(
    molecules: Sequence[Molecule], on_missing: OnMissing = "estimate"
) -> tuple[TableWeight, ...]:
    """The tables that `auto` takes for a mixture and their weights.

    The distance of a table from the others is the mean over all binary pairs of the mixture, so
    the order of the components does not matter, and a binary gets the weights of its pair.

    Parameters
    ----------
    molecules : sequence of Molecule
        Two or more, all different.
    on_missing : {"refuse", "estimate"}
        With "refuse", tables with completed parameters are left out.

    Returns
    -------
    tuple of TableWeight
        The heaviest first; weights sum to 1. Empty where no table describes the mixture.
    """
    return _mixture_weights(tuple(molecules), on_missing)


@lru_cache(maxsize=4096)
def _mixture_weights(
    molecules: tuple[Molecule, ...], on_missing: OnMissing
) -> tuple[TableWeight, ...]:
    pairs = [(a, b, REFERENCE_TEMPERATURE_K) for a, b in combinations(molecules, 2)]
    tables = dilute_tables(pairs, on_missing)
    usable = np.array([_usable(molecules, method, on_missing) for method in TABLES])
    apart = np.where(usable, np.mean(distances(tables), axis=0), np.nan)
    completed = np.asarray(tables.completed.any(axis=0))
    suspect = np.asarray(tables.suspect.any(axis=0))
    disputed = np.mean(dispute(tables), keepdims=True)
    weights = weights_from(apart[None], disputed, usable[None], completed[None], suspect[None])[0]
    return _named(weights, apart, completed, suspect)


def pair_weights(answers: DiluteAnswers) -> list[tuple[TableWeight, ...]]:
    """The tables behind each dilute pair of a batch, as `mixture_weights` gives them for one.

    Parameters
    ----------
    answers : DiluteAnswers

    Returns
    -------
    list of tuple of TableWeight, length n_pairs
        The heaviest first; empty where no table gives a number.
    """
    tables = answers.tables
    rows = zip(answers.weights, distances(tables), tables.completed, tables.suspect, strict=True)
    return [_named(*row) for row in rows]


def _named(
    weights: FloatArray, apart: FloatArray, completed: BoolArray, suspect: BoolArray
) -> tuple[TableWeight, ...]:
    """The tables with a weight, by name, the heaviest first."""
    return tuple(
        TableWeight(
            TABLES[k],
            float(weights[k]),
            _why(float(apart[k]), bool(completed[k]), bool(suspect[k])),
        )
        for k in np.argsort(-weights, kind="stable")
        if weights[k] > 0.0
    )


def _usable(molecules: tuple[Molecule, ...], method: str, on_missing: OnMissing) -> bool:
    """Whether the table describes the whole mixture; a component may bring pairs of its own."""
    assignments = [assign(molecule, method) for molecule in molecules]
    if not all(one.complete for one in assignments):
        return False
    found = candidate(method, [one.counts for one in assignments])
    return not found.missing and (on_missing == "estimate" or not found.completed)


def _why(apart: float, completed: bool, suspect: bool) -> str:
    """One clause for the reader."""
    parts = [f"{apart:.2f} in ln gamma from the median of the tables"]
    if completed:
        parts.append("holds parameters completed by machine learning")
    if suspect:
        parts.append("holds a parameter that failed the audit")
    return "; ".join(parts)
