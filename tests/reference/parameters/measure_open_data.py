"""Measure every table against open gamma-infinity data, main-group pair by main-group pair.

    python tests/reference/parameters/measure_open_data.py [--write] [--editions]

Reads ``../shared/data/gamma_infinity.csv`` (Brouwer et al., Sep. Purif. Technol. 272 (2021) 118727)
beside the repository. ``--write`` puts the statistics, never the data, into
``groups/parameters/tables/open_data.csv``; ``--editions`` shows, for each pair on which the two
editions of the Dortmund table disagree, the error with either.
"""

import argparse
import csv
import dataclasses
import sys
from collections.abc import Mapping, Sequence
from itertools import combinations
from pathlib import Path
from unittest import mock

import numpy as np

from groups.activity import batch
from groups.arrays import FloatArray
from groups.errors import MixwrightError
from groups.parameters import METHODS, table
from groups.parameters.editions import read_edition
from groups.parameters.open_data import (
    OPEN_DATA_FILE,
    MeasuredPoint,
    PairEvidence,
    evidence_csv,
    pair_evidence,
)
from groups.structure.assignment import assign
from groups.structure.molecule import molecule_from_smiles

ROOT = Path(__file__).resolve().parents[3]
DATA = ROOT.parent / "shared" / "data" / "gamma_infinity.csv"
TABLES = ROOT / "groups" / "parameters" / "tables"

Counts = Mapping[int, int]


@dataclasses.dataclass(frozen=True)
class Measurements:
    """Columns of the data file."""

    solute: tuple[str, ...]
    solvent: tuple[str, ...]
    ln_gamma: FloatArray
    temperature_K: FloatArray


def read_measurements() -> Measurements:
    """The open data, whole."""
    with DATA.open(encoding="utf-8", newline="") as file:
        rows = list(csv.DictReader(file))
    return Measurements(
        tuple(row["solute_smiles"] for row in rows),
        tuple(row["solvent_smiles"] for row in rows),
        np.array([float(row["ln_gamma_inf"]) for row in rows]),
        np.array([float(row["temperature_K"]) for row in rows]),
    )


def group_counts(smiles: Sequence[str], method: str) -> dict[str, Counts | None]:
    """Groups of each distinct molecule; None where the table does not cover it."""
    counts: dict[str, Counts | None] = {}
    for text in sorted(set(smiles)):
        try:
            assignment = assign(molecule_from_smiles(text), method)
        except MixwrightError:
            counts[text] = None
            continue
        counts[text] = assignment.counts if assignment.complete else None
    return counts


def predict(method: str, data: Measurements, counts: Mapping[str, Counts | None]) -> FloatArray:
    """Predicted ln gamma at infinite dilution; NaN where the table cannot tell."""
    rows = [
        row
        for row, (solute, solvent) in enumerate(zip(data.solute, data.solvent, strict=True))
        if counts[solute] is not None and counts[solvent] is not None
    ]
    answer = np.full(len(data.ln_gamma), np.nan)
    answer[rows] = batch.ln_gamma_infinite_pairs(
        method,
        [counts[data.solute[row]] or {} for row in rows],
        [counts[data.solvent[row]] or {} for row in rows],
        data.temperature_K[rows],
    )
    return answer


def main_pairs(method: str, *molecules: Counts) -> frozenset[tuple[int, int]]:
    """Pairs of different main groups in a mixture."""
    published = table(method)
    numbers = {
        int(published.main_numbers[published.subgroup_main[published.subgroup_index(number)]])
        for counts in molecules
        for number in counts
    }
    return frozenset(combinations(sorted(numbers), 2))


def measure() -> tuple[PairEvidence, ...]:
    """Statistics of all tables."""
    data = read_measurements()
    molecules = [*data.solute, *data.solvent]
    counts = {method: group_counts(molecules, method) for method in METHODS}
    errors = {method: predict(method, data, counts[method]) - data.ln_gamma for method in METHODS}
    found: list[PairEvidence] = []
    for method in METHODS:
        others = np.array([np.abs(errors[other]) for other in METHODS if other != method])
        points = [
            MeasuredPoint(
                main_pairs(
                    method,
                    counts[method][data.solute[row]] or {},
                    counts[method][data.solvent[row]] or {},
                ),
                f"{data.solute[row]} in {data.solvent[row]}",
                float(errors[method][row]),
                float(np.nanmedian(others[:, row])),
            )
            for row in np.flatnonzero(~np.isnan(errors[method]))
            if not np.isnan(others[:, row]).all()
        ]
        found += pair_evidence(method, points)
        size = np.abs(errors[method][~np.isnan(errors[method])])
        sys.stdout.write(
            f"{method:<20} {len(size):6d} points, mean |error| {size.mean():.3f}, "
            f"median {np.median(size):.3f}\n"
        )
    return tuple(found)


def compare_editions() -> None:
    """Error of the Dortmund table with either edition of each pair that they dispute."""
    method = "unifac-dortmund"
    data, published = read_measurements(), table(method)
    counts = group_counts([*data.solute, *data.solvent], method)
    holds = [
        main_pairs(method, counts[solute] or {}, counts[solvent] or {})
        for solute, solvent in zip(data.solute, data.solvent, strict=True)
    ]
    older, newer = read_edition("2006"), read_edition("2016")
    disputed = sorted(
        {
            (min(pair), max(pair))
            for pair in older.keys() & newer.keys()
            if np.abs(np.array(older[pair], dtype=float) - np.array(newer[pair], dtype=float)).max()
            > 0.06
        }
    )
    for pair in disputed:
        rows = [row for row, pairs in enumerate(holds) if pair in pairs]
        for edition, parameters in (("2006", older), ("2016", newer)):
            a, b, c = published.a.copy(), published.b.copy(), published.c.copy()
            for i, j in (pair, pair[::-1]):
                at = published.main_index(i), published.main_index(j)
                a[at], b[at], c[at] = (float(text) for text in parameters[i, j])
            changed = dataclasses.replace(published, a=a, b=b, c=c)
            with mock.patch.object(batch, "table", return_value=changed):
                error = (predict(method, data, counts) - data.ln_gamma)[rows]
            error = error[~np.isnan(error)]
            if len(error):
                sys.stdout.write(
                    f"{pair} {edition}: {len(error)} points, mean |error| "
                    f"{np.abs(error).mean():.3f}, mean error {error.mean():+.3f}\n"
                )


def main() -> int:
    """Run from the command line."""
    parser = argparse.ArgumentParser()
    parser.add_argument("--write", action="store_true")
    parser.add_argument("--editions", action="store_true")
    arguments = parser.parse_args()
    if arguments.editions:
        compare_editions()
        return 0
    text = evidence_csv(measure())
    if arguments.write:
        (TABLES / OPEN_DATA_FILE).write_text(text, encoding="utf-8")
    return 0


if __name__ == "__main__":
    sys.exit(main())
