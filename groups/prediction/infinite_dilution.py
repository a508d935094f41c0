"""Activity coefficients at infinite dilution, many pairs at once."""

from collections import defaultdict
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from functools import lru_cache

import numpy as np

from groups.activity import ln_gamma_infinite_pairs
from groups.activity.choice import OnMissing
from groups.arrays import FloatArray
from groups.confidence import Evidence, Interval, Reason, graded
from groups.confidence.agreement_rules import agreement_reasons, correction_reasons
from groups.confidence.calibration import (
    TABLES,
    DiluteAnswers,
    dilute_answers,
    pair_weights,
)
from groups.confidence.chemistry_rules import gas_reasons
from groups.confidence.parameter_rules import temperature_reasons
from groups.errors import (
    MissingParameterError,
    MixwrightError,
    OutOfRangeError,
    PredictionError,
)
from groups.parameters import table
from groups.prediction.answers import InfiniteDilutionAnswer
from groups.prediction.bands import LEVEL
from groups.prediction.checks import check_components, check_temperatures
from groups.prediction.choosing import Choice, choose, weighted_choice
from groups.prediction.liquid import liquid
from groups.prediction.mixture_reasons import choice_evidence, mixture_reasons
from groups.structure.assignment import assign
from groups.structure.molecule import Molecule

DilutePair = tuple[Molecule, Molecule, float]


def infinite_dilution(
    pairs: Sequence[DilutePair],
    method: str = "auto",
    on_missing: OnMissing = "estimate",
    level: float | None = None,
) -> tuple[InfiniteDilutionAnswer, ...]:
    """ln gamma at infinite dilution of each solute in each solvent.

    Parameters
    ----------
    pairs : sequence of (Molecule, Molecule, float)
        Solute, solvent and temperature in K.
    method : str
        An identifier of `ALL_METHODS`.
    on_missing : {"refuse", "estimate"}
    level : float, optional
        Probability of a second interval beside the one of 90 %, 0.01 to 0.99.

    Returns
    -------
    tuple of InfiniteDilutionAnswer
        One a pair, in order; NaN with a reason where no number could be had.

    Raises
    ------
    InvalidInputError
        If a temperature lies outside its range, a pair repeats one molecule, or the method does
        not exist.

    Source
    ------
    The table named by `method` in each answer; see `groups.activity`.
    """
    _check(pairs)
    if method == "ideal":
        return tuple(_ideal(pair) for pair in pairs)
    if method == "auto":
        return _by_auto(pairs, on_missing, level)
    choices = [_choice_or_refusal(pair, method, on_missing) for pair in pairs]
    numbers = _numbers_by_method(pairs, choices)
    found = dilute_answers(pairs)
    ends = _ends(found, LEVEL)
    wished = None if level is None else _ends(found, level)
    return tuple(
        _refused(pair, method, choice)
        if isinstance(choice, PredictionError)
        else _answered(
            pair,
            _told(pair, choice),
            {m: float(column[k]) for m, column in numbers.items()},
            float(numbers[choice.heaviest.method][k]),
            ends[k],
            None if wished is None else wished[k],
        )
        for k, (pair, choice) in enumerate(zip(pairs, choices, strict=True))
    )


def _by_auto(
    pairs: Sequence[DilutePair], on_missing: OnMissing, level: float | None
) -> tuple[InfiniteDilutionAnswer, ...]:
    """All pairs in whole arrays; only the reasons are gathered pair by pair."""
    found = dilute_answers(pairs, on_missing)
    ends = _ends(found, LEVEL)
    wished = None if level is None else _ends(found, level)
    weights = pair_weights(found)
    told: dict[tuple[str, str], _Told] = {}
    answers = []
    for k, pair in enumerate(pairs):
        if weights[k]:
            key = (pair[0].canonical_smiles, pair[1].canonical_smiles)
            if key not in told:  # weights and reasons do not depend on temperature
                told[key] = _told(pair, weighted_choice(pair[:2], weights[k]))
            numbers = dict(zip(TABLES, map(float, found.tables.ln_gamma[k]), strict=True))
            other = None if wished is None else wished[k]
            value, added = float(found.ln_gamma[k]), float(found.correction[k])
            answers.append(
                _answered(
                    pair, told[key], numbers, value, ends[k], other, correction_reasons(abs(added))
                )
            )
        else:
            answers.append(_refused(pair, "auto", _refusal(pair, on_missing)))
    return tuple(answers)


def _ends(found: DiluteAnswers, level: float) -> list[tuple[float, float]]:
    """Ends of the interval of every pair."""
    lower, upper = found.interval(level)
    return list(zip(lower.tolist(), upper.tolist(), strict=True))


def _refusal(pair: DilutePair, on_missing: OnMissing) -> PredictionError:
    """Why no table gives a number for the pair."""
    refusal = _choice_or_refusal(pair, "auto", on_missing)
    assert isinstance(refusal, PredictionError)
    return refusal


def _check(pairs: Sequence[DilutePair]) -> None:
    for index, (solute, solvent, temperature_K) in enumerate(pairs):
        try:
            check_components([solute, solvent], least=2, most=2)
            check_temperatures(temperature_K)
        except MixwrightError as error:
            inside = ".temperature_K" if isinstance(error, OutOfRangeError) else ""
            error.field = f"pairs[{index}]{inside}"
            raise


def _choice_or_refusal(
    pair: DilutePair, method: str, on_missing: OnMissing
) -> Choice | PredictionError:
    try:
        return choose(pair[:2], method, on_missing)
    except PredictionError as error:
        return error


def _numbers_by_method(
    pairs: Sequence[DilutePair], choices: Sequence[Choice | PredictionError]
) -> dict[str, FloatArray]:
    """ln gamma-infinity by every table that describes the pair; each table is asked once."""
    rows: dict[str, list[int]] = defaultdict(list)
    for index, choice in enumerate(choices):
        if isinstance(choice, Choice):
            for method in choice.tables:
                rows[method].append(index)
    numbers = {}
    for method, indices in rows.items():
        column = np.full(len(pairs), np.nan)
        column[indices] = ln_gamma_infinite_pairs(
            method,
            [_counts(pairs[k][0], method) for k in indices],
            [_counts(pairs[k][1], method) for k in indices],
            np.array([pairs[k][2] for k in indices]),
        )
        numbers[method] = column
    return numbers


@lru_cache(maxsize=100_000)
def _counts(molecule: Molecule, method: str) -> Mapping[int, int]:
    """Subgroup counts; one object a molecule, which the batch is quick to tell apart."""
    return assign(molecule, method).counts


@dataclass(frozen=True, slots=True)
class _Told:
    """What a choice has to tell of a pair, whatever the temperature."""

    choice: Choice
    compared: tuple[str, ...]
    reasons: tuple[Reason, ...]
    evidence: tuple[Evidence, ...]


def _told(pair: DilutePair, choice: Choice) -> _Told:
    reasons = mixture_reasons(pair[:2], choice)
    return _Told(choice, choice.compared, reasons, choice_evidence(choice))


def _answered(
    pair: DilutePair,
    told: _Told,
    numbers: Mapping[str, float],
    ln_gamma: float,
    ends: tuple[float, float],
    wished: tuple[float, float] | None,
    extra: Sequence[Reason] = (),
) -> InfiniteDilutionAnswer:
    solute, solvent, temperature_K = pair
    choice = told.choice
    spreads = {other: abs(numbers[other] - ln_gamma) for other in told.compared}
    reasons = [
        *told.reasons,
        *gas_reasons(solute, temperature_K),
        *temperature_reasons(table(choice.heaviest.method), temperature_K, temperature_K),
        *agreement_reasons(choice.method, spreads),
        *extra,
    ]
    return InfiniteDilutionAnswer(
        solute,
        solvent,
        temperature_K,
        ln_gamma,
        choice.method,
        choice.weights,
        None if wished is None else _holding(wished, ln_gamma),
        graded(reasons, told.evidence, interval=_holding(ends, ln_gamma)),
    )


def _holding(ends: tuple[float, float], number: float) -> Interval:
    """The interval, stretched to hold the number where a single table lies outside it."""
    return Interval(min(ends[0], number), max(ends[1], number))


def _ideal(pair: DilutePair) -> InfiniteDilutionAnswer:
    mixture = liquid(pair[:2], "ideal", "refuse")
    return InfiniteDilutionAnswer(
        *pair, 0.0, "ideal", mixture.methods_used, None, graded(mixture.fixed_reasons)
    )


def _refused(pair: DilutePair, method: str, error: PredictionError) -> InfiniteDilutionAnswer:
    code = "missing_parameter" if isinstance(error, MissingParameterError) else "no_groups"
    confidence = graded([Reason(code, str(error), method, "none")])
    return InfiniteDilutionAnswer(*pair, float("nan"), None, (), None, confidence)
