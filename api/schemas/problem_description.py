"""A problem type described."""

from api.schemas.base import StrictModel


class ProblemDescription(StrictModel):
    """What a problem type means and what to do about it."""

    type: str
    title: str
    status: int
    cure: str
