"""One number of a pure component, and whether it was published or estimated."""

from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class Constant:
    """One number of a pure component.

    Parameters
    ----------
    value : float
        In the unit of the field that holds it.
    source : str
        Publication, or method of estimation.
    estimated : bool
        True where no published value stands behind it.
    uncertainty : float
        About one standard deviation, same unit as the value.
    """

    value: float
    source: str
    estimated: bool
    uncertainty: float
