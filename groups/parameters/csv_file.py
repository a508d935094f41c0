"""Reading a table's CSV and holding it to its record."""

import csv
import hashlib
import io
import math
from collections.abc import Mapping, Sequence

from groups.errors import DataError
from groups.parameters.record import DataFile, tables_folder

Row = Mapping[str, str]


def read_rows(file: DataFile) -> Sequence[Row]:
    """Rows of a CSV after checksum and row count have been checked.

    Parameters
    ----------
    file : DataFile
        Name, number of rows and SHA-256 as the record states them.

    Returns
    -------
    sequence of mapping
        One mapping of column name to text per row; blank means missing.

    Raises
    ------
    DataError
        If the file is absent, its checksum or its number of rows is not the recorded one.
    """
    try:
        content = (tables_folder() / file.name).read_bytes()
    except OSError as error:
        raise DataError(f"{file.name} cannot be read: {error}") from error
    digest = hashlib.sha256(content).hexdigest()
    if digest != file.sha256:
        raise DataError(f"{file.name}: SHA-256 is {digest}, the record says {file.sha256}.")
    rows = list(csv.DictReader(io.StringIO(content.decode("utf-8"))))
    if len(rows) != file.rows:
        raise DataError(f"{file.name}: {len(rows)} rows, the record says {file.rows}.")
    return rows


def text_of(row: Row, column: str, file: str) -> str:
    """Text of a column that must not be blank.

    Parameters
    ----------
    row : mapping
        One row of `read_rows`.
    column : str
        Column name.
    file : str
        File name, for the message.

    Returns
    -------
    str
        The text.

    Raises
    ------
    DataError
        If the column is missing or blank.
    """
    value = row.get(column)
    if not value:
        raise DataError(f"{file}: column '{column}' is missing or blank in {dict(row)}.")
    return value


def integer_of(row: Row, column: str, file: str) -> int:
    """Integer in a column that must not be blank.

    Parameters
    ----------
    row, column, file
        As in `text_of`.

    Returns
    -------
    int
        The number.

    Raises
    ------
    DataError
        If the column is missing, blank or no integer.
    """
    text = text_of(row, column, file)
    try:
        return int(text)
    except ValueError as error:
        raise DataError(f"{file}: '{text}' in column '{column}' is no integer.") from error


def number_of(row: Row, column: str, file: str, lower: float, upper: float) -> float:
    """Number in a column, within stated bounds; NaN where blank.

    Parameters
    ----------
    row, column, file
        As in `text_of`; a column that is absent counts as blank.
    lower, upper : float
        Allowed range, both ends included.

    Returns
    -------
    float
        The number, or NaN.

    Raises
    ------
    DataError
        If the text is no number, or the number lies outside the range.
    """
    text = row.get(column, "")
    if not text:
        return math.nan
    try:
        value = float(text)
    except ValueError as error:
        raise DataError(f"{file}: '{text}' in column '{column}' is no number.") from error
    if not lower <= value <= upper:
        raise DataError(f"{file}: {column} = {text} lies outside {lower:g} to {upper:g}.")
    return value
