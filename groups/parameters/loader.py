"""From the files of a table to a validated MethodTable, once per process."""

from collections.abc import Mapping
from dataclasses import dataclass
from functools import cache
from typing import TypeVar

import numpy as np

from groups.arrays import BoolArray, FloatArray, IntArray
from groups.errors import DataError, UnknownMethodError
from groups.parameters.csv_file import integer_of, number_of, read_rows, text_of
from groups.parameters.method_table import MethodTable
from groups.parameters.record import DataFile, Record, read_record
from groups.parameters.suspects import suspects_of

ArrayT = TypeVar("ArrayT", FloatArray, IntArray, BoolArray)

METHODS: tuple[str, ...] = (
    "unifac",
    "unifac-lle",
    "unifac-dortmund",
    "unifac-lyngby",
    "unifac-nist",
    "unifac-2.0",
    "unifac-dortmund-2.0",
    "psrk",
)

# Bounds that no published entry passes and that a slipped decimal point does.
LARGEST_R, LARGEST_Q = 10.0, 10.0
LARGEST_A_K, LARGEST_B = 1e5, 200.0
LARGEST_C = {"constant": 0.0, "quadratic": 1.0, "logarithmic": 100.0}  # its unit differs
LOWEST_T_K, HIGHEST_T_K = 50.0, 1000.0


@cache
def table(method: str) -> MethodTable:
    """The published table of a method, validated when first asked for.

    Parameters
    ----------
    method : str
        One of `METHODS`.

    Returns
    -------
    MethodTable
        The table; its arrays are read-only and shared by all callers.

    Raises
    ------
    UnknownMethodError
        If there is no such method.
    DataError
        If a file does not agree with its record or with the other files of the table.

    Source
    ------
    The publications are named in ``MethodTable.sources``.
    """
    if method not in METHODS:
        raise UnknownMethodError(method, METHODS)
    record = read_record(method)
    if record.method != method:
        raise DataError(f"{method}.toml is the record of '{record.method}'.")
    main_numbers, main_names = _main_groups(_file(record, "main_groups"))
    subgroups = _subgroups(_file(record, "subgroups"), main_numbers)
    parameters = _interactions(record, main_numbers)
    return MethodTable(
        method=method,
        title=record.title,
        sources=record.sources,
        combinatorial_exponent=record.combinatorial_exponent,
        staverman_guggenheim=record.staverman_guggenheim,
        psi=record.psi,
        temperature_range_K=record.temperature_range_K,
        subgroup_numbers=_frozen(subgroups.numbers),
        subgroup_names=subgroups.names,
        subgroup_main=_frozen(subgroups.main_index),
        example_smiles=subgroups.example_smiles,
        example_names=subgroups.example_names,
        R=_frozen(subgroups.R),
        Q=_frozen(subgroups.Q),
        main_numbers=_frozen(main_numbers),
        main_names=main_names,
        a=_frozen(parameters.a),
        b=_frozen(parameters.b),
        c=_frozen(parameters.c),
        pair_temperature_K=_frozen(parameters.temperature_K),
        completed=_frozen(_completed(record, main_numbers)),
        suspects=suspects_of(method),
    )


@dataclass(frozen=True, slots=True)
class _Subgroups:
    numbers: IntArray
    names: tuple[str, ...]
    main_index: IntArray
    R: FloatArray
    Q: FloatArray
    example_smiles: tuple[str, ...]
    example_names: tuple[str, ...]


@dataclass(frozen=True, slots=True)
class _Parameters:
    a: FloatArray
    b: FloatArray
    c: FloatArray
    temperature_K: FloatArray


def _file(record: Record, role: str) -> DataFile:
    if role not in record.files:
        raise DataError(f"{record.method}.toml names no file for '{role}'.")
    return record.files[role]


def _frozen(array: ArrayT) -> ArrayT:
    array.flags.writeable = False
    return array


def _ascending(numbers: IntArray, file: str) -> IntArray:
    if len(numbers) == 0 or np.any(np.diff(numbers) <= 0):
        raise DataError(f"{file}: the numbers must ascend without repeats.")
    return numbers


def _main_groups(file: DataFile) -> tuple[IntArray, tuple[str, ...]]:
    rows = read_rows(file)
    numbers = np.array([integer_of(row, "number", file.name) for row in rows], dtype=np.int64)
    names = tuple(text_of(row, "name", file.name) for row in rows)
    if len(set(names)) != len(names):
        raise DataError(f"{file.name}: a main-group name stands twice.")
    return _ascending(numbers, file.name), names


def _subgroups(file: DataFile, main_numbers: IntArray) -> _Subgroups:
    rows, name = read_rows(file), file.name
    positions = {int(number): index for index, number in enumerate(main_numbers)}
    mains = [integer_of(row, "main_number", name) for row in rows]
    unknown = sorted(set(mains) - set(positions))
    if unknown:
        raise DataError(f"{name}: main groups {unknown} stand in no list of main groups.")
    numbers = np.array([integer_of(row, "number", name) for row in rows], dtype=np.int64)
    subgroups = _Subgroups(
        numbers=_ascending(numbers, name),
        names=tuple(text_of(row, "name", name) for row in rows),
        main_index=np.array([positions[main] for main in mains], dtype=np.int64),
        R=np.array([number_of(row, "R", name, 1e-3, LARGEST_R) for row in rows]),
        Q=np.array([number_of(row, "Q", name, 0.0, LARGEST_Q) for row in rows]),
        example_smiles=tuple(text_of(row, "example_smiles", name) for row in rows),
        example_names=tuple(text_of(row, "example_name", name) for row in rows),
    )
    if np.isnan(subgroups.R).any() or np.isnan(subgroups.Q).any():
        raise DataError(f"{name}: R or Q is blank.")
    if len(set(subgroups.names)) != len(rows):
        raise DataError(f"{name}: a subgroup name stands twice.")
    return subgroups


def _interactions(record: Record, main_numbers: IntArray) -> _Parameters:
    file = _file(record, "interactions")
    largest_c = LARGEST_C[record.psi]
    positions = {int(number): index for index, number in enumerate(main_numbers)}
    n, name = len(positions), file.name
    a, b, c = (np.full((n, n), np.nan) for _ in range(3))
    temperature_K = np.full((n, n, 2), np.nan)
    for row in read_rows(file):
        i, j = integer_of(row, "i", name), integer_of(row, "j", name)
        if i not in positions or j not in positions:
            raise DataError(f"{name}: pair ({i}, {j}) names a main group that does not exist.")
        at = positions[i], positions[j]
        if i == j or not np.isnan(a[at]):
            raise DataError(f"{name}: pair ({i}, {j}) is a diagonal entry or stands twice.")
        a[at] = number_of(row, "a", name, -LARGEST_A_K, LARGEST_A_K)
        b[at] = number_of(row, "b", name, -LARGEST_B, LARGEST_B)
        c[at] = number_of(row, "c", name, -largest_c, largest_c)
        temperature_K[at] = [
            number_of(row, column, name, LOWEST_T_K, HIGHEST_T_K)
            for column in ("lower_K", "upper_K")
        ]
    # The constant form has no b and c: zero there is the equation, not a guess.
    for higher in (b, c):
        higher[np.isnan(higher) & ~np.isnan(a)] = 0.0
    for matrix in (a, b, c):
        np.fill_diagonal(matrix, 0.0)
    return _Parameters(a, b, c, temperature_K)


def _completed(record: Record, main_numbers: IntArray) -> BoolArray:
    """True where the fitted counterpart of a completed table publishes nothing."""
    n = len(main_numbers)
    if record.completes is None:
        return np.zeros((n, n), dtype=np.bool_)
    base = table(record.completes)
    positions: Mapping[int, int] = {int(m): k for k, m in enumerate(base.main_numbers)}
    index = np.array([positions.get(int(m), -1) for m in main_numbers])
    unpublished: BoolArray = np.isnan(base.a[np.ix_(index, index)])
    unpublished |= (index < 0)[:, None] | (index < 0)[None, :]
    np.fill_diagonal(unpublished, False)
    return unpublished
