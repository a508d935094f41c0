"""Infinite dilution in many different binaries at once, for benchmarks and screening.

A model is built for one mixture. Here every row is a mixture of its own, so rows are sorted by
how many main groups they hold, and each such class is worked out as one set of arrays.
"""

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike

from groups.activity import kernel
from groups.activity.composition import check_components, group_entries, missing_parameters
from groups.arrays import BoolArray, FloatArray, IntArray
from groups.errors import OutOfRangeError, ShapeError
from groups.parameters import MethodTable, table

Counts = Mapping[int, int]
# Rows worked on together: the surfaces of 2 x 2,048 molecules on 80 main groups take 2.6 MB.
CHUNK_ROWS = 2048


@dataclass(frozen=True, slots=True)
class _Molecules:
    """Volume, area and surface by main group of the molecules of one chunk, one a row."""

    volume: FloatArray  # (n,)
    area: FloatArray  # (n,)
    surface: FloatArray  # (n, n_main of the table)


def ln_gamma_infinite_pairs(
    method: str,
    solute_counts: Sequence[Counts],
    solvent_counts: Sequence[Counts],
    temperature_K: ArrayLike,
) -> FloatArray:
    """Return ln gamma of each solute at infinite dilution in its solvent.

    Parameters
    ----------
    method : str
        Identifier of a published table.
    solute_counts, solvent_counts : sequence of mapping
        Subgroup number to count, one mapping a pair; a sequence of length 1 serves all pairs.
        Repeated molecules cost least where the same mapping object is repeated.
    temperature_K : array_like, scalar or of shape (n_pairs,)
        Temperatures, K, positive.

    Returns
    -------
    FloatArray of shape (n_pairs,)
        ln gamma at infinite dilution, 1; NaN where the table lacks a parameter that the pair
        needs (`missing_parameter_pairs` names them).

    Raises
    ------
    UnknownMethodError
        For a method that does not exist.
    InvalidInputError
        For a subgroup that the table lacks, or a molecule without groups.
    ShapeError, OutOfRangeError
        For sequences that do not fit together, or a temperature that is not positive.

    Source
    ------
    The equations of `groups.activity.kernel` with x = (0, 1).
    """
    parameters = table(method)
    solutes, solvents = _paired(solute_counts, solvent_counts)
    T = _temperatures(temperature_K, len(solutes))
    answer = np.full(len(solutes), np.nan)
    for rows, solute, solvent in _chunks(parameters, solutes, solvents):
        carried = _carried(solute, solvent)
        complete = np.flatnonzero(~_lacking(parameters, carried))
        within = np.full(carried.shape[0], np.nan)
        within[complete] = _combinatorial(parameters, solute, solvent)[complete]
        for members, present in _classes(carried, complete):
            within[members] += _residual(
                parameters,
                _pick(solute, members),
                _pick(solvent, members),
                present,
                T[rows][members],
            )
        answer[rows] = within
    return answer


def missing_parameter_pairs(
    method: str, solute_counts: Sequence[Counts], solvent_counts: Sequence[Counts]
) -> tuple[tuple[tuple[int, int], ...], ...]:
    """Return which main-group pairs without published parameter each binary needs.

    Parameters
    ----------
    method, solute_counts, solvent_counts
        As for `ln_gamma_infinite_pairs`.

    Returns
    -------
    tuple of tuple of (int, int)
        For each binary its missing pairs of main-group numbers, the lower index first; empty
        where the table has every parameter.

    Raises
    ------
    UnknownMethodError, InvalidInputError, ShapeError
        As `ln_gamma_infinite_pairs`.
    """
    parameters = table(method)
    solutes, solvents = _paired(solute_counts, solvent_counts)
    missing = np.triu(missing_parameters(parameters))
    numbers = [int(number) for number in parameters.main_numbers]
    answer: list[tuple[tuple[int, int], ...]] = [()] * len(solutes)
    for rows, solute, solvent in _chunks(parameters, solutes, solvents):
        carried = _carried(solute, solvent)
        for row in np.flatnonzero(_lacking(parameters, carried)):
            i, j = np.nonzero(missing & np.outer(carried[row], carried[row]))
            answer[rows.start + int(row)] = tuple(
                (numbers[k], numbers[m]) for k, m in zip(i, j, strict=True)
            )
    return tuple(answer)


def _paired(
    solutes: Sequence[Counts], solvents: Sequence[Counts]
) -> tuple[Sequence[Counts], Sequence[Counts]]:
    """Both sequences at their common length."""
    n = max(len(solutes), len(solvents)) if solutes and solvents else 0
    if {len(solutes), len(solvents)} - {1, n}:
        raise ShapeError(
            f"{len(solutes)} solutes do not fit {len(solvents)} solvents.",
            cure="Give as many solutes as solvents, or one of either.",
            field="pairs",
        )
    whole = [list(side) * n if len(side) == 1 else side for side in (solutes, solvents)]
    return whole[0], whole[1]


def _temperatures(temperature_K: ArrayLike, n_pairs: int) -> FloatArray:
    T = np.asarray(temperature_K, dtype=np.float64)
    if T.shape not in {(), (1,), (n_pairs,)}:
        raise ShapeError(
            f"Temperatures of shape {T.shape} do not fit {n_pairs} pairs.",
            cure="Give one temperature, or one for each pair.",
            field="temperature_K",
        )
    wrong = (T <= 0.0) | np.isinf(T)
    if wrong.any():
        raise OutOfRangeError("temperature_K", float(T[wrong].flat[0]), 0.0, np.inf)
    return np.broadcast_to(T, (n_pairs,))


def _chunks(
    parameters: MethodTable, solutes: Sequence[Counts], solvents: Sequence[Counts]
) -> Iterator[tuple[slice, _Molecules, _Molecules]]:
    """Rows with their solutes and solvents, so many at a time that memory stays bounded."""
    for start in range(0, len(solutes), CHUNK_ROWS):
        rows = slice(start, min(start + CHUNK_ROWS, len(solutes)))
        both = [*solutes[rows], *solvents[rows]]
        molecules, of_row = _distinct_molecules(parameters, both)
        n = rows.stop - rows.start
        yield rows, _pick(molecules, of_row[:n]), _pick(molecules, of_row[n:])


def _distinct_molecules(
    parameters: MethodTable, counts: Sequence[Counts]
) -> tuple[_Molecules, IntArray]:
    """Each distinct mapping object once, and for every entry of `counts` which one it is."""
    place: dict[int, int] = {}
    distinct: list[Counts] = []
    of_entry = np.empty(len(counts), dtype=np.int64)
    for entry, mapping in enumerate(counts):
        index = place.setdefault(id(mapping), len(distinct))
        if index == len(distinct):
            distinct.append(mapping)
        of_entry[entry] = index
    owner, column, count = group_entries(parameters, distinct)
    R, Q, main = parameters.R[column], parameters.Q[column], parameters.subgroup_main[column]
    n, n_main = len(distinct), parameters.a.shape[0]
    surface = _totals(owner * n_main + main, count * Q, n * n_main).reshape(n, n_main)
    volume, area = _totals(owner, count * R, n), _totals(owner, count * Q, n)
    check_components(volume, area)
    return _Molecules(volume, area, surface), of_entry


def _totals(place: IntArray, amounts: FloatArray, n_places: int) -> FloatArray:
    """The sum of the amounts at each place, (n_places,)."""
    return np.asarray(np.bincount(place, amounts, n_places), dtype=np.float64)


def _pick(molecules: _Molecules, rows: IntArray) -> _Molecules:
    return _Molecules(molecules.volume[rows], molecules.area[rows], molecules.surface[rows])


def _carried(solute: _Molecules, solvent: _Molecules) -> BoolArray:
    """Which main groups carry surface in each binary, (n, n_main)."""
    carried: BoolArray = (solute.surface > 0.0) | (solvent.surface > 0.0)
    return carried


def _lacking(parameters: MethodTable, carried: BoolArray) -> BoolArray:
    """Which binaries need a parameter that the table lacks, (n,)."""
    weights = carried.astype(np.float64)
    needed = (weights @ missing_parameters(parameters)) * weights
    return np.asarray(needed.any(axis=1))


def _classes(carried: BoolArray, rows: IntArray) -> Iterator[tuple[IntArray, IntArray]]:
    """Rows with the same number K of main groups, and their groups, (n,) and (n, K)."""
    sizes = carried[rows].sum(axis=1)
    for size in np.unique(sizes):
        members = rows[sizes == size]
        yield members, np.nonzero(carried[members])[1].reshape(-1, size)


def _combinatorial(parameters: MethodTable, solute: _Molecules, solvent: _Molecules) -> FloatArray:
    """The combinatorial equation of the kernel with x = (0, 1), one number a row."""
    V = (solute.volume / solvent.volume) ** parameters.combinatorial_exponent
    part = 1.0 - V + np.log(V)
    if parameters.staverman_guggenheim:
        V_F = solute.volume / solvent.volume * (solvent.area / solute.area)
        part -= 0.5 * kernel.COORDINATION_NUMBER * solute.area * (1.0 - V_F + np.log(V_F))
    return part


def _residual(
    parameters: MethodTable,
    solute: _Molecules,
    solvent: _Molecules,
    present: IntArray,
    T: FloatArray,
) -> FloatArray:
    """The residual equation of the kernel with x = (0, 1): N = Z_2, D = B_2, s = q_2."""
    square = present[:, :, None], present[:, None, :]
    a, b, c = parameters.a[square], parameters.b[square], parameters.c[square]
    psi = np.exp(kernel.ln_psi(a, b, c, parameters.psi, T[:, None, None]))
    Z1, Z2 = (np.take_along_axis(one.surface, present, axis=1) for one in (solute, solvent))
    B1, B2 = (np.einsum("nk,nkm->nm", Z, psi) for Z in (Z1, Z2))
    q1, q2 = solute.area[:, None], solvent.area[:, None]
    part: FloatArray = solute.area + np.sum(Z1 * np.log(B1 * q2 / (B2 * q1)) - B1 * Z2 / B2, axis=1)
    return part
