"""The calibration judged on solvents and solutes that its fit never saw."""

from dataclasses import dataclass

import numpy as np

from groups.arrays import BoolArray, FloatArray, IntArray
from groups.confidence.calibration.features import with_correction
from groups.confidence.calibration.model import Calibration
from groups.confidence.calibration.scale import (
    NOMINAL_LEVEL,
    fit_scale,
    half_width,
    interval_score,
)
from groups.confidence.calibration.training import Training

# Steps of the tabulated distribution: fine in the tails, where intervals end.
PROBABILITIES = np.array(
    [0.005, 0.01, 0.02, 0.03, 0.05, 0.07, 0.10, 0.15, 0.20, 0.25, 0.30, 0.35, 0.40, 0.45, 0.50]
)
PROBABILITIES = np.r_[PROBABILITIES, 1.0 - PROBABILITIES[-2::-1]]

LEVELS = np.array([0.10, 0.20, 0.30, 0.40, 0.50, 0.60, 0.70, 0.80, 0.90, 0.95])


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
    levels: FloatArray  # (n_levels,)
    inside: BoolArray  # (n_levels, n_rows)

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


def fit_calibration(
    rows: Training, folds: IntArray
) -> tuple[Calibration, IntArray, tuple[float, float]]:
    """Fit the correction, the width, and the quantiles of the scaled error.

    Parameters
    ----------
    rows : Training
    folds : IntArray of shape (n,)
        Folds of whole groups. Width and quantiles see only errors of groups that the correction,
        and the quantiles only those that the width, never saw: the conformal part.

    Returns
    -------
    tuple of Calibration, IntArray and tuple of float
        The calibration, with correlation 0 (that needs pairs measured in both directions); one
        row of each prototype; the ends of the interval of one width for all.
    """
    error, features = unseen_errors(rows, folds)
    scaled = error / unseen_scale(features, error, folds)
    correction, prototypes = rows.correction()
    fitted = Calibration(
        correction,
        fit_scale(features, error),
        PROBABILITIES,
        np.quantile(scaled, PROBABILITIES),
        0.0,
    )
    tail = (1.0 - NOMINAL_LEVEL) / 2.0
    low, high = np.quantile(error, [tail, 1.0 - tail])
    return fitted, prototypes, (float(low), float(high))


def unseen_errors(rows: Training, folds: IntArray) -> tuple[FloatArray, FloatArray]:
    """Errors left by a correction that never saw the row's group, and the full features.

    Parameters
    ----------
    rows : Training
    folds : IntArray of shape (n,)

    Returns
    -------
    tuple of FloatArray
        Measured minus corrected ln gamma (n,); features (n, n_features).
    """
    added, nearest = np.empty(len(folds)), np.empty(len(folds))
    for fold in np.unique(folds):
        test = folds == fold
        correction, _ = rows.take(~test).correction()
        added[test], nearest[test] = correction.at(rows.descriptors[test])
    return rows.error - added, with_correction(rows.features, added, nearest)


def unseen_scale(features: FloatArray, error: FloatArray, folds: IntArray) -> FloatArray:
    """Half-width scale of each row from a fit without its fold.

    Parameters
    ----------
    features : FloatArray of shape (n, n_features)
    error : FloatArray of shape (n,)
    folds : IntArray of shape (n,)

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
    rows: Training, folds: IntArray, inner: IntArray, levels: FloatArray = LEVELS
) -> Held:
    """Intervals of each outer fold from a calibration made wholly on the others.

    Parameters
    ----------
    rows : Training
    folds, inner : IntArray of shape (n,)
        Outer folds, and those within which width and quantiles are found.
    levels : FloatArray
        Further levels at which the coverage is wanted.

    Returns
    -------
    Held
    """
    ends, error = np.empty((4, len(folds))), np.empty(len(folds))
    inside = np.zeros((len(levels), len(folds)), dtype=np.bool_)
    for fold in np.unique(folds):
        test, train = folds == fold, folds != fold
        fitted, _, constant = fit_calibration(rows.take(train), inner[train])
        added, nearest = fitted.correction.at(rows.descriptors[test])
        error[test] = rows.error[test] - added
        features = with_correction(rows.features[test], added, nearest)
        scale = half_width(features, fitted.coefficients)
        low, high = fitted.bounds(NOMINAL_LEVEL)
        ends[0, test], ends[1, test] = low * scale, high * scale
        ends[2:, test] = np.array(constant)[:, None]
        for row, level in enumerate(levels):
            low, high = fitted.bounds(float(level))
            inside[row, test] = (error[test] >= low * scale) & (error[test] <= high * scale)
    return Held(error, ends[0], ends[1], ends[2], ends[3], levels, inside)
