"""Measure every table on the open activity coefficients at infinite dilution.

    python -m tests.bench.measure_gamma_infinity

Prints, per method: molecules and rows covered, mean and median absolute error of ln
gamma-infinity on its own rows and on the rows that the leading tables all reach.
"""

import numpy as np

from groups.activity import ln_gamma_infinite_pairs
from groups.arrays import FloatArray
from groups.errors import UnsupportedStructureError
from groups.parameters import METHODS
from groups.structure.assignment import assign
from groups.structure.molecule import Molecule, molecule_from_smiles
from tests.bench.open_data import gamma_infinity

COMMON = ("unifac", "unifac-dortmund", "unifac-2.0", "unifac-dortmund-2.0")


def predictions() -> tuple[FloatArray, dict[str, FloatArray], dict[str, int], int]:
    """Measured values, predicted values by method (NaN where none), molecules covered, all."""
    data = gamma_infinity()
    texts = sorted({*data.solute, *data.solvent})
    molecules = readable(texts)
    predicted, covered = {}, {}
    for method in METHODS:
        assigned = {text: assign(molecule, method) for text, molecule in molecules.items()}
        covered[method] = sum(one.complete for one in assigned.values())
        column = np.full(len(data.ln_gamma), np.nan)
        rows = [
            k
            for k, (u, v) in enumerate(zip(data.solute, data.solvent, strict=True))
            if u in assigned and v in assigned and assigned[u].complete and assigned[v].complete
        ]
        column[rows] = ln_gamma_infinite_pairs(
            method,
            [assigned[data.solute[k]].counts for k in rows],
            [assigned[data.solvent[k]].counts for k in rows],
            data.temperature_K[rows],
        )
        predicted[method] = column
    return data.ln_gamma, predicted, covered, len(texts)


def readable(texts: list[str]) -> dict[str, Molecule]:
    """The molecules that the project takes; the set holds a few with metals."""
    molecules = {}
    for text in texts:
        try:
            molecules[text] = molecule_from_smiles(text)
        except UnsupportedStructureError as refusal:
            print(f"refused: {refusal}")
    return molecules


def main() -> None:
    """Print the table."""
    measured, predicted, covered, n_molecules = predictions()
    common = np.all([np.isfinite(predicted[m]) for m in COMMON], axis=0)
    print(f"{len(measured)} rows, {n_molecules} molecules; {common.sum()} rows in common")
    print("method | molecules % | rows % | MAE | median | MAE common | median common | n common")
    for method, column in predicted.items():
        known = np.isfinite(column)
        both = known & common
        error = np.abs(column - measured)
        print(
            f"{method} | {100 * covered[method] / n_molecules:.1f} | {100 * known.mean():.1f} | "
            f"{error[known].mean():.3f} | {np.median(error[known]):.3f} | "
            f"{error[both].mean():.3f} | {np.median(error[both]):.3f} | {both.sum()}"
        )


if __name__ == "__main__":
    main()
