"""The list of suspect parameter pairs that the audit wrote."""

import csv
import io
from collections.abc import Mapping
from dataclasses import dataclass
from functools import cache
from types import MappingProxyType

from groups.errors import DataError
from groups.parameters.csv_file import integer_of, text_of
from groups.parameters.record import tables_folder

SUSPECTS_FILE = "suspects.csv"
COLUMNS = ("method", "i", "j", "rule", "reason")


@dataclass(frozen=True, slots=True, order=True)
class Suspect:
    """A pair of main groups (i < j) of one table that a rule of the audit doubts."""

    method: str
    i: int
    j: int
    rule: str
    reason: str


@cache
def read_suspects() -> tuple[Suspect, ...]:
    """All rows of the list of suspects.

    Returns
    -------
    tuple of Suspect
        In the order of the file.

    Raises
    ------
    DataError
        If the file is absent or a row is incomplete.
    """
    try:
        content = (tables_folder() / SUSPECTS_FILE).read_text(encoding="utf-8")
    except OSError as error:
        raise DataError(f"{SUSPECTS_FILE} cannot be read: {error}") from error
    return tuple(
        Suspect(
            method=text_of(row, "method", SUSPECTS_FILE),
            i=integer_of(row, "i", SUSPECTS_FILE),
            j=integer_of(row, "j", SUSPECTS_FILE),
            rule=text_of(row, "rule", SUSPECTS_FILE),
            reason=text_of(row, "reason", SUSPECTS_FILE),
        )
        for row in csv.DictReader(io.StringIO(content))
    )


def suspects_of(method: str) -> Mapping[tuple[int, int], str]:
    """Suspect pairs of one table.

    Parameters
    ----------
    method : str
        Method identifier.

    Returns
    -------
    mapping of (int, int) to str
        Main-group numbers (i < j) and the reasons, several joined by "; ".

    Raises
    ------
    DataError
        If the list cannot be read.
    """
    reasons: dict[tuple[int, int], list[str]] = {}
    for suspect in read_suspects():
        if suspect.method == method:
            reasons.setdefault((suspect.i, suspect.j), []).append(suspect.reason)
    return MappingProxyType({pair: "; ".join(texts) for pair, texts in reasons.items()})
