"""Predict all mixtures of example molecules with every table, and note the absurd ones.

    python tests/reference/parameters/measure_example_mixtures.py [--write]

``--write`` puts the findings into ``groups/parameters/tables/example_mixtures.csv``.
"""

import argparse
import sys
import warnings
from collections.abc import Mapping
from itertools import permutations
from pathlib import Path

import numpy as np
from rdkit import Chem

from groups.activity import batch
from groups.arrays import FloatArray
from groups.errors import MixwrightError
from groups.parameters import METHODS, table
from groups.parameters.example_mixtures import (
    EXAMPLE_MIXTURES_FILE,
    AbsurdMixture,
    ExampleMixture,
    absurd_csv,
    absurd_pairs,
)
from groups.structure.assignment import assign
from groups.structure.molecule import molecule_from_smiles

FILE = (
    Path(__file__).resolve().parents[3] / "groups" / "parameters" / "tables" / EXAMPLE_MIXTURES_FILE
)
TEMPERATURE_K = 298.15  # within or near the range of every table
# Tables that stem from one another do not confirm each other; the one fitted to liquid splits
# alone judges no other.
KIN = {"unifac": {"unifac", "psrk"}, "psrk": {"unifac", "psrk"}}
NO_JUDGES = {"unifac-lle", "psrk"}
FEWEST_JUDGES = 3

Counts = Mapping[int, int]


def example_molecules() -> list[str]:
    """Canonical SMILES of the neutral example molecules of all tables."""
    molecules = set()
    for method in METHODS:
        for smiles in table(method).example_smiles:
            molecule = Chem.MolFromSmiles(smiles)
            if Chem.GetFormalCharge(molecule) == 0:
                molecules.add(Chem.MolToSmiles(molecule))
    return sorted(molecules)


def group_counts(method: str, molecules: list[str]) -> dict[str, Counts]:
    """Groups of the molecules that the table covers."""
    found: dict[str, Counts] = {}
    for smiles in molecules:
        try:
            assignment = assign(molecule_from_smiles(smiles), method)
        except MixwrightError:
            continue
        if assignment.complete:
            found[smiles] = assignment.counts
    return found


def predictions(
    method: str, counts: Mapping[str, Counts], pairs: list[tuple[str, str]]
) -> FloatArray:
    """ln gamma at infinite dilution of each pair; NaN where the table cannot tell."""
    answer = np.full(len(pairs), np.nan)
    rows = [k for k, (a, b) in enumerate(pairs) if a in counts and b in counts]
    answer[rows] = batch.ln_gamma_infinite_pairs(
        method,
        [counts[pairs[k][0]] for k in rows],
        [counts[pairs[k][1]] for k in rows],
        TEMPERATURE_K,
    )
    return answer


def main_groups(method: str, counts: Counts) -> frozenset[int]:
    """Main groups of a molecule."""
    published = table(method)
    mains = [published.subgroup_main[published.subgroup_index(number)] for number in counts]
    return frozenset(int(published.main_numbers[main]) for main in mains)


def find_absurd() -> tuple[AbsurdMixture, ...]:
    """Findings of all tables."""
    molecules = example_molecules()
    pairs = list(permutations(molecules, 2))
    counts = {method: group_counts(method, molecules) for method in METHODS}
    values = {method: predictions(method, counts[method], pairs) for method in METHODS}
    found: list[AbsurdMixture] = []
    for method in METHODS:
        judges = [m for m in METHODS if m not in NO_JUDGES | KIN.get(method, {method})]
        others = np.array([values[judge] for judge in judges])
        heard = np.count_nonzero(~np.isnan(others), axis=0) >= FEWEST_JUDGES
        with warnings.catch_warnings():
            warnings.simplefilter("ignore", RuntimeWarning)  # pairs that no judge covers
            middle = np.nanmedian(others, axis=0)
        mains = {smiles: main_groups(method, c) for smiles, c in counts[method].items()}
        found += absurd_pairs(
            method,
            (
                ExampleMixture(
                    *pairs[k],
                    mains[pairs[k][0]],
                    mains[pairs[k][1]],
                    float(values[method][k]),
                    float(middle[k]),
                )
                for k in np.flatnonzero(heard & ~np.isnan(values[method]))
            ),
        )
    return tuple(found)


def main() -> int:
    """Run from the command line."""
    parser = argparse.ArgumentParser()
    parser.add_argument("--write", action="store_true")
    write = parser.parse_args().write
    text = absurd_csv(find_absurd())
    sys.stdout.write(text)
    if write:
        FILE.write_text(text, encoding="utf-8")
    return 0


if __name__ == "__main__":
    sys.exit(main())
