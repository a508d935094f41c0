"""Errors of the weighted tables on the open set, and the features they are to be told from."""

from dataclasses import dataclass

import numpy as np

from groups.arrays import BoolArray, FloatArray
from groups.confidence.calibration.dilute import DiluteTables, dilute_tables
from groups.confidence.calibration.features import feature_matrix
from groups.confidence.calibration.open_set import OpenSet
from groups.confidence.calibration.weights import table_weights, weighted_ln_gamma


@dataclass(frozen=True, slots=True)
class Training:
    """One row for each row of the open set; `error` is measured minus predicted ln gamma."""

    tables: DiluteTables
    features: FloatArray  # (n, n_features)
    error: FloatArray  # (n,), NaN where no table gives a number

    @property
    def known(self) -> BoolArray:
        """Rows that have a number."""
        return np.isfinite(self.error)


def training(data: OpenSet) -> Training:
    """Predict every row of the open set.

    Parameters
    ----------
    data : OpenSet

    Returns
    -------
    Training
    """
    tables = dilute_tables(data.pairs)
    weights = table_weights(tables)
    error = data.ln_gamma - weighted_ln_gamma(tables, weights)
    return Training(tables, feature_matrix(tables, weights), error)
