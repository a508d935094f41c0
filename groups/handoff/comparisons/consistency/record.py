"""What a consistency test answers."""

from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class ConsistencyTest:
    """One test of a data set.

    Attributes
    ----------
    name : str
    passed : bool or None
        None where the test does not apply; `detail` says why.
    value, limit : float
        What was found and what the criterion allows; NaN where it does not apply.
    criterion, source, weakness : str
        In words; the weakness says what the test cannot see.
    detail : str
    points : tuple of int
        Points (0-based, as given) that fail on their own.
    """

    name: str
    passed: bool | None
    value: float
    limit: float
    criterion: str
    source: str
    weakness: str
    detail: str
    points: tuple[int, ...] = ()


@dataclass(frozen=True, slots=True)
class Suspect:
    """A point to look at again, and every reason to; it is never dropped."""

    point: int
    reasons: tuple[str, ...]


def not_applicable(
    name: str, criterion: str, source: str, weakness: str, why: str
) -> ConsistencyTest:
    """A test that these points do not allow.

    Parameters
    ----------
    name, criterion, source, weakness : str
    why : str

    Returns
    -------
    ConsistencyTest
    """
    nan = float("nan")
    return ConsistencyTest(name, None, nan, nan, criterion, source, weakness, why)
