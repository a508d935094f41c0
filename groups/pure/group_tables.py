"""Group-contribution tables for pure-component constants, and the counting of their groups.

These tables are the ones of the pure-component methods. The groups of the UNIFAC family live in
`groups.structure`.
"""

import csv
from collections import Counter
from collections.abc import Mapping
from dataclasses import dataclass
from functools import lru_cache
from importlib.resources import files
from typing import Literal

from rdkit import Chem

from groups.errors import DataError

TableName = Literal["stein_brown", "constantinou_gani", "joback"]


@dataclass(frozen=True, slots=True)
class GroupRow:
    """One group: its pattern and its published contributions, None where not published."""

    number: int
    name: str
    pattern: Chem.Mol
    contributions: Mapping[str, float | None]


@dataclass(frozen=True, slots=True)
class GroupTable:
    """A published table; the rows stand in the order in which they claim atoms."""

    name: TableName
    rows: tuple[GroupRow, ...]

    def count(self, mol: Chem.Mol) -> Counter[int] | None:
        """Split a molecule into groups.

        The rows are tried from the first to the last, and each takes every place that is still
        free, so a larger or more specific group must stand before what it contains.

        Parameters
        ----------
        mol : Chem.Mol
            Hydrogen implicit.

        Returns
        -------
        Counter or None
            Occurrences by group number; None where an atom is left over.
        """
        free = set(range(mol.GetNumAtoms()))
        counts: Counter[int] = Counter()
        for row in self.rows:
            for place in mol.GetSubstructMatches(row.pattern, maxMatches=10_000):
                if free.issuperset(place):
                    free.difference_update(place)
                    counts[row.number] += 1
            if not free:
                break
        return None if free else counts

    def total(self, counts: Mapping[int, int], column: str) -> float | None:
        """Sum of contributions.

        Parameters
        ----------
        counts : mapping of group number to occurrences
        column : str
            Name of the contribution's column.

        Returns
        -------
        float or None
            None where a group present has no published contribution.
        """
        values = {row.number: row.contributions[column] for row in self.rows}
        terms = [(values[number], n) for number, n in counts.items()]
        if any(value is None for value, _ in terms):
            return None
        return sum(value * n for value, n in terms if value is not None)


@lru_cache(maxsize=8)
def group_table(name: TableName) -> GroupTable:
    """Load a table.

    Parameters
    ----------
    name : str
        "stein_brown", "constantinou_gani" or "joback".

    Returns
    -------
    GroupTable

    Raises
    ------
    DataError
        A pattern that cannot be read.

    Source
    ------
    The record beside each table, groups/pure/tables/<name>.groups.toml.
    """
    text = (files("groups.pure") / "tables" / f"{name}.groups.csv").read_text("utf-8")
    return GroupTable(name, tuple(_row(row, name) for row in csv.DictReader(text.splitlines())))


def _row(row: dict[str, str], table: str) -> GroupRow:
    pattern = Chem.MolFromSmarts(row["smarts"])
    if pattern is None:
        raise DataError(f"Table {table}, group {row['number']}: unreadable pattern.")
    numbers = {k: float(v) if v else None for k, v in row.items() if k not in _TEXT_COLUMNS}
    return GroupRow(int(row["number"]), row["name"], pattern, numbers)


_TEXT_COLUMNS = ("number", "name", "smarts")
