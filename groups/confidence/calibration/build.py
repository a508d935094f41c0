"""Build evidence and calibration from the open measurements.

    python -m groups.confidence.calibration.build [path to gamma_infinity.csv]

Writes evidence.csv, descriptors.csv, prototypes.csv, scale.csv, quantiles.csv and correlation.csv
beside this module, and the date, the counts and the checksum into the record of each. No measured
value is written.
"""

import argparse
import csv
import datetime
import hashlib
import sys
from collections import defaultdict
from collections.abc import Iterable, Sequence
from pathlib import Path

import numpy as np
from scipy.stats import spearmanr

from groups.arrays import FloatArray, IntArray
from groups.confidence.calibration.correction import Correction
from groups.confidence.calibration.crossval import fit_calibration, unseen_errors, unseen_scale
from groups.confidence.calibration.descriptors import DESCRIPTORS
from groups.confidence.calibration.dilute import TABLES, DiluteTables
from groups.confidence.calibration.evidence import cross_pairs
from groups.confidence.calibration.features import FEATURES
from groups.confidence.calibration.model import Calibration
from groups.confidence.calibration.open_set import OpenSet, group_folds, read_open_set
from groups.confidence.calibration.training import training
from groups.structure.assignment import assign
from groups.structure.molecule import Molecule

FOLDER = Path(__file__).parent
DEFAULT_DATA = FOLDER.parents[3] / "shared" / "data" / "gamma_infinity.csv"
BLOW_UP = 20.0  # a table's ln gamma beyond this is a broken parameter; counted with error 20
SOURCE = (
    "T. Brouwer, S.R.A. Kersten, G. Bargeman, B. Schuur, Sep. Purif. Technol. 272 (2021) 118727, "
    "open data set; statistics only"
)


def main(arguments: Sequence[str] | None = None) -> None:
    """Read the measurements, write the data files."""
    parser = argparse.ArgumentParser(description=__doc__)
    parser.add_argument("data", nargs="?", type=Path, default=DEFAULT_DATA)
    path: Path = parser.parse_args(arguments).data
    data = read_open_set(path)
    rows, known, tables = training(data)
    folds = group_folds(data.pairs, "solvent or aqueous solute")[known]
    fitted, prototypes, _ = fit_calibration(rows, folds)
    error, features = unseen_errors(rows, folds)
    scaled = np.full(len(known), np.nan)
    scaled[known] = error / unseen_scale(features, error, folds)
    _write_evidence(data, tables)
    _write_correction(data, fitted.correction, np.flatnonzero(known)[prototypes])
    _write_widths(data, fitted)
    rho, n = direction_correlation(data, scaled)
    _write(
        "correlation",
        ("correlation", "systems"),
        [(f"{rho:.2f}", n)],
        "Rank correlation of the scaled errors of 1 in 2 and of 2 in 1",
        data,
    )
    sys.stdout.write(
        f"{known.sum()} of {data.rows_in_file} rows; mean absolute error "
        f"{np.abs(rows.error).mean():.4f}, corrected and unseen {np.abs(error).mean():.4f}\n"
    )


def _write_evidence(data: OpenSet, tables: DiluteTables) -> None:
    header = ("method", "i", "j", "group_i", "group_j", "measurements", "systems")
    statistics = ("bias_ln_gamma", "spread_ln_gamma", "mean_absolute_error_ln_gamma")
    _write(
        "evidence",
        header + statistics,
        evidence_rows(data, tables),
        "Open measurements behind each main-group pair between solute and solvent",
        data,
    )


def _write_correction(data: OpenSet, correction: Correction, prototypes: IntArray) -> None:
    places = zip(DESCRIPTORS, correction.centre, correction.spread, strict=True)
    _write(
        "descriptors",
        ("descriptor", "centre", "spread"),
        ((name, f"{centre:.4f}", f"{spread:.4f}") for name, centre, spread in places),
        "Mean and spread of each descriptor of a pair over the systems of the open set",
        data,
    )
    names = [tuple(one.canonical_smiles for one in data.pairs[int(k)][:2]) for k in prototypes]
    kept = zip(names, correction.coefficients, correction.prototypes, strict=True)
    _write(
        "prototypes",
        ("solute", "solvent", "coefficient", *DESCRIPTORS),
        ((*pair, f"{b:.4f}", *(f"{z:.3f}" for z in place)) for pair, b, place in kept),
        "Systems that the correction is measured from: coefficient, and descriptors to scale",
        data,
    )


def _write_widths(data: OpenSet, fitted: Calibration) -> None:
    named = zip(FEATURES, fitted.coefficients, strict=True)
    _write(
        "scale",
        ("feature", "coefficient"),
        ((name, f"{value:.3f}") for name, value in named),
        "Coefficients of the logarithm of the half-width of the 90 % interval of ln gamma",
        data,
    )
    steps = zip(fitted.probabilities, fitted.quantiles, strict=True)
    _write(
        "quantiles",
        ("probability", "scaled_error"),
        ((f"{p:.3f}", f"{q:.3f}") for p, q in steps),
        "Out-of-fold quantiles of (measured - predicted) / half-width scale",
        data,
    )


def evidence_rows(data: OpenSet, tables: DiluteTables) -> list[tuple[object, ...]]:
    """Statistics by method and main-group pair.

    Parameters
    ----------
    data : OpenSet
    tables : DiluteTables
        Of the same rows.

    Returns
    -------
    list of tuple
        Rows of evidence.csv; pairs that no measurement contains are absent.
    """
    written: list[tuple[object, ...]] = []
    for column, method in enumerate(TABLES):
        error = np.clip(tables.ln_gamma[:, column] - data.ln_gamma, -BLOW_UP, BLOW_UP)
        rows: dict[tuple[int, int], list[int]] = defaultdict(list)
        names: dict[int, str] = {}
        mains: dict[Molecule, frozenset[int]] = {}
        for k in np.flatnonzero(np.isfinite(error)):
            for molecule in data.pairs[k][:2]:
                if molecule not in mains:
                    found = assign(molecule, method).groups
                    mains[molecule] = frozenset(one.main_number for one in found)
                    names |= {one.main_number: one.main_group for one in found}
            for pair in cross_pairs(mains[data.pairs[k][0]], mains[data.pairs[k][1]]):
                rows[pair].append(int(k))
        for (i, j), members in sorted(rows.items()):
            written.append((method, i, j, names[i], names[j], *_statistics(data, error, members)))
    return written


def _statistics(data: OpenSet, error: FloatArray, rows: list[int]) -> tuple[object, ...]:
    """Counts, median error, 1.4826 times the median absolute deviation, mean absolute error."""
    systems = {tuple(m.canonical_smiles for m in data.pairs[k][:2]) for k in rows}
    values = error[rows]
    bias = float(np.median(values))
    spread = 1.4826 * float(np.median(np.abs(values - bias)))
    return len(rows), len(systems), f"{bias:.3f}", f"{spread:.3f}", f"{np.abs(values).mean():.3f}"


def direction_correlation(data: OpenSet, scaled: FloatArray) -> tuple[float, int]:
    """Rank correlation of scaled errors over systems measured in both directions.

    Parameters
    ----------
    data : OpenSet
    scaled : FloatArray of shape (n_rows,)
        Error over half-width scale; NaN where there is none.

    Returns
    -------
    tuple of float and int
        Spearman's coefficient, and the number of systems.
    """
    by_system: dict[tuple[str, str], list[float]] = defaultdict(list)
    for (solute, solvent, _), value in zip(data.pairs, scaled, strict=True):
        if np.isfinite(value):
            by_system[solute.canonical_smiles, solvent.canonical_smiles].append(float(value))
    both = [
        (float(np.median(values)), float(np.median(by_system[b, a])))
        for (a, b), values in by_system.items()
        if a < b and (b, a) in by_system
    ]
    first, second = np.array(both).T
    return float(spearmanr(first, second).statistic), len(both)


def _write(
    name: str, header: tuple[str, ...], rows: Iterable[Sequence[object]], what: str, data: OpenSet
) -> None:
    """One table and its record."""
    path = FOLDER / f"{name}.csv"
    with path.open("w", encoding="utf-8", newline="") as file:
        writer = csv.writer(file, lineterminator="\n")
        writer.writerow(header)
        writer.writerows(rows)
    record = (
        f'[{name}]\nfile = "{name}.csv"\nwhat = "{what}"\n'
        'made_by = "python -m groups.confidence.calibration.build"\n'
        f"made_on = {datetime.datetime.now(tz=datetime.UTC).date().isoformat()}\n"
        f'units = "ln gamma, dimensionless"\n'
        f"measurements = {len(data.pairs)}\n"
        f'data = "{SOURCE}"\n'
        f'sha256 = "{hashlib.sha256(path.read_bytes()).hexdigest()}"\n'
        'licence_of_the_statistics = "Apache-2.0"\n'
    )
    (FOLDER / f"{name}.toml").write_text(record, encoding="utf-8")


if __name__ == "__main__":
    main()
