"""What every predicted number carries beside it: how far to trust it, and why."""

from collections.abc import Iterable
from dataclasses import dataclass
from typing import Literal

Grade = Literal["high", "moderate", "low", "none"]
GRADES: tuple[Grade, ...] = ("high", "moderate", "low", "none")


@dataclass(frozen=True, slots=True)
class Reason:
    """One reason to doubt (or to trust) a number, in a chemist's words.

    `code` is stable and meant for programs, `subject` names the group pair, the component or the
    range concerned, `cap` is the best grade that a number with this reason may still have.
    """

    code: str
    message: str
    subject: str
    cap: Grade = "high"


@dataclass(frozen=True, slots=True)
class Interval:
    """A range that holds the true value with the stated probability, in the number's own unit."""

    lower: float
    upper: float


@dataclass(frozen=True, slots=True)
class Evidence:
    """Open measurements behind one main-group pair of one method."""

    method: str
    pair: tuple[str, str]
    measurements: int
    systems: int
    mean_absolute_error_ln_gamma: float | None
    message: str


@dataclass(frozen=True, slots=True)
class Confidence:
    """Grade, reasons, interval and evidence of one number or one answer."""

    grade: Grade
    reasons: tuple[Reason, ...] = ()
    interval_90: Interval | None = None
    evidence: tuple[Evidence, ...] = ()


def worst_grade(grades: Iterable[Grade]) -> Grade:
    """The least trusting of several grades; "high" if there is none.

    Parameters
    ----------
    grades : iterable of Grade

    Returns
    -------
    Grade
    """
    return max(grades, key=GRADES.index, default="high")


def graded(reasons: Iterable[Reason], evidence: Iterable[Evidence] = ()) -> Confidence:
    """Confidence from reasons alone: the grade is the lowest cap among them.

    Parameters
    ----------
    reasons : iterable of Reason
        Duplicates are dropped, the gravest come first.
    evidence : iterable of Evidence

    Returns
    -------
    Confidence
    """
    unique = sorted(dict.fromkeys(reasons), key=lambda r: -GRADES.index(r.cap))
    return Confidence(worst_grade(r.cap for r in unique), tuple(unique), None, tuple(evidence))
