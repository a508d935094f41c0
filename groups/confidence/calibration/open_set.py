"""Reading the open measurements for the build; nothing of this is needed to answer."""

import csv
from dataclasses import dataclass
from pathlib import Path

import numpy as np

from groups.arrays import FloatArray, IntArray
from groups.confidence.calibration.dilute import DilutePair
from groups.confidence.calibration.traits import WATER
from groups.errors import StructureError
from groups.structure.molecule import Molecule, molecule_from_smiles


@dataclass(frozen=True, slots=True)
class OpenSet:
    """Rows of the open set whose molecules the project takes, and how many it holds in all."""

    pairs: tuple[DilutePair, ...]
    ln_gamma: FloatArray
    rows_in_file: int


def read_open_set(path: Path) -> OpenSet:
    """Read gamma_infinity.csv.

    Parameters
    ----------
    path : Path
        The file; columns solute_smiles, solvent_smiles, ln_gamma_inf, temperature_K.

    Returns
    -------
    OpenSet
        Rows are left out only where a molecule is refused (metals).

    Source
    ------
    Brouwer, Kersten, Bargeman & Schuur, Sep. Purif. Technol. 272 (2021) 118727, open data set.
    """
    with path.open(encoding="utf-8") as file:
        rows = list(csv.DictReader(file))
    texts = {row[side] for row in rows for side in ("solute_smiles", "solvent_smiles")}
    molecules = {text: _molecule(text) for text in sorted(texts)}
    pairs: list[DilutePair] = []
    values = []
    for row in rows:
        solute, solvent = molecules[row["solute_smiles"]], molecules[row["solvent_smiles"]]
        if solute is not None and solvent is not None:
            pairs.append((solute, solvent, float(row["temperature_K"])))
            values.append(float(row["ln_gamma_inf"]))
    return OpenSet(tuple(pairs), np.array(values), len(rows))


def _molecule(text: str) -> Molecule | None:
    try:
        return molecule_from_smiles(text)
    except StructureError:
        return None


def group_folds(pairs: tuple[DilutePair, ...], by: str, n_folds: int = 10) -> IntArray:
    """Which fold each row belongs to; rows of one group are never parted.

    Parameters
    ----------
    pairs : tuple of (Molecule, Molecule, float)
    by : {"solvent", "solute", "solvent or aqueous solute"}
        The group: its solvent, its solute, or its solvent unless that is water, then its solute.
    n_folds : int

    Returns
    -------
    IntArray of shape (n_rows,)
        0 to n_folds - 1; groups are dealt out in a seeded random order.
    """
    keys = [_key(solute, solvent, by) for solute, solvent, _ in pairs]
    order = sorted(set(keys))
    np.random.default_rng(20_240_229).shuffle(order)
    place = {key: index % n_folds for index, key in enumerate(order)}
    return np.array([place[key] for key in keys], dtype=np.int64)


def _key(solute: Molecule, solvent: Molecule, by: str) -> str:
    aqueous = solvent.canonical_smiles == WATER
    if by == "solute" or (by == "solvent or aqueous solute" and aqueous):
        return "solute " + solute.canonical_smiles
    return "solvent " + solvent.canonical_smiles
