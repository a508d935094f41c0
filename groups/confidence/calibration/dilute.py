"""What every published table says of many dilute pairs at once, in whole arrays.

Row k is one pair at one temperature, column m one table of `TABLES`. Beside the value at the
asked temperature stand both infinite-dilution values at 298.15 K: weights that are to hold for
the whole mixture may depend on those, because they are the same for 1 in 2 as for 2 in 1.
"""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from functools import lru_cache

import numpy as np

from groups.activity import ln_gamma_infinite_pairs
from groups.activity.choice import OnMissing, candidate
from groups.arrays import BoolArray, FloatArray, IntArray
from groups.structure.assignment import assign
from groups.structure.molecule import Molecule

TABLES: tuple[str, ...] = (
    "unifac-dortmund",
    "unifac-nist",
    "unifac-dortmund-2.0",
    "unifac-2.0",
    "unifac-lyngby",
    "unifac",
    "psrk",
)
REFERENCE_TEMPERATURE_K = 298.15
DilutePair = tuple[Molecule, Molecule, float]


@dataclass(frozen=True, slots=True)
class DiluteTables:
    """The answers of all tables; arrays of shape (n_pairs, n_tables) unless said otherwise.

    `ln_gamma` is at the asked temperature; `forward` (solute in solvent) and `backward` (solvent
    in solute) are at 298.15 K. NaN where a table gives no number.
    """

    solutes: tuple[Molecule, ...]
    solvents: tuple[Molecule, ...]
    temperature_K: FloatArray  # (n_pairs,)
    ln_gamma: FloatArray
    forward: FloatArray
    backward: FloatArray
    completed: BoolArray
    suspect: BoolArray

    @property
    def available(self) -> BoolArray:
        """Which tables give a number."""
        return np.isfinite(self.ln_gamma)


@dataclass(frozen=True, slots=True)
class Flags:
    """What the audit and the completion say of one table for one binary mixture."""

    usable: bool
    completed: bool
    suspect: bool


def dilute_tables(pairs: Sequence[DilutePair], on_missing: OnMissing = "estimate") -> DiluteTables:
    """Ask every table for every pair.

    Parameters
    ----------
    pairs : sequence of (Molecule, Molecule, float)
        Solute, solvent, temperature in K.
    on_missing : {"refuse", "estimate"}
        With "refuse", a table whose parameters for the pair are completed gives no number.

    Returns
    -------
    DiluteTables
    """
    solutes = tuple(pair[0] for pair in pairs)
    solvents = tuple(pair[1] for pair in pairs)
    T = np.array([pair[2] for pair in pairs], dtype=np.float64)
    mixtures, row_of = _distinct(solutes, solvents)
    columns = [
        _column(method, solutes, solvents, T, mixtures, row_of, on_missing) for method in TABLES
    ]
    at_T, forward, backward = (
        np.stack(part, axis=1) for part in zip(*(c[0] for c in columns), strict=True)
    )
    completed, suspect = (
        np.stack(part, axis=1) for part in zip(*(c[1] for c in columns), strict=True)
    )
    return DiluteTables(solutes, solvents, T, at_T, forward, backward, completed, suspect)


def _distinct(
    solutes: Sequence[Molecule], solvents: Sequence[Molecule]
) -> tuple[list[tuple[Molecule, Molecule]], IntArray]:
    """Each ordered pair of molecules once, and which of them every row is."""
    place: dict[tuple[str, str], int] = {}
    mixtures: list[tuple[Molecule, Molecule]] = []
    rows = np.empty(len(solutes), dtype=np.int64)
    for row, pair in enumerate(zip(solutes, solvents, strict=True)):
        key = (pair[0].canonical_smiles, pair[1].canonical_smiles)
        rows[row] = place.setdefault(key, len(mixtures))
        if rows[row] == len(mixtures):
            mixtures.append(pair)
    return mixtures, rows


_Column = tuple[tuple[FloatArray, FloatArray, FloatArray], tuple[BoolArray, BoolArray]]


def _column(
    method: str,
    solutes: Sequence[Molecule],
    solvents: Sequence[Molecule],
    T: FloatArray,
    mixtures: list[tuple[Molecule, Molecule]],
    row_of: IntArray,
    on_missing: OnMissing,
) -> _Column:
    """One table: three columns of numbers and two of flags, a row for each pair."""
    flags = [_flags(method, *pair) for pair in mixtures]
    usable = np.array(
        [one.usable and (on_missing == "estimate" or not one.completed) for one in flags],
        dtype=np.bool_,
    )
    reference = [np.full(len(mixtures), np.nan) for _ in range(2)]
    chosen: list[int] = np.flatnonzero(usable).tolist()
    first, second = ([_counts(mixtures[k][side], method) for k in chosen] for side in (0, 1))
    if chosen:
        reference[0][chosen] = ln_gamma_infinite_pairs(
            method, first, second, REFERENCE_TEMPERATURE_K
        )
        reference[1][chosen] = ln_gamma_infinite_pairs(
            method, second, first, REFERENCE_TEMPERATURE_K
        )
    at_T = reference[0][row_of]
    rows: list[int] = np.flatnonzero(usable[row_of] & (T != REFERENCE_TEMPERATURE_K)).tolist()
    if rows:
        at_T[rows] = ln_gamma_infinite_pairs(
            method,
            [_counts(solutes[k], method) for k in rows],
            [_counts(solvents[k], method) for k in rows],
            T[rows],
        )
    completed, suspect = (
        np.array([getattr(one, name) for one in flags], dtype=np.bool_)[row_of]
        for name in ("completed", "suspect")
    )
    return (at_T, reference[0][row_of], reference[1][row_of]), (completed, suspect)


@lru_cache(maxsize=100_000)
def _counts(molecule: Molecule, method: str) -> Mapping[int, int]:
    """Subgroup counts; cached, so that equal molecules are the same object in a batch."""
    return assign(molecule, method).counts


@lru_cache(maxsize=100_000)
def _flags(method: str, first: Molecule, second: Molecule) -> Flags:
    if not (assign(first, method).complete and assign(second, method).complete):
        return Flags(False, False, False)
    one = candidate(method, [_counts(first, method), _counts(second, method)])
    return Flags(not one.missing, bool(one.completed), bool(one.suspect))
