"""Which table a liquid split gets when none is asked for.

On handbook mutual solubilities with water (11 pairs at 10 to 40 degrees Celsius, both ends) the
table fitted to liquid-liquid data misses by 0.47 in ln x on average, the weighted choice by 0.59
and every other table by 0.60 or more. Away from that range it is worse: it places 2 of 7 consolute
points, the weighted choice 5. So it is taken within its range and nowhere else.

Source
------
tests/bench/measure_phase_behaviour.py.
"""

from collections.abc import Sequence
from dataclasses import replace

from groups.activity.choice import OnMissing
from groups.confidence import Reason
from groups.confidence.calibration import TableWeight
from groups.confidence.labels import label
from groups.errors import PredictionError
from groups.parameters import table
from groups.prediction.liquid import Liquid, liquid
from groups.structure.facts import molecule_facts
from groups.structure.molecule import Molecule

SPLIT_METHOD = "unifac-lle"
#: How far beyond the range of its data the table is still taken, in K. Common practice, no source.
MARGIN_K = 5.0


def splitting_liquid(
    molecules: Sequence[Molecule],
    method: str,
    on_missing: OnMissing,
    lowest_K: float,
    highest_K: float,
) -> tuple[Liquid, list[Reason]]:
    """The liquid of a question about splits, and why its table was taken.

    Parameters
    ----------
    molecules : sequence of Molecule
    method : str
        "auto" takes the table fitted to splits where it holds, else the weighted choice.
    on_missing : {"refuse", "estimate"}
    lowest_K, highest_K : float
        Of the question.

    Returns
    -------
    tuple of Liquid and a list of Reason

    Raises
    ------
    PredictionError
        If no table describes the mixture.
    """
    if method != "auto":
        return liquid(molecules, method, on_missing), []
    lower, upper = table(SPLIT_METHOD).temperature_range_K
    if lower - MARGIN_K <= lowest_K and highest_K <= upper + MARGIN_K:
        try:
            taken = liquid(molecules, SPLIT_METHOD, "refuse")
            why = "the default for liquid splits near room temperature"
            use = TableWeight(SPLIT_METHOD, 1.0, why)
            return replace(taken, methods_used=(use,)), [_TAKEN, *_traces(molecules)]
        except PredictionError:
            pass  # a group or a parameter is missing: the weighted choice may have it
    return liquid(molecules, "auto", on_missing), []


_TAKEN = Reason(
    "table_chosen_for_splits",
    "The table fitted to liquid-liquid data is taken: of all tables here it misses measured mutual "
    "solubilities with water least, by a factor of 1.6 on average between 10 and 40 degrees "
    "Celsius. Vapour-liquid answers use other tables and may place the same split elsewhere.",
    SPLIT_METHOD,
    "moderate",
)


def _traces(molecules: Sequence[Molecule]) -> list[Reason]:
    """A reason for each hydrocarbon-like molecule beside water."""
    if not any(molecule.canonical_smiles == "O" for molecule in molecules):
        return []
    return [
        Reason(
            "trace_in_water",
            f"What water dissolves of {label(molecule)} is a trace that no table here was fitted "
            "to; for hexane this table gives 25 times the measured solubility.",
            label(molecule),
            "low",
        )
        for molecule in molecules
        if molecule_facts(molecule).is_hydrophobe
    ]


def split_reasons(method: str, splits: bool) -> list[Reason]:
    """The doubt about a split by a table that was fitted to vapour-liquid data.

    Parameters
    ----------
    method : str
    splits : bool

    Returns
    -------
    list of Reason
    """
    if method == SPLIT_METHOD or not splits:
        return []
    return [
        Reason(
            "table_not_fitted_to_splits",
            f"{method} was fitted to vapour-liquid data first; mutual solubilities from it are "
            "right in order of magnitude, seldom better than a factor of two.",
            method,
            "low",
        )
    ]
