"""How far to trust a number, as it goes over the wire."""

from typing import Literal

from pydantic import Field

from api.schemas.base import StrictModel

Grade = Literal["high", "moderate", "low", "none"]


class Interval(StrictModel):
    """The range that holds the true value in nine cases of ten."""

    lower: float
    upper: float


class LevelInterval(Interval):
    """The range that holds the true value with the probability `level`."""

    level: float


BAND = "End of the 90 % interval; null where no calibrated interval exists."


class Reason(StrictModel):
    """One reason to trust or doubt the number."""

    code: str = Field(description="Stable, for programs.")
    message: str = Field(description="In a chemist's words.")
    subject: str = Field(description="The group pair, component or range concerned.")
    best_grade: Grade = Field(description="The best grade that this reason leaves.")


class Evidence(StrictModel):
    """Open measurements behind one main-group pair."""

    method: str
    pair: list[str]
    measurements: int
    systems: int
    mean_absolute_error_ln_gamma: float | None
    message: str


class Confidence(StrictModel):
    """Grade, reasons, interval and evidence."""

    grade: Grade
    reasons: list[Reason] = Field(description="The gravest first.")
    interval_90: Interval | None = Field(
        default=None, description="Null where no calibrated interval exists."
    )
    evidence: list[Evidence]


class MethodUse(StrictModel):
    """A table behind the answer."""

    method: str
    weight: float
    why: str
