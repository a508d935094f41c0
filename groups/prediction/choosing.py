"""Which table a mixture gets: the user's choice or `auto`, with the stand-ins and refusals."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from functools import lru_cache

from groups.activity.choice import (
    COMPLETED_METHODS,
    Candidate,
    OnMissing,
    candidate,
    preference,
    why_taken,
)
from groups.confidence import Reason
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
    """The table taken for a mixture, why, and the others that describe it too.

    `assignments` holds, for every table that covers all molecules, one assignment a molecule.
    `reasons` are those that the way to the choice leaves behind.
    """

    taken: Candidate
    why: str
    candidates: Mapping[str, Candidate]
    assignments: Mapping[str, tuple[Assignment, ...]]
    reasons: tuple[Reason, ...]

    @property
    def others(self) -> tuple[str, ...]:
        """Published tables, beside the one taken, with every parameter and none suspect.

        A suspect parameter says nothing of another table's number: it would only raise an alarm
        at the table that has the better one.
        """
        return tuple(
            method
            for method in COMPARED_METHODS
            if method != self.taken.method
            and method in self.candidates
            and not self.candidates[method].missing
            and not self.candidates[method].suspect
        )

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
    covers = {m: tuple(assign(molecule, m) for molecule in molecules) for m in METHODS}
    complete = {m: a for m, a in covers.items() if all(one.complete for one in a)}
    candidates = {m: candidate(m, [one.counts for one in a]) for m, a in complete.items()}
    if method == "auto":
        taken, why = _automatic(molecules, on_missing, covers, candidates)
        return Choice(taken, why, candidates, complete, ())
    if method not in candidates:
        raise _incomplete(molecules, covers[method], method)
    taken, why, extra = _asked_for(method, on_missing, candidates)
    return Choice(taken, why, candidates, complete, extra)


def _automatic(
    molecules: tuple[Molecule, ...],
    on_missing: OnMissing,
    covers: Mapping[str, tuple[Assignment, ...]],
    candidates: Mapping[str, Candidate],
) -> tuple[Candidate, str]:
    if not candidates:
        raise _incomplete(molecules, covers["unifac-dortmund"], "unifac-dortmund or another table")
    order = preference(list(candidates.values()), on_missing)
    if not order:
        raise _missing(next(iter(candidates.values())))
    return order[0], why_taken(order[0], list(candidates.values()))


def _asked_for(
    method: str, on_missing: OnMissing, candidates: Mapping[str, Candidate]
) -> tuple[Candidate, str, tuple[Reason, ...]]:
    """The table asked for, or the completed one that stands in for it."""
    asked = candidates[method]
    gaps = asked.missing + (asked.completed if on_missing == "refuse" else ())
    if not gaps:
        return asked, "asked for", ()
    stand_ins = COMPLETED_METHODS if method != "unifac" else COMPLETED_METHODS[::-1]
    usable = [m for m in stand_ins if m in candidates and not candidates[m].missing]
    if on_missing == "refuse" or not usable:
        raise _missing(asked)
    why = (
        f"{method} was asked for and lacks {len(asked.missing)} group "
        f"pair{'s' if len(asked.missing) > 1 else ''}; a completed table stands in"
    )
    extra = tuple(
        Reason("method_replaced", f"{reason.message} {usable[0]} stands in.", reason.subject, "low")
        for reason in missing_reasons(table(method), asked.missing)
    )
    return candidates[usable[0]], why, extra


def _incomplete(
    molecules: tuple[Molecule, ...], assignments: tuple[Assignment, ...], named: str
) -> IncompleteAssignmentError:
    index = next(k for k, one in enumerate(assignments) if not one.complete)
    bad = assignments[index]
    error = IncompleteAssignmentError(
        f"{molecules[index].canonical_smiles} cannot be split into the groups of {named}. "
        f"{bad.explanation}",
        smiles=molecules[index].canonical_smiles,
        method=bad.method,
        atoms=bad.unassigned_atoms,
    )
    error.field = f"components[{index}]"
    return error


def _missing(one: Candidate) -> MissingParameterError:
    gaps = one.missing or one.completed
    named = ", ".join(reason.subject for reason in missing_reasons(table(one.method), gaps))
    return MissingParameterError(
        f"The table of {one.method} has no published parameter for {named}.",
        method=one.method,
        pairs=gaps,
    )
