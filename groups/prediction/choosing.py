"""Which table a mixture gets: the user's choice or `auto`, with the stand-ins and refusals."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from functools import lru_cache

from groups.activity.choice import (
    COMPLETED_METHODS,
    Candidate,
    OnMissing,
    candidate,
)
from groups.confidence import Reason
from groups.confidence.calibration import TableWeight, mixture_weights
from groups.confidence.labels import label
from groups.confidence.parameter_rules import missing_reasons
from groups.errors import IncompleteAssignmentError, MissingParameterError, UnknownMethodError
from groups.parameters import METHODS, table
from groups.structure.assignment import Assignment, assign
from groups.structure.molecule import Molecule

ALL_METHODS: tuple[str, ...] = (*METHODS, "ideal", "auto")
# Tables fitted independently enough of one another that their agreement means something.
COMPARED_METHODS = (
    "unifac",
    "unifac-dortmund",
    "unifac-lyngby",
    "unifac-nist",
    "unifac-2.0",
    "unifac-dortmund-2.0",
)


@dataclass(frozen=True, slots=True)
class Choice:
    """The tables taken for a mixture, why, and the others that describe it too.

    `method` is "auto" or the table taken; `weights` holds one table, or several for "auto", the
    heaviest first. `assignments` holds, for every table that covers all molecules, one assignment
    a molecule. `reasons` are those that the way to the choice leaves behind.
    """

    method: str
    weights: tuple[TableWeight, ...]
    candidates: Mapping[str, Candidate]
    assignments: Mapping[str, tuple[Assignment, ...]]
    reasons: tuple[Reason, ...]

    @property
    def heaviest(self) -> Candidate:
        """The table taken, or the one of the largest weight."""
        return self.candidates[self.weights[0].method]

    @property
    def compared(self) -> tuple[str, ...]:
        """Published tables with every parameter and none suspect, beside a single one taken.

        A suspect parameter says nothing of another table's number: it would only raise an alarm
        at the table that has the better one.
        """
        return tuple(
            method
            for method in COMPARED_METHODS
            if method != self.method
            and method in self.candidates
            and not self.candidates[method].missing
            and not self.candidates[method].suspect
        )

    @property
    def tables(self) -> tuple[str, ...]:
        """Every table that is taken or compared, each once."""
        return tuple(dict.fromkeys([*(one.method for one in self.weights), *self.compared]))

    def counts(self, method: str) -> list[Mapping[int, int]]:
        """Subgroup counts of the molecules by one table's groups."""
        return [assignment.counts for assignment in self.assignments[method]]


def choose(molecules: Sequence[Molecule], method: str, on_missing: OnMissing) -> Choice:
    """Take a table for a mixture.

    Parameters
    ----------
    molecules : sequence of Molecule
    method : str
        An identifier of `ALL_METHODS` other than "ideal".
    on_missing : {"refuse", "estimate"}
        What to do where the table asked for lacks a parameter.

    Returns
    -------
    Choice

    Raises
    ------
    UnknownMethodError
        If the identifier does not exist.
    IncompleteAssignmentError
        If a molecule holds atoms that no group of the table (any table, for "auto") covers.
    MissingParameterError
        If a parameter is not published and estimates are refused or impossible.
    """
    if method not in ALL_METHODS:
        raise UnknownMethodError(method, ALL_METHODS)
    return _choose(tuple(molecules), method, on_missing)


@lru_cache(maxsize=4096)
def _choose(molecules: tuple[Molecule, ...], method: str, on_missing: OnMissing) -> Choice:
    complete, candidates = _described(molecules)
    if method == "auto":
        weights = _automatic(molecules, on_missing, candidates)
        return Choice("auto", weights, candidates, complete, ())
    if method not in candidates:
        raise _incomplete(molecules, method)
    taken, why, extra = _asked_for(method, on_missing, candidates)
    return Choice(taken, (TableWeight(taken, 1.0, why),), candidates, complete, extra)


def weighted_choice(molecules: tuple[Molecule, ...], weights: tuple[TableWeight, ...]) -> Choice:
    """The choice that `auto` makes, from weights already known.

    Parameters
    ----------
    molecules : tuple of Molecule
    weights : tuple of TableWeight
        The heaviest first, summing to one.

    Returns
    -------
    Choice
    """
    complete, candidates = _described(molecules)
    return Choice("auto", weights, candidates, complete, ())


def _automatic(
    molecules: tuple[Molecule, ...],
    on_missing: OnMissing,
    candidates: Mapping[str, Candidate],
) -> tuple[TableWeight, ...]:
    if not candidates:
        raise _incomplete_everywhere(molecules)
    weights = mixture_weights(molecules, on_missing)
    if not weights:
        nearest = min(candidates.values(), key=lambda one: len(_gaps(one, on_missing)))
        raise _missing(nearest, on_missing, "No table has every parameter. ")
    return weights


def _asked_for(
    method: str, on_missing: OnMissing, candidates: Mapping[str, Candidate]
) -> tuple[str, str, tuple[Reason, ...]]:
    """The table asked for, or the completed one that stands in for it."""
    asked = candidates[method]
    gaps = _gaps(asked, on_missing)
    if not gaps:
        return method, "asked for", ()
    stand_ins = COMPLETED_METHODS if method != "unifac" else COMPLETED_METHODS[::-1]
    usable = [m for m in stand_ins if m in candidates and not candidates[m].missing]
    if on_missing == "refuse" or not usable:
        raise _missing(asked, on_missing)
    why = (
        f"{method} was asked for and lacks {len(asked.missing)} group "
        f"pair{'s' if len(asked.missing) > 1 else ''}; a completed table stands in"
    )
    extra = tuple(
        Reason("method_replaced", f"{reason.message} {usable[0]} stands in.", reason.subject, "low")
        for reason in missing_reasons(table(method), asked.missing)
    )
    return usable[0], why, extra


@lru_cache(maxsize=16_384)
def _described(
    molecules: tuple[Molecule, ...],
) -> tuple[Mapping[str, tuple[Assignment, ...]], Mapping[str, Candidate]]:
    """Assignments and parameters of every table that covers all the molecules."""
    complete = {}
    for method in METHODS:
        assignments = tuple(assign(molecule, method) for molecule in molecules)
        if all(one.complete for one in assignments):
            complete[method] = assignments
    return complete, {m: candidate(m, [one.counts for one in a]) for m, a in complete.items()}


def _incomplete(molecules: tuple[Molecule, ...], method: str) -> IncompleteAssignmentError:
    """The first molecule that the table asked for does not cover."""
    assignments = [assign(molecule, method) for molecule in molecules]
    index = next((k for k, one in enumerate(assignments) if not one.complete), 0)
    smiles = molecules[index].canonical_smiles
    text = f"{label(molecules[index])} cannot be split into the groups of {method}."
    return _uncovered(index, text, smiles, assignments[index])


def _incomplete_everywhere(molecules: tuple[Molecule, ...]) -> IncompleteAssignmentError:
    """A molecule that no table covers; without one, the first that the common table does not."""
    covers = [[assign(molecule, method) for method in METHODS] for molecule in molecules]
    bare = [k for k, row in enumerate(covers) if not any(one.complete for one in row)]
    named = [row[METHODS.index("unifac-dortmund")] for row in covers]
    index = bare[0] if bare else next(k for k, one in enumerate(named) if not one.complete)
    smiles, name = molecules[index].canonical_smiles, label(molecules[index])
    text = (
        f"No table has groups for all of {name}."
        if bare
        else f"No one table has groups for every component; only some tables cover {name}."
    )
    error = _uncovered(index, text, smiles, named[index])
    error.cure = (
        "Leave this component out, or measure it; POST /v1/molecules shows the atoms that no "
        "group covers, table by table."
    )
    return error


def _uncovered(
    index: int, message: str, smiles: str, assignment: Assignment
) -> IncompleteAssignmentError:
    error = IncompleteAssignmentError(
        f"{message} {assignment.explanation}",
        smiles=smiles,
        method=assignment.method,
        atoms=assignment.unassigned_atoms,
    )
    error.field = f"components[{index}]"
    return error


def _gaps(one: Candidate, on_missing: OnMissing) -> tuple[tuple[int, int], ...]:
    """Pairs without parameter, or without a fitted one where estimates are refused."""
    return one.missing + (one.completed if on_missing == "refuse" else ())


def _missing(one: Candidate, on_missing: OnMissing, before: str = "") -> MissingParameterError:
    gaps = _gaps(one, on_missing)
    named = ", ".join(reason.subject for reason in missing_reasons(table(one.method), gaps))
    error = MissingParameterError(
        f"{before}The table of {one.method} has no published parameter for {named}.",
        method=one.method,
        pairs=gaps,
    )
    error.field = "on_missing" if on_missing == "refuse" else "method"
    return error
