"""A batch of pairs at infinite dilution, of which some may hold a molecule that cannot be taken."""

import re
from collections.abc import Sequence

from api import answers
from api.molecules_in import Refused, batch_of, refuse
from api.problems import problem_of_error
from api.schemas.activity import (
    InfiniteDilutionRequest,
    InfiniteDilutionResponse,
    InfiniteDilutionResult,
)
from api.schemas.confidence import Confidence, Reason
from groups import prediction
from groups.errors import DuplicateComponentError, InvalidInputError
from groups.structure.molecule import Molecule

_Outcome = Molecule | Refused
_INDEXED = re.compile(r"^pairs\[(\d+)\]")


def predicted_pairs(request: InfiniteDilutionRequest) -> InfiniteDilutionResponse:
    """One result a pair, in the order of the request."""
    fields = [
        (f"/pairs/{k}/{role}", getattr(pair, role))
        for k, pair in enumerate(request.pairs)
        for role in ("solute", "solvent")
    ]
    outcomes = batch_of(fields)
    pairs = list(zip(outcomes[::2], outcomes[1::2], strict=True))
    faults = {k: fault for k, pair in enumerate(pairs) if (fault := _fault(k, pair)) is not None}
    if len(faults) == len(pairs):
        refuse(list(faults.values()))
    described = [
        (k, (solute, solvent, request.pairs[k].temperature_K))
        for k, (solute, solvent) in enumerate(pairs)
        if isinstance(solute, Molecule) and isinstance(solvent, Molecule) and k not in faults
    ]
    computed = _computed(described, request)
    results = [
        computed[k] if k in computed else _refused(pair, request.pairs[k].temperature_K, faults[k])
        for k, pair in enumerate(pairs)
    ]
    return InfiniteDilutionResponse(results=results, cautions=answers.cautions())


def _computed(
    described: Sequence[tuple[int, tuple[Molecule, Molecule, float]]],
    request: InfiniteDilutionRequest,
) -> dict[int, InfiniteDilutionResult]:
    """Results by the place of the pair in the request."""
    places = [k for k, _ in described]
    try:
        found = prediction.infinite_dilution(
            [pair for _, pair in described],
            method=request.method,
            on_missing=request.on_missing,
            level=request.level,
        )
    except InvalidInputError as error:
        error.field = _INDEXED.sub(lambda m: f"pairs[{places[int(m[1])]}]", error.field or "")
        error.field = error.field or None
        raise
    converted = (answers.infinite_dilution_result(answer, request.level) for answer in found)
    return dict(zip(places, converted, strict=True))


def _fault(place: int, pair: tuple[_Outcome, _Outcome]) -> Refused | None:
    """Why a pair cannot be taken, if it cannot: a molecule, or twice the same one.

    Collections of measurements hold both, so neither costs the other pairs their numbers.
    """
    solute, solvent = pair
    if isinstance(solute, Refused):
        return solute
    if isinstance(solvent, Refused):
        return solvent
    if solute.canonical_smiles == solvent.canonical_smiles:
        error = DuplicateComponentError(solute.canonical_smiles, 0, 1)
        return Refused(f"/pairs/{place}/solvent", error)
    return None


def _refused(
    pair: tuple[_Outcome, _Outcome], temperature_K: float, refused: Refused
) -> InfiniteDilutionResult:
    """The place of a pair that cannot be taken."""
    solute, solvent = (None if isinstance(one, Refused) else answers.identity(one) for one in pair)
    problem = problem_of_error(refused.error, refused.field)
    reason = Reason(
        code="pair_not_described",
        message=problem.detail,
        subject="solute" if refused is pair[0] else "solvent",
        best_grade="none",
    )
    return InfiniteDilutionResult(
        solute=solute,
        solvent=solvent,
        temperature_K=temperature_K,
        ln_gamma_inf=None,
        gamma_inf=None,
        method=None,
        methods_used=[],
        confidence=Confidence(grade="none", reasons=[reason], evidence=[]),
        problem=problem,
    )
