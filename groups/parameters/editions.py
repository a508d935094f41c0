"""One Dortmund table out of its two published editions, 2006 and 2016.

The newer edition is taken wherever it gives a pair, but for the exceptions listed with their
reasons in ``tables/unifac-dortmund.editions.csv``; a pair that only one edition gives is taken
from that one. The result is written to ``tables/unifac-dortmund.interactions.csv`` with a column
that says which edition each row came from, and a test holds it current.
"""

import csv
import io
from collections.abc import Mapping
from dataclasses import dataclass

from groups.errors import DataError
from groups.parameters.csv_file import integer_of, read_rows, text_of
from groups.parameters.record import read_record

METHOD = "unifac-dortmund"
EDITIONS = ("2006", "2016")
COLUMNS = ("i", "j", "a", "b", "c", "edition")

Pair = tuple[int, int]
Texts = tuple[str, str, str]


@dataclass(frozen=True, slots=True, order=True)
class Choice:
    """An unordered pair (i < j) for which the older edition is taken, and why."""

    i: int
    j: int
    edition: str
    reason: str


def read_edition(edition: str) -> Mapping[Pair, Texts]:
    """Directed pairs of one edition as text, exactly as the file spells them.

    Parameters
    ----------
    edition : {"2006", "2016"}
        Year of the edition.

    Returns
    -------
    mapping of (int, int) to (str, str, str)
        Texts of a (K), b (-) and c (1/K).

    Raises
    ------
    DataError
        If the file fails its record.
    """
    file = read_record(METHOD).files[f"edition_{edition}"]
    return {
        (integer_of(row, "i", file.name), integer_of(row, "j", file.name)): (
            text_of(row, "a", file.name),
            text_of(row, "b", file.name),
            text_of(row, "c", file.name),
        )
        for row in read_rows(file)
    }


def read_choices() -> tuple[Choice, ...]:
    """The documented exceptions from "the newer edition wins".

    Returns
    -------
    tuple of Choice
        In the order of the file.

    Raises
    ------
    DataError
        If the file fails its record or names an unknown edition.
    """
    file = read_record(METHOD).files["editions"]
    choices = tuple(
        Choice(
            integer_of(row, "i", file.name),
            integer_of(row, "j", file.name),
            text_of(row, "edition", file.name),
            text_of(row, "reason", file.name),
        )
        for row in read_rows(file)
    )
    for choice in choices:
        if choice.edition not in EDITIONS or not choice.i < choice.j:
            raise DataError(f"{file.name}: {choice} is not a choice between {EDITIONS}.")
    return choices


def merged_csv() -> str:
    """The table in use, as the text of its CSV.

    Returns
    -------
    str
        One row per directed pair, ascending.

    Raises
    ------
    DataError
        If a file fails its record.

    Source
    ------
    Jakob et al. (2006) and Constantinescu and Gmehling (2016), as the record cites them.
    """
    tables = {edition: read_edition(edition) for edition in EDITIONS}
    chosen = {(choice.i, choice.j): choice.edition for choice in read_choices()}
    text = io.StringIO()
    writer = csv.writer(text, lineterminator="\n")
    writer.writerow(COLUMNS)
    for pair in sorted(set(tables["2006"]) | set(tables["2016"])):
        newest = "2016" if pair in tables["2016"] else "2006"
        edition = chosen.get((min(pair), max(pair)), newest)
        writer.writerow([*pair, *tables[edition][pair], edition])
    return text.getvalue()
