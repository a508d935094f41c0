"""How the width of an interval is fitted: a log-linear half-width that minimises the score.

    ln h = sum_f b_f * feature_f        (h: half-width of the nominal 90 % interval of ln gamma)

b minimises the mean interval score of Winkler, 2 h + (2/alpha) max(|error| - h, 0), which is least
for the true quantiles: it fits widths directly, needs no distribution, and a gross measuring error
costs it linearly, not squared. A small ridge keeps coefficients of rare features in bounds.

Source
------
Winkler, J. Am. Stat. Assoc. 67 (1972) 187; Gneiting & Raftery, J. Am. Stat. Assoc. 102 (2007)
359, section 6.2.
"""

import numpy as np
from scipy.optimize import minimize

from groups.arrays import FloatArray

NOMINAL_LEVEL = 0.90
RIDGE = 3.0
SMOOTHING = 0.01  # ln units over which the kink of the score is rounded; far below any error
# Half-widths outside 0.02 to 10 in ln gamma are not believed, whatever the features say.
LOWEST_LN, HIGHEST_LN = np.log(0.02), np.log(10.0)


def half_width(features: FloatArray, coefficients: FloatArray) -> FloatArray:
    """The half-width scale of each row.

    Parameters
    ----------
    features : FloatArray of shape (n, n_features)
    coefficients : FloatArray of shape (n_features,)

    Returns
    -------
    FloatArray of shape (n,)
        In ln gamma, 1, positive.
    """
    scale: FloatArray = np.exp(np.clip(features @ coefficients, LOWEST_LN, HIGHEST_LN))
    return scale


def fit_scale(features: FloatArray, error: FloatArray) -> FloatArray:
    """Coefficients of the log-linear half-width.

    Parameters
    ----------
    features : FloatArray of shape (n, n_features)
        The first column is the constant.
    error : FloatArray of shape (n,)
        Measured minus predicted ln gamma, 1.

    Returns
    -------
    FloatArray of shape (n_features,)
    """
    size = np.abs(error)
    alpha = 1.0 - NOMINAL_LEVEL
    free = np.r_[0.0, np.ones(features.shape[1] - 1)]

    def loss(b: FloatArray) -> tuple[float, FloatArray]:
        h = half_width(features, b)
        z = (size - h) / SMOOTHING
        beyond = 1.0 / (1.0 + np.exp(-np.clip(z, -50.0, 50.0)))
        score = 2.0 * h + 2.0 / alpha * SMOOTHING * np.logaddexp(0.0, z)
        gradient = features.T @ ((2.0 - 2.0 / alpha * beyond) * h)
        return float(score.sum() + RIDGE * (free * b) @ b), gradient + 2.0 * RIDGE * free * b

    start = np.zeros(features.shape[1])
    start[0] = np.log(np.quantile(size, NOMINAL_LEVEL))
    found = minimize(loss, start, jac=True, method="L-BFGS-B", options={"maxiter": 300})
    return np.asarray(found.x, dtype=np.float64)


def interval_score(
    lower: FloatArray, upper: FloatArray, value: FloatArray, level: float
) -> FloatArray:
    """Winkler's score of each interval: its width, and 2/alpha times what it misses by.

    Parameters
    ----------
    lower, upper, value : FloatArray
        Of one shape.
    level : float
        Nominal coverage, between 0 and 1.

    Returns
    -------
    FloatArray
        In the unit of `value`; the smaller the better.
    """
    factor = 2.0 / (1.0 - level)
    score: FloatArray = (
        (upper - lower)
        + factor * np.maximum(lower - value, 0.0)
        + factor * np.maximum(value - upper, 0.0)
    )
    return score
