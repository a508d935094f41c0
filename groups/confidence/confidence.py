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


def graded(
    reasons: Iterable[Reason],
    evidence: Iterable[Evidence] = (),
    *,
    interval: Interval | None = None,
    half_width_ln: float | None = None,
) -> Confidence:
    """Confidence of a number: the grade of its interval, capped by the reasons that bind.

    Parameters
    ----------
    reasons : iterable of Reason
        Duplicates are dropped, the gravest come first.
    evidence : iterable of Evidence
    interval : Interval, optional
        The 90 % interval, in the unit of the number it stands beside.
    half_width_ln : float, optional
        Half-width in ln units that decides the grade; that of the interval where not given.

    Returns
    -------
    Confidence
    """
    unique = sorted(dict.fromkeys(reasons), key=lambda r: -GRADES.index(r.cap))
    if half_width_ln is None and interval is not None:
        half_width_ln = (interval.upper - interval.lower) / 2.0
    grades = [reason.cap for reason in unique]
    if half_width_ln is not None:
        grades.append(grade_of_half_width(half_width_ln))
    return Confidence(worst_grade(grades), tuple(unique), interval, tuple(evidence))


# Half-width of the 90 % interval of ln gamma (or ln K) up to which each grade is given: factors
# 1.35 and 2.0 in gamma. Measured out of fold, the mean error grows by 1.6 to 1.8 from high to
# moderate and by 2.3 from moderate to low; about a quarter of the open set is high and half
# moderate. "none" is left for numbers that could not be had.
THRESHOLDS: tuple[tuple[Grade, float], ...] = (("high", 0.30), ("moderate", 0.70))


def grade_of_half_width(half_width_ln: float) -> Grade:
    """The grade of a number whose logarithm is known to within a half-width.

    Parameters
    ----------
    half_width_ln : float
        Half the width of the 90 % interval in ln units.

    Returns
    -------
    Grade
        "none" where the width is not a number.
    """
    if half_width_ln != half_width_ln:
        return "none"
    return next((grade for grade, most in THRESHOLDS if half_width_ln <= most), "low")
