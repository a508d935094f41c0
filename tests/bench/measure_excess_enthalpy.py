"""Measure every method on the open excess enthalpies.

    python -m tests.bench.measure_excess_enthalpy

Prints, per method: rows reached, and over the mixed rows it reaches the median and mean absolute
error of hE and the mean |error| over the mean |measured|; then the same on the rows that all
general tables reach.
"""

import numpy as np

from groups.arrays import BoolArray, FloatArray
from groups.errors import PredictionError
from groups.prediction import ALL_METHODS, Component, activity_coefficients
from groups.structure.molecule import molecule_from_smiles
from tests.bench.open_data import EnthalpySet, excess_enthalpy

COMMON = ("unifac", "unifac-dortmund", "unifac-2.0", "unifac-dortmund-2.0")


def predicted(one: EnthalpySet, method: str) -> FloatArray:
    """hE at the measured points, J/mol; NaN where the table itself has no number.

    Parameters
    ----------
    one : EnthalpySet
    method : str
        An identifier of `ALL_METHODS`.

    Returns
    -------
    array of shape (n_rows,)
    """
    components = [Component(molecule_from_smiles(smiles)) for smiles in one.smiles]
    fractions = np.column_stack([one.x1, 1.0 - one.x1])
    try:
        answer = activity_coefficients(components, one.temperature_K, fractions, method)
    except PredictionError:
        return np.full(len(one.x1), np.nan)
    if method not in ("auto", answer.method):
        return np.full(len(one.x1), np.nan)
    return answer.excess_enthalpy_J_mol


def main() -> None:
    """Print the tables."""
    sets = excess_enthalpy()
    measured = np.concatenate([one.excess_enthalpy_J_mol for one in sets])
    x1 = np.concatenate([one.x1 for one in sets])
    mixed = (x1 > 0.0) & (x1 < 1.0)
    columns = {m: np.concatenate([predicted(one, m) for one in sets]) for m in ALL_METHODS}
    common = mixed & np.all([np.isfinite(columns[method]) for method in COMMON], axis=0)
    pairs = {frozenset(one.smiles) for one in sets}
    print(f"{len(measured)} rows, {mixed.sum()} of them mixtures, {len(pairs)} pairs")
    print(f"{common.sum()} rows in common to {', '.join(COMMON)}")
    print(f"mean |measured| {np.abs(measured[mixed]).mean():.0f} J/mol")
    print("method | rows % | median J/mol | mean J/mol | mean/|hE| | median common | mean common")
    for method, column in columns.items():
        print(f"{method} | {_line(column, measured, mixed, common)}")


def _line(column: FloatArray, measured: FloatArray, mixed: BoolArray, common: BoolArray) -> str:
    known = mixed & np.isfinite(column)
    if not known.any():
        return "0.0 | - | - | - | - | -"
    error = np.abs(column - measured)
    both = common & known
    share = error[known].sum() / np.abs(measured[known]).sum()
    shared = f"{np.median(error[both]):.0f} | {error[both].mean():.0f}" if both.any() else "- | -"
    return (
        f"{100 * known.sum() / mixed.sum():.1f} | {np.median(error[known]):.0f} | "
        f"{error[known].mean():.0f} | {share:.2f} | {shared}"
    )


if __name__ == "__main__":
    main()
