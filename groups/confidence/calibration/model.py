"""The shipped calibration: correction, coefficients of the width, quantiles of the error."""

import csv
from collections.abc import Mapping
from dataclasses import dataclass
from functools import cache
from importlib.resources import files

import numpy as np

from groups.arrays import FloatArray
from groups.confidence.calibration.correction import Correction
from groups.confidence.calibration.descriptors import DESCRIPTORS
from groups.confidence.calibration.features import FEATURES
from groups.errors import DataError, OutOfRangeError

PACKAGE = "groups.confidence.calibration"


@dataclass(frozen=True, slots=True)
class Calibration:
    """Everything that turns features into intervals.

    `quantiles` are those of error / half-width scale at `probabilities`, measured out of fold:
    that is the conformal part. `correlation` ties the errors of both directions of one binary.
    """

    correction: Correction
    coefficients: FloatArray  # (n_features,)
    probabilities: FloatArray  # (n_quantiles,), rising
    quantiles: FloatArray  # (n_quantiles,), rising
    correlation: float

    def scaled_quantile(self, probability: FloatArray | float) -> FloatArray:
        """Quantile of the scaled error, linear between the tabulated ones.

        Parameters
        ----------
        probability : float or FloatArray
            Between 0 and 1; beyond the table's ends its end values hold.

        Returns
        -------
        FloatArray
            Multiples of the half-width scale.
        """
        return np.asarray(np.interp(probability, self.probabilities, self.quantiles))

    def bounds(self, level: float) -> tuple[float, float]:
        """Scaled lower and upper end of the central interval of a level.

        Parameters
        ----------
        level : float
            Probability that the interval holds the value, between 0.01 and 0.99.

        Returns
        -------
        tuple of float
            Multiples of the half-width scale, the lower first.

        Raises
        ------
        OutOfRangeError
            If the level lies outside that range: the data tell nothing about it.
        """
        if not 0.01 <= level <= 0.99:
            raise OutOfRangeError("level", level, 0.01, 0.99)
        tail = (1.0 - level) / 2.0
        return float(self.scaled_quantile(tail)), float(self.scaled_quantile(1.0 - tail))


@cache
def calibration() -> Calibration:
    """The calibration that the build command wrote.

    Returns
    -------
    Calibration

    Raises
    ------
    DataError
        If a file is absent or names other features than the code knows.
    """
    scale = {row["feature"]: float(row["coefficient"]) for row in read_rows("scale.csv")}
    if tuple(scale) != FEATURES:
        raise DataError("scale.csv and groups.confidence.calibration.features do not fit together.")
    steps = read_rows("quantiles.csv")
    return Calibration(
        _correction(),
        np.array([scale[name] for name in FEATURES]),
        np.array([float(row["probability"]) for row in steps]),
        np.array([float(row["scaled_error"]) for row in steps]),
        float(read_rows("correlation.csv")[0]["correlation"]),
    )


def _correction() -> Correction:
    """Prototypes with their descriptors, to scale."""
    spread = {row["descriptor"]: row for row in read_rows("descriptors.csv")}
    prototypes = read_rows("prototypes.csv")
    if tuple(spread) != DESCRIPTORS:
        raise DataError("descriptors.csv does not fit groups.confidence.calibration.descriptors.")
    return Correction(
        np.array([float(row["centre"]) for row in spread.values()]),
        np.array([float(row["spread"]) for row in spread.values()]),
        np.array([[float(row[name]) for name in DESCRIPTORS] for row in prototypes]),
        np.array([float(row["coefficient"]) for row in prototypes]),
    )


def read_rows(name: str) -> list[Mapping[str, str]]:
    """Rows of one data file beside this module.

    Parameters
    ----------
    name : str
        Name of the file.

    Returns
    -------
    list of mapping of str to str

    Raises
    ------
    DataError
        If the file cannot be read.
    """
    try:
        text = files(PACKAGE).joinpath(name).read_text(encoding="utf-8")
    except OSError as error:
        raise DataError(f"{name} cannot be read: {error}") from error
    return list(csv.DictReader(text.splitlines()))
