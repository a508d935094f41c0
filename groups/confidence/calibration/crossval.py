"""The calibration judged on solvents and solutes that its fit never saw."""

from dataclasses import dataclass

import numpy as np

from groups.arrays import BoolArray, FloatArray, IntArray
from groups.confidence.calibration.model import Calibration
from groups.confidence.calibration.scale import (
    NOMINAL_LEVEL,
    fit_scale,
    half_width,
    interval_score,
)

# Steps of the tabulated distribution: fine in the tails, where intervals end.
PROBABILITIES = np.array(
    [0.005, 0.01, 0.02, 0.03, 0.05, 0.07, 0.10, 0.15, 0.20, 0.25, 0.30, 0.35, 0.40, 0.45, 0.50]
)
PROBABILITIES = np.r_[PROBABILITIES, 1.0 - PROBABILITIES[-2::-1]]


@dataclass(frozen=True, slots=True)
class Held:
    """Out-of-fold intervals of every row; arrays of shape (n_rows,).

    `constant_*` are those of the interval of one width for all, fitted on the same rows.
    """

    error: FloatArray
    lower: FloatArray
    upper: FloatArray
    constant_lower: FloatArray
    constant_upper: FloatArray

    def coverage(self, rows: BoolArray | None = None) -> float:
        """Share of rows whose error lies within the interval."""
        inside = (self.error >= self.lower) & (self.error <= self.upper)
        return float(np.mean(inside if rows is None else inside[rows]))

    def score_ratio(self) -> float:
        """Mean interval score against that of the constant width."""
        own = interval_score(self.lower, self.upper, self.error, NOMINAL_LEVEL)
        flat = interval_score(self.constant_lower, self.constant_upper, self.error, NOMINAL_LEVEL)
        return float(own.mean() / flat.mean())

    def width_ratio(self) -> float:
        """Median width against that of the constant width."""
        flat = np.median(self.constant_upper - self.constant_lower)
        return float(np.median(self.upper - self.lower) / flat)

    @property
    def half_width(self) -> FloatArray:
        """Half the width of each interval, ln units."""
        return (self.upper - self.lower) / 2.0


def fit_calibration(features: FloatArray, error: FloatArray, folds: IntArray) -> Calibration:
    """Fit the width, then the quantiles of the scaled error out of fold (conformal).

    Parameters
    ----------
    features : FloatArray of shape (n, n_features)
    error : FloatArray of shape (n,)
        Measured minus predicted ln gamma, 1.
    folds : IntArray of shape (n,)
        Folds of whole groups, so that the quantiles hold for groups never seen.

    Returns
    -------
    Calibration
        Its correlation is 0: that needs pairs measured in both directions.
    """
    scaled = error / out_of_fold_scale(features, error, folds)
    return Calibration(
        fit_scale(features, error), PROBABILITIES, np.quantile(scaled, PROBABILITIES), 0.0
    )


def out_of_fold_scale(features: FloatArray, error: FloatArray, folds: IntArray) -> FloatArray:
    """Half-width scale of each row from a fit without its fold.

    Parameters
    ----------
    features, error, folds
        As for `fit_calibration`.

    Returns
    -------
    FloatArray of shape (n,)
    """
    scale = np.empty(len(error))
    for fold in np.unique(folds):
        test = folds == fold
        scale[test] = half_width(features[test], fit_scale(features[~test], error[~test]))
    return scale


def cross_validate(
    features: FloatArray, error: FloatArray, folds: IntArray, inner: IntArray
) -> Held:
    """Intervals of each outer fold from a calibration made wholly on the others.

    Parameters
    ----------
    features, error
        As for `fit_calibration`.
    folds, inner : IntArray of shape (n,)
        Outer folds, and those within which the quantiles are found.

    Returns
    -------
    Held
    """
    ends = np.empty((4, len(error)))
    tail = (1.0 - NOMINAL_LEVEL) / 2.0
    for fold in np.unique(folds):
        test, train = folds == fold, folds != fold
        fitted = fit_calibration(features[train], error[train], inner[train])
        scale = half_width(features[test], fitted.coefficients)
        low, high = fitted.bounds(NOMINAL_LEVEL)
        ends[0, test], ends[1, test] = low * scale, high * scale
        ends[2:, test] = np.quantile(error[train], [tail, 1.0 - tail])[:, None]
    return Held(error, *ends)
