"""What the user of a real vapour or of the equation of state should be told."""

from dataclasses import dataclass
from typing import Literal

Cap = Literal["high", "moderate", "low"]


@dataclass(frozen=True, slots=True)
class VapourNote:
    """One remark; it holds what a reason of the confidence needs.

    Parameters
    ----------
    code : str
        Stable identifier.
    message : str
        In a chemist's words.
    subject : str
        The component, or "vapour".
    cap : {"high", "moderate", "low"}
        The best grade that a number with this note may still have.
    """

    code: str
    message: str
    subject: str
    cap: Cap = "high"
