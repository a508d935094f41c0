"""Errors of the weighted tables on the open set, and what they are to be told from."""

from dataclasses import dataclass

import numpy as np

from groups.arrays import BoolArray, FloatArray, IntArray
from groups.confidence.calibration.correction import Correction, fit_correction
from groups.confidence.calibration.descriptors import descriptor_matrix
from groups.confidence.calibration.dilute import DiluteTables, dilute_tables
from groups.confidence.calibration.features import feature_matrix
from groups.confidence.calibration.open_set import OpenSet
from groups.confidence.calibration.weights import table_weights, weighted_ln_gamma


@dataclass(frozen=True, slots=True)
class Training:
    """Answered rows of the open set; arrays of shape (n,) unless said otherwise.

    `error` is measured minus weighted ln gamma, before any correction. `system` numbers the
    ordered pairs of molecules, which share their descriptors at every temperature.
    """

    features: FloatArray  # (n, n_table_features)
    descriptors: FloatArray  # (n, n_descriptors)
    error: FloatArray
    system: IntArray

    def take(self, rows: BoolArray) -> "Training":
        """A part of the rows."""
        return Training(
            self.features[rows], self.descriptors[rows], self.error[rows], self.system[rows]
        )

    def correction(self) -> tuple[Correction, IntArray]:
        """The correction learned from these rows, and one row of each prototype."""
        _, first, of_row = np.unique(self.system, return_index=True, return_inverse=True)
        order = np.argsort(of_row, kind="stable")
        number = np.bincount(of_row)
        each = np.split(self.error[order], np.cumsum(number)[:-1])
        median = np.array([float(np.median(errors)) for errors in each])
        fitted, kept = fit_correction(self.descriptors[first], median, number)
        return fitted, first[kept]


def training(data: OpenSet) -> tuple[Training, BoolArray, DiluteTables]:
    """Predict every row of the open set.

    Parameters
    ----------
    data : OpenSet

    Returns
    -------
    tuple of Training, BoolArray and DiluteTables
        The answered rows; which rows of the set they are; the tables' answers to all rows.
    """
    tables = dilute_tables(data.pairs)
    weights = table_weights(tables)
    error = data.ln_gamma - weighted_ln_gamma(tables, weights)
    features = feature_matrix(tables, weights)
    descriptors = descriptor_matrix(tables, weights, features)
    names = [f"{u.canonical_smiles}>{v.canonical_smiles}" for u, v, _ in data.pairs]
    system = np.unique(names, return_inverse=True)[1].astype(np.int64)
    known: BoolArray = np.isfinite(error)
    return Training(features, descriptors, error, system).take(known), known, tables
